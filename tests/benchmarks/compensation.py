"""Figures of the compensation search: `python -m tests.benchmarks.compensation`.

Five elements with three adjustments on 2^13 points, the whole answer (search, full runs, tolerances), on one
core; how many discrete choices a proof spares; evaluations of the field, and how near the brute force they
come.
"""

from __future__ import annotations

import time
from collections.abc import Callable

import numpy as np

from pulseprop.compensation.compensate import compensate
from pulseprop.compensation.goals import Judge
from pulseprop.compensation.problem import Adjustment, Goal, Part, Problem, fixed
from pulseprop.compensation.result import Compensation
from pulseprop.compensation.samples import samples_for
from pulseprop.elements.element import orders_of_element
from pulseprop.elements.gratings import GratingPair
from pulseprop.elements.phase_orders import PhaseOrders
from pulseprop.elements.prisms import PrismPair
from pulseprop.elements.slab import Slab
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.propagation.sizing import GridWish
from pulseprop.pulse.pulse import Pulse

CENTRE = 2 * np.pi * 299792458.0 / 800e-9
FLOOR_SECONDS = 5.0
FLOOR_EVALUATIONS = 500
FLOOR_SHARE = 0.999


def slab(name: str, thickness: float) -> Part:
    return fixed(Slab(name=name, medium=catalogue_medium(name), thickness=thickness))


def millimetres(parameter: str, low: float, high: float) -> Adjustment:
    return Adjustment(parameter=parameter, low=low, high=high, unit="mm", unit_size=1e-3)


def gratings() -> Part:
    return Part(
        name="gratings",
        build=lambda given: (
            GratingPair(
                name="gratings",
                centre=CENTRE,
                grooves=600e3,
                incidence=np.radians(14.0),
                separation=float(given["separation"]),
            ),
        ),
        adjustments=(millimetres("separation", 0.0, 10e-3),),
    )


def prisms() -> Part:
    return Part(
        name="prisms",
        build=lambda given: (
            PrismPair(
                name="prisms",
                centre=CENTRE,
                medium=catalogue_medium("SF10"),
                apex_separation=float(given["apex_separation"]),
                insertion=float(given["insertion"]),
            ),
        ),
        adjustments=(millimetres("apex_separation", 0.1, 1.5), millimetres("insertion", 0.0, 10e-3)),
    )


def mirrors(name: str, gdd: float, tod: float, most: int) -> Part:
    def build(given):
        count = float(given["bounces"])
        return (PhaseOrders(name=name, centre=CENTRE, gdd=gdd * count, tod=tod * count),)

    steps = Adjustment(parameter="bounces", low=0.0, high=float(most), step=1.0)
    return Part(name=name, build=build, adjustments=(steps,), optional=True)


def whole_answer() -> None:
    """Three glasses, gratings and prisms: five elements, three adjustments."""
    parts = (slab("SF10", 16e-3), slab("fused silica", 5e-3), slab("N-BK7", 3e-3), gratings(), prisms())
    problem = Problem(pulse=Pulse(centre=CENTRE, duration=12e-15, energy=1e-9), parts=parts)
    answer, seconds = timed(lambda: compensate(problem))
    wall, processor = seconds
    print("five elements, three adjustments, 2^13 points, the whole answer:")
    print(f"  {wall:.2f} s, {processor:.2f} s of one core (floor {FLOOR_SECONDS:g} s)")
    print(f"  {answer.search.evaluations} evaluations of the field (at most {FLOOR_EVALUATIONS}), ", end="")
    print(f"peak ratio {answer.designs[0].peak_ratio:.5f}, {answer.search.points} points")
    share = answer.designs[0].peak_ratio / brute(problem)
    print(f"  {share:.6f} of the brute force on nested lattices (floor {FLOOR_SHARE:g})")


def brute(problem: Problem, points: int = 17, levels: int = 5) -> float:
    """The largest peak ratio on nested lattices of both prism settings and, within 200 fs^2, of the GDD."""
    samples = samples_for(problem.pulse, GridWish())
    judge = Judge(samples=samples, goal=Goal())

    def whole(separation, apex_separation, insertion):
        given = {"separation": separation, "apex_separation": apex_separation, "insertion": insertion}
        elements = [element for part in problem.parts for element in part.build(given)]
        gdd = sum(orders_of_element(element, CENTRE)[1] for element in elements)
        return sum(element.exponent(samples.omega, 1)[0] for element in elements), gdd

    origin, gdd = whole(0.0, 0.1, 0.0)
    ends = [whole(10e-3, 0.1, 0.0), whole(0.0, 1.5, 0.0), whole(0.0, 0.1, 10e-3)]
    (by_gratings, slope), *others = [(end - origin, its - gdd) for end, its in ends]
    low, high, best = np.array([-200e-30, 0.0, 0.0]), np.array([200e-30, 1.0, 1.0]), (0.0, (0.0, 0.0, 0.0))
    edges = low, high
    for _ in range(levels):
        axes = [np.linspace(a, b, points) for a, b in zip(low, high, strict=True)]
        for at in np.stack([axis.ravel() for axis in np.meshgrid(*axes, indexing="ij")], axis=1):
            rest = gdd + sum(share * its for share, (_, its) in zip(at[1:], others, strict=True))
            total = origin + np.clip((at[0] - rest) / slope, 0, 1) * by_gratings
            total = total + sum(share * phase for share, (phase, _) in zip(at[1:], others, strict=True))
            best = max(best, (judge(total).peak_ratio, tuple(at)))
        reach = 2 * (high - low) / (points - 1)
        middle = np.array(best[1])
        low, high = np.maximum(middle - reach, edges[0]), np.minimum(middle + reach, edges[1])
    return best[0]


def discrete_choices() -> None:
    """Mirrors of three kinds in any number."""
    parts = (
        slab("SF10", 3e-3),
        slab("fused silica", 5e-3),
        mirrors("a", -35e-30, 15e-45, 16),
        mirrors("b", -60e-30, -90e-45, 12),
        mirrors("c", -110e-30, -20e-45, 8),
    )
    problem = Problem(pulse=Pulse(centre=CENTRE, duration=12e-15, energy=1e-9), parts=parts, best=3)
    answer, (wall, processor) = timed(lambda: compensate(problem))
    record = answer.search
    print(
        f"{record.choices} discrete choices: {record.refined} looked at, {record.proved} spared by a proof, ",
        end="",
    )
    print(f"{record.by_phase} by the ranking; {wall:.2f} s, {processor:.2f} s of one core")


def timed(work: Callable[[], Compensation]) -> tuple[Compensation, tuple[float, float]]:
    wall, processor = time.perf_counter(), time.process_time()
    result = work()
    return result, (time.perf_counter() - wall, time.process_time() - processor)


def main() -> None:
    whole_answer()
    discrete_choices()


if __name__ == "__main__":
    main()
