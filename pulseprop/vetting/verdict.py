"""Consistent, contradictory or doubtful, and the rule by which it was decided.

With stated uncertainties a certified factor above 1 is contradictory. Without, rounding alone never is: only
an implied uncertainty larger than any usual measurement has, a physical bound that is broken, or numbers that
agree to their last digit once one mistake of a whole column is undone, for then no measurement error is at
work. Lines that the rows cannot resolve, or a feature of k with fewer than five rows over its width, leave it
at doubtful; lines do not where the numbers agree once a mistake is undone that is simpler than they are: one
of a whole column, or fewer wrong rows than the lines need places.
"""

from __future__ import annotations

from collections.abc import Sequence

from pulseprop.vetting.case import Case
from pulseprop.vetting.grade import graded
from pulseprop.vetting.result import Finding, Verdict

__all__ = ["PHYSICAL", "decision_rule", "verdict_on"]

STATED_RULE = (
    "Consistent up to an uncertainty factor of 1, contradictory above, and doubtful where the rows are too "
    "coarse to tell (narrow lines that they cannot resolve, and no simpler mistake that explains as much; "
    "fewer than five of them over the width of a feature), where the checks find an error, or where the test "
    "came to no end."
)
UNSTATED_RULE = (
    "No uncertainty is stated, so the printed digits stand for it, and rounding alone contradicts nothing: "
    "consistent up to an uncertainty factor of 1, doubtful above. Contradictory only where a physical bound "
    "is broken, where the error needed is larger than any usual measurement's, or where undoing one mistake "
    "makes all agree to the last digit."
)
NO_STATISTICS = "The factor is a largest ratio, not a chi-square and not a coverage factor."

PHYSICAL = ("negative-absorption", "transmittance-above-1", "index-not-positive")
"""Codes of bounds that hold for any passive sample whatever its index."""
STRUCTURED = 10.0
"""Factor from which on numbers that a repair makes agree are no matter of noise, and a line seen by one row
alone would have to lie within a tenth of a gap from it."""
SHIFTED = "shifted-rows"
WHOLE_COLUMN = (
    "reversed-order",
    "swapped-columns",
    "wrong-logarithm",
    "absorption-quantity",
    "percent-fraction",
    "fresnel-loss",
    "axis-unit",
    SHIFTED,
)
ROWS_OF_A_SHIFT = 2
"""Wrong rows that a shifted column counts for: it leaves out an end row, beside which a line may lie, and of
the rest a shift shows nothing where the digits are few."""


def decision_rule(case: Case) -> str:
    """The rule that was followed, for a report."""
    return f"{STATED_RULE if case.numbers.stated else UNSTATED_RULE} {NO_STATISTICS}"


def verdict_on(case: Case, findings: Sequence[Finding]) -> Verdict:
    """The verdict; findings: all of them, with their severities."""
    errors = [finding for finding in findings if finding.severity == "error"]
    if any(finding.code in PHYSICAL for finding in errors):
        return "contradictory"
    if not _above_one(case):
        return "doubtful" if errors or case.trouble else "consistent"
    if _unsettled(case, errors) or not (case.numbers.stated or _beyond_measurement(case, errors)):
        return "doubtful"
    return "contradictory"


def _above_one(case: Case) -> bool:
    return case.factor is not None and case.factor > 1


def _unsettled(case: Case, errors: Sequence[Finding]) -> bool:
    """Whether the factor above 1 may be the rows' coarseness, or lie within the gap of its proof."""
    standing = case.standing
    if standing is None or (case.numbers.repeat and case.numbers.repeat.factor > 1):
        return False
    proven = standing.factor * (1 - (standing.gap or 0.0)) > 1
    return _lines_explain(case, errors) or bool(standing.coarse) or not proven


def _lines_explain(case: Case, errors: Sequence[Finding]) -> bool:
    """Whether lines between the rows do, and no mistake that is simpler than they are."""
    lines = case.standing.unresolved if case.standing is not None else None
    if lines is None or not _structured(case):
        return lines is not None
    if any(error.code != SHIFTED for error in _mending(errors, WHOLE_COLUMN)):
        return False
    simpler = len(_mending(errors, ("displaced-row",))) or ROWS_OF_A_SHIFT * len(_mending(errors, (SHIFTED,)))
    return not 0 < simpler < lines.windows


def _beyond_measurement(case: Case, errors: Sequence[Finding]) -> bool:
    return graded(case).gross or _column_mended(case, errors)


def _column_mended(case: Case, errors: Sequence[Finding]) -> bool:
    return _structured(case) and bool(_mending(errors, WHOLE_COLUMN))


def _structured(case: Case) -> bool:
    return (case.factor or 0.0) >= STRUCTURED


def _mending(errors: Sequence[Finding], codes: Sequence[str]) -> list[Finding]:
    """Errors of these codes whose repair makes the numbers agree."""
    return [
        error
        for error in errors
        if error.code in codes and error.factor_after_repair is not None and error.factor_after_repair <= 1
    ]
