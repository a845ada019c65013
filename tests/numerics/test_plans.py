"""Planned transforms: sign, scale and order are those of the grid."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.grid import Grid
from pulseprop.numerics.plans import Plan, natural


@pytest.mark.parametrize(("points", "effort"), [(256, "measure"), (1000, "estimate")])
def test_a_plan_and_the_grid_agree(points, effort):
    generator = np.random.default_rng(4)
    field = generator.normal(size=points) + 1j * generator.normal(size=points)
    grid = Grid(points=points, step=1.0, start=0.0, carrier=0.0)
    plan = Plan(points, effort=effort)
    plan.buffer[:] = field
    plan.to_spectrum()
    assert np.abs(plan.buffer - natural(grid.to_spectrum(field))).max() < 1e-12 * points
    plan.buffer *= plan.scale
    plan.to_field()
    assert np.abs(plan.buffer - field).max() < 1e-13
    assert plan.transforms == 2


def test_natural_order_starts_at_the_middle_of_the_ascending_frequencies():
    assert natural(np.arange(6.0) - 3).tolist() == [0, 1, 2, -3, -2, -1]
