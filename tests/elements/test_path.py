"""Paths: transfers multiply, exponents add, order does not matter, what is matter."""

from __future__ import annotations

from itertools import permutations

import numpy as np
import pytest

from pulseprop.elements.path import Path
from pulseprop.elements.phase_orders import Loss, PhaseOrders
from pulseprop.elements.slab import Slab
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.response import View

OMEGA = np.array([2.2e15, 2.35e15, 2.6e15])


def a_slab(name, medium, thickness, **more):
    return Slab(name=name, medium=catalogue_medium(medium), thickness=thickness, **more)


ELEMENTS = (
    a_slab("window", "fused silica", 1e-3, faces="fresnel"),
    a_slab("flint", "SF10", 2e-3),
    Loss(name="filter", transmittance=0.3),
    PhaseOrders(name="objective", centre=2.35e15, gdd=900e-30),
)


def test_order_does_not_matter():
    first = Path(ELEMENTS).transfer(OMEGA)
    for order in permutations(ELEMENTS):
        assert Path(order).transfer(OMEGA) == pytest.approx(first, rel=1e-12)


def test_slabs_of_one_glass_add_their_thickness():
    cut = Path((a_slab("a", "SF10", 0.7e-3), a_slab("b", "SF10", 1.3e-3)))
    whole = Path((a_slab("c", "SF10", 2e-3),))
    assert cut.exponent(OMEGA, 5, View.PRINTED) == pytest.approx(
        whole.exponent(OMEGA, 5, View.PRINTED), rel=1e-12
    )


def test_the_empty_path_is_vacuum():
    assert np.all(Path(()).transfer(OMEGA) == 1)
    assert len(Path(())) == 0


def test_media_are_named_once_in_order():
    path = Path((*ELEMENTS, a_slab("second window", "fused silica", 1e-3)))
    assert [medium.name for medium in path.media] == ["fused silica", "SF10"]
