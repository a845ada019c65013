"""The front test: nothing may leave before a front travelling at c could have arrived.

A real field that is exactly zero before its first instant and infinitely smooth is sent through a transfer;
the energy of the square of the real field that comes out before the front, over all that comes out, is set
against a measured noise floor. Analytic signals will not do: that of a compact pulse is not compact.

Any medium with n -> 1 at high frequency gives exactly zero (A. Sommerfeld, Ann. Phys. 44, 177 (1914)); what
remains is rounding, aliasing and the part of the ringing that wraps around the window. True precursors come
after the front and are no fault.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

__all__ = ["FrontResult", "TestPulse", "front_test", "judged"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

AHEAD_SHARE = 0.25
"""Part of the window kept for what comes before the front."""
LAST_SHARE = 0.02
"""Part of the window, at its end, whose energy measures how much wraps around."""
NYQUIST_LEVEL = 1.5e-16
"""Spectrum at Nyquist over its peak: where a transform in double precision shows rounding and no longer the
pulse.
"""
LOBE = 32
"""Samples of the oversampled spectrum over which its zeros are bridged."""
CAUSAL_FLOORS = 100.0
ACAUSAL_FLOORS = 1e4
"""Energy ahead over the noise floor up to which an answer is causal, and above which it is acausal."""
WORST_FLOOR = 1e-10
"""Above this noise floor nothing is called causal."""
BEST_FLOOR = 1e-27
GOOD_FLOOR = 2e-11
CHEAP_POINTS = 1 << 17
"""Up to here the window is doubled towards BEST_FLOOR, beyond only towards GOOD_FLOOR."""
SHORTER = 0.93
"""A second window over the first, in length: what came round its end stands elsewhere, what is early not."""
SAME_PLACE = 0.01
"""Of the window: how far the centroid of what is early may move and still count as standing."""
BLOCK = 1 << 13
"""Frequencies evaluated at a time: few, so that what is temporary stays small beside the window."""
STATIC = 1e-6
"""Of the frequency spacing: where the transfer at zero frequency is taken."""
SAME = 0.01
"""Relative change of the energy ahead, from one window to the next, that counts as none."""


@dataclass(frozen=True, kw_only=True)
class TestPulse:
    """envelope(x): smooth, zero outside 0 < x < 1; support in s; centre in rad/s."""

    envelope: Callable[[Real], Real]
    support: float
    centre: float

    __test__ = False

    def field(self, time: Real) -> Real:
        """The real field."""
        return self.envelope(time / self.support) * np.cos(self.centre * (time - 0.5 * self.support))

    def step(self) -> float:
        """Sampling step in s at which the spectrum at Nyquist is below rounding."""
        fine = 1 << 13
        x = np.arange(fine) / fine
        spectrum = np.abs(np.fft.rfft(self.envelope(x), 4 * fine))
        lobes = spectrum[: spectrum.size // LOBE * LOBE].reshape(-1, LOBE).max(axis=1)
        quiet = int(np.argmax(lobes < NYQUIST_LEVEL * spectrum[0]))
        detuning = 2 * np.pi * LOBE * quiet / (4 * self.support)
        return float(np.pi / (1.05 * (self.centre + detuning)))

    def band(self, share: float) -> tuple[float, float]:
        """Angular frequencies (rad/s) between which the spectrum is above `share` of its peak."""
        fine = 1 << 12
        spectrum = np.abs(np.fft.rfft(self.envelope(np.arange(fine) / fine), 8 * fine))
        detuning = 2 * np.pi * np.flatnonzero(spectrum > share * spectrum[0])[-1] / (8 * self.support)
        return max(self.centre - detuning, 0.02 * self.centre), self.centre + detuning


@dataclass(frozen=True, kw_only=True)
class FrontResult:
    """Energies as shares of what leaves; points and span (s) of the window used."""

    energy_ahead: float
    noise_floor: float
    verdict: str
    points: int
    span: float
    naive_energy_ahead: float | None
    naive_verdict: str | None


def judged(energy_ahead: float, noise_floor: float) -> str:
    """causal, acausal or unresolved, from two shares of the energy that leaves."""
    if energy_ahead > ACAUSAL_FLOORS * noise_floor:
        return "acausal"
    if energy_ahead <= CAUSAL_FLOORS * noise_floor and noise_floor <= WORST_FLOOR:
        return "causal"
    return "unresolved"


def front_test(
    pulse: TestPulse,
    transfer: Callable[[Real], Complex],
    *,
    first_span: float,
    ringing: float,
    most_points: int,
    absorbs: bool,
    progress: Callable[[float], None] | None = None,
) -> FrontResult:
    """Send the test pulse through `transfer(omega)` (omega > 0, rad/s; against vacuum) and judge.

    first_span: s, an estimate of when the answer is there; ringing: s, how long it may go on after, which the
    first window holds where that is cheap. The window is doubled until what wraps around is small enough or
    `most_points` are reached; what a window that large cannot tell is "unresolved". absorbs: whether the
    naive filter |transfer| is worth a run. progress(fraction) is called at each doubling.
    """
    step = pulse.step()
    least, whole = (
        _even_power(span / (1 - AHEAD_SHARE) / step) for span in (first_span, first_span + ringing)
    )
    points = min(max(least, min(whole, CHEAP_POINTS), 1 << 12), most_points)
    before, enters = 0.0, _launched(pulse, step)
    while True:
        ahead, last, leaves = _shares(_received(pulse, transfer, points, step))
        floor = max(1e-28, 1e-32 / max(leaves / enters, 1e-300), last)
        wanted = BEST_FLOOR if points < CHEAP_POINTS else GOOD_FLOOR
        # A pulse later than the window would come round as if it were early: only a larger window can tell.
        quiet = floor <= wanted and ahead <= CAUSAL_FLOORS * floor
        if quiet or _stays(ahead, before, floor) or 2 * points > most_points:
            break
        before = ahead
        points *= 2
        if progress:
            progress(points / most_points)
    verdict = judged(ahead, floor)
    if verdict == "acausal" and _came_round(pulse, transfer, points, step):
        verdict = "unresolved"
    naive = _naive_energy_ahead(pulse, transfer, points, step) if absorbs else None
    return FrontResult(
        energy_ahead=ahead,
        noise_floor=floor,
        verdict=verdict,
        points=points,
        span=points * step,
        naive_energy_ahead=naive,
        naive_verdict=None if naive is None else judged(naive, floor),
    )


def _naive_energy_ahead(
    pulse: TestPulse, transfer: Callable[[Real], Complex], points: int, step: float
) -> float:
    """What the filter |transfer|, which absorbs and delays nothing, lets out ahead of the front."""
    return _shares(_received(pulse, lambda omega: np.abs(transfer(omega)) + 0j, points, step))[0]


def _stays(ahead: float, before: float, floor: float) -> bool:
    """Whether what comes early is far above the noise and the same in a window twice as long."""
    return floor <= WORST_FLOOR and ahead > ACAUSAL_FLOORS * floor and abs(ahead - before) <= SAME * ahead


def _came_round(pulse: TestPulse, transfer: Callable[[Real], Complex], points: int, step: float) -> bool:
    """Whether what seems early is later than the window that fits."""
    places = [_place_ahead(pulse, transfer, points, step * share) for share in (1.0, SHORTER)]
    return abs(places[0] - places[1]) > SAME_PLACE * points * step


def _place_ahead(pulse: TestPulse, transfer: Callable[[Real], Complex], points: int, step: float) -> float:
    """Centroid in s, against the front, of the energy that stands before it."""
    early = _received(pulse, transfer, points, step)[: _front_index(points)] ** 2
    return float(np.dot(early, np.arange(early.size) - early.size) * step / early.sum())


def _even_power(size: float) -> int:
    return 1 << int(np.ceil(np.log2(max(size, 2.0))))


def _input_spectrum(pulse: TestPulse, points: int, step: float) -> Complex:
    field = np.zeros(points)
    first = _front_index(points)
    samples = int(np.ceil(pulse.support / step)) + 1
    field[first : first + samples] = pulse.field(step * np.arange(samples, dtype=float))
    return np.asarray(np.fft.rfft(field))


def _front_index(points: int) -> int:
    return int(AHEAD_SHARE * points)


def _received(pulse: TestPulse, transfer: Callable[[Real], Complex], points: int, step: float) -> Real:
    """The real field that leaves.

    numpy's forward transform carries exp(-i omega t), so the conjugate transfer applies.
    """
    spectrum = _input_spectrum(pulse, points, step)
    spacing = 2 * np.pi / (points * step)
    for start in range(0, spectrum.size, BLOCK):
        part = slice(start, min(start + BLOCK, spectrum.size))
        omega = spacing * np.arange(part.start, part.stop, dtype=float)
        # Carriers have a pole at zero frequency; the limit of the transfer is real there, and as good a hair
        # above.
        omega[omega == 0] = STATIC * spacing
        spectrum[part] *= np.conj(transfer(omega))
    return np.fft.irfft(spectrum, points)


def _shares(field: Real) -> tuple[float, float, float]:
    """Shares of the energy before the front and in the last part of the window, and the sum of squares."""
    total = float(np.dot(field, field))
    if total == 0.0:
        return 0.0, 0.0, 0.0
    early, late = field[: _front_index(field.size)], field[-int(LAST_SHARE * field.size) :]
    return float(np.dot(early, early)) / total, float(np.dot(late, late)) / total, total


def _launched(pulse: TestPulse, step: float) -> float:
    """Sum of squares of the field that enters."""
    samples = int(np.ceil(pulse.support / step)) + 1
    return float(np.sum(pulse.field(step * np.arange(samples, dtype=float)) ** 2))
