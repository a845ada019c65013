"""Keys that a run does not use are told, not dropped."""

from __future__ import annotations

import pytest

from pulseprop.scenario.build import build
from pulseprop.scenario.read import read_scenario

SCENARIO = """
title = "a fibre"
note = "Invented."
[pulse]
shape = "gaussian"
centre = "800 nm"
duration = "30 fs"
energy = "1 nJ"
[[path]]
kind = "slab"
medium = "m"
thickness = "1 mm"
[medium.m]
background = 1.5
[medium.m.kerr]
n2 = "2.6e-20 m^2/W"
"""


@pytest.fixture
def warnings(tmp_path):
    def of(more: str) -> tuple[str, ...]:
        (tmp_path / "fibre.toml").write_text(SCENARIO + more)
        return build(read_scenario(tmp_path / "fibre.toml")).warnings

    return of


def test_what_a_linear_path_leaves_aside(warnings):
    said = warnings("steepening = true\n[propagation]\nlocal_error = 1e-6\n")
    assert "medium.m.kerr: steepening not used: the path is taken as linear" in said
    assert any("local_error is not used" in warning for warning in said)


def test_what_is_used_needs_no_word(warnings):
    assert warnings("") == ()
