"""True tables with lines that the rows miss are never contradictory, whatever mistake would do as well."""

from __future__ import annotations

import pytest

from pulseprop.vetting.judge import judge
from pulseprop.vetting.passive import PassiveCausality
from pulseprop.vetting.read_options import ReadOptions
from pulseprop.vetting.reading import tables_in
from pulseprop.vetting.request import Request
from tests.benchmarks.unresolved import sheet


@pytest.mark.parametrize(
    ("kind", "seed"),
    [
        ("near an end, n", 2009),  # without the row beside the line, shifted by one, the rest agrees
        ("narrow, n", 2003),  # a dip of the index to 0 beside a strong line
        ("narrow, n and k", 2015),
        ("wide, n", 2000),
        ("near a row, n", 2001),
    ],
)
def test_a_true_coarse_table_is_left_open(kind, seed):
    table = sheet(kind, seed, most_rows=40)
    (sent,) = tables_in(table.text().encode(), "t.csv", ReadOptions(uncertainty=table.half_units()))
    vetted = judge(sent, Request(), date="2026-12-01", version="0.0", causality=PassiveCausality())
    assert vetted.uncertainty_factor > 10
    assert vetted.verdict == "doubtful"
    found = next(one for one in vetted.findings if one.code == "unresolved-line")
    assert "would settle it" in found.text
    assert found.text.split(":")[0].lower() in vetted.headline.lower()
