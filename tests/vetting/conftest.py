"""Tables as they would be sent, made of arrays."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest

from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.table import Column, SentTable

FIRST_LINE = 2
"""Line of the file in which the first row stands."""


@pytest.fixture
def printed() -> Callable[..., Column]:
    """A column printed to so many decimals: printed("n", values, 5), its unit and what that is in SI."""

    def make(quantity: Any, values: Any, decimals: int, unit: str = "", si: float = 1.0) -> Column:
        cells = tuple(f"{value:.{decimals}f}" for value in np.asarray(values, dtype=float))
        return Column(
            quantity=quantity,
            header=quantity,
            unit=unit,
            cells=cells,
            values=np.array([float(cell) for cell in cells]) * si,
            half_unit=np.full(len(cells), 0.5 * 10.0**-decimals * si),
        )

    return make


@pytest.fixture
def sent() -> Callable[..., SentTable]:
    """A table over wavelengths in nm: sent(nm, column, column…); further fields by name."""

    def make(nm: Any, *columns: Column, **fields: Any) -> SentTable:
        nm = np.asarray(nm, dtype=float)
        known: dict[str, Any] = {
            "file": "table.csv",
            "sha256": "0" * 64,
            "lines": np.arange(FIRST_LINE, FIRST_LINE + len(nm)),
            "axis": "wavelength",
            "axis_unit": "nm",
            "axis_cells": tuple(f"{value:g}" for value in nm),
            "axis_values": nm,
            "omega": TWO_PI_C / (nm * 1e-9),
        }
        return SentTable(columns=columns, **(known | fields))

    return make
