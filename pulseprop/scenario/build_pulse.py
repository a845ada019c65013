"""The pulse of a scenario."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

from pulseprop.material.wavelength_in_air import omega_of_air_wavelength
from pulseprop.propagation.experiment import MeasuredAutocorrelation
from pulseprop.pulse.bandwidth import duration_from_bandwidth
from pulseprop.pulse.measured import MeasuredPulse
from pulseprop.pulse.pulse import Pulse
from pulseprop.pulse.shapes import shape_named
from pulseprop.scenario.build_files import spectrum_columns, time_and_signal
from pulseprop.scenario.read import Scenario
from pulseprop.scenario.schema_pulse import PulseTable

__all__ = ["autocorrelation_of", "built_pulse"]

UNSTATED_ENERGY = 1e-9
"""J: what a pulse of unstated energy is propagated with; nothing linear depends on it."""


def built_pulse(scenario: Scenario) -> tuple[Pulse | MeasuredPulse, bool]:
    """The pulse, and whether the sign of its GDD is unknown (a measured duration gives |GDD| only: + is
    taken).
    """
    table = scenario.content.pulse
    pulse = _measured(scenario) if table.shape == "measured" else _named(table)
    both_signs = table.measured_duration is not None
    if table.measured_duration is not None:
        from pulseprop.pulse.chirp import chirp_from_duration

        positive, _ = chirp_from_duration(pulse, table.measured_duration)
        pulse = replace(pulse, gdd=positive)
    if table.peak_power is not None:
        pulse = pulse.with_peak_power(table.peak_power)
    return pulse, both_signs


def _common(table: PulseTable) -> dict[str, Any]:
    return {
        "energy": table.energy or UNSTATED_ENERGY,
        "gdd": table.gdd,
        "tod": table.tod,
        "fod": table.fod,
        "carrier_phase": table.carrier_phase,
        "beam_radius": table.beam_radius,
        "repetition_rate": table.repetition_rate,
    }


def _named(table: PulseTable) -> Pulse:
    assert table.centre is not None
    centre = table.centre.omega
    if table.wavelength_in == "air":
        centre = omega_of_air_wavelength(centre)
    shape = shape_named(table.shape, table.order)
    duration = table.duration
    if duration is None:
        assert table.bandwidth is not None
        duration = duration_from_bandwidth(shape, centre, table.bandwidth.about(centre), "frequency")
    return Pulse(centre=centre, duration=duration, shape=shape, **_common(table))


def _measured(scenario: Scenario) -> MeasuredPulse:
    from pulseprop.pulse.spectrum import DEFAULT_CUT, pulse_from_spectrum
    from pulseprop.pulse.waveform import pulse_from_waveform

    table = scenario.content.pulse
    if table.trace is not None:
        time, field = time_and_signal(scenario, table.trace)
        return pulse_from_waveform(time, field, **_common(table))
    assert table.spectrum is not None
    columns = spectrum_columns(scenario, table.spectrum)
    return pulse_from_spectrum(
        columns.x,
        columns.y,
        axis=table.spectrum.x,
        reading=table.spectrum.y,
        phase=columns.phase,
        background=columns.background,
        noise_cut=DEFAULT_CUT if table.spectrum.noise_cut is None else table.spectrum.noise_cut,
        **_common(table),
    )


def autocorrelation_of(scenario: Scenario) -> MeasuredAutocorrelation | None:
    """The measured autocorrelation, if the scenario names one."""
    table = scenario.content.pulse.autocorrelation
    if table is None:
        return None
    delay, signal = time_and_signal(scenario, table)
    return MeasuredAutocorrelation(delay=delay, signal=signal)
