"""Lines, relaxations, carriers: Taylor series in 40 digits, limits, symmetry, passivity, Kramers-Kronig."""

from __future__ import annotations

from itertools import pairwise

import mpmath as mp
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.material.lines import Carriers, LorentzLine, Relaxation, VoigtLine
from pulseprop.material.response import View

QUIET = settings(max_examples=25, deadline=None, derandomize=True)

# In rad/fs (a rescaled axis changes no formula): a broad oscillator, a narrow line, and carriers.
BROAD = LorentzLine(strength=20.0, centre=4.0, width=0.56)
NARROW = LorentzLine(strength=1e-4, centre=2.35, width=1e-3)
VOIGT = VoigtLine(strength=1e-4, centre=2.35, width=1e-3, doppler_width=4e-3)
GAUSSIAN = VoigtLine(strength=1e-4, centre=2.35, width=0.0, doppler_width=4e-3)
DEBYE = Relaxation(static=73.16, time=8.27)
DRUDE = Carriers(plasma_frequency=9.0, rate=0.1)
ALL = {"broad": BROAD, "narrow": NARROW, "voigt": VOIGT, "gaussian": GAUSSIAN, "debye": DEBYE, "drude": DRUDE}

FWHM = 2 * mp.sqrt(2 * mp.log(2))


def lorentz(w, line):
    return line.strength / (mp.mpf(line.centre) ** 2 - w**2 - 1j * mp.mpf(line.width) * w)


def voigt(w, line):
    """The Lorentz pole pair averaged over a Gaussian of poles: two plasma dispersion functions."""
    pole = mp.sqrt(mp.mpf(line.centre) ** 2 - mp.mpf(line.width) ** 2 / 4)
    scale = mp.mpf(line.doppler_width) / FWHM * mp.sqrt(2)

    def faddeeva(z):
        return mp.exp(-z * z) * mp.erfc(-1j * z)

    z = w + mp.mpf(line.width) * 0.5j
    pair = faddeeva((z - pole) / scale) - faddeeva((z + pole) / scale)
    return 1j * mp.sqrt(mp.pi) * line.strength / (2 * pole * scale) * pair


FORMULAS = {
    "broad": lorentz,
    "narrow": lorentz,
    "voigt": voigt,
    "gaussian": voigt,
    "debye": lambda w, line: line.static / (1 - 1j * mp.mpf(line.time) * w),
    "drude": lambda w, line: -(mp.mpf(line.plasma_frequency) ** 2) / (w**2 + 1j * mp.mpf(line.rate) * w),
}
# Near a line w0^2 - w^2 loses w0/width in double precision; so do the steps of Voigt's recurrence.
CASES = [
    ("broad", 1.0, [1e-13] * 5),
    ("broad", 4.1, [1e-13] * 5),
    ("broad", 1.0 + 0.3j, [1e-13] * 5),
    ("narrow", 2.3502, [1e-12] * 5),
    ("narrow", 2.5, [1e-12] * 5),
    ("voigt", 2.35, [1e-12] * 5),
    ("voigt", 2.353, [1e-11] * 5),
    ("voigt", 2.365, [1e-11, 1e-11, 1e-10, 3e-9, 5e-8]),
    ("voigt", 2.45, [1e-11] * 5),
    ("voigt", 1.2, [1e-11] * 5),
    ("gaussian", 2.3512, [1e-11] * 5),
    ("gaussian", 2.5, [1e-11] * 5),
    ("debye", 0.1, [1e-13] * 5),
    ("drude", 1.0, [1e-13] * 5),
]


@pytest.mark.parametrize(("name", "omega", "tolerances"), CASES)
def test_taylor_series_to_fourth_order(name, omega, tolerances):
    with mp.workdps(40):
        expected = mp.taylor(lambda w: FORMULAS[name](w, ALL[name]), mp.mpmathify(omega), 4)
    found = ALL[name].series(np.array([omega]), 5, View.PRINTED)[:, 0]
    for m, (value, tolerance) in enumerate(zip(expected, tolerances, strict=True)):
        assert abs(found[m] - complex(value)) <= tolerance * abs(complex(value)), m


def test_voigt_becomes_lorentz_as_the_doppler_width_vanishes():
    """The first correction is s^2 chi''/2: for s a thousandth of the width, some 1e-6 of the peak."""
    omega = np.linspace(2.345, 2.355, 41)
    thin = VoigtLine(strength=1e-4, centre=2.35, width=1e-3, doppler_width=1e-6)
    exact = NARROW.series(omega, 1)[0]
    assert np.abs(thin.series(omega, 1)[0] - exact).max() < 1e-5 * np.abs(exact).max()


def test_voigt_becomes_gaussian_as_the_homogeneous_width_vanishes():
    """chi2 = sqrt(pi/8) S/(W s) exp(-(w-W)^2/(2 s^2)); the correction goes as width over Doppler width."""
    omega = np.linspace(2.342, 2.358, 41)
    sigma = 4e-3 / float(FWHM)
    expected = np.sqrt(np.pi / 8) * 1e-4 / (2.35 * sigma) * np.exp(-0.5 * ((omega - 2.35) / sigma) ** 2)
    assert np.abs(GAUSSIAN.series(omega, 1)[0].imag - expected).max() < 1e-12 * expected.max()
    nearly = VoigtLine(strength=1e-4, centre=2.35, width=4e-9, doppler_width=4e-3)
    assert np.abs(nearly.series(omega, 1)[0].imag - expected).max() < 3e-6 * expected.max()


def test_gaussian_lines_are_half_as_high_half_a_width_away():
    there = GAUSSIAN.series(np.array([2.35, 2.35 - 2e-3, 2.35 + 2e-3]), 1)[0].imag
    assert there[1:] / there[0] == pytest.approx([0.5, 0.5], rel=1e-12)


upper = st.complex_numbers(min_magnitude=1e-2, max_magnitude=30, allow_nan=False, allow_infinity=False)


@QUIET
@given(st.sampled_from(sorted(ALL)), upper)
def test_the_field_it_answers_with_is_real(name, omega):
    omega = complex(omega.real, abs(omega.imag) + 1e-6)
    here, mirrored = ALL[name].series(np.array([omega, -omega.conjugate()]), 1)[0]
    assert mirrored == pytest.approx(here.conjugate(), rel=1e-9)


@QUIET
@given(st.sampled_from(sorted(ALL)), st.floats(1e-3, 30), st.floats(0, 30))
def test_passive_in_the_upper_right_quadrant(name, real, imaginary):
    chi = ALL[name].series(np.array([complex(real, imaginary)]), 1)[0, 0]
    assert chi.imag >= -1e-15 * abs(chi)


@pytest.mark.parametrize(
    ("name", "omega"), [("broad", 1.0), ("broad", 5.0), ("voigt", 2.351), ("debye", 0.1)]
)
def test_kramers_kronig_by_quadrature(name, omega):
    """chi1(w) = (2/pi) P int x chi2/(x^2 - w^2) dx, with the value at w taken out of the integrand."""
    response = ALL[name]

    def absorbed(x):
        return float(response.series(np.array([x]), 1)[0, 0].imag)

    here = omega * absorbed(omega)

    def regular(x):
        return (x * absorbed(x) - here) / (x * x - omega * omega)

    features = {"broad": (4.0, 0.56), "voigt": (2.35, 4e-3), "debye": (0.12, 0.12)}[name]
    centre, width = features
    offsets = [width * 3.0**k for k in range(-2, 12)]
    close = [centre + side * d for d in offsets for side in (-1, 1) if centre + side * d > 1e-9]
    edges = sorted({0.0, omega, *close, *np.geomspace(1e-9, 1e10, 161)})
    nodes, weights = np.polynomial.legendre.leggauss(40)
    total = sum(
        (b - a)
        / 2
        * sum(w * regular((a + b) / 2 + (b - a) / 2 * x) for x, w in zip(nodes, weights, strict=True))
        for a, b in pairwise(edges)
    )
    # P int_0^X dx/(x^2 - w^2) = ln|(X - w)/(X + w)| / 2w.
    top = edges[-1]
    total += here * np.log((top - omega) / (top + omega)) / (2 * omega)
    real = response.series(np.array([omega]), 1)[0, 0].real
    assert 2 / np.pi * total == pytest.approx(real, rel=1e-9)


@pytest.mark.parametrize(("response", "memory"), [(BROAD, 2 / 0.56), (DEBYE, 8.27), (DRUDE, 10.0)])
def test_memory_is_the_time_the_field_rings(response, memory):
    assert response.memory == pytest.approx(memory, rel=1e-15)


def test_strength_scales_chi():
    omega = np.array([2.351])
    for line in (NARROW, VOIGT):
        assert line.with_strength(2e-4).series(omega, 3) == pytest.approx(
            2 * line.series(omega, 3), rel=1e-14
        )
