"""The columns of a block that hold numbers, with what is found out about them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.files.blocks import Block
from pulseprop.files.cells import decimal_commas, looks_numeric, numbers
from pulseprop.vetting.heading_words import AXES, QUANTITIES, Axis, Meaning
from pulseprop.vetting.headings import Heading
from pulseprop.vetting.printed import Spread
from pulseprop.vetting.table import Inference, Quantity

__all__ = ["NumberColumns", "Role"]

Real = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True, eq=False)
class Role:
    """A column in use. index: from 0 in its block. unit: None where it is still to be told. spread: its
    uncertainties, where another column states them."""

    index: int
    meaning: Meaning
    unit: str | None
    heading: str
    thickness: float | None
    cells: tuple[str, ...]
    values: Real
    spread: Spread | None = None

    @property
    def axis(self) -> Axis | None:
        """The meaning of a column that is a spectral axis."""
        return next((axis for axis in AXES if axis == self.meaning), None)

    @property
    def quantity(self) -> Quantity:
        """The meaning of a column that is no axis."""
        return next(quantity for quantity in QUANTITIES if quantity == self.meaning)

    @property
    def name(self) -> str:
        """The meaning in words."""
        return self.meaning.replace("_", " ")

    @property
    def reach(self) -> str:
        """Lowest to highest value."""
        return f"{np.nanmin(self.values):g} to {np.nanmax(self.values):g}"


class NumberColumns:
    """usable: indices of the columns with a number in some row, from 0. told: what was inferred so far."""

    def __init__(self, block: Block) -> None:
        self.block = block
        self.told: list[Inference] = []
        columns = {index: block.column(index) for index in range(block.width)}
        self.cells = {index: cells for index, cells in columns.items() if any(map(looks_numeric, cells))}
        self.usable = tuple(self.cells)
        self.percent = frozenset(index for index in self.usable if self._strip_percent(index))

    def _strip_percent(self, index: int) -> bool:
        """Take the sign off a column in which every number has it: then it is the unit."""
        cells = self.cells[index]
        if not all(cell.endswith("%") for cell in cells if looks_numeric(cell)):
            return False
        self.cells[index] = tuple(cell.removesuffix("%").strip() for cell in cells)
        return True

    def values(self, index: int) -> Real:
        """Numbers of a column, (R,), NaN where missing. Raises InputError for cells that are none."""
        return numbers(self.cells[index], self._commas, self.block.numbers, self.block.file)

    @cached_property
    def _commas(self) -> bool:
        """Whether the decimal sign is a comma."""
        commas = decimal_commas(list(self.cells.values()), self.block.numbers, self.block.file)
        if commas:
            self.tell("decimal sign", "comma", "no number has a point", "write decimal points in the file")
        return commas

    def role(self, index: int, meaning: Meaning, head: Heading) -> Role:
        """The column in that role."""
        return Role(
            index=index,
            meaning=meaning,
            unit="%" if index in self.percent and not head.unit else head.unit,
            heading=head.text,
            thickness=head.thickness,
            cells=self.cells[index],
            values=self.values(index),
        )

    def word_columns(self) -> list[int]:
        """Indices of columns that hold words and nothing else."""
        rest = (index for index in range(self.block.width) if index not in self.cells)
        return [index for index in rest if any(self.block.column(index))]

    def tell(self, about: str, taken: str, why: str, overrule: str) -> None:
        """Note an inference."""
        self.told.append(Inference(about=about, taken=taken, why=why, overrule=overrule))

    def example(self, named: Sequence[int], name: str) -> str:
        """What --columns would look like with these columns so named."""
        first = self.usable[0]
        names = {first: "wavelength"} | dict.fromkeys(named, name)
        return ",".join(names.get(index, "-") for index in self.usable)

    def refused(
        self, problem: str, *, value: object = None, allowed: str = "", remedy: str = ""
    ) -> InputError:
        """An error that names the file and the first row."""
        place = f"{self.block.file}:{self.block.numbers[0]}"
        return InputError(problem, value=value, allowed=allowed, remedy=remedy, file=place)
