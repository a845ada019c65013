"""Mixtures and density: limits, symmetry, passivity, and the equations they solve."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.composition import (
    Absolute,
    Bruggeman,
    LorentzLorenz,
    MaxwellGarnett,
    Scaled,
)
from pulseprop.material.lines import Carriers, LorentzLine, VoigtLine
from pulseprop.material.response import Constant, View

QUIET = settings(max_examples=25, deadline=None, derandomize=True)

GLASS = LorentzLine(strength=20.0, centre=10.0, width=0.3)
DYE = VoigtLine(strength=0.05, centre=2.4, width=0.05, doppler_width=0.1)
METAL = Carriers(plasma_frequency=9.0, rate=0.1)
PARTS = {"glass": GLASS, "dye": DYE, "metal": METAL, "vacuum": Constant(0.0)}
PLACES = np.array([0.3, 1.7, 2.41, 3.5 + 0.4j, 9.9, 12.0])


def mixtures(one, two, share):
    return {
        "lorentz-lorenz": LorentzLorenz(((one, share), (two, 1 - share))),
        "maxwell garnett": MaxwellGarnett(two, one, share),
        "bruggeman": Bruggeman(one, two, share),
    }


KINDS = sorted(mixtures(GLASS, DYE, 0.5))


def chi_of(response, omega=PLACES, count=1):
    return response.series(omega, count, View.PRINTED)


@pytest.mark.parametrize("kind", KINDS)
def test_a_mixture_of_one_is_that_one(kind):
    rounding = 1e-12 * np.abs(chi_of(METAL, count=5)).max()
    for share, expected in ((1.0, GLASS), (0.0, METAL)):
        found = chi_of(mixtures(GLASS, METAL, share)[kind], count=5)
        assert np.abs(found - chi_of(expected, count=5)).max() < rounding


@pytest.mark.parametrize("kind", KINDS)
def test_a_mixture_of_equals_is_the_same(kind):
    assert chi_of(mixtures(GLASS, GLASS, 0.3)[kind], count=5) == pytest.approx(
        chi_of(GLASS, count=5), rel=1e-10
    )


def test_lorentz_lorenz_adds_polarisabilities():
    """(eps - 1)/(eps + 2) by hand for chi = 1 and 4: a third of 1/4 and two thirds of 4/7."""
    chi = chi_of(LorentzLorenz(((Constant(1.0), 1 / 3), (Constant(4.0), 2 / 3))))[0, 0]
    total = (1 / 4) / 3 + (4 / 7) * 2 / 3
    assert chi == pytest.approx(3 * total / (1 - total), rel=1e-14)


def test_maxwell_garnett_of_few_spheres_is_a_gas_of_dipoles():
    """eps = h (1 + 3 f (i - h)/(i + 2 h)) to first order in f."""
    host, inclusion = 1 + chi_of(GLASS)[0], 1 + chi_of(METAL)[0]
    f = 1e-6
    dilute = 3 * f * host * (inclusion - host) / (inclusion + 2 * host)
    found = chi_of(MaxwellGarnett(GLASS, METAL, f))[0] - chi_of(GLASS)[0]
    assert found == pytest.approx(dilute, rel=1e-4)


@QUIET
@given(
    st.floats(0.01, 0.99),
    st.sampled_from(["glass", "dye", "metal"]),
    st.sampled_from(["glass", "dye", "vacuum"]),
)
def test_bruggeman_solves_its_equation_and_takes_no_sides(share, one, two):
    first, second = PARTS[one], PARTS[two]
    eps = 1 + chi_of(Bruggeman(first, second, share))[0]
    a, b = 1 + chi_of(first)[0], 1 + chi_of(second)[0]
    rest = share * (a - eps) / (a + 2 * eps) + (1 - share) * (b - eps) / (b + 2 * eps)
    assert np.abs(rest).max() < 1e-9
    assert eps == pytest.approx(1 + chi_of(Bruggeman(second, first, 1 - share))[0], rel=1e-9)


def test_bruggeman_of_a_lossless_metal_conducts_or_absorbs():
    """eps -5 and 1, half and half: 2 e^2 + 2 e + 5 = 0, e = -1/2 + (3/2) i, the root of a passive medium."""
    assert 1 + chi_of(Bruggeman(Constant(-6.0), Constant(0.0), 0.5))[0, 0] == pytest.approx(
        -0.5 + 1.5j, rel=1e-12
    )


@QUIET
@given(
    st.sampled_from(KINDS),
    st.floats(0, 1),
    st.floats(0.01, 20),
    st.floats(0, 20),
    st.sampled_from(["metal", "glass"]),
)
def test_mixtures_of_passive_media_are_passive(kind, share, real, imaginary, other):
    chi = chi_of(mixtures(DYE, PARTS[other], share)[kind], np.array([complex(real, imaginary)]))[0, 0]
    assert chi.imag >= -1e-13 * abs(chi)


@QUIET
@given(
    st.sampled_from(KINDS),
    st.floats(0, 1),
    st.floats(0.01, 20),
    st.floats(0, 5),
    st.sampled_from(["metal", "glass"]),
)
def test_mixtures_answer_with_a_real_field(kind, share, real, imaginary, other):
    omega = complex(real, imaginary)
    here, mirrored = chi_of(mixtures(DYE, PARTS[other], share)[kind], np.array([omega, -omega.conjugate()]))[
        0
    ]
    assert abs(mirrored - here.conjugate()) <= 1e-9 * abs(here)


@pytest.mark.parametrize("kind", KINDS)
def test_taylor_series_of_mixtures(kind):
    """Against the same mixture nearby: f(w0 + h) = sum c_m h^m, with h a tenth of the narrowest feature."""
    mixture = mixtures(DYE, GLASS, 0.3)[kind]
    step = 0.004
    series = chi_of(mixture, np.array([2.0]), 9)[:, 0]
    ahead = chi_of(mixture, np.array([2.0 + step]))[0, 0]
    assert np.polyval(series[::-1], step) == pytest.approx(ahead, rel=1e-13)


@QUIET
@given(st.floats(0.01, 40), st.floats(0.01, 40))
def test_density_scales_once_and_again(first, second):
    gas = Constant(5e-4)
    twice = chi_of(Scaled(Scaled(gas, first), second))[0, 0]
    assert twice == pytest.approx(chi_of(Scaled(gas, first * second))[0, 0], rel=1e-12)
    # A dilute gas: n - 1 in proportion to density, to a few times chi.
    assert chi_of(Scaled(gas, first))[0, 0] == pytest.approx(first * 5e-4, rel=first * 2e-4 + 2e-4)


def test_no_density_is_vacuum():
    assert np.all(chi_of(Scaled(GLASS, 0.0)) == 0)


def test_an_index_without_dispersion_against_air_is_multiplied_by_that_of_air():
    chi = chi_of(Absolute(Constant(1.5**2 - 1), Constant(1.0003**2 - 1)))[0, 0]
    assert np.sqrt(1 + chi) == pytest.approx(1.5 * 1.0003, rel=1e-15)


def test_against_vacuum_an_index_stays_what_it_is():
    silica = catalogue_medium("fused silica").response
    omega = np.array([2.35e15])
    assert chi_of(Absolute(silica, Constant(0.0)), omega, 5) == pytest.approx(
        chi_of(silica, omega, 5), rel=1e-12
    )
