"""The few sentences of a run that carry its answer."""

from __future__ import annotations

from pulseprop.propagation.numerals import percent, scaled, significant
from pulseprop.propagation.result import PathMeasures, PulseMeasures, SignCase

__all__ = ["durations", "headline"]

RINGING_WORTH_A_WORD = 1e-3

GUESSED = 0.01
"""Share of the energy without data from which the answer itself must say so."""

APART = 10.0
"""Durations whose ratio is larger than this get a unit each."""


def headline(
    before: PulseMeasures,
    after: PulseMeasures,
    path: PathMeasures,
    instead: tuple[SignCase, ...] = (),
    without_data: float = 0.0,
) -> str:
    """One sentence that answers what arrives.

    instead: the pulse at the end for both signs of a chirp that was measured and not stated. without_data:
    share of the pulse's energy outside the range of a record, which the answer then rests on a guess for.
    """
    leaves, enters = durations(after.fwhm_fs, before.fwhm_fs)
    parts = [f"{leaves} at the end of the path against {enters} at its start"]
    parts.append(f"{percent(after.peak_ratio or 0.0, 2)} of the peak power of the limit")
    if path.transmission < 0.9995:
        parts.append(f"{percent(path.transmission, 2)} of the energy")
    if after.split:
        parts.append("the pulse is split")
    elif (after.energy_after or 0.0) > RINGING_WORTH_A_WORD:
        parts.append(
            f"{percent(after.energy_after, 2)} of what leaves comes more than three widths after the peak"
        )
    if instead:
        ends = " or ".join(durations(*(case.fwhm_fs for case in instead)))
        size = significant(abs(instead[0].gdd_in_fs2), 3)
        parts.append(f"with the |GDD| of {size} fs^2 that the measured autocorrelation asks for, {ends}")
    if without_data > GUESSED:
        parts.append(
            f"but {percent(without_data, 2)} of the energy lies where a record of the path has no data"
        )
    return "; ".join(parts) + "."


def durations(*femtoseconds: float) -> list[str]:
    """Three digits each without idle zeros, in one unit where they are of a size."""
    near = max(femtoseconds) <= APART * min(femtoseconds)
    units = [scaled(femtoseconds if near else [duration]) for duration in femtoseconds]
    return [
        f"{_short(duration * factor)} {unit}"
        for duration, (unit, factor) in zip(femtoseconds, units, strict=True)
    ]


def _short(value: float) -> str:
    text = significant(value, 3)
    return text.rstrip("0").rstrip(".") if "." in text and "e" not in text else text
