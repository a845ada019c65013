"""What a run returns. Names are those of the JSON keys; units are in the names; None where there is no
answer.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import asdict, dataclass, field
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.grid import Grid

__all__ = [
    "AutocorrelationFit",
    "Causality",
    "Caution",
    "ElementMeasures",
    "Fields",
    "GridMeasures",
    "HazardFacts",
    "MediumUsed",
    "NaiveFilter",
    "PathMeasures",
    "PulseMeasures",
    "Run",
    "SignCase",
    "Solver",
    "smallest",
]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True)
class PulseMeasures:
    """One pulse, before or after the path. The last four are None for the pulse that enters."""

    centre_nm: float
    fwhm_fs: float
    rms_fs: float
    equivalent_width_fs: float
    transform_limit_fwhm_fs: float
    time_bandwidth_product: float
    energy_J: float
    peak_power_W: float
    autocorrelation_fwhm_fs: float
    autocorrelation_factor: float
    peak_ratio: float | None = None
    two_photon_ratio: float | None = None
    split: bool | None = None
    energy_after: float | None = None


@dataclass(frozen=True, kw_only=True)
class PathMeasures:
    """The whole path; delays against the same path in vacuum, orders at the pulse's centre frequency."""

    group_delay_fs: float | None
    gdd_fs2: float | None
    tod_fs3: float | None
    fod_fs4: float | None
    transmission: float
    broadening: float
    centroid_delay_fs: float
    net_group_delay_fs: float | None
    reshaping_delay_fs: float | None
    b_integral_rad: float | None
    gdd_only_fwhm_fs: float | None


@dataclass(frozen=True, kw_only=True)
class ElementMeasures:
    """One row of the dispersion budget. `detail` says what it is in a few words ("3 mm fused silica")."""

    name: str
    kind: str
    detail: str
    group_delay_fs: float | None
    gdd_fs2: float | None
    tod_fs3: float | None
    fod_fs4: float | None
    transmission: float
    gdd_sum_fs2: float | None
    tod_sum_fs3: float | None
    fwhm_after_fs: float
    peak_fluence_J_per_cm2: float | None
    peak_intensity_W_per_cm2: float | None
    b_integral_rad: float | None
    digits: int
    """Significant digits that the data behind the row carry."""
    echoes: tuple[tuple[float, float], ...] = ()
    """(delay in fs after the direct passage, share of the energy that leaves) of coherent echoes."""
    figures: Mapping[str, float | None] = field(default_factory=dict)
    """What else is known of the element, the unit in each key."""
    notes: tuple[str, ...] = ()
    """What to know of the figures, a sentence each."""
    parts: tuple[ElementMeasures, ...] = ()
    """Rows of what the element is made of; of parts that the beam meets again, all passages together."""


def smallest(rows: Iterable[ElementMeasures]) -> Iterator[ElementMeasures]:
    """The rows, those of parts in place of what is made of them."""
    for row in rows:
        if row.parts:
            yield from smallest(row.parts)
        else:
            yield row


@dataclass(frozen=True, kw_only=True)
class NaiveFilter:
    """The counter-example: the same absorption with no phase, and what it lets out ahead of the front."""

    energy_ahead_of_front: float
    verdict: str


@dataclass(frozen=True, kw_only=True)
class Causality:
    """Front test and Kramers-Kronig residual; `left_out` names elements given by a phase alone."""

    verdict: str
    energy_ahead_of_front: float | None
    noise_floor: float | None
    kk_residual: float | None
    kk_basis: str
    passive: bool
    naive_filter: NaiveFilter | None
    sum_rules: tuple[tuple[str, str, float | None, str], ...] = ()
    """(medium, rule, ratio of the integral to its expected value or None, remark)."""
    left_out: tuple[str, ...] = ()
    front_points: int = 0
    remark: str = ""


@dataclass(frozen=True, kw_only=True)
class GridMeasures:
    """The grid of the pulse that enters."""

    points: int
    step_fs: float
    span_fs: float


@dataclass(frozen=True, kw_only=True)
class Solver:
    """How the path was computed, and the shares of energy found at the ends of window and band.

    local_error: None, as fixed steps of a linear path have none. estimated_error: what wraps around.
    """

    method: str
    steps: int
    transforms: int
    local_error: float | None
    estimated_error: float | None
    enlargements: int = 0
    wrapped_energy: float = 0.0
    aliased_energy: float = 0.0


@dataclass(frozen=True, kw_only=True)
class Caution:
    """A caution: its code, one short line for the terminal, and the full text for page and JSON."""

    code: str
    line: str
    text: str


@dataclass(frozen=True, kw_only=True)
class MediumUsed:
    """Source line of one medium; `spread` holds (other record, its GVD in fs^2/mm or None).

    completion_shift: largest change of n in range in the causal completion that the diagnostics use.
    """

    name: str
    source: str
    temperature: str
    relative_to: str
    valid_nm: tuple[float, float] | None
    index: float | None
    gvd_fs2_per_mm: float | None
    spread: tuple[tuple[str, float | None], ...] = ()
    notes: tuple[str, ...] = ()
    completion_shift: float = 0.0


@dataclass(frozen=True, kw_only=True)
class SignCase:
    """A measured duration fixes |GDD| only: the pulse at the end of the path for one sign."""

    gdd_in_fs2: float
    fwhm_fs: float
    peak_ratio: float
    autocorrelation_fwhm_fs: float


@dataclass(frozen=True, kw_only=True)
class AutocorrelationFit:
    """A measured intensity autocorrelation against the pulse that enters."""

    delay_fs: Real
    measured: Real
    predicted: Real
    fitted: Real
    gdd_fs2: float
    residual: float
    glass: str
    glass_mm: float | None
    fwhm_if_positive_fs: float | None
    fwhm_if_negative_fs: float | None


@dataclass(frozen=True, kw_only=True)
class HazardFacts:
    """For the hazard assessment: facts about the light, never a verdict."""

    wavelengths_at_1_percent_nm: tuple[float, float]
    wavelengths_at_1e_4_nm: tuple[float, float]
    pulse_energy_J: float | None
    repetition_rate_Hz: float | None
    average_power_W: float | None
    shortest_possible_fwhm_fs: float
    peak_power_at_limit_W: float | None
    beam_radius_m: float | None
    peak_fluence_J_per_cm2: float | None
    peak_intensity_W_per_cm2: float | None
    stray_beams: tuple[str, ...] = ()


@dataclass(frozen=True, kw_only=True)
class Fields:
    """Arrays of a run. Spectra A(omega) in W^(1/2) s on the frequencies of the grid; windows on the front's
    clock.

    grid_in and grid_out share their frequencies; transmission is |transfer|^2, group_delay in s.
    """

    grid_in: Grid
    grid_out: Grid
    spectrum_in: Complex
    spectrum_out: Complex
    transmission: Real
    group_delay: Real
    form: str = "envelope"

    @cached_property
    def envelope_in(self) -> Complex:
        """Envelope about grid_in.carrier in W^(1/2)."""
        return self.grid_in.to_field(self.spectrum_in)

    @cached_property
    def envelope_out(self) -> Complex:
        """Envelope about grid_out.carrier in W^(1/2)."""
        return self.grid_out.to_field(self.spectrum_out)


@dataclass(frozen=True, kw_only=True)
class Run:
    """The answer to `send`; `answer` is what the scenario says to expect."""

    scenario: str
    question: str
    note: str
    file: str
    scenario_text: str
    scenario_sha256: str
    overrides: tuple[str, ...] = ()
    """KEY=VALUE that stood in place of what the text says."""
    catalogue_sha256: str
    version: str
    headline: str
    pulse_in: PulseMeasures
    pulse_out: PulseMeasures
    path: PathMeasures
    elements: tuple[ElementMeasures, ...]
    causality: Causality
    grid: GridMeasures
    solver: Solver
    media: tuple[MediumUsed, ...]
    hazards: HazardFacts
    warnings: tuple[str, ...]
    cautions: tuple[Caution, ...]
    pulse_notes: tuple[str, ...] = ()
    signs: tuple[SignCase, ...] = ()
    autocorrelation: AutocorrelationFit | None = None
    answer: str = ""
    fields: Fields = field(repr=False)

    @property
    def exit_code(self) -> int:
        """0, or 1 where the causality diagnostics fail."""
        return 1 if self.causality.verdict == "acausal" else 0

    def as_json(self) -> dict[str, Any]:
        """The document of the JSON report: plain numbers, None where there is no answer."""
        document = {
            "scenario": self.scenario,
            "overrides": list(self.overrides),
            "question": self.question,
            "answer": self.answer,
            "version": self.version,
            "headline": self.headline,
            "pulse_in": _without_unasked(asdict(self.pulse_in)),
            "pulse_out": asdict(self.pulse_out),
            "path": asdict(self.path),
            "elements": [asdict(element) for element in self.elements],
            "causality": asdict(self.causality),
            "grid": asdict(self.grid),
            "solver": asdict(self.solver),
            "media": [asdict(medium) for medium in self.media],
            "pulse_notes": list(self.pulse_notes),
            "signs": [asdict(case) for case in self.signs],
            "autocorrelation": self.autocorrelation and asdict(self.autocorrelation),
            "hazard_assessment": asdict(self.hazards),
            "warnings": list(self.warnings),
            "cautions": [{"code": caution.code, "text": caution.text} for caution in self.cautions],
        }
        return {key: _plain(value) for key, value in document.items()}


def _without_unasked(measures: dict[str, Any]) -> dict[str, Any]:
    asked = ("peak_ratio", "two_photon_ratio", "split", "energy_after")
    return {key: value for key, value in measures.items() if key not in asked}


def _plain(value: Any) -> Any:
    """Plain JSON values: numpy scalars unwrapped, tuples as lists, numbers that are not finite as None."""
    if isinstance(value, dict):
        return {key: _plain(item) for key, item in value.items()}
    if isinstance(value, list | tuple | np.ndarray):
        return [_plain(item) for item in value]
    if isinstance(value, np.bool_ | bool):
        return bool(value)
    if isinstance(value, float | np.floating):
        return float(value) if np.isfinite(value) else None
    if isinstance(value, np.integer):
        return int(value)
    return value
