"""True materials sampled too coarsely, and mistakes in fine ones: what the rule for unresolved lines says.

    python -m tests.benchmarks.unresolved [CASES [ROWS]]     # 40 of each kind, at most 60 rows, if not said

For coarse kinds "contradictory" must stay at 0: the factor is at most 1 ("consistent"), or lines between the
rows or a feature of k with too few rows leave it open ("doubtful"). Mistakes are told by the factor's fall
with lines in one window of three gaps and in more: "contradictory" where none is enough. The uncertainty is
the rounding, as if stated. Leaves with 1 where a coarse material is contradictory.
"""

from __future__ import annotations

import sys
from collections import Counter
from collections.abc import Callable
from dataclasses import replace
from typing import Any

import numpy as np

from pulseprop.causality.feasibility import feasibility
from pulseprop.causality.passive_data import PassiveData
from pulseprop.errors import NumericalLimit
from tests.benchmarks.random_matter import (
    GAUSS,
    Line,
    Matter,
    Sheet,
    _axis,
    _inside,
    _outside,
    _sheet,
    random_sheet,
)

__all__ = ["KINDS", "MISTAKES", "data_of", "sheet"]

KINDS = ("wide, n", "wide, n and k", "narrow, n", "narrow, n and k", "near a row, n", "near an end, n")
"""wide: 0.3 to 5 gaps FWHM, of n alone 0.3 to 4; narrow: a hundredth to 0.3 of a gap, or undamped, anywhere;
near a row: a quarter to a thousandth of a gap from it; near an end: in the two outermost gaps."""

MISTAKES: dict[str, Callable[[PassiveData, Any], PassiveData]] = {
    "n reversed": lambda data, _: replace(data, index=data.index[::-1].copy()),
    "one row of n displaced": lambda data, random: replace(data, index=_displaced(data, random)),
    "n constant": lambda data, _: replace(data, index=np.full(len(data.index), np.mean(data.index))),
    "k times 2.302585": lambda data, _: replace(
        data, k=data.k * np.log(10), k_error=data.k_error * np.log(10)
    ),
    "k over 2.302585": lambda data, _: replace(
        data, k=data.k / np.log(10), k_error=data.k_error / np.log(10)
    ),
    "n and k exchanged": lambda data, _: replace(
        data, index=data.k, index_error=data.k_error, k=data.index, k_error=data.index_error
    ),
}
OF_INDEX = ("n reversed", "one row of n displaced")


def sheet(kind: str, seed: int, most_rows: int = 60) -> Sheet:
    """A true table of one of the KINDS."""
    random = np.random.default_rng([seed, KINDS.index(kind), 4])
    of_k = kind.endswith("k")
    w, positions, exact, printing = _axis(random, most_rows, absorbing=of_k)
    lines = _outside(random, w, damped=of_k)
    if kind.startswith("wide"):
        lines += _inside(random, w, lambda: random.uniform(0.3, 5.0 if of_k else 4.0))
    else:
        lines += [_narrow(random, np.sort(w), kind) for _ in range(int(random.integers(1, 5)))]
    return _sheet(Matter(tuple(lines)), printing, w, positions, exact, kind)


def _narrow(random: Any, w: Any, kind: str) -> Line:
    """As strong as a line of one gap's width with a peak of Im chi of 1e-3 to 10."""
    gap = int(
        random.choice([0, 1, len(w) - 3, len(w) - 2]) if "end" in kind else random.integers(0, len(w) - 1)
    )
    share = random.uniform(0.0, 1.0)
    if "row" in kind:
        share = random.choice([-1, 1]) * 10 ** random.uniform(-3.0, np.log10(0.25)) % 1
    size = float(w[gap + 1] - w[gap])
    centre, width = w[gap] + share * size, size * 10 ** random.uniform(-2.0, np.log10(0.3))
    peak = 10 ** random.uniform(-3.0, 1.0)
    shape = random.choice(["undamped", "lorentz", "gauss"])
    if shape == "undamped":
        return Line(centre=centre, peak=peak * size / centre)
    spread = width / GAUSS if shape == "gauss" else 0.0
    return Line(centre=centre, peak=peak * size / width, width=0.0 if spread else width, spread=spread)


def data_of(sheet: Sheet) -> PassiveData:
    """The printed numbers with their rounding as uncertainty."""
    order = np.argsort(sheet.w)
    w = sheet.w[order] * 1e15
    columns = [np.array([float(cell) for cell in column])[order] for column in sheet.columns[1:]]
    printing = sheet.printing
    error = np.full(len(w), _just_over(0.5 * 10.0**-printing.index_decimals))
    data = PassiveData(omega=w, index=columns[0], index_error=error)
    if printing.k_digits is None:
        return data
    k = columns[1]
    places = -printing.k_digits * np.ones(len(k))
    if printing.significant:
        places = np.floor(np.log10(np.maximum(k, 1e-12))) - printing.k_digits + 1
    return replace(data, k_omega=w, k=k, k_error=_just_over(0.5 * 10.0**places))


def _just_over(error: Any) -> Any:
    return error * (1 + 1e-9)


def _displaced(data: PassiveData, random: Any) -> Any:
    index, row = data.index.copy(), int(random.integers(2, len(data.index) - 2))
    index[row] += random.choice([-1, 1]) * data.index_error[row] * 10 ** random.uniform(0.7, 3.0)
    return index


def said(data: PassiveData) -> str:
    """Consistent, doubtful with the windows that explain it or for coarse rows, or contradictory."""
    try:
        found = feasibility(data)
    except NumericalLimit:
        return "no answer"
    if found.certified <= 1:
        return "consistent"
    if found.coarse:
        return "coarse"
    return f"lines in {found.unresolved.windows}" if found.unresolved else "contradictory"


def mistaken(name: str, cases: int, most_rows: int) -> Counter[str]:
    """Of fine tables with the mistake whose factor it raises to 2."""
    told: Counter[str] = Counter()
    for seed in range(0 if name in OF_INDEX else 1, 2 * cases, 2):
        true = data_of(random_sheet(seed, most_rows))
        wrong = MISTAKES[name](true, np.random.default_rng([seed, 5]))
        try:
            shows = feasibility(wrong, thorough=False).certified >= 2
        except NumericalLimit:
            shows = False
        told[said(wrong) if shows else "does not show"] += 1
    return told


def main() -> int:
    cases, most_rows = (int(text) for text in (*sys.argv[1:], "40", "60")[:2])
    bad = 0
    for kind in KINDS:
        told = Counter(said(data_of(sheet(kind, seed, most_rows))) for seed in range(cases))
        bad += told["contradictory"]
        print(f"{kind:24s} {cases} cases: {dict(sorted(told.items()))}", flush=True)
    for name in MISTAKES:
        print(
            f"{name:24s} {cases} cases: {dict(sorted(mistaken(name, cases, most_rows).items()))}", flush=True
        )
    return int(bad > 0)


if __name__ == "__main__":
    sys.exit(main())
