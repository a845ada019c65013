"""What each column of a block is: said by option, by its heading, or told from size and shape; else asked."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.files.blocks import Block
from pulseprop.files.cells import decimal_commas, looks_numeric, numbers
from pulseprop.vetting.heading_units import AXIS_OF_DIMENSION, dimension
from pulseprop.vetting.heading_words import AXES, QUANTITIES, Axis, Meaning, Quantity, is_generic
from pulseprop.vetting.headings import Heading, headings_of
from pulseprop.vetting.read_options import Named, ReadOptions, named_columns
from pulseprop.vetting.sizes import axis_by_size, quantity_by_size, unit_by_size
from pulseprop.vetting.table import Inference

__all__ = ["Role", "Roles", "roles_of"]

Real = NDArray[np.float64]

QUESTION = "n, k, alpha, absorbance, internal_transmittance, transmittance, reflectance, gdd, …"
LARGEST_K = 10.0


@dataclass(frozen=True, kw_only=True, eq=False)
class Role:
    """A column in use. index: from 0 in its block. unit: None where it is still to be told."""

    index: int
    meaning: Meaning
    unit: str | None
    heading: str
    thickness: float | None
    cells: tuple[str, ...]
    values: Real

    @property
    def axis(self) -> Axis | None:
        return next((axis for axis in AXES if axis == self.meaning), None)

    @property
    def quantity(self) -> Quantity:
        """The meaning of a column that is no axis."""
        return next(quantity for quantity in QUANTITIES if quantity == self.meaning)


@dataclass(frozen=True, kw_only=True, eq=False)
class Roles:
    """The columns in use, and how they were found out."""

    columns: tuple[Role, ...]
    inferred: tuple[Inference, ...]


def roles_of(block: Block, options: ReadOptions) -> Roles:
    """The roles of a block's columns, each axis with its unit.

    Raises InputError with the question that the file leaves open and the option that answers it.
    """
    return _Finder(block, options).roles()


class _Finder:
    """One block; `notes` gathers what is inferred."""

    def __init__(self, block: Block, options: ReadOptions) -> None:
        self.block, self.options = block, options
        self.notes: list[Inference] = []
        columns = {index: block.column(index) for index in range(block.width)}
        self.cells = {index: cells for index, cells in columns.items() if any(map(looks_numeric, cells))}
        self.usable = tuple(self.cells)

    def roles(self) -> Roles:
        heads = self._headings()
        named = self._named()
        if named:
            found = [self._stated(index, name, heads) for index, name in named.items() if name.meaning]
        else:
            found = self._from_headings(heads)
        roles = [self._mirror_dispersion(role, found) for role in found]
        return Roles(columns=tuple(self._with_axis_unit(roles)), inferred=tuple(self.notes))

    def _headings(self) -> dict[int, Heading]:
        """The headings of the usable columns."""
        heads = headings_of(self.block, self.block.width)
        if heads:
            return {index: heads[index] for index in self.usable}
        heads = headings_of(self.block, len(self.usable))
        return dict(zip(self.usable, heads, strict=True)) if heads else {}

    def _named(self) -> dict[int, Named]:
        """Names by option; empty where there are none."""
        if self.options.columns is None:
            return {}
        names = named_columns(self.options.columns)
        for places in (tuple(range(self.block.width)), self.usable):
            if len(places) == len(names):
                return dict(zip(places, names, strict=True))
        raise self._refused(
            "the table has another number of columns than are named",
            value=self.options.columns,
            allowed=f"{len(self.usable)} names",
            remedy='Give each column a name, "-" for one to leave out: --columns wavelength,n,-',
        )

    def _stated(self, index: int, name: Named, heads: dict[int, Heading]) -> Role:
        if index not in self.cells or name.meaning is None:
            raise self._refused(f"column {index + 1} holds no numbers", value=name.meaning, allowed="numbers")
        head = heads.get(index, Heading(text=""))
        unit = name.unit if name.unit is not None else self._fitting_unit(head, name.meaning)
        return self._role(index, name.meaning, replace(head, unit=unit))

    def _fitting_unit(self, head: Heading, meaning: Meaning) -> str | None:
        """The heading's unit, unless the option made an axis of it that has other units."""
        if not head.unit or meaning not in AXES:
            return head.unit
        return head.unit if AXIS_OF_DIMENSION.get(dimension(head.unit)) == meaning else None

    def _role(self, index: int, meaning: Meaning, head: Heading) -> Role:
        return Role(
            index=index,
            meaning=meaning,
            unit=head.unit,
            heading=head.text,
            thickness=head.thickness,
            cells=self.cells[index],
            values=self._values(index),
        )

    def _values(self, index: int) -> Real:
        return numbers(self.cells[index], self._commas, self.block.numbers, self.block.file)

    @cached_property
    def _commas(self) -> bool:
        """Whether the decimal sign is a comma."""
        commas = decimal_commas(list(self.cells.values()), self.block.numbers, self.block.file)
        if commas:
            self._tell("decimal sign", "comma", "no number has a point", "write decimal points in the file")
        return commas

    def _from_headings(self, heads: dict[int, Heading]) -> list[Role]:
        """Roles without an option."""
        self._check_headings(heads)
        roles = {
            index: self._role(index, head.meaning, head) for index, head in heads.items() if head.meaning
        }
        if roles:
            self._tell_headings(list(roles.values()), heads)
        if not any(role.axis for role in roles.values()):
            axis = self._axis_without_name(heads, roles)
            roles[axis.index] = axis
        if all(role.axis for role in roles.values()):
            roles |= {role.index: role for role in self._by_size(heads, roles)}
        self._tell_left_out(heads, roles)
        return [roles[index] for index in sorted(roles)]

    def _check_headings(self, heads: dict[int, Heading]) -> None:
        for index, head in heads.items():
            if head.extinction:
                raise self._refused(
                    "extinction has several meanings: k, absorbance, or molar absorption?",
                    value=head.text,
                    allowed="k, absorbance, alpha",
                    remedy=f"Say which: --columns {self._example(index, 'k')}",
                )
            if head.scaled and head.meaning:
                raise self._refused(
                    "the heading holds a power of ten, which can be meant either way",
                    value=head.text,
                    allowed="numbers written out",
                    remedy="Write the numbers out, or take the power of ten from the heading if it is done",
                )
            if head.meaning in ("k", "n") and head.unit and dimension(head.unit) == "m^-1":
                raise self._refused(
                    f"{head.meaning} has no unit; a coefficient per length is alpha",
                    value=head.text,
                    allowed=f"{head.meaning} as a plain number, or alpha with a unit",
                    remedy=f"Say which: --columns {self._example(index, 'alpha')}",
                )

    def _example(self, index: int, name: str) -> str:
        """What --columns would look like with this column so named."""
        names = ["wavelength" if column == self.usable[0] else "-" for column in self.usable]
        names[self.usable.index(index)] = name
        return ",".join(names)

    def _axis_without_name(self, heads: dict[int, Heading], roles: dict[int, Role]) -> Role:
        """The first column, where nothing names an axis: by the stated unit or by size."""
        first = next((index for index in self.usable if index not in roles), None)
        head = heads.get(first, Heading(text="")) if first is not None else Heading(text="")
        if first is None or first != self.usable[0] or not is_generic(head.text):
            raise self._refused(
                "no column is known as the spectral axis",
                value=", ".join(other.text for other in heads.values())[:60] or None,
                allowed=", ".join(AXES),
                remedy=f"Name the columns: --columns wavelength,{'n' if len(self.usable) == 2 else 'n,k'}",
            )
        unit = self.options.axis_unit()
        if unit is not None:
            self._tell("first column", "spectral axis", "nothing names it", "--columns")
            return self._role(first, _axis_of(unit, self), Heading(text=head.text, unit=unit))
        return self._sized_axis(first, head)

    def _sized_axis(self, first: int, head: Heading) -> Role:
        values = self._values(first)
        beside = self._values(self.usable[1]) if len(self.usable) > 1 else None
        axis, unit = axis_by_size(values, beside)
        if axis is None:
            raise self._refused(
                f"the unit of the first column cannot be told: {unit}?",
                value=f"{self.cells[first][0]} to {self.cells[first][-1]}",
                allowed="nm, um, cm^-1, THz, eV",
                remedy="Say it: --unit nm",
            )
        low, high = np.nanmin(values), np.nanmax(values)
        self._tell(
            "spectral axis",
            f"{axis} in {unit}",
            f"{low:g} to {high:g} in the first column",
            "--unit, --columns",
        )
        return self._role(first, axis, Heading(text=head.text, unit=unit))

    def _by_size(self, heads: dict[int, Heading], roles: dict[int, Role]) -> list[Role]:
        """n, and k beside it, where no heading names a quantity."""
        rest = [index for index in self.usable if index not in roles]
        silent = [is_generic(heads[index].text) if index in heads else True for index in rest]
        values = [self._values(index) for index in rest]
        if rest and all(silent) and len(rest) <= 2 and quantity_by_size(values[0]) == "n":
            names: list[Meaning] = ["n"]
            if len(rest) == 2 and 0 <= np.nanmin(values[1]) < 0.9 and np.nanmax(values[1]) <= LARGEST_K:
                names.append("k")
            if len(names) == len(rest):
                why = "an index lies between 1 and 6 and varies little; k stands beside it"
                self._tell("columns", ", ".join(names), why, "--columns")
                return [
                    self._role(index, name, Heading(text=heads[index].text if index in heads else ""))
                    for index, name in zip(rest, names, strict=True)
                ]
        raise self._refused(
            "what the columns hold cannot be told",
            value=self._sample(rest, heads),
            allowed=QUESTION,
            remedy=f"Name each column: --columns {self._example(rest[0], 'k') if rest else 'wavelength,n'}",
        )

    def _sample(self, rest: Sequence[int], heads: dict[int, Heading]) -> str | None:
        """Headings, or first values, of columns."""
        words = [heads[index].text for index in rest if index in heads and heads[index].text]
        return ", ".join(words or [self.cells[index][0] for index in rest])[:60] or None

    def _mirror_dispersion(self, role: Role, roles: Sequence[Role]) -> Role:
        """TOD of one bounce, where the unit has no length or the table is one of a mirror."""
        if role.meaning != "tod":
            return role
        beside = any(other.meaning in ("gdd", "group_delay", "reflectance") for other in roles)
        of_mirror = beside if not role.unit else dimension(role.unit) == "s^3"
        return replace(role, meaning="mirror_tod") if of_mirror else role

    def _with_axis_unit(self, roles: Sequence[Role]) -> list[Role]:
        """Every axis with its unit: the stated one, the heading's, or the usual one that fits."""
        return [self._axis_unit(role) if role.axis else role for role in roles]

    def _axis_unit(self, role: Role) -> Role:
        unit = self.options.axis_unit()
        if unit is not None:
            axis = _axis_of(unit, self)
            if self.options.columns is not None and axis != role.meaning:
                raise self._refused("the unit does not fit the axis", value=f"{role.meaning} in {unit}")
            return replace(role, unit=unit, meaning=axis)
        if role.unit:
            if AXIS_OF_DIMENSION.get(dimension(role.unit)) != role.meaning:
                raise self._refused(
                    f"the unit of the heading is not one of a {str(role.meaning).replace('_', ' ')}",
                    value=role.heading,
                    remedy="Say what it is: --columns, --unit",
                )
            return role
        return replace(role, unit=self._usual_unit(role))

    def _usual_unit(self, role: Role) -> str:
        axis = role.axis
        unit = unit_by_size(axis, role.values) if axis else None
        if unit is None:
            raise self._refused(
                f"the unit of the {str(role.meaning).replace('_', ' ')} cannot be told",
                value=f"{role.cells[0]} to {role.cells[-1]}",
                allowed="nm, um, cm^-1, THz, eV",
                remedy="Say it: --unit nm",
            )
        low, high = np.nanmin(role.values), np.nanmax(role.values)
        name = str(role.meaning).replace("_", " ")
        self._tell(f"unit of the {name}", unit, f"{low:g} to {high:g} fits no other usual one", "--unit")
        return unit

    def _tell_headings(self, roles: Sequence[Role], heads: dict[int, Heading]) -> None:
        taken = ", ".join(str(role.meaning) + (f" in {role.unit}" if role.unit else "") for role in roles)
        words = ", ".join(f'"{role.heading}"' for role in roles)
        self._tell("columns", taken, f"headings {words}", "--columns, --unit")

    def _tell_left_out(self, heads: dict[int, Heading], roles: dict[int, Role]) -> None:
        for index in self.usable:
            if index not in roles:
                text = (
                    f'the heading "{heads[index].text}" is not known'
                    if index in heads
                    else "it has no heading"
                )
                self._tell(f"column {index + 1}", "left out", text, "--columns")
        words = [str(index + 1) for index in range(self.block.width) if self._has_words(index)]
        if words:
            self._tell(f"column {', '.join(words)}", "left out", "it holds words", "--columns")

    def _has_words(self, index: int) -> bool:
        return index not in self.cells and any(self.block.column(index))

    def _tell(self, about: str, taken: str, why: str, overrule: str) -> None:
        self.notes.append(Inference(about=about, taken=taken, why=why, overrule=overrule))

    def _refused(
        self, problem: str, *, value: object = None, allowed: str = "", remedy: str = ""
    ) -> InputError:
        place = f"{self.block.file}:{self.block.numbers[0]}"
        return InputError(problem, value=value, allowed=allowed, remedy=remedy, file=place)


def _axis_of(unit: str, finder: _Finder) -> Axis:
    """The axis that a stated unit belongs to."""
    axis = AXIS_OF_DIMENSION.get(dimension(unit))
    if axis is None:
        raise InputError(
            "this is no unit of a spectral axis", value=unit, allowed="nm, um, cm^-1, THz, eV", place="unit"
        )
    return axis
