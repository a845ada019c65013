"""Phase, group delay, GDD and TOD of one mirror: each is the derivative of the one before, or what else."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import pairwise
from math import inf

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.mirror_derivative import Agreement, agreement, common_rows
from pulseprop.vetting.mirror_rows import FEMTO, WORDS, MirrorCurve
from pulseprop.vetting.result import Finding
from pulseprop.vetting.table import Quantity

__all__ = ["CHAIN", "Mismatch", "compared_columns"]

Real = NDArray[np.float64]

CHAIN: tuple[Quantity, ...] = ("phase", "group_delay", "gdd", "mirror_tod")
TELLS = 3.0
"""So much more than allowed a column must change for a comparison to tell anything."""
COARSE = 0.05
"""Share of the integral that the row spacing may leave open for a comparison."""
MEASURED = 0.05
"""Relative uncertainty that measured dispersion easily has (common practice, no source)."""
UNRESOLVED, MOST_OF_ROWS = 1.0, 90
"""Share of the change from row to row (in per cent of the rows) that may lie unseen between them."""
FEWEST_ROWS = 12
"""Rows below which a ripple may hide between them altogether."""
NEAR = 4
BISECTIONS = 8
PRINTED_UNIT: dict[Quantity, float] = {"group_delay": 1e-15, "gdd": 1e-30, "mirror_tod": 1e-45}
"""SI value of 1 fs, 1 fs^2, 1 fs^3."""


@dataclass(frozen=True, kw_only=True)
class Mismatch:
    """finding, with the factor by which two columns depart, whether a repair of a whole column mends it, and
    whether both uncertainties were stated."""

    finding: Finding
    factor: float = 0.0
    mended: bool = False
    stated: bool = False


def compared_columns(curves: dict[Quantity, MirrorCurve]) -> Iterator[Mismatch]:
    """Every two columns that follow each other in the chain."""
    for above, below in pairwise(CHAIN):
        if above in curves and below in curves:
            shared = common_rows(curves[above], curves[below])
            if shared is not None:
                yield from _compared(*shared)
    known = [name for name in CHAIN if name in curves]
    if len(known) == 1:
        yield _note(
            "one-dispersion-column",
            f"Of phase, group delay, GDD and TOD only the {WORDS[known[0]]} is given, so nothing checks it.",
        )


def _compared(upper: MirrorCurve, lower: MirrorCurve) -> Iterator[Mismatch]:
    found = agreement(upper, lower.values, lower.error)
    names = f"{WORDS[lower.quantity]} and {WORDS[upper.quantity]}"
    turned = agreement(upper, -lower.values, lower.error)
    if found.coarse > COARSE or (found.factor <= 1 and turned.factor <= 1):
        text = f"The rows are too coarse, or the digits too few, to compare {names}."
        yield _note("columns-not-compared", text)
    elif found.factor <= 1:
        text = f"The {WORDS[lower.quantity]} is the derivative of the {WORDS[upper.quantity]} in all rows."
        yield _note("columns-agree", text)
    else:
        yield _phase_convention(upper, lower) or _mismatch(upper, lower, found)


def _note(code: str, text: str) -> Mismatch:
    return Mismatch(finding=Finding(code=code, severity="note", text=text))


def _phase_convention(upper: MirrorCurve, lower: MirrorCurve) -> Mismatch | None:
    """A phase of the other sign, or without its linear term: usual ways to print it, and no faults."""
    if upper.quantity != "phase":
        return None
    for sign, how in ((1.0, ""), (-1.0, "of the other sign, that of fields exp(+i omega t)")):
        for free in (False, True):
            then = agreement(upper, sign * lower.values, lower.error, free_slope=free)
            if then.factor <= 1 and then.seen >= TELLS:
                parts = [how] if how else []
                parts += ["printed without a term linear in frequency"] if free else []
                return Mismatch(
                    finding=Finding(
                        code="phase-sign" if how else "phase-without-delay",
                        severity="warning",
                        text=f"The phase agrees with the group delay if it is {' and '.join(parts)}.",
                        repair="turn the sign of the phase" if how else None,
                    )
                )
    return None


def _mismatch(upper: MirrorCurve, lower: MirrorCurve, found: Agreement) -> Mismatch:
    """That the columns depart, with what would explain it."""
    lines = sorted(upper.lines[list(found.pair)].tolist())
    stated = upper.stated and lower.stated
    text = (
        f"The {WORDS[lower.quantity]} is not the derivative of the {WORDS[upper.quantity]}: between rows "
        f"{lines[0]} and {lines[1]} they depart by {found.factor:.3g} times what digits and spacing allow."
    )
    reading, severity = _reading(upper, lower), "error"
    if reading is not None:
        why = f"They agree if {reading}."
    else:
        severity, why, lone = _unread(upper, lower, found, stated)
        lines = lines if lone is None else [int(upper.lines[lone])]
    finding = Finding(
        code="columns-disagree",
        severity="error" if severity == "error" else "warning",
        text=f"{text} {why}",
        rows=tuple(lines),
        repair=reading,
    )
    blame = found.factor if severity == "error" else 1.0
    return Mismatch(finding=finding, factor=blame, mended=reading is not None, stated=stated)


def _unread(
    upper: MirrorCurve, lower: MirrorCurve, found: Agreement, stated: bool
) -> tuple[str, str, int | None]:
    """Of columns that no slip explains: severity, what would make them agree, and the one row at fault."""
    needed = _needed(upper, lower)
    size, unit = FEMTO[lower.quantity]
    agree = f"They agree if the {WORDS[lower.quantity]} is uncertain by +-{needed / size:.2g} {unit}"
    if needed <= UNRESOLVED * _between_rows(lower.values):
        return (
            "warning",
            f"{agree}: structure that the rows do not resolve, or noise, would explain it.",
            None,
        )
    if not stated and needed <= MEASURED * float(np.median(np.abs(lower.values))):
        return "warning", f"{agree}, as measurements are.", None
    lone = _lone(upper, lower, found)
    if lone is None:
        return "error", f"{agree}.", None
    row = f"row {upper.lines[lone]} ({upper.nm[lone]:.6g} nm)"
    return "error", f"Without {row} all others agree.", lone


def _between_rows(values: Real) -> float:
    """How much a column bends from row to row, in most of its rows; without limit where they are few."""
    if len(values) < FEWEST_ROWS:
        return inf
    return float(np.percentile(np.abs(np.diff(values, 2)), MOST_OF_ROWS))


def _lone(upper: MirrorCurve, lower: MirrorCurve, found: Agreement) -> int | None:
    """The one row, near the two that depart most, without which all others agree; None where none is."""
    first, last = found.pair
    if last - first > NEAR:
        return None
    for row in range(max(first - 1, 0), min(last + 2, len(upper.omega))):
        omega = np.delete(upper.omega, row)
        rest = lower.at(omega)
        if agreement(upper.at(omega), rest.values, rest.error).factor <= 1:
            return row
    return None


def _needed(upper: MirrorCurve, lower: MirrorCurve) -> float:
    """The least uncertainty of all rows of the lower column, SI, at which the two agree."""
    low, high = 0.0, float(np.median(lower.error))
    while agreement(upper, lower.values, lower.error + high).factor > 1:
        low, high = high, 2 * high
    for _ in range(BISECTIONS):
        middle = (low + high) / 2
        beyond = agreement(upper, lower.values, lower.error + middle).factor > 1
        low, high = (middle, high) if beyond else (low, middle)
    return high


def _reading(upper: MirrorCurve, lower: MirrorCurve) -> str | None:
    """What the columns are taken as, in words that follow "they agree if"; None where nothing fits."""
    for words, factor in _factors(upper, lower):
        then = agreement(upper, factor * lower.values, np.abs(factor) * lower.error)
        if then.factor <= 1 and then.seen >= TELLS:
            return words
    return None


def _factors(upper: MirrorCurve, lower: MirrorCurve) -> Iterator[tuple[str, float | Real]]:
    """Likely slips, and what they make of the lower column, the sign as printed first."""
    above, below = WORDS[upper.quantity], WORDS[lower.quantity]
    plain: list[tuple[str, float | Real]] = [
        (f"the {above} is that of a pair of bounces and the {below} that of one", 2.0),
        (f"the {below} is that of a pair of bounces and the {above} that of one", 0.5),
        (f"one of the two has the other unit, fs for ps or the like (the {below} is 1000 times larger)", 1e3),
        (
            f"one of the two has the other unit, fs for ps or the like (the {below} is 1000 times smaller)",
            1e-3,
        ),
        (f"the {below} is a derivative by ordinary and not angular frequency", 1 / (2 * np.pi)),
        (f"the {below} is 2 pi times larger: one of the two is per ordinary frequency", 2 * np.pi),
    ]
    if upper.quantity in PRINTED_UNIT and lower.quantity in PRINTED_UNIT:
        per_nm = PRINTED_UNIT[upper.quantity] / 1e-9 / PRINTED_UNIT[lower.quantity]
        slope = -TWO_PI_C / upper.omega**2
        plain.append((f"the {below} is the derivative of the {above} by wavelength, per nm", per_nm * slope))
    yield f"the sign of one of the two is turned, the {below} or the {above}", -1.0
    yield from plain
    for words, factor in plain:
        yield f"{words}, and the sign of one of the two is turned", -factor
