"""Wedge pairs: glass by insertion, four faces, tips."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.elements.element import Element, orders_of_element, transfer_of
from pulseprop.elements.slab import Slab
from pulseprop.elements.wedge_pair import WedgePair, glass_at
from pulseprop.errors import InputError
from pulseprop.material.catalogue_media import catalogue_medium

C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
SILICA = catalogue_medium("fused silica")


def pair(**changed) -> WedgePair:
    return WedgePair(**{"name": "wedges", "medium": SILICA, "glass": 2e-3, "centre": CENTRE, **changed})


def test_gdd_is_36_16_fs2_a_millimetre_of_glass():
    """I. H. Malitson 1965."""
    _, gdd, _, _ = orders_of_element(pair(glass=3e-3), CENTRE)
    assert gdd * 1e30 == pytest.approx(3 * 36.1619983, rel=1e-9)


def test_glass_is_linear_in_the_insertion():
    """Plane geometry: a wedge of 8 deg moved by 5 mm adds 0.7027 mm; both, twice that."""
    assert glass_at(1e-3, 5e-3, np.radians(8), 1) == pytest.approx(1.7027e-3, abs=1e-7)
    assert glass_at(1e-3, 5e-3, np.radians(8), 2) == pytest.approx(2.4054e-3, abs=1e-7)
    assert glass_at(1e-3, -5e-3, np.radians(8), 1) == pytest.approx(0.2973e-3, abs=1e-7)


def test_at_an_angle_it_is_the_plate_of_that_glass():
    angle = np.radians(40)
    plate = Slab(name="plate", medium=SILICA, thickness=2e-3, angle=angle)
    assert pair(angle=angle).exponent(np.array(CENTRE), 4) == pytest.approx(
        plate.exponent(np.array(CENTRE), 4), rel=1e-14
    )


def test_four_faces_lose_what_fresnel_says():
    """R = ((n - 1)/(n + 1))^2 with n = 1.4533172549: four faces transmit (1 - R)^4."""
    reflected = ((1.4533172549 - 1) / (1.4533172549 + 1)) ** 2
    passed = abs(transfer_of(pair(faces="fresnel"), np.array(CENTRE))) ** 2
    assert passed == pytest.approx((1 - reflected) ** 4, rel=1e-9)
    stated = pair(faces="reflectance", reflectance=0.005)
    assert abs(transfer_of(stated, np.array(CENTRE))) ** 2 == pytest.approx(0.995**4, rel=1e-12)
    assert pair().factor(np.array(CENTRE)) is None


def test_at_brewsters_angle_p_light_loses_nothing():
    brewster = pair(angle=np.arctan(1.4533172549), polarisation="p", faces="fresnel")
    assert abs(transfer_of(brewster, np.array(CENTRE))) == pytest.approx(1, abs=1e-12)
    assert brewster.stray_beams == ()


def test_faces_that_reflect_are_told():
    assert pair().stray_beams == ("wedges: each of four faces reflects about 3.4 % if uncoated",)
    assert "0.5 % as stated" in pair(faces="reflectance", reflectance=0.005).stray_beams[0]


def test_a_beam_at_the_tips_is_remarked():
    """Half of 2 mm of glass at 8 deg: 7.12 mm from the tip."""
    near = pair(apex_angle=np.radians(8), beam_radius=3e-3)
    assert "7.12 mm from the tips" in near.remarks[0]
    assert pair(apex_angle=np.radians(8), beam_radius=2e-3).remarks == ()
    assert pair(apex_angle=np.radians(8)).remarks == ()


def test_no_glass_left_is_refused():
    with pytest.raises(InputError, match="would miss the wedges"):
        pair(glass=-0.1e-3)
    with pytest.raises(InputError, match="needs a polarisation"):
        pair(angle=0.5, faces="fresnel")


def test_it_is_matter_without_echoes():
    assert isinstance(pair(), Element)
    assert not pair().phase_only
    assert pair().length == 2e-3
    assert pair(faces="fresnel").ringing(2e15, 3e15) == 0.0
