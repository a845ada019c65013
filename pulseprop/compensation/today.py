"""The path as it stands today: every part at its present setting."""

from __future__ import annotations

from collections.abc import Sequence

from pulseprop.compensation.problem import Part, Settings, Value
from pulseprop.elements.path import Path

__all__ = ["in_place", "path_today", "settings_today"]


def in_place(part: Part) -> bool:
    """Whether the part stands in the path today: it must, or all adjustments have a present setting."""
    return not part.optional or all(one.now is not None for one in part.adjustments)


def settings_today(part: Part) -> Settings:
    """Present settings; the first value of a list or range where none is stated."""
    found: dict[str, Value] = {}
    for one in part.adjustments:
        found[one.parameter] = one.now if one.now is not None else one.values[0]
    return found


def path_today(parts: Sequence[Part]) -> Path:
    """All elements that stand in the path. Raises InputError where one cannot be built."""
    return Path(
        tuple(element for part in parts if in_place(part) for element in part.build(settings_today(part)))
    )
