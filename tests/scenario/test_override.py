"""Overrides KEY=VALUE: by number, by name, new keys, and what is refused."""

from __future__ import annotations

import copy
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from pulseprop.errors import InputError
from pulseprop.scenario.override import overridden, set_value, split_override
from pulseprop.scenario.read import scenario_from

DOCUMENT: dict[str, Any] = {
    "pulse": {"shape": "gaussian", "centre": "800 nm", "duration": "30 fs"},
    "path": [
        {"kind": "slab", "name": "window", "medium": "x", "thickness": "3 mm"},
        {"kind": "slab", "name": "window no. 2", "medium": "x", "thickness": "3 mm"},
        {"kind": "slab", "name": "window no", "medium": "x", "thickness": "3 mm"},
        {"kind": "loss", "transmittance": 0.5},
    ],
    "medium": {"green filter": {"absorption": {"path_length": "2 mm"}}, "a.b": {"background": 1.5}},
}


@pytest.mark.parametrize(
    ("text", "keys", "value"),
    [
        ("pulse.duration=20 fs", ("pulse", "duration"), "20 fs"),
        ('pulse.duration="20 fs"', ("pulse", "duration"), "20 fs"),
        ("path.1.thickness=4 mm", ("path", 0, "thickness"), "4 mm"),
        ("path.window.thickness=4 mm", ("path", 0, "thickness"), "4 mm"),
        ("path.window no. 2.thickness=0.5 mm", ("path", 1, "thickness"), "0.5 mm"),
        ("path.window no.thickness=0.5 mm", ("path", 2, "thickness"), "0.5 mm"),
        ("path.4.transmittance=0.25", ("path", 3, "transmittance"), 0.25),
        ("path.1.keep=true", ("path", 0, "keep"), True),
        (
            "medium.green filter.absorption.path_length=1 mm",
            ("medium", "green filter", "absorption", "path_length"),
            "1 mm",
        ),
        ("medium.a.b.background=1.4", ("medium", "a.b", "background"), 1.4),
        ("grid.memory=4 GiB", ("grid", "memory"), "4 GiB"),
        ("grid.points=4096", ("grid", "points"), 4096),
        ("title=a = b", ("title",), "a = b"),
        ("path.1.note=x\ny", ("path", 0, "note"), "x\ny"),
        ("sweep=[]", ("sweep",), []),
        (' pulse.gdd = "5 fs^2" ', ("pulse", "gdd"), "5 fs^2"),
    ],
)
def test_an_override_lands_at_its_key(text: str, keys: tuple[str | int, ...], value: object) -> None:
    before = copy.deepcopy(DOCUMENT)
    changed, origins = overridden(DOCUMENT, [text])
    assert origins == {keys: text}
    found: Any = changed
    for key in keys:
        found = found[key]
    assert found == value
    assert before == DOCUMENT


def test_later_overrides_win() -> None:
    changed, _ = overridden(DOCUMENT, ["pulse.duration=20 fs", "pulse.duration=10 fs"])
    assert changed["pulse"]["duration"] == "10 fs"


def test_an_override_of_the_thickness_reaches_the_element() -> None:
    document = DOCUMENT | {"medium": {"x": {"background": 1.5}}}
    element = scenario_from(document, overrides=["path.window no. 2.thickness=0.5 mm"]).content.path[1]
    assert element.kind == "slab"
    assert element.thickness == 0.5e-3


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        ("pulse", ["--set", "'pulse'", "KEY=VALUE"]),
        ("=3", ["--set", "KEY=VALUE"]),
        ("pulse.duration=", ["--set", "KEY=VALUE"]),
        ("path.5.thickness=1 mm", ["--set, path.5.thickness", "no such entry (got '5')", "from 1 to 4"]),
        ("path.0.thickness=1 mm", ["--set", "no such entry (got '0')"]),
        (
            "path.windw.thickness=1 mm",
            ["--set", "no such entry (got 'windw')", "window no. 2", 'mean "window"?'],
        ),
        ("pulse.shape.x=1", ["--set, pulse.shape.x", "holds no others"]),
        ("pulse.duratoin=20 fs", ["--set, pulse.duratoin", 'no key "duratoin"', 'mean "duration"?']),
        ("pulze.duration=20 fs", ["--set, pulze", 'mean "pulse"?']),
        ("pulse.duration=20", ["--set, pulse.duration", "unit is missing (got 20)"]),
        ("path.1.thickness=-1 mm", ["--set, path.1.thickness", "out of bounds (got '-1 mm')"]),
        ("pulse.bandwidth=40 nm", ["--set, pulse.bandwidth", "exclude each other"]),
    ],
)
def test_a_bad_override_is_named_as_one(text: str, parts: list[str]) -> None:
    document = DOCUMENT | {"medium": {"x": {"background": 1.5}}}
    with pytest.raises(InputError) as caught:
        scenario_from(document, text="", file="case.toml", overrides=[text])
    for part in parts:
        assert part in str(caught.value)


names = st.text(alphabet="ab. 1", min_size=1, max_size=6).filter(
    lambda name: name == name.strip() and not name.isdigit()
)


@given(names=st.lists(names, min_size=1, max_size=4, unique=True), data=st.data())
def test_every_element_can_be_called_by_its_name(names: list[str], data: st.DataObject) -> None:
    index = data.draw(st.integers(0, len(names) - 1))
    document = {"path": [{"name": name} for name in names]}
    keys = set_value(document, f"path.{names[index]}.thickness", 1)
    claimed = [n for n in names if f"{names[index]}.thickness".startswith(n + ".")]
    assert keys[1] == names.index(max(claimed, key=len))


@given(
    value=st.text(alphabet="abc \"'[]{}=.,0123456789\n", min_size=1).filter(lambda text: bool(text.strip()))
)
def test_any_value_is_toml_or_text(value: str) -> None:
    key, read = split_override(f"k={value}")
    assert key == "k"
    assert read == value.strip() or not isinstance(read, str) or read in value
