"""What is asked: the pulse, the parts of the path with what may be set on them, and the goal.

A path is a row of parts in the order in which the pulse meets them. A part is built from the settings of its
own adjustments, so that whatever does not change is evaluated once. Values are SI throughout; `unit` and
`unit_size` say how a bench reads them.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.element import Element
from pulseprop.errors import InputError
from pulseprop.propagation.sizing import GridWish
from pulseprop.pulse.measured import MeasuredPulse
from pulseprop.pulse.pulse import Pulse

__all__ = [
    "Adjustment",
    "Alternative",
    "Build",
    "Goal",
    "GoalName",
    "Part",
    "Problem",
    "Settings",
    "Value",
    "fixed",
]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]
Value = float | str
Settings = Mapping[str, Value]
Build = Callable[[Settings], tuple[Element, ...]]
GoalName = Literal["peak power", "duration", "flat phase", "two-photon", "contrast"]

STEP_ROUNDING = 1e-9
"""A range counts as a whole number of steps within this part of a step."""


@dataclass(frozen=True, kw_only=True)
class Adjustment:
    """Something that may be set on a part: continuous from low to high, in steps, or from a list.

    parameter: the key under which `Part.build` gets the value. low, high: SI. step: SI, where only
    low, low + step, ... up to high exist (bounces). choices: a list in place of a range: words or SI numbers.
    now: today's setting. unit, unit_size: what a bench reads, and one of it in SI. sigma: how well a workshop
    holds it, one standard deviation, SI; None for the usual value of its unit.

    Raises InputError for a range that ends before it begins, a step that is not positive, an empty list.
    """

    parameter: str
    unit: str = ""
    unit_size: float = 1.0
    low: float = 0.0
    high: float = 0.0
    step: float | None = None
    choices: tuple[Value, ...] = ()
    now: Value | None = None
    sigma: float | None = None

    def __post_init__(self) -> None:
        if not (np.isfinite(self.low) and np.isfinite(self.high) and self.low <= self.high):
            raise InputError(
                f"the range of {self.parameter} ends before it begins",
                value=f"{self.low / self.unit_size:.6g} to {self.high / self.unit_size:.6g} {self.unit}",
                allowed="two finite numbers, the lower first",
            )
        if self.step is not None and not self.step > 0:
            raise InputError(
                f"the step of {self.parameter} must be positive",
                value=self.step / self.unit_size,
                allowed="above 0",
            )

    @property
    def continuous(self) -> bool:
        """Whether any value between low and high may be set."""
        return not self.choices and self.step is None and self.high > self.low

    @property
    def values(self) -> tuple[Value, ...]:
        """The values of a stepped range or list, in order; of a continuous one its two limits."""
        if self.choices:
            return self.choices
        if self.step is not None:
            count = int(np.floor((self.high - self.low) / self.step + STEP_ROUNDING)) + 1
            return tuple(self.low + index * self.step for index in range(count))
        return (self.low,) if self.low == self.high else (self.low, self.high)


@dataclass(frozen=True, kw_only=True)
class Part:
    """One place of the path: an element, or a compensator with what may be set on it.

    build(settings): the elements for the values of all its adjustments (and, for tolerances, of one of its
    `drifts`), in the order of the beam; raises InputError where no such element can be built. optional: it
    may be left out (a compensator at hand). drifts: parameters that are not set but may be off, such as the
    thickness of a glass or an angle; each needs `now`, its nominal value. to_order: a mirror that is yet to
    be made, with the adjustments "gdd" and "tod" of one bounce and, where more than one, "bounces".
    """

    name: str
    build: Build
    adjustments: tuple[Adjustment, ...] = ()
    optional: bool = False
    drifts: tuple[Adjustment, ...] = ()
    to_order: bool = False

    @property
    def movable(self) -> bool:
        """Whether anything is to be decided about it."""
        return self.optional or bool(self.adjustments)

    @property
    def discrete(self) -> tuple[Adjustment, ...]:
        """The adjustments with steps or lists."""
        return tuple(one for one in self.adjustments if not one.continuous)

    @property
    def continuous(self) -> tuple[Adjustment, ...]:
        """The adjustments that take any value of a range."""
        return tuple(one for one in self.adjustments if one.continuous)


def fixed(element: Element, drifts: tuple[Adjustment, ...] = (), build: Build | None = None) -> Part:
    """An element that stays as it is. build: needed where something of it may drift."""
    return Part(name=element.name, build=build or (lambda _: (element,)), drifts=drifts)


@dataclass(frozen=True, kw_only=True)
class Goal:
    """What is wanted most.

    name: "peak power" (peak power over that of the same transmitted spectrum with flat phase), "duration"
    (shortest FWHM), "flat phase" (least rms of the spectral phase, weighted by the spectrum, beyond a
    constant and a delay), "two-photon" (integral of the power squared over that with flat phase), "contrast"
    (least share of the energy outside a window of length `window` seconds, laid where it holds most).
    target: in the goal's terms: a ratio, seconds, radians, a ratio, a share; None for none.
    transmission_weight: 0 asks for quality alone; 1 counts what gets through in full, so that "peak power"
    means absolute peak power and "two-photon" the absolute signal. size_weight: in 1/m: how many times e
    a metre of footprint costs of the score.
    """

    name: GoalName = "peak power"
    target: float | None = None
    transmission_weight: float = 0.0
    size_weight: float = 0.0
    window: float | None = None

    def __post_init__(self) -> None:
        if self.name == "contrast" and not (self.window and self.window > 0):
            raise InputError(
                'the goal "contrast" needs the length of a window',
                value=self.window,
                allowed="a time above 0, such as 100 fs",
            )
        for name in ("transmission_weight", "size_weight"):
            if not (np.isfinite(getattr(self, name)) and getattr(self, name) >= 0):
                raise InputError(
                    f"the {name.replace('_', ' ')} is out of range",
                    value=getattr(self, name),
                    allowed="0 or more",
                )
        if self.target is not None and not self.target > 0:
            raise InputError("the target is out of range", value=self.target, allowed="above 0")


@dataclass(frozen=True, kw_only=True)
class Alternative:
    """Another truth that the data allow: exponent(omega) is added to the logarithm of the path's transfer.

    exponent: complex (n,) for omega in rad/s (n,), the imaginary part a phase, field times exp(+i phase).
    """

    name: str
    exponent: Callable[[Real], Complex]


@dataclass(frozen=True, kw_only=True)
class Problem:
    """A question of compensation. parts: in path order, names unique.

    best: how many designs that differ in kind are wanted. seed: of all draws. alternatives: worst cases of
    the data, over which each design is run. Raises InputError for a part named twice.
    """

    pulse: Pulse | MeasuredPulse
    parts: tuple[Part, ...]
    goal: Goal = field(default_factory=Goal)
    best: int = 3
    seed: int = 1
    alternatives: tuple[Alternative, ...] = ()
    grid: GridWish = field(default_factory=GridWish)
    beyond_range: Literal["refuse", "causal"] = "refuse"
    title: str = ""
    file: str = ""

    def __post_init__(self) -> None:
        names = [part.name for part in self.parts]
        for name in names:
            if names.count(name) > 1:
                raise InputError(
                    "two parts share a name", value=name, allowed="a name of its own for each element"
                )
        if self.best < 1:
            raise InputError(
                "the number of designs is out of range", value=self.best, allowed="1 or more", place="best"
            )
