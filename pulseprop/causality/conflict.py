"""The rows that together prove a factor, few of them, and the factor without the worst."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.least_factor import least_factor
from pulseprop.causality.passive_class import PassiveClass
from pulseprop.causality.passive_data import FEWEST_OF_K, PassiveData
from pulseprop.causality.proof import Proof, proven

__all__ = ["Conflict", "ConflictRow", "Suspects", "conflict_of", "fewer_rows", "suspects", "without_rows"]

Real = NDArray[np.float64]

SHARES = np.geomspace(1e-2, 1e-7, 11)
"""Shares of the proof below which rows are left out, tried from the largest."""
LOSS = 1e-3
"""Share of the factor that leaving rows out may cost."""
MOST_SUSPECTS = 3


@dataclass(frozen=True, kw_only=True)
class ConflictRow:
    """Row of n or of k (from 0, ascending frequency), its weight, what was measured and its uncertainty.

    value is index - 1 or k; of k the uncertainty holds what the rows leave open between them.
    """

    quantity: Literal["n", "k"]
    row: int
    weight: float
    value: float
    error: float


@dataclass(frozen=True, kw_only=True, eq=False)
class Conflict:
    """Proof that the uncertainties must be stretched by `factor`.

    For every material of the class the sum of weight times value over `rows` is at most `most` (0, but where
    the strength is limited), and factor = (sum of weight value - most) / (sum of |weight| error). The sum of
    |weight| is 1. price: of one unit of strength; most = price times its limit, rad^2/s^2.
    """

    rows: tuple[ConflictRow, ...]
    most: float
    price: float
    factor: float


@dataclass(frozen=True, kw_only=True, eq=False)
class Suspects:
    """One to three rows that carry the proof: (quantity, row), and the factor of the data without them."""

    rows: tuple[tuple[Literal["n", "k"], int], ...]
    factor: float


def conflict_of(cls: PassiveClass, proof: Proof) -> Conflict:
    """The proof in words that a pocket calculator can check."""
    size = float(np.sum(np.abs(proof.weights))) or 1.0
    count = len(cls.rows)
    rows = tuple(
        ConflictRow(
            quantity="n" if at < count else "k",
            row=int(at if at < count else at - count),
            weight=float(proof.weights[at] / size),
            value=float(cls.target[at]),
            error=float(cls.error[at]),
        )
        for at in np.flatnonzero(proof.weights)
    )
    price = proof.price / size / cls.unit**2
    most = price * (cls.data.knowledge.strength or 0.0)
    return Conflict(rows=rows, most=most, price=price, factor=proof.factor)


def fewer_rows(cls: PassiveClass, proof: Proof) -> Proof:
    """The proof with as few rows as it holds with, at a loss of at most a thousandth."""
    share = np.abs(proof.weights) * cls.error
    for least in SHARES:
        kept = share >= least
        found = proven(cls, np.where(kept, proof.weights, 0.0), proof.price, kept)
        if found is not None and found.factor >= (1 - LOSS) * proof.factor:
            return found
    return proof


def suspects(data: PassiveData, conflict: Conflict) -> Suspects | None:
    """The rows, three at most, without which the data are possible: the heaviest of each proof in turn.

    None where three are not enough, or too few rows are left. Raises NumericalLimit.
    """
    taken: tuple[tuple[Literal["n", "k"], int], ...] = ()
    for _ in range(MOST_SUSPECTS):
        taken = (*taken, _heaviest(data, conflict, taken))
        rest = without_rows(data, taken)
        if rest is None:
            return None
        cls = PassiveClass(rest)
        attained, proof = least_factor(cls)
        if attained.factor <= 1:
            return Suspects(rows=taken, factor=attained.factor)
        conflict = conflict_of(cls, fewer_rows(cls, proof))
    return None


def _heaviest(
    data: PassiveData, conflict: Conflict, taken: tuple[tuple[Literal["n", "k"], int], ...]
) -> tuple[Literal["n", "k"], int]:
    """The row of the data that carries most, where the conflict counts rows without those taken."""
    most = max(conflict.rows, key=lambda entry: abs(entry.weight) * entry.error)
    count = len(data.omega) if most.quantity == "n" or data.k is None else len(data.k)
    left = [row for row in range(count) if (most.quantity, row) not in taken]
    return most.quantity, left[most.row]


def without_rows(data: PassiveData, rows: tuple[tuple[Literal["n", "k"], int], ...]) -> PassiveData | None:
    """The data without these rows; None where too few are left."""
    index = np.ones(len(data.omega), dtype=bool)
    index[[row for quantity, row in rows if quantity == "n"]] = False
    less = replace(
        data, omega=data.omega[index], index=data.index[index], index_error=data.index_error[index]
    )
    if data.k is None or data.k_omega is None or data.k_error is None:
        return less if np.any(index) else None
    of_k = np.ones(len(data.k), dtype=bool)
    of_k[[row for quantity, row in rows if quantity == "k"]] = False
    if np.sum(of_k) < FEWEST_OF_K:
        return None
    return replace(
        less,
        k_omega=data.k_omega[of_k],
        k=data.k[of_k],
        k_error=data.k_error[of_k],
        least=None if data.least is None else data.least[of_k],
    )
