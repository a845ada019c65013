"""Extreme materials against known brackets, their own derivatives, and the proven bounds."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.causality.bounds import bounds
from pulseprop.causality.extreme_materials import extreme_materials
from pulseprop.causality.passive_data import PassiveData
from pulseprop.errors import NumericalLimit

LIGHT = 299792458.0
OMEGA = 2 * np.pi * LIGHT / 800e-9
AT = np.linspace(0.85, 1.15, 257) * OMEGA


def silica(wavelength):
    """Index by I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965); um."""
    square = wavelength**2
    terms = ((0.6961663, 0.0684043), (0.4079426, 0.1162414), (0.8974794, 9.896161))
    return np.sqrt(1 + sum(strength * square / (square - place**2) for strength, place in terms))


def rows(error: float) -> PassiveData:
    wavelength = np.linspace(1.6, 0.4, 61)
    return PassiveData(
        omega=2e6 * np.pi * LIGHT / wavelength,
        index=silica(wavelength),
        index_error=np.full(61, error),
    )


def derivative(one, order: int) -> float:
    """Of omega n / c at the centre, from a polynomial through the index that was returned."""
    reach = AT[-1] - OMEGA
    fitted = np.polynomial.Chebyshev.fit((AT - OMEGA) / reach, AT * one.index / LIGHT, 16, domain=[-1, 1])
    return float(fitted.deriv(order)(0.0)) / reach**order


# GVD of fused silica at 800 nm in fs^2/mm, from rows of its formula held to so much: own computation with
# another linear programme.
BRACKETS = {1e-4: (33.9, 38.0), 1e-5: (35.77, 36.59), 1e-6: (36.11, 36.21)}


@pytest.mark.parametrize("error", BRACKETS)
def test_the_ends_of_the_brackets_have_materials(error):
    lowest, highest, *_ = extreme_materials(rows(error), OMEGA, AT)
    low, high = BRACKETS[error]
    width = high - low
    assert lowest.value * 1e27 == pytest.approx(low, abs=0.06 * width)
    assert highest.value * 1e27 == pytest.approx(high, abs=0.06 * width)


@pytest.mark.parametrize("error", [1e-3, 1e-5])
def test_each_is_one_of_the_materials(error):
    data = rows(error)
    inside = data.omega[(data.omega > AT[0]) & (data.omega < AT[-1])]
    proven = bounds(data, np.array([OMEGA]))[0]
    for one in extreme_materials(data, OMEGA, AT):
        order = {"gvd": 2, "tod": 3}[one.quantity]
        assert derivative(one, order) == pytest.approx(one.value, rel=2e-3)
        low, high = getattr(proven, one.quantity)
        # the proof also uses chi, which makes the bounds up to 5 % narrower than the materials in k reach
        spare = 0.06 * (high - low)
        assert one.value == pytest.approx(low if one.end == "lowest" else high, abs=spare)
        missed = np.interp(inside, AT, one.index) - silica(2e6 * np.pi * LIGHT / inside)
        assert np.max(np.abs(missed)) <= 1.03 * error + 1e-7
        assert np.all(one.k == 0)


def test_near_the_end_of_the_rows_nothing_is_told():
    with pytest.raises(NumericalLimit, match="do not limit"):
        extreme_materials(rows(1e-4), 2 * np.pi * LIGHT / 405e-9, AT)
