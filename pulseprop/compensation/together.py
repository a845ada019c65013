"""All drifts of a design at once: seeded draws, on fields that are as short as the design's own."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.drifts import LOSS, Loose
from pulseprop.compensation.goals import Judge
from pulseprop.compensation.result import Drift, Together
from pulseprop.errors import InputError

__all__ = ["together"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]
Peak = Callable[[Complex], float]

DRAWS = 100
KEPT = 0.9
"""Share of builds that must keep 95 % of the peak."""
HALVINGS = 6
THINNINGS = (16, 8, 4, 2)
SAME_PEAK = 1e-5


@dataclass(frozen=True, eq=False)
class _Curve:
    """exponent(x) = x (linear + x quadratic), through zero and displacements of the lone tolerance."""

    linear: Complex
    quadratic: Complex

    def __call__(self, distance: float) -> Complex:
        return np.asarray(distance * (self.linear + distance * self.quadratic))


def together(
    loose: Sequence[Loose], drifts: Sequence[Drift], exponent: Complex, judge: Judge, seed: int
) -> Together:
    """exponent (n,): that of the design. Quantities of which no limit was met are left out of the first
    answer."""
    rng = np.random.default_rng(seed)
    short, taken = _short(judge, exponent)
    exponent = exponent[taken]
    full = short.peak(exponent)
    uniform, normal = rng.uniform(-1, 1, (DRAWS, len(loose))), rng.standard_normal((DRAWS, len(loose)))
    curves = [_curve(one, drift, taken) for one, drift in zip(loose, drifts, strict=True)]
    reach = [_reach(one, drift) for one, drift in zip(loose, drifts, strict=True)]

    def peaks(distances: Real) -> Real:
        return np.array([_peak(row, curves, exponent, short) / full for row in distances])

    sides = np.array([[low if draw < 0 else high for low, high in reach] for draw in (-1, 1)])
    lone = np.where(uniform < 0, sides[0], sides[1]) * uniform if len(loose) else uniform
    workshop = normal * np.array([one.sigma or 0.0 for one in loose])
    kept = peaks(workshop) if workshop.any() else None
    return Together(
        draws=DRAWS,
        seed=seed,
        share_of_lone=_share(peaks, lone) if lone.any() else None,
        workshop_peak_median=None if kept is None else float(np.median(kept)),
        workshop_peak_tenth=None if kept is None else float(np.quantile(kept, 0.1)),
        workshop_share_kept=None if kept is None else float(np.mean(kept >= 1 - LOSS)),
    )


def _short(judge: Judge, exponent: Complex) -> tuple[Judge, slice]:
    """A judge with the shortest window in which the design has the peak that it has in the long one."""
    full = judge.peak(exponent)
    for every in THINNINGS:
        samples, taken = judge.samples.thinned(every)
        short = Judge(samples=samples, goal=judge.goal)
        if abs(short.peak(exponent[taken]) / full - 1) < SAME_PEAK:
            return short, taken
    return judge, slice(None)


def _curve(loose: Loose, drift: Drift, taken: slice) -> _Curve | None:
    reach = max(side * loose.unit_size if side else 0.0 for side in (drift.below, drift.above))
    reach = reach or loose.sigma or 0.0
    if not reach:
        return None
    try:
        above, below = loose.moved(reach)[taken], loose.moved(-reach)[taken]
    except InputError:
        return None
    return _Curve((above - below) / (2 * reach), (above + below) / (2 * reach**2))


def _reach(loose: Loose, drift: Drift) -> tuple[float, float]:
    return (drift.below or 0.0) * loose.unit_size, (drift.above or 0.0) * loose.unit_size


def _peak(row: Real, curves: Sequence[_Curve | None], exponent: Complex, judge: Judge) -> float:
    total = exponent
    for distance, curve in zip(row, curves, strict=True):
        if curve is not None:
            total = total + curve(float(distance))
    return judge.peak(total)


def _share(peaks: Callable[[Real], Real], lone: Real) -> float:
    """The largest share of the lone tolerances, up to 1, with which nine builds in ten keep 95 %."""

    def holds(share: float) -> bool:
        return float(np.mean(peaks(share * lone) >= 1 - LOSS)) >= KEPT

    if holds(1.0):
        return 1.0
    low, high = 0.0, 1.0
    for _ in range(HALVINGS):
        middle = 0.5 * (low + high)
        low, high = (middle, high) if holds(middle) else (low, middle)
    return low
