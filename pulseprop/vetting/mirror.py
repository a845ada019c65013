"""A mirror or coating table, judged: each column against the others and against what was ordered.

There is no Kramers-Kronig relation between reflectance and phase to test: it would need minimum phase, which
a chirped mirror does not have.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import asdict
from math import inf

import numpy as np

from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.mirror_checks import (
    PHYSICAL,
    SLACK,
    angle_and_polarisation,
    bands,
    shares,
    stated_in_words,
    too_smooth,
)
from pulseprop.vetting.mirror_columns import compared_columns
from pulseprop.vetting.mirror_requirement import mirror_answer, mirror_bounds, quantity_of, value_at
from pulseprop.vetting.mirror_rows import FEMTO, WORDS, MirrorCurve, curve_of
from pulseprop.vetting.request import Request
from pulseprop.vetting.requirement import Requirement, read_requirement
from pulseprop.vetting.result import Finding, Vetted
from pulseprop.vetting.table import Quantity, SentTable
from pulseprop.vetting.told import Stamp, told, verdict_of

__all__ = ["MIRROR_QUANTITIES", "is_mirror", "judge_mirror"]

Curves = dict[Quantity, MirrorCurve]

MIRROR_QUANTITIES: tuple[Quantity, ...] = (
    "reflectance",
    "transmittance",
    "phase",
    "group_delay",
    "gdd",
    "mirror_tod",
)

SHOWN_FIRST: tuple[Quantity, ...] = ("gdd", "group_delay", "phase", "mirror_tod")

BLIND = (
    "reflectance and phase are not tested against each other: a Kramers-Kronig relation between them needs "
    "minimum phase, which a chirped mirror does not have",
    "a common factor on all dispersion columns, and a constant group delay, leave every comparison as it is",
)
PAIR = re.compile(
    r"\b(per pair|mirror pair|pair of (?:mirrors|bounces)|complementary pair|two bounces)\b", re.I
)


def is_mirror(table: SentTable) -> bool:
    """Whether the table is of a mirror or coating; transmittance alone is that of a sample."""
    return any(table.column(name) for name in MIRROR_QUANTITIES if name != "transmittance")


def judge_mirror(table: SentTable, request: Request, *, date: str, version: str) -> Vetted:
    """Raises InputError for a requirement that cannot be read."""
    asked = [read_requirement(text) for text in request.require]
    curves = {
        name: curve for name in MIRROR_QUANTITIES if (curve := curve_of(table, request, name)) is not None
    }
    compared = tuple(compared_columns(curves))
    findings = _ordered(
        (
            *(mismatch.finding for mismatch in compared),
            *shares(curves),
            *_ordered_other(asked, curves),
            *bands(curves),
            *angle_and_polarisation(table, request),
            *_pair(table),
            *too_smooth(curves),
        )
    )
    echo = "; ".join(_echo(curves, request, asked))
    return told(
        file=table.file,
        sha256=table.sha256,
        stamp=Stamp(date=date, version=version),
        what=_what(table, curves),
        verdict=verdict_of(
            findings,
            proven=_beyond_all(findings, curves) or any(m.stated and m.factor > 1 for m in compared),
            mended=max((m.factor for m in compared if m.mended), default=None),
        ),
        headline=_headline(echo, findings),
        findings=findings,
        stated=bool(curves) and all(curve.stated for curve in curves.values()),
        requirements=tuple(mirror_answer(requirement, curves) for requirement in asked),
        inferred=tuple(asdict(inference) for inference in table.inferred),
        assumptions=_assumptions(table, request),
        blind_spots=BLIND,
        curves={f"{name}_nm": curve.nm for name, curve in curves.items()}
        | {name: curve.values / FEMTO[name][0] for name, curve in curves.items()}
        | {f"{name}_row": curve.lines for name, curve in curves.items()},
    )


def _ordered(findings: tuple[Finding, ...]) -> tuple[Finding, ...]:
    """The gravest first."""
    grade = {"error": 0, "warning": 1, "note": 2}
    return tuple(sorted(findings, key=lambda finding: grade[finding.severity]))


def _echo(curves: Curves, request: Request, asked: list[Requirement]) -> Iterator[str]:
    """What the table gives, before anything else: a buyer sees at once whether sign and unit are as meant."""
    shown = [name for name in SHOWN_FIRST if name in curves][:1]
    shown += ["reflectance"] if "reflectance" in curves else []
    required = tuple(dict.fromkeys(entry.low for entry in asked if entry.low and entry.at_one_place))
    places = request.at or required or (_middle(curves),) if shown else ()
    for omega in places:
        parts = [part for name in shown if (part := _told(curves[name], omega))]
        if parts:
            yield f"this table gives {' and '.join(parts)} a bounce at {1e9 * TWO_PI_C / omega:.4g} nm"


def _told(curve: MirrorCurve, omega: float) -> str:
    """A value with its unit; empty beyond the rows."""
    if not curve.omega[0] <= omega <= curve.omega[-1]:
        return ""
    size, unit = FEMTO[curve.quantity]
    value = f"{value_at(curve, omega) / size:.4g} {unit}"
    return value if curve.quantity == "gdd" else f"{value} of {WORDS[curve.quantity]}"


def _middle(curves: Curves) -> float:
    """A row in the middle of where the mirror reflects best, or of the rows."""
    curve = curves.get("reflectance") or next(iter(curves.values()))
    best = (
        np.flatnonzero(curve.values >= np.max(curve.values) - 0.01)
        if curve.quantity == "reflectance"
        else None
    )
    rows = np.arange(len(curve.omega)) if best is None else best
    return float(curve.omega[rows[len(rows) // 2]])


def _ordered_other(asked: list[Requirement], curves: Curves) -> Iterator[Finding]:
    """A required value that the table has with the other sign, or twice."""
    for requirement in asked:
        name = quantity_of(requirement)
        if name not in ("gdd", "group_delay", "mirror_tod") or inf in (requirement.most, -requirement.least):
            continue
        curve, low, high = curves.get(name), requirement.low, requirement.high
        bounds = mirror_bounds(curve, low, high) if curve is not None and low and high else None
        if bounds is None or (requirement.least <= bounds[1] and bounds[0] <= requirement.most):
            continue
        for words, factor in (
            ("the sign is turned", -1.0),
            ("it is that of a pair of bounces and not of one", 0.5),
            ("it is that of one bounce and a pair was ordered", 2.0),
        ):
            ends = sorted((factor * bounds[0], factor * bounds[1]))
            if requirement.least <= ends[0] and ends[1] <= requirement.most:
                yield Finding(
                    code="other-than-ordered",
                    severity="warning",
                    text=f"{requirement.text!r} is not met, but would be if {words}.",
                    repair=f"ask whether {words}",
                )


def _pair(table: SentTable) -> Iterator[Finding]:
    found = PAIR.search(stated_in_words(table))
    if found is not None:
        yield Finding(
            code="per-pair",
            severity="warning",
            text=f"The file says {found[0]!r}: its numbers may be those of two bounces. They were taken "
            "as of one.",
        )


def _beyond_all(findings: tuple[Finding, ...], curves: Curves) -> bool:
    """Whether shares break 0 or 1 by more than a photometer's error, or beyond stated uncertainties."""
    codes = {finding.code for finding in findings if finding.code.startswith(PHYSICAL)}
    known = [curves[name] for name in ("reflectance", "transmittance") if name in curves]
    if not codes or not known:
        return False
    if all(curve.stated for curve in known):
        return True
    single = any(curve.values.max() > 1 + SLACK or curve.values.min() < -SLACK for curve in known)
    if single or len(known) < 2:
        return single
    omega = np.intersect1d(known[0].omega, known[1].omega)
    total = known[0].at(omega).values + known[1].at(omega).values
    return bool(np.max(total, initial=0.0) > 1 + SLACK)


def _what(table: SentTable, curves: Curves) -> str:
    names = ", ".join(WORDS[name] for name in curves)
    if not curves:
        return "Mirror or coating table without rows that can be compared."
    nm = np.concatenate([curve.nm for curve in curves.values()])
    return f"Mirror or coating table: {names}; {len(table.omega)} rows, {nm.min():.5g} to {nm.max():.5g} nm."


def _headline(echo: str, findings: tuple[Finding, ...]) -> str:
    grave = next((finding.text for finding in findings if finding.severity == "error"), "")
    first = f"{echo}." if echo else "the table has no column of dispersion or reflectance."
    return f"{first} {grave}".strip()


def _assumptions(table: SentTable, request: Request) -> tuple[str, ...]:
    conditions = []
    if request.angle is not None:
        conditions.append(f"angle of incidence {np.degrees(request.angle):g} deg")
    if request.polarisation is not None:
        conditions.append(f"polarisation {request.polarisation}")
    said = [f"Stated by option: {', '.join(conditions)}."] if conditions else []
    return (
        "Numbers are those of one bounce. GDD = d(group delay)/d(omega) > 0 where red comes first; the phase "
        "is that of fields exp(-i omega t), so group delay = d(phase)/d(omega).",
        "Between rows there is no structure finer than the rows.",
        *said,
    )
