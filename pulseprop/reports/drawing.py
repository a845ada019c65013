"""A finished figure with its words and its numbers."""

from __future__ import annotations

import csv
import io
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from itertools import zip_longest
from math import isfinite
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from pulseprop.propagation.result import Run
from pulseprop.reports.figure_style import svg_of

if TYPE_CHECKING:
    from matplotlib.figure import Figure

__all__ = ["Drawing", "csv_text", "source_line"]


@dataclass(frozen=True, kw_only=True, eq=False)
class Drawing:
    """name: of files and anchors. caption: what it shows, in a sentence, also read aloud in place of it.

    columns: the numbers in it, unit last in each heading; columns may differ in length.
    """

    name: str
    caption: str
    figure: Figure
    columns: Mapping[str, NDArray[np.float64] | tuple[str, ...]]

    @cached_property
    def svg(self) -> str:
        """The figure as markup, drawn once for page and directory."""
        return svg_of(self.figure, self.name)


def csv_text(drawing: Drawing) -> str:
    """The numbers as comma-separated values; cells where a column has ended or has no answer are empty."""
    buffer = io.StringIO()
    writer = csv.writer(buffer, lineterminator="\n")
    writer.writerow(drawing.columns)
    writer.writerows(zip_longest(*(_cells(column) for column in drawing.columns.values()), fillvalue=""))
    return buffer.getvalue()


def _cells(column: NDArray[np.float64] | tuple[str, ...]) -> list[str]:
    if isinstance(column, tuple):
        return list(column)
    return [f"{value:.9g}" if isfinite(value) else "" for value in column.tolist()]


def source_line(run: Run) -> str:
    """Small print: what was computed, from what, by what."""
    media = ", ".join(medium.name for medium in run.media)
    parts = [run.scenario, f"media: {media}" if media else "", f"pulseprop {run.version}"]
    text = " · ".join(part for part in parts if part)
    return text if len(text) <= 150 else text[:149] + "…"
