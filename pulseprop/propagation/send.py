"""A run: size the grid, walk the path, check, enlarge, measure, judge."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import FEMTO
from pulseprop.elements.device import Remarking
from pulseprop.elements.group import every, media_of
from pulseprop.elements.telling import Light, Telling
from pulseprop.errors import PulsepropError
from pulseprop.measures.delays import delay_split
from pulseprop.measures.limits import TransformLimit
from pulseprop.propagation.assess import measured
from pulseprop.propagation.budget import summed
from pulseprop.propagation.cautions import cautions_for
from pulseprop.propagation.converge import Progress, Propagated, propagated
from pulseprop.propagation.diagnostics import causality_of
from pulseprop.propagation.experiment import Experiment
from pulseprop.propagation.hazards import hazard_facts
from pulseprop.propagation.ranges import RANGE_SHARE, energy_without_data, range_warnings
from pulseprop.propagation.result import (
    ElementMeasures,
    Fields,
    GridMeasures,
    PathMeasures,
    PulseMeasures,
    Run,
    Solver,
    smallest,
)
from pulseprop.propagation.signs import autocorrelation_fit, denial, open_chirp, sign_cases
from pulseprop.propagation.sources import media_used
from pulseprop.propagation.words import headline
from pulseprop.pulse.pulse import Pulse

__all__ = ["Progress", "run"]

Complex = NDArray[np.complex128]


def _silent(stage: str, fraction: float) -> None:
    pass


def run(experiment: Experiment, version: str, catalogue_sha256: str, progress: Progress = _silent) -> Run:
    """Propagate and measure. progress(stage, fraction) is called as the work goes on.

    Raises RangeError where the pulse leaves the range of a medium, NumericalLimit where the grid cannot hold
    the answer.
    """
    try:
        done = propagated(experiment, progress)
        fit = autocorrelation_fit(experiment)
        signs = sign_cases(experiment, open_chirp(experiment, fit))
    except PulsepropError as error:
        raise error.located(file=experiment.file) from None
    grid_in, grid_out, spectrum_out = done.windows.grid, done.exit, done.walked.spectrum
    progress("measuring", 0.5)
    before, limit_in = measured(grid_in, done.spectrum_in, after_path=False)
    after, _ = measured(grid_out, spectrum_out, after_path=True)
    fields = _fields(experiment, done)
    path = _path_measures(experiment, done, before, after, fields)
    progress("causality", 0.6)
    causality = causality_of(
        experiment.path,
        experiment.pulse.centre,
        _test_duration(experiment, before),
        experiment.grid.memory,
        lambda fraction: progress("causality", 0.6 + 0.3 * fraction),
    )
    progress("reporting", 0.95)
    rows = tuple(done.walked.rows)
    omega = experiment.pulse.centre
    return Run(
        scenario=experiment.title,
        question=experiment.question,
        answer=experiment.answer,
        note=experiment.note,
        file=experiment.file,
        scenario_text=experiment.text,
        scenario_sha256=experiment.sha256,
        overrides=experiment.overrides,
        catalogue_sha256=catalogue_sha256,
        version=version,
        headline=headline(
            before,
            after,
            path,
            () if experiment.both_signs else signs,
            energy_without_data(experiment, grid_in, done.spectrum_in),
        ),
        pulse_in=before,
        pulse_out=after,
        path=path,
        elements=rows,
        causality=causality,
        grid=GridMeasures(points=grid_in.points, step_fs=grid_in.step * FEMTO, span_fs=grid_in.span * FEMTO),
        solver=_solver(experiment, done),
        media=media_used(experiment.path, omega),
        hazards=hazard_facts(experiment, grid_in, done.spectrum_in, limit_in, rows),
        warnings=(
            *experiment.warnings,
            *denial(experiment, fit),
            *range_warnings(experiment, grid_in, done.spectrum_in),
            *_b_warnings(experiment, rows),
            *_remarks(experiment),
            *_beside_orders(experiment, done, limit_in),
        ),
        cautions=(*cautions_for(experiment.path, rows, experiment.substances), *experiment.cautions),
        pulse_notes=experiment.pulse.notes,
        signs=signs,
        autocorrelation=fit,
        fields=fields,
    )


def _test_duration(experiment: Experiment, before: PulseMeasures) -> float:
    """FWHM in s of the front test's finite pulse: the pulse's own, its transform limit if measured."""
    pulse = experiment.pulse
    return pulse.duration if isinstance(pulse, Pulse) else before.transform_limit_fwhm_fs / FEMTO


def _b_warnings(experiment: Experiment, rows: Sequence[ElementMeasures]) -> tuple[str, ...]:
    """Why the B-integral of the path leaves elements out."""
    if experiment.pulse.beam_radius is None or not experiment.energy_stated:
        return ()
    centre = experiment.pulse.centre
    unknown = [medium.name for medium in experiment.path.media if medium.nonlinear_index(centre) is None]
    unsettled = [
        row.name
        for element, row in zip(experiment.path, rows, strict=True)
        if row.b_integral_rad is None and not any(medium.name in unknown for medium in media_of(element))
    ]
    said = []
    if unknown:
        said.append(f"no n2 is known for {', '.join(unknown)}: the B-integral of the path leaves it out")
    if unsettled:
        said.append(
            f"the pulse is short in a small part of {', '.join(unsettled)} only, and the integral over it "
            "does not settle: the B-integral of the path leaves it out; divide the element to find it"
        )
    return tuple(said)


def _remarks(experiment: Experiment) -> tuple[str, ...]:
    """What elements have to say of their settings."""
    return tuple(
        text
        for element in every(experiment.path)
        if isinstance(element, Remarking)
        for text in element.remarks
    )


def _beside_orders(experiment: Experiment, done: Propagated, limit: TransformLimit) -> tuple[str, ...]:
    """What elements do to this pulse that no order tells."""
    spectrum, grid = done.spectrum_in, done.windows.grid
    light = Light(
        omega=2 * np.pi * grid.frequency,
        power=spectrum.real**2 + spectrum.imag**2,
        duration=limit.fwhm,
    )
    return tuple(
        text
        for element in every(experiment.path)
        if isinstance(element, Telling)
        for text in element.warnings(light)
    )


def _path_measures(
    experiment: Experiment, done: Propagated, before: PulseMeasures, after: PulseMeasures, fields: Fields
) -> PathMeasures:
    rows = done.walked.rows
    split = delay_split(
        done.exit, done.spectrum_in, np.sqrt(fields.transmission), done.exit.to_field(done.walked.spectrum)
    )
    gdd = summed(row.gdd_fs2 for row in rows)
    b = [row.b_integral_rad for row in smallest(rows) if row.b_integral_rad is not None]
    return PathMeasures(
        group_delay_fs=summed(row.group_delay_fs for row in rows),
        gdd_fs2=gdd,
        tod_fs3=summed(row.tod_fs3 for row in rows),
        fod_fs4=summed(row.fod_fs4 for row in rows),
        transmission=after.energy_J / before.energy_J,
        broadening=after.fwhm_fs / before.fwhm_fs,
        centroid_delay_fs=split.centroid * FEMTO,
        net_group_delay_fs=split.net_group_delay * FEMTO,
        reshaping_delay_fs=split.reshaping * FEMTO,
        b_integral_rad=sum(b) if b else None,
        gdd_only_fwhm_fs=_gdd_only(experiment, before, gdd),
    )


def _gdd_only(experiment: Experiment, before: PulseMeasures, gdd: float | None) -> float | None:
    """Textbook: FWHM sqrt(1 + (4 ln2 GDD / FWHM^2)^2) of a Gaussian, from the limit and all GDD, chirp too.

    None where a line stands in the spectrum: the GDD at one frequency says nothing then.
    """
    low, high = experiment.pulse.spectral_extent(RANGE_SHARE)
    if gdd is None or any(medium.ringing(low, high) > 0 for medium in experiment.path.media):
        return None
    limit = before.transform_limit_fwhm_fs
    total = gdd + experiment.pulse.gdd * FEMTO**2
    return float(limit * np.hypot(1.0, 4 * np.log(2) * total / limit**2))


def _fields(experiment: Experiment, done: Propagated) -> Fields:
    return Fields(
        grid_in=done.windows.grid,
        grid_out=done.exit,
        spectrum_in=done.spectrum_in,
        spectrum_out=done.walked.spectrum,
        transmission=done.walked.transmission,
        group_delay=done.walked.group_delay,
        form=experiment.grid.form,
    )


def _solver(experiment: Experiment, done: Propagated) -> Solver:
    exact = experiment.method == "exact"
    return Solver(
        method="exact linear transfer" if exact else "symmetric split step",
        steps=done.steps,
        transforms=done.transforms,
        local_error=None,
        estimated_error=done.wrapped,
        enlargements=done.enlargements,
        wrapped_energy=done.wrapped,
        aliased_energy=done.aliased,
    )
