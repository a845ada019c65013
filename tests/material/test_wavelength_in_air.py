"""Wavelengths stated in air: P. E. Ciddor, Appl. Opt. 35, 1566 (1996)."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.material.wavelength_in_air import omega_of_air_wavelength, omegas_of_air_wavelengths

TWO_PI_C = 2 * np.pi * 299792458.0


def test_vacuum_wavelength_is_longer_by_the_index_of_air():
    """n - 1 = 275.05e-6 at 800 nm (the published row): 0.2200 nm. About 0.215 nm at 780 nm."""
    vacuum = TWO_PI_C / omega_of_air_wavelength(TWO_PI_C / 800e-9)
    assert vacuum - 800e-9 == pytest.approx(0.2200e-9, abs=1e-13)
    assert TWO_PI_C / omega_of_air_wavelength(TWO_PI_C / 780e-9) - 780e-9 == pytest.approx(
        0.2146e-9, abs=2e-13
    )


def test_many_at_once_are_the_same_as_one_by_one():
    places = TWO_PI_C / np.array([400e-9, 633e-9, 1550e-9])
    one_by_one = [omega_of_air_wavelength(place) for place in places]
    assert omegas_of_air_wavelengths(places) == pytest.approx(one_by_one, rel=1e-15)


def test_outside_the_formula_is_refused():
    with pytest.raises(InputError, match=r"1690 nm.*vacuum"):
        omega_of_air_wavelength(TWO_PI_C / 3e-6)
