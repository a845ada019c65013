"""Index, group index and dispersion orders as linear functions of where a material absorbs.

n - 1 = constant + sum over masses m of m / (a^2 - omega^2), a the frequency at which a mass absorbs. With
h(omega) = omega / (a^2 - omega^2) = [1/(a - omega) - 1/(a + omega)]/2: n - 1 = h/omega, n_g - 1 = h',
c GVD = h'', c TOD = h''', c FOD = h'''', all in closed form.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import factorial
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT

__all__ = ["Order", "Term", "constant_values", "values"]

Real = NDArray[np.float64]

Order = Literal["index", "group index", "gvd", "tod", "fod"]

DERIVATIVES: dict[Order, int] = {"index": 0, "group index": 1, "gvd": 2, "tod": 3, "fod": 4}


@dataclass(frozen=True, kw_only=True)
class Term:
    """weight times an order at omega (rad/s), SI; the index and the group index less 1."""

    order: Order
    omega: float
    weight: float = 1.0


def values(terms: Sequence[Term], places: Real) -> Real:
    """Of unit masses (rad^2/s^2) at these places (rad/s, away from the terms' omega), shape of places."""
    return np.asarray(sum(term.weight * _of_masses(term, places) for term in terms), dtype=float)


def constant_values(terms: Sequence[Term]) -> float:
    """Of n - 1 = 1 at all frequencies."""
    return sum(term.weight for term in terms if term.order in ("index", "group index"))


def _of_masses(term: Term, places: Real) -> Real:
    derivative, omega = DERIVATIVES[term.order], term.omega
    if derivative == 0:
        return np.asarray(1 / ((places - omega) * (places + omega)))
    sign = (-1.0) ** derivative
    power = derivative + 1
    h = factorial(derivative) / 2 * ((places - omega) ** -power - sign * (places + omega) ** -power)
    return np.asarray(h if derivative == 1 else h / SPEED_OF_LIGHT)
