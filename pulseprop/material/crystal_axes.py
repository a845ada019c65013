"""The two axes of a crystal in the catalogue, found from the name of either."""

from __future__ import annotations

import re

from pulseprop.errors import InputError
from pulseprop.material.catalogue import Record, record

__all__ = ["both_axes"]

PARTNER = {"o": "e", "e": "o"}
WORDS = {"o": "e", "e": "o", "ordinary": "extraordinary", "extraordinary": "ordinary"}
"""What stands in a name for an axis, and what stands there for the other."""


def both_axes(name: str) -> tuple[str, str]:
    """Names of the ordinary and the extraordinary record of the crystal with this catalogue name.

    Raises InputError for a name that is not in the catalogue, and for a medium that has no two such records.
    """
    entry = record(name)
    other = _partner(entry)
    if other is None:
        raise InputError(
            "the catalogue does not have this medium along an ordinary and an extraordinary axis",
            value=name,
            allowed="a crystal such as quartz, MgF2, sapphire or calcite",
            remedy="Name both media of the plate: ordinary = ..., extraordinary = ...",
        )
    return (entry.name, other) if entry.axis == "o" else (other, entry.name)


def _partner(entry: Record) -> str | None:
    """The printed name of the record along the other axis."""
    for name in entry.names:
        turned = re.sub(r"\b(o|e|ordinary|extraordinary)\b", lambda word: WORDS[word[0]], name)
        try:
            found = record(turned) if turned != name else None
        except InputError:
            continue
        if found is not None and found.axis == PARTNER.get(entry.axis):
            return found.name
    return None
