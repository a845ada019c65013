"""The best continuous settings of one discrete choice: fits of the phase, then ascent on the field itself."""

from __future__ import annotations

from dataclasses import dataclass, field, replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.assembly import Assembly
from pulseprop.compensation.goals import Judge, Judged
from pulseprop.compensation.phase_fit import starts, whitened
from pulseprop.errors import InputError

__all__ = ["Refined", "refined"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

CLIMBS = 2
"""Starts from which the field is climbed; the rest were lower and are only looked at."""
EVALUATIONS = 60
"""Evaluations of the field in one climb."""
APART = 1e-3
"""Starts closer than this in phase (rms, rad) are one."""
NO_SETTING = 1e6
"""Minus the score of settings for which no element can be built."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Refined:
    """u: shares of the ranges. score: with size. judged: the field there."""

    assembly: Assembly
    u: Real
    score: float
    judged: Judged


@dataclass(kw_only=True, eq=False)
class _Climb:
    """The score as scipy minimises it, and the best that was met on the way."""

    assembly: Assembly
    judge: Judge
    scale: Real
    best: Refined | None = field(default=None)

    def __call__(self, x: Real) -> tuple[float, Real]:
        u = np.clip(x / self.scale, 0.0, 1.0)
        try:
            judged = self.judge(self.assembly.exponent(u))
            jacobian = self.assembly.jacobian(u)
            size, by_size = self._size(u)
        except InputError:
            return NO_SETTING, np.zeros(x.size)
        score = judged.score - size
        if self.best is None or score > self.best.score:
            self.best = Refined(assembly=self.assembly, u=u, score=score, judged=judged)
        gradient = (judged.variation @ jacobian).real - by_size
        return -score, -gradient / self.scale

    def _size(self, u: Real) -> tuple[float, Real]:
        """What size takes from the score, and its derivative by differences."""
        weight = self.judge.goal.size_weight
        if not weight:
            return 0.0, np.zeros(u.size)
        here, reach = self.assembly.size(u), 1e-4
        slope = np.zeros(u.size)
        for index in range(u.size):
            moved = u.copy()
            moved[index] = u[index] + reach if u[index] < 0.5 else u[index] - reach
            slope[index] = (self.assembly.size(moved) - here) / (moved[index] - u[index])
        return weight * here, weight * slope


def refined(assembly: Assembly, judge: Judge, first: Real) -> Refined | None:
    """The best settings found; None where none of those tried has elements.

    first: a guess (k,), of which the curved settings matter. Goals that jump (the width) are climbed by peak
    power first.
    """
    if judge.goal.name == "duration" and assembly.count:
        by_peak = Judge(samples=judge.samples, goal=replace(judge.goal, name="peak power", target=None))
        guess = refined(assembly, by_peak, first)
        judge.evaluations += by_peak.evaluations
        return None if guess is None else _climbed(assembly, judge, [guess.u])
    try:
        tried = list(starts(assembly, first))
    except InputError:
        return None
    return _climbed(assembly, judge, tried)


def _climbed(assembly: Assembly, judge: Judge, tried: list[Real]) -> Refined | None:
    """Look at every start, climb from the best ones."""
    climb = _Climb(assembly=assembly, judge=judge, scale=np.ones(assembly.count))
    if not assembly.count:
        climb(np.zeros(0))
        return climb.best
    ranked: list[tuple[float, Real]] = []
    for u in _distinct(assembly, tried):
        value, _ = climb(u)
        ranked.append((value, u))
    ranked.sort(key=lambda pair: pair[0])
    for value, u in ranked[:CLIMBS]:
        if value < NO_SETTING:
            _climb_from(climb, u)
    return climb.best


def _distinct(assembly: Assembly, tried: list[Real]) -> list[Real]:
    kept: list[Real] = []
    for u in tried:
        if kept:
            stiffness = _stiffness(assembly, u)
            if any(np.linalg.norm(stiffness * (u - other)) < APART for other in kept):
                continue
        kept.append(u)
    return kept


def _stiffness(assembly: Assembly, u: Real) -> Real:
    """Rms phase in rad that each setting makes over its range, (k,): the natural unit of a step."""
    amplitude = np.abs(assembly.samples.amplitude * np.exp(assembly.exponent(u).real))
    columns = whitened(assembly.jacobian(u).imag, assembly.samples.detuning, amplitude / amplitude.sum())
    return np.asarray(np.maximum(np.linalg.norm(columns, axis=0), 1e-6))


def _climb_from(climb: _Climb, u: Real) -> None:
    from scipy.optimize import minimize

    climb.scale = _stiffness(climb.assembly, u)
    minimize(
        climb,
        u * climb.scale,
        jac=True,
        method="L-BFGS-B",
        bounds=[(0.0, scale) for scale in climb.scale],
        options={"maxfun": EVALUATIONS, "ftol": 1e-11, "gtol": 1e-6},
    )
