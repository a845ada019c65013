"""The materials behind the bounds: those of lowest and highest GVD and TOD that data still allow.

Each is the solution of a linear programme of `bounds_programme`: absorption outside the band as point masses,
k between the rows as a spline. Any one of them is a passive causal material that has all rows within their
uncertainties, so what happens in it may happen with the piece that the vendor sold.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.bounds_band import allowed_band
from pulseprop.causality.bounds_functionals import ORDERS, QUANTITIES, quantity_weights
from pulseprop.causality.bounds_materials import Functional, Materials
from pulseprop.causality.bounds_programme import Proofs
from pulseprop.causality.coarse_features import coarse_features
from pulseprop.causality.passive_class import PassiveClass
from pulseprop.causality.passive_data import PassiveData
from pulseprop.constants import SPEED_OF_LIGHT, TWO_PI_C
from pulseprop.errors import NumericalLimit
from pulseprop.numerics.box_programme import solve_box
from pulseprop.numerics.spline_basis import basis_values
from pulseprop.numerics.threads import one_thread

__all__ = ["ExtremeMaterial", "extreme_materials"]

Real = NDArray[np.float64]
Quantity = Literal["gvd", "tod"]

NEAR = 0.02
"""Share of the width by which each may miss the end of the bounds: worst cases need no proof."""
ACCURACY, TOLERABLE, TINY = 1e-7, 1e-2, 1e-30
STRAYS = 0.02
"""Share of its uncertainty by which a row may be missed beyond it."""
INDEX = np.eye(ORDERS)[0]
DIVISORS = {"gvd": 1, "tod": 2}
"""c times the quantity is counted in units of the frequency's inverse to this power."""


@dataclass(frozen=True, kw_only=True, eq=False)
class ExtremeMaterial:
    """One that the data allow. value: of the quantity at the frequency asked for, s^2/m or s^3/m. index, k:
    at the frequencies asked for, (W,)."""

    quantity: Quantity
    end: Literal["lowest", "highest"]
    value: float
    index: Real
    k: Real


@one_thread()
def extreme_materials(data: PassiveData, omega: float, at: Real) -> tuple[ExtremeMaterial, ...]:
    """Those of lowest and highest GVD at omega, and of TOD where the data limit it; rad/s.

    at: where index and k are wanted, rad/s, between the outermost rows, (W,).

    Raises NumericalLimit where the data give no bounds at omega, or the programmes are not solved.
    """
    _refuse_unlimited(data, omega)
    passive = PassiveClass(data)
    proofs = Proofs(Materials(passive))
    told: tuple[Quantity, ...] = ("gvd", "tod") if data.k is None else ("gvd",)
    return tuple(one for quantity in told for one in _ends(proofs, quantity, omega, at))


def _refuse_unlimited(data: PassiveData, omega: float) -> None:
    low, high = allowed_band(data)
    if not low <= omega <= high:
        raise NumericalLimit(
            "the rows do not limit the dispersion so near to their end",
            value=_nanometres(omega),
            allowed=f"{_nanometres(high)} to {_nanometres(low)}" if low < high else "more rows",
        )
    if data.k_omega is not None and data.k is not None and data.k_error is not None:
        coarse = coarse_features(data.k_omega, data.k, data.k_error)
        if coarse:
            raise NumericalLimit(
                "the dispersion is not limited where a feature of k has fewer than five rows over its width",
                value=_nanometres(coarse[0].omega),
            )


def _ends(proofs: Proofs, quantity: Quantity, omega: float, at: Real) -> Iterator[ExtremeMaterial]:
    materials = proofs.materials
    unit = materials.passive.unit
    weights = quantity_weights(omega / unit)[QUANTITIES.index(quantity)]
    lowest = materials.functional(omega / unit, weights)
    proofs.interval(lowest, NEAR)
    # what the proofs of both ends found useful is where the extreme materials absorb
    places = proofs.places
    index, absorbed = _of_index(materials, at), _of_k(materials, at)
    scale = SPEED_OF_LIGHT * unit ** DIVISORS[quantity]
    ends: tuple[tuple[Literal["lowest", "highest"], Functional], ...] = (
        ("lowest", lowest),
        ("highest", lowest.negative()),
    )
    for end, functional in ends:
        found = _Found(places, _amounts(materials, functional, places))
        yield ExtremeMaterial(
            quantity=quantity,
            end=end,
            value=float(found.values([lowest])[0]) / scale,
            index=1 + found.values(index),
            k=found.values(absorbed) if absorbed else np.zeros(len(at)),
        )


@dataclass(frozen=True, eq=False)
class _Found:
    """Amounts of the fixed columns, and of masses at places."""

    places: Real
    amounts: Real

    def values(self, functionals: Sequence[Functional]) -> Real:
        """Of this material."""
        columns = (np.append(one.fixed, one.continuum(self.places)) for one in functionals)
        return np.array([column @ self.amounts for column in columns])


def _amounts(materials: Materials, functional: Functional, places: Real) -> Real:
    """Of the material with the least value of the functional."""
    matrix = np.hstack([materials.fixed, materials.continuum(places)])
    cost = np.append(functional.fixed, functional.continuum(places))
    found = solve_box(
        matrix,
        materials.lower,
        materials.upper,
        cost=cost / np.max(np.abs(cost)),
        accuracy=ACCURACY,
        floor=TINY,
        tolerable=TOLERABLE,
    )
    amounts = np.maximum(found.x, 0.0)
    rows = matrix @ amounts
    over = np.maximum(rows - materials.upper, materials.lower - rows) / materials.size
    if np.max(over) > STRAYS:
        raise NumericalLimit(
            "no material at the limit of the data was found",
            value=f"a row is missed by {1 + np.max(over):.3g} times its uncertainty",
            allowed="1",
        )
    return amounts


def _of_index(materials: Materials, at: Real) -> list[Functional]:
    return [materials.functional(float(omega), INDEX) for omega in at / materials.passive.unit]


def _of_k(materials: Materials, at: Real) -> list[Functional]:
    """Functionals that are k; masses have none between the rows."""
    splines = materials.passive.splines
    if splines is None:
        return []
    values = basis_values(splines.knots, splines.pieces, at / materials.passive.unit)
    rest = np.zeros(materials.fixed.shape[1] - values.shape[1])
    return [Functional(fixed=np.append(row, rest), continuum=np.zeros_like) for row in values]


def _nanometres(omega: float) -> str:
    return f"{TWO_PI_C / omega * 1e9:.5g} nm"
