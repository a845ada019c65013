"""What was found about numbers that are no table, as the same answer that tables get."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import Any

from pulseprop.vetting.requirement_answer import DECISION_RULE, with_unmet
from pulseprop.vetting.result import (
    Bounds,
    ConflictRow,
    Finding,
    ImpliedUncertainty,
    RequirementAnswer,
    Verdict,
    Vetted,
)

__all__ = ["PLEASE", "Stamp", "first_sentence", "told", "verdict_of"]


@dataclass(frozen=True, kw_only=True)
class Stamp:
    """When, as printed, and by which version of the program."""

    date: str
    version: str


VERDICT_RULE = (
    "Contradictory: the numbers contradict each other at stated uncertainties, break a physical bound, or "
    "differ by ten times their print or more and agree once one mistake is undone. Doubtful: any other "
    "finding that is an error. Else consistent."
)
PLEASE = "Please check these numbers and tell us which are right."
STRUCTURED = 10.0
"""Factor from which on numbers that one undone mistake makes agree are no matter of noise."""


def verdict_of(findings: Iterable[Finding], *, proven: bool = False, mended: float | None = None) -> Verdict:
    """contradictory: the numbers contradict each other at stated uncertainties or break a physical bound
    (`proven`), or one mistake undone `mended` a factor of 10 or more; doubtful: some finding is an error;
    else consistent."""
    if proven or (mended is not None and mended >= STRUCTURED):
        return "contradictory"
    return "doubtful" if any(finding.severity == "error" for finding in findings) else "consistent"


def told(
    *,
    file: str,
    sha256: str,
    stamp: Stamp,
    what: str,
    verdict: Verdict,
    headline: str,
    findings: tuple[Finding, ...],
    sentence: str | None = None,
    factor: float | None = None,
    gap: float | None = None,
    stated: bool = False,
    implied: ImpliedUncertainty | None = None,
    conflict: tuple[ConflictRow, ...] = (),
    bounds: tuple[Bounds, ...] = (),
    requirements: tuple[RequirementAnswer, ...] = (),
    inferred: tuple[dict[str, str], ...] = (),
    assumptions: tuple[str, ...] = (),
    blind_spots: tuple[str, ...] = (),
    curves: dict[str, Any] | None = None,
) -> Vetted:
    """The answer; the sentence to the supplier is that of the gravest finding unless another is given, with
    the requirements not met."""
    return Vetted(
        file=file,
        sha256=sha256,
        date=stamp.date,
        version=stamp.version,
        what=what,
        verdict=verdict,
        headline=headline,
        sentence=with_unmet(_sentence(findings) if sentence is None else sentence, requirements),
        decision_rule=" ".join((VERDICT_RULE, *([DECISION_RULE] if requirements else []))),
        uncertainty_factor=factor,
        certified_gap=gap,
        uncertainty_stated=stated,
        implied_uncertainty=implied or ImpliedUncertainty(n=None, k=None),
        factor_without_conflict_rows=None,
        conflict=conflict,
        bounds=bounds,
        requirements=requirements,
        findings=findings,
        inferred=inferred,
        assumptions=assumptions,
        blind_spots=blind_spots,
        curves=curves or {},
    )


def first_sentence(text: str) -> str:
    """What a headline needs of a finding; the rest stands with the finding."""
    return text.partition(". ")[0].rstrip(".") + "."


def _sentence(findings: tuple[Finding, ...]) -> str:
    """Something a supplier can answer; empty where there is nothing to ask."""
    grave = next((finding for finding in findings if finding.severity == "error"), None)
    if grave is None:
        return ""
    repair = next((entry.repair for entry in findings if entry.severity == "error" and entry.repair), None)
    why = f" Possible explanation: {repair}." if repair and repair not in grave.text else ""
    return f"{grave.text}{why} {PLEASE}"
