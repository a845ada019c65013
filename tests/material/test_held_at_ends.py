"""A table as printed beyond its rows: the end values, without slope; inside it is untouched."""

from __future__ import annotations

import numpy as np

from pulseprop.material.held_at_ends import HeldAtEnds
from pulseprop.material.index_table import index_table

ROWS = np.linspace(1.5e15, 3.5e15, 30)
TABLE = index_table(ROWS, 1.5 - 0.05 * (ROWS / 2e15) ** 2, as_printed=True)


def test_inside_it_is_the_table():
    omega = np.linspace(1.6e15, 3.4e15, 7)
    held = HeldAtEnds(TABLE).refraction_series(omega, 3)
    assert np.array_equal(held, TABLE.refraction_series(omega, 3))


def test_outside_the_ends_are_held_without_slope():
    held = HeldAtEnds(TABLE).refraction_series(np.array([1e14, 1e16]), 3)
    ends = TABLE.refraction_series(ROWS[[0, -1]], 1)[0]
    assert np.allclose(held[0], ends, rtol=1e-9)
    assert np.all(held[1:] == 0)


def test_the_band_is_that_of_the_rows():
    assert HeldAtEnds(TABLE).band == TABLE.band
    assert not TABLE.causal
