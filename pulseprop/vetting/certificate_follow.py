"""Which of the printed numbers does not follow from the others, and what it may be instead."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace

from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.certificate_copies import TELLING, readings, usual_places
from pulseprop.vetting.certificate_proof import Printed
from pulseprop.vetting.certificate_rows import ABBE_ABOVE, ABBE_BELOW, INDICES, ORDERS, proof_of, terms_of
from pulseprop.vetting.certificate_values import PrintedValue
from pulseprop.vetting.result import Finding

__all__ = ["ROOM", "contradictions", "implied_by", "involved_in"]

Interval = tuple[float, float]
Band = tuple[float, float]

ROOM = 1.001
"""Over the least factor, so that not a single material but a set of them is left."""
NARROW = 0.3
"""Relative width of what the others guarantee above which agreement with it tells nothing."""
CARRIES = 0.01
"""Share of the proof from which on a number belongs to it."""


def implied_by(proof: Printed, value: PrintedValue) -> Interval | None:
    """What the proof's numbers guarantee of the quantity of another, SI; None where they give no limit."""
    factor = max(1.0, proof.least_factor.factor * ROOM)
    if value.quantity == "V_d":
        return proof.ratio_interval(ABBE_ABOVE, ABBE_BELOW, factor)
    if value.quantity == "zero dispersion wavelength":
        return None
    found = proof.interval(terms_of(value), factor)
    more = 1.0 if ORDERS[value.quantity] in INDICES else 0.0
    return None if found is None else (found[0] + more, found[1] + more)


def involved_in(values: Sequence[PrintedValue], proof: Printed) -> list[PrintedValue]:
    """The numbers that carry the proof."""
    shares = abs(proof.least_factor.weights) * [row.error for row in proof.rows]
    return [value for value, share in zip(values, shares, strict=True) if share > CARRIES]


def contradictions(values: Sequence[PrintedValue], proof: Printed, band: Band) -> Iterator[Finding]:
    """Of a proof with a factor above 1: the numbers that carry it, and those that alone may be the matter."""
    least, involved = proof.least_factor, involved_in(values, proof)
    yield Finding(
        code="contradict-each-other",
        severity="error",
        text="The printed values contradict each other: "
        + ", ".join(f"{value.words} = {value.text}" for value in involved)
        + f". Their uncertainties must be {least.factor:.3g} times as large before some passive causal "
        "material has all of them.",
        rows=tuple(value.line for value in involved if value.line),
    )
    alone = [found for value in involved if (found := _alone(values, value, band)) is not None]
    for found in sorted(alone, key=lambda entry: entry.repair is None):
        sure = found.repair is not None or len(alone) == 1
        yield found if sure else replace(found, severity="note")


def _alone(values: Sequence[PrintedValue], value: PrintedValue, band: Band) -> Finding | None:
    """That without this number the rest agrees, what the rest then says of it, and what it may be."""
    rest = [other for other in values if other is not value]
    proof = proof_of(rest, band) if rest else None
    if proof is None or proof.least_factor.factor > 1:
        return None
    implied = implied_by(proof, value)
    copies = list(_copies(rest, value, proof, implied)) if implied is not None else []
    return Finding(
        code="does-not-follow",
        severity="error",
        text=f"Without {value.words} the other numbers agree{_guarantee(value, implied)}."
        + (f" It agrees if it is {'; or if it is '.join(copies)}." if copies else ""),
        rows=(value.line,) if value.line else (),
        repair=f"take it as {copies[0]}" if copies else None,
    )


def _guarantee(value: PrintedValue, implied: Interval | None) -> str:
    if implied is None:
        return ""
    low, high = (value.in_unit(end) for end in implied)
    unit = f" {value.unit}" if value.unit else ""
    return f"; they guarantee {low:.6g} to {high:.6g}{unit}, and {value.text} is printed"


def _copies(
    rest: Sequence[PrintedValue], value: PrintedValue, proof: Printed, implied: Interval
) -> Iterator[str]:
    """Readings that lie within what the rest guarantees, in words that follow "it is"."""
    narrow = implied[1] - implied[0] <= NARROW * max(abs(end) for end in implied)
    if value.error > TELLING * abs(value.value) or not narrow:
        return
    for words, factor in readings(value):
        if _inside(value.value * factor, value.error * abs(factor), implied):
            yield words
    if value.quantity in ("V_d", "zero dispersion wavelength"):
        return
    for omega in usual_places(rest, value):
        if not proof.band[0] < omega < proof.band[1]:
            continue
        there = proof.interval(terms_of(_at(value, omega)), max(1.0, proof.least_factor.factor * ROOM))
        less = 1.0 if ORDERS[value.quantity] in INDICES else 0.0
        if there is not None and _inside(value.value - less, value.error, there):
            yield f"that of another wavelength, {TWO_PI_C / omega * 1e9:.6g} nm"
            return


def _inside(value: float, error: float, interval: Interval) -> bool:
    return value + error >= interval[0] and value - error <= interval[1]


def _at(value: PrintedValue, omega: float) -> PrintedValue:
    return replace(
        value, omega=omega, quantity="index" if value.quantity.startswith("n_") else value.quantity
    )
