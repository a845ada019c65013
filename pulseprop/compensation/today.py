"""The path as it stands today: every part at its present setting."""

from __future__ import annotations

from collections.abc import Sequence

from pulseprop.compensation.problem import Part, Settings, Value
from pulseprop.elements.path import Path

__all__ = ["in_place", "path_today", "settings_today"]


def in_place(part: Part) -> bool:
    """Whether the part stands in the path today: nothing about it is open, or its setting is known."""
    open_ones = [one for one in part.adjustments if len(one.values) > 1]
    known = all(one.now is not None for one in open_ones)
    return known and (bool(open_ones) or not part.optional)


def settings_today(part: Part) -> Settings:
    """Present settings of a part that is in place."""
    found: dict[str, Value] = {}
    for one in part.adjustments:
        found[one.parameter] = one.values[0] if one.now is None else one.now
    return found


def path_today(parts: Sequence[Part]) -> Path:
    """All elements that stand in the path. Raises InputError where one cannot be built."""
    return Path(
        tuple(element for part in parts if in_place(part) for element in part.build(settings_today(part)))
    )
