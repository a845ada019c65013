"""Every scenario of the folder is run and held to the answer that it states.

Where the stated values come from stands in each file above [expect]; test_expected_values works them out
again without the program.
"""

from __future__ import annotations

import math
import re
from functools import cache
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from scipy.special import jn_zeros

import pulseprop as pp

SCENARIOS = Path(__file__).parents[2] / "scenarios"
FILES = sorted(SCENARIOS.glob("*.toml"))
CALLING = ("name", "code")
"""Keys by which an entry of a list may be called in place of its number."""


@cache
def asked(name: str) -> Any:
    """What the scenario asks for: its pulse sent, or what undoes its path."""
    file = SCENARIOS / f"{name}.toml"
    return pp.send(file) if pp.read(file).content.compensate is None else pp.compensate(file)


def run_of(name: str) -> Any:
    """Of a compensation, the best design as it was sent."""
    answer = asked(name)
    return getattr(answer, "run", answer)


@cache
def answer_of(name: str) -> dict[str, Any]:
    answer = asked(name).as_json()
    assert isinstance(answer, dict)
    return answer


def found(holder: Any, key: str) -> Any:
    """What stands at a dotted key; entries of lists by number from 1, by name or by code."""
    if not key:
        return holder
    if isinstance(holder, list):
        named = {
            item[call]: item for item in holder if isinstance(item, dict) for call in CALLING if call in item
        }
        numbered = {str(number): item for number, item in enumerate(holder, start=1)}
        holder = {**numbered, **named}
    assert isinstance(holder, dict), f"nothing stands below {key!r}"
    fitting = [name for name in holder if key == name or key.startswith(f"{name}.")]
    assert fitting, f"no {key!r} among {', '.join(holder)}"
    name = max(fitting, key=len)
    return found(holder[name], key[len(name) + 1 :])


def expectations() -> list[Any]:
    return [
        pytest.param(file.stem, key, id=f"{file.stem}-{key}")
        for file in FILES
        for key in pp.read(file).content.expect
    ]


def test_there_are_at_least_eight() -> None:
    assert len(FILES) >= 8


@pytest.mark.parametrize(("name", "key"), expectations())
def test_answer(name: str, key: str) -> None:
    expected = pp.read(SCENARIOS / f"{name}.toml").content.expect[key]
    answer = found(answer_of(name), key)
    if isinstance(expected, str | bool):
        assert answer == expected
        return
    value, tolerance = expected
    assert isinstance(answer, int | float)
    assert math.isfinite(answer)
    assert abs(answer - value) <= tolerance, f"{answer:.8g}, but {value:.8g} +- {tolerance:g} is expected"


@pytest.mark.parametrize("file", FILES, ids=lambda file: file.stem)
def test_says_what_it_asks_and_that_it_is_invented(file: Path) -> None:
    content = pp.read(file).content
    assert content.title
    assert content.question.endswith("?")
    assert content.answer.endswith(".")
    assert "Larkmoor Bench, an invented laboratory" in content.laboratory
    assert content.laboratory.endswith("data are invented.")
    assert len(content.expect) >= 4


@pytest.mark.parametrize("file", FILES, ids=lambda file: file.stem)
def test_run_carries_question_and_origin(file: Path) -> None:
    run = run_of(file.stem)
    content = pp.read(file).content
    assert run.scenario == content.title
    assert run.question == content.question
    assert content.laboratory in run.note
    assert asked(file.stem).exit_code == 0


def test_the_table_of_contents_names_each_with_its_question_and_answer() -> None:
    table = (SCENARIOS / "README.md").read_text(encoding="utf-8")
    rows = {
        cells[0].strip("`"): (cells[1], cells[2])
        for line in table.splitlines()
        if (cells := [cell.strip() for cell in line.strip("|").split("|")]) and cells[0].endswith(".toml`")
    }
    contents = {file.name: pp.read(file).content for file in FILES}
    rows = {name: row for name, row in rows.items() if "/" not in name}
    assert rows == {name: (content.question, content.answer) for name, content in contents.items()}


@pytest.mark.parametrize("name", ["thz_gas", "measured_waveform"])
def test_fields_of_a_single_cycle_are_real(name: str) -> None:
    assert run_of(name).fields.form == "field"


def test_first_dark_instant_of_the_ringing() -> None:
    """2 sqrt(b t / T2) = 3.8317, the first zero of J1, with b = 6 and T2 = 16 ps (Burnham and Chiao 1969)."""
    fields = run_of("vapour_ringing").fields
    power = np.abs(fields.envelope_out) ** 2
    time = fields.grid_out.time * 1e12
    zero = jn_zeros(1, 1)[0] ** 2 / 4 * 16 / 6
    near = np.flatnonzero(np.abs(time - zero) < 3)
    dark = near[np.argmin(power[near])]
    assert power[dark] < 1e-4 * power[np.argmin(np.abs(time - 2))]
    assert time[dark] == pytest.approx(zero, rel=5e-3)


def test_a_second_piece_of_glass_tells_the_sign() -> None:
    """Closed form for a Gaussian: the autocorrelation is sqrt(2) times as wide as the pulse."""
    fit = answer_of("measured_spectrum")["autocorrelation"]
    added = 36.162 * fit["glass_mm"]  # fs^2/mm of fused silica at 800 nm, I. H. Malitson 1965
    for sign, key in ((1, "fwhm_if_positive_fs"), (-1, "fwhm_if_negative_fs")):
        width = math.sqrt(2) * 25 * math.hypot(1, 4 * math.log(2) * (sign * 400 + added) / 25**2)
        assert fit[key] == pytest.approx(width, rel=0.02)


def test_stated_places_of_the_answers_are_their_numbers() -> None:
    """The answer in words gives the duration that leaves, where it gives one in fs."""
    spoken = {
        "cryostat": 182,
        "argon_metre": 10.2,
        "brewster_plate": 43,
        "coolant_mixture": 64,
        "vendor_crystal": 61,
    }
    for name, number in spoken.items():
        words = pp.read(SCENARIOS / f"{name}.toml").content.answer
        assert re.search(rf"\b{number:g} fs\b", words)
        digits = len(f"{number:g}".replace(".", ""))
        assert float(f"{answer_of(name)['pulse_out']['fwhm_fs']:.{digits}g}") == pytest.approx(number)
