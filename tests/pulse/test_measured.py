"""Measured spectra and waveforms, made here from pulses that are known."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.measures.widths import fwhm
from pulseprop.numerics.interpolation import band_limited
from pulseprop.pulse.pulse import Pulse
from pulseprop.pulse.source import PulseSource, launch
from pulseprop.pulse.spectrum import pulse_from_spectrum
from pulseprop.pulse.waveform import pulse_from_waveform

C = 299792458.0
W0 = 2 * np.pi * C / 800e-9
TRUE = Pulse(centre=W0, duration=22e-15, energy=3e-9)
WAVELENGTH = np.linspace(650e-9, 1000e-9, 1401)


def per_frequency(omega):
    return np.abs(TRUE.amplitude(omega)) ** 2


def counts(wavelength):
    """Power per wavelength, in an instrument's unit."""
    omega = 2 * np.pi * C / wavelength
    return 4e4 * per_frequency(omega) / per_frequency(np.array([W0])) * (800e-9 / wavelength) ** 2


def measured(**changes):
    settings = {"axis": "wavelength", "reading": "counts", "energy": 3e-9, "noise_cut": 1e-8} | changes
    return pulse_from_spectrum(WAVELENGTH, counts(WAVELENGTH), **settings)


def launched_width(source):
    grid, envelope = launch(source)
    return fwhm(envelope, grid.step)


def test_a_clean_spectrum_gives_back_duration_centre_and_energy():
    pulse = measured()
    assert launched_width(pulse) == pytest.approx(22e-15, rel=2e-6)
    assert pulse.centre == pytest.approx(W0, rel=1e-8)
    grid, _ = launch(pulse)
    assert grid.energy(pulse.amplitude(grid.omega)) == pytest.approx(3e-9, rel=1e-8)
    omega = W0 + np.linspace(-1.5e14, 1.5e14, 777)
    assert np.abs(pulse.amplitude(omega)) == pytest.approx(np.abs(TRUE.amplitude(omega)), rel=1e-5)
    assert isinstance(pulse, PulseSource)


def test_counts_need_the_jacobian():
    """Taken as a spectrum per frequency, the same counts give another centre: by the slope of lambda^-2."""
    pulse = measured()
    wrong = pulse_from_spectrum(
        WAVELENGTH, counts(WAVELENGTH), axis="wavelength", reading="amplitude", energy=1.0
    )
    assert abs(wrong.centre / W0 - 1) > 1e-4
    amplitude = np.sqrt(per_frequency(2 * np.pi * C / WAVELENGTH))
    right = pulse_from_spectrum(
        WAVELENGTH, amplitude, axis="wavelength", reading="amplitude", energy=1.0, noise_cut=1e-8
    )
    assert right.centre == pytest.approx(pulse.centre, rel=1e-6)


@pytest.mark.parametrize(
    ("axis", "unit"), [("frequency", 1.0), ("wavenumber", 1 / C), ("photon_energy", 6.62607015e-34)]
)
def test_other_axes_tell_the_same(axis, unit):
    frequency = np.linspace(300e12, 460e12, 1601)
    pulse = pulse_from_spectrum(
        frequency * unit,
        per_frequency(2 * np.pi * frequency),
        axis=axis,
        reading="power",
        energy=3e-9,
        noise_cut=1e-8,
    )
    assert pulse.centre == pytest.approx(W0, rel=1e-8)
    assert launched_width(pulse) == pytest.approx(22e-15, rel=2e-6)


def test_the_limit_moves_with_the_cut_as_a_truncated_gaussian_does():
    pulse = measured(noise_cut=0.01)
    assert [limit.cut for limit in pulse.limits] == [0.005, 0.01, 0.02]
    assert np.all(np.diff([limit.fwhm for limit in pulse.limits]) > 0)
    # The transform of a Gaussian cut at 1 % of the power (both sides, per wavelength), by direct quadrature.
    relative = counts(WAVELENGTH) / counts(WAVELENGTH).max()
    omega = 2 * np.pi * C / WAVELENGTH[relative >= 0.01]
    fine = np.linspace(omega.min(), omega.max(), 4001)
    time = np.linspace(0, 30e-15, 3001)
    field = np.exp(-1j * np.outer(time, fine - W0)) @ np.sqrt(per_frequency(fine))
    power = np.abs(field / field[0]) ** 2
    half = 2 * time[np.argmax(power < 0.5)]
    assert pulse.limits[1].fwhm == pytest.approx(half, rel=3e-3)
    assert "at 1 % of the peak: limit" in " ".join(pulse.notes)


def test_background_and_noise_are_taken_off_and_counted():
    noisy = counts(WAVELENGTH) + 300 + 40 * np.random.default_rng(3).normal(size=WAVELENGTH.size)
    pulse = pulse_from_spectrum(
        WAVELENGTH, noisy, axis="wavelength", reading="counts", energy=3e-9, background=300.0, noise_cut=0.01
    )
    clean = measured(noise_cut=0.01)
    assert launched_width(pulse) == pytest.approx(launched_width(clean), rel=5e-3)
    assert any("below the background" in note for note in pulse.notes)


def test_a_measured_phase_stretches_and_its_mean_delay_is_taken_off():
    omega = 2 * np.pi * C / WAVELENGTH
    phase = 0.5 * 400e-30 * (omega - W0) ** 2 + 120e-15 * omega
    pulse = measured(phase=phase)
    expected = 22e-15 * np.sqrt(1 + (4 * np.log(2) * 400e-30 / 22e-15**2) ** 2)
    assert launched_width(pulse) == pytest.approx(expected, rel=1e-5)
    assert any("mean group delay of 120 fs" in note for note in pulse.notes)
    wrapped = measured(phase=np.angle(np.exp(1j * phase)))
    assert launched_width(wrapped) == pytest.approx(expected, rel=1e-5)
    stated = replace(measured(), gdd=400e-30)
    assert launched_width(stated) == pytest.approx(expected, rel=1e-5)


def test_a_table_that_ends_above_the_noise_says_so():
    part = WAVELENGTH[WAVELENGTH > 790e-9]
    pulse = pulse_from_spectrum(part, counts(part), axis="wavelength", reading="counts", energy=1e-9)
    assert any("ends at its high-frequency side" in note for note in pulse.notes)


def test_a_baseline_that_was_not_taken_off_is_named_as_what_the_open_ends_may_be():
    pulse = pulse_from_spectrum(
        WAVELENGTH,
        counts(WAVELENGTH) / counts(WAVELENGTH).max() + 0.02,
        axis="wavelength",
        reading="counts",
        energy=1e-9,
    )
    assert sum("state it as background" in note for note in pulse.notes) == 2


def test_rows_may_fall_as_well_as_rise():
    pulse = pulse_from_spectrum(
        WAVELENGTH[::-1],
        counts(WAVELENGTH)[::-1],
        axis="wavelength",
        reading="counts",
        energy=3e-9,
        noise_cut=1e-8,
    )
    assert pulse.centre == pytest.approx(measured().centre, rel=1e-14)


@pytest.mark.parametrize(
    ("spoil", "message"),
    [
        (lambda x, y: (x[[0, 2, 1, 3, 4]], y[:5]), r"row 3: the wavelength column turns back or repeats"),
        (lambda x, y: (x[:3], y[:3]), "4 rows or more"),
        (lambda x, y: (x, y[:-1]), "as many readings as places"),
        (lambda x, y: (x, np.where(np.arange(x.size) == 6, np.nan, y)), r"row 7: a reading is not a number"),
        (lambda x, y: (x - x[4], y), "not positive"),
        (lambda x, y: (x, 0 * y), "no row above its background"),
    ],
)
def test_unusable_spectra_are_refused_with_their_row(spoil, message):
    x, y = spoil(WAVELENGTH, counts(WAVELENGTH))
    with pytest.raises(InputError, match=message):
        pulse_from_spectrum(x, y, axis="wavelength", reading="counts", energy=1e-9)


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"axis": "time"}, "another axis"),
        ({"reading": "volts"}, "another reading"),
        ({"noise_cut": 0.7}, "share of the peak"),
        ({"background": np.zeros(3)}, "background does not fit"),
        ({"phase": np.zeros(3)}, "phase does not fit"),
        ({"energy": 0.0}, "energy of a pulse must be positive"),
    ],
)
def test_unusable_settings_are_refused(changes, message):
    with pytest.raises(InputError, match=message):
        measured(**changes)


# A terahertz record: the derivative of a Gaussian, whose spectrum is omega exp(-(omega s)^2 / 4).
SCALE = 0.3e-12
TIME = 40e-12 + np.arange(-8e-12, 16e-12, 50e-15)


def terahertz(time):
    x = (time - 40e-12) / SCALE
    return -x * np.exp(-(x**2))


def test_a_waveform_is_given_back_sample_by_sample():
    pulse = pulse_from_waveform(TIME, terahertz(TIME), energy=1e-12)
    grid, envelope = launch(pulse)
    top = TIME[np.argmax(np.abs(terahertz(TIME)))]
    position = (TIME - top - grid.start) / grid.step
    field = (band_limited(envelope, position) * np.exp(-2j * np.pi * grid.carrier * (TIME - top))).real
    assert field / field[np.argmax(np.abs(field))] == pytest.approx(
        terahertz(TIME) / terahertz(top), abs=2e-5
    )
    assert pulse.energy == 1e-12
    assert any("Time zero was moved" in note and note.endswith(" ps of the record.") for note in pulse.notes)


def test_the_spectrum_of_a_waveform_against_its_closed_form():
    pulse = pulse_from_waveform(TIME, terahertz(TIME), energy=1e-12)
    omega = 2 * np.pi * np.linspace(0.1e12, 4e12, 200)
    form = omega * np.exp(-((omega * SCALE) ** 2) / 4)
    # int_0^inf form^2 d omega / (2 pi) = (sqrt(pi)/4) (2/s^2)^(3/2) / (2 pi)
    norm = np.sqrt(np.pi) / 4 * (2 / SCALE**2) ** 1.5 / (2 * np.pi)
    assert np.abs(pulse.amplitude(omega)) ** 2 == pytest.approx(1e-12 * form**2 / norm, rel=1e-9, abs=1e-33)
    # Energy-mean frequency: int w^3 e^(-w^2 s^2/2) / int w^2 e^(-w^2 s^2/2) = (2/s^4) / (sqrt(pi/2)/s^3)
    assert pulse.centre == pytest.approx(2 / SCALE / np.sqrt(np.pi / 2), rel=1e-6)


def test_an_offset_of_the_record_is_removed_and_reported():
    plain = pulse_from_waveform(TIME, terahertz(TIME), energy=1e-12)
    offset = pulse_from_waveform(TIME, terahertz(TIME) + 0.2, energy=1e-12)
    omega = 2 * np.pi * np.linspace(0.1e12, 3e12, 50)
    assert offset.amplitude(omega) == pytest.approx(plain.amplitude(omega), rel=1e-6, abs=1e-20)
    assert any("The mean of the record" in note for note in offset.notes)


def test_uneven_instants_are_resampled_and_reported():
    uneven = TIME + 10e-15 * np.sin(np.arange(TIME.size))
    pulse = pulse_from_waveform(uneven, terahertz(uneven), energy=1e-12)
    plain = pulse_from_waveform(TIME, terahertz(TIME), energy=1e-12)
    omega = 2 * np.pi * np.linspace(0.2e12, 2e12, 50)
    assert np.abs(pulse.amplitude(omega)) == pytest.approx(np.abs(plain.amplitude(omega)), rel=2e-3)
    assert any("resampled" in note for note in pulse.notes)


def test_short_and_coarse_records_are_noted():
    short = pulse_from_waveform(TIME[150:175], terahertz(TIME[150:175]), energy=1e-12)
    assert any("a longer record" in note for note in short.notes)
    coarse = pulse_from_waveform(TIME[::7], terahertz(TIME[::7]), energy=1e-12)
    assert any("last tenth below the Nyquist" in note for note in coarse.notes)


@pytest.mark.parametrize(
    ("time", "field", "message"),
    [
        (TIME[:10], np.ones(10), "16 rows or more"),
        (TIME[::-1], terahertz(TIME), r"row 2: the time column turns back"),
        (TIME, np.where(np.arange(TIME.size) == 4, np.inf, 0.0), r"row 5: a field is not a number"),
        (TIME, np.ones(TIME.size), "waveform is constant"),
    ],
)
def test_unusable_waveforms_are_refused(time, field, message):
    with pytest.raises(InputError, match=message):
        pulse_from_waveform(time, field, energy=1e-12)


def test_peak_power_of_a_measured_pulse():
    pulse = measured().with_peak_power(1e5)
    assert pulse.peak_power == pytest.approx(1e5, rel=1e-12)
    assert pulse.energy == pytest.approx(1e5 * 22e-15 * np.sqrt(np.pi / (4 * np.log(2))), rel=1e-5)
