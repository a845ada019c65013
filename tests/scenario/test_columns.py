"""Columns as the scenario describes them: SI, ascending, swapped columns and wrong units caught."""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.scenario.columns import Columns, spectral_columns, time_columns
from pulseprop.scenario.schema_files import IndexFile, SpectrumFile, TraceFile

LIGHT = 299792458.0
GLASS = [(0.4, 1.4701), (0.5, 1.4623), (0.6, 1.4580), (0.8, 1.4533), (1.0, 1.4504), (1.6, 1.4434)]
"""Fused silica in um, from the formula of Malitson (1965), rounded to four places."""


def index_columns(directory: Path, text: str, unit: str = "um", **keys: object) -> Columns:
    path = directory / "glass.csv"
    path.write_text(text)
    return spectral_columns(
        path, IndexFile.model_validate({"file": "glass.csv", "x_unit": unit} | keys), index=True
    )


def rows(pairs: list[tuple[float, float]]) -> str:
    return "".join(f"{x},{y}\n" for x, y in pairs)


@pytest.mark.parametrize("pairs", [GLASS, GLASS[::-1]])
def test_wavelengths_become_rising_angular_frequencies(
    tmp_path: Path, pairs: list[tuple[float, float]]
) -> None:
    columns = index_columns(tmp_path, rows(pairs))
    expected = [2 * math.pi * LIGHT / (x * 1e-6) for x, _ in GLASS[::-1]]
    assert columns.x == pytest.approx(expected, rel=1e-14)
    assert columns.y.tolist() == [y for _, y in GLASS[::-1]]
    assert columns.table.places[columns.y_column] == 4
    assert columns.beside() is None


def test_further_columns_follow_the_order(tmp_path: Path) -> None:
    columns = index_columns(tmp_path, "um,n,k\n0.4,1.47,3e-8\n0.5,1.46,2e-8\n")
    beside = columns.beside()
    assert beside is not None
    assert beside.tolist() == [2e-8, 3e-8]
    assert np.array_equal(beside, columns.beside("k"))  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("text", "unit", "part"),
    [
        (rows([(n, x) for x, n in GLASS]), "um", "varies less than column 2"),
        (rows([(n, 1000 * x) for x, n in GLASS]), "nm", "column 2 fits the unit nm, column 1 does not"),
        ("n,wavelength\n" + rows([(n, x) for x, n in GLASS]), "um", 'headers are "n" and "wavelength"'),
        (rows([(1.5, 0.4), (1.6, 0.5), (1.55, 0.6)]), "um", "column 2 is in order and column 1 is not"),
    ],
)
def test_swapped_columns_are_named_as_such(tmp_path: Path, text: str, unit: str, part: str) -> None:
    with pytest.raises(InputError) as caught:
        index_columns(tmp_path, text, unit)
    message = str(caught.value)
    assert "glass.csv" in message
    assert "look swapped" in message
    assert part in message
    assert "x_column and y_column" in message


def test_swapped_columns_can_be_said_to_be_meant(tmp_path: Path) -> None:
    columns = index_columns(tmp_path, rows([(n, x) for x, n in GLASS]), x_column=2, y_column=1)
    assert columns.y.tolist() == [y for _, y in GLASS[::-1]]


@pytest.mark.parametrize(
    ("text", "unit", "parts"),
    [
        ("0.4,0.1\n0.5,0.2\n", "mm^", ["unit"]),
        (
            "0.4,0.1\n0.5,0.2\n",
            "nm",
            ["glass.csv:1", "no wavelength that could stand here (got '0.4 nm')", "x_unit"],
        ),
        ("0,1.5\n0.5,1.46\n", "um", ["glass.csv:1", "'0 um'"]),
        ("-0.4,1.5\n0.5,1.46\n", "um", ["glass.csv:1", "'-0.4 um'"]),
        ("0.4,1.5\n0.6,1.4\n0.5,1.46\n", "um", ["glass.csv:3", "out of order (got '0.5')"]),
    ],
)
def test_numbers_that_do_not_fit_are_refused(tmp_path: Path, text: str, unit: str, parts: list[str]) -> None:
    with pytest.raises((InputError, ValueError)) as caught:
        index_columns(tmp_path, text, unit)
    for part in parts:
        assert part in str(caught.value)


def test_a_spectrum_over_frequency_stays_in_order(tmp_path: Path) -> None:
    path = tmp_path / "s.txt"
    path.write_text("THz counts\n370 1\n375 9\n380 2\n")
    spec = SpectrumFile.model_validate({"file": "s.txt", "x": "frequency", "x_unit": "THz", "y": "counts"})
    assert spectral_columns(path, spec).x == pytest.approx(
        2e12 * math.pi * np.array([370, 375, 380]), rel=1e-15
    )


def test_a_trace_is_in_seconds(tmp_path: Path) -> None:
    path = tmp_path / "e.txt"
    path.write_text("-0.1 0.5\n0 1\n0.1 -0.5\n")
    columns = time_columns(path, TraceFile.model_validate({"file": "e.txt", "x_unit": "ps"}))
    assert columns.x == pytest.approx([-1e-13, 0, 1e-13])
    assert columns.y.tolist() == [0.5, 1, -0.5]
    path.write_text("0.5 1\n0.2 2\n0.7 3\n")
    with pytest.raises(InputError, match="look swapped"):
        time_columns(path, TraceFile.model_validate({"file": "e.txt", "x_unit": "ps"}))
