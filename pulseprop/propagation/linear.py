"""Exact linear propagation: the spectrum times the transfer of each element.

Nothing is stepped: a linear path is one multiplication. Work goes in blocks, so that no more than a few
arrays of the grid's length exist at a time.
"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.element import Element, transfer_of
from pulseprop.grid import Grid
from pulseprop.numerics.plans import Plan

__all__ = ["BLOCK", "apply_known_transfer", "at_once", "blocks", "multiply_by"]

Complex = NDArray[np.complex128]

BLOCK = 1 << 15
"""Frequencies evaluated at a time."""


def blocks(grid: Grid) -> Iterator[slice]:
    """Slices that cover the positive frequencies of a grid."""
    first, last = grid.positive.start, grid.points
    for start in range(first, last, BLOCK):
        yield slice(start, min(start + BLOCK, last))


def at_once(element: Element, exponent: Complex, spectrum: Complex) -> None:
    """Multiply a spectrum by exp(exponent) in place: the whole direct passage of an element."""
    for start in range(0, spectrum.size, BLOCK):
        part = slice(start, start + BLOCK)
        spectrum[part] *= np.exp(exponent[part])


def multiply_by(element: Element, grid: Grid, spectrum: Complex) -> None:
    """Multiply a spectrum A(omega) on the grid's frequencies by an element's whole transfer, in place."""
    for part in blocks(grid):
        spectrum[part] *= transfer_of(element, 2 * np.pi * grid.frequency[part])


def apply_known_transfer(plan: Plan, transfer: Complex) -> None:
    """The linear core: take the plan's buffer through a transfer given in natural order, in place.

    The transfer must already hold `plan.scale`.
    """
    plan.to_spectrum()
    np.multiply(plan.buffer, transfer, out=plan.buffer)
    plan.to_field()
