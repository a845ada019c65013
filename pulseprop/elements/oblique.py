"""Waves that come at an angle: what their index is along the normal of a face."""

from __future__ import annotations

import numpy as np

from pulseprop.numerics.series import Series, root

__all__ = ["normal_index"]


def normal_index(chi: Series, incidence: float) -> Series:
    """sqrt(n^2 - sin^2 incidence) from a Taylor series of chi, shape kept; incidence in vacuum, rad.

    The principal root, with the signed zero of passive matter as in `material.refraction`; real where chi is
    real and nothing is totally reflected.
    """
    squared = chi.copy()
    squared[0] += np.cos(incidence) ** 2
    if np.isrealobj(squared) and squared[0].min(initial=1.0) > 0:
        return root(squared, np.sqrt(squared[0]))
    passive = squared[0].real + 1j * np.where(squared[0].imag == 0, 0.0, squared[0].imag)
    return root(squared, np.sqrt(passive))
