"""From the question to the answer: search on a grid that holds the pulse, check every design in full.

answer = compensate(problem)
answer.designs[0].settings          in the units of the bench, with the move from today's setting
answer.exit_code                    1 where a target was stated and is not reached
answer.as_json()                    for the report
"""

from __future__ import annotations

from collections.abc import Callable, Sequence

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.candidates import background_of
from pulseprop.compensation.designs import design_of, path_of
from pulseprop.compensation.goals import Judge
from pulseprop.compensation.problem import Goal, Problem
from pulseprop.compensation.remainder import remainder_of
from pulseprop.compensation.result import Compensation, Design, SearchRecord, State, Target
from pulseprop.compensation.samples import Samples, longer, samples_for
from pulseprop.compensation.search import Found, search
from pulseprop.compensation.today import in_place, path_today
from pulseprop.compensation.verify import Sent, sent
from pulseprop.constants import FEMTO
from pulseprop.errors import NumericalLimit

__all__ = ["compensate"]

Complex = NDArray[np.complex128]
Progress = Callable[[str, float], None]

SAME_RATIO = 1e-4
"""Peak ratios of search and full run that differ by more mean that the search's window was too short."""
SHRINKS = 0.7
"""At least by this factor a longer window must bring them together."""
AS_WRITTEN = 5e-4
"""A target counts as reached within this part of it: "12 fs" is no more precise than that."""
SMALLER_IS_BETTER = ("duration", "flat phase", "contrast")
UNITS = {"duration": ("fs", FEMTO), "flat phase": ("rad", 1.0)}


def _silent(stage: str, fraction: float) -> None:
    pass


def compensate(problem: Problem, progress: Progress = _silent) -> Compensation:
    """The best designs that differ in kind, the best first, with tolerances and the verdict on the target.

    The same problem gives the same answer. progress(stage, fraction) is called as the work goes on. Raises
    InputError where no compensator can be built or the pulse leaves the range of a medium, NumericalLimit
    where no window holds the pulse of a design.
    """
    before = sent(problem, path_today(problem.parts))
    samples, found, checked = _settled(problem, progress)
    judge = Judge(samples=samples, goal=problem.goal)
    designs = []
    for index, (one, run) in enumerate(zip(found.best, checked, strict=True)):
        progress("tolerances", index / len(found.best))
        designs.append(design_of(problem, one, run, judge))
    return Compensation(
        transform_limit_fwhm_fs=before.pulse_in.transform_limit_fwhm_fs,
        before=_state(problem, before),
        designs=tuple(designs),
        target=_target(problem.goal, designs),
        remainder=remainder_of(judge, background_of(problem.parts, samples)),
        search=SearchRecord(
            choices=found.choices,
            refined=found.refined,
            proved=found.proved,
            by_phase=found.by_phase,
            evaluations=found.evaluations,
            points=samples.grid.points,
            refusals=found.refusals,
        ),
        seed=problem.seed,
        notes=_notes(problem, found),
    )


def _settled(problem: Problem, progress: Progress) -> tuple[Samples, Found, list[Sent]]:
    """Search, and search again on a longer window until full runs of the designs agree."""
    samples = samples_for(problem.pulse, problem.grid, problem.beyond_range)
    apart = np.inf
    while True:
        found = search(problem, samples, progress)
        checked = [sent(problem, path_of(problem, one)) for one in found.best]
        before, apart = apart, _apart(found, checked)
        if apart <= SAME_RATIO:
            return samples, found, checked
        if apart > SHRINKS * before:
            raise NumericalLimit(
                "search and full run do not agree on the best design, and a longer window does not help",
                value=f"peak ratios {apart:.2g} apart",
                allowed=f"{SAME_RATIO:g}",
                remedy="Narrow the ranges to where the beam passes all edges, or leave width and beam_radius "
                "of the compensator out",
            )
        samples = longer(samples, problem.grid)


def _apart(found: Found, checked: Sequence[Sent]) -> float:
    """Largest difference of a peak ratio between search and full run."""
    return max(
        abs((run.pulse_out.peak_ratio or 0.0) - one.judged.peak_ratio)
        for one, run in zip(found.best, checked, strict=True)
    )


def _state(problem: Problem, run: Sent) -> State:
    after = run.pulse_out
    return State(
        fwhm_fs=after.fwhm_fs,
        peak_ratio=after.peak_ratio or 0.0,
        two_photon_ratio=after.two_photon_ratio or 0.0,
        transmission=run.transmission,
        residual_gdd_fs2=run.gdd,
        residual_tod_fs3=run.tod,
        residual_fod_fs4=run.fod,
        in_place=tuple(part.name for part in problem.parts if part.movable and in_place(part)),
        fields=run.fields,
    )


def _target(goal: Goal, designs: Sequence[Design]) -> Target:
    """The design that comes nearest to the target, which need not be the one that scores best."""
    unit, scale = UNITS.get(goal.name, ("", 1.0))
    sign = -1.0 if goal.name in SMALLER_IS_BETTER else 1.0
    nearest = max(designs, key=lambda design: sign * design.quality)
    wanted = goal.target
    short = 0.0 if wanted is None else sign * (wanted - nearest.quality)
    reached = wanted is None or short <= AS_WRITTEN * wanted
    return Target(
        goal=goal.name,
        wanted=None if wanted is None else wanted * scale,
        nearest=nearest.quality * scale,
        unit=unit,
        reached=reached,
        short_by=0.0 if reached else short * scale,
        limits=tuple(
            f"{one.element}: {one.parameter} at its {one.at_limit} limit, {one.value:.6g} {one.unit}".rstrip()
            for one in nearest.settings
            if one.at_limit
        ),
    )


def _notes(problem: Problem, found: Found) -> tuple[str, ...]:
    said = []
    if found.by_phase:
        said.append(
            f"{found.by_phase} of {found.choices} discrete choices were left out because their fitted phase "
            "stayed behind that of the others; no proof excludes them"
        )
    unknown = [part.name for part in problem.parts if not part.optional and not in_place(part)]
    if unknown:
        said.append(f"no present setting is stated for {', '.join(unknown)}: today's path is taken without")
    return tuple(said)
