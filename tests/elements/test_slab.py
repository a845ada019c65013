"""Slabs: path difference at an angle, faces, echoes, energy, against exact formulas of textbooks.

Fresnel, Brewster and Airy formulas: M. Born, E. Wolf, Principles of Optics, 1.5 and 7.6 (from memory).
"""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from pulseprop.elements.element import orders_of_element, transfer_of
from pulseprop.elements.slab import Slab
from pulseprop.material.catalogue_media import VACUUM, catalogue_medium
from pulseprop.material.lines import LorentzLine
from pulseprop.material.medium import Medium, Resonance
from pulseprop.material.response import Constant, View

QUIET = settings(max_examples=25, deadline=None, derandomize=True)
C = 299792458.0
OMEGA = 2 * np.pi * C / 800e-9
N = 1.5
GLASS = Medium(name="glass", response=Constant(N * N - 1))
INDEX = st.floats(1.01, 4.0)
ANGLE = st.floats(0.0, 1.5)


def slab(**changed) -> Slab:
    return Slab(**{"name": "window", "medium": GLASS, "thickness": 10e-6, **changed})


def of_index(n: float) -> Medium:
    return Medium(name="glass", response=Constant(n * n - 1))


@QUIET
@given(INDEX, ANGLE)
def test_phase_of_a_tilted_slab_is_that_of_the_path_difference(n, angle):
    """Snell: inside d n / cos t', outside the same advance saved, d cos(t - t') / cos t'."""
    thickness = 10e-6
    inside = np.arcsin(np.sin(angle) / n)
    optical = thickness / np.cos(inside) * (n - np.cos(angle - inside))
    found = slab(medium=of_index(n), angle=angle).exponent(np.array([OMEGA]), 1)[0, 0]
    assert found.real == 0
    assert found.imag == pytest.approx(OMEGA / C * optical, rel=1e-10)


@QUIET
@given(st.floats(0.0, 1.4))
def test_orders_of_a_tilted_dispersive_slab(angle):
    """Derivatives of (w/c) d [sqrt(n^2 - sin^2) - cos] by a contour of the printed formula."""
    silica = catalogue_medium("fused silica")
    element = slab(medium=silica, angle=angle, thickness=1e-3)
    radius, count = 0.1 * OMEGA, 64
    turn = np.exp(2j * np.pi * np.arange(count) / count)
    omega = OMEGA + radius * turn
    squared = 1 + silica.susceptibility(omega, View.PRINTED)
    phase = omega / C * 1e-3 * (np.sqrt(squared - np.sin(angle) ** 2) - np.cos(angle))
    delay, gdd, tod, fod = (
        np.mean(phase * turn**-m).real / radius**m * factor for m, factor in ((1, 1), (2, 2), (3, 6), (4, 24))
    )
    assert orders_of_element(element, OMEGA) == pytest.approx((delay, gdd, tod, fod), rel=1e-8)


def test_at_normal_incidence_the_tilted_formula_meets_the_upright_one():
    silica = catalogue_medium("fused silica")
    upright = slab(medium=silica).exponent(np.array([OMEGA]), 5, View.PRINTED)
    tilted = slab(medium=silica, angle=1e-9).exponent(np.array([OMEGA]), 5, View.PRINTED)
    assert tilted == pytest.approx(upright, rel=1e-9)


@QUIET
@given(INDEX)
def test_one_face_at_normal_incidence_reflects_n_minus_one_over_n_plus_one_squared(n):
    assert slab(medium=of_index(n)).face_reflectance(OMEGA) == pytest.approx(
        ((n - 1) / (n + 1)) ** 2, rel=1e-12
    )


@QUIET
@given(INDEX, ANGLE, st.sampled_from(["s", "p"]))
def test_fresnel_faces_against_sines_and_tangents(n, angle, polarisation):
    """Fresnel 1823: r_s = sin(t - t')/sin(t + t'), r_p = tan(t - t')/tan(t + t')."""
    angle = max(angle, 0.01)
    inside = np.arcsin(np.sin(angle) / n)
    function = np.sin if polarisation == "s" else np.tan
    reflected = (function(angle - inside) / function(angle + inside)) ** 2
    element = slab(medium=of_index(n), angle=angle, polarisation=polarisation, faces="fresnel")
    assert element.face_reflectance(OMEGA) == pytest.approx(reflected, rel=1e-9, abs=1e-15)
    assert complex(element.factor(np.array(OMEGA))) == pytest.approx(1 - reflected, rel=1e-12)


@QUIET
@given(INDEX)
def test_at_brewsters_angle_p_light_passes_whole(n):
    element = slab(medium=of_index(n), angle=np.arctan(n), polarisation="p", faces="fresnel")
    assert element.face_reflectance(OMEGA) < 1e-28
    assert abs(transfer_of(element, np.array(OMEGA))) == pytest.approx(1, rel=1e-14)


@QUIET
@given(INDEX, ANGLE, st.sampled_from(["s", "p"]), st.floats(0.8, 1.2))
def test_echoes_follow_the_airy_formula_and_lose_nothing(n, angle, polarisation, detuning):
    """T = 1/(1 + F sin^2(delta/2)), F = 4R/(1-R)^2, delta = 2 (w/c) d sqrt(n^2 - sin^2); Born, Wolf 7.6."""
    omega = OMEGA * detuning
    element = slab(medium=of_index(n), angle=angle, polarisation=polarisation, faces="echoes")
    reflectance = element.face_reflectance(omega)
    finesse = 4 * reflectance / (1 - reflectance) ** 2
    half = omega / C * 10e-6 * np.sqrt(n * n - np.sin(angle) ** 2)
    expected = 1 / (1 + finesse * np.sin(half) ** 2)
    assert abs(transfer_of(element, np.array(omega))) ** 2 == pytest.approx(expected, rel=1e-9)


def test_echoes_average_to_the_incoherent_sum():
    """Over one free spectral range the mean transmittance is (1 - R)/(1 + R), n = 1.5: 12/13."""
    spacing = np.pi * C / (N * 10e-6)
    omega = OMEGA + spacing * np.arange(256) / 256
    mean = np.mean(np.abs(transfer_of(slab(faces="echoes"), omega)) ** 2)
    assert mean == pytest.approx(12 / 13, rel=1e-12)


def test_an_echo_is_late_by_a_round_trip_and_weaker_by_two_faces():
    delay, ratio = slab(faces="echoes").echo(OMEGA)
    assert delay == pytest.approx(2 * N * 10e-6 / C, rel=1e-12)
    assert abs(ratio) == pytest.approx(0.04, rel=1e-12)


def test_stated_reflectance_is_lost_at_either_face():
    element = slab(faces="reflectance", reflectance=0.005)
    assert abs(transfer_of(element, np.array(OMEGA))) ** 2 == pytest.approx(0.995**2, rel=1e-13)


def test_a_line_absorbs_by_lambert_and_beer():
    line = LorentzLine(strength=1e25, centre=OMEGA, width=2e13)
    medium = Medium(name="line", response=line)
    omega = np.array([OMEGA, OMEGA + 3e13])
    passed = np.abs(transfer_of(slab(medium=medium, thickness=1e-3), omega)) ** 2
    assert passed == pytest.approx(np.exp(-medium.absorption(omega) * 1e-3), rel=1e-12)


def test_ringing_counts_memories_and_round_trips():
    rings = Medium(name="line", response=Constant(0.0), resonances=(Resonance(OMEGA, 2e12, 1e-12),))
    assert slab(medium=rings).ringing(OMEGA - 1e13, OMEGA + 1e13) == pytest.approx(21e-12)
    # ln(1/0.04) nepers a trip: seven trips to exp(-21).
    assert slab(faces="echoes").ringing(0.9 * OMEGA, 1.1 * OMEGA) == pytest.approx(
        7 * 2 * N * 10e-6 / C, rel=1e-9
    )
    assert slab().ringing(0.0, OMEGA) == 0.0


def test_no_thickness_is_no_slab():
    assert transfer_of(slab(thickness=0.0), np.array([OMEGA]))[0] == 1


def test_faces_that_reflect_nothing_do_not_ring():
    """Vacuum has no faces: no echo, and no logarithm of nothing."""
    assert Slab(name="gap", medium=VACUUM, thickness=1e-3, faces="echoes").ringing(2e15, 3e15) == 0.0
