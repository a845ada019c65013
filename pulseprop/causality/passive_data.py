"""What was measured of a material, as the tests for a passive causal material take it.

Of n + i k - 1 = constant + (1/pi) PV int k(s) / (s - omega^2) ds with s = omega'^2, constant >= 0 and k >= 0:
an index at some frequencies, an absorption index at some (the same, others, or none), each with its
uncertainty, and what else is known.
"""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

__all__ = ["Knowledge", "PassiveData"]

Real = NDArray[np.float64]


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

    k_omega, k, k_error: rows of the absorption index, rad/s ascending, (K,); None where the material absorbs
    nothing between the first and the last row of n. least: (K,), True where k is a lower limit only.
    """

    omega: Real
    index: Real
    index_error: Real
    k_omega: Real | None = None
    k: Real | None = None
    k_error: Real | None = None
    least: NDArray[np.bool_] | None = None
    knowledge: Knowledge = field(default_factory=Knowledge)
