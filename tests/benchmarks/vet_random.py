"""Random materials, sampled finely and coarsely, printed, and vetted: what must never go wrong.

    python -m tests.benchmarks.vet_random [FINE COARSE OPTIMA]      # 300 100 24 where not said

A true material is never contradictory, its true index, group index and GVD lie inside all bounds, and the
bounds are at most 1.05 times as wide as the optimum. Leaves with 1 where one of them fails.
"""

from __future__ import annotations

import sys
import time
from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.bounds import bounds
from pulseprop.causality.passive_data import PassiveData
from pulseprop.vetting.judge import judge
from pulseprop.vetting.numbers import numbers_of
from pulseprop.vetting.passive import PassiveCausality
from pulseprop.vetting.read_options import ReadOptions
from pulseprop.vetting.reading import tables_in
from pulseprop.vetting.request import Request
from pulseprop.vetting.result import Bounds, Vetted
from tests.benchmarks.bounds_by_force import reached
from tests.benchmarks.random_matter import C, Sheet, coarse, random_sheet

__all__ = ["Elsewhere", "Outcome", "Width", "outcome", "width"]

PLACES = 3
END_ROWS = 2
MOST_WIDE, DIFFERENCES = 1.05, 1e-3
"""Of the bounds over the optimum, whose orders in absorbing data are differences."""
FEWEST_OPTIMA = 0.9
"""Share of the tables for which there must be an optimum to compare with."""
DEFAULTS = ("300", "100", "24")
QUANTITIES = ("index", "group_index", "gvd_fs2_per_mm")


@dataclass(frozen=True, kw_only=True)
class Outcome:
    """missed: true values outside their bounds, in words. told: how many bounds were given."""

    seed: int
    sheet: Sheet
    answer: Vetted
    missed: tuple[str, ...]
    told: int
    seconds: float

    @property
    def rough(self) -> bool:
        """Whether the rows are too few for the lines."""
        return self.sheet.kind == "coarse"

    @property
    def bad(self) -> bool:
        """Called contradictory though it is true, or a true value outside its bounds."""
        return self.answer.verdict == "contradictory" or (not self.rough and bool(self.missed))

    def line(self) -> str:
        sheet, factor = self.sheet, self.answer.uncertainty_factor
        said = f"{factor:.4f}" if factor is not None else "none"
        codes = ",".join(one.code for one in self.answer.findings if one.severity != "note")
        stated = "stated" if self.answer.uncertainty_stated else "digits"
        return (
            f"{sheet.kind:11s} {self.seed:4d} {len(sheet.w):4d} rows {sheet.printing.unit:5s} "
            f"{stated} {self.answer.verdict:13s} factor {said:>8s} "
            f"bounds {self.told} {self.seconds:6.2f} s {codes} {'; '.join(self.missed)}"
        )


class Elsewhere(PassiveCausality):
    """Bounds at further frequencies (rad/s) from the very data that the judge first asks with; all are
    kept."""

    def __init__(self, places: NDArray[np.float64]) -> None:
        self.places = places
        self.found: list[Bounds] = []

    def bounds(self, data: PassiveData, omega: NDArray[np.float64]) -> Sequence[Bounds]:
        """At omega."""
        more, self.places = self.places, self.places[:0]
        self.found += super().bounds(data, np.concatenate((omega, more)))
        return self.found[len(self.found) - len(more) - len(omega) :][: len(omega)]


def options_of(sheet: Sheet, seed: int) -> ReadOptions:
    """The rounding is stated for every second table whose positions are printed as they are."""
    stated = sheet.exact_positions and seed // 2 % 2 == 0
    return ReadOptions(uncertainty=sheet.half_units() if stated else None)


def places_of(sheet: Sheet, seed: int, count: int) -> NDArray[np.float64]:
    """Anywhere but within two rows of an end, rad/s."""
    w = np.sort(sheet.w)
    return np.random.default_rng([seed, 3]).uniform(w[END_ROWS], w[-1 - END_ROWS], size=count) * 1e15


def outcome(seed: int, sheet: Sheet, places: int = PLACES) -> Outcome:
    """A sheet read and judged, and its true values held against the bounds."""
    start = time.perf_counter()
    causality = Elsewhere(places_of(sheet, seed, places))
    nm = 2e18 * np.pi * C / np.append(causality.places, 1.0)[0]
    asked = Request(require=(f"index at {nm:.10g} nm = 1 +- 9",) if places else ())  # so that it asks at all
    (table,) = tables_in(sheet.text().encode(), "table.csv", options_of(sheet, seed))
    answer = judge(table, asked, date="2026-12-01", version="0.0", causality=causality)
    seconds = time.perf_counter() - start
    told, missed = 0, []
    for one in causality.found:
        true = sheet.matter.truth(np.array([2e3 * np.pi * C / one.wavelength_nm]))
        for name in QUANTITIES:
            interval = getattr(one, name)
            if interval is None:
                continue
            told += 1
            if not interval[0] <= true[name][0] <= interval[1]:
                value = true[name][0]
                missed.append(f"{name} {value:.9g} not in {interval} at {one.wavelength_nm:.6g} nm")
    return Outcome(seed=seed, sheet=sheet, answer=answer, missed=tuple(missed), told=told, seconds=seconds)


def outcomes(fine: int, rough: int) -> Iterator[Outcome]:
    """Of all sheets, the finely sampled ones first."""
    for seed in range(fine):
        yield outcome(seed, random_sheet(seed))
    for seed in range(rough):
        yield outcome(seed, coarse(seed), places=0)


@dataclass(frozen=True, kw_only=True)
class Width:
    """Of the bounds of each quantity over that of the optimum by force, None where there are no bounds; no
    ratios where there is no optimum."""

    seed: int
    kind: str
    rows: int
    ratios: tuple[float | None, ...]

    @property
    def bad(self) -> bool:
        """Wider than allowed, or narrower than what a material reaches."""
        return any(ratio is not None and not 1 - DIFFERENCES <= ratio <= MOST_WIDE for ratio in self.ratios)

    def line(self) -> str:
        ratios = " ".join("  none" if ratio is None else f"{ratio:.4f}" for ratio in self.ratios)
        return f"{self.kind:11s} {self.seed:4d} {self.rows:4d} rows, width over the optimum: {ratios}"


def width(seed: int) -> Width:
    """Index, group index and GVD at one place of a table of at most 80 rows."""
    sheet = random_sheet(seed, most_rows=80)
    (table,) = tables_in(sheet.text().encode(), "table.csv", options_of(sheet, seed))
    data = numbers_of(table, Request()).data
    assert data is not None
    omega = places_of(sheet, seed, 1)
    (found,) = bounds(data, omega)
    try:
        optimum = reached(data, float(omega[0]))
    except ArithmeticError:
        return Width(seed=seed, kind=sheet.kind, rows=len(sheet.w), ratios=())
    told = (found.index, found.group_index, found.gvd)
    ratios = tuple(
        None if one is None else float((one[1] - one[0]) / (best[1] - best[0]))
        for one, best in zip(told, optimum, strict=True)
    )
    return Width(seed=seed, kind=sheet.kind, rows=len(sheet.w), ratios=ratios)


def summary(found: list[Outcome]) -> dict[str, Any]:
    """Counts by kind of material."""
    verdicts = Counter((one.sheet.kind, one.answer.verdict) for one in found)
    return {f"{kind}: {verdict}": count for (kind, verdict), count in sorted(verdicts.items())}


def main() -> int:
    fine, rough, optima = (int(text) for text in (*sys.argv[1:], *DEFAULTS[len(sys.argv) - 1 :]))
    found, bad = [], 0
    for one in outcomes(fine, rough):
        found.append(one)
        bad += one.bad
        print(("FAILS " if one.bad else "      ") + one.line(), flush=True)
    measured = 0
    for seed in range(optima):
        size = width(seed)
        measured += bool(size.ratios)
        bad += size.bad
        print(("FAILS " if size.bad else "      ") + size.line(), flush=True)
    print(summary(found))
    told, outside = sum(one.told for one in found), sum(len(one.missed) for one in found if not one.rough)
    bad += measured < FEWEST_OPTIMA * optima
    print(f"bounds told: {told}; true values of finely sampled materials outside: {outside}")
    return int(bad > 0)


if __name__ == "__main__":
    sys.exit(main())
