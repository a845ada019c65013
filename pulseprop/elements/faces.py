"""The faces of a slab: what is lost at them.

Fresnel amplitudes at angle theta in vacuum, q = sqrt(n^2 - sin^2 theta), convention exp(-i omega t) (M. Born,
E. Wolf, Principles of Optics, section 1.5; from memory):

    s:  r = (cos theta - q) / (cos theta + q)          p:  r = (n^2 cos theta - q) / (n^2 cos theta + q)

Both faces of one slab together transmit 1 - r^2; coherent echoes add the geometric sum
1 / (1 - r^2 exp(2 i omega d q / c)).
"""

from __future__ import annotations

from typing import Literal

import numpy as np
from numpy.typing import NDArray

__all__ = ["Polarisation", "reflection_squared"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]
Polarisation = Literal["p", "s"]


def reflection_squared(chi: Complex, q: Complex, cosine: float | Real, polarisation: Polarisation) -> Complex:
    """r^2 of one face, shape kept.

    chi: susceptibility; q: sqrt(n^2 - sin^2 theta), same shape; cosine: of the angle outside, 0 to 1, one or
    of the same shape.
    """
    outside = cosine if polarisation == "s" else (1 + chi) * cosine
    return np.asarray(((outside - q) / (outside + q)) ** 2)
