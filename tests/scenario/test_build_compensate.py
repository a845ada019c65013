"""From a scenario's ranges and lists to the question of compensation."""

from __future__ import annotations

import pytest

from pulseprop.errors import InputError
from pulseprop.scenario.build_compensate import problem_of
from pulseprop.scenario.read import scenario_from

PULSE = {"shape": "gaussian", "centre": "800 nm", "duration": "20 fs"}
GLASS = {"kind": "slab", "name": "glass", "medium": "fused silica", "thickness": "5 mm"}


def problem(path, at_hand=(), **compensate):
    return problem_of(
        scenario_from(
            {"pulse": PULSE, "path": list(path), "compensate": {"with": list(at_hand), **compensate}},
            file="made up.toml",
        )
    )


def test_units_of_the_bench_become_si_and_go_back():
    pair = {
        "kind": "grating pair", "name": "pair", "grooves": "300 /mm",
        "incidence": {"from": "8 deg", "to": "12 deg", "now": "10 deg", "held": "1 mrad"},
        "separation": {"from": "0.5 mm", "to": "8 mm"},
    }  # fmt: skip
    (part,) = problem([pair]).parts
    incidence, separation = part.adjustments
    assert (incidence.low, incidence.high, incidence.now) == pytest.approx(
        (0.139626, 0.20944, 0.174533), rel=1e-5
    )
    assert incidence.sigma == pytest.approx(1e-3)
    assert (separation.low, separation.high, separation.unit, separation.unit_size) == (
        5e-4,
        8e-3,
        "mm",
        1e-3,
    )
    (built,) = part.build({"incidence": 0.18, "separation": 3e-3})
    assert (built.incidence, built.separation) == pytest.approx((0.18, 3e-3), rel=1e-12)


def test_ranges_inside_lists():
    lens = {
        "kind": "lens", "name": "lens", "focal_length": "100 mm",
        "glasses": [
            {"medium": "N-BK7", "centre_thickness": {"from": "2 mm", "to": "6 mm"}},
            {"medium": ["SF10", "F2"], "centre_thickness": "2 mm"},
        ],
    }  # fmt: skip
    (part,) = problem([lens]).parts
    assert [one.parameter for one in part.adjustments] == ["glasses.1.centre_thickness", "glasses.2.medium"]
    (built,) = part.build({"glasses.1.centre_thickness": 5e-3, "glasses.2.medium": "F2"})
    assert built.length == pytest.approx(7e-3)
    assert [medium.name for medium in built.media] == ["N-BK7", "F2"]


def test_ranges_inside_a_repeat():
    passes = {"kind": "repeat", "name": "cavity", "times": {"from": 1, "to": 5}, "elements": [GLASS]}
    (part,) = problem([passes]).parts
    (times,) = part.adjustments
    assert times.values == (1, 2, 3, 4, 5)
    (built,) = part.build({"times": 4})
    assert built.length == pytest.approx(20e-3)


def test_no_bounces_are_no_element():
    mirrors = {
        "kind": "chirped mirror",
        "name": "mirrors",
        "gdd": "-40 fs^2",
        "bounces": {"from": 0, "to": 4},
    }
    part = problem([GLASS], [mirrors]).parts[1]
    assert part.build({"bounces": 0.0}) == ()
    assert len(part.build({"bounces": 2.0})) == 1


def test_an_ordered_mirror_is_known_by_its_open_orders():
    made = {"kind": "chirped mirror", "gdd": {"from": "-80 fs^2", "to": "0 fs^2"}, "bounces": 4}
    bought = {"kind": "chirped mirror", "gdd": "-40 fs^2", "bounces": {"from": 0, "to": 4}}
    _, first, second = problem([GLASS], [made, bought]).parts
    assert (first.to_order, second.to_order) == (True, False)


@pytest.mark.parametrize(
    ("path", "at_hand", "message"),
    [
        ([GLASS], [], "there is nothing to set"),
        (
            [GLASS],
            [{**GLASS, "name": "other", "place": "after:wall"}],
            "no element of the path has this name",
        ),
        ([{**GLASS, "thickness": {"from": "3 mm", "to": "1 mm"}}], [], "a range ends before it begins"),
        ([{**GLASS, "medium": ["fused silica", "fused silicon"]}], [], "fused silicon"),
    ],
)
def test_what_cannot_be_asked_is_refused_with_its_place(path, at_hand, message):
    def all_built() -> None:
        for part in problem(path, at_hand).parts:
            for one in part.adjustments:
                for value in one.values:
                    part.build({one.parameter: value})

    with pytest.raises(InputError, match=message) as caught:
        all_built()
    assert "made up.toml" in str(caught.value) or "compensate" in str(caught.value)
