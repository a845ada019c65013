"""A run: size the grid, walk the path, check, enlarge, measure, judge."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import RangeError
from pulseprop.grid import Grid
from pulseprop.measures.delays import delay_split
from pulseprop.propagation.assess import measured
from pulseprop.propagation.budget import Walk, walk
from pulseprop.propagation.cautions import cautions_for
from pulseprop.propagation.diagnostics import causality_of
from pulseprop.propagation.experiment import Experiment
from pulseprop.propagation.hazards import hazard_facts
from pulseprop.propagation.linear import at_once
from pulseprop.propagation.numerals import percent
from pulseprop.propagation.result import (
    Fields,
    GridMeasures,
    PathMeasures,
    PulseMeasures,
    Run,
    Solver,
)
from pulseprop.propagation.signs import autocorrelation_fit, sign_cases
from pulseprop.propagation.sizing import Windows, first_windows, larger
from pulseprop.propagation.sources import media_used
from pulseprop.propagation.stepped import SteppedAdvance
from pulseprop.propagation.words import headline
from pulseprop.pulse.pulse import Pulse

__all__ = ["Progress", "run"]

Complex = NDArray[np.complex128]
Progress = Callable[[str, float], None]

RANGE_SHARE = 1e-6
WRAPPED_SHARE = 1e-10
EDGE_SHARE = 0.02
FEMTO = 1e15


@dataclass(frozen=True, kw_only=True)
class _Propagated:
    """The walk that passed the checks."""

    windows: Windows
    spectrum_in: Complex
    walked: Walk
    steps: int
    transforms: int
    enlargements: int
    wrapped: float

    @property
    def exit(self) -> Grid:
        return self.windows.after(len(self.windows.starts) - 1)


def _silent(stage: str, fraction: float) -> None:
    pass


def run(experiment: Experiment, version: str, catalogue_sha256: str, progress: Progress = _silent) -> Run:
    """Propagate and measure. progress(stage, fraction) is called as the work goes on.

    Raises RangeError where the pulse leaves the range of a medium, NumericalLimit where the grid cannot hold
    the answer.
    """
    done = _propagate(experiment, progress)
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
        catalogue_sha256=catalogue_sha256,
        version=version,
        headline=headline(before, after, path),
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
            *_range_warnings(experiment, grid_in, done.spectrum_in),
            *_b_warnings(experiment),
        ),
        cautions=(*cautions_for(experiment.path, rows, experiment.substances), *experiment.cautions),
        pulse_notes=experiment.pulse.notes,
        signs=sign_cases(experiment) if experiment.both_signs else (),
        autocorrelation=autocorrelation_fit(experiment),
        fields=fields,
    )


def _test_duration(experiment: Experiment, before: PulseMeasures) -> float:
    """FWHM in s of the front test's finite pulse: the pulse's own, its transform limit if measured."""
    pulse = experiment.pulse
    return pulse.duration if isinstance(pulse, Pulse) else before.transform_limit_fwhm_fs / FEMTO


def _propagate(experiment: Experiment, progress: Progress) -> _Propagated:
    windows = first_windows(experiment.pulse, experiment.path, experiment.grid)
    enlargements = 0
    while True:
        spectrum = experiment.pulse.amplitude(windows.grid.omega)
        if enlargements == 0:
            _check_range(experiment, windows.grid, spectrum)
        stepped = (
            None
            if experiment.method == "exact"
            else SteppedAdvance(method=experiment.method, points=spectrum.size)
        )
        progress("propagating", 0.1)
        walked = walk(
            experiment.path,
            windows,
            spectrum,
            experiment.pulse.centre,
            experiment.pulse.beam_radius if experiment.energy_stated else None,
            stepped or at_once,
        )
        wrapped = max(
            _edge_energy(windows.grid, spectrum),
            _edge_energy(windows.after(len(windows.starts) - 1), walked.spectrum),
        )
        if wrapped <= WRAPPED_SHARE:
            return _Propagated(
                windows=windows,
                spectrum_in=spectrum,
                walked=walked,
                steps=stepped.steps if stepped else len(experiment.path),
                transforms=stepped.transforms if stepped else len(experiment.path),
                enlargements=enlargements,
                wrapped=wrapped,
            )
        windows = larger(windows, experiment.pulse, experiment.path, experiment.grid)
        enlargements += 1


def _edge_energy(grid: Grid, spectrum: Complex) -> float:
    """Share of the energy at the end (and, half as long, the start) of the window: what would wrap around."""
    field = grid.to_field(spectrum)
    power = field.real**2 + field.imag**2
    last = int(EDGE_SHARE * grid.points)
    return float((power[-last:].sum() + power[: last // 2].sum()) / power.sum())


def _energy_outside(grid: Grid, spectrum: Complex, low: float, high: float) -> float:
    power = spectrum.real**2 + spectrum.imag**2
    inside = slice(*np.searchsorted(grid.frequency, np.array([low, high]) / (2 * np.pi)))
    total = float(power.sum())
    return max(total - float(power[inside].sum()), 0.0) / total if total else 0.0


def _check_range(experiment: Experiment, grid: Grid, spectrum: Complex) -> None:
    for medium in experiment.path.media:
        low, high = medium.band.low, medium.band.high
        outside = _energy_outside(grid, spectrum, low, high)
        if outside <= RANGE_SHARE or (experiment.beyond_range == "causal" and medium.extendable):
            continue
        covered = f"{_nanometres(high)} to {_nanometres(low)}"
        raise RangeError(
            f"the pulse leaves the range of medium {medium.name!r}",
            value=f"{percent(outside, 2)} of the pulse's energy lies outside {covered}",
            allowed=f"at most {RANGE_SHARE:g} of the energy outside the range of a record",
            remedy=(
                'Take a record that covers the spectrum, a narrower pulse, or [grid] beyond_range = "causal"'
                if medium.extendable
                else "Relaxation terms may not be used above their range: add what absorbs there"
            ),
            file=experiment.file,
            place=f"medium {medium.name}",
        )


def _nanometres(omega: float) -> str:
    if omega == 0:
        return "any longer wavelength"
    if not np.isfinite(omega):
        return "any shorter wavelength"
    return f"{2 * np.pi * 299792458.0 / omega * 1e9:.6g} nm"


def _range_warnings(experiment: Experiment, grid: Grid, spectrum: Complex) -> tuple[str, ...]:
    said = []
    for medium in experiment.path.media:
        outside = _energy_outside(grid, spectrum, medium.band.low, medium.band.high)
        if outside > RANGE_SHARE:
            said.append(
                f"{percent(outside, 2)} of the pulse's energy lies outside the range of {medium.name}, "
                "which was continued causally"
            )
    return tuple(said)


def _b_warnings(experiment: Experiment) -> tuple[str, ...]:
    if experiment.pulse.beam_radius is None or not experiment.energy_stated:
        return ()
    missing = [
        medium.name
        for medium in experiment.path.media
        if medium.nonlinear_index(experiment.pulse.centre) is None
    ]
    if not missing:
        return ()
    return (f"no n2 is known for {', '.join(missing)}: the B-integral of the path leaves it out",)


def _path_measures(
    experiment: Experiment, done: _Propagated, before: PulseMeasures, after: PulseMeasures, fields: Fields
) -> PathMeasures:
    rows = done.walked.rows
    split = delay_split(
        done.exit, done.spectrum_in, np.sqrt(fields.transmission), done.exit.to_field(done.walked.spectrum)
    )
    gdd = _sum(row.gdd_fs2 for row in rows)
    b = [row.b_integral_rad for row in rows if row.b_integral_rad is not None]
    return PathMeasures(
        group_delay_fs=_sum(row.group_delay_fs for row in rows),
        gdd_fs2=gdd,
        tod_fs3=_sum(row.tod_fs3 for row in rows),
        fod_fs4=_sum(row.fod_fs4 for row in rows),
        transmission=after.energy_J / before.energy_J,
        broadening=after.fwhm_fs / before.fwhm_fs,
        centroid_delay_fs=split.centroid * FEMTO,
        net_group_delay_fs=split.net_group_delay * FEMTO,
        reshaping_delay_fs=split.reshaping * FEMTO,
        b_integral_rad=sum(b) if b else None,
        gdd_only_fwhm_fs=_gdd_only(experiment, before, gdd),
    )


def _sum(values: Iterable[float | None]) -> float | None:
    """The sum, or None where one of the values is unknown."""
    total = 0.0
    for value in values:
        if value is None:
            return None
        total += value
    return total


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


def _fields(experiment: Experiment, done: _Propagated) -> Fields:
    return Fields(
        grid_in=done.windows.grid,
        grid_out=done.exit,
        spectrum_in=done.spectrum_in,
        spectrum_out=done.walked.spectrum,
        transmission=done.walked.transmission,
        group_delay=done.walked.group_delay,
        form=experiment.grid.form,
    )


def _solver(experiment: Experiment, done: _Propagated) -> Solver:
    exact = experiment.method == "exact"
    return Solver(
        method="exact linear transfer" if exact else "symmetric split step",
        steps=done.steps,
        transforms=done.transforms,
        local_error=None if exact else experiment.local_error,
        estimated_error=done.wrapped,
        enlargements=done.enlargements,
        wrapped_energy=done.wrapped,
    )
