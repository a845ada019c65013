"""Planned in-place transforms for loops that need thousands of them, one thread, pyfftw loaded on first use.

Natural FFT order, no shift: multiply by transfers that were brought into that order once (`natural`). Sign as
in grid.py: `to_spectrum` carries exp(+i omega t) and no scale, `to_field` divides by the number of points.
"""

from __future__ import annotations

from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray

__all__ = ["Plan", "natural"]

Complex = NDArray[np.complex128]


def natural(ascending: Complex) -> Complex:
    """Reorder samples on ascending frequencies into the order of a plain FFT, shape kept."""
    return np.asarray(np.fft.ifftshift(ascending))


class Plan:
    """A pair of planned transforms on one owned buffer.

    points: length. effort: "measure" tries several algorithms first (for loops), "estimate" does not (for
    single shots). Work on `buffer` in place: fill it, call `to_spectrum()`, multiply, call `to_field()`.
    """

    def __init__(self, points: int, effort: Literal["measure", "estimate"] = "measure") -> None:
        import pyfftw

        flag = {"measure": "FFTW_MEASURE", "estimate": "FFTW_ESTIMATE"}[effort]
        self.buffer: Complex = pyfftw.empty_aligned(points, dtype="complex128")
        keywords: dict[str, Any] = {"flags": (flag,), "threads": 1}
        # FFTW's backward direction carries exp(+i ...): that is the way from time to frequency here.
        self._to_spectrum = pyfftw.FFTW(self.buffer, self.buffer, direction="FFTW_BACKWARD", **keywords)
        self._to_field = pyfftw.FFTW(self.buffer, self.buffer, direction="FFTW_FORWARD", **keywords)
        self._scale = 1.0 / points
        self.transforms = 0

    def to_spectrum(self) -> None:
        """Transform the buffer from instants to frequencies."""
        self._to_spectrum.execute()
        self.transforms += 1

    def to_field(self) -> None:
        """Transform the buffer from frequencies to instants, unscaled: see `scale`."""
        self._to_field.execute()
        self.transforms += 1

    @property
    def scale(self) -> float:
        """1/points: fold it into a transfer, once per pair of transforms."""
        return self._scale
