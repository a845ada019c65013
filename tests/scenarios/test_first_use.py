"""What a first user of the scenarios types wrongly, and what the program answers."""

from __future__ import annotations

from pathlib import Path

import pytest

import pulseprop as pp
from pulseprop.errors import InputError

SCENARIOS = Path(__file__).parents[2] / "scenarios"


def complaint(name: str, override: str) -> str:
    with pytest.raises(InputError) as caught:
        pp.send(SCENARIOS / f"{name}.toml", [override])
    return str(caught.value)


def test_an_unknown_medium_is_blamed_where_it_was_typed() -> None:
    message = complaint("cryostat", "path.focusing achromat.glasses.1.medium=BK7")
    assert message.startswith("--set, path.3.glasses.1.medium: ")
    assert "'N-BK7'" in message


def test_an_anchor_is_blamed_in_the_scenario_not_in_the_table() -> None:
    message = complaint("green_filter", "medium.green filter.anchor.1.index=1.49")
    assert "green_filter.toml" in message.partition(": the anchor")[0]
    assert "green_filter.csv" not in message


def test_a_bad_row_is_blamed_in_the_table() -> None:
    message = complaint("green_filter", "medium.green filter.absorption.x_column=2")
    assert message.partition(",")[0].endswith("green_filter.csv:4")


def test_a_pulse_out_of_range_names_file_and_medium() -> None:
    message = complaint("coolant_mixture", 'pulse.centre="1100 nm"')
    assert "coolant_mixture.toml, medium coolant: " in message
    assert "185 nm to 1129 nm" in message


@pytest.mark.parametrize(("override", "warned"), [("title=same", False), ('pulse.centre="890 nm"', True)])
def test_a_pulse_beyond_the_rows_of_a_measured_absorption_is_warned_of(override: str, warned: bool) -> None:
    run = pp.send(SCENARIOS / "green_filter.toml", [override])
    said = [
        warning for warning in run.warnings if "beyond the rows of green filter, 350 to 900 nm" in warning
    ]
    assert bool(said) == warned


@pytest.mark.parametrize(("peak", "passive"), [("8 cm^-1", True), ("-1e-9 cm^-1", False)])
def test_a_line_that_amplifies_is_not_passive(peak: str, passive: bool) -> None:
    override = f'medium.cell vapour.lines.1.peak_absorption="{peak}"'
    assert pp.send(SCENARIOS / "vapour_ringing.toml", [override]).causality.passive == passive


def test_lengths_are_told_as_the_trade_tells_them() -> None:
    rows = pp.send(SCENARIOS / "cryostat.toml").elements
    assert rows[0].detail.startswith("3 m ")
    assert rows[1].parts[1].detail == "0.8 mm MgF2 e"
