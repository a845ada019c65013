"""What a duration or an autocorrelation measured beside a spectrum says of the chirp: its size, and what
would tell its sign.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from pulseprop.constants import FEMTO
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.measures.autocorrelation import intensity_autocorrelation
from pulseprop.propagation.assess import measured
from pulseprop.propagation.converge import propagated
from pulseprop.propagation.experiment import Experiment, MeasuredAutocorrelation
from pulseprop.propagation.numerals import significant
from pulseprop.propagation.result import AutocorrelationFit, SignCase
from pulseprop.pulse.measured import MeasuredPulse
from pulseprop.pulse.pulse import Pulse
from pulseprop.pulse.source import launch

__all__ = ["autocorrelation_fit", "denial", "open_chirp", "sign_cases"]

GLASS = "fused silica"
SMALLEST_GDD = 1e-33
"""s^2: below this there is no chirp whose sign could be told."""

DENIED = 2.0
"""A trace that lies this many times farther from the pulse as stated than from its fit denies the pulse."""

NEAR = 5e-3
"""Rms distance, of the trace's peak, which no trace is good enough to deny."""


def open_chirp(experiment: Experiment, fit: AutocorrelationFit | None) -> float | None:
    """Size in s^2 of the chirp at the start whose sign nobody measured; None where no chirp is open.

    That of a measured duration; else that of an autocorrelation which denies a pulse stated without GDD.
    """
    if experiment.both_signs:
        return abs(experiment.pulse.gdd)
    if fit is None or experiment.pulse.gdd != 0 or not _denied(fit):
        return None
    return fit.gdd_fs2 / FEMTO**2


def denial(experiment: Experiment, fit: AutocorrelationFit | None) -> tuple[str, ...]:
    """A warning where the measured autocorrelation is not that of the pulse as stated."""
    if fit is None or not _denied(fit):
        return ()
    remedy = (
        "both signs stand in the report; to send one, state gdd"
        if experiment.pulse.gdd == 0
        else "state the gdd, or the measured_duration, that it asks for"
    )
    return (
        f"the answer is for the pulse as stated, but the measured autocorrelation is not its: it asks for "
        f"|GDD| = {significant(fit.gdd_fs2, 3)} fs^2; {remedy}",
    )


def _denied(fit: AutocorrelationFit) -> bool:
    away = float(np.sqrt(np.mean((fit.predicted - fit.measured) ** 2)))
    return away > max(DENIED * fit.residual, NEAR)


def sign_cases(experiment: Experiment, size: float | None) -> tuple[SignCase, ...]:
    """The pulse at the end of the path for GDD of both signs and that size, s^2, at the start; none for None.

    Raises as `propagated` does.
    """
    if size is None:
        return ()
    return tuple(_case(experiment, sign * size) for sign in (1, -1))


def _case(experiment: Experiment, gdd: float) -> SignCase:
    pulse = replace(experiment.pulse, gdd=gdd)
    linear = replace(experiment, pulse=pulse, energy_stated=False, method="exact")
    done = propagated(linear, lambda stage, fraction: None)
    after, _ = measured(done.exit, done.walked.spectrum, after_path=True)
    return SignCase(
        gdd_in_fs2=gdd * FEMTO**2,
        fwhm_fs=after.fwhm_fs,
        peak_ratio=after.peak_ratio or 0.0,
        autocorrelation_fwhm_fs=after.autocorrelation_fwhm_fs,
    )


def autocorrelation_fit(experiment: Experiment) -> AutocorrelationFit | None:
    """The measured autocorrelation beside the predicted one, |GDD| fitted; None where none was given."""
    trace = experiment.autocorrelation
    if trace is None:
        return None
    from pulseprop.pulse.chirp import gdd_from_autocorrelation

    pulse = experiment.pulse
    fit = gdd_from_autocorrelation(pulse, trace.delay, trace.signal)
    glass = _glass(pulse, fit.gdd)
    shown = (trace.signal - fit.background) / fit.scale
    return AutocorrelationFit(
        delay_fs=(trace.delay - fit.centre) * FEMTO,
        measured=shown,
        predicted=_predicted(pulse, trace, fit.centre),
        fitted=(fit.fitted - fit.background) / fit.scale,
        gdd_fs2=fit.gdd * FEMTO**2,
        residual=fit.residual,
        glass=GLASS,
        glass_mm=glass[0],
        fwhm_if_positive_fs=glass[1],
        fwhm_if_negative_fs=glass[2],
    )


def _glass(pulse: Pulse | MeasuredPulse, gdd: float) -> tuple[float | None, float | None, float | None]:
    """Thickness in mm of the glass that tells the sign, and both autocorrelation widths in fs after it."""
    from pulseprop.pulse.chirp import glass_that_tells_the_sign

    medium = catalogue_medium(GLASS)
    if abs(gdd) < SMALLEST_GDD or not medium.band.contains(np.array(pulse.centre)):
        return None, None, None
    found = glass_that_tells_the_sign(pulse, gdd, lambda omega: medium.orders(omega).gvd)
    return found.thickness * 1e3, found.width_if_positive * FEMTO, found.width_if_negative * FEMTO


def _predicted(pulse: Pulse | MeasuredPulse, trace: MeasuredAutocorrelation, centre: float) -> np.ndarray:
    grid, envelope = launch(pulse)
    predicted = intensity_autocorrelation(envelope, grid.step)
    return np.interp(trace.delay - centre, predicted.delay, predicted.signal, left=0.0, right=0.0)
