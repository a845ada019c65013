"""Logarithms of transfers as functions of settings, evaluated as seldom as possible.

Most adjustments (separation, insertion, thickness, orders) enter the exponent as straight lines. A model
finds out which do, holds those as a base and slopes, and evaluates the elements anew only where another
adjustment (an angle) moves. What edges and tips cut off bends with all of them, but is quickly worked out: it
is added apart. The field itself is never needed for a derivative.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from contextlib import suppress
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
    total, cut = matter_of(elements, omega), edges_of(elements, omega)
    return total if cut is None else np.asarray(total + cut)


def matter_of(elements: Sequence[Element], omega: Real) -> Complex:
    """The same without what is cut off at edges or lost at faces."""
    total = np.zeros(omega.size, dtype=complex)
    for element in elements:
        total += element.exponent(omega, 1)[0]
    return _lit(total, elements, omega)


def edges_of(elements: Sequence[Element], omega: Real) -> Complex | None:
    """What edges, tips and faces alone do; None where they do nothing."""
    factors = [factor for element in elements if (factor := element.factor(omega)) is not None]
    if not factors:
        return None
    total = np.zeros(omega.size, dtype=complex)
    for factor in factors:
        with np.errstate(divide="ignore"):
            total += np.log(np.abs(factor)) + 1j * np.unwrap(np.angle(factor))
    return _lit(total, elements, omega)


def _lit(total: Complex, elements: Sequence[Element], omega: Real) -> Complex:
    """With `DARK` for minus infinity, all else finite."""
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
    lines, together; the rest are `curved`. edged: whether edges cut more or less with the settings; lines and
    straightness are then those of the matter alone.
    """

    part: Part
    discrete: dict[str, Value]
    samples: Samples
    straight: tuple[int, ...] = field(init=False)
    edged: bool = field(init=False)
    _known: dict[tuple[float, ...], tuple[Complex, Complex]] = field(init=False, default_factory=dict)

    def __post_init__(self) -> None:
        self.low = np.array([one.low for one in self.continuous])
        self.high = np.array([one.high for one in self.continuous])
        self.edged = self._edged()
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
        return total + self._edges(values) if self.edged else total

    def jacobian(self, values: Real) -> Complex:
        """Derivatives of the exponent by each value, (n, k): exact along straight ones, central differences
        of the exponent along the others, and of what edges cut."""
        result = np.empty((self.samples.omega.size, len(self.continuous)), dtype=complex)
        result[:, list(self.straight)] = self.lines(values)[1]
        for index in self.curved:
            result[:, index] = self._slope(self._at, values, index)
        if self.edged:
            for index in range(len(self.continuous)):
                result[:, index] += self._slope(self._edges, values, index)
        return result

    def _slope(self, function: Callable[[Real], Complex], values: Real, index: int) -> Complex:
        """Of the function along one value, by a central difference inside its range."""
        reach = NUDGE * (self.high[index] - self.low[index])
        below = self._moved(values, index, max(values[index] - reach, self.low[index]))
        above = self._moved(values, index, min(values[index] + reach, self.high[index]))
        return np.asarray((function(above) - function(below)) / (above[index] - below[index]))

    def lines(self, values: Real) -> tuple[Complex, Complex]:
        """(base, slopes): the exponent, less edges where `edged`, is base + slopes @ (straight values - their
        lower limits).

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
        if not self.edged:
            return self.evaluated(self.settings(values))
        elements = self.elements(values)
        self.samples.refuse_outside(elements)
        return matter_of(elements, self.samples.omega)

    def _edges(self, values: Real) -> Complex:
        found = edges_of(self.elements(values), self.samples.omega)
        return np.zeros(self.samples.omega.size, dtype=complex) if found is None else found

    def _edged(self) -> bool:
        """Whether edges cut differently in the middle and at the ends of the ranges."""
        if not self.continuous:
            return False
        seen = []
        for values in (self._middle, self.low, self.high):
            with suppress(InputError):
                seen.append(self._edges(values))
        return any(self._apart(cut, seen[0]) > STRAIGHT for cut in seen[1:])

    @property
    def _middle(self) -> Real:
        share = np.resize(PROBE, len(self.continuous))
        return np.asarray(self.low + share * (self.high - self.low))

    def _apart(self, one: Complex, other: Complex) -> float:
        """Largest departure in the field over its largest sample."""
        height = np.abs(self.samples.amplitude)
        return float(np.max(np.minimum(np.abs(one - other), 1.0) * (height / height.max())))

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
        middle = self._middle
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
        return self._apart(found, guess) <= STRAIGHT + ROUNDING * float(np.abs(found).max())
