"""The sentence that answers says on what it rests."""

from __future__ import annotations

import pulseprop as pp

SCENARIO = """
title = "a wave where the record of air has no data"
note = "Invented."
[pulse]
shape = "gaussian"
centre = "0.8 THz"
duration = "2 ps"
[[path]]
kind = "slab"
medium = "air"
thickness = "1 m"
[grid]
beyond_range = "causal"
"""


def test_a_guess_is_told_in_the_headline(tmp_path):
    """The record of air ends at 1.69 um: at 0.8 THz all of the energy is beyond it."""
    (tmp_path / "far.toml").write_text(SCENARIO)
    run = pp.send(tmp_path / "far.toml")
    assert "100 % of the energy lies where a record of the path has no data" in run.headline
    assert any("continued causally" in warning for warning in run.warnings)


def test_nothing_is_said_where_the_records_hold(tmp_path):
    (tmp_path / "near.toml").write_text(SCENARIO.replace("0.8 THz", "800 nm").replace("2 ps", "30 fs"))
    assert "no data" not in pp.send(tmp_path / "near.toml").headline
