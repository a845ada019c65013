"""A path sent through in full: what a design is worth, by the same walk as every run."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.problem import Problem
from pulseprop.constants import FEMTO
from pulseprop.elements.path import Path
from pulseprop.errors import PulsepropError
from pulseprop.propagation.assess import measured
from pulseprop.propagation.converge import propagated
from pulseprop.propagation.experiment import Experiment
from pulseprop.propagation.result import Fields, PulseMeasures

__all__ = ["Sent", "sent"]

Complex = NDArray[np.complex128]


@dataclass(frozen=True, kw_only=True, eq=False)
class Sent:
    """Measures of the pulse behind a path. gdd, tod, fod: fs^2, fs^3, fs^4 at the centre of the pulse, its
    own stated chirp included; None where an element has none."""

    path: Path
    pulse_in: PulseMeasures
    pulse_out: PulseMeasures
    transmission: float
    gdd: float | None
    tod: float | None
    fod: float | None
    fields: Fields


def sent(problem: Problem, path: Path) -> Sent:
    """Send the pulse of the problem through a path.

    Raises RangeError where it leaves the range of a medium, NumericalLimit where no grid holds the answer.
    """
    experiment = Experiment(
        title=problem.title,
        pulse=problem.pulse,
        path=path,
        file=problem.file,
        energy_stated=False,
        grid=problem.grid,
        beyond_range=problem.beyond_range,
    )
    try:
        done = propagated(experiment, lambda stage, fraction: None)
    except PulsepropError as error:
        raise error.located(file=problem.file) from None
    grid_in, grid_out, rows = done.windows.grid, done.exit, done.walked.rows
    before, _ = measured(grid_in, done.spectrum_in, after_path=False)
    after, _ = measured(grid_out, done.walked.spectrum, after_path=True)
    pulse = problem.pulse
    return Sent(
        path=path,
        pulse_in=before,
        pulse_out=after,
        transmission=after.energy_J / before.energy_J,
        gdd=_sum([pulse.gdd * FEMTO**2, *(row.gdd_fs2 for row in rows)]),
        tod=_sum([pulse.tod * FEMTO**3, *(row.tod_fs3 for row in rows)]),
        fod=_sum([pulse.fod * FEMTO**4, *(row.fod_fs4 for row in rows)]),
        fields=Fields(
            grid_in=grid_in,
            grid_out=grid_out,
            spectrum_in=done.spectrum_in,
            spectrum_out=done.walked.spectrum,
            transmission=done.walked.transmission,
            group_delay=done.walked.group_delay,
        ),
    )


def _sum(values: Iterable[float | None]) -> float | None:
    total = 0.0
    for value in values:
        if value is None:
            return None
        total += value
    return total
