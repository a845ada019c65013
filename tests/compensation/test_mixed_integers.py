"""Counts, lists and compensators that may be left out, against full enumeration with nothing pruned."""

from __future__ import annotations

from itertools import product

import numpy as np
import pytest

from pulseprop.compensation.problem import Adjustment, Goal, Part, Problem
from pulseprop.compensation.search import search
from pulseprop.elements.slab import Slab
from pulseprop.errors import InputError
from pulseprop.material.catalogue_media import catalogue_medium

STOCK = (1e-3, 2e-3, 3e-3, 5e-3, 6.35e-3)


def window(optional: bool = True) -> Part:
    def build(settings):
        medium = catalogue_medium(str(settings["glass"]))
        return (Slab(name="window", medium=medium, thickness=float(settings["thickness"])),)

    return Part(
        name="window",
        build=build,
        optional=optional,
        adjustments=(
            Adjustment(parameter="glass", choices=("fused silica", "SF10", "CaF2")),
            Adjustment(parameter="thickness", choices=STOCK, unit="mm", unit_size=1e-3),
        ),
    )


def silent(stage, fraction):
    pass


def benches(b):
    return {
        "two mirrors, stock windows": [
            b.glass("N-BK7", 7e-3),
            b.mirrors("m40", -40e-30, most=16, loss=0.002),
            b.mirrors("m75", -75e-30, -60e-45, most=12, loss=0.004),
            window(),
        ],
        "mirrors of three kinds": [
            b.glass("SF10", 3e-3),
            b.glass("fused silica", 5e-3),
            b.mirrors("a", -35e-30, 15e-45, most=12, loss=0.001),
            b.mirrors("b", -60e-30, -90e-45, most=12, loss=0.003),
            b.mirrors("c", -110e-30, -20e-45, most=8, step=1, loss=0.01),
        ],
        "an odd lot": [
            b.glass("sapphire", 2.2e-3),
            b.mirrors("m", -27e-30, -17e-45, most=11, step=1, loss=0.02),
            window(optional=False),
        ],
    }


def enumerated(brute, parts):
    """(exponent, settings) of every discrete choice, idle ones included."""
    fixed = brute.exponent(*(element for part in parts if not part.adjustments for element in part.build({})))
    rows = []
    for part in parts:
        if not part.adjustments:
            continue
        ways = [(np.zeros_like(fixed), None)] if part.optional else []
        for values in product(*(one.values for one in part.adjustments)):
            settings = dict(zip([one.parameter for one in part.adjustments], values, strict=True))
            ways.append((brute.exponent(*part.build(settings)), settings))
        rows.append(ways)
    for combination in product(*rows):
        yield fixed + sum(exponent for exponent, _ in combination)


def value_of(goal, brute, exponent):
    if goal.name == "peak power":
        return brute.peak(exponent) if goal.transmission_weight else brute.ratio(exponent)
    power = brute.power(exponent)
    if goal.name == "two-photon":
        limit = brute.power(exponent.real.astype(complex))
        return np.sum(power**2) / np.sum(limit**2)
    if goal.name == "flat phase":
        weight = brute.amplitude**2 * np.exp(2 * exponent.real)
        offset = brute.omega - brute.omega.mean()
        line = np.polyfit(offset, exponent.imag, 1, w=np.sqrt(weight))
        return -np.sqrt(np.average((exponent.imag - np.polyval(line, offset)) ** 2, weights=weight))
    return -width(power)


def width(power) -> float:
    """Outermost half maxima by straight lines between padded samples, in samples."""
    turned = np.roll(power, power.size // 2 - int(np.argmax(power)))
    above = np.flatnonzero(turned >= 0.5 * turned.max())
    ends = []
    for inner, outer in ((above[0], above[0] - 1), (above[-1], above[-1] + 1)):
        part = (turned[inner] - 0.5 * turned.max()) / (turned[inner] - turned[outer])
        ends.append(inner + part * (outer - inner))
    return float(ends[1] - ends[0])


@pytest.mark.parametrize("name", ["two mirrors, stock windows", "mirrors of three kinds", "an odd lot"])
@pytest.mark.parametrize(
    "goal",
    [
        Goal(),
        Goal(transmission_weight=1.0),
        Goal(name="two-photon"),
        Goal(name="flat phase"),
        Goal(name="duration"),
    ],
    ids=lambda goal: f"{goal.name}, {goal.transmission_weight}",
)
def test_the_optimum_is_that_of_full_enumeration(bench, name, goal):
    """The best value of all, by transforms of another size, is met by the set-up that the search chose."""
    parts = benches(bench)[name]
    brute = bench.Brute(duration=12e-15)
    wanted = max(value_of(goal, brute, exponent) for exponent in enumerated(brute, parts))
    source = bench.pulse(12e-15)
    found = search(
        Problem(pulse=source, parts=tuple(parts), goal=goal, best=3), bench.samples_of(source), silent
    )
    best = found.best[0]
    used = best.assembly.elements(best.u)
    row = [
        element
        for part in parts
        for element in used.get(part.name, () if part.adjustments else part.build({}))
    ]
    # Values equal to 1e-5 are one optimum: two transforms need not agree on which of the two is first.
    assert value_of(goal, brute, brute.exponent(*row)) == pytest.approx(wanted, rel=1e-5)
    assert found.choices == found.refined + found.proved + found.by_phase


def test_proofs_spare_most_of_the_work(bench):
    parts = benches(bench)["mirrors of three kinds"]
    source = bench.pulse(12e-15)
    found = search(Problem(pulse=source, parts=tuple(parts), best=1), bench.samples_of(source), silent)
    assert found.choices > 300
    assert found.by_phase == 0
    assert found.proved > 0.9 * found.choices


def test_a_count_and_a_range_together(bench):
    """Mirrors and a wedge: every count, each with the wedge on a fine lattice."""
    parts = [
        bench.glass("SF10", 1.5e-3),
        bench.mirrors("m", -35e-30, -25e-45, most=14),
        bench.wedge(most=4e-3),
    ]
    brute = bench.Brute()
    glass = brute.exponent(*parts[0].build({}))
    per_metre = brute.exponent(*parts[2].build({"insertion": 1.0}))
    wanted = max(
        brute.ratio(glass + brute.exponent(*parts[1].build({"bounces": count})) + depth * per_metre)
        for count in parts[1].adjustments[0].values
        for depth in np.linspace(0, 4e-3, 401)
    )
    source = bench.pulse()
    found = search(Problem(pulse=source, parts=tuple(parts), best=1), bench.samples_of(source), silent)
    assert found.best[0].judged.peak_ratio >= wanted - 1e-6
    assert found.best[0].judged.peak_ratio <= wanted + 1e-3


def test_designs_differ_in_kind(bench):
    """Listed choices and the parts used make a kind; counts do not."""
    parts = benches(bench)["two mirrors, stock windows"]
    source = bench.pulse()
    found = search(Problem(pulse=source, parts=tuple(parts), best=6), bench.samples_of(source), silent)
    kinds = [
        tuple(
            (
                model.part.name,
                *(model.discrete[one.parameter] for one in model.part.adjustments if one.choices),
            )
            for model in one.assembly.models
        )
        for one in found.best
    ]
    assert len(set(kinds)) == len(kinds) == 6
    scores = [one.score for one in found.best]
    assert scores == sorted(scores, reverse=True)


def test_the_same_question_has_the_same_answer(bench):
    parts = [
        bench.glass("SF10", 3e-3),
        bench.gratings(300e3, (5.0, 30.0)),
        bench.prisms("SF10", optional=True),
    ]
    source = bench.pulse()
    problem = Problem(pulse=source, parts=tuple(parts), best=2)
    first, second = (search(problem, bench.samples_of(source), silent) for _ in range(2))
    assert first.evaluations == second.evaluations
    for one, other in zip(first.best, second.best, strict=True):
        assert np.array_equal(one.u, other.u)
        assert one.score == other.score


def test_too_many_choices_are_refused(bench):
    parts = [bench.mirrors(f"m{index}", -40e-30, most=60) for index in range(3)]
    source = bench.pulse()
    with pytest.raises(InputError, match="too many combinations"):
        search(Problem(pulse=source, parts=tuple(parts)), bench.samples_of(source), silent)


def test_nothing_that_can_be_built_is_an_error(bench):
    parts = [bench.gratings(2400e3, (0.0, 0.0))]
    source = bench.pulse()
    with pytest.raises(InputError, match="has no setting that can be used"):
        search(Problem(pulse=source, parts=tuple(parts)), bench.samples_of(source), silent)


def test_ranges_must_be_ranges():
    with pytest.raises(InputError, match="ends before it begins"):
        Adjustment(parameter="separation", low=2.0, high=1.0)
    with pytest.raises(InputError, match="step of bounces must be positive"):
        Adjustment(parameter="bounces", low=0.0, high=4.0, step=0.0)
    assert Adjustment(parameter="bounces", low=0.0, high=12.0, step=2.0).values == (0, 2, 4, 6, 8, 10, 12)
    assert Adjustment(parameter="thickness", low=0.0, high=1.0, step=0.1).values[-1] == pytest.approx(1.0)


def test_a_part_that_does_nothing_is_not_in_the_design(bench):
    """A wedge of more glass where glass is too much already: it is left out, though it may stay at 0."""
    parts = [bench.glass("SF10", 2e-3), bench.prisms("SF10", most=1.0), bench.wedge(optional=True)]
    bare = [bench.glass("SF10", 9e-3), bench.mirrors("m", -40e-30, most=10), bench.wedge(optional=True)]
    source = bench.pulse()
    for row in (parts, bare):
        found = search(Problem(pulse=source, parts=tuple(row), best=5), bench.samples_of(source), silent)
        for one in found.best:
            for model, values in zip(one.assembly.models, one.assembly.values(one.u), strict=True):
                assert not (model.part.name == "wedge" and values[0] < 1e-7)
    assert [model.part.name for model in found.best[0].assembly.models] == ["m"]


def test_a_window_of_one_thickness_may_be_used_or_not(bench):
    """Nothing to set on it: it is taken where it helps, and left out where it does not."""
    stock = bench.glass("fused silica", 4e-3)
    spare = Part(name="spare", build=stock.build, optional=True)
    source = bench.pulse()
    for mirrors, taken in ((-140e-30, True), (1e-33, False)):
        part = bench.mirrors("m", mirrors, most=1, step=1, optional=False)
        fixed_count = Part(
            name="m",
            build=part.build,
            adjustments=(Adjustment(parameter="bounces", low=1.0, high=1.0),),
        )
        found = search(
            Problem(pulse=source, parts=(fixed_count, spare), best=1), bench.samples_of(source), silent
        )
        names = [model.part.name for model in found.best[0].assembly.models]
        assert ("spare" in names) is taken
