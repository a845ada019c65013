"""Taylor coefficients of the Faddeeva function w(z) = exp(-z^2) erfc(-i z).

Near the centre from w' = -2 z w + 2i/sqrt(pi) and its derivatives (M. Abramowitz, I. A. Stegun, Handbook of Mathematical
Functions, 7.1.20). That recurrence cancels as z^2 with every order, so far away the Gauss-Hermite sum over simple poles is
used, which is exact there to rounding.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

__all__ = ["faddeeva"]

Complex = NDArray[np.complex128]

FAR = 12.0
NODES = 24


def faddeeva(z: Complex, count: int) -> Complex:
    """w and its Taylor coefficients about z, shape (count, *z.shape).

    z: complex, any; far from the origin (|z| > 12) it must lie on or above the real axis.
    """
    flat = np.atleast_1d(z).ravel().astype(complex)
    series = np.empty((count, flat.size), dtype=complex)
    far = np.abs(flat) > FAR
    series[:, ~far] = _near(flat[~far], count)
    series[:, far] = _far(flat[far], count)
    return series.reshape((count, *np.shape(z)))


def _near(z: Complex, count: int) -> Complex:
    from scipy.special import wofz

    derivative = [wofz(z)]
    if count > 1:
        derivative.append(-2 * z * derivative[0] + 2j / np.sqrt(np.pi))
    for m in range(2, count):
        derivative.append(-2 * z * derivative[m - 1] - 2 * (m - 1) * derivative[m - 2])
    factorial = np.cumprod([1.0, *range(1, count)])
    return np.stack(derivative) / factorial[:, None]


def _far(z: Complex, count: int) -> Complex:
    nodes, weights = np.polynomial.hermite.hermgauss(NODES)
    total = np.zeros((count, z.size), dtype=complex)
    for node, weight in zip(nodes, weights, strict=True):
        inverse = 1 / (z - node)
        term = (1j / np.pi * weight) * inverse
        for m in range(count):
            total[m] += term
            term = -term * inverse
    # On the axis the Gaussian itself is below 1e-62 here: nothing to add.
    return total
