"""True materials, printed and vetted: a part of the study `tests.benchmarks.vet_random`."""

from __future__ import annotations

import numpy as np
import pytest

from tests.benchmarks.random_matter import C, Line, Matter, coarse, random_sheet
from tests.benchmarks.vet_random import outcome, width


@pytest.mark.parametrize("seed", range(1000, 1030))
def test_a_true_material_is_never_contradictory_and_lies_in_its_bounds(seed):
    found = outcome(seed, random_sheet(seed, most_rows=22), places=seed % 2)
    assert found.answer.verdict != "contradictory", found.line()
    assert found.told >= 2
    assert found.missed == ()


@pytest.mark.parametrize("seed", range(1000, 1010))
def test_a_true_material_in_too_few_rows_is_never_contradictory(seed):
    found = outcome(seed, coarse(seed, most_rows=40), places=0)
    assert found.answer.verdict != "contradictory", found.line()


@pytest.mark.parametrize("seed", [3, 8, 13])
def test_bounds_are_near_the_optimum(seed):
    """At most 1.05 times as wide as what materials on a fine grid reach."""
    found = width(seed)
    assert found.ratios[0] is not None
    assert not found.bad, found.line()


@pytest.mark.parametrize(
    "line",
    [Line(centre=3.0, peak=0.2, width=0.3), Line(centre=3.0, peak=0.2, width=0.1, spread=0.12)],
    ids=["oscillator", "Voigt"],
)
def test_the_materials_themselves_are_causal_and_their_derivatives_right(line):
    """The trapezoidal sum of the Kramers-Kronig integral at midpoints, and differences."""
    matter = Matter((line, Line(centre=12.0, peak=1.0)))
    step = 2e-3
    w = (np.arange(200_000) + 0.5) * step
    chi = line.orders(w)[0]
    assert chi.imag.min() >= 0
    at = 500 * np.arange(2, 8) * step
    sums = [np.sum(2 / np.pi * w * chi.imag / (w**2 - place**2)) * step for place in at]
    assert np.allclose(sums, line.orders(at)[0].real, atol=2e-5)
    h = 1e-3
    n = matter.refraction(2.8 + h * np.arange(-1, 2)).real
    true = matter.truth(np.array([2.8]))
    first, second = (n[2] - n[0]) / (2 * h), (n[2] - 2 * n[1] + n[0]) / h**2
    assert true["group_index"][0] == pytest.approx(n[1] + 2.8 * first, abs=1e-4)
    assert true["gvd_fs2_per_mm"][0] == pytest.approx((2 * first + 2.8 * second) / C * 1e3, rel=1e-3)
