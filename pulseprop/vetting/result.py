"""The answer to `vet`; units are in the keys."""

from __future__ import annotations

from dataclasses import asdict, dataclass, field
from typing import Any, Literal

__all__ = [
    "NOT_SETTLED",
    "Bounds",
    "ConflictRow",
    "Finding",
    "ImpliedUncertainty",
    "RequirementAnswer",
    "Severity",
    "Verdict",
    "Vetted",
]

NOT_SETTLED = "not-settled"
"""Code of the finding that a numerical limit was reached, so that a test has no answer."""

Interval = tuple[float, float]
Severity = Literal["error", "warning", "note"]
Verdict = Literal["consistent", "contradictory", "doubtful"]


@dataclass(frozen=True, kw_only=True)
class Finding:
    """One thing noticed. rows: lines in the file. repair: what would mend it, and the uncertainty factor
    then."""

    code: str
    severity: Severity
    text: str
    rows: tuple[int, ...] = ()
    repair: str | None = None
    factor_after_repair: float | None = None


@dataclass(frozen=True, kw_only=True)
class ConflictRow:
    """One row of the proof: weights add up to 1 in size; the inequality is sum weight (value) <= 0.

    quantity: "n", "k", or what a certificate prints. place: in words, where the row is no line of a table.
    value, uncertainty: as they stand in the proof, in the printed unit (of indices 1 is taken off in the
    sum); None for one of two rows at one wavelength.
    """

    row: int
    wavelength_nm: float
    quantity: str
    weight: float
    place: str = ""
    value: float | None = None
    uncertainty: float | None = None


@dataclass(frozen=True, kw_only=True)
class ImpliedUncertainty:
    """The smallest error of n and of k (largest over the rows) at which the numbers can be true."""

    n: float | None
    k: float | None
    grade: str = ""


@dataclass(frozen=True, kw_only=True)
class Bounds:
    """Guaranteed lowest and highest values; None where the data cannot say, with the reason."""

    wavelength_nm: float
    index: Interval | None = None
    group_index: Interval | None = None
    gvd_fs2_per_mm: Interval | None = None
    tod_fs3_per_mm: Interval | None = None
    reason: str = ""


@dataclass(frozen=True, kw_only=True)
class RequirementAnswer:
    """A requirement against the bounds."""

    text: str
    verdict: Literal["conforming", "not conforming", "not decided"]
    bounds: Interval | None
    reason: str = ""


@dataclass(frozen=True, kw_only=True)
class Vetted:
    """One file, judged. sentence: what a supplier can answer. curves: arrays for the figure (not in JSON)."""

    file: str
    sha256: str
    date: str
    version: str
    what: str
    verdict: Verdict
    headline: str
    sentence: str
    decision_rule: str
    uncertainty_factor: float | None
    certified_gap: float | None
    uncertainty_stated: bool
    implied_uncertainty: ImpliedUncertainty
    factor_without_conflict_rows: float | None
    conflict: tuple[ConflictRow, ...]
    bounds: tuple[Bounds, ...]
    requirements: tuple[RequirementAnswer, ...]
    findings: tuple[Finding, ...]
    inferred: tuple[dict[str, str], ...]
    assumptions: tuple[str, ...]
    blind_spots: tuple[str, ...]
    curves: dict[str, Any] = field(default_factory=dict, repr=False, compare=False)

    def exit_code(self, strict: bool) -> int:
        """1 for contradictory, for a requirement not met, and for doubtful where strict; 3 where a test came
        to a numerical limit and nothing else says no; else 0."""
        unmet = any(answer.verdict == "not conforming" for answer in self.requirements)
        if unmet or self.verdict == "contradictory":
            return 1
        if any(finding.code == NOT_SETTLED for finding in self.findings):
            return 3
        return int(strict and self.verdict == "doubtful")

    def as_json(self) -> dict[str, Any]:
        """The document of the JSON report."""
        document = asdict(self)
        del document["curves"]
        # "conflict" is of rows of n and k; printed numbers of other kinds stand under a key of theirs.
        of_rows = all(entry["quantity"] in ("n", "k") for entry in document["conflict"])
        document["conflict_printed"] = [] if of_rows else document["conflict"]
        document["conflict"] = document["conflict"] if of_rows else []
        return document
