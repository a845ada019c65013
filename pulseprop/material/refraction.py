"""From the susceptibility to the refraction N = n + ik - 1 and back, as Taylor series.

The root is the branch continued from n = 1 at +i infinity: on and above the axis of a passive medium 1 + chi
does not wind, so it is the principal root; there Im n >= 0 where Im chi >= 0, also where 1 + chi is negative.
N = chi / (1 + n) keeps all digits of a dilute gas.
"""

from __future__ import annotations

import numpy as np

from pulseprop.material.response import IndexResponse, Response, View
from pulseprop.numerics.series import Numbers, Series, product, quotient, root

__all__ = ["refraction_of", "refraction_series", "susceptibility_of"]


def refraction_of(chi: Series) -> Series:
    """N = sqrt(1 + chi) - 1 of a Taylor series chi, shape kept; real where chi is real and above -1."""
    squared = chi.copy()
    squared[0] += 1.0
    if np.isrealobj(chi) and squared[0].min(initial=1.0) <= 0:
        squared = squared.astype(complex)
    leading = _principal(squared[0])
    one_more = root(squared, leading)
    one_more[0] += 1.0
    return quotient(chi, one_more)


def refraction_series(response: Response, omega: Numbers, count: int, view: View) -> Series:
    """Taylor coefficients of n + ik - 1 of a response about each omega (rad/s): shape (count, *omega.shape).

    No root is taken of what is given as an index. Raises what the response's own series raises.
    """
    if isinstance(response, IndexResponse):
        return response.refraction(omega, count, view)
    return refraction_of(response.series(omega, count, view))


def _principal(squared: Series) -> Series:
    if np.isrealobj(squared):
        return np.asarray(np.sqrt(squared))
    # A negative real value with imaginary part -0.0 would give the root of gain: passive matter has +0.0.
    return np.asarray(np.sqrt(squared.real + 1j * np.where(squared.imag == 0, 0.0, squared.imag)))


def susceptibility_of(refraction: Series) -> Series:
    """chi = N (2 + N) of a Taylor series N, shape kept."""
    doubled = refraction.copy()
    doubled[0] += 2.0
    return product(refraction, doubled)
