"""How much of a susceptibility answers before it is asked: energy of chi(t) at t < 0 over all of it."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

__all__ = ["acausal_share"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

POINTS = 1 << 16
REACH = 8.0
"""Highest frequency of the transform over the highest of the data."""


def acausal_share(chi: Callable[[Real], Complex], highest: float) -> float:
    """Share of the energy of chi(t) that lies at t < 0, from 0 to 1; 1/2 for a real chi without absorption.

    chi: at real omega > 0 (rad/s), any function. highest: rad/s up to which there are data. What answers at
    once (the value at the highest frequency, a delta function at t = 0) is taken off first.
    """
    omega = np.linspace(0.0, REACH * highest, POINTS // 2 + 1)
    values = np.empty(omega.size, dtype=complex)
    values[1:] = chi(omega[1:])
    values[0] = values[1].real
    values -= values[-1].real
    # numpy's inverse transform carries exp(+i omega t); the physics here exp(-i omega t).
    response = np.fft.irfft(np.conj(values), POINTS)
    later, earlier = response[1 : POINTS // 2], response[POINTS // 2 + 1 :]
    total = float(np.dot(later, later) + np.dot(earlier, earlier))
    return float(np.dot(earlier, earlier)) / total if total > 0 else 0.0
