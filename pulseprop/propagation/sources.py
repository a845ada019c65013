"""Source lines of the media of a path, with the spread between published records."""

from __future__ import annotations

import numpy as np

from pulseprop.constants import TWO_PI_C
from pulseprop.elements.path import Path
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.features import completion_shift
from pulseprop.material.medium import Medium
from pulseprop.propagation.result import MediumUsed

__all__ = ["media_used"]

FS2_PER_MM = 1e27
NOTED_SHIFT = 1.1e-8
"""What the replacement of poles by bands may shift n by."""


def media_used(path: Path, omega: float) -> tuple[MediumUsed, ...]:
    """One entry a medium, at the pulse's centre omega (rad/s)."""
    return tuple(_used(medium, omega) for medium in path.media)


def _used(medium: Medium, omega: float) -> MediumUsed:
    orders = medium.orders(omega)
    shift = completion_shift(medium.response)
    return MediumUsed(
        name=medium.name,
        source=medium.source,
        temperature=medium.temperature,
        relative_to=medium.relative_to,
        valid_nm=valid_nm(medium),
        index=_finite(orders.index),
        gvd_fs2_per_mm=_finite(orders.gvd * FS2_PER_MM),
        spread=tuple((name, _gvd(name, omega)) for name in medium.spread),
        notes=(*medium.notes, *_shift_note(shift)),
        completion_shift=shift,
    )


def _shift_note(shift: float) -> tuple[str, ...]:
    if shift <= NOTED_SHIFT:
        return ()
    return (
        f"no passive causal medium has exactly this formula: the model of the causality diagnostics departs "
        f"from it by up to {shift:.1g} in n; dispersion and propagation use the formula as printed",
    )


def valid_nm(medium: Medium) -> tuple[float, float] | None:
    """Range of vacuum wavelength in nm; None where the medium is not bounded on both sides."""
    low, high = medium.band.low, medium.band.high
    if low <= 0 or not np.isfinite(high):
        return None
    return float(f"{TWO_PI_C / high * 1e9:.9g}"), float(f"{TWO_PI_C / low * 1e9:.9g}")


def _gvd(name: str, omega: float) -> float | None:
    """GVD in fs^2/mm of another record at omega; None outside its range."""
    other = catalogue_medium(name)
    if not other.band.contains(np.array(omega)):
        return None
    return _finite(other.orders(omega).gvd * FS2_PER_MM)


def _finite(value: float) -> float | None:
    return value if np.isfinite(value) else None
