"""Misprints of formulas, undone one at a time: other sheets, never the one that was sent."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import combinations

from pulseprop.vetting.formula_sheet import FormulaSheet, PrintedTerm

__all__ = ["Edit", "edits"]

ORDINALS = ("first", "second", "third", "fourth", "fifth", "sixth", "seventh", "eighth")
POWERS_OF_TEN = (1e3, 1e-3, 10.0, 0.1, 1e2, 1e-2)


@dataclass(frozen=True, kw_only=True)
class Edit:
    """words: what to do, "read the third constant as squared". sheet: the formula then."""

    words: str
    sheet: FormulaSheet


def edits(sheet: FormulaSheet) -> Iterator[Edit]:
    """Single slips, the likeliest first: squares, order, signs, powers of ten, the 1 of n^2 - 1."""
    if sheet.kind in ("sellmeier", "poles"):
        yield from _squares(sheet)
    yield from _orders(sheet)
    yield from _signs(sheet)
    yield from _powers_of_ten(sheet)
    yield from _constant(sheet)
    yield from _kinds(sheet)


def _with_terms(sheet: FormulaSheet, terms: Sequence[PrintedTerm]) -> FormulaSheet:
    return replace(sheet, terms=tuple(terms))


def _with_term(sheet: FormulaSheet, number: int, term: PrintedTerm) -> FormulaSheet:
    return _with_terms(sheet, [term if at == number else other for at, other in enumerate(sheet.terms)])


def _squares(sheet: FormulaSheet) -> Iterator[Edit]:
    flipped = [replace(term, squared=not term.squared) for term in sheet.terms]
    if len(flipped) > 1:
        yield Edit(words="read all resonances as " + _as(flipped[0]), sheet=_with_terms(sheet, flipped))
    for number, term in enumerate(flipped):
        words = f"read the {ORDINALS[number]} resonance as {_as(term)}"
        yield Edit(words=words, sheet=_with_term(sheet, number, term))


def _as(term: PrintedTerm) -> str:
    return "squared (um^2)" if term.squared else "a length (um), not its square"


def _orders(sheet: FormulaSheet) -> Iterator[Edit]:
    """Constants told off in another order than they were printed in."""
    flat = [number for term in sheet.terms for number in (term.strength, term.constant)]
    half = len(sheet.terms)
    if half > 1 and not sheet.kind.endswith("powers"):
        strengths_first = zip(flat[:half], flat[half:], strict=True)
        yield _reordered(sheet, "all strengths first, then all resonances", strengths_first)
        both = [term.strength for term in sheet.terms] + [term.constant for term in sheet.terms]
        pairs = zip(both[::2], both[1::2], strict=True)
        yield _reordered(sheet, "strength and resonance of one term after the other", pairs)
    if not sheet.kind.endswith("powers"):
        swapped = [(term.constant, term.strength) for term in sheet.terms]
        yield _reordered(sheet, "resonance before strength in each term", swapped)
        for number, term in enumerate(sheet.terms):
            turned = replace(term, strength=term.constant, constant=term.strength)
            yield Edit(
                words=f"swap strength and resonance of the {ORDINALS[number]} term",
                sheet=_with_term(sheet, number, turned),
            )
    for one, other in combinations(range(half), 2):
        terms = list(sheet.terms)
        terms[one] = replace(terms[one], strength=sheet.terms[other].strength)
        terms[other] = replace(terms[other], strength=sheet.terms[one].strength)
        yield Edit(
            words=f"swap the strengths of the {ORDINALS[one]} and the {ORDINALS[other]} term",
            sheet=_with_terms(sheet, terms),
        )


def _reordered(
    sheet: FormulaSheet, order: str, pairs: Iterator[tuple[float, float]] | Sequence[tuple[float, float]]
) -> Edit:
    terms = [
        replace(term, strength=strength, constant=constant)
        for term, (strength, constant) in zip(sheet.terms, pairs, strict=True)
    ]
    return Edit(words=f"read the constants as {order}", sheet=_with_terms(sheet, terms))


def _powers_of_ten(sheet: FormulaSheet) -> Iterator[Edit]:
    for factor in POWERS_OF_TEN:
        for number, term in enumerate(sheet.terms):
            more = [("strength", replace(term, strength=factor * term.strength))]
            if not sheet.kind.endswith("powers"):
                more.append(("resonance", replace(term, constant=factor * term.constant)))
            for what, scaled in more:
                value = scaled.strength if what == "strength" else scaled.constant
                yield Edit(
                    words=f"take the {ORDINALS[number]} {what} {_times(factor)}, {value:.9g}",
                    sheet=_with_term(sheet, number, scaled),
                )


def _times(factor: float) -> str:
    return f"{factor:g} times as large" if factor > 1 else f"{1 / factor:g} times as small"


def _signs(sheet: FormulaSheet) -> Iterator[Edit]:
    for number, term in enumerate(sheet.terms):
        turned = replace(term, strength=-term.strength)
        yield Edit(
            words=f"turn the sign of the {ORDINALS[number]} strength", sheet=_with_term(sheet, number, turned)
        )


def _constant(sheet: FormulaSheet) -> Iterator[Edit]:
    """The formula of n^2 for that of n^2 - 1, and the other way round."""
    for shift, words in ((-1.0, "take 1 off"), (1.0, "add 1 to")):
        yield Edit(
            words=f"{words} the constant: one side has n, the other n - 1 (or their squares)",
            sheet=replace(sheet, offset=sheet.offset + shift),
        )


def _kinds(sheet: FormulaSheet) -> Iterator[Edit]:
    """Another formula with the same constants."""
    if sheet.kind == "sellmeier":
        yield Edit(
            words='take it as of kind "poles", strength / (L^2 - r)', sheet=replace(sheet, kind="poles")
        )
    elif sheet.kind == "poles":
        yield Edit(
            words='take it as of kind "sellmeier", strength L^2 / (L^2 - r)',
            sheet=replace(sheet, kind="sellmeier"),
        )
    elif sheet.kind == "powers":
        yield Edit(
            words="take it as a formula of n and not of n^2", sheet=replace(sheet, kind="index powers")
        )
    elif sheet.kind == "index powers":
        yield Edit(words="take it as a formula of n^2 and not of n", sheet=replace(sheet, kind="powers"))
