"""Waveplates: both axes, retardance, walk-off.

Quartz at 800 nm, from the printed formulas of G. Ghosh (1999) in 60 digits: n_o = 1.5383355123, n_e =
1.5472301086, n_g,o = 1.5542678613, n_g,e = 1.5637368325, GVD 42.01446657 and 43.33719503 fs^2/mm: 31.6 fs of
walk-off a mm; 1 mm is of order 11.
"""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.elements.element import orders_of_element
from pulseprop.elements.group import Group
from pulseprop.elements.slab import Slab
from pulseprop.elements.telling import Light, Telling
from pulseprop.elements.waveplate import Waveplate
from pulseprop.errors import InputError
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.crystal_axes import both_axes

C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9


def slabs(*media) -> tuple[Slab, ...]:
    return tuple(Slab(name=m, medium=catalogue_medium(m), thickness=d) for m, d in media)


def plate(along, across, axis="ordinary") -> Waveplate:
    other = Group(name="plate", kind="waveplate", parts=slabs(*across))
    parts = slabs(*along)
    return Waveplate(name="plate", kind="waveplate", parts=parts, centre=CENTRE, axis=axis, other=other)


QUARTZ = plate([("quartz", 1e-3)], [("quartz e", 1e-3)])


def test_walk_off_of_a_millimetre_of_quartz():
    assert QUARTZ.walk_off * 1e15 == pytest.approx(31.6, abs=0.05)
    assert QUARTZ.walk_off == pytest.approx((1.5637368325 - 1.5542678613) * 1e-3 / C, rel=1e-8)


def test_a_millimetre_is_of_order_eleven():
    assert QUARTZ.retardance == pytest.approx((1.5472301086 - 1.5383355123) * 1e-3 / 800e-9, rel=1e-7)
    assert "(order 11)" in QUARTZ.notes[0]
    assert "leaves 31.6 fs later" in QUARTZ.notes[0]


def test_each_axis_has_its_orders():
    _, gdd, _, _ = orders_of_element(QUARTZ, CENTRE)
    assert gdd * 1e30 == pytest.approx(42.01446657, rel=1e-9)
    assert QUARTZ.figures["other_axis_gdd_fs2"] == pytest.approx(43.33719503, rel=1e-9)
    assert QUARTZ.figures["other_axis_tod_fs3"] == pytest.approx(32.75125869, rel=1e-8)


def test_the_other_axis_is_the_other_plate():
    turned = plate([("quartz e", 1e-3)], [("quartz", 1e-3)], axis="extraordinary")
    assert turned.walk_off == pytest.approx(-QUARTZ.walk_off, rel=1e-12)
    assert turned.retardance == pytest.approx(QUARTZ.retardance, rel=1e-12)
    assert "leaves 31.6 fs earlier" in turned.notes[0]
    assert "along the ordinary one" in turned.notes[0]


def test_equal_plates_crossed_undo_each_other():
    both = [("quartz", 1e-3), ("quartz e", 1e-3)]
    zero = plate(both, both[::-1])
    assert zero.retardance < 1e-9
    assert abs(zero.walk_off) < 1e-22


def test_a_walk_off_that_counts_is_warned_of():
    assert isinstance(QUARTZ, Telling)
    at = {"omega": np.array([CENTRE]), "power": np.ones(1)}
    (warning,) = QUARTZ.warnings(Light(**at, duration=12e-15))
    assert "two pulses 31.6 fs apart" in warning
    assert QUARTZ.warnings(Light(**at, duration=400e-15)) == ()


@pytest.mark.parametrize(
    ("name", "pair"),
    [
        ("quartz", ("quartz", "quartz e")),
        ("quartz extraordinary", ("quartz", "quartz e")),
        ("MgF2", ("MgF2", "MgF2 e")),
        ("MgF2 o (Li 1980)", ("MgF2 o (Li 1980)", "MgF2 e (Li 1980)")),
        ("sapphire", ("sapphire", "sapphire e")),
        ("calcite", ("calcite", "calcite e")),
        ("YVO4", ("YVO4", "YVO4 e")),
        ("BBO o (Zhang 2000)", ("BBO o (Zhang 2000)", "BBO e (Zhang 2000)")),
        ("rutile", ("TiO2", "TiO2 e")),
    ],
)
def test_both_axes_of_a_crystal_are_found(name, pair):
    assert both_axes(name) == pair


@pytest.mark.parametrize("name", ["fused silica", "LBO x", "argon"])
def test_what_has_no_two_axes_is_refused(name):
    with pytest.raises(InputError, match="along an ordinary and an extraordinary axis"):
        both_axes(name)
