"""Bounded least squares against scipy's, and bounds that must never exclude what is reached."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.optimize import lsq_linear

from pulseprop.compensation.bound import Bounds
from pulseprop.compensation.boxed import least_in_box
from pulseprop.compensation.goals import Judge
from pulseprop.compensation.problem import Goal
from pulseprop.errors import InputError


@pytest.mark.parametrize("unknowns", [1, 2, 3, 5])
def test_least_squares_in_a_box_are_those_of_scipy(unknowns):
    rng = np.random.default_rng(unknowns)
    matrices = rng.normal(size=(20, 12, unknowns)) * rng.lognormal(0, 2, (20, 1, unknowns))
    rights = matrices @ rng.normal(0.5, 1, (20, unknowns, 1)) + rng.normal(size=(20, 12, 1))
    gram = matrices.transpose(0, 2, 1) @ matrices
    slope = -(matrices.transpose(0, 2, 1) @ rights)[:, :, 0]
    where, value = least_in_box(gram, slope)
    for matrix, right, found, least in zip(matrices, rights[:, :, 0], where, value, strict=True):
        wanted = lsq_linear(matrix, right, (0, 1), method="bvls", tol=1e-14)
        assert np.all((found >= 0) & (found <= 1))
        assert least == pytest.approx(2 * wanted.cost - right @ right, rel=1e-9, abs=1e-9)


def test_two_equal_columns_still_have_an_answer():
    gram, slope = np.full((1, 2, 2), 4.0), np.full((1, 2), -3.0)
    where, value = least_in_box(gram, slope)
    assert where.sum() == pytest.approx(0.75, rel=1e-6)
    assert value[0] == pytest.approx(-2.25, rel=1e-6)


def test_too_many_unknowns_are_refused():
    with pytest.raises(InputError, match="too many adjustments move together"):
        least_in_box(np.eye(8)[None], np.zeros((1, 8)))


def paths(bench):
    silica, sf10 = bench.glass("fused silica", 4e-3), bench.glass("SF10", 1e-3)
    lossy = bench.mirrors("m", -40e-30, most=20, loss=0.01)
    return {
        "prisms": ([silica, bench.prisms()], [{}]),
        "gratings": ([sf10, bench.gratings()], [{"incidence": np.radians(10.0)}]),
        "mirrors, wedge": ([silica, lossy, bench.wedge()], [{"bounces": 6.0}, {}]),
    }


@pytest.mark.parametrize("name", ["prisms", "gratings", "mirrors, wedge"])
@pytest.mark.parametrize(
    "goal",
    [
        Goal(),
        Goal(transmission_weight=1.0),
        Goal(name="two-photon"),
        Goal(name="two-photon", transmission_weight=1),
    ],
    ids=lambda goal: f"{goal.name}, {goal.transmission_weight}",
)
def test_a_bound_never_excludes_what_is_reached(bench, name, goal):
    """At random settings, and on the way down to them from the flattest ones."""
    parts, discrete = paths(bench)[name]
    assembly = bench.assembly_of(bench.pulse(), parts, discrete)
    assert not assembly.curved
    bounds = Bounds(samples=assembly.samples, background=assembly.background)
    judge = Judge(samples=assembly.samples, goal=goal)
    rng = np.random.default_rng(5)
    for u in rng.uniform(size=(40, assembly.count)) ** 2:
        reached = judge(assembly.exponent(u)).score
        assert not bounds.cannot_reach(assembly, reached, goal)


def test_a_bound_excludes_far_misses(bench):
    """Six mirrors where twenty are needed: 12 fs become 120; 0.5 of the limit is out of the question."""
    parts = [bench.glass("SF10", 5e-3), bench.mirrors("m", -40e-30)]
    for bounces, wanted in ((6.0, True), (20.0, False)):
        assembly = bench.assembly_of(bench.pulse(), parts, [{"bounces": bounces}])
        bounds = Bounds(samples=assembly.samples, background=assembly.background)
        assert bounds.cannot_reach(assembly, np.log(0.8), Goal()) is wanted


def test_goals_without_a_bound_exclude_nothing(bench):
    assembly = bench.assembly_of(bench.pulse(), [bench.glass("SF10", 5e-3), bench.mirrors("m", -40e-30)])
    bounds = Bounds(samples=assembly.samples, background=assembly.background)
    assert not bounds.cannot_reach(assembly, 0.0, Goal(name="duration"))
