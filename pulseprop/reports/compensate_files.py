"""Figures and tables of a compensation into a directory: for slides, for the bench, for the coater."""

from __future__ import annotations

import csv
import io
from collections.abc import Iterable, Iterator
from itertools import chain
from pathlib import Path

from pulseprop.compensation.result import Compensation
from pulseprop.propagation.result import Run
from pulseprop.reports.document import write_text
from pulseprop.reports.drawing import Drawing
from pulseprop.reports.figures import write_figures
from pulseprop.reports.section_order import order_items

__all__ = ["write_compensate_files"]

Rows = list[tuple[object, ...]]


def write_compensate_files(
    answer: Compensation, run: Run, drawn: Iterable[Drawing], directory: str | Path
) -> list[Path]:
    """PNG, SVG and CSV of the figures, and CSV of settings, tolerances and order sheets.

    The curve of a mirror to be ordered stands in the CSV of its figure. Raises InputError where the directory
    cannot be written.
    """
    written = write_figures(drawn, directory)
    for name, rows in chain(_settings(answer), _orders(answer, run)):
        written.append(Path(directory) / name)
        write_text(written[-1], _csv(rows))
    return written


def _settings(answer: Compensation) -> Iterator[tuple[str, Rows]]:
    settings: Rows = [("design", "element", "parameter", "value", "unit", "move")]
    tolerances: Rows = [("design", "element", "quantity", "unit", "less", "more", "held_to")]
    for number, design in enumerate(answer.designs, 1):
        settings += [
            (number, one.element, one.parameter, one.value, one.unit, one.move) for one in design.settings
        ]
        tolerances += [
            (number, one.element, one.parameter, one.unit, one.below, one.above, one.sigma)
            for one in design.tolerance
        ]
    yield "settings.csv", settings
    yield "tolerances.csv", tolerances


def _orders(answer: Compensation, run: Run) -> Iterator[tuple[str, Rows]]:
    best = answer.designs[0]
    rows: Rows = [("mirror", "item", "value")]
    for mirror in best.mirrors:
        rows += [(mirror.element, item, value) for item, value in order_items(mirror, best, run)]
    if best.mirrors:
        yield "order-sheet.csv", rows


def _csv(rows: Rows) -> str:
    buffer = io.StringIO()
    csv.writer(buffer, lineterminator="\n").writerows([[_cell(value) for value in row] for row in rows])
    return buffer.getvalue()


def _cell(value: object) -> object:
    if value is None:
        return ""
    return f"{value:.9g}" if isinstance(value, float) else value
