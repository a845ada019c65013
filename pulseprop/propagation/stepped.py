"""A slab taken in split steps instead of at once: the loop that nonlinear terms need, on a linear path the
exact answer.
"""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.element import Element
from pulseprop.numerics.plans import Plan, natural
from pulseprop.propagation.linear import at_once
from pulseprop.propagation.stepping import STEPPERS, FixedSteps, march

__all__ = ["SteppedAdvance"]

Complex = NDArray[np.complex128]

STEPS_PER_ELEMENT = 16


@dataclass(kw_only=True)
class SteppedAdvance:
    """Advances a spectrum through elements by a named stepper; counts steps and transforms."""

    method: str
    points: int
    steps: int = 0
    transforms: int = 0
    plan: Plan = field(init=False)

    def __post_init__(self) -> None:
        self.plan = Plan(self.points, effort="estimate")

    def __call__(self, element: Element, exponent: Complex, spectrum: Complex) -> None:
        """Take A(omega) through one element in place; elements without length are applied at once."""
        if element.length == 0:
            at_once(element, exponent, spectrum)
            return
        line = _straight_part(exponent, spectrum)
        self.plan.buffer[:] = natural(spectrum)
        per_length = natural(exponent - line)
        per_length /= element.length
        stepper, control = STEPPERS[self.method](), FixedSteps(STEPS_PER_ELEMENT)
        travelled = march(self.plan, per_length, (), element.length, stepper, control)
        spectrum[:] = np.fft.fftshift(self.plan.buffer)
        spectrum *= np.exp(line)
        self.steps += travelled.steps
        self.transforms += travelled.transforms


def _straight_part(exponent: Complex, spectrum: Complex) -> Complex:
    """A straight line of phase over frequency, tangent to the exponent at the strongest sample.

    Thousands of radians of carrier phase and delay, taken in many small steps, would cost digits; the frame
    of the steps moves with the pulse instead, and the line is applied once.
    """
    top = int(np.clip(np.argmax(np.abs(spectrum)), 1, spectrum.size - 2))
    phase = exponent.imag
    slope = 0.5 * (phase[top + 1] - phase[top - 1])
    return np.asarray(1j * (phase[top] + slope * (np.arange(spectrum.size) - top)))
