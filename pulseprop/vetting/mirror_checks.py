"""What a mirror table says on its face: shares of the energy, bands, angle, and whether it was measured."""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping

import numpy as np
from numpy.typing import NDArray

from pulseprop.vetting.mirror_rows import WORDS, MirrorCurve
from pulseprop.vetting.request import Request
from pulseprop.vetting.result import Finding
from pulseprop.vetting.table import Quantity, SentTable

__all__ = ["PHYSICAL", "angle_and_polarisation", "bands", "shares", "stated_in_words", "too_smooth"]

Curves = Mapping[Quantity, MirrorCurve]
Real = NDArray[np.float64]

PHYSICAL = ("reflectance-above-1", "more-than-all", "negative-share")
"""Codes of shares that no mirror without gain has."""
SLACK = 0.005
"""By so much photometers may err (common practice, no source); shares beyond it were not measured."""

HIGH = 0.01
"""The band of a mirror: rows within this of its highest reflectance."""
PLATEAU_SHARE, PLATEAU = 0.5, 20e-30
"""Rows belong to the plateau of the GDD while they depart from its middle by less than this share of it, or
this much, s^2."""

SMOOTH_ROWS, SMOOTH_SHARE = 20, 1e-3
"""Fewest rows, and largest half unit over the range of a column, at which smoothness tells anything."""
NEIGHBOURS = np.array([-1.0, 4.0, 0.0, 4.0, -1.0]) / 6
"""The cubic through the four neighbours, at the row between them."""


def shares(curves: Curves) -> Iterator[Finding]:
    """R, T and R + T within 0 and 1, digits and uncertainties allowed for."""
    for name in ("reflectance", "transmittance"):
        curve = curves.get(name)
        if curve is None:
            continue
        yield from _outside(curve, curve.values - curve.error - 1, f"{name}-above-1", "above 1")
        yield from _outside(curve, -curve.values - curve.error, "negative-share", "negative")
    yield from _sum(curves)


def _outside(curve: MirrorCurve, excess: Real, code: str, words: str) -> Iterator[Finding]:
    bad = excess > 1e-12
    if not bad.any():
        return
    worst = int(np.argmax(excess))
    shown = f"{100 * curve.values[worst]:.6g} %"
    text = f"The {WORDS[curve.quantity]} is {words}: {shown} at {curve.nm[worst]:.6g} nm."
    percent = words == "above 1" and 1.5 < np.max(curve.values) <= 100
    yield Finding(
        code=code,
        severity="error",
        text=text + (" The numbers look like percentages read as fractions." if percent else ""),
        rows=tuple(curve.lines[bad].tolist()),
        repair=f"state the unit of the {WORDS[curve.quantity]} as %" if percent else None,
    )


def _sum(curves: Curves) -> Iterator[Finding]:
    r, t = curves.get("reflectance"), curves.get("transmittance")
    if r is None or t is None:
        return
    omega = np.intersect1d(r.omega, t.omega)
    if not len(omega):
        return
    r, t = r.at(omega), t.at(omega)
    total, allowed = r.values + t.values, r.error + t.error
    bad = total - allowed > 1 + 1e-12
    if bad.any():
        worst = int(np.argmax(total - allowed))
        yield Finding(
            code="more-than-all",
            severity="error",
            text=f"R + T is above 1: {100 * total[worst]:.6g} % at {r.nm[worst]:.6g} nm.",
            rows=tuple(r.lines[bad].tolist()),
        )
        return
    loss = 1 - total
    worst = int(np.argmax(loss))
    yield Finding(
        code="loss",
        severity="note",
        text=f"1 - R - T, what the coating absorbs and scatters, is up to {100 * loss[worst]:.3g} % "
        f"(at {r.nm[worst]:.6g} nm) and {100 * float(np.median(loss)):.3g} % in the median row.",
    )


def bands(curves: Curves) -> Iterator[Finding]:
    """Whether the mirror reflects wherever its GDD is at its nominal value."""
    r, gdd = curves.get("reflectance"), curves.get("gdd")
    if r is None or gdd is None:
        return
    highest = int(np.argmax(r.values))
    reflecting = _run(r.values >= r.values[highest] - HIGH, highest)
    middle = int(np.argmin(np.abs(gdd.omega - np.mean(r.omega[list(reflecting)]))))
    allowed = max(PLATEAU_SHARE * abs(float(gdd.values[middle])), PLATEAU)
    flat = _run(np.abs(gdd.values - gdd.values[middle]) <= allowed, middle)
    low, high = (float(gdd.omega[end]) for end in flat)
    least, most = (float(r.omega[end]) for end in reflecting)
    if least <= low * (1 + 1e-9) and high <= most * (1 + 1e-9):
        return
    yield Finding(
        code="reflectance-narrower-than-gdd",
        severity="warning",
        text=f"The reflectance stays within {100 * HIGH:g} % of its highest from {_span(r, reflecting)} nm "
        f"only; the GDD is flat from {_span(gdd, flat)} nm. Beyond the narrower of the two the mirror is "
        "not usable.",
    )


def _span(curve: MirrorCurve, ends: tuple[int, int]) -> str:
    """Wavelengths of two rows, the shorter first."""
    return f"{curve.nm[ends[1]]:.5g} to {curve.nm[ends[0]]:.5g}"


def _run(good: NDArray[np.bool_], start: int) -> tuple[int, int]:
    """First and last of the rows around `start` without a gap."""
    bad = np.flatnonzero(~good)
    first = bad[bad < start].max(initial=-1) + 1
    last = bad[bad > start].min(initial=len(good)) - 1
    return int(first), int(last)


ANGLE = re.compile(r"(\d+(?:\.\d+)?)\s*(?:deg\b|degrees?\b|°)")
POLARISATION = re.compile(
    r"\b(unpolari[sz]ed|[ps][ -]?(?:pol\w*)\b|(?:pol\w*)\s*[:=]?\s*[ps]\b)", re.IGNORECASE
)
SAME_ANGLE = 0.5
"""Degrees."""


def stated_in_words(table: SentTable) -> str:
    """Title, comments and headings of the table, in one line."""
    return " ".join((table.title, *table.comments, *(column.header for column in table.columns)))


def angle_and_polarisation(table: SentTable, request: Request) -> Iterator[Finding]:
    """Whether the angle of incidence and the polarisation are known, and are those asked for."""
    words = stated_in_words(table)
    printed = ANGLE.search(words)
    asked = None if request.angle is None else float(np.degrees(request.angle))
    if printed is None and asked is None:
        yield Finding(
            code="angle-not-stated",
            severity="warning",
            text="The angle of incidence is not stated: bands and GDD of a coating move with it.",
            repair='state it, as in --angle "5 deg"',
        )
    elif printed is not None and asked is not None and abs(float(printed[1]) - asked) > SAME_ANGLE:
        yield Finding(
            code="other-angle",
            severity="error",
            text=f"The file says {printed[0]}, and {asked:g} deg was asked for.",
        )
    yield from _polarisation(words, request, asked if printed is None else float(printed[1]))


def _polarisation(words: str, request: Request, angle: float | None) -> Iterator[Finding]:
    printed = POLARISATION.search(words)
    if printed is None and request.polarisation is None and angle != 0:
        yield Finding(
            code="polarisation-not-stated",
            severity="note",
            text="The polarisation is not stated; away from normal incidence it matters.",
        )
    if printed is None or request.polarisation is None:
        return
    letter = re.sub(r"(?i)pol\w*|[^a-z]", "", printed[0].lower())
    if letter in ("s", "p") and letter != request.polarisation:
        yield Finding(
            code="other-polarisation",
            severity="error",
            text=f"The file says {printed[0]!r}, and {request.polarisation} was asked for.",
        )


def too_smooth(curves: Curves) -> Iterator[Finding]:
    """Columns whose every printed digit lies on a smooth curve: calculated, whatever they are sold as."""
    smooth = [WORDS[name] for name, curve in curves.items() if _is_smooth(curve)]
    if smooth:
        yield Finding(
            code="looks-calculated",
            severity="note",
            text=f"Smooth to the last printed digit: {', '.join(smooth)}. Measured curves show noise (common "
            "practice, no source), so this looks calculated: ask whether this lot was measured.",
        )


def _is_smooth(curve: MirrorCurve) -> bool:
    """Whether rows lie on the cubics through their neighbours as well as rounding lets them."""
    if len(curve.omega) < SMOOTH_ROWS or curve.stated:
        return False
    half = float(np.median(curve.error))
    if half > SMOOTH_SHARE * float(np.ptp(curve.values)):
        return False
    rest = curve.values[2:-2] - np.convolve(curve.values, NEIGHBOURS, mode="valid")
    return float(np.median(np.abs(rest))) <= half
