"""What each column of a block is: said by option, by its heading, or told from its size; else asked."""

from __future__ import annotations

from collections.abc import Mapping, Sequence, Set
from dataclasses import dataclass, replace

from pulseprop.files.blocks import Block
from pulseprop.vetting.axis_units import with_axis_unit
from pulseprop.vetting.heading_units import dimension
from pulseprop.vetting.headings import Heading
from pulseprop.vetting.number_columns import NumberColumns, Role
from pulseprop.vetting.read_options import ReadOptions
from pulseprop.vetting.roles_headed import headed_roles, headings_by_column
from pulseprop.vetting.roles_sized import sized_axis, sized_quantities
from pulseprop.vetting.roles_stated import stated_roles
from pulseprop.vetting.roles_uncertain import with_uncertainties
from pulseprop.vetting.table import Inference

__all__ = ["Roles", "roles_of"]

OF_A_MIRROR = ("gdd", "group_delay", "reflectance")


@dataclass(frozen=True, kw_only=True, eq=False)
class Roles:
    """The columns in use, and how they were found out."""

    columns: tuple[Role, ...]
    inferred: tuple[Inference, ...]


def roles_of(block: Block, options: ReadOptions) -> Roles:
    """The roles of a block's columns, each axis with its unit.

    Raises InputError with the question that the file leaves open and the option that answers it.
    """
    columns = NumberColumns(block)
    heads = headings_by_column(columns)
    if options.columns is not None:
        found = stated_roles(columns, options.columns, heads)
    else:
        found = _found(columns, heads, options)
    roles = [
        with_axis_unit(columns, role, options) if role.axis else _dispersion(role, found) for role in found
    ]
    return Roles(columns=tuple(roles), inferred=tuple(columns.told))


def _found(columns: NumberColumns, heads: Mapping[int, Heading], options: ReadOptions) -> list[Role]:
    """Roles without an option: by heading, and by size where headings are silent."""
    roles = headed_roles(columns, heads)
    if not any(role.axis for role in roles.values()):
        axis = sized_axis(columns, heads, options.axis_unit(), roles)
        roles[axis.index] = axis
    if all(role.axis for role in roles.values()):
        roles |= {role.index: role for role in sized_quantities(columns, heads, tuple(roles))}
    roles, of_others = with_uncertainties(columns, heads, roles)
    _tell_left_out(columns, heads, {*roles, *of_others})
    return [roles[index] for index in sorted(roles)]


def _tell_left_out(columns: NumberColumns, heads: Mapping[int, Heading], used: Set[int]) -> None:
    for index in columns.usable:
        if index not in used:
            silent = index not in heads or not heads[index].text
            why = "it has no heading" if silent else f'the heading "{heads[index].text}" is not known'
            columns.tell(f"column {index + 1}", "left out", why, "--columns")
    for index in columns.word_columns():
        columns.tell(f"column {index + 1}", "left out", "it holds words", "--columns")


def _dispersion(role: Role, roles: Sequence[Role]) -> Role:
    """TOD is one of a bounce where its unit has no length, or beside other columns of a mirror."""
    if role.meaning != "tod":
        return role
    beside = any(other.meaning in OF_A_MIRROR for other in roles)
    of_mirror = dimension(role.unit) == "s^3" if role.unit else beside
    return replace(role, meaning="mirror_tod") if of_mirror else role
