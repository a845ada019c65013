"""Line and column of every kind of TOML key."""

from __future__ import annotations

import pytest

from pulseprop.scenario.places import Keys, key_path, places_in

TEXT = """\
title = "x" # comment
[pulse]
a.b = 3
[[path]]
"k x" = { c = 1, d = [1, { e = 2 }] }
# comment
[[path]]
kind = "slab"
[medium."é y".formula]
z = 1
[[medium."é y".lines]]
w = "é"
[[medium."é y".lines]]
"é" = { w = 2 }
[[path.inner]]
deep = 1
"""


@pytest.mark.parametrize(
    ("keys", "key_place", "value_place"),
    [
        (("title",), (1, 1), (1, 9)),
        (("pulse",), (2, 2), (2, 2)),
        (("pulse", "a", "b"), (3, 1), (3, 7)),
        (("path", 0), (4, 3), (4, 3)),
        (("path", 0, "k x"), (5, 1), (5, 9)),
        (("path", 0, "k x", "d", 1, "e"), (5, 28), (5, 32)),
        (("path", 1, "kind"), (8, 1), (8, 8)),
        (("medium", "é y", "formula", "z"), (10, 1), (10, 5)),
        (("medium", "é y", "lines", 0, "w"), (12, 1), (12, 5)),
        (("medium", "é y", "lines", 1, "é", "w"), (14, 9), (14, 13)),
        (("path", 1, "inner", 0, "deep"), (16, 1), (16, 8)),
        (("path", 1, "missing"), (7, 3), (7, 3)),
    ],
)
def test_keys_and_values_have_places(
    keys: Keys, key_place: tuple[int, int], value_place: tuple[int, int]
) -> None:
    places = places_in(TEXT)
    assert places.of_key(keys) == key_place
    assert places.of_value(keys) == value_place


def test_what_the_text_does_not_hold_has_no_place() -> None:
    assert places_in(TEXT).of_key(("grid", "points")) is None


def test_list_entries_are_counted_from_one_for_people() -> None:
    assert key_path(("path", 1, "thickness")) == "path.2.thickness"
