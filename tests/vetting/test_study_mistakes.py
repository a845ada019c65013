"""Planted mistakes, found and named right: a part of the study `tests.benchmarks.vet_mistakes`."""

from __future__ import annotations

import pytest

from tests.benchmarks.planted_mistakes import KINDS
from tests.benchmarks.vet_mistakes import met

LONG = {"absorbance under the heading alpha", "k slipped by a row", "GVD from a wrong column"}
LONG |= {"TOD from a wrong column", "too few digits for the GVD asked", "index slipped by a row"}
"""Kinds of which a case takes seconds: the study has them."""


@pytest.mark.parametrize("kind", sorted(KINDS.keys() - LONG))
def test_a_planted_mistake_is_found_and_named_right(kind):
    """The first case of its kind."""
    found = met(kind, 0)
    assert found.shows, found.said
    assert found.named, found.said


def test_lines_of_eight_rows_in_long_tables_are_not_thinned_away():
    """Every second row of these would leave four over each line, and then no repair fits."""
    assert met("alpha under the heading k", 2).named
