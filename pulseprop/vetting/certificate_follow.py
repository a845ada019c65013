"""Which of the printed numbers does not follow from the others, and what it may be instead."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import islice

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
    copies = [copy.words for copy in _copies(rest, value, proof, implied)] if implied is not None else []
    repair = f"take it as {', or as '.join(copies)}" if copies else None
    return Finding(
        code="does-not-follow",
        severity="error",
        text=f"Without {value.words} the other numbers agree{_guarantee(value, implied)}."
        + (f" It agrees if you {repair}." if repair else ""),
        rows=(value.line,) if value.line else (),
        repair=repair,
    )


def _guarantee(value: PrintedValue, implied: Interval | None) -> str:
    if implied is None:
        return ""
    low, high = (value.in_unit(end) for end in implied)
    unit = f" {value.unit}" if value.unit else ""
    return f"; they guarantee {low:.6g} to {high:.6g}{unit}, and {value.text} is printed"


@dataclass(frozen=True)
class _Copy:
    """Words that follow "take it as". width: of the interval that the number hits, relative: what falls into
    a narrow one does so less easily by chance. off: its distance from the middle, over half the width."""

    words: str
    width: float
    off: float


def _copies(
    rest: Sequence[PrintedValue], value: PrintedValue, proof: Printed, implied: Interval
) -> list[_Copy]:
    """Readings that lie within what the rest guarantees; those that hit it most exactly first."""
    if value.error > TELLING * abs(value.value) or _width(implied) > NARROW:
        return []
    found = [
        _copy(words, value.value * factor, implied)
        for words, factor in readings(value)
        if _inside(value.value * factor, value.error * abs(factor), implied)
    ]
    if value.quantity not in ("V_d", "zero dispersion wavelength"):
        found += islice(_of_other_places(rest, value, proof), 1)
    return sorted(found, key=lambda copy: (copy.width, copy.off))


def _of_other_places(rest: Sequence[PrintedValue], value: PrintedValue, proof: Printed) -> Iterator[_Copy]:
    """The number as that of another wavelength, the file's own first: these even where the rest says little
    there.
    """
    own = {other.omega for other in rest}
    for omega in usual_places(rest, value):
        if not proof.band[0] < omega < proof.band[1]:
            continue
        there = proof.interval(terms_of(_at(value, omega)), max(1.0, proof.least_factor.factor * ROOM))
        less = 1.0 if ORDERS[value.quantity] in INDICES else 0.0
        number = value.value - less
        if there is None or not _inside(number, value.error, there):
            continue
        words = f"that of another wavelength, {TWO_PI_C / omega * 1e9:.6g} nm"
        if _width(there) <= NARROW:
            yield _copy(words, number, there)
        elif omega in own:
            low, high = (value.in_unit(end + less) for end in there)
            yield _copy(f"{words} (where the others leave {low:.3g} to {high:.3g})", number, there)


def _copy(words: str, number: float, interval: Interval) -> _Copy:
    low, high = interval
    return _Copy(words, _width(interval), abs(2 * number - low - high) / (high - low or 1.0))


def _width(interval: Interval) -> float:
    """Relative to the larger end."""
    return (interval[1] - interval[0]) / max(abs(end) for end in interval)


def _inside(value: float, error: float, interval: Interval) -> bool:
    return value + error >= interval[0] and value - error <= interval[1]


def _at(value: PrintedValue, omega: float) -> PrintedValue:
    return replace(
        value, omega=omega, quantity="index" if value.quantity.startswith("n_") else value.quantity
    )
