"""Elements that the beam goes through several times."""

from __future__ import annotations

import numpy as np
import pytest

import pulseprop as pp
from pulseprop.elements.element import Element, transfer_of
from pulseprop.elements.group import Group, every, kept, passages
from pulseprop.elements.phase_orders import Loss, PhaseOrders
from pulseprop.elements.slab import Slab
from pulseprop.errors import InputError
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.scenario.read import scenario_from

OMEGA = np.array([2.2e15, 2.35e15, 2.6e15])
CRYSTAL = Slab(name="crystal", medium=catalogue_medium("sapphire"), thickness=1e-3, faces="fresnel")
MIRROR = Loss(name="mirror", transmittance=0.97)
DEVICE = PhaseOrders(name="device", centre=2.35e15, gdd=-40e-30)


def repeat(*parts, times=1) -> Group:
    return Group(name="cavity", kind="repeat", parts=parts, times=times)


def test_passages_multiply():
    once, often = repeat(CRYSTAL, MIRROR), repeat(CRYSTAL, MIRROR, times=7)
    assert isinstance(often, Element)
    assert transfer_of(often, OMEGA) == pytest.approx(transfer_of(once, OMEGA) ** 7, rel=1e-11)
    assert often.exponent(OMEGA, 5) == pytest.approx(7 * once.exponent(OMEGA, 5), rel=1e-14)
    assert often.length == pytest.approx(7e-3)
    assert often.footprint == once.footprint


def test_groups_inside_groups():
    inner = repeat(CRYSTAL, DEVICE, times=2)
    outer = Group(name="outer", kind="repeat", parts=(inner, MIRROR), times=3)
    assert [one.name for one in passages([outer])] == 3 * ["crystal", "device", "crystal", "device", "mirror"]
    assert [one.name for one in every([outer])] == ["outer", "cavity", "crystal", "device", "mirror"]
    matter = kept(outer, lambda element: not element.phase_only)
    assert [one.name for one in every([matter])] == ["outer", "cavity", "crystal", "mirror"]
    assert kept(repeat(DEVICE), lambda element: not element.phase_only) is None
    assert [medium.name for medium in outer.media] == ["sapphire"]


def test_only_devices_make_a_device():
    assert repeat(DEVICE).phase_only
    assert not repeat(DEVICE, CRYSTAL).phase_only


def test_nothing_to_repeat_is_refused():
    with pytest.raises(InputError, match="needs parts"):
        repeat()
    with pytest.raises(InputError, match="no such number of passages"):
        repeat(CRYSTAL, times=0)


PULSE = {
    "shape": "gaussian",
    "centre": "800 nm",
    "duration": "30 fs",
    "energy": "1 uJ",
    "beam_radius": "1 mm",
}
INSIDE = [
    {"kind": "slab", "name": "crystal", "medium": "sapphire", "thickness": "2 mm"},
    {"kind": "loss", "name": "coupler", "transmittance": 0.9},
]


def sent(*path, sets=()):
    return pp.send(scenario_from({"pulse": PULSE, "path": list(path)}, overrides=sets))


def unrolled(times):
    return [{**one, "name": f"{one['name']} {i}"} for i in range(times) for one in INSIDE]


def test_a_repeat_is_the_path_written_out():
    run = sent({"kind": "repeat", "name": "cavity", "times": 5, "path": INSIDE})
    long = sent(*unrolled(5))
    (row,) = run.elements
    assert row.gdd_fs2 == pytest.approx(10 * 58.03885731, rel=1e-8)
    assert row.fwhm_after_fs == pytest.approx(long.elements[-1].fwhm_after_fs, rel=1e-9)
    assert run.path.transmission == pytest.approx(0.9**5, rel=1e-9)
    for key in ("group_delay_fs", "gdd_fs2", "tod_fs3", "b_integral_rad", "centroid_delay_fs"):
        assert getattr(run.path, key) == pytest.approx(getattr(long.path, key), rel=1e-9)
    assert np.abs(run.fields.envelope_out) ** 2 == pytest.approx(
        np.abs(long.fields.envelope_out) ** 2, rel=1e-7, abs=1e-7 * run.pulse_out.peak_power_W
    )


def test_the_parts_of_a_repeat_hold_all_passages():
    (row,) = sent({"kind": "repeat", "times": 5, "elements": INSIDE}).elements
    crystal, coupler = row.parts
    assert crystal.gdd_fs2 == pytest.approx(row.gdd_fs2)
    assert coupler.transmission == pytest.approx(0.9**5, rel=1e-9)
    assert crystal.b_integral_rad == pytest.approx(row.b_integral_rad)
    # The first passage is the brightest.
    assert crystal.peak_fluence_J_per_cm2 == pytest.approx(2 * 1e-6 / (np.pi * 0.1**2), rel=1e-6)


def test_the_front_test_repeats_the_matter_and_leaves_the_devices_out():
    inside = [*INSIDE, {"kind": "known orders", "name": "mirrors", "gdd": "-116 fs^2"}]
    run = sent({"kind": "repeat", "name": "cavity", "times": 4, "path": inside})
    assert run.causality.verdict == "causal"
    assert run.causality.left_out == ("mirrors",)


def test_the_beam_of_a_repeat_is_that_of_its_parts():
    """Four times the fluence for half the radius."""
    wide, narrow = (
        sent({"kind": "repeat", "times": 2, "path": INSIDE} | beam)
        for beam in ({}, {"beam_radius": "0.5 mm"})
    )
    ratio = narrow.elements[0].peak_fluence_J_per_cm2 / wide.elements[0].peak_fluence_J_per_cm2
    assert ratio == pytest.approx(4, rel=1e-12)


@pytest.mark.parametrize(
    ("override", "millimetres"),
    [
        ("path.2.path.1.thickness=1 mm", 3),
        ("path.cavity.path.crystal.thickness=1 mm", 3),
        ("path.cavity.times=2", 4),
    ],
)
def test_what_is_inside_can_be_overridden(override, millimetres):
    air = {"kind": "slab", "name": "air", "medium": "air", "thickness": "0 m"}
    cavity = {"kind": "repeat", "name": "cavity", "times": 3, "path": INSIDE}
    run = sent(air, cavity, sets=(override,))
    assert run.elements[1].gdd_fs2 == pytest.approx(millimetres * 58.03885731, rel=1e-8)
