"""Mistakes of a whole column with a definite repair: for each, the table as it may have been meant.

A repair is a guess until the numbers bear it out: it is named only where the repaired table has a factor of
at most 1 and the printed one has not.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass

import numpy as np

from pulseprop.units import to_si
from pulseprop.vetting.absorption_rows import TRANSMITTANCES, absorption_column, has_constant_index
from pulseprop.vetting.case import Case
from pulseprop.vetting.result import Finding
from pulseprop.vetting.retold import as_quantity, on_axis, only_rows, reordered, scaled, swapped, with_column
from pulseprop.vetting.table import Column, SentTable

__all__ = ["REPAIRS", "Repair", "mended_by"]

LN10 = float(np.log(10))

PER_LENGTH = {"cm^-1": 1e2, "mm^-1": 1e3, "um^-1": 1e6, "m^-1": 1.0}

AXES = (
    ("wavelength", "nm", 100.0, 20e3),
    ("wavelength", "um", 0.1, 100.0),
    ("frequency", "THz", 20.0, 3e3),
    ("wavenumber", "cm^-1", 400.0, 1e5),
    ("photon energy", "eV", 0.05, 15.0),
)
"""What numbers on the axis may mean, and between which of them."""

BROKEN = 1.5
"""Factor above which a column's mistake is looked for; below it rounding is as good a reason."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Repair:
    """code and problem: of the finding; words: what would mend it; table: as it would then be."""

    code: str
    problem: str
    words: str
    table: SentTable


def mended_by(case: Case) -> Iterator[Finding]:
    """The repairs that bring the factor to 1 or below, the best first.

    The mistakes are tried from the commonest on; of several that mend the numbers the one with the smallest
    factor is the error, the others are notes.
    """
    if case.factor is None or case.factor <= BROKEN or has_constant_index(case.table):
        return
    mended: list[tuple[float, Repair]] = []
    for propose in REPAIRS:
        for repair in propose(case.table):
            factor = case.factor_of(repair.table)
            if factor is not None and factor <= 1:
                mended.append((factor, repair))
    mended.sort(key=lambda pair: pair[0])
    for place, (factor, repair) in enumerate(mended):
        yield Finding(
            code=repair.code,
            severity="error" if place == 0 else "note",
            text=repair.problem if place == 0 else f"Another reading would do as well: {repair.problem}",
            repair=repair.words,
            factor_after_repair=factor,
        )


def reversed_order(table: SentTable) -> Iterator[Repair]:
    """A column sorted the other way round than the axis."""
    backwards = np.arange(len(table.omega))[::-1]
    main = _columns(table)
    for column in main:
        yield Repair(
            code="reversed-order",
            problem=f"The {_named(column)} column stands in reverse order against the axis.",
            words=f"turn the {_named(column)} column round",
            table=with_column(table, column, reordered(column, backwards)),
        )
    if len(main) > 1:
        both = table
        for column in main:
            both = with_column(both, column, reordered(column, backwards))
        yield Repair(
            code="reversed-order",
            problem="The axis stands in reverse order against all other columns.",
            words="turn the axis round",
            table=both,
        )


def swapped_columns(table: SentTable) -> Iterator[Repair]:
    """Two columns of plain numbers under each other's heading."""
    index = table.column("n")
    if index is None:
        return
    for quantity in ("k", "group_index"):
        other = table.column(quantity)
        if other is not None:
            yield Repair(
                code="swapped-columns",
                problem=f"The columns n and {_named(other)} stand under each other's heading.",
                words=f"exchange the columns n and {_named(other)}",
                table=swapped(table, index, other),
            )


def wrong_logarithm(table: SentTable) -> Iterator[Repair]:
    """Base 10 for base e, or the other way round."""
    column = absorption_column(table)
    if column is None or column.quantity in TRANSMITTANCES:
        return
    for factor, taken, meant in ((1 / LN10, "base 10", "base e"), (LN10, "base e", "base 10")):
        yield Repair(
            code="wrong-logarithm",
            problem=f"The {_named(column)} column fits the index only with the other logarithm: it was "
            f"taken to {taken} where it is to {meant}, or turned so once too often (2.302585).",
            words=f"{'divide' if factor < 1 else 'multiply'} the {_named(column)} column by 2.302585",
            table=with_column(table, column, scaled(column, factor)),
        )


def k_alpha_absorbance(table: SentTable) -> Iterator[Repair]:
    """The absorption index for the absorption coefficient or absorbance, or the other way round."""
    column = absorption_column(table)
    if column is None or column.quantity in TRANSMITTANCES:
        return
    printed = _printed(column)
    if printed is None:
        return
    readings: list[tuple[str, Column]] = []
    if column.quantity != "k":
        readings.append(("k", as_quantity(printed, "k")))
    for unit, factor in PER_LENGTH.items():
        if not (column.quantity == "alpha" and np.allclose(column.values, factor * printed.values)):
            readings.append((f"alpha in {unit}", as_quantity(scaled(printed, factor), "alpha")))
    if table.thickness and column.quantity in ("k", "alpha"):
        readings.append(("absorbance (base 10)", as_quantity(printed, "absorbance")))
        readings.append(("absorbance (base e)", as_quantity(printed, "napierian")))
    for words, meant in readings:
        yield Repair(
            code="absorption-quantity",
            problem=f"The column taken as {_named(column)} fits the index only as {words}.",
            words=f"read the {_named(column)} column as {words}",
            table=with_column(table, column, meant),
        )


def percent_fraction(table: SentTable) -> Iterator[Repair]:
    """A transmittance in per cent for a fraction, or the other way round."""
    column = absorption_column(table)
    if column is None or column.quantity not in TRANSMITTANCES:
        return
    for factor, meant in ((100.0, "fractions"), (0.01, "per cent")):
        if np.nanmax(column.values) * factor <= 1 + np.max(column.half_unit) * factor:
            yield Repair(
                code="percent-fraction",
                problem=f"The {_named(column)} column fits the index only where its numbers are {meant}.",
                words=f"read the {_named(column)} column as {meant}",
                table=with_column(table, column, scaled(column, factor)),
            )


def face_loss(table: SentTable) -> Iterator[Repair]:
    """Transmittance through both faces called internal."""
    column = absorption_column(table)
    if column is not None and column.quantity == "internal_transmittance":
        yield Repair(
            code="fresnel-loss",
            problem="The transmittance called internal still holds the loss at both faces.",
            words="read the internal transmittance column as transmittance through both faces",
            table=with_column(table, column, as_quantity(column, "transmittance")),
        )


def shifted_rows(table: SentTable) -> Iterator[Repair]:
    """A column that slipped by one row against the axis."""
    count = len(table.omega)
    if count < 6:
        return
    for column in _columns(table):
        for step, words in ((1, "down"), (-1, "up")):
            rows = np.clip(np.arange(count) + step, 0, count - 1)
            moved = with_column(table, column, reordered(column, rows))
            keep = np.arange(count - 1) if step > 0 else np.arange(1, count)
            yield Repair(
                code="shifted-rows",
                problem=f"The {_named(column)} column stands one row too far {words}.",
                words=f"move the {_named(column)} column {'up' if step > 0 else 'down'} by one row",
                table=only_rows(moved, keep),
            )


def axis_meaning(table: SentTable) -> Iterator[Repair]:
    """A frequency, wavenumber or photon energy for a wavelength, or the other way round."""
    values = table.axis_values
    has_length = any(column.quantity not in ("n", "k") for column in _columns(table))
    for kind, unit, low, high in AXES:
        if not (np.min(values) >= low and np.max(values) <= high):
            continue
        flips = (kind == "wavelength") != (table.axis == "wavelength")
        if not flips and not (has_length and (kind.replace(" ", "_"), unit) != (table.axis, table.axis_unit)):
            continue
        yield Repair(
            code="axis-unit",
            problem=f"The axis taken as {table.axis.replace('_', ' ')} in {table.axis_unit} fits only as "
            f"{kind} in {unit}.",
            words=f"read the axis as {kind} in {unit}",
            table=on_axis(table, np.asarray(to_si(values, unit, "spectral"))),
        )


REPAIRS: tuple[Callable[[SentTable], Iterator[Repair]], ...] = (
    reversed_order,
    swapped_columns,
    wrong_logarithm,
    k_alpha_absorbance,
    percent_fraction,
    face_loss,
    axis_meaning,
    shifted_rows,
)


def _columns(table: SentTable) -> list[Column]:
    """The index and the absorption that the numbers are taken from."""
    return [column for column in (table.column("n"), absorption_column(table)) if column is not None]


def _named(column: Column) -> str:
    return column.quantity.replace("_", " ")


def _printed(column: Column) -> Column | None:
    """The plain numbers of the cells; None where one is none."""
    try:
        values = np.array([float(cell.replace(",", ".")) for cell in column.cells])
    except ValueError:
        return None
    nonzero = values != 0
    if not nonzero.any():
        return None
    ratio = float(np.median(column.values[nonzero] / values[nonzero]))
    return scaled(column, 1 / ratio) if ratio > 0 else None
