"""The time-frequency grid: the one place that knows FFT sign, scale, order and offset.

Fields are analytic signals E(t) in W^(1/2), |E|^2 being the instantaneous power averaged over the carrier:

    E(t) = 1/(2 pi) int_0^inf A(omega) exp(-i omega t) d omega,     A(omega) = int E(t) exp(+i omega t) dt,

with A zero at and below zero frequency. A grid holds `points` instants t_j = start + j step and as many
ordinary frequencies f_m = lowest + m / span, ascending. In memory a field is stored as the envelope about
the grid's reference frequency `carrier` = lowest + (points // 2) / span, that is E(t) exp(+i 2 pi carrier t),
so that an FFT without any shift in time takes one to the other.

numpy's FFT carries exp(-i ...) forward; the physics here carries exp(+i omega t), so its *inverse* routine,
unnormalised and times the step, goes from time to frequency. Only this file does that.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.numerics.transforms import backward, forward

__all__ = ["Grid"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True)
class Grid:
    """A uniform grid of instants and the absolute frequencies that belong to them.

    points: even number of samples. step: seconds between instants. start: first instant, s, on the clock
    of a front that travels at c. carrier: reference frequency in Hz; the frequencies run from
    carrier - 1/(2 step) upwards in steps of 1/span. Raises InputError for an odd number of points, or a step
    that is not positive.
    """

    points: int
    step: float
    start: float
    carrier: float

    def __post_init__(self) -> None:
        if self.points < 2 or self.points % 2:
            raise InputError(
                "a grid needs an even number of points", value=self.points, allowed="even, 2 or more"
            )
        if not (np.isfinite(self.step) and self.step > 0):
            raise InputError("a grid needs a positive time step", value=self.step, allowed="seconds above 0")

    @property
    def span(self) -> float:
        """Length of the window in seconds: points times step."""
        return self.points * self.step

    @cached_property
    def time(self) -> Real:
        """Instants in s on the clock of the front, shape (points,)."""
        return self.start + self.step * np.arange(self.points, dtype=float)

    @cached_property
    def frequency(self) -> Real:
        """Absolute ordinary frequencies in Hz, ascending, shape (points,)."""
        return self.carrier + (np.arange(self.points) - self.points // 2) / self.span

    @property
    def omega(self) -> Real:
        """Absolute angular frequencies in rad/s, ascending, shape (points,)."""
        return 2 * np.pi * self.frequency

    @property
    def positive(self) -> slice:
        """The part of the frequency axis that lies above zero, where analytic signals live."""
        first = int(np.searchsorted(self.frequency, 0.5 / self.span * 1e-6, side="right"))
        return slice(first, self.points)

    def to_spectrum(self, envelope: Complex) -> Complex:
        """Spectrum A(omega) in W^(1/2) s, ascending frequency, of an envelope about `carrier`.

        Both of shape (points,). The start of the window is taken into account: the phase refers to t = 0 of
        the front's clock.
        """
        samples, rest = self._offset
        spectrum = forward(np.roll(envelope, samples))
        self._turn(spectrum, rest, self.step)
        return spectrum

    def to_field(self, spectrum: Complex) -> Complex:
        """Envelope about `carrier` in W^(1/2) of a spectrum A(omega), (points,): undoes `to_spectrum`."""
        samples, rest = self._offset
        turned = np.array(spectrum, dtype=complex)
        self._turn(turned, -rest, 1 / self.step)
        return np.roll(backward(turned), -samples)

    @cached_property
    def _offset(self) -> tuple[int, float]:
        """Start in whole samples and a rest in s: rolling samples is exact, a phase of 1e6 rad is not."""
        samples = round(self.start / self.step)
        return samples % self.points, self.start - samples * self.step

    def _turn(self, spectrum: Complex, delay: float, scale: float) -> None:
        """Multiply by scale exp(2 pi i (f - carrier) delay), in place.

        The factor is a geometric sequence: the product of a coarse and a fine one costs two exponentials of
        root length.
        """
        fine = self.points & -self.points
        while fine * fine > self.points:
            fine //= 2
        coarse = self.points // fine
        turn = 2j * np.pi * delay / self.span
        rows = spectrum.reshape(coarse, fine)
        rows *= (scale * np.exp(turn * (fine * np.arange(coarse) - self.points // 2)))[:, None]
        if delay:
            rows *= np.exp(turn * np.arange(fine))

    def carrier_resolved(self, envelope: Complex) -> Complex:
        """The undivided analytic signal E(t) in W^(1/2) of an envelope about `carrier`, (points,)."""
        return np.asarray(envelope * np.exp(-2j * np.pi * self.carrier * self.time))

    def energy(self, spectrum: Complex) -> float:
        """Energy in J of a spectrum A(omega) in W^(1/2) s, (points,), on this grid (Parseval)."""
        return float(np.vdot(spectrum, spectrum).real / self.span)

    def moved(self, start: float) -> Grid:
        """The same frequencies seen through a window that begins at another instant, s."""
        return replace(self, start=start)
