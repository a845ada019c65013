"""Logarithms of transfers as functions of settings, evaluated as seldom as possible.

Most adjustments (separation, insertion, thickness, orders) enter the exponent as straight lines. A model
finds out which do, holds those as a base and slopes, and evaluates the elements anew only where another
adjustment (an angle) moves. The field itself is never needed for a derivative.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.problem import Adjustment, Part, Settings, Value
from pulseprop.compensation.samples import Samples
from pulseprop.elements.element import Element
from pulseprop.errors import InputError

__all__ = ["Model", "exponent_of"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

STRAIGHT = 1e-6
"""Departure from a straight line below which an adjustment is one, in the field over its largest sample.

At the ends of the spectrum, where a grating may go dark, that allows anything.
"""
ROUNDING = 1e-11
"""The same over the largest exponent met: phases of 1e6 rad are known no better."""
DARK = -300.0
"""Nepers below which nothing is left: keeps sums finite where an element lets no light through."""
PROBE = (0.381966, 0.618034, 0.276393, 0.723607)
"""Shares of the ranges at which straightness is looked at: golden, so that no symmetry hides a curve."""
NUDGE = 2e-6
"""Half width of a central difference over the range of an adjustment."""


def exponent_of(elements: Sequence[Element], omega: Real) -> Complex:
    """ln(transfer) of elements in a row, faces included, at omega (rad/s), (n,).

    The phase of faces is continued without jumps. Raises InputError where an element cannot be there.
    """
    total = np.zeros(omega.size, dtype=complex)
    for element in elements:
        total += element.exponent(omega, 1)[0]
        factor = element.factor(omega)
        if factor is not None:
            with np.errstate(divide="ignore"):
                total += np.log(np.abs(factor)) + 1j * np.unwrap(np.angle(factor))
    _refuse_undefined(total, elements, omega)
    return np.asarray(np.maximum(total.real, DARK) + 1j * total.imag)


def _refuse_undefined(total: Complex, elements: Sequence[Element], omega: Real) -> None:
    """Minus infinity is darkness; anything else that is no number is a fault of the element."""
    wrong = np.isnan(total.real) | ~np.isfinite(total.imag) | (total.real == np.inf)
    if wrong.any():
        nanometres = 2e9 * np.pi * 299792458.0 / float(omega[int(np.argmax(wrong))])
        raise InputError(
            f"{' + '.join(element.name for element in elements)} has no phase over the whole pulse",
            value=f"{nanometres:.6g} nm",
        )


@dataclass(kw_only=True, eq=False)
class Model:
    """One part with its discrete settings made: what its continuous adjustments do to the exponent.

    Values are SI, in the order of `part.continuous`. straight: indices of adjustments that enter as straight
    lines, together; the rest are `curved`.
    """

    part: Part
    discrete: dict[str, Value]
    samples: Samples
    straight: tuple[int, ...] = field(init=False)
    _known: dict[tuple[float, ...], tuple[Complex, Complex]] = field(init=False, default_factory=dict)

    def __post_init__(self) -> None:
        self.low = np.array([one.low for one in self.continuous])
        self.high = np.array([one.high for one in self.continuous])
        self.straight = self._straight()

    @property
    def continuous(self) -> tuple[Adjustment, ...]:
        """The adjustments behind the values."""
        return self.part.continuous

    @property
    def curved(self) -> tuple[int, ...]:
        """Indices of adjustments that do not enter as straight lines."""
        return tuple(i for i in range(len(self.continuous)) if i not in self.straight)

    def settings(self, values: Real) -> dict[str, Value]:
        """All settings of the part by key."""
        own = {one.parameter: float(value) for one, value in zip(self.continuous, values, strict=True)}
        return {**self.discrete, **own}

    def elements(self, values: Real) -> tuple[Element, ...]:
        """The elements at these values. Raises InputError where there are none such."""
        return self.part.build(self.settings(values))

    def evaluated(self, settings: Settings) -> Complex:
        """The exponent of the elements for settings of any kind, drifts included, with no shortcut."""
        elements = self.part.build(settings)
        self.samples.refuse_outside(elements)
        return exponent_of(elements, self.samples.omega)

    def size(self, values: Real) -> float:
        """Footprint in m of the elements that state one."""
        return float(sum(getattr(element, "footprint", 0.0) for element in self.elements(values)))

    def exponent(self, values: Real) -> Complex:
        """ln(transfer), (n,); straight adjustments may lie outside their range."""
        base, slopes = self.lines(values)
        total = base.copy()
        # A handful of columns: sums are quicker here than a threaded product of a thin matrix.
        for column, distance in enumerate(self._along(values)):
            total += distance * slopes[:, column]
        return total

    def jacobian(self, values: Real) -> Complex:
        """Derivatives of the exponent by each value, (n, k): exact along straight ones, central differences
        of the exponent along the others."""
        result = np.empty((self.samples.omega.size, len(self.continuous)), dtype=complex)
        result[:, list(self.straight)] = self.lines(values)[1]
        for index in self.curved:
            reach = NUDGE * (self.high[index] - self.low[index])
            below = self._moved(values, index, max(values[index] - reach, self.low[index]))
            above = self._moved(values, index, min(values[index] + reach, self.high[index]))
            rise = self._at(above) - self._at(below)
            result[:, index] = rise / (above[index] - below[index])
        return result

    def lines(self, values: Real) -> tuple[Complex, Complex]:
        """(base, slopes): the exponent is base + slopes @ (straight values - their lower limits).

        base (n,), slopes (n, straight): of the curved values given.
        """
        key = tuple(float(values[index]) for index in self.curved)
        if key not in self._known:
            if self.curved:
                self._known.clear()
            self._known[key] = self._lines_at(values, self.straight)
        return self._known[key]

    def _along(self, values: Real) -> Real:
        chosen = list(self.straight)
        return np.asarray(values[chosen] - self.low[chosen])

    def _at(self, values: Real) -> Complex:
        return self.evaluated(self.settings(values))

    @staticmethod
    def _moved(values: Real, index: int, value: float) -> Real:
        moved = values.copy()
        moved[index] = value
        return moved

    def _lines_at(self, values: Real, straight: tuple[int, ...]) -> tuple[Complex, Complex]:
        corner = values.copy()
        corner[list(straight)] = self.low[list(straight)]
        base = self._at(corner)
        slopes = np.empty((self.samples.omega.size, len(straight)), dtype=complex, order="F")
        for column, index in enumerate(straight):
            rise = self._at(self._moved(corner, index, self.high[index])) - base
            slopes[:, column] = rise / (self.high[index] - self.low[index])
        return base, slopes

    def _straight(self) -> tuple[int, ...]:
        """The adjustments that are straight each by itself, if they are so together; else none.

        Looked at with the others in the middle and at both ends of their ranges: a tip or an edge may cut the
        beam at one end only. Ranges that hold no element in their middle have no straight ones.
        """
        count = len(self.continuous)
        middle = self.low + np.resize(PROBE, count) * (self.high - self.low)
        try:
            alone = tuple(index for index in range(count) if self._is_straight(middle, (index,)))
            if not self._is_straight(middle, alone):
                return ()
        except InputError:
            return ()
        curved = [index for index in range(count) if index not in alone]
        at_ends = all(self._is_straight_at(end, middle, curved, alone) for end in (self.low, self.high))
        return alone if at_ends else ()

    def _is_straight_at(self, end: Real, middle: Real, curved: list[int], straight: tuple[int, ...]) -> bool:
        """With the curved adjustments at an end of their ranges, if an element can be there."""
        if not curved:
            return True
        values = middle.copy()
        values[curved] = end[curved]
        try:
            return self._is_straight(values, straight)
        except InputError:
            return True

    def _is_straight(self, middle: Real, straight: tuple[int, ...]) -> bool:
        if not straight:
            return True
        base, slopes = self._lines_at(middle, straight)
        found = self._at(middle)
        chosen = list(straight)
        guess = base + slopes @ (middle[chosen] - self.low[chosen])
        height = np.abs(self.samples.amplitude)
        departure = np.minimum(np.abs(found - guess), 1.0) * (height / height.max())
        return bool(departure.max() <= STRAIGHT + ROUNDING * float(np.abs(found).max()))
