"""The sentences of an answer: what was vetted, the headline, what a supplier can answer, what it rests on."""

from __future__ import annotations

from collections.abc import Sequence

from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.absorption_rows import absorption_column
from pulseprop.vetting.case import Case
from pulseprop.vetting.causal import FewRows
from pulseprop.vetting.checks_lines import lines_would_explain
from pulseprop.vetting.result import ConflictRow, Finding, ImpliedUncertainty, Verdict

__all__ = ["BLIND_SPOTS", "assumptions", "headline", "sentence", "what_was_vetted"]

BLIND_SPOTS = (
    "a common factor on chi",
    "a stretched frequency axis",
    "a constant of 0 or more added to n",
    "an index against air taken for one against vacuum",
    "the logarithm of an absorption where no index is given",
    "an index too high in the bluest row or too low in the reddest",
)

NAMED_ROWS = 6


def what_was_vetted(case: Case) -> str:
    """ "n and k, 61 rows, 400 to 1600 nm"."""
    table = case.table
    names = [column.quantity.replace("_", " ") for column in table.columns]
    listed = " and ".join([", ".join(names[:-1]), names[-1]] if len(names) > 1 else names)
    low, high = TWO_PI_C / table.omega.max() * 1e9, TWO_PI_C / table.omega.min() * 1e9
    return f"A table of {listed}: {len(table.omega)} rows from {low:.6g} to {high:.6g} nm."


def headline(
    case: Case,
    verdict: Verdict,
    implied: ImpliedUncertainty,
    conflict: Sequence[ConflictRow],
    few: FewRows | None,
    findings: Sequence[Finding],
) -> str:
    """The answer first."""
    parts = [_answer(case, verdict, implied, findings)]
    if verdict == "contradictory" and few is not None and conflict:
        parts.append(f"without {_left_out(case, few)} the factor is {_short(few.factor)}")
    named = next((one for one in findings if one.repair and one.factor_after_repair is not None), None)
    if named is not None and named.severity == "error":
        parts.append(
            f"they agree (factor {_short(named.factor_after_repair or 0.0)}) with this repair: {named.repair}"
        )
    if verdict == "doubtful" and case.standing is not None and case.standing.unresolved is not None:
        parts.append(lines_would_explain(case.standing.unresolved))
    return "; ".join(parts) + "."


def sentence(
    case: Case,
    verdict: Verdict,
    conflict: Sequence[ConflictRow],
    few: FewRows | None,
    findings: Sequence[Finding],
) -> str:
    """What a supplier can answer; empty where there is nothing to ask."""
    errors = [finding for finding in findings if finding.severity == "error"]
    if verdict == "consistent":
        return ""
    asked = next((error.repair for error in errors if error.repair), None)
    please = f"please confirm or correct: {asked}" if asked else "please check them against the measurement"
    if not errors:
        return _without_error(case, verdict, conflict)
    if conflict:
        rows = _few_lines(case, few) if few else _heaviest(conflict)
        return f"The printed values contradict each other: {_rows(rows)}; {please}."
    rows = errors[0].rows[:NAMED_ROWS]
    return f"{errors[0].text}{f' See {_rows(rows)}.' if rows else ''} {please[0].upper()}{please[1:]}."


def _without_error(case: Case, verdict: Verdict, conflict: Sequence[ConflictRow]) -> str:
    """Where nobody knows of a mistake: rows in conflict, rows that are wanted, or the uncertainty."""
    line = case.standing.unresolved if case.standing is not None else None
    if verdict == "contradictory" and conflict:
        rows = _rows(_heaviest(conflict))
        return f"The printed values contradict each other: {rows}; please check them against the measurement."
    if line is not None:
        said = lines_would_explain(line)
        return f"{said[0].upper()}{said[1:]}; please send such rows if you have them."
    if case.trouble:
        return ""
    return (
        "The numbers agree only within a larger uncertainty than their digits show; please state the "
        "uncertainty of the measurement."
        if not case.numbers.stated
        else "The numbers agree only within a larger uncertainty than stated; please confirm the uncertainty."
    )


def assumptions(case: Case) -> tuple[str, ...]:
    """What the answer assumes."""
    said = [
        "The material is passive and causal, absorbs inside the rows only as tabulated"
        + (" (nothing, as no absorption is given)" if absorption_column(case.table) is None else "")
        + ", and has no structure finer than the rows; outside the rows it may absorb anything."
    ]
    column = case.table.column("n")
    if column is not None:
        against = case.table.relative_to
        said.append(f"The index is used as printed{f', against {against}' if against else ''}.")
    if not case.numbers.stated:
        said.append(
            "No uncertainty is stated: half a unit of the last printed place stands for it, and bounds hold "
            "for the implied uncertainty where that is larger."
        )
    request = case.request
    if request.anchors:
        count = len(request.anchors)
        said.append(f"{count} known {'index' if count == 1 else 'indices'} (anchors) stood in as rows of n.")
    if request.transparent is not None:
        low, high = (TWO_PI_C / omega * 1e9 for omega in reversed(request.transparent))
        said.append(f"The material is transparent from {low:.6g} to {high:.6g} nm, as stated.")
    if request.strength is not None:
        said.append("The total strength of its absorption is limited by the f-sum rule, as stated.")
    if case.numbers.reason:
        said.append(f"Causality was not tested: {case.numbers.reason}.")
    return tuple(said)


def _answer(case: Case, verdict: Verdict, implied: ImpliedUncertainty, findings: Sequence[Finding]) -> str:
    factor = case.factor
    if factor is None:
        return _without_factor(case, verdict, findings)
    if not case.numbers.stated and implied.n is not None:
        return _led_by_implied(case, verdict, implied)
    if verdict == "consistent":
        return (
            "a passive causal material can have these numbers within their uncertainties (factor "
            f"{factor:.2g})"
        )
    if verdict == "contradictory" and factor > 1:
        return (
            "the printed values contradict each other: no passive causal material has them unless the stated "
            f"uncertainties are {_short(factor, 3)} times as large"
        )
    if verdict == "doubtful" and factor > 1:
        return (
            f"the numbers need {_short(factor, 3)} times their uncertainties, and the rows are too coarse to "
            "settle it"
        )
    return f"the uncertainties would allow the numbers (factor {factor:.2g}), but {_first(findings)}"


def _led_by_implied(case: Case, verdict: Verdict, implied: ImpliedUncertainty) -> str:
    factor = case.factor or 0.0
    known = f"the index is known no better than +-{implied.n:.1g}"
    if implied.k is not None:
        known += f" and k no better than +-{implied.k:.1g}"
    if factor <= 1:
        start = f"true to all printed digits (implied uncertainty of n {implied.n:.1g})"
        return start if verdict == "consistent" else f"{start}, but the checks found an error"
    if verdict == "contradictory":
        return f"the printed values contradict each other: they could be true only if {known}"
    return f"they can be true only if {known}: {_short(factor)} times the rounding of the printed digits"


def _without_factor(case: Case, verdict: Verdict, findings: Sequence[Finding]) -> str:
    if any(finding.severity == "error" for finding in findings):
        return _first(findings)
    if case.trouble:
        return "nothing was found, but the test for a passive causal material did not come to an end"
    return f"no physical bound is broken; causality was not tested ({case.numbers.reason})"


def _first(findings: Sequence[Finding]) -> str:
    error = next((finding for finding in findings if finding.severity == "error"), None)
    return error.text[0].lower() + error.text[1:].rstrip(".") if error else "the checks found an error"


def _few_lines(case: Case, few: FewRows) -> tuple[int, ...]:
    rows = [
        (case.numbers.index_rows if part.quantity == "n" else case.numbers.k_rows)[part.row]
        for part in few.parts
    ]
    return tuple(sorted(int(case.table.lines[row]) for row in rows if row >= 0))


def _left_out(case: Case, few: FewRows) -> str:
    """ "row 12 and the anchor"."""
    lines = _few_lines(case, few)
    named = [_rows(lines)] if lines else []
    return " and ".join([*named, "the anchor"] if len(few.parts) > len(lines) else named)


def _heaviest(conflict: Sequence[ConflictRow]) -> tuple[int, ...]:
    ordered = sorted(conflict, key=lambda entry: -abs(entry.weight))[:NAMED_ROWS]
    return tuple(sorted({entry.row for entry in ordered if entry.row > 0}))


def _short(factor: float, digits: int = 2) -> str:
    """So many digits without an exponent where a reader can do without: 450, not 4.5e+02."""
    return f"{float(f'{factor:.{digits}g}'):g}"


def _rows(lines: Sequence[int]) -> str:
    shown = [str(line) for line in lines[:NAMED_ROWS]]
    more = f" and {len(lines) - NAMED_ROWS} more" if len(lines) > NAMED_ROWS else ""
    return f"{'rows' if len(lines) > 1 else 'row'} {', '.join(shown)}{more}"
