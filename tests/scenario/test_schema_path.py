"""Elements of a path: what each needs, in SI."""

from __future__ import annotations

import math
from pathlib import Path
from typing import Any

import pytest

from pulseprop.errors import InputError
from pulseprop.files.number_table import read_numbers
from pulseprop.scenario.complaints import findings_of
from pulseprop.scenario.read import read_scenario, scenario_from
from pulseprop.scenario.schema_path import ElementTable

PULSE = {"shape": "gaussian", "centre": "800 nm", "duration": "30 fs"}


def element(**table: Any) -> ElementTable:
    return scenario_from({"pulse": PULSE, "path": [table]}).content.path[0]


def test_a_slab_in_si() -> None:
    slab = element(
        kind="slab",
        medium="water",
        thickness="0 mm",
        angle="45 deg",
        polarisation="s",
        faces="echoes",
        temperature="22 degC",
        beam_radius="2 mm",
    ).model_dump()
    assert slab["angle"] == pytest.approx(math.pi / 4, rel=1e-15)
    assert (slab["thickness"], slab["temperature"], slab["beam_radius"]) == (0.0, 295.15, 2e-3)
    assert (slab["polarisation"], slab["faces"], slab["reflectance"], slab["keep"]) == (
        "s",
        "echoes",
        None,
        False,
    )


def test_known_orders_and_shapers_in_si() -> None:
    known = element(
        kind="known orders", group_delay="1 ps", gdd="1500 fs^2", fod="3 fs^4", transmittance="80 %"
    )
    assert known.model_dump(include={"group_delay", "gdd", "tod", "fod", "transmittance"}) == {
        "group_delay": 1e-12,
        "gdd": 1500e-30,
        "tod": 0.0,
        "fod": 3e-60,
        "transmittance": 0.8,
    }
    assert element(kind="pulse shaper", tod="-900 fs^3").model_dump()["tod"] == pytest.approx(
        -900e-45, rel=1e-15
    )


@pytest.mark.parametrize(
    ("table", "parts"),
    [
        ({"kind": "known orders"}, ["path.1", "no order is given", "group_delay, gdd, tod, fod"]),
        (
            {"kind": "known orders", "gdd": "1 fs^2", "transmittance": 0},
            ["path.1.transmittance", "nothing would"],
        ),
        ({"kind": "pulse shaper"}, ["path.1", "no order is given", "gdd, tod, fod"]),
        ({"kind": "pulse shaper", "group_delay": "1 fs"}, ["path.1.group_delay", "no key"]),
        ({"kind": "loss"}, ["path.1.transmittance", "missing"]),
        ({"kind": "loss", "transmittance": 0.0}, ["path.1.transmittance", "above 0"]),
        ({"kind": "loss", "transmittance": "-3 %"}, ["path.1.transmittance", "(got '-3 %')"]),
        ({"kind": "loss", "transmittance": "0.3 dB"}, ["path.1.transmittance", '"dB" is not a unit']),
        (
            {"kind": "slab", "medium": "x", "thickness": "1 mm", "faces": "fresnell"},
            ['Did you mean "fresnel"?'],
        ),
        ({"kind": "slab", "medium": "x", "thickness": "1 mm", "polarisation": "P"}, ['"p", "s"', "got 'P'"]),
        (
            {"kind": "slab", "medium": "x", "thickness": "1 mm", "temperature": "0 K"},
            ["temperature", "above 0"],
        ),
        (
            {"kind": "slab", "medium": 1.5, "thickness": "1 mm"},
            ["path.1.medium", "a text in quotes (got 1.5)"],
        ),
        ({"kind": 3}, ["path.1.kind", "got '3'"]),
    ],
)
def test_bad_elements_are_refused(table: dict[str, Any], parts: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        element(**table)
    for part in parts:
        assert part in str(caught.value)


def test_a_complaint_of_a_kind_not_known_keeps_its_own_words() -> None:
    error = {"type": "new_in_a_later_release", "loc": ("pulse", "x"), "msg": "is odd", "input": {"a": 1}}
    ((keys, complaint),) = findings_of([error], {"pulse": {"x": {"a": 1}}})
    assert keys == ("pulse", "x")
    assert complaint.text == "is odd (got 'a table')."


def test_files_that_may_not_be_read_are_named(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    path = tmp_path / "locked.toml"
    path.write_text("1 2\n2 3\n")

    def refuse(_: Path) -> bytes:
        raise PermissionError(13, "Permission denied")

    monkeypatch.setattr(Path, "read_bytes", refuse)
    for read in (read_scenario, read_numbers):
        with pytest.raises(InputError, match=r"locked\.toml: the file cannot be read: Permission denied"):
            read(path)
