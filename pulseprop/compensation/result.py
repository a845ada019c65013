"""The answer to a question of compensation; units are in the keys, None where there is no answer."""

from __future__ import annotations

from dataclasses import asdict, dataclass, field
from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.path import Path
from pulseprop.propagation.result import Fields, PulseMeasures

__all__ = [
    "AngleError",
    "Compensation",
    "DataCase",
    "Design",
    "Drift",
    "MirrorOrder",
    "Remainder",
    "Ripple",
    "SearchRecord",
    "Setting",
    "State",
    "Target",
    "Together",
]

Real = NDArray[np.float64]
Value = float | str


@dataclass(frozen=True, kw_only=True)
class Setting:
    """One setting in the unit of the bench. move: from today's, None where none is stated or it is a word.

    at_limit: the end of the range at which it stands.
    """

    element: str
    parameter: str
    value: Value
    unit: str
    move: float | None = None
    at_limit: Literal["low", "high"] | None = None


@dataclass(frozen=True, kw_only=True)
class Drift:
    """How far one quantity may be off alone before 5 % of the peak power are lost, in its unit.

    below, above: distances >= 0 in the two directions; None where no such loss was met as far as the element
    can be built. sigma: one standard deviation of an ordinary workshop, as used for `Together`.
    """

    element: str
    parameter: str
    unit: str
    below: float | None
    above: float | None
    sigma: float | None
    set_by_hand: bool


@dataclass(frozen=True, kw_only=True)
class AngleError:
    """What an angle that is off by `angle_deg` does to the orders of the path (the larger of both directions,
    with its sign for the positive one)."""

    element: str
    parameter: str
    angle_deg: float
    gdd_error_fs2: float
    tod_error_fs3: float
    fod_error_fs4: float


@dataclass(frozen=True, kw_only=True)
class Together:
    """All drifts at once, from `draws` seeded draws.

    share_of_lone: with every quantity anywhere within this share of what it may do alone, nine builds in ten
    keep 95 % of the peak. The rest is for normal errors of an ordinary workshop (`Drift.sigma`): median and
    tenth percentile of the peak power over that of the design, and the share of builds that keep 95 %.
    """

    draws: int
    seed: int
    share_of_lone: float | None
    workshop_peak_median: float | None
    workshop_peak_tenth: float | None
    workshop_share_kept: float | None


@dataclass(frozen=True, kw_only=True)
class DataCase:
    """The design under another truth that the data allow: as it stands, and with its continuous settings set
    anew within their ranges."""

    name: str
    peak_ratio: float
    peak_ratio_reset: float


@dataclass(frozen=True, kw_only=True)
class Ripple:
    """A sinusoidal ripple of the mirror's GDD that costs 5 % of the peak: its period, and its amplitude a
    bounce (the least over its position, all bounces alike)."""

    period_THz: float
    amplitude_fs2: float


@dataclass(frozen=True, kw_only=True, eq=False)
class MirrorOrder:
    """What a mirror that is yet to be made must do, one bounce.

    wavelength_nm, gdd_fs2: the target asked for (gdd and tod at the centre); ideal_gdd_fs2: what would take
    the whole rest of the path to a flat phase; low_fs2, high_fs2: the band, target -+ the amplitude of a
    ripple as slow as the spectrum is wide; all (m,). offset_fs2: error of the GDD, alike at all wavelengths,
    that costs 5 % of the peak. ripples: the same for faster ones. band_nm: where the spectrum is above 1 % of
    its peak.
    """

    element: str
    bounces: float
    centre_nm: float
    gdd_at_centre_fs2: float
    tod_at_centre_fs3: float
    band_nm: tuple[float, float]
    offset_fs2: float | None
    ripples: tuple[Ripple, ...]
    wavelength_nm: Real
    gdd_fs2: Real
    ideal_gdd_fs2: Real
    low_fs2: Real
    high_fs2: Real


@dataclass(frozen=True, kw_only=True, eq=False)
class State:
    """A path as it stands: its pulse, transmission and orders (the pulse's stated chirp included).

    fields: for figures.
    """

    fwhm_fs: float
    peak_ratio: float
    two_photon_ratio: float
    transmission: float
    residual_gdd_fs2: float | None
    residual_tod_fs3: float | None
    residual_fod_fs4: float | None
    in_place: tuple[str, ...]
    """Compensators that stand in the path."""
    fields: Fields = field(repr=False)


@dataclass(frozen=True, kw_only=True)
class Remainder:
    """What no compensator can undo, by the elements on which nothing can be set.

    limit_in_fs, limit_out_fs: transform limits of the spectrum that enters and of what is left of it.
    spectrum_in_THz, spectrum_out_THz: their widths (FWHM, outermost points). peak_limit: highest peak power
    behind the fixed path, whatever the phase, over that of what enters. smooth_peak_ratio: peak ratio that is
    left when every smooth phase is taken off (a polynomial of degree eight, fitted): below 1 where lines
    write structure into the phase. dark_nm: stretches of the spectrum, in nm, that lose half or more of
    the power that the best wavelength keeps.
    """

    limit_in_fs: float
    limit_out_fs: float
    spectrum_in_THz: float
    spectrum_out_THz: float
    transmission: float
    peak_limit: float
    smooth_peak_ratio: float
    dark_nm: tuple[tuple[float, float], ...]


@dataclass(frozen=True, kw_only=True)
class SearchRecord:
    """What the search did; see `search.Found`."""

    choices: int
    refined: int
    proved: int
    by_phase: int
    evaluations: int
    points: int
    refusals: tuple[str, ...] = ()


@dataclass(frozen=True, kw_only=True)
class Target:
    """The target against the best design in the goal's terms. short_by: how far it is missed, 0 if reached.

    unit: "" for ratios and shares, "fs", "rad". limits: settings of the nearest design at an end of a range.
    """

    goal: str
    wanted: float | None
    nearest: float
    unit: str
    reached: bool
    short_by: float
    limits: tuple[str, ...] = ()


@dataclass(frozen=True, kw_only=True, eq=False)
class Design:
    """One set-up. quality: in the goal's terms. size_m: sum of the footprints stated by the parts on which
    something is decided.

    left_out: compensators that stand in the path today and are not used. cautions: what the design does not
    consider. worst_case: the least favourable of
    `data`. path: the elements, ready to be sent through. fields: for figures.
    """

    settings: tuple[Setting, ...]
    fwhm_fs: float
    peak_ratio: float
    two_photon_ratio: float
    transmission: float
    residual_gdd_fs2: float | None
    residual_tod_fs3: float | None
    residual_fod_fs4: float | None
    quality: float
    score: float
    size_m: float
    left_out: tuple[str, ...]
    cautions: tuple[str, ...]
    pulse_out: PulseMeasures
    tolerance: tuple[Drift, ...]
    angles: tuple[AngleError, ...]
    together: Together
    data: tuple[DataCase, ...]
    mirrors: tuple[MirrorOrder, ...]
    path: Path = field(repr=False)
    fields: Fields = field(repr=False)

    @property
    def worst_case(self) -> DataCase | None:
        """The case of the data under which the design does worst, as it stands."""
        return min(self.data, key=lambda case: case.peak_ratio, default=None)


@dataclass(frozen=True, kw_only=True, eq=False)
class Compensation:
    """The whole answer, the best design first."""

    transform_limit_fwhm_fs: float
    before: State
    designs: tuple[Design, ...]
    target: Target
    remainder: Remainder
    search: SearchRecord
    seed: int
    notes: tuple[str, ...] = ()

    @property
    def exit_code(self) -> int:
        """1 where a target was stated and no design comes within it, else 0."""
        return int(not self.target.reached)

    def as_json(self) -> dict[str, Any]:
        """The document of the JSON report: arrays as lists, without paths and fields."""
        return {
            "transform_limit_fwhm_fs": self.transform_limit_fwhm_fs,
            "before": {key: value for key, value in vars(self.before).items() if key != "fields"},
            "designs": [_design(design) for design in self.designs],
            "target": asdict(self.target),
            "remainder": asdict(self.remainder),
            "search": asdict(self.search),
            "seed": self.seed,
            "notes": list(self.notes),
        }


def _design(design: Design) -> dict[str, Any]:
    simple = ("settings", "tolerance", "angles", "data")
    left_out = {"path", "fields", "mirrors", "together", "pulse_out", *simple}
    document = {key: value for key, value in vars(design).items() if key not in left_out}
    for key in simple:
        document[key] = [asdict(one) for one in getattr(design, key)]
    document["together"] = asdict(design.together)
    document["pulse_out"] = asdict(design.pulse_out)
    document["mirrors"] = [_listed(asdict(one)) for one in design.mirrors]
    worst = design.worst_case
    document["worst_case"] = None if worst is None else asdict(worst)
    return document


def _listed(document: dict[str, Any]) -> dict[str, Any]:
    return {
        key: value.tolist() if isinstance(value, np.ndarray) else value for key, value in document.items()
    }
