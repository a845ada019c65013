"""The report of a vetted file, in the order in which a buyer reads it."""

from __future__ import annotations

from collections.abc import Iterable

from pulseprop.propagation.numerals import significant
from pulseprop.reports.blocks import Column, Paragraph, Section, Table
from pulseprop.reports.vet_numbers import factor_text, file_name, interval_text, nm_text, plain_text
from pulseprop.vetting.result import Bounds, ConflictRow, Finding, RequirementAnswer, Vetted

__all__ = ["vet_sections"]

MOST_ROWS = 24
"""Rows of the proof that a report lists; JSON has all."""

WEIGHT_PLACES = 7
"""Decimals of a weight: what they leave out changes no factor above 1 by much. Weights of values in another
unit may be so small that they need as many digits with an exponent."""

SMALL_WEIGHT = 1e-3

GRAVEST_FIRST = {"error": 0, "warning": 1, "note": 2}

QUANTITY, VALUE = 2, 3
"""Columns of the table of rows in conflict."""


def vet_sections(vetted: Vetted) -> tuple[Section, ...]:
    """All sections that have something to say."""
    makers = (_inferred, _requirements, _factor, _conflict, _findings, _bounds, _assumed, _origin)
    return tuple(section for make in makers if (section := make(vetted)) is not None)


def _inferred(vetted: Vetted) -> Section | None:
    if not vetted.inferred:
        return None
    entries = tuple(
        Paragraph(f"{entry['taken']} ({entry['why']}). To overrule: {entry['overrule']}.", entry["about"])
        for entry in vetted.inferred
    )
    return Section("inferred", "Found out, not stated", entries)


def _requirements(vetted: Vetted) -> Section | None:
    if not vetted.requirements:
        return None
    columns = (
        Column("required", words=True),
        Column("verdict", words=True),
        Column("guaranteed", words=True),
    )
    rows = tuple((answer.text, answer.verdict, _guaranteed(answer)) for answer in vetted.requirements)
    return Section("requirements", "Requirements", (Table(columns, rows),))


def _guaranteed(answer: RequirementAnswer) -> str:
    return " ".join(part for part in (interval_text(answer.bounds), answer.reason) if part)


def _factor(vetted: Vetted) -> Section | None:
    """The verdict's number, and the implied uncertainty."""
    factor = vetted.uncertainty_factor
    if factor is None:
        return None
    source = "stated" if vetted.uncertainty_stated else "of the printed digits"
    text = (
        f"{factor_text(factor)}. With all uncertainties ({source}) times this, and no less, some passive "
        "causal material has these numbers; at most 1 is consistent."
    )
    if vetted.certified_gap is not None:
        text += f" Proven to {significant(100 * vetted.certified_gap, 1)} % of itself."
    blocks = [Paragraph(text, label="Uncertainty factor")]
    if implied := _implied(vetted):
        blocks.append(Paragraph(implied, label="Implied uncertainty"))
    return Section("factor", "Can the numbers be true?", tuple(blocks))


def _implied(vetted: Vetted) -> str:
    """The smallest errors at which the numbers can be true, where they say anything."""
    implied = vetted.implied_uncertainty
    told = [
        f"{name} +-{significant(value, 2)}" for name, value in (("n", implied.n), ("k", implied.k)) if value
    ]
    if not told or factor_text(vetted.uncertainty_factor or 0.0).startswith("below"):
        return ""
    grade = f" {implied.grade}" if implied.grade else ""
    return f"{', '.join(told)} is the smallest at which the numbers can be true.{grade}"


def _conflict(vetted: Vetted) -> Section | None:
    if not vetted.conflict:
        return None
    columns = (
        Column("row" if all(entry.place in ("", "anchor") for entry in vetted.conflict) else "", words=True),
        Column("wavelength", "nm"),
        Column("quantity", words=True),
        Column("value"),
        Column("uncertainty"),
        Column("weight"),
    )
    shown = _heaviest(vetted.conflict)
    text = (
        "For every passive causal material the sum of weight times value (less 1 for n and a group index) "
        "over these rows is at most 0. Here it is above: divided by the sum of weight (without its sign) "
        "times uncertainty it is the uncertainty factor."
    )
    if len(shown) < len(vetted.conflict):
        text += f" {len(shown)} rows of {len(vetted.conflict)} are shown, the heaviest; JSON has all."
    rows = _as_printed([_conflict_row(entry) for entry in shown])
    blocks: list[Paragraph | Table] = [Paragraph(text), Table(columns, rows)]
    if vetted.factor_without_conflict_rows is not None:
        without = factor_text(vetted.factor_without_conflict_rows)
        blocks.append(Paragraph(f"Without the rows that carry the proof the factor is {without}."))
    return Section("conflict", "Rows in conflict", tuple(blocks))


def _as_printed(rows: list[tuple[str, ...]]) -> tuple[tuple[str, ...], ...]:
    """Values with the decimals of the longest of their quantity: zeros at the end are printed digits too."""
    longest: dict[str, int] = {}
    for row in rows:
        decimals = len(row[VALUE].partition(".")[2]) if "e" not in row[VALUE] else 0
        longest[row[QUANTITY]] = max(longest.get(row[QUANTITY], 0), decimals)
    return tuple(
        (*row[:VALUE], _with_decimals(row[VALUE], longest[row[QUANTITY]]), *row[VALUE + 1 :]) for row in rows
    )


def _with_decimals(text: str, decimals: int) -> str:
    if not text or "e" in text:
        return text
    whole, _, part = text.partition(".")
    return f"{whole}.{part.ljust(decimals, '0')}" if decimals else whole


def _heaviest(conflict: Iterable[ConflictRow]) -> list[ConflictRow]:
    """The rows that carry most of the proof and whose weight can be printed, in the order of the file."""
    visible = [entry for entry in conflict if float(_weight_text(entry)) != 0]
    heaviest = sorted(visible, key=lambda entry: -_share(entry))[:MOST_ROWS]
    return sorted(heaviest, key=lambda entry: (entry.row, entry.quantity))


def _share(entry: ConflictRow) -> float:
    """Of the proof, not normalised: weights of values in different units are no measure of it."""
    return abs(entry.weight) * (1.0 if entry.uncertainty is None else entry.uncertainty)


def _conflict_row(entry: ConflictRow) -> tuple[str, ...]:
    return (
        entry.place or str(entry.row),
        nm_text(entry.wavelength_nm),
        entry.quantity,
        "" if entry.value is None else plain_text(entry.value),
        "" if entry.uncertainty is None else plain_text(entry.uncertainty, 4),
        _weight_text(entry),
    )


def _weight_text(entry: ConflictRow) -> str:
    small = entry.quantity not in ("n", "k") and abs(entry.weight) < SMALL_WEIGHT
    return f"{entry.weight:+.{WEIGHT_PLACES}{'e' if small else 'f'}}"


def _findings(vetted: Vetted) -> Section | None:
    if not vetted.findings:
        return None
    ordered = sorted(vetted.findings, key=lambda finding: GRAVEST_FIRST[finding.severity])
    said = f"{vetted.headline} {vetted.sentence}".casefold()
    return Section("findings", "Findings", tuple(_finding(finding, said) for finding in ordered))


def _finding(finding: Finding, said: str) -> Paragraph:
    """A finding; what headline or sentence (both in small letters) have said already is not said again."""
    repeated = finding.text.rstrip(".").casefold() in said
    text = "As said above." if repeated else finding.text
    if finding.repair:
        text = f"{text} {_repair(finding)}".strip()
    if finding.rows:
        text += f" Rows: {_listed(finding.rows)}."
    return Paragraph(text, label=f"[{finding.code}, {finding.severity}]")


def _repair(finding: Finding) -> str:
    """What would mend it, unless the text says so, and the factor then."""
    repair = (finding.repair or "").rstrip(".")
    said = "" if repair in finding.text else f"To mend it: {repair}."
    if finding.factor_after_repair is None:
        return said
    return f"{said} The factor is then {factor_text(finding.factor_after_repair)}.".strip()


def _listed(rows: tuple[int, ...]) -> str:
    shown = ", ".join(str(row) for row in rows[:MOST_ROWS])
    return shown if len(rows) <= MOST_ROWS else f"{shown} and {len(rows) - MOST_ROWS} more"


def _bounds(vetted: Vetted) -> Section | None:
    if not vetted.bounds:
        return None
    known = [entry for entry in vetted.bounds if any(_intervals(entry))]
    blocks: list[Paragraph | Table] = [_bounds_table(known)] if known else []
    blocks += [Paragraph(text) for text in _reasons(vetted.bounds)]
    return Section("bounds", "What the numbers guarantee", tuple(blocks))


def _bounds_table(entries: Iterable[Bounds]) -> Table:
    columns = (
        Column("wavelength", "nm"),
        Column("index", words=True),
        Column("group index", words=True),
        Column("GVD", "fs^2/mm", words=True),
        Column("TOD", "fs^3/mm", words=True),
    )
    rows = tuple(
        (
            nm_text(entry.wavelength_nm),
            *(interval_text(interval) or "not known" for interval in _intervals(entry)),
        )
        for entry in entries
    )
    return Table(columns, rows)


def _intervals(entry: Bounds) -> tuple[tuple[float, float] | None, ...]:
    return entry.index, entry.group_index, entry.gvd_fs2_per_mm, entry.tod_fs3_per_mm


def _reasons(bounds: Iterable[Bounds]) -> list[str]:
    """Why something is not known, each reason once with its wavelengths."""
    places: dict[str, list[str]] = {}
    for entry in bounds:
        if entry.reason:
            places.setdefault(entry.reason.rstrip("."), []).append(nm_text(entry.wavelength_nm))
    return [f"At {', '.join(nm)} nm: {reason}." for reason, nm in places.items()]


def _assumed(vetted: Vetted) -> Section | None:
    blocks = [Paragraph(text) for text in vetted.assumptions]
    if vetted.blind_spots:
        blocks.append(Paragraph("; ".join(vetted.blind_spots) + ".", label="What no such test can see"))
    return Section("assumed", "What the answer rests on", tuple(blocks)) if blocks else None


def _origin(vetted: Vetted) -> Section:
    return Section(
        "origin",
        "This report",
        (
            Paragraph(vetted.decision_rule, label="Decision rule"),
            Paragraph(f"{file_name(vetted)}, SHA-256 {vetted.sha256}", label="File"),
            Paragraph(f"{vetted.date}, pulseprop {vetted.version}", label="Made"),
        ),
    )
