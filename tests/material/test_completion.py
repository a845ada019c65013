"""Printed formulas continued causally: what moves in range, what absorbs outside, symmetry and passivity."""

from __future__ import annotations

from itertools import pairwise

import mpmath as mp
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.errors import NumericalLimit
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.completion import ALLOWED_SHIFT
from pulseprop.material.formulas import (
    MICROMETRE_OMEGA,
    Formula,
    Pole,
    Power,
    gas_term,
    pole_term,
    sellmeier_term,
)
from pulseprop.material.response import Band, View

QUIET = settings(max_examples=25, deadline=None, derandomize=True)
NAMES = ["fused silica", "SF10", "sapphire", "silicon", "air", "argon", "YAG"]


def at(nm):
    return MICROMETRE_OMEGA / (np.asarray(nm) / 1000)


@pytest.mark.parametrize("name", NAMES)
def test_in_range_the_completion_is_the_formula_to_1e_8_and_transparent(name):
    medium = catalogue_medium(name)
    band = medium.band
    omega = np.linspace(band.low, min(band.high, 4 * band.low + 1e16), 301)[1:-1]
    completed = medium.response.series(omega, 1, View.COMPLETED)[0]
    printed = medium.response.series(omega, 1, View.PRINTED)[0]
    # Of chi = n^2 - 1 or of n - 1: either way at most 2 n times the shift of n.
    assert np.abs(completed - printed).max() <= 2.01 * ALLOWED_SHIFT * max(1.0, np.sqrt(1 + printed.max()))
    assert np.all(completed.imag == 0)


@QUIET
@given(st.sampled_from(NAMES), st.floats(-3, 3), st.floats(0, 1.5))
def test_completions_are_passive_above_the_axis(name, exponent, angle):
    omega = 2e15 * 10**exponent * np.exp(1j * angle)
    chi = catalogue_medium(name).response.series(np.array([omega]), 1, View.COMPLETED)[0, 0]
    assert chi.imag >= -1e-15 * abs(chi)


@QUIET
@given(st.sampled_from(NAMES), st.floats(-2, 2), st.floats(0, 1.5))
def test_completions_answer_with_a_real_field(name, exponent, angle):
    omega = complex(2e15 * 10**exponent * np.exp(1j * angle))
    places = np.array([omega, -omega.conjugate()])
    here, mirrored = catalogue_medium(name).response.series(places, 1, View.COMPLETED)[0]
    assert abs(mirrored - here.conjugate()) <= 1e-11 * abs(here)


@pytest.mark.parametrize("view", [View.COMPLETED, View.AXIS])
def test_the_field_is_real_in_the_middle_of_an_absorption_band_too(view):
    silica = catalogue_medium("fused silica").response
    middle = MICROMETRE_OMEGA * np.sqrt(silica.completion.centre.max())
    omega = np.array([middle, middle * (1 + 1e-9)])
    here = silica.series(omega, 2, view)
    mirrored = silica.series(-omega, 2, view)
    assert here[0].imag.min() > 1
    assert mirrored[0] == pytest.approx(here[0].conj(), rel=1e-12)
    assert mirrored[1] == pytest.approx(-here[1].conj(), rel=1e-12)
    above = omega * (1 + 1e-9j)
    assert silica.series(-above.conj(), 1, View.COMPLETED) == pytest.approx(
        silica.series(above, 1, View.COMPLETED).conj(), rel=1e-11
    )


@pytest.mark.parametrize("name", ["fused silica", "argon"])
def test_kramers_kronig_of_the_completion(name):
    """Its absorption alone, integrated in x = omega^2, gives back its real part up to the offset."""
    formula = catalogue_medium(name).response
    completion = formula.completion
    x = np.array([0.8])
    found = completion.series(x[None])[0, 0] - completion.offset
    nodes, weights = np.polynomial.legendre.leggauss(30)
    total = 0.0
    for centre, knot in sorted(set(zip(completion.centre, completion.knot, strict=True))):
        edges = centre + knot * np.arange(-2, 3)
        for a, b in pairwise(edges):
            v = (a + b) / 2 + (b - a) / 2 * nodes
            mine = [
                strength / width * _spline((v - middle) / width)
                for strength, middle, width in zip(
                    completion.strength, completion.centre, completion.knot, strict=True
                )
                if middle == centre and width == knot
            ]
            total += np.sum(weights * (b - a) / 2 * sum(mine) / (v - x))
    assert found.real == pytest.approx(total, rel=1e-12)


def _spline(u):
    size = np.abs(u)
    return np.where(size < 1, 2 / 3 - size**2 + size**3 / 2, np.maximum(2 - size, 0) ** 3 / 6)


def test_the_view_of_the_axis_joins_formula_and_completion():
    silica = catalogue_medium("fused silica").response
    inside, outside = at(800.0), at(90.0)
    seen = silica.series(np.array([inside, outside]), 2, View.AXIS)
    assert seen[:, 0] == pytest.approx(silica.series(np.array([inside]), 2, View.PRINTED)[:, 0], rel=1e-15)
    assert seen[:, 1] == pytest.approx(silica.series(np.array([outside]), 2, View.COMPLETED)[:, 0], rel=1e-15)


def test_the_slope_of_a_completion():
    silica = catalogue_medium("fused silica").response
    omega, step = at(700.0) * (1 + 0.2j), at(700.0) * 1e-3
    series = silica.series(np.array([omega]), 2, View.COMPLETED)[:, 0]
    ring = omega + step * np.exp(2j * np.pi * np.arange(8) / 8)
    values = silica.series(ring, 1, View.COMPLETED)[0]
    slope = np.sum(values * np.exp(-2j * np.pi * np.arange(8) / 8)) / 8 / step
    assert series[1] == pytest.approx(slope, rel=1e-10)


BAND = Band(at(2000.0), at(400.0))
KINDS = {
    "sellmeier": (
        Formula(band=BAND, offset=0.1, poles=(sellmeier_term(1.2, 0.01), sellmeier_term(0.9, 100.0))),
        lambda L: mp.mpf(0.1) + 1.2 * L**2 / (L**2 - 0.01) + 0.9 * L**2 / (L**2 - 100),
    ),
    "gas": (
        Formula(band=BAND, of="refraction", poles=(gas_term(0.05, 230.0), gas_term(0.002, 57.0))),
        lambda L: (mp.mpf(1) + 0.05 / (230 - L**-2) + 0.002 / (57 - L**-2)) ** 2 - 1,
    ),
    "powers": (
        Formula(band=BAND, offset=1.2, powers=(Power(0.01, 1), Power(-0.004, -1), Power(1e-4, 2))),
        lambda L: mp.mpf(1.2) + 0.01 * L**-2 - 0.004 * L**2 + 1e-4 * L**-4,
    ),
    "index powers": (
        Formula(band=BAND, of="refraction", offset=0.5, powers=(Power(0.004, 1),)),
        lambda L: (1.5 + 0.004 * mp.mpf(L) ** -2) ** 2 - 1,
    ),
}


@pytest.mark.parametrize("kind", sorted(KINDS))
@pytest.mark.parametrize("nm", [450.0, 1500.0])
def test_taylor_series_of_each_kind(kind, nm):
    """Orders to the fourth against the formula as a printed function of wavelength, in 40 digits."""
    formula, printed = KINDS[kind]
    omega = float(at(nm))
    with mp.workdps(40):
        unit = mp.mpf(MICROMETRE_OMEGA)
        expected = mp.taylor(lambda t: printed(unit / (omega * (1 + t))), 0, 4)
    found = formula.series(np.array([omega]), 5, View.PRINTED)[:, 0]
    for m, value in enumerate(expected):
        assert found[m] * omega**m == pytest.approx(float(value), rel=1e-12, abs=1e-14)


def test_a_term_over_wavelength_squared_minus_resonance_is_a_pole_with_an_offset():
    pole, offset = pole_term(0.012, 0.02)
    length = 0.7
    value = pole.weight * pole.place / (pole.place - length**-2) + offset
    assert value == pytest.approx(0.012 / (length**2 - 0.02), rel=1e-13)


def test_a_negative_strength_is_fitted_and_its_shift_reported():
    formula = Formula(band=BAND, offset=1.2, poles=(Pole(-0.001, 200.0), Pole(0.5, 120.0)))
    x = np.linspace(*formula.x_range, 77)[None]
    moved = np.abs(formula.completion.series(x)[0] - formula.printed(x)[0]).max()
    assert moved <= 1.05 * formula.completion.shift
    assert np.all(formula.completion.strength > 0)


def test_a_fit_that_does_not_settle_is_told(monkeypatch):
    """The bands of a printed power of the wavelength are fitted; the solver gives up by RuntimeError."""

    def tired(*given, **more):
        raise RuntimeError("Maximum number of iterations reached.")

    monkeypatch.setattr("scipy.optimize.nnls", tired)
    formula = Formula(band=Band(1e15, 4e15), offset=1.2, powers=(Power(-0.01, 1),))
    with pytest.raises(NumericalLimit, match="causal completion") as caught:
        formula.completion  # noqa: B018
    assert "iterations" in str(caught.value)
