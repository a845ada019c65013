"""Whether anything leaves before its cause, and how sure that is."""

from __future__ import annotations

from pulseprop.propagation.numerals import significant
from pulseprop.propagation.result import Causality, NaiveFilter, Run
from pulseprop.reports.blocks import Column, Paragraph, Section, Table

__all__ = ["causality_section"]

VERDICTS = {
    "causal": "Causal: what leaves ahead of a front that travels at c is no more than the noise of the test.",
    "acausal": "Acausal: energy leaves ahead of a front that travels at c. No matter does that; the data "
    "or the model of an "
    "element are at fault.",
    "unresolved": "Unresolved: the window that fits the memory hides whether anything leaves ahead of the "
    "front.",
}


def causality_section(run: Run) -> Section:
    """Verdict, front test against its noise floor, the naive filter beside it, and what was left out."""
    found = run.causality
    texts = [
        " ".join([_verdict(found), *_front(found)]),
        *_naive(found.naive_filter),
        _pair(found),
    ]
    if found.left_out:
        texts.append(
            "Left out of the front test, because a phase, orders or a table as printed describe them: "
            f"{', '.join(found.left_out)}."
        )
    if found.remark and found.verdict != "unresolved":
        texts.append(found.remark[0].upper() + found.remark[1:].rstrip(".") + ".")
    blocks: list[Table | Paragraph] = [Paragraph(text) for text in texts]
    if found.sum_rules:
        blocks.append(_sum_rules(found))
    return Section("causality", "Causality", tuple(blocks))


def _verdict(found: Causality) -> str:
    """What was found; why nothing was is said by the test itself."""
    if found.verdict == "unresolved" and found.remark:
        return f"Unresolved: {found.remark.rstrip('.')}."
    return VERDICTS.get(found.verdict, found.verdict)


def _front(found: Causality) -> list[str]:
    if found.energy_ahead_of_front is None or found.noise_floor is None or not found.front_points:
        return []
    return [
        f"Energy ahead of the front, for a pulse of exactly finite length: "
        f"{significant(found.energy_ahead_of_front, 2)} "
        f"of what leaves; noise floor of the test {significant(found.noise_floor, 2)} "
        f"({found.front_points} points)."
    ]


def _naive(naive: NaiveFilter | None) -> list[str]:
    if naive is None:
        return []
    return [
        "For comparison, the same path as a filter that absorbs and delays nothing (a common shortcut, "
        f"and wrong): {significant(naive.energy_ahead_of_front, 2)} of the energy ahead of the front, "
        f"{naive.verdict}."
    ]


def _pair(found: Causality) -> str:
    passive = (
        "passive (no gain anywhere)" if found.passive else "not passive: somewhere on the axis there is gain"
    )
    if found.kk_residual is None:
        return f"The path is {passive}."
    basis = f" ({found.kk_basis})" if found.kk_basis else ""
    return f"The path is {passive}. Kramers-Kronig residual: {significant(found.kk_residual, 2)}{basis}."


def _sum_rules(found: Causality) -> Table:
    columns = (
        Column("sum rule of", words=True),
        Column("rule", words=True),
        Column("found / expected"),
        Column("", words=True),
    )
    rows = tuple(
        (medium, rule, significant(ratio, 4), remark) for medium, rule, ratio, remark in found.sum_rules
    )
    return Table(columns, rows)
