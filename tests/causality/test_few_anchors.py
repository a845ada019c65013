"""Absorption with an index at one or two places, some rows only lower limits: the factor is still proven."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.causality.least_factor import FLOOR, GAP, least_factor
from pulseprop.causality.passive_class import PassiveClass
from pulseprop.causality.passive_data import PassiveData

ROWS = np.linspace(2.6e15, 4.2e15, 60)
CENTRE, WIDTH = 3.4e15, 0.14e15
K = 1e-3 * np.exp(-(((ROWS - CENTRE) / WIDTH) ** 2))


def data_with(anchors: int, ceiling: float) -> PassiveData:
    """A Gaussian band whose rows above the ceiling stand at it, as lower limits."""
    above = ceiling < K
    places = np.linspace(2.65e15, 4.15e15, 2)[:anchors]
    return PassiveData(
        omega=places,
        index=np.array([1.361, 1.3695])[:anchors],
        index_error=np.full(anchors, 2e-4),
        k_omega=ROWS,
        k=np.where(above, ceiling, K),
        k_error=np.full(len(ROWS), 1e-6),
        least=above if above.any() else None,
    )


@pytest.mark.parametrize("anchors", [1, 2])
@pytest.mark.parametrize("ceiling", [1.0, 7e-4, 3e-4])
def test_the_gap_closes_and_the_numbers_are_allowed(anchors: int, ceiling: float) -> None:
    # The band is a material of the class, so that the numbers without error need a factor of at most 1.
    material, proof = least_factor(PassiveClass(data_with(anchors, ceiling)))
    assert material.factor <= 1
    assert material.factor - proof.factor <= GAP * max(material.factor, FLOOR)
