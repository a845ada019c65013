"""A block of cells to tables: one for each spectral axis, one for each repeat of a quantity (n_o, n_e)."""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from pulseprop.errors import InputError
from pulseprop.files.blocks import Block, Line
from pulseprop.vetting.assemble import table_of
from pulseprop.vetting.column_roles import roles_of
from pulseprop.vetting.headings import is_heading
from pulseprop.vetting.number_columns import Role
from pulseprop.vetting.printed import Printed, Source
from pulseprop.vetting.printed_cells import half_units
from pulseprop.vetting.table import Inference, SentTable

__all__ = ["tables_of_block"]


@dataclass(frozen=True, kw_only=True, eq=False)
class _Group:
    """An axis and what belongs to it. title: the heading that tells it from its like, empty for the only
    one."""

    axis: Role
    columns: tuple[Role, ...]
    title: str = ""


def tables_of_block(source: Source, block: Block, notes: Sequence[Inference]) -> list[SentTable]:
    """The tables of a block. Raises InputError as `roles_of` and `table_of` do."""
    _check_words_between(block)
    roles = roles_of(block, source.options)
    told = [*notes, *roles.inferred]
    groups = _groups(roles.columns, told)
    source = replace(source, words=tuple(line.text.strip() for line in [*block.above, *block.below]))
    return [_table(source, block, group, told) for group in groups]


def _table(source: Source, block: Block, group: _Group, told: Sequence[Inference]) -> SentTable:
    name = _name_above(block, group) if group.title else ""
    title = ", ".join(part for part in (source.title, name, group.title) if part)
    thickness = next((role.thickness for role in group.columns if role.thickness), None)
    columns = [(role.quantity, _printed(role)) for role in group.columns]
    source = replace(source, title=title, thickness=thickness)
    return table_of(source, _printed(group.axis), columns, block.lines, told)


def _name_above(block: Block, group: _Group) -> str:
    """What stands over the headings of a group, such as the name of a sample; empty where nothing does."""
    places = [group.axis.index, *(role.index for role in group.columns)]
    for line in reversed(block.above):
        if line.cells is None or len(line.cells) != block.width or is_heading(line.text):
            continue
        found = [line.cells[place] for place in places if line.cells[place]]
        if found:
            return found[0]
    return ""


def _printed(role: Role) -> Printed:
    return Printed(
        name=role.meaning,
        unit=role.unit,
        heading=role.heading,
        cells=role.cells,
        values=role.values,
        half=half_units(role.cells, role.values),
        spread=role.spread,
    )


def _groups(roles: Sequence[Role], told: list[Inference]) -> list[_Group]:
    """Each axis of the first kind with the quantities up to the next one."""
    first = next(role for role in roles if role.axis)
    starts = [position for position, role in enumerate(roles) if role.meaning == first.meaning]
    starts[0] = 0
    groups: list[_Group] = []
    for start, end in zip(starts, [*starts[1:], len(roles)], strict=True):
        part = roles[start:end]
        axis = next(role for role in part if role.meaning == first.meaning)
        for role in part:
            if role.axis and role is not axis:
                told.append(_second_axis(role, axis))
        groups += _split(axis, [role for role in part if not role.axis], several=len(starts) > 1)
    return groups


def _second_axis(role: Role, axis: Role) -> Inference:
    return Inference(
        about=f"column {role.index + 1}",
        taken="left out",
        why=f"it is a second spectral axis ({role.meaning}) beside the {axis.meaning}",
        overrule="--columns",
    )


def _split(axis: Role, columns: Sequence[Role], *, several: bool) -> list[_Group]:
    """Quantities that stand once together; each repeat, and each that is mostly empty, by itself."""
    full = [role for role in columns if not _mostly_empty(role, axis)]
    sparse = [role for role in columns if _mostly_empty(role, axis)]
    counts = Counter(role.meaning for role in full)
    repeats = max(counts.values(), default=0)
    groups = []
    for number in range(repeats):
        members = [role for role in full if _occurrence(role, full) == number]
        title = members[0].heading if several or repeats > 1 else ""
        groups.append(_Group(axis=axis, columns=tuple(members), title=title))
    return groups + [_Group(axis=axis, columns=(role,), title=role.heading) for role in sparse]


def _occurrence(role: Role, roles: Sequence[Role]) -> int:
    """How many of the same quantity stand before it."""
    return [other for other in roles if other.meaning == role.meaning].index(role)


def _mostly_empty(role: Role, axis: Role) -> bool:
    """A column with numbers in fewer than half of the rows would cost the others most of theirs."""
    rows = np.isfinite(axis.values)
    return bool(2 * np.count_nonzero(np.isfinite(role.values) & rows) < np.count_nonzero(rows))


def _check_words_between(block: Block) -> None:
    """A block after the first begins with headings; other words among rows are a broken row."""
    odd = _words_without_heading(block)
    if odd is not None:
        raise InputError(
            "the line is neither a row nor a heading",
            value=odd.text.strip()[:60],
            allowed="rows of numbers; words that begin with #; headings of another table",
            remedy="Correct the line, or begin it with # to leave it out",
            file=f"{block.file}:{odd.number}",
        )


def _words_without_heading(block: Block) -> Line | None:
    if not block.follows or any(is_heading(line.text) for line in block.above):
        return None
    return next((line for line in block.above if line.cells is not None), None)
