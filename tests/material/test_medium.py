"""A medium: root, orders, absorption, what rings, media of which only orders are known."""

from __future__ import annotations

import mpmath as mp
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.material.features import features_of, relaxes
from pulseprop.material.lines import Carriers, LorentzLine, Relaxation, VoigtLine
from pulseprop.material.medium import Medium, NonlinearIndex, Resonance
from pulseprop.material.orders_only import OrdersOnly
from pulseprop.material.refraction import refraction_of, susceptibility_of
from pulseprop.material.response import EVERYWHERE, Band, Constant, Sum, View, common_band

QUIET = settings(max_examples=30, deadline=None, derandomize=True)
C = 299792458.0
LINE = LorentzLine(strength=20e30, centre=4e15, width=0.56e15)


@QUIET
@given(st.complex_numbers(max_magnitude=1e3, allow_nan=False, allow_infinity=False))
def test_index_squared_is_one_plus_chi_with_the_root_of_passive_matter(chi):
    chi = complex(chi.real, abs(chi.imag))
    excess = complex(refraction_of(np.array([chi]))[0])
    assert (1 + excess) ** 2 == pytest.approx(1 + chi, rel=1e-12, abs=1e-12)
    assert (1 + excess).real >= -1e-15 * abs(1 + excess)  # rounding of a root on the imaginary axis
    assert (1 + excess).imag >= 0


@pytest.mark.parametrize("chi", [-5.0, -5.0 + 0j, complex(-5.0, -0.0)])
def test_a_lossless_metal_screens_and_does_not_amplify(chi):
    assert complex(refraction_of(np.array([chi]))[0]) == pytest.approx(-1 + 2j, rel=1e-15)


def test_gain_keeps_the_principal_root():
    assert complex(refraction_of(np.array([0.1 - 0.01j]))[0]).imag < 0


def test_dilute_matter_keeps_its_digits():
    """sqrt(1 + 1e-12) - 1 = 5e-13 - 1.25e-25: a difference of the root would hold four digits."""
    assert refraction_of(np.array([1e-12]))[0] == pytest.approx(5e-13 - 1.25e-25, rel=1e-15)


def test_there_and_back():
    chi = LINE.series(np.array([3e15, 4.1e15]), 5)
    assert susceptibility_of(refraction_of(chi)) == pytest.approx(chi, rel=1e-12)


@pytest.mark.parametrize("omega", [1e15, 4.1e15, 9e15])
def test_orders_of_a_lorentz_medium_against_forty_digits(omega):
    """Re k and its derivatives, k = omega n / c, from mpmath's Taylor series of the same formula."""
    with mp.workdps(40):

        def wave_number(w):
            chi = LINE.strength / (mp.mpf(LINE.centre) ** 2 - w**2 - 1j * mp.mpf(LINE.width) * w)
            return w * mp.sqrt(1 + chi) / C

        k = mp.taylor(lambda t: wave_number(omega * (1 + t)), 0, 4)
    found = Medium(name="line", response=LINE).orders(omega)
    scaled = [float(k[m].real / mp.mpf(omega) ** m * mp.factorial(m)) for m in range(5)]
    assert found.index == pytest.approx(scaled[0] * C / omega, rel=1e-13)
    assert found.group_index == pytest.approx(scaled[1] * C, rel=1e-12)
    assert found.gvd == pytest.approx(scaled[2], rel=1e-11)
    assert found.tod == pytest.approx(scaled[3], rel=1e-11)
    assert found.fod == pytest.approx(scaled[4], rel=1e-10)
    assert found.absorption == pytest.approx(float(2 * k[0].imag), rel=1e-12)


def test_absorption_is_twice_the_imaginary_wave_number():
    medium = Medium(name="line", response=LINE)
    omega = np.array([4e15])
    k = np.sqrt(1 + 20e30 / (-1j * 0.56e15 * 4e15)).imag
    assert medium.absorption(omega)[0] == pytest.approx(2 * k * 4e15 / C, rel=1e-13)


def test_orders_only_gives_back_its_orders():
    known = OrdersOnly(centre=2e15, index=1.5, group_index=1.52, gvd=3e-26, tod=2e-41, fod=-1e-56)
    found = Medium(name="objective", response=known).orders(2e15)
    assert found.index == pytest.approx(1.5, rel=1e-14)
    assert found.group_index == pytest.approx(1.52, rel=1e-13)
    assert found.gvd == pytest.approx(3e-26, rel=1e-9)
    assert found.tod == pytest.approx(2e-41, rel=1e-9)
    assert found.fod == pytest.approx(-1e-56, rel=1e-8)


def test_only_lines_within_reach_of_the_light_ring():
    far, near = Resonance(1e15, 1e10, 1e-9), Resonance(2e15, 1e12, 2e-12)
    medium = Medium(name="lines", response=LINE, resonances=(far, near))
    assert medium.ringing(1.9e15, 2.1e15) == 2e-12
    assert medium.ringing(0.5e15, 3e15) == 1e-9
    assert medium.ringing(3e15, 4e15) == 0.0


def test_the_nonlinear_index_measured_nearest_is_taken():
    blue, red = (
        NonlinearIndex(value=3.6e-20, wavelength=351e-9),
        NonlinearIndex(value=2.7e-20, wavelength=1053e-9),
    )
    medium = Medium(name="silica", response=LINE, n2=(blue, red))
    assert medium.nonlinear_index(2 * np.pi * C / 800e-9) is red
    assert Medium(name="bare", response=LINE).nonlinear_index(2e15) is None


def test_susceptibilities_side_by_side_add_and_hold_where_all_hold():
    whole = Sum((Constant(1.0, Band(1e15, 3e15)), LINE, Constant(0.5, Band(2e15, 5e15))))
    omega = np.array([2.5e15])
    assert whole.series(omega, 3, View.PRINTED)[0, 0] == pytest.approx(
        1.5 + LINE.series(omega, 1)[0, 0], rel=1e-15
    )
    assert whole.band == Band(2e15, 3e15)
    assert common_band(()) == EVERYWHERE
    assert Band(1.0, 2.0).contains(np.array([-1.5, 0.5, 2.0])).tolist() == [True, False, True]


def test_features_say_where_a_response_absorbs():
    voigt = VoigtLine(strength=1.0, centre=2e15, width=1e12, doppler_width=3e12)
    whole = Sum((LINE, voigt, Relaxation(static=3.0, time=1e-12), Carriers(plasma_frequency=1e16, rate=1e14)))
    assert features_of(whole) == ((4e15, 0.56e15), (2e15, 4e12), (0.0, 1e12), (0.0, 1e14))
    assert relaxes(whole)
    assert not relaxes(Sum((LINE, voigt)))
