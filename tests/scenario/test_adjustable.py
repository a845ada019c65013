"""Ranges and lists in element tables: what they mean, and what is refused."""

from __future__ import annotations

import pytest

from pulseprop.errors import InputError
from pulseprop.scenario.build import build
from pulseprop.scenario.read import Scenario, scenario_from

PULSE = {"shape": "gaussian", "centre": "800 nm", "duration": "30 fs"}


def scenario(value: object, key: str = "thickness") -> Scenario:
    slab = {"kind": "slab", "medium": "fused silica", "thickness": "1 mm", key: value}
    return scenario_from({"pulse": PULSE, "path": [slab]})


def test_a_range_keeps_its_own_unit_and_converts_the_others() -> None:
    (setting,) = scenario({"from": "500 um", "to": "8 mm", "now": "0.1 cm", "held": "20 um"}).settings
    assert (setting.unit, setting.unit_size) == ("mm", 1e-3)
    assert (setting.low, setting.high, setting.now) == pytest.approx((0.5, 8.0, 1.0))
    assert setting.held == pytest.approx(0.02)
    assert setting.step is None


def test_todays_value_stands_for_a_range() -> None:
    content = scenario({"from": "1 mm", "to": "8 mm", "now": "3 mm"}).content
    assert content.path[0].thickness == pytest.approx(3e-3)


def test_a_list_of_numbers_is_counted_in_the_unit_of_the_first() -> None:
    at_hand = {"kind": "slab", "medium": "sapphire", "thickness": ["1 mm", "2000 um"]}
    found = scenario_from({"pulse": PULSE, "path": [], "compensate": {"with": [at_hand]}}).settings
    assert (found[0].choices, found[0].unit) == (pytest.approx((1.0, 2.0)), "mm")
    assert found[0].keys == ("compensate", "with", 0, "thickness")


def test_a_list_may_say_what_stands_today() -> None:
    found = scenario({"choices": ["fused silica", "SF10"], "now": "SF10"}, "medium")
    assert found.content.path[0].medium == "SF10"


def test_a_value_goes_back_into_the_table_without_a_change() -> None:
    (setting,) = scenario({"from": "1 mm", "to": "8 mm"}).settings
    assert setting.raw(2.3456789012345678) == "2.345678901234568 mm"


def test_a_pulse_is_not_sent_through_an_open_range() -> None:
    with pytest.raises(InputError, match=r"path\.1\.thickness.*without today's value.*Add `now`"):
        build(scenario({"from": "1 mm", "to": "8 mm"}))


@pytest.mark.parametrize(
    ("value", "part"),
    [
        ({"from": "8 mm", "to": "1 mm"}, "a range ends before it begins"),
        ({"from": "1 mm"}, "a range needs both ends"),
        ({"from": "1 mm", "to": "8 fs"}, "the units do not fit together"),
        ({"from": "1 mm", "to": 8}, "the units do not fit together"),
        ({"from": "1 mm", "to": "8 mm", "step": "0 mm"}, "a step must lead on"),
        ({"from": "1 mm", "to": "8 mm", "nw": "2 mm"}, 'there is no key "nw" here.*Did you mean "now"'),
        ({"choices": [], "now": "2 mm"}, "choices are a list of values"),
        ({"choices": ["1 mm"], "now": "2 mm"}, "today's value is none of the choices"),
        ({"choices": ["1 mm", "2 fs"]}, "the units of the choices do not fit together"),
        ({"choices": ["1 mm"], "from": "2 mm"}, "a setting is a range or a list"),
        ({"from": "a mm", "to": "2 mm"}, "this is no number with a unit"),
        ({"from": "1 quux", "to": "2 quux"}, "quux"),
    ],
)
def test_what_is_no_setting_is_refused_with_its_place(value: object, part: str) -> None:
    with pytest.raises(InputError, match=part) as caught:
        scenario(value)
    assert "path.1.thickness" in str(caught.value)


def test_a_goal_and_its_target_fit_together() -> None:
    wrong = {"goal": "duration", "target": 0.95}
    with pytest.raises(InputError, match=r'compensate\.target.*no target of the goal "duration"'):
        scenario_from({"pulse": PULSE, "path": [], "compensate": wrong})
    right = {"goal": "duration", "target": "12 fs"}
    found = scenario_from({"pulse": PULSE, "path": [], "compensate": right}).content.compensate
    assert found is not None
    assert found.target_si == pytest.approx(12e-15)


def test_a_place_belongs_to_compensators_at_hand() -> None:
    with pytest.raises(InputError, match="a place belongs to"):
        scenario("end", "place")
