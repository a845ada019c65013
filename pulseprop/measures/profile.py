"""Peaks and half-maximum points of a band-limited profile, between its samples.

A profile is `height` of complex samples, such as the power |E|^2. What is looked for is located on the
samples and refined on the band-limited function itself, so the work between samples does not grow with their
number.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError, NumericalLimit
from pulseprop.numerics.interpolation import band_limited, mean_turn

__all__ = ["Peak", "Stretch", "find_peak", "half_maximum", "power"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]
Height = Callable[[Complex | Real], Real]

CANDIDATES = 12
"""Local maxima of the samples that are refined: the largest sample need not stand beside the largest peak."""

FINER = 8
"""Points a sample when a crest, a dip or a crossing is sought between samples."""

CREST = 0.4
"""A crest between samples has a sample of at least this share of its height beside it: half of it where the
power swings from zero and back within the two samples that a field oversampled twice allows."""

ZOOM = 33
"""Points in each closer look; three of them narrow a sample to 3e-5 of itself."""

ROWS = 128
"""Crests looked at together on the way to the outermost crossing."""


def power(samples: Complex | Real) -> Real:
    """|E|^2."""
    return np.asarray(samples.real**2 + samples.imag**2)


@dataclass(frozen=True)
class Peak:
    """position in samples (wrapped into the window), power: the height there."""

    position: float
    power: float


@dataclass(frozen=True)
class Stretch:
    """Between the outermost half-maximum points, in samples; left may be negative where the window wraps.

    split: the height falls below half somewhere between them.
    """

    peak: Peak
    left: float
    right: float
    split: bool

    @property
    def width(self) -> float:
        return self.right - self.left


class _Profile:
    """The height of periodic samples at any position; `turn` is found once."""

    def __init__(self, samples: Complex | Real, height: Height) -> None:
        self.samples = samples
        self.height = height
        self.turn = mean_turn(samples)

    def __call__(self, offsets: Real, origin: int) -> Real:
        return self.height(band_limited(self.samples, offsets, origin=origin, turn=self.turn))


def find_peak(samples: Complex | Real, height: Height = power) -> Peak:
    """The largest height between samples (N,) that wrap around.

    Raises InputError if there is none above zero.
    """
    return _peak(_Profile(samples, height), height(samples))


def _peak(profile: _Profile, heights: Real) -> Peak:
    if not heights.max() > 0:
        raise InputError("the field holds no energy", value=float(heights.max()), allowed="a peak above 0")
    return max((_refined(profile, at) for at in _candidates(heights)), key=lambda found: found.power)


def _candidates(heights: Real) -> list[int]:
    """The highest local maxima of the samples that could stand beside the highest peak."""
    threshold = CREST * heights.max()
    high = np.flatnonzero(heights > threshold)
    count = heights.size
    local = high[(heights[high] >= heights[high - 1]) & (heights[high] >= heights[(high + 1) % count])]
    order = np.argsort(heights[local], kind="stable")[::-1][:CANDIDATES]
    return [int(at) for at in local[order]]


def _refined(profile: _Profile, at: int) -> Peak:
    """Closer looks around sample `at`, then the vertex of a parabola."""
    middle, reach = 0.0, 1.0
    for _ in range(3):
        offsets = middle + reach * np.linspace(-1, 1, ZOOM)
        heights = profile(offsets, at)
        best = int(np.clip(np.argmax(heights), 1, ZOOM - 2))
        middle, reach = float(offsets[best]), 2 * reach / (ZOOM - 1)
    return _vertex(offsets[best - 1 : best + 2], heights[best - 1 : best + 2], at, profile.samples.shape[0])


def _vertex(offsets: Real, heights: Real, at: int, count: int) -> Peak:
    below, here, above = (float(value) for value in heights)
    bend = below - 2 * here + above
    shift = 0.5 * (below - above) / bend if bend < 0 else 0.0
    shift = min(max(shift, -1.0), 1.0)
    position = at + float(offsets[1]) + shift * float(offsets[1] - offsets[0])
    return Peak(position % count, here - 0.25 * (below - above) * shift)


def half_maximum(samples: Complex | Real, height: Height = power) -> Stretch:
    """Outermost half-maximum points of periodic samples (N,) that are oversampled twice or more.

    Raises InputError for an empty field, NumericalLimit where the profile never falls to half.
    """
    profile = _Profile(samples, height)
    heights = height(samples)
    top = _peak(profile, heights)
    half = 0.5 * top.power
    if not heights.min() < half:
        raise NumericalLimit(
            "the field never falls to half of its peak in its window, so it has no FWHM",
            value=f"least power {heights.min() / top.power:.3g} of the peak",
            remedy="Enlarge the window",
        )
    first, last = _span(heights > CREST * half)
    left = -_crossing(profile, heights, -first, -last, -1, half)
    right = _crossing(profile, heights, last, first, 1, half)
    return Stretch(peak=top, left=left, right=right, split=_dips(profile, heights, left, right, half))


def _span(high: NDArray[np.bool_]) -> tuple[int, int]:
    """First and last true sample around a ring, outside the longest gap; last may run past the end."""
    index = np.flatnonzero(high)
    gaps = np.diff(index, append=index[0] + high.size)
    widest = int(np.argmax(gaps))
    if widest == index.size - 1:
        return int(index[0]), int(index[-1])
    return int(index[widest + 1]) - high.size, int(index[widest])


def _crossing(profile: _Profile, heights: Real, outer: int, inner: int, sign: int, half: float) -> float:
    """The outermost point at half height between samples `inner` and one beyond `outer`.

    Positions are counted times `sign`, so that outwards is upwards on both sides; the result likewise. Only
    crests of the samples can hide a point above half height outside the outermost sample that is above it.
    """
    count = heights.size
    inwards = np.arange(outer, inner - 1, -1)
    at_half = heights[sign * inwards % count] >= half
    sure = int(np.argmax(at_half)) if at_half.any() else inwards.size
    beyond = inwards[: sure + 1]
    here = heights[sign * beyond % count]
    crest = (here >= heights[sign * (beyond + 1) % count]) & (here >= heights[sign * (beyond - 1) % count])
    if sure < inwards.size:
        crest[sure] = True
    offsets = np.arange(FINER, -FINER - 1, -1) / FINER
    crests = beyond[crest]
    for first in range(0, crests.size, ROWS):
        rows = crests[first : first + ROWS]
        origin = int(rows[0])
        places = ((rows - origin)[:, None] + offsets).ravel()
        above = profile(sign * places, sign * origin) >= half
        if above.any():
            return _root(profile, origin + float(places[int(np.argmax(above))]), 1 / FINER, sign, half)
    raise InputError("no half-maximum point was found", remedy="Sample the field at least twice as finely")


def _root(profile: _Profile, inside: float, reach: float, sign: int, half: float) -> float:
    """The outermost crossing in (inside, inside + reach], where the height at `inside` is at least half."""
    origin = round(inside)
    low = inside - origin
    for _ in range(3):
        offsets = low + reach * np.linspace(0, 1, ZOOM)
        heights = profile(sign * offsets, sign * origin)
        above = int(np.flatnonzero(heights >= half)[-1]) if heights[0] >= half else 0
        above = min(above, ZOOM - 2)
        low, reach = float(offsets[above]), reach / (ZOOM - 1)
    fall = heights[above] - heights[above + 1]
    part = float((heights[above] - half) / fall) if fall > 0 else 0.0
    return origin + low + min(max(part, 0.0), 1.0) * reach


def _dips(profile: _Profile, heights: Real, left: float, right: float, half: float) -> bool:
    """Whether the height falls below half between the two crossings.

    Only troughs of the samples can hide a dip between samples that are all above.
    """
    # The crossings themselves are at half height, give or take a rounding.
    margin = 1e-6 * (right - left)
    inner = np.arange(int(np.ceil(left + margin)), int(np.floor(right - margin)) + 1)
    here = heights[inner % heights.size]
    if (here < half).any():
        return True
    trough = (here <= heights[(inner - 1) % heights.size]) & (here <= heights[(inner + 1) % heights.size])
    trough &= here < half / CREST
    ends = np.array([left, right])
    places = np.concatenate((inner[trough], ends))[:, None] + np.linspace(-1, 1, 2 * FINER + 1)
    inside = places[(places > left + margin) & (places < right - margin)]
    origin = int(np.floor(left))
    return bool((profile(inside - origin, origin) < half).any())
