"""The catalogue medium whose index is nearest to a table's, and the medium that a table says it is."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cache
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.material.catalogue import names, record
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.medium import Medium
from pulseprop.vetting.table import SentTable

__all__ = ["Likeness", "likeness", "media_named", "nearest", "said_to_be"]

Real = NDArray[np.float64]

PLACES = 24
"""Rows at which media are compared."""
SHARED = 0.5
"""Share of the rows that must lie in a record's range."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Likeness:
    """offset: table minus medium, mean over the compared rows. shape: largest departure from that mean. rows:
    how many were compared. whole: whether all rows lie in the record's range."""

    medium: Medium
    offset: float
    shape: float
    rows: int
    whole: bool

    @property
    def distance(self) -> float:
        """Largest difference of the index, about."""
        return abs(self.offset) + self.shape


def likeness(medium: Medium, omega: Real, index: Real) -> Likeness | None:
    """How a table's index (R,) lies to a medium's, at a few rows; None where too few lie in its range."""
    pick = np.unique(np.linspace(0, len(omega) - 1, min(PLACES, len(omega))).astype(int))
    omega, index = omega[pick], index[pick]
    inside = medium.band.contains(omega)
    if np.sum(inside) < max(2, SHARED * len(omega)):
        return None
    apart = index[inside] - np.real(medium.index(omega[inside]))
    offset = float(np.mean(apart))
    return Likeness(
        medium=medium,
        offset=offset,
        shape=float(np.max(np.abs(apart - offset))),
        rows=int(np.sum(inside)),
        whole=bool(np.all(inside)),
    )


def nearest(omega: Real, index: Real) -> Likeness | None:
    """The most alike of all catalogue media; None where no record covers half of the rows."""
    found = [like for medium in _media() if (like := likeness(medium, omega, index))]
    return min(found, key=lambda like: like.distance, default=None)


def said_to_be(table: SentTable) -> str | None:
    """The longest of the catalogue names in its words."""
    return max(media_named(table), key=len, default=None)


def media_named(table: SentTable) -> list[str]:
    """The catalogue names that stand in the table's title or file name, or, where they are no common words,
    in its comments. Gases are the surroundings more often than the sample and are left out.
    """
    heading = " ".join((table.title, re.sub(r"[_+]", " ", Path(table.file).stem)))
    everything = " ".join((heading, *table.comments))
    return [name for name in _searched() if _stands_in(name, heading if name.islower() else everything)]


def _stands_in(name: str, text: str) -> bool:
    word = rf"(?<![\w-]){re.escape(name)}(?![\w-])"
    return re.search(word, text, re.IGNORECASE if name.islower() else 0) is not None


@cache
def _searched() -> tuple[str, ...]:
    return tuple(name for name in names() if record(name).family != "gas")


def _media() -> Iterator[Medium]:
    for name in names():
        try:
            yield catalogue_medium(name)
        except InputError:  # humid air has no index without its state
            continue
