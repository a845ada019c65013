"""The budget of elements made of others: a row each for what they are made of, and what they tell."""

from __future__ import annotations

import pulseprop as pp
from pulseprop.reports.text import text_report
from pulseprop.scenario.read import scenario_from

LENS = {
    "kind": "lens",
    "name": "achromat",
    "focal_length": "100 mm",
    "glasses": [
        {"medium": "N-BK7", "centre_thickness": "4 mm"},
        {"medium": "SF10", "centre_thickness": "2 mm"},
    ],
}
CAVITY = {
    "kind": "repeat",
    "name": "cavity",
    "times": 3,
    "path": [
        {"kind": "lens", "name": "eye", "glasses": LENS["glasses"][:1], "focal_length": "100 mm"},
        {"kind": "slab", "name": "etalon", "medium": "YAG", "thickness": "1 mm", "faces": "echoes"},
    ],
}
PULSE = {
    "shape": "gaussian",
    "centre": "800 nm",
    "duration": "30 fs",
    "beam_radius": "5 mm",
    "energy": "1 nJ",
}


def lines(*path: dict) -> list[str]:
    return text_report(pp.send(scenario_from({"pulse": PULSE, "path": list(path)}))).splitlines()


def test_glasses_stand_below_their_lens() -> None:
    """4 mm N-BK7 and 2 mm SF10 at 800 nm: 178.6 and 318.9 fs^2."""
    said = lines(LENS)
    first = next(i for i, line in enumerate(said) if line.startswith("achromat "))
    assert [line.split()[:2] for line in said[first : first + 3]] == [
        ["achromat", "497.5"],
        ["-", "4"],
        ["-", "2"],
    ]
    assert "178.6" in said[first + 1]
    assert "318.9" in said[first + 2]


def test_what_elements_tell_stands_below_the_table() -> None:
    said = " ".join(lines(LENS))
    assert "achromat: difference of arrival between marginal and axial ray: not known" in said


def test_a_repeat_has_one_row_and_its_parts_still_tell() -> None:
    """|lambda dn/dlambda| / (n - 1) = 0.031077 of N-BK7 at 800 nm: 13.0 fs at 5 mm and f = 100 mm."""
    said = lines(CAVITY)
    (row,) = [line for line in said if line.startswith("cavity")]
    assert "3 times eye, etalon" in row
    assert not any(line.startswith("- ") for line in said)
    assert any("eye: the ray at 5 mm arrives 13.0 fs before the axial one" in line for line in said)
    assert "Echoes of etalon" in " ".join(said)
