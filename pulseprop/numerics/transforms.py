"""Plain transforms: centred order, no scale, one thread.

`forward` carries exp(+i omega t) from instants to ascending frequencies, `backward` returns; they are inverse to each
other. Arrays of complex numbers in, new arrays out.
"""

from __future__ import annotations

import numpy as np
import scipy.fft
from numpy.typing import NDArray

__all__ = ["backward", "forward"]

Complex = NDArray[np.complex128]


def forward(envelope: Complex) -> Complex:
    """Sum over instants j of envelope[j] exp(+2 pi i (m - N/2) j / N), for ascending m; shape (N,) to (N,)."""
    n = envelope.shape[-1]
    spectrum = scipy.fft.ifft(envelope, norm="forward", overwrite_x=False)
    return np.concatenate((spectrum[n // 2 :], spectrum[: n // 2]))


def backward(spectrum: Complex) -> Complex:
    """The inverse of `forward`."""
    n = spectrum.shape[-1]
    turned = np.concatenate((spectrum[n // 2 :], spectrum[: n // 2]))
    return np.asarray(scipy.fft.fft(turned, norm="forward", overwrite_x=True))
