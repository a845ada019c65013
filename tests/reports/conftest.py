"""A run made by hand: a 12 fs Gaussian through 250 fs^2, every number from a closed form."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from pulseprop.grid import Grid
from pulseprop.propagation.result import (
    AutocorrelationFit,
    Causality,
    Caution,
    ElementMeasures,
    Fields,
    GridMeasures,
    HazardFacts,
    MediumUsed,
    NaiveFilter,
    PathMeasures,
    PulseMeasures,
    Run,
    SignCase,
    Solver,
)

LN2 = np.log(2.0)
FWHM, GDD, ENERGY, DELAY = 12.0, 250.0, 5e-9, 10_000.0
CARRIER = 374.740572e12
OUT = FWHM * np.sqrt(1 + (4 * LN2 * GDD / FWHM**2) ** 2)
"""Width after GDD of an unchirped Gaussian: a closed form of every textbook on short pulses."""


def spectrum_of(grid: Grid, gdd: float, delay: float) -> np.ndarray:
    """A(omega) of a Gaussian of intensity FWHM 12 fs and 5 nJ, with GDD (fs^2) and delay (fs)."""
    detuning = 2 * np.pi * (grid.frequency - CARRIER) * 1e-15
    width = FWHM / np.sqrt(8 * LN2)
    shape = np.exp(-((width * detuning) ** 2)) * np.exp(1j * (0.5 * gdd * detuning**2 + delay * detuning))
    shape[grid.frequency <= 0] = 0
    return shape * np.sqrt(ENERGY * grid.span / np.vdot(shape, shape).real)


def fields_of(delay: float = DELAY, form: str = "envelope") -> Fields:
    grid = Grid(points=2048, step=1.5e-15, start=-1536e-15, carrier=CARRIER)
    detuning = 2 * np.pi * (grid.frequency - CARRIER)
    return Fields(
        grid_in=grid,
        grid_out=grid.moved(grid.start + delay * 1e-15),
        spectrum_in=spectrum_of(grid, 0.0, 0.0),
        spectrum_out=spectrum_of(grid, GDD, delay),
        transmission=np.ones(grid.points),
        group_delay=delay * 1e-15 + GDD * 1e-30 * detuning,
        form=form,
    )


def pulse_of(width: float, peak_ratio: float | None) -> PulseMeasures:
    return PulseMeasures(
        centre_nm=800.0,
        fwhm_fs=width,
        rms_fs=width / np.sqrt(8 * LN2),
        equivalent_width_fs=width * np.sqrt(np.pi / LN2) / 2,
        transform_limit_fwhm_fs=FWHM,
        time_bandwidth_product=2 * LN2 / np.pi * width / FWHM,
        energy_J=ENERGY,
        peak_power_W=2 * np.sqrt(LN2 / np.pi) * ENERGY / (width * 1e-15),
        autocorrelation_fwhm_fs=np.sqrt(2) * width,
        autocorrelation_factor=float(np.sqrt(2)),
        peak_ratio=peak_ratio,
        two_photon_ratio=peak_ratio,
        split=None if peak_ratio is None else False,
        energy_after=None if peak_ratio is None else 1e-12,
    )


def element(name: str, gdd: float, digits: int, gdd_sum: float, **other: object) -> ElementMeasures:
    return replace(
        ElementMeasures(
            name=name,
            kind="slab",
            detail="3 mm fused silica",
            group_delay_fs=5000.0,
            gdd_fs2=gdd,
            tod_fs3=82.4871,
            fod_fs4=-34.3012,
            transmission=0.932612,
            gdd_sum_fs2=gdd_sum,
            tod_sum_fs3=82.4871,
            fwhm_after_fs=float(OUT),
            peak_fluence_J_per_cm2=5.1e-8,
            peak_intensity_W_per_cm2=4e6,
            b_integral_rad=1e-5,
            digits=digits,
        ),
        **other,
    )


@pytest.fixture(scope="session")
def run() -> Run:
    return Run(
        scenario="invented window",
        question="How long is it?",
        note="Invented laboratory, invented data.",
        file="window.toml",
        scenario_text='title = "invented window"\n',
        scenario_sha256="ab" * 32,
        catalogue_sha256="cd" * 32,
        version="0.0.1",
        headline="59.0 fs at the end of the path against 12.0 fs at its start.",
        pulse_in=pulse_of(FWHM, None),
        pulse_out=pulse_of(float(OUT), FWHM / float(OUT)),
        path=PathMeasures(
            group_delay_fs=DELAY,
            gdd_fs2=GDD,
            tod_fs3=0.0,
            fod_fs4=0.0,
            transmission=1.0,
            broadening=float(OUT / FWHM),
            centroid_delay_fs=DELAY,
            net_group_delay_fs=DELAY,
            reshaping_delay_fs=0.0,
            b_integral_rad=1e-5,
            gdd_only_fwhm_fs=float(OUT),
        ),
        elements=(
            element("cryostat window", 108.4567, 4, 108.4567),
            element("objective", 141.5433, 2, 250.0),
        ),
        causality=Causality(
            verdict="causal",
            energy_ahead_of_front=3e-29,
            noise_floor=1e-28,
            kk_residual=0.0,
            kk_basis="closed form",
            passive=True,
            naive_filter=NaiveFilter(energy_ahead_of_front=1.1e-2, verdict="acausal"),
            sum_rules=(("fused silica", "f-sum", 1.0, "remark"),),
            left_out=("objective",),
            front_points=4096,
        ),
        grid=GridMeasures(points=2048, step_fs=1.5, span_fs=3072.0),
        solver=Solver(
            method="exact linear transfer", steps=0, transforms=2, local_error=None, estimated_error=None
        ),
        media=(
            MediumUsed(
                name="fused silica",
                source="I. H. Malitson (1965)",
                temperature="20 degC",
                relative_to="air",
                valid_nm=(210.0, 3710.0),
                index=1.45332,
                gvd_fs2_per_mm=36.16,
                spread=(("fused silica (Arosa 2020)", 35.86),),
            ),
        ),
        hazards=HazardFacts(
            wavelengths_at_1_percent_nm=(711.0, 915.0),
            wavelengths_at_1e_4_nm=(679.0, 974.0),
            pulse_energy_J=ENERGY,
            repetition_rate_Hz=80e6,
            average_power_W=0.4,
            shortest_possible_fwhm_fs=12.0,
            peak_power_at_limit_W=391e3,
            beam_radius_m=2.5e-3,
            peak_fluence_J_per_cm2=5.1e-8,
            peak_intensity_W_per_cm2=4e6,
            stray_beams=("cryostat window: each face reflects about 3.4 % if uncoated",),
        ),
        warnings=("the objective is known by two orders only",),
        cautions=(
            Caution(
                code="laser-radiation", line="laser radiation: one line", text="Laser radiation, in full."
            ),
        ),
        signs=(
            SignCase(gdd_in_fs2=302.0, fwhm_fs=92.1, peak_ratio=0.13, autocorrelation_fwhm_fs=130.0),
            SignCase(gdd_in_fs2=-302.0, fwhm_fs=17.2, peak_ratio=0.7, autocorrelation_fwhm_fs=24.3),
        ),
        autocorrelation=_fit(),
        fields=fields_of(),
    )


def _fit() -> AutocorrelationFit:
    delay = np.linspace(-200.0, 200.0, 81)
    trace = np.exp(-4 * LN2 * (delay / 62.0) ** 2)
    return AutocorrelationFit(
        delay_fs=delay,
        measured=trace,
        predicted=trace,
        fitted=trace,
        gdd_fs2=302.0,
        residual=0.012,
        glass="fused silica",
        glass_mm=5.0,
        fwhm_if_positive_fs=92.0,
        fwhm_if_negative_fs=38.0,
    )
