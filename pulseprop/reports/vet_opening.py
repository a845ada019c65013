"""The first lines on a vetted file, and on a whole delivery: the answers, and what a supplier can answer."""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence

from pulseprop.reports.blocks import Column, Paragraph, Section, Table
from pulseprop.reports.vet_numbers import factor_text, file_name, interval_text
from pulseprop.vetting.result import RequirementAnswer, Vetted

__all__ = ["delivery", "delivery_headline", "headlines", "opening"]

GRAVEST_FIRST = ("not conforming", "not decided", "conforming")
VERDICTS = ("contradictory", "doubtful", "consistent")


def headlines(vetted: Vetted) -> tuple[str, ...]:
    """The answers in a sentence each. Requirements come first, as the first question of who has ordered
    something, unless they are open because the numbers contradict each other.
    """
    said = f"{vetted.verdict.upper()}: {_as_continued(vetted.headline)}"
    if not vetted.requirements:
        return (said,)
    required = _required(vetted.requirements)
    open_ = vetted.verdict == "contradictory" and not required.startswith("NOT CONFORMING")
    return (said, required) if open_ else (required, said)


def _as_continued(text: str) -> str:
    """Small behind a colon, unless it is a symbol or an abbreviation."""
    return text[0].lower() + text[1:] if text[1:2].islower() or text[1:2] == " " else text


def _required(answers: Sequence[RequirementAnswer]) -> str:
    """The gravest answer to the requirements, with those that gave it."""
    gravest = next(verdict for verdict in GRAVEST_FIRST if any(one.verdict == verdict for one in answers))
    if gravest == "conforming":
        return f"CONFORMING: {_counted(len(answers))} met."
    those = [answer for answer in answers if answer.verdict == gravest]
    told = "; ".join(_with_bounds(answer) for answer in those)
    share = "" if len(those) == len(answers) else f"{len(those)} of {len(answers)}: "
    return f"{gravest.upper()}: {share}{told}."


def _with_bounds(answer: RequirementAnswer) -> str:
    """ "gvd at 800 nm >= 40 fs^2/mm (the numbers guarantee 36.0 to 36.3)"."""
    guaranteed = interval_text(answer.bounds)
    return f"{answer.text} (the numbers guarantee {guaranteed})" if guaranteed else answer.text


def _counted(number: int) -> str:
    return "the requirement is" if number == 1 else f"all {number} requirements are"


def delivery_headline(answers: Sequence[Vetted]) -> str:
    """ "5 tables: 1 contradictory, 4 consistent; 1 requirement of 6 not met."."""
    verdicts = Counter[str](answer.verdict for answer in answers)
    counted = ", ".join(f"{verdicts[name]} {name}" for name in VERDICTS if verdicts[name])
    asked = [one.verdict for answer in answers for one in answer.requirements]
    unmet, open_ = asked.count("not conforming"), asked.count("not decided")
    parts = [f"{unmet} not met"] * bool(unmet) + [f"{open_} not decided"] * bool(open_)
    told = f"{', '.join(parts)} of {len(asked)}" if parts else "all met"
    required = f"; requirements: {told}" if asked else ""
    return f"{len(answers)} tables: {counted}{required}."


def delivery(answers: Sequence[Vetted]) -> Section:
    """A row a table: verdict, uncertainty factor, requirements."""
    columns = (
        Column("file", words=True),
        Column("holds", words=True),
        Column("verdict", words=True),
        Column("factor", words=True),
        Column("requirements", words=True),
    )
    asked = any(answer.requirements for answer in answers)
    apart = len({file_name(answer) for answer in answers}) == len({answer.file for answer in answers})
    rows = [
        (
            file_name(answer) if apart else answer.file,
            answer.what.rstrip(".").partition(", looked at")[0],
            answer.verdict,
            "" if answer.uncertainty_factor is None else factor_text(answer.uncertainty_factor),
            _share_met(answer.requirements),
        )
        for answer in answers
    ]
    kept = len(columns) if asked else len(columns) - 1
    return Section("delivery", "All of them", (Table(columns[:kept], tuple(row[:kept] for row in rows)),))


def _share_met(answers: Sequence[RequirementAnswer]) -> str:
    counts = Counter[str](answer.verdict for answer in answers)
    return ", ".join(f"{counts[verdict]} {verdict}" for verdict in GRAVEST_FIRST if counts[verdict])


def opening(vetted: Vetted) -> tuple[Paragraph, ...]:
    """Answers, what was vetted, and the sentence to the supplier."""
    blocks = [Paragraph(line) for line in headlines(vetted)]
    blocks.append(Paragraph(f"{file_name(vetted)}: {_as_continued(vetted.what)}"))
    if vetted.sentence:
        blocks.append(Paragraph(vetted.sentence, label="To the supplier"))
    return tuple(blocks)
