"""The search: discrete choices in the order of promise, refined unless proved to be in vain."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field, replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.bound import Bounds
from pulseprop.compensation.candidates import Kind, background_of, candidates, kind_of
from pulseprop.compensation.goals import Judge
from pulseprop.compensation.phase_fit import whitened
from pulseprop.compensation.problem import Problem
from pulseprop.compensation.refine import Refined, refined
from pulseprop.compensation.samples import Samples
from pulseprop.errors import InputError

__all__ = ["Found", "search"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]
Progress = Callable[[str, float], None]

MOST_REFINED = 400
"""Choices whose field is climbed; those beyond were behind in the ranking by phase, which is no proof."""
NO_DIFFERENCE = 1e-4
"""A part that changes phase (rms, rad) and loss (nepers) by less is as good as left out."""
ALIKE = 6
"""Decimals of the score within which the design with fewer parts is the better one."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Found:
    """The best of each kind, the best first, and what the search did.

    choices: discrete choices there are. refined: those whose field was climbed. proved: those left out by
    a proof that they cannot be better. by_phase: those left out because the ranking by phase put them behind
    (no proof). evaluations: of the field. refusals: settings without elements, in words.
    """

    best: tuple[Refined, ...]
    choices: int
    refined: int
    proved: int
    by_phase: int
    evaluations: int
    refusals: tuple[str, ...]


@dataclass(kw_only=True, eq=False)
class _State:
    """The best of each kind so far."""

    wanted: int
    best: dict[Kind, Refined] = field(default_factory=dict)

    def hurdle(self, kind: Kind) -> float:
        """The score that a choice of this kind must beat to matter."""
        own = self.best[kind].score if kind in self.best else -np.inf
        scores = sorted((one.score for one in self.best.values()), reverse=True)
        listed = scores[self.wanted - 1] if len(scores) >= self.wanted else -np.inf
        return float(max(own, listed))

    def take(self, found: Refined) -> None:
        found = _bare(found)
        kind = kind_of(found.assembly)
        if kind not in self.best or found.score > self.best[kind].score:
            self.best[kind] = found


def search(problem: Problem, samples: Samples, progress: Progress) -> Found:
    """The best settings of the best choices, the same for the same problem.

    Raises InputError where no choice can be built.
    """
    background = background_of(problem.parts, samples)
    ranked, refusals = candidates(problem.parts, samples, background, problem.goal)
    judge = Judge(samples=samples, goal=problem.goal)
    bounds = Bounds(samples=samples, background=background)
    state = _State(wanted=problem.best)
    counts = {"refined": 0, "proved": 0, "by_phase": 0}
    for index, candidate in enumerate(ranked):
        progress("searching", index / len(ranked))
        hurdle = state.hurdle(candidate.kind)
        if np.isfinite(hurdle) and bounds.cannot_reach(candidate.assembly, hurdle, problem.goal):
            counts["proved"] += 1
        elif counts["refined"] >= MOST_REFINED:
            counts["by_phase"] += 1
        else:
            counts["refined"] += 1
            found = refined(candidate.assembly, judge, candidate.first)
            if found is not None:
                state.take(found)
    if not state.best:
        raise InputError(
            "no setting of the compensators can be built", remedy="; ".join(refusals) or "Widen their ranges"
        )
    return Found(
        best=_listed(state),
        choices=len(ranked),
        evaluations=judge.evaluations,
        refusals=refusals,
        **counts,
    )


def _listed(state: _State) -> tuple[Refined, ...]:
    def order(found: Refined) -> tuple[float, int]:
        return -round(found.score, ALIKE), len(found.assembly.models)

    return tuple(sorted(state.best.values(), key=order)[: state.wanted])


def _bare(found: Refined) -> Refined:
    """The same design without optional parts that change nothing where they stand."""
    assembly = found.assembly
    window = np.abs(assembly.samples.amplitude)
    window = window / window.sum()
    kept, shares, start = [], [np.zeros(0)], 0
    for model, values in zip(assembly.models, assembly.values(found.u), strict=True):
        stop = start + values.size
        if not model.part.optional or _acts(model.exponent(values), assembly.samples, window):
            kept.append(model)
            shares.append(found.u[start:stop])
        start = stop
    return replace(found, assembly=replace(assembly, models=tuple(kept)), u=np.concatenate(shares))


def _acts(exponent: Complex, samples: Samples, window: Real) -> bool:
    turned = float(np.linalg.norm(whitened(exponent.imag, samples.detuning, window)))
    return max(turned, abs(float(np.dot(window, exponent.real)))) > NO_DIFFERENCE
