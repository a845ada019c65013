"""Electrons of a material: densities of electrons that the X-ray trade knows by heart."""

from __future__ import annotations

import math

import pytest

from pulseprop.causality.bounds_strength import ELEMENTS, plasma_frequency, strength_of
from pulseprop.constants import ELECTRON_CHARGE, ELECTRON_MASS, VACUUM_PERMITTIVITY
from pulseprop.errors import InputError


def electrons_per_cubic_angstrom(density, composition):
    unit = ELECTRON_CHARGE**2 / (VACUUM_PERMITTIVITY * ELECTRON_MASS)
    return plasma_frequency(density, composition) ** 2 / unit * 1e-30


@pytest.mark.parametrize(
    ("composition", "density", "expected"),
    [("H2O", 997.0, 0.333), ("Si", 2329.0, 0.699), ("Au", 19300.0, 4.66), ("SiO2", 2200.0, 0.661)],
)
def test_electron_densities(composition, density, expected):
    """Per cubic angstrom, as small-angle scattering and reflectometry tabulate them (from memory)."""
    assert electrons_per_cubic_angstrom(density, composition) == pytest.approx(expected, rel=3e-3)


def test_brackets_and_decimal_counts():
    assert plasma_frequency(3200, "Ca5(PO4)3F") == pytest.approx(plasma_frequency(3200, "Ca5P3O12F"))
    assert plasma_frequency(3200, "Al2(Si(OH)2)3") == pytest.approx(plasma_frequency(3200, "Al2Si3O6H6"))
    assert plasma_frequency(5300, "Al0.3Ga0.7As") == pytest.approx(plasma_frequency(5300, "Al3Ga7As10"))


def test_isotopes_share_their_electrons():
    """D2O of the same number density as H2O is heavier by 20.028 / 18.015."""
    heavy = plasma_frequency(1000 * 20.027 / 18.015, "D2O")
    assert heavy == pytest.approx(plasma_frequency(1000, "H2O"), rel=1e-4)


def test_weights_rise_with_the_number_of_electrons():
    """But for the four pairs of the periodic table known for it, and the heaviest ones."""
    weights = [weight for symbol, (_, weight) in ELEMENTS.items() if symbol != "D"]
    falls = [z for z in range(1, 92) if weights[z] < weights[z - 1]]
    assert len(weights) == 92
    # Co-Ni, Te-I, Th-Pa; Ar-K; by mass number also Po-At and the like do not fall
    assert [z + 1 for z in falls] == [19, 28, 53, 91]


def test_strength_is_that_of_the_sum_rule():
    """int k ds = pi wp^2 / 2."""
    wp = plasma_frequency(2203, "SiO2")
    assert strength_of(2203, "SiO2") == pytest.approx(math.pi * wp**2 / 2)


@pytest.mark.parametrize("composition", ["", "sio2", "Si-O2", "Si(O2", "SiO)2", "(2Si)", "()", "Si O2"])
def test_what_is_no_formula_is_refused(composition):
    with pytest.raises(InputError, match="chemical formula"):
        plasma_frequency(2200, composition)


def test_an_unknown_element_is_named():
    with pytest.raises(InputError, match="Xx"):
        plasma_frequency(2200, "Xx2O")


@pytest.mark.parametrize("density", [0.0, -1.0, math.nan, math.inf])
def test_a_density_must_be_above_zero(density):
    with pytest.raises(InputError, match="density"):
        plasma_frequency(density, "SiO2")
