"""What the printed digits of a column say of its rounding."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from pulseprop.vetting.printed_cells import half_units, significant_digits
from pulseprop.vetting.read_options import ReadOptions
from pulseprop.vetting.reading import read_table


@pytest.mark.parametrize(
    ("cells", "expected"),
    [
        (["1.450", "1.400"], [5e-4, 5e-4]),
        (["1.45", "1.4502"], [5e-5, 5e-5]),
        (["12", "7"], [0.5, 0.5]),
        (["1,450", "1,400"], [5e-4, 5e-4]),
        (["1.20e-3", "1.2e-4"], [5e-6, 5e-7]),
        (["2.0e-5", "0"], [5e-7, 5e-7]),
        (["0.1234", "0.001234"], [5e-5, 5e-7]),
        (["0.93", "0.120"], [5e-4, 5e-4]),
        (["1.23D-4", "1.2D-4"], [5e-7, 5e-7]),
        (["0.000", "0.00"], [5e-4, 5e-4]),
        (["1.4501234567890123", "1.45"], [5e-8, 5e-8]),
    ],
)
def test_half_a_unit_of_the_last_place(cells: list[str], expected: list[float]) -> None:
    values = np.array([float(cell.replace(",", ".").replace("D", "e")) for cell in cells])
    assert half_units(cells, values) == pytest.approx(expected)


def test_missing_cells_do_not_count() -> None:
    half = half_units(["1.45", "n.d.", "-"], np.array([1.45, np.nan, np.nan]))
    assert half[0] == pytest.approx(5e-3)
    assert np.isfinite(half).all()


def test_significant_digits() -> None:
    assert [significant_digits(cell) for cell in ("1.20e-3", "0.0120", "-7", "0")] == [3, 3, 1, 0]


@given(
    value=st.floats(0.001, 1000), places=st.integers(0, 7), others=st.lists(st.floats(0.5, 900), max_size=4)
)
def test_rounding_to_places_is_never_further_than_half_a_unit(
    value: float, places: int, others: list[float]
) -> None:
    truth = np.array([value, *others])
    cells = [f"{number:.{places}f}" for number in truth]
    printed = np.array([float(cell) for cell in cells])
    error = np.abs(printed - truth)
    assert np.all(error <= half_units(cells, printed) * (1 + 1e-6) + 1e-12)


def test_half_units_come_in_the_unit_of_the_values(tmp_path: Path) -> None:
    path = tmp_path / "t.csv"
    path.write_text("nm,%T,alpha (cm^-1)\n400.5,91.2,0.50\n401.0,91.25,0.51\n")
    (table,) = read_table(path, ReadOptions(uncertainty="transmittance=0.3%,alpha=2%"))
    transmittance, alpha = table.columns
    assert transmittance.half_unit == pytest.approx([5e-5, 5e-5])
    assert alpha.half_unit == pytest.approx([0.5, 0.5])
    assert table.axis_half_unit == pytest.approx([0.05, 0.05])
    assert transmittance.uncertainty == pytest.approx([0.003, 0.003])
    assert alpha.uncertainty == pytest.approx([1.0, 1.02])
