"""Third-order-limited cases of the textbooks, against a brute force that shares only the elements.

Glass against a prism pair and glass against a grating pair: GDD can be taken out, TOD stays (R. L. Fork et
al., Opt. Lett. 12, 483 (1987), for the two together; from memory). The brute force transforms the field on
nested lattices; the search must reach 99.9 % of its peak with at most 500 evaluations of the field.
"""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.compensation.goals import Judge
from pulseprop.compensation.problem import Goal, Problem
from pulseprop.compensation.refine import refined
from pulseprop.compensation.search import search

MOST_FIELDS = 500
SHARE = 0.999


def searched(bench, parts, source=None, goal=None):
    source = source or bench.pulse()
    problem = Problem(pulse=source, parts=tuple(parts), goal=goal or Goal(), best=1)
    found = search(problem, bench.samples_of(source), lambda stage, fraction: None)
    return found, found.best[0]


def lines(brute, build, low, high):
    """base + slopes @ place, from elements that are linear in their settings."""
    low, high = np.asarray(low, float), np.asarray(high, float)
    base = brute.exponent(*build(low))
    slopes = []
    for index in range(low.size):
        moved = low.copy()
        moved[index] = high[index]
        slopes.append((brute.exponent(*build(moved)) - base) / (high[index] - low[index]))
    columns = np.stack(slopes, axis=1)
    return lambda place: base + columns @ (place - low)


def elements_of(parts, names):
    def build(place):
        given = iter(place)
        row = []
        for part in parts:
            values = {one.parameter: one.low for one in part.adjustments if not one.continuous}
            values.update({one.parameter: float(next(given)) for one in part.continuous})
            row += part.build(values)
        return row

    assert names == [one.parameter for part in parts for one in part.continuous]
    return build


CASES = {
    "glass, prism pair": (
        lambda b: [b.glass("SF10", 6e-3), b.prisms("SF10", most=1.2)],
        ["apex_separation", "insertion"],
        41,
    ),
    "glass, grating pair": (
        lambda b: [b.glass("fused silica", 20e-3), b.gratings(most=30e-3)],
        ["separation"],
        201,
    ),
    "glass, prism pair, wedge": (
        lambda b: [b.glass("N-BK7", 3e-3), b.prisms("SF10", most=1.0), b.wedge(most=10e-3)],
        ["apex_separation", "insertion", "insertion"],
        17,
    ),
    "glass, prisms and gratings together": (
        lambda b: [
            b.glass("SF10", 20e-3),
            b.gratings(600e3, (14.0, 14.0), most=10e-3),
            b.prisms("SF10", most=1.5),
        ],
        ["separation", "apex_separation", "insertion"],
        17,
    ),
}


def along_the_ridge(brute, line, low, high):
    """score(place) with the total GDD in place of the first setting: good settings then lie along an axis.

    GDD by a fit of the phase; place[0] is its departure from zero in units of 100 fs^2.
    """
    detuning = brute.omega - brute.omega.mean()

    def gdd(at):
        return 2 * np.polyfit(detuning, line(at).imag, 4, w=brute.amplitude)[2]

    first = np.eye(low.size)[0] * (high[0] - low[0])
    slope = gdd(low + first) - gdd(low)
    rest = [gdd(low + step) - gdd(low) for step in np.diag(high - low)]
    at_low = gdd(low)

    def settings(place):
        at = place.copy()
        shares = (place[1:] - low[1:]) / (high[1:] - low[1:])
        others = at_low + sum(share * one for share, one in zip(shares, rest[1:], strict=True))
        at[0] = low[0] + np.clip((place[0] * 100e-30 - others) / slope, 0, 1) * (high[0] - low[0])
        return at

    return lambda place: brute.ratio(line(settings(place)))


def by_lattices(bench, brute, line, low, high, points) -> float:
    """The best of nested lattices along the ridge, and in the same way on the faces where a setting ends."""
    if not low.size:
        return brute.ratio(line(low))
    ridge = along_the_ridge(brute, line, low, high)
    best = [bench.lattice_best(ridge, [-2.0, *low[1:]], [2.0, *high[1:]], points, 5)[0]]
    for end in (low[0], high[0]):

        def face(at, end=end):
            return line(np.array([end, *at]))

        best.append(by_lattices(bench, brute, face, low[1:], high[1:], points))
    return max(best)


@pytest.mark.parametrize("name", CASES)
def test_the_search_reaches_the_brute_force(bench, name):
    make, names, points = CASES[name]
    parts = make(bench)
    build = elements_of(parts, names)
    ranges = [(one.low, one.high) for part in parts for one in part.continuous]
    low, high = (np.array(side) for side in zip(*ranges, strict=True))
    brute = bench.Brute()
    wanted = by_lattices(bench, brute, lines(brute, build, low, high), low, high, points)
    found, best = searched(bench, parts)
    assert 0.05 < wanted < 0.9999
    assert best.judged.peak_ratio >= SHARE * wanted
    assert found.evaluations <= MOST_FIELDS
    # The brute force is one: it comes as near to the search as it asks the search to come.
    assert wanted >= SHARE * best.judged.peak_ratio
    # The settings, seen by the brute force, are as good as the search says.
    place = np.concatenate(best.assembly.values(best.u))
    assert brute.ratio(brute.exponent(*build(place))) == pytest.approx(best.judged.peak_ratio, abs=2e-4)
    assert np.all((place >= low) & (place <= high))


def test_an_angle_is_found_with_the_separation(bench):
    """Two settings of which one enters through a root: 2-D lattices over both."""
    parts = [bench.glass("SF10", 8e-3), bench.gratings(300e3, (5.0, 40.0), most=25e-3)]
    brute = bench.Brute(duration=15e-15)
    glass = brute.exponent(*parts[0].build({}))
    low, high = np.array([0.0, np.radians(5.0)]), np.array([25e-3, np.radians(40.0)])

    def score(at):
        pair = parts[1].build({"separation": at[0], "incidence": at[1]})
        return brute.ratio(glass + brute.exponent(*pair))

    wanted, _ = bench.lattice_best(score, low, high, 31, 5)
    found, best = searched(bench, parts, bench.pulse(15e-15))
    assert best.judged.peak_ratio >= SHARE * wanted
    assert found.evaluations <= MOST_FIELDS


def test_the_best_of_one_setting_is_where_its_derivative_vanishes(bench):
    """Glass against gratings: along the only setting, 1e-4 of the range to both sides is worse."""
    _, best = searched(bench, [bench.glass("fused silica", 20e-3), bench.gratings(most=30e-3)])
    judge = Judge(samples=best.assembly.samples, goal=Goal())
    for step in (-1e-4, 1e-4):
        assert judge(best.assembly.exponent(best.u + step)).score < best.score


def test_cubic_phase_alone_is_left_where_only_gdd_can_be_set(bench):
    """With nothing but GDD to set against GDD and TOD, the best GDD is none, by symmetry of a Gaussian."""
    from pulseprop.compensation.problem import Adjustment, Part, fixed
    from pulseprop.elements.phase_orders import PhaseOrders

    def build(settings):
        return (PhaseOrders(name="gdd", centre=bench.OMEGA, gdd=float(settings["gdd"])),)

    given = fixed(PhaseOrders(name="rest", centre=bench.OMEGA, gdd=400e-30, tod=2000e-45))
    movable = Part(
        name="gdd",
        build=build,
        adjustments=(Adjustment(parameter="gdd", low=-1000e-30, high=1000e-30),),
    )
    _, best = searched(bench, [given, movable])
    assert best.assembly.values(best.u)[0][0] == pytest.approx(-400e-30, abs=0.02e-30)


@pytest.mark.parametrize("name", ["two-photon", "duration", "flat phase", "contrast"])
def test_other_goals_are_climbed_to_their_own_top(bench, name):
    """No neighbour on a small lattice about the answer is better by more than 1e-6 in the score."""
    goal = Goal(name=name, window=40e-15 if name == "contrast" else None)
    parts = [bench.glass("N-BK7", 3e-3), bench.prisms("SF10", most=1.0), bench.wedge(most=10e-3)]
    _, best = searched(bench, parts, goal=goal)
    judge = Judge(samples=best.assembly.samples, goal=goal)
    for index in range(best.u.size):
        for step in (-2e-4, 2e-4):
            u = best.u.copy()
            u[index] = np.clip(u[index] + step, 0, 1)
            assert judge(best.assembly.exponent(u)).score <= best.score + 1e-6


def test_transmission_weight_trades_quality_for_light(bench):
    """Lossy mirrors: with full weight fewer bounces are taken than for quality alone."""
    parts = [bench.glass("SF10", 2e-3), bench.mirrors("m", -20e-30, most=24, step=1, loss=0.08)]
    counts = []
    for weight in (0.0, 1.0):
        _, best = searched(bench, parts, goal=Goal(transmission_weight=weight))
        counts.append(best.assembly.models[0].discrete["bounces"] if best.assembly.models else 0.0)
    brute = bench.Brute()
    glass = brute.exponent(*parts[0].build({}))
    every = [glass + brute.exponent(*parts[1].build({"bounces": float(count)})) for count in range(25)]
    assert counts[0] == int(np.argmax([brute.ratio(one) for one in every]))
    assert counts[1] == int(np.argmax([brute.peak(one) for one in every]))
    assert counts[1] < counts[0]


def test_size_weight_draws_the_elements_together(bench):
    """Prisms of silica leave less TOD than gratings, and take more room."""
    parts = [
        bench.glass("fused silica", 10e-3),
        bench.gratings(most=40e-3, optional=True),
        bench.prisms("fused silica", most=2.0, optional=True),
    ]
    sizes = []
    for weight in (0.0, 2.0):
        _, best = searched(bench, parts, goal=Goal(size_weight=weight))
        sizes.append(best.assembly.size(best.u))
    assert sizes[1] < 0.5 * sizes[0]


def test_refinement_without_any_element_says_so(bench):
    """A range in which no setting diffracts the pulse gives no design."""
    parts = [bench.gratings(2400e3, (0.0, 3.0))]
    assembly = bench.assembly_of(bench.pulse(), parts)
    judge = Judge(samples=assembly.samples, goal=Goal())
    assert refined(assembly, judge, np.full(assembly.count, 0.5)) is None
