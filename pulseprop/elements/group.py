"""Elements made of others: their transfers multiply, once or several times over.

What is inside stays matter: the front test, the sources and the budget look at the parts.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.device import Composite
from pulseprop.elements.element import Element
from pulseprop.errors import InputError
from pulseprop.material.medium import Medium
from pulseprop.material.response import View
from pulseprop.numerics.series import Numbers, Series

__all__ = ["Group", "every", "kept", "media_of", "passages"]

Complex = NDArray[np.complex128]


@dataclass(frozen=True, kw_only=True)
class Group:
    """parts: in the order of the beam. times: how often the beam goes through all of them, 1 or more.

    Raises InputError for a group without parts, or with fewer passages than one.
    """

    name: str
    kind: str
    parts: tuple[Element, ...]
    times: int = 1
    detail: str = ""
    beam_radius: float | None = None
    medium: None = None
    temperature_K: None = None

    def __post_init__(self) -> None:
        if not self.parts:
            raise InputError(f"a {self.kind} needs parts", value=0, allowed="one or more")
        if self.times < 1:
            raise InputError("no such number of passages", value=self.times, allowed="1 or more")

    @property
    def media(self) -> tuple[Medium, ...]:
        """The media of all parts, as often as they appear."""
        return tuple(medium for part in self.parts for medium in media_of(part))

    @property
    def length(self) -> float:
        """m of medium on all passages."""
        return self.times * sum(part.length for part in self.parts)

    @property
    def phase_only(self) -> bool:
        """Whether no part is matter."""
        return all(part.phase_only for part in self.parts)

    @property
    def footprint(self) -> float:
        """Room along the beam in m; passages do not add to it."""
        return float(sum(getattr(part, "footprint", 0.0) for part in self.parts))

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """The sum over the parts and passages; see `Element.exponent`."""
        total = np.zeros((count, *np.shape(omega)), dtype=complex)
        for part in self.parts:
            total += part.exponent(omega, count, view)
        return total * self.times

    def factor(self, omega: Numbers, view: View = View.AXIS) -> Complex | None:
        """The product over the parts and passages; None where no part has a factor."""
        factors = [part.factor(omega, view) for part in self.parts]
        known = [factor for factor in factors if factor is not None]
        return np.asarray(np.prod(known, axis=0) ** self.times, dtype=complex) if known else None

    def ringing(self, low: float, high: float) -> float:
        """The longest of the parts; see `Element.ringing`."""
        return max(part.ringing(low, high) for part in self.parts)


def every(elements: Iterable[Element]) -> Iterator[Element]:
    """The elements, each group followed by its parts, at any depth."""
    for element in elements:
        yield element
        if isinstance(element, Group):
            yield from every(element.parts)


def passages(elements: Iterable[Element]) -> Iterator[Element]:
    """The parts of groups, at any depth, in place of the groups: as often and in the order as the beam meets
    them.
    """
    for element in elements:
        if isinstance(element, Group):
            for _ in range(element.times):
                yield from passages(element.parts)
        else:
            yield element


def kept(element: Element, keep: Callable[[Element], bool]) -> Element | None:
    """The element with those parts only that are to be kept; None where nothing is left."""
    if not isinstance(element, Group):
        return element if keep(element) else None
    inside = [found for part in element.parts if (found := kept(part, keep)) is not None]
    if not inside:
        return None
    return Group(name=element.name, kind=element.kind, parts=tuple(inside), times=element.times)


def media_of(element: Element) -> tuple[Medium, ...]:
    """The media that the beam crosses in an element."""
    if isinstance(element, Composite):
        return element.media
    return () if element.medium is None else (element.medium,)
