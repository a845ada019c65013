"""Grating pairs and stretchers against closed forms and a ray trace of their own.

Closed forms: E. B. Treacy, IEEE J. Quantum Electron. QE-5, 454 (1969), textbook form. The ray trace counts
the path of each ray to one wavefront behind the pair and the phase 2 pi m x/d of the groove met at x, with
mpmath at 40 digits; its derivatives are those of mpmath.
"""

from __future__ import annotations

import mpmath as mp
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.elements.element import orders_of_element, transfer_of
from pulseprop.elements.gratings import GratingPair
from pulseprop.errors import InputError, RangeError

C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
QUIET = settings(max_examples=20, deadline=None, derandomize=True)
FS = 1e15


def pair(**changed) -> GratingPair:
    settings_ = {"grooves": 600e3, "incidence": np.radians(20), "separation": 10e-3, "passes": 1}
    return GratingPair(name="pair", centre=CENTRE, **{**settings_, **changed})


def traced_phase(omega, *, grooves, incidence, separation, order):
    """From the first hit to a wavefront of the beam that leaves, both gratings' phases included."""
    wave = omega / mp.mpf(C)
    sine = -order * 2 * mp.pi * grooves / wave - mp.sin(incidence)
    hit = separation * sine / mp.sqrt(1 - sine**2)
    between = separation / mp.sqrt(1 - sine**2)
    # Behind the pair all rays run parallel to the incident one; the wavefront through the origin of the
    # second grating is met after -hit * (-sin incidence).
    after = hit * mp.sin(incidence)
    # x counts along the incident side, the tangential wave number there is -(k sin i) - 2 pi m/d.
    return wave * (between + after) + 2 * mp.pi * order * grooves * hit


def traced_orders(**settings_):
    with mp.workdps(40):
        return [float(mp.diff(lambda w: traced_phase(w, **settings_), mp.mpf(CENTRE), m)) for m in (2, 3, 4)]


@pytest.mark.parametrize(
    ("grooves", "incidence", "order"),
    [(600e3, 20.0, -1), (600e3, -5.0, -1), (150e3, 10.0, -3), (300e3, 12.0, 1), (600e3, -40.0, 1)],
)
def test_orders_against_a_ray_trace(grooves, incidence, order):
    settings_ = {
        "grooves": grooves,
        "incidence": np.radians(incidence),
        "separation": 10e-3,
        "order": order,
    }
    found = orders_of_element(pair(**settings_), CENTRE)
    assert found[0] == 0.0
    assert found[1:] == pytest.approx(traced_orders(**settings_), rel=1e-10)


@QUIET
@given(st.floats(200e3, 1200e3), st.floats(5.0, 70.0), st.floats(1e-3, 0.5))
def test_gdd_and_tod_in_closed_form(grooves, degrees, separation):
    sine, ratio = np.sin(np.radians(degrees)), 800e-9 * grooves
    rest = 1 - (ratio - sine) ** 2
    if rest < 0.01:
        return
    element = pair(grooves=grooves, incidence=np.radians(degrees), separation=separation)
    gdd = -(800e-9**3) * separation * grooves**2 / (2 * np.pi * C**2) * rest**-1.5
    tod = -gdd * 3 * 800e-9 / (2 * np.pi * C) * (1 + ratio * sine - sine**2) / rest
    assert orders_of_element(element, CENTRE)[1:3] == pytest.approx((gdd, tod), rel=1e-10)


def test_the_phase_itself_over_the_spectrum():
    """(omega/c) G cos(theta_d), less what is constant and linear at the centre."""
    omega = CENTRE * np.linspace(0.8, 1.3, 11)

    def phase(w):
        return float(
            traced_phase(mp.mpf(w), grooves=600e3, incidence=20 * np.pi / 180, separation=1e-3, order=-1)
        )

    with mp.workdps(40):
        slope = float(
            mp.diff(
                lambda w: traced_phase(
                    w, grooves=600e3, incidence=20 * np.pi / 180, separation=1e-3, order=-1
                ),
                mp.mpf(CENTRE),
            )
        )
        expected = [phase(w) - phase(CENTRE) - slope * (w - CENTRE) for w in omega]
    found = pair(separation=1e-3).exponent(omega, 1)[0]
    assert found.imag == pytest.approx(expected, abs=1e-8)
    assert np.all(found.real == 0)


def test_a_stretcher_undoes_the_pair():
    omega = CENTRE * np.linspace(0.7, 1.3, 9)
    both = transfer_of(pair(), omega) * transfer_of(pair(stretches=True), omega)
    assert both == pytest.approx(np.ones(9), abs=1e-12)
    assert pair(stretches=True).kind == "stretcher"


def test_passes_multiply_phase_and_loss():
    """0.94 a diffraction, two of them a pass: 0.94^4 after two passes."""
    one, two = pair(efficiency=0.94), pair(efficiency=0.94, passes=2)
    assert orders_of_element(two, CENTRE)[1] == pytest.approx(
        2 * orders_of_element(one, CENTRE)[1], rel=1e-13
    )
    assert abs(transfer_of(two, np.array(CENTRE))) ** 2 == pytest.approx(0.94**4, rel=1e-13)


def test_diffraction_stops_where_the_angle_reaches_ninety_degrees():
    """lambda = d (1 + sin incidence): 1500 /mm at 30 deg, exactly 1000 nm."""
    element = pair(grooves=1500e3, incidence=np.radians(30))
    assert 2 * np.pi * C / element.band.low == pytest.approx(1000e-9, rel=1e-12)
    assert np.degrees(element.diffraction_angle(element.band.low * (1 + 1e-9))) == pytest.approx(90, abs=0.01)
    assert np.isnan(element.diffraction_angle(element.band.low * 0.999))
    for sign in (False, True):
        dark = pair(grooves=1500e3, incidence=np.radians(30), stretches=sign)
        series = dark.exponent(np.array([0.2, 0.9, 1.0]) * element.band.low, 3)
        assert np.all(np.abs(np.exp(series[0])[:2]) < 1e-80)
        assert np.all(np.isfinite(series))
        assert np.all(series[1:, :2] == 0)


def test_a_pulse_that_is_not_diffracted_is_refused_with_the_incidence_that_would_do():
    """sin i = 800 nm * 1600 /mm - sin 87 deg = 0.28137: 16.34 deg."""
    with pytest.raises(RangeError, match=r"16\.34 deg"):
        pair(grooves=1600e3, incidence=np.radians(10))
    assert pair(grooves=1600e3, incidence=np.radians(16.35)).band.low < CENTRE
    with pytest.raises(RangeError, match="fewer grooves"):
        pair(grooves=2600e3, incidence=np.radians(80))
    with pytest.raises(RangeError, match=r"below 11\.46 deg"):
        pair(grooves=1000e3, incidence=np.radians(30), order=1)
    assert pair(grooves=1000e3, incidence=np.radians(11.45), order=1).band.low < CENTRE


def test_what_misses_the_second_grating_is_lost():
    """Half the beam, where its axis meets the edge; next to nothing beyond."""
    element = pair(width=8e-3, beam_radius=0.5e-3, separation=0.1)
    omega = CENTRE * np.linspace(0.9, 1.2, 20001)
    edge = int(np.argmin(np.abs(element.landing(omega) + 4e-3)))
    passed = np.abs(element.factor(omega)) ** 2
    assert passed[edge] == pytest.approx(0.5, abs=2e-3)
    assert np.abs(element.factor(np.array(CENTRE))) ** 2 == pytest.approx(1, abs=1e-12)
    assert passed[-1] < 1e-6
    # One radius inside the edge a Gaussian beam loses (1 - erf(sqrt 2))/2 = 2.275 %.
    spot = 0.5e-3 / np.cos(np.radians(20))
    inside = int(np.argmin(np.abs(element.landing(omega) + 4e-3 - spot)))
    assert 1 - passed[inside] == pytest.approx(0.02275, abs=3e-4)


def test_the_carrier_lands_where_the_rays_do():
    """G (tan theta_d - tan theta_d of the carrier), theta_d from the grating equation."""
    angle = np.arcsin(820e-9 * 600e3 - np.sin(np.radians(20)))
    carrier = np.arcsin(800e-9 * 600e3 - np.sin(np.radians(20)))
    expected = 10e-3 * (np.tan(angle) - np.tan(carrier))
    assert pair().landing(2 * np.pi * C / 820e-9) == pytest.approx(expected, rel=1e-9)
    assert pair().footprint == pytest.approx(10e-3 / np.cos(carrier), rel=1e-12)


def test_near_littrow_the_beams_overlap_and_that_is_said():
    """sin = lambda/(2 d): 13.8865 deg for 600 /mm at 800 nm."""
    assert np.degrees(pair().littrow) == pytest.approx(13.8865, abs=5e-5)
    assert "offset in height" in pair(incidence=np.radians(13.89)).remarks[0]
    assert "offset in height" in pair(incidence=np.radians(20), beam_radius=2e-3).remarks[0]
    assert pair(incidence=np.radians(40), separation=50e-3, beam_radius=1e-3).remarks == ()


def test_the_zero_orders_are_named():
    assert "zero order of each grating leaves at 20 deg" in pair().stray_beams[0]
    assert "8 %" in pair(efficiency=0.92).stray_beams[0]


@pytest.mark.parametrize(
    ("changed", "words"),
    [
        ({"passes": 0}, "passes"),
        ({"efficiency": 0.0}, "efficiency"),
        ({"separation": -1e-3}, "separation"),
        ({"incidence": 1.6}, "below 90 deg"),
        ({"order": 0}, "order 0 is not"),
        ({"width": 1e-2}, "beam_radius"),
    ],
)
def test_settings_outside_are_refused(changed, words):
    with pytest.raises(InputError, match=words):
        pair(**changed)
