"""The few sentences of a run that carry its answer."""

from __future__ import annotations

from pulseprop.propagation.result import PathMeasures, PulseMeasures

__all__ = ["duration", "headline", "share"]

RINGING_WORTH_A_WORD = 1e-3


def duration(femtoseconds: float) -> str:
    """A duration for people: three digits, in fs, ps or ns."""
    for limit, unit, scale in ((1e3, "fs", 1.0), (1e6, "ps", 1e-3), (float("inf"), "ns", 1e-6)):
        if abs(femtoseconds) < 0.9995 * limit:
            return f"{_three(femtoseconds * scale)} {unit}"
    raise AssertionError("unreachable")


def _three(value: float) -> str:
    """Three significant digits without an exponent where that is readable."""
    text = f"{value:.3g}"
    return f"{float(text):.0f}" if "e" in text and abs(value) < 1e6 else text


def share(value: float) -> str:
    """A share as per cent: two digits, more where it comes close to all."""
    if value < 0.995:
        return f"{100 * value:.2g} %"
    return f"{100 * value:.5g} %" if value > 0.9999 else f"{100 * value:.4g} %"


def headline(before: PulseMeasures, after: PulseMeasures, path: PathMeasures) -> str:
    """One sentence that answers what arrives."""
    parts = [
        f"{duration(after.fwhm_fs)} at the end of the path against {duration(before.fwhm_fs)} at its start"
    ]
    parts.append(f"{share(after.peak_ratio or 0.0)} of the peak power of the limit")
    if path.transmission < 0.9995:
        parts.append(f"{share(path.transmission)} of the energy")
    if after.split:
        parts.append("the pulse is split")
    elif (after.energy_after or 0.0) > RINGING_WORTH_A_WORD:
        parts.append(
            f"{share(after.energy_after or 0.0)} of what leaves comes more than three widths after the peak"
        )
    return "; ".join(parts) + "."
