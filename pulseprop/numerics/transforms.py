"""Plain transforms: centred order, no scale, one thread.

`forward` carries exp(+i omega t) from instants to ascending frequencies, `backward` returns; they are inverse
to each other. Arrays of complex numbers in, new arrays out. numpy's transforms do the work everywhere outside
loops: scipy's are a third faster on long arrays, but loading them costs a tenth of a second at every start.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

__all__ = ["backward", "fast_length", "forward"]

Complex = NDArray[np.complex128]


def forward(envelope: Complex) -> Complex:
    """Sum over instants j of envelope[j] exp(+2 pi i (m - N/2) j / N), for ascending m; (N,), N even."""
    n = envelope.shape[-1]
    spectrum = np.fft.ifft(envelope, norm="forward")
    return np.concatenate((spectrum[n // 2 :], spectrum[: n // 2]))


def backward(spectrum: Complex) -> Complex:
    """The inverse of `forward`; (N,), N even."""
    n = spectrum.shape[-1]
    turned = np.concatenate((spectrum[n // 2 :], spectrum[: n // 2]))
    return np.asarray(np.fft.fft(turned, norm="forward", out=turned))


def fast_length(least: int) -> int:
    """The smallest product of twos, threes and fives that is not below `least`, for fast transforms."""
    best = 1 << max(least - 1, 0).bit_length()
    fives = 1
    while fives < best:
        threes = fives
        while threes < best:
            twos = 1 << max(-(-least // threes) - 1, 0).bit_length()
            best = min(best, threes * twos)
            threes *= 3
        fives *= 5
    return best
