"""The report of a vetted file, in the order in which a buyer reads it."""

from __future__ import annotations

from pulseprop.propagation.numerals import significant
from pulseprop.reports.blocks import Column, Paragraph, Section, Table
from pulseprop.vetting.result import Bounds, Finding, Vetted

__all__ = ["vet_sections"]

Interval = tuple[float, float] | None

MOST_ROWS = 12
"""Rows of the proof that a report lists; JSON has all."""

SAID = {"error": "error", "warning": "warning", "note": "note"}


def vet_sections(vetted: Vetted) -> tuple[Section, ...]:
    """All sections that have something to say."""
    makers = (_inferred, _factor, _requirements, _conflict, _findings, _bounds, _assumed, _origin)
    return tuple(section for make in makers if (section := make(vetted)) is not None)


def _inferred(vetted: Vetted) -> Section | None:
    if not vetted.inferred:
        return None
    columns = tuple(Column(name, words=True) for name in ("about", "taken as", "because", "to overrule"))
    rows = tuple(
        (entry["about"], entry["taken"], entry["why"], entry["overrule"]) for entry in vetted.inferred
    )
    return Section("inferred", "Found out, not stated", (Table(columns, rows),))


def _factor(vetted: Vetted) -> Section | None:
    """The verdict's number, or the implied uncertainty where none was stated."""
    if vetted.uncertainty_factor is None:
        return None
    factor = significant(vetted.uncertainty_factor, 3)
    source = "stated" if vetted.uncertainty_stated else "of the printed digits"
    text = f"{factor}: the least factor by which all uncertainties ({source}) must be enlarged before some "
    text += "passive causal material has these numbers; at most 1 is consistent."
    blocks = [Paragraph(text, label="Uncertainty factor")]
    if vetted.certified_gap is not None:
        blocks.append(
            Paragraph(
                f"a material that reaches it and a proof that none does better lie "
                f"{significant(100 * vetted.certified_gap, 1)} % apart.",
                label="Certified",
            )
        )
    if implied := _implied(vetted):
        blocks.append(Paragraph(implied, label="Implied uncertainty"))
    return Section("factor", "Can the numbers be true?", tuple(blocks))


def _implied(vetted: Vetted) -> str:
    implied = vetted.implied_uncertainty
    parts = [
        f"{name} +-{significant(value, 2)}" for name, value in (("n", implied.n), ("k", implied.k)) if value
    ]
    if not parts:
        return ""
    grade = f" {implied.grade}" if implied.grade else ""
    return f"the smallest at which the numbers can be true: {', '.join(parts)}.{grade}"


def _requirements(vetted: Vetted) -> Section | None:
    if not vetted.requirements:
        return None
    columns = (
        Column("required", words=True),
        Column("verdict", words=True),
        Column("guaranteed", words=True),
    )
    rows = tuple(
        (answer.text, answer.verdict, _interval(answer.bounds, 5) or answer.reason)
        for answer in vetted.requirements
    )
    return Section("requirements", "Requirements", (Table(columns, rows), Paragraph(vetted.decision_rule)))


def _conflict(vetted: Vetted) -> Section | None:
    if not vetted.conflict:
        return None
    columns = (Column("row"), Column("wavelength", "nm"), Column("quantity", words=True), Column("weight"))
    heaviest = sorted(vetted.conflict, key=lambda entry: -abs(entry.weight))[:MOST_ROWS]
    rows = tuple(
        (
            str(entry.row),
            significant(entry.wavelength_nm, 6),
            entry.quantity,
            f"{entry.weight:+.4f}",
        )
        for entry in sorted(heaviest, key=lambda entry: entry.row)
    )
    text = (
        "For every passive causal material the sum of weight times value over these rows is at most 0; the "
        "printed values give more than their uncertainties allow. n stands for n - 1 here."
    )
    if len(vetted.conflict) > MOST_ROWS:
        text += (
            f" The {MOST_ROWS} heaviest of {len(vetted.conflict)} rows are shown; the JSON answer has all."
        )
    blocks: list[Paragraph | Table] = [Paragraph(text), Table(columns, rows)]
    if vetted.factor_without_conflict_rows is not None:
        blocks.append(
            Paragraph(
                f"Without the rows that carry the proof the factor is "
                f"{significant(vetted.factor_without_conflict_rows, 3)}."
            )
        )
    return Section("conflict", "Rows in conflict", tuple(blocks))


def _findings(vetted: Vetted) -> Section | None:
    if not vetted.findings:
        return None
    return Section("findings", "Findings", tuple(_finding(finding) for finding in vetted.findings))


def _finding(finding: Finding) -> Paragraph:
    text = finding.text
    if finding.repair:
        text += f" Repair that would mend it: {finding.repair}"
        if finding.factor_after_repair is not None:
            text += f" (factor then {significant(finding.factor_after_repair, 3)})"
        text += "."
    if finding.rows:
        text += f" Rows: {_listed(finding.rows)}."
    return Paragraph(text, label=f"[{finding.code}, {SAID[finding.severity]}]")


def _listed(rows: tuple[int, ...]) -> str:
    shown = ", ".join(str(row) for row in rows[:MOST_ROWS])
    return shown if len(rows) <= MOST_ROWS else f"{shown} and {len(rows) - MOST_ROWS} more"


def _bounds(vetted: Vetted) -> Section | None:
    if not vetted.bounds:
        return None
    columns = (
        Column("wavelength", "nm"),
        Column("index", words=True),
        Column("group index", words=True),
        Column("GVD, fs^2/mm", words=True),
        Column("TOD, fs^3/mm", words=True),
    )
    rows = tuple(_bounds_row(entry) for entry in vetted.bounds)
    reasons = dict.fromkeys(
        f"At {significant(entry.wavelength_nm, 6)} nm: {entry.reason}."
        for entry in vetted.bounds
        if entry.reason
    )
    return Section(
        "bounds",
        "What the numbers guarantee",
        (Table(columns, rows), *(Paragraph(reason) for reason in reasons)),
    )


def _bounds_row(entry: Bounds) -> tuple[str, ...]:
    return (
        significant(entry.wavelength_nm, 6),
        _interval(entry.index, 7) or "-",
        _interval(entry.group_index, 6) or "-",
        _interval(entry.gvd_fs2_per_mm, 5) or "-",
        _interval(entry.tod_fs3_per_mm, 4) or "-",
    )


def _interval(interval: Interval, digits: int) -> str:
    if interval is None:
        return ""
    return f"{significant(interval[0], digits)} to {significant(interval[1], digits)}"


def _assumed(vetted: Vetted) -> Section | None:
    blocks = [Paragraph(text) for text in vetted.assumptions]
    if vetted.blind_spots:
        blocks.append(Paragraph("; ".join(vetted.blind_spots) + ".", label="What causality cannot see"))
    return Section("assumed", "What the answer rests on", tuple(blocks)) if blocks else None


def _origin(vetted: Vetted) -> Section:
    text = f"{vetted.file}, SHA-256 {vetted.sha256}; {vetted.date}; pulseprop {vetted.version}."
    rule = [] if vetted.requirements else [Paragraph(vetted.decision_rule)]
    return Section("origin", "This report", (*rule, Paragraph(text)))
