"""The pulse of a scenario: named shapes, measured spectra and waveforms."""

from __future__ import annotations

from typing import Any

import pytest

from pulseprop.errors import InputError
from pulseprop.scenario.read import scenario_from
from pulseprop.scenario.schema_pulse import PulseTable

NAMED = {"shape": "sech2", "centre": "800 nm", "duration": "30 fs"}
SPECTRUM = {"file": "s.txt", "x": "wavelength", "x_unit": "nm", "y": "counts"}
TRACE = {"file": "e.txt", "x": "time", "x_unit": "ps", "y": "field"}


def pulse(**table: Any) -> PulseTable:
    return scenario_from({"pulse": table}).content.pulse


def refused(**table: Any) -> str:
    with pytest.raises(InputError) as caught:
        pulse(**table)
    return str(caught.value)


def test_all_keys_of_a_named_shape_in_si() -> None:
    found = pulse(
        shape="supergaussian",
        centre="1.55 eV",
        bandwidth="400 cm^-1",
        order=3,
        peak_power="1 GW",
        repetition_rate="1 kHz",
        beam_radius="1 mm",
        gdd="-40 fs^2",
        tod="120 fs^3",
        fod="-5 fs^4",
        carrier_phase="0.5 rad",
    )
    assert found.centre is not None
    assert found.bandwidth is not None
    assert (found.centre.axis, found.bandwidth.axis) == ("frequency", "frequency")
    assert found.bandwidth.value == pytest.approx(400e2 * 299792458.0)
    assert (found.order, found.peak_power, found.repetition_rate, found.beam_radius) == (3, 1e9, 1e3, 1e-3)
    assert (found.gdd, found.tod, found.fod, found.carrier_phase) == (-40e-30, 120e-45, -5e-60, 0.5)


def test_a_bandwidth_in_wavelength_stays_one() -> None:
    width = pulse(shape="gaussian", centre="800 nm", bandwidth="40 nm").bandwidth
    assert width is not None
    assert (width.axis, width.value) == ("wavelength", 40e-9)


def test_a_measured_spectrum_with_all_that_may_be_said_of_it() -> None:
    more = {
        "phase": 3,
        "phase_unit": "deg",
        "phase_sign": -1,
        "background": "dark.txt",
        "noise_cut": "0.5 %",
        "wavelength_in": "air",
        "y_column": "counts",
    }
    autocorrelation = {"file": "ac.csv", "x": "delay", "x_unit": "fs"}
    found = pulse(
        shape="measured",
        spectrum=SPECTRUM | more,
        energy="10 nJ",
        measured_duration="62 fs",
        autocorrelation=autocorrelation,
    )
    spectrum = found.spectrum
    assert spectrum is not None
    assert (spectrum.phase, spectrum.phase_sign, spectrum.noise_cut) == (3, -1, 0.005)
    assert (spectrum.background, spectrum.y_column, spectrum.wavelength_in) == ("dark.txt", "counts", "air")
    assert found.autocorrelation is not None
    assert found.measured_duration == 62e-15


def test_a_background_may_be_a_number() -> None:
    spectrum = pulse(shape="measured", spectrum=SPECTRUM | {"background": 12}).spectrum
    assert spectrum is not None
    assert spectrum.background == 12.0


def test_a_measured_waveform_needs_no_energy() -> None:
    found = pulse(shape="measured", trace=TRACE)
    assert found.trace is not None
    assert found.energy is None


@pytest.mark.parametrize(
    ("table", "parts"),
    [
        ({"shape": "measured"}, ["pulse", "one of spectrum, trace is missing"]),
        ({"shape": "measured", "spectrum": SPECTRUM, "trace": TRACE}, ["pulse.trace", "exclude each other"]),
        (
            {"shape": "measured", "spectrum": SPECTRUM, "duration": "3 fs"},
            ["pulse.duration", "the file tells it"],
        ),
        (
            {"shape": "measured", "trace": TRACE, "measured_duration": "3 fs"},
            ["measured_duration", "its own chirp"],
        ),
        ({"shape": "measured", "trace": TRACE | {"x_unit": "nm"}}, ["trace.x_unit", "(got 'nm')", '"fs"']),
        ({"shape": "measured", "trace": TRACE | {"y": "intensity"}}, ["trace.y", '"field"']),
        ({"shape": "measured", "spectrum": SPECTRUM | {"y": "count"}}, ["spectrum.y", 'mean "counts"?']),
        (
            {"shape": "measured", "spectrum": SPECTRUM | {"y": "power", "x_unit": "fs"}},
            ["spectrum.x_unit", "fs"],
        ),
        ({"shape": "measured", "spectrum": SPECTRUM | {"phase": 0}}, ["spectrum.phase", "names no column"]),
        (
            {"shape": "measured", "spectrum": SPECTRUM | {"phase_unit": "fs"}},
            ["spectrum.phase_unit", '"rad"'],
        ),
        ({"shape": "measured", "spectrum": SPECTRUM | {"background": True}}, ["spectrum.background", "True"]),
        ({"shape": "measured", "spectrum": SPECTRUM | {"noise_cut": 2}}, ["spectrum.noise_cut", "1 or less"]),
        (
            {"shape": "measured", "spectrum": {"file": "s"}},
            ["spectrum.x", "spectrum.x_unit", "spectrum.y", "missing"],
        ),
        (NAMED | {"bandwidth": "40 nm"}, ["pulse.bandwidth", "exclude each other", "measured_duration"]),
        (NAMED | {"duration": "0 fs"}, ["pulse.duration", "above 0 s"]),
        (NAMED | {"centre": "800"}, ["pulse.centre", "unit is missing", '"375 THz"']),
        (NAMED | {"centre": "2 1/fs"}, ["pulse.centre", "bare rate"]),
        (
            NAMED | {"centre": "375 THz", "wavelength_in": "air"},
            ["pulse.wavelength_in", "given as a wavelength"],
        ),
        (NAMED | {"energy": "2 uW"}, ["pulse.energy", "that of a power", '"2 uJ"']),
        (NAMED | {"gdd": "40 fs"}, ["pulse.gdd", '"-40 fs^2"']),
        (NAMED | {"order": 2}, ["pulse.order", "supergaussian"]),
        (NAMED | {"shape": "supergaussian", "order": 0}, ["pulse.order", "1 or more"]),
        (NAMED | {"shape": "supergaussian", "order": 2.5}, ["pulse.order", "a whole number (got 2.5)"]),
    ],
)
def test_bad_pulses_are_refused(table: dict[str, Any], parts: list[str]) -> None:
    found = refused(**table)
    for part in parts:
        assert part in found
