"""The path: elements in the order in which the pulse meets them."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.element import Element, transfer_of
from pulseprop.elements.group import media_of
from pulseprop.errors import InputError
from pulseprop.material.medium import Medium
from pulseprop.material.response import View
from pulseprop.numerics.series import Numbers, Series

__all__ = ["Path"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


@dataclass(frozen=True)
class Path:
    """Elements with unique names. Raises InputError where two share one."""

    elements: tuple[Element, ...]

    def __post_init__(self) -> None:
        names = [element.name for element in self.elements]
        for name in names:
            if names.count(name) > 1:
                raise InputError(
                    "two elements share a name", value=name, allowed="a name of its own for each element"
                )

    def __iter__(self) -> Iterator[Element]:
        return iter(self.elements)

    def __len__(self) -> int:
        return len(self.elements)

    @property
    def media(self) -> tuple[Medium, ...]:
        """The media of the path, each once, in order of appearance."""
        found: dict[str, Medium] = {}
        for element in self.elements:
            for medium in media_of(element):
                found.setdefault(medium.name, medium)
        return tuple(found.values())

    def exponent(self, omega: Numbers, count: int, view: View = View.AXIS) -> Series:
        """Taylor coefficients of ln(transfer) of the direct passage, summed over the elements.

        omega: rad/s. Shape (count, *omega.shape).
        """
        total = np.zeros((count, *np.shape(omega)), dtype=complex)
        for element in self.elements:
            total += element.exponent(omega, count, view)
        return total

    def transfer(self, omega: Numbers, view: View = View.AXIS) -> Complex:
        """The product of all transfers at omega (rad/s), shape kept."""
        total = np.ones(np.shape(omega), dtype=complex)
        for element in self.elements:
            total *= transfer_of(element, omega, view)
        return total
