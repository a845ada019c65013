"""Lines in a file of their own: a line a row, columns named quantity_unit.

"centre_THz", "width_GHz", "peak_absorption_per_cm", "integrated_absorption_GHz_per_cm",
"number_density_per_cm3", "oscillator_strength": the quantity is a key of an inline line, the unit what
follows it, "per" a division and a digit behind a unit its power.
"""

from __future__ import annotations

import re
from pathlib import Path

from pydantic import ValidationError

from pulseprop.errors import InputError
from pulseprop.files.number_table import NumberTable, read_numbers
from pulseprop.scenario.complaints import findings_of
from pulseprop.scenario.schema_lines import LinesFile, LineTable
from pulseprop.scenario.suggest import did_you_mean

__all__ = ["lines_in", "quantity_and_unit"]

QUANTITIES = tuple(name for name in LineTable.model_fields if name != "wavelength_in")
BARE = ("oscillator_strength", "static_susceptibility")


def lines_in(path: Path, spec: LinesFile) -> list[LineTable]:
    """The lines of a file, as inline lines would be. Raises InputError with file, line and column for
    whatever is wrong."""
    table = read_numbers(path, columns=2, rows=1)
    heads = _heads(table)
    return [_line(table, row, heads, spec) for row in range(len(table.values))]


def quantity_and_unit(name: str) -> tuple[str, str] | None:
    """("peak_absorption", "1/cm") of "peak_absorption_per_cm"; None where it begins with no quantity of a
    line."""
    fitting = [quantity for quantity in QUANTITIES if name == quantity or name.startswith(quantity + "_")]
    if not fitting:
        return None
    quantity = max(fitting, key=len)
    words = name[len(quantity) + 1 :].replace("_", " ")
    unit = re.sub(r"\s*\bper\s+", "/", re.sub(r"(?<=[A-Za-z])(?=[0-9])", "^", words))
    return quantity, "1" + unit if unit.startswith("/") else unit


def _heads(table: NumberTable) -> list[tuple[str, str]]:
    """Quantity and unit of each column."""
    if not table.header:
        raise table.refused(
            "the columns have no names",
            allowed="a line above the rows such as centre_THz, width_GHz, peak_absorption_per_cm",
        )
    heads: list[tuple[str, str]] = []
    for name in table.header:
        head = quantity_and_unit(name)
        if head is None or (head[1] == "") != (head[0] in BARE):
            allowed = f"a quantity and its unit, such as centre_THz; quantities: {', '.join(QUANTITIES)}"
            remedy = did_you_mean(name, QUANTITIES)
            raise table.refused("a column has no usable name", value=name, allowed=allowed, remedy=remedy)
        if head[0] in dict(heads):
            raise table.refused(
                "two columns give the same quantity", value=name, allowed="each quantity once"
            )
        heads.append(head)
    return heads


def _line(table: NumberTable, row: int, heads: list[tuple[str, str]], spec: LinesFile) -> LineTable:
    data: dict[str, object] = {"wavelength_in": spec.wavelength_in}
    for (quantity, unit), cell, value in zip(heads, table.cells[row], table.values[row], strict=True):
        data[quantity] = f"{cell} {unit}" if unit else float(value)
    try:
        return LineTable.model_validate(data)
    except ValidationError as error:
        keys, complaint = findings_of(error.errors(include_url=False), data)[0]
        raise InputError(
            complaint.problem,
            value=complaint.value,
            allowed=complaint.allowed,
            remedy=complaint.remedy,
            file=f"{table.file}:{table.lines[row]}",
            place=f"column {keys[0]}" if keys else "",
        ) from None
