"""Fifty random paths made by hiding a known compensator: the search must find one as good.

Each path is glass in such an amount that the hidden setting takes out its GDD; its peak ratio is that of the
residual higher orders. What is found must reach it to 0.002, whatever the kinds of compensator.
"""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.compensation.problem import Goal, Problem, fixed
from pulseprop.compensation.search import search
from pulseprop.elements.element import orders_of_element
from pulseprop.elements.slab import Slab
from pulseprop.material.catalogue_media import catalogue_medium

GLASSES = ("fused silica", "N-BK7", "SF10", "sapphire", "CaF2", "MgF2")


def compensators(bench, rng):
    """A random set of compensators, and hidden settings for each."""
    kinds = {
        "gratings": (
            bench.gratings(float(rng.choice([150e3, 300e3, 600e3])), (5.0, 25.0), most=20e-3),
            {"separation": rng.uniform(1e-3, 19e-3), "incidence": np.radians(rng.uniform(6, 24))},
        ),
        "prisms": (
            bench.prisms(str(rng.choice(["fused silica", "SF10"])), most=2.0),
            {"apex_separation": rng.uniform(0.3, 1.9), "insertion": rng.uniform(0.5e-3, 6e-3)},
        ),
        "mirrors": (
            bench.mirrors("mirrors", -rng.uniform(30, 90) * 1e-30, rng.uniform(-80, 20) * 1e-45, most=16),
            {"bounces": 2.0 * rng.integers(2, 8)},
        ),
    }
    chosen = rng.choice(sorted(kinds), size=int(rng.integers(1, 3)), replace=False)
    wedge = [(bench.wedge(str(rng.choice(GLASSES))), {"insertion": rng.uniform(0.2e-3, 4.8e-3)})]
    return [kinds[name] for name in chosen] + (wedge if rng.random() < 0.6 else [])


def glasses(rng, needed: float, omega: float):
    """One to three glasses that together have the GDD `needed`, s^2."""
    names = rng.choice(GLASSES[:5], size=int(rng.integers(1, 4)), replace=False)
    shares = rng.dirichlet(np.ones(names.size))
    row = []
    for name, share in zip(names, shares, strict=True):
        medium = catalogue_medium(str(name))
        slab = Slab(name=f"glass {name}", medium=medium, thickness=1e-3)
        row.append(
            Slab(
                name=slab.name,
                medium=medium,
                thickness=1e-3 * share * needed / orders_of_element(slab, omega)[1],
            )
        )
    return row


@pytest.mark.parametrize("seed", range(50))
def test_a_hidden_compensator_is_matched(bench, seed):
    rng = np.random.default_rng(seed)
    while True:
        hidden = compensators(bench, rng)
        built = [element for part, settings in hidden for element in part.build(settings)]
        gdd = sum(orders_of_element(element, bench.OMEGA)[1] for element in built)
        if gdd < -50e-30:
            break
    duration = float(rng.uniform(10e-15, 40e-15))
    path = glasses(rng, -gdd, bench.OMEGA)
    brute = bench.Brute(duration, points=2048)
    wanted = brute.ratio(brute.exponent(*path, *built))
    source = bench.pulse(duration)
    problem = Problem(
        pulse=source,
        parts=(*(fixed(slab) for slab in path), *(part for part, _ in hidden)),
        goal=Goal(),
        best=1,
    )
    found = search(problem, bench.samples_of(source), lambda stage, fraction: None)
    assert found.best[0].judged.peak_ratio >= wanted - 0.002
