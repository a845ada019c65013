"""Lenses: dispersion of the glasses on the axis, and when their rays arrive.

12.7 fs (f = 100 mm) and 25.4 fs (f = 50 mm) of a fused-silica singlet at 5 mm and 800 nm were worked out for
this program's users from r^2/(2 c f (n - 1)) |lambda dn/dlambda|; the formula after Z. Bor, J. Mod. Opt. 35,
1907 (1988), and J.-C. Diels, W. Rudolph, Ultrashort Laser Pulse Phenomena, both from memory.
"""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.elements.element import Element, orders_of_element
from pulseprop.elements.lens import Lens
from pulseprop.elements.slab import Slab
from pulseprop.elements.telling import Light, Telling
from pulseprop.errors import InputError
from pulseprop.material.catalogue_media import catalogue_medium

C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
# n and n_g at 800 nm, from the printed Sellmeier formulas in 60 digits (fused silica: I. H. Malitson 1965;
# N-BK7, SF10: the maker's catalogue of 2017).
INDEX = {"fused silica": 1.4533172549, "N-BK7": 1.5107762314, "SF10": 1.7112380054}
GROUP = {"fused silica": 1.4671447554, "N-BK7": 1.526649647, "SF10": 1.7509961512}


def lens(*glasses, **changed) -> Lens:
    parts = tuple(
        Slab(name=f"{medium} {i}", medium=catalogue_medium(medium), thickness=thickness)
        for i, (medium, thickness) in enumerate(glasses)
    )
    given = {"focal_length": 0.1, "marginal_radius": 5e-3, **changed}
    return Lens(name="lens", kind="lens", parts=parts, centre=CENTRE, **given)


def light(duration) -> Light:
    return Light(omega=np.array([CENTRE]), power=np.ones(1), duration=duration)


@pytest.mark.parametrize(("focal_length", "expected"), [(0.1, 12.7), (0.05, 25.4), (-0.1, -12.7)])
def test_a_singlet_delays_its_axis(focal_length, expected):
    singlet = lens(("fused silica", 4e-3), focal_length=focal_length)
    assert singlet.arrival_difference * 1e15 == pytest.approx(expected, abs=0.05)


def test_two_glasses_against_their_indices():
    focal = {"N-BK7": 0.0557, "SF10": -0.1259}
    achromat = lens(("N-BK7", 4e-3), ("SF10", 2e-3), focal_lengths=tuple(focal.values()))
    chromatic = sum((GROUP[g] - INDEX[g]) / (INDEX[g] - 1) / f for g, f in focal.items())
    assert achromat.arrival_difference == pytest.approx(5e-3**2 / (2 * C) * chromatic, rel=1e-8)


def test_an_achromat_for_the_pulse_makes_no_difference():
    """Powers in the ratio that cancels the sum of P (n_g - n)/(n - 1)."""
    share = {g: (GROUP[g] - INDEX[g]) / (INDEX[g] - 1) for g in ("N-BK7", "SF10")}
    crown = 10 / (1 - share["N-BK7"] / share["SF10"])
    focal = (1 / crown, 1 / (10 - crown))
    achromat = lens(("N-BK7", 4e-3), ("SF10", 2e-3), focal_lengths=focal)
    assert abs(achromat.arrival_difference) < 1e-20
    assert achromat.warnings(light(5e-15)) == ()


def test_the_dispersion_is_that_of_the_centre_thicknesses():
    """4 mm N-BK7 and 2 mm SF10 at 800 nm: 178.6 and 318.9 fs^2, 128.4 and 202.7 fs^3."""
    _, gdd, tod, _ = orders_of_element(lens(("N-BK7", 4e-3), ("SF10", 2e-3)), CENTRE)
    assert gdd * 1e30 == pytest.approx(178.6071886 + 318.9173696, rel=1e-9)
    assert tod * 1e45 == pytest.approx(4 * 32.10136831 + 2 * 101.3472881, rel=1e-8)


def test_what_is_not_known_is_said_and_not_guessed():
    pair = (("N-BK7", 4e-3), ("SF10", 2e-3))
    for unknown, words in (
        (lens(*pair), "several glasses without the focal_length of each"),
        (lens(*pair, focal_lengths=(0.0557, None)), "several glasses without the focal_length of each"),
        (lens(("SF10", 1e-3), focal_length=None), "without focal_length"),
        (lens(("SF10", 1e-3), marginal_radius=None), "without beam_radius"),
    ):
        assert unknown.arrival_difference is None
        assert unknown.figures == {"arrival_difference_fs": None}
        assert words in unknown.notes[0]
        assert unknown.warnings(light(1e-15)) == ()


def test_a_difference_that_counts_beside_the_pulse_is_warned_of():
    singlet = lens(("fused silica", 4e-3))
    assert singlet.warnings(light(200e-15)) == ()
    (warning,) = singlet.warnings(light(12e-15))
    assert "12.7 fs apart" in warning
    assert "the ray at 5 mm arrives 12.7 fs before the axial one" in singlet.notes[0]
    assert "after the axial one" in lens(("fused silica", 4e-3), focal_length=-0.1).notes[0]


def test_powers_that_do_not_add_up_are_refused():
    with pytest.raises(InputError, match=r"do not make that of the lens.*1/\(100 mm\)"):
        lens(("N-BK7", 4e-3), ("SF10", 2e-3), focal_lengths=(0.0557, -0.2))


def test_a_lens_is_matter_that_tells():
    one = lens(("fused silica", 4e-3))
    assert isinstance(one, Element)
    assert isinstance(one, Telling)
    assert not one.phase_only
    assert one.footprint == pytest.approx(4e-3)
    assert [medium.name for medium in one.media] == ["fused silica"]
