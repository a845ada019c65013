"""One loop for everything that must be stepped: terms, steppers, step control.

The field obeys dE/dz = L E + sum of terms N(E), L diagonal in frequency. A `Term` acts on the field in time;
a `Stepper` advances by one step; a `StepControl` says how long the next step is. Without terms the steppers
reproduce the exact linear answer to rounding. A new method is one class here and one line in `STEPPERS`.

Symmetric split step: exp(L h/2) exp(N h) exp(L h/2), globally of second order (G. Strang, SIAM J. Numer.
Anal. 5, 506 (1968)).
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import NumericalLimit
from pulseprop.numerics.plans import Plan

__all__ = ["STEPPERS", "FixedSteps", "StepControl", "Stepper", "SymmetricSplit", "Term", "Travelled", "march"]

Complex = NDArray[np.complex128]


class Term(Protocol):
    """Something that acts on the field in time over a short length."""

    def act(self, field: Complex, length: float) -> None:
        """Advance the field, shape (points,), by `length` metres under this term alone, in place."""
        ...


class Stepper(Protocol):
    """Advances the spectrum in a plan's buffer by one step."""

    def step(self, plan: Plan, exponent: Complex, terms: Sequence[Term], length: float) -> float | None:
        """Advance plan.buffer (natural order spectrum) in place by `length` m.

        exponent: L in 1/m, (points,), in natural order. Returns a local error estimate where there is one.
        """
        ...


class StepControl(Protocol):
    """Chooses step lengths."""

    def next(self, done: float, total: float, error: float | None) -> float:
        """Length of the next step in m, given what is done, the whole, and the last error estimate."""
        ...


@dataclass(frozen=True)
class FixedSteps:
    """`count` equal steps."""

    count: int

    def next(self, done: float, total: float, error: float | None) -> float:
        """total/count, or what is left; see `StepControl`."""
        return min(total / self.count, total - done)


class SymmetricSplit:
    """Half a linear step, the terms, half a linear step.

    Neighbouring halves are not merged, so every step ends whole.
    """

    def __init__(self) -> None:
        self._length = 0.0
        self._half: Complex = np.zeros(0, dtype=complex)

    def step(self, plan: Plan, exponent: Complex, terms: Sequence[Term], length: float) -> float | None:
        """One step of `length` m in place; no error estimate. See `Stepper`."""
        if length != self._length or self._half.size != exponent.size:
            self._half = np.exp(exponent * (0.5 * length))
            self._length = length
        plan.buffer *= self._half
        plan.to_field()
        plan.buffer *= plan.scale
        for term in terms:
            term.act(plan.buffer, length)
        plan.to_spectrum()
        plan.buffer *= self._half
        return None


STEPPERS: dict[str, Callable[[], Stepper]] = {"split-step": SymmetricSplit}


@dataclass(frozen=True)
class Travelled:
    """What a march took: steps, transforms, the largest local error estimate where there are estimates."""

    steps: int
    transforms: int
    estimated_error: float | None


def march(
    plan: Plan,
    exponent: Complex,
    terms: Sequence[Term],
    length: float,
    stepper: Stepper,
    control: StepControl,
    most_steps: int = 1_000_000,
) -> Travelled:
    """Advance the spectrum in plan.buffer (natural order) over `length` metres.

    Raises NumericalLimit after `most_steps` steps.
    """
    done, steps, error = 0.0, 0, None
    worst: float | None = None
    before = plan.transforms
    while length - done > 1e-12 * length:
        if steps >= most_steps:
            raise NumericalLimit(
                "the split-step loop did not come to the end of the element",
                value=f"{done:.3g} m of {length:.3g} m after {steps} steps",
                remedy="allow a larger propagation.local_error or shorten the element",
            )
        step = control.next(done, length, error)
        error = stepper.step(plan, exponent, terms, step)
        if error is not None:
            worst = max(worst or 0.0, error)
        done += step
        steps += 1
    return Travelled(steps, plan.transforms - before, worst)
