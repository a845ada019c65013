"""What was measured of a material, as the tests for a passive causal material take it.

Of n + i k - 1 = constant + (1/pi) PV int k(s) / (s - omega^2) ds with s = omega'^2, constant >= 0 and k >= 0:
an index at some frequencies, an absorption index at some (the same, others, or none), each with its
uncertainty, and what else is known.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError

__all__ = ["Knowledge", "PassiveData"]

Real = NDArray[np.float64]

FEWEST_OF_K = 5
"""Rows of k: what the rows leave open is told by a fourth difference."""


@dataclass(frozen=True, kw_only=True)
class Knowledge:
    """What is known beside the rows.

    transparent: (low, high) in rad/s between which the material absorbs nothing, beyond what the rows say.
    strength: largest integral of k over s = omega^2, rad^2/s^2: pi wp^2 / 2 with wp the plasma frequency of
    all electrons (f-sum rule); the constant is then 0.
    """

    transparent: tuple[float, float] | None = None
    strength: float | None = None


@dataclass(frozen=True, kw_only=True, eq=False)
class PassiveData:
    """omega: of the rows of n, rad/s ascending, (R,). index, index_error: (R,), errors above 0.

    k_omega, k, k_error: rows of the absorption index, rad/s ascending, (K,), five or more; None where the
    material absorbs nothing between the first and the last row of n. least: (K,), True where k is a lower
    limit only.

    Raises InputError for rows that are not so.
    """

    omega: Real
    index: Real
    index_error: Real
    k_omega: Real | None = None
    k: Real | None = None
    k_error: Real | None = None
    least: NDArray[np.bool_] | None = None
    knowledge: Knowledge = field(default_factory=Knowledge)

    def __post_init__(self) -> None:
        _check("n", self.omega, self.index, self.index_error)
        given = [column is not None for column in (self.k_omega, self.k, self.k_error)]
        if any(given) and not all(given):
            raise InputError("rows of k need their frequencies, values and uncertainties")
        if self.k_omega is not None and self.k is not None and self.k_error is not None:
            _check("k", self.k_omega, self.k, self.k_error)
            if len(self.k) < FEWEST_OF_K:
                raise InputError("too few rows of k", value=len(self.k), allowed=f"{FEWEST_OF_K} or more")
        elif not len(self.omega):
            raise InputError("there are no rows", allowed="rows of n, of k, or of both")
        if self.least is not None and (self.k is None or self.least.shape != self.k.shape):
            raise InputError("lower limits need as many rows of k", value=self.least.shape)


def _check(quantity: str, omega: Real, value: Real, error: Real) -> None:
    if not omega.shape == value.shape == error.shape == (len(omega),):
        shapes = f"{omega.shape}, {value.shape} and {error.shape}"
        raise InputError(f"columns of {quantity} differ in length", value=shapes)
    for name, column, good in (
        ("frequency", omega, _ascending(omega)),
        (quantity, value, np.isfinite(value)),
        (f"uncertainty of {quantity}", error, np.isfinite(error) & (error > 0)),
    ):
        if not np.all(good):
            row = int(np.argmin(good))
            raise InputError(f"a {name} cannot be used", value=float(column[row]), **_allowed(name, row))


def _ascending(omega: Real) -> NDArray[np.bool_]:
    return np.isfinite(omega) & (np.diff(omega, prepend=0.0) > 0)


def _allowed(name: str, row: int) -> dict[str, Any]:
    allowed = {"frequency": "above 0, ascending"}.get(name, "finite" + ", above 0" * ("uncert" in name))
    return {"allowed": allowed, "place": f"row {row + 1} by ascending frequency"}
