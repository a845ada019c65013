"""Proof that no setting of a discrete choice reaches a score.

Let p >= 0, sum p = 1, be the amplitude spectrum and M = sum p exp(i phase); the peak ratio is the largest
|M|^2 over delays. Of three equidistant frequencies with weights 1/4, 1/2, 1/4 the sum can be no larger than
cos(s/4), whatever delay and constant are added, if their second difference of phase s is at most pi in size.
So for any q >= 0 whose convolution with those three weights stays below p,

    |M| <= 1 - sum q (1 - cos(s/4)) <= 1 - BEND sum q s^2,      BEND = (1 - cos(pi/4)) / pi^2,

the last by concavity of cos. The second differences are straight lines in the settings, so the least of the
right-hand sum over a box is bounded least squares, and the settings that could still reach |M| = m lie in
an ellipsoid: the box shrinks, and a wider distance between the three frequencies, which sees more, becomes
usable. Beyond pi the sum is at most cos of a quarter of the distance of s to the next multiple of 2 pi.
Losses that differ from those for which p was taken by factors within a span of r nepers add at most
exp(r) - 1 to |M|, and twice what lies in faint ends of the spectrum that may be lost.

Own derivation (concavity and the triangle inequality); nothing in it is estimated.
"""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.assembly import Assembly
from pulseprop.compensation.boxed import least_in_box
from pulseprop.compensation.functionals import energy, limit_power, square_integral
from pulseprop.compensation.problem import Goal
from pulseprop.compensation.samples import Samples

__all__ = ["Bounds"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

BEND = (1 - np.cos(np.pi / 4)) / np.pi**2
SCALES = 14
NARROWEST, WIDEST = 0.03, 1.5
"""Distances of the three frequencies over the standard deviation of p."""
SHARPENINGS = 40
SINGULAR = 1e-14
ROUNDING = 1e-9
FAINT = 1e-4
"""Amplitude over the largest below which the ends of the spectrum may go dark without spoiling a bound."""


@dataclass(frozen=True, eq=False)
class _Scale:
    """Three frequencies `distance` samples apart; weight: q of the middle one, (n - 2 distance,)."""

    distance: int
    weight: Real


@dataclass(kw_only=True, eq=False)
class Bounds:
    """Bounds for one pulse behind a path whose fixed part has the exponent `background`, (n,)."""

    samples: Samples
    background: Complex
    _amplitude: Real = field(init=False)
    _scales: list[_Scale] = field(init=False)

    def __post_init__(self) -> None:
        height = np.abs(self.samples.amplitude) * np.exp(self.background.real)
        self._amplitude = height / height.sum()
        self._phase = np.unwrap(np.angle(self.samples.amplitude))
        self._scales = _scales(self._amplitude)
        self._bright = self._amplitude > FAINT * self._amplitude.max()
        flat = height.astype(complex)
        square = square_integral(self.samples, flat, self.samples.envelope(flat))
        top = limit_power(self.samples, flat).value * energy(self.samples, flat).value
        self._squeeze = float(np.log(top / square.value))

    def cannot_reach(self, assembly: Assembly, score: float, goal: Goal) -> bool:
        """True only where no setting of the assembly gives the score; False is no promise.

        Always False where a setting does not enter as a straight line, where losses vary too much, and for
        goals other than peak power and the two-photon signal.
        """
        if assembly.curved or assembly.edged or goal.name not in ("peak power", "two-photon"):
            return False
        origin = np.zeros(assembly.count)
        base, slopes = assembly.exponent(origin), assembly.jacobian(origin)
        most = base.real + np.maximum(slopes.real, 0).sum(axis=1)
        spread = self._spread(base.real, slopes.real)
        peak = score - self._beyond_peak_ratio(goal, float(most.max()), spread)
        least = np.exp(0.5 * min(peak, 1.0)) - self._slack(spread) - ROUNDING
        allowance = (1 - least) / BEND
        return self._empty(base.imag + self._phase, slopes.imag, allowance)

    def _slack(self, spread: float) -> float:
        """How much |M| may gain from losses of this span, the faint ends of the spectrum lost at will."""
        faint = float(self._amplitude[~self._bright].sum())
        return float(np.exp(min(spread, 1.0)) * (1 + 2 * faint) / (1 - faint) - 1)

    def _spread(self, loss: Real, slopes: Real) -> float:
        """Span of the losses, (n,) and (n, k) nepers, beyond a factor on those of the background.

        The faint ends may lose as much as they like, but not gain.
        """
        loss = loss - self.background.real
        most = loss + np.maximum(slopes, 0).sum(axis=1)
        least = loss + np.minimum(slopes, 0).sum(axis=1)
        return float(most.max() - least[self._bright].min())

    def _beyond_peak_ratio(self, goal: Goal, most: float, spread: float) -> float:
        """The most that a score can be above the logarithm of the peak ratio; most: nepers that are gained.

        int P^2 dt is at most the peak power times the energy: the two-photon ratio is at most the peak ratio
        times (limit's peak power x energy / limit's int P^2 dt).
        """
        if goal.name == "peak power":
            return goal.transmission_weight * 2 * most
        return self._squeeze + 8 * spread + goal.transmission_weight * 4 * most

    def _empty(self, base: Real, slopes: Real, allowance: float) -> bool:
        """Whether the settings that could still reach the score are none; scales from narrow to wide."""
        low, high = np.zeros(slopes.shape[1]), np.ones(slopes.shape[1])
        for scale in self._scales:
            second = _second_difference(base, scale.distance)
            bends = _second_difference(slopes, scale.distance)
            middle = second + bends @ (0.5 * (low + high))
            reach = np.abs(bends) @ (0.5 * (high - low))
            near = np.abs(middle) + reach <= np.pi
            left = allowance - _far(middle[~near], reach[~near], scale.weight[~near]) / BEND
            weight = np.where(near, scale.weight, 0.0)
            least, gram, slope = _least(second, bends, weight, low, high)
            if least > left:
                return True
            low, high = _shrunk(gram, slope, float(np.dot(weight, second**2)), left, low, high)
        return False


def _far(middle: Real, reach: Real, weight: Real) -> float:
    """sum q (1 - cos(distance / 4)), the distance from multiples of 2 pi of second differences in
    middle -+ reach: what triples lose at the least that lie beyond pi."""
    low, high = middle - reach, middle + reach
    turn = 2 * np.pi
    passed = np.floor(high / turn) >= np.ceil(low / turn)
    ends = np.minimum(*(np.abs(end - turn * np.round(end / turn)) for end in (low, high)))
    return float(np.dot(weight, np.where(passed, 0.0, 1 - np.cos(ends / 4))))


def _second_difference(values: Real, distance: int) -> Real:
    return np.asarray(values[2 * distance :] + values[: -2 * distance] - 2 * values[distance:-distance])


def _least(second: Real, bends: Real, weight: Real, low: Real, high: Real) -> tuple[float, Real, Real]:
    """The least of sum q (second + bends u)^2 in the box, with its Gram matrix and slope at u = 0."""
    weighted = bends * weight[:, None]
    gram, slope = weighted.T @ bends, weighted.T @ second
    constant = float(np.dot(weight, (second + bends @ low) ** 2))
    width = high - low
    inner = (gram * np.outer(width, width))[None]
    _, value = least_in_box(inner, ((slope + gram @ low) * width)[None])
    return constant + float(value[0]), gram, slope


def _shrunk(
    gram: Real, slope: Real, constant: float, allowance: float, low: Real, high: Real
) -> tuple[Real, Real]:
    """The part of the box within the bounding box of {u: u.G u + 2 h.u + constant <= allowance}."""
    eigenvalues, vectors = np.linalg.eigh(gram)
    if not low.size or eigenvalues[0] <= SINGULAR * eigenvalues[-1]:
        return low, high
    inverse = (vectors / eigenvalues) @ vectors.T
    middle = -inverse @ slope
    room = allowance - (constant + float(np.dot(slope, middle)))
    reach = np.sqrt(np.maximum(room, 0.0) * np.diag(inverse)) * (1 + 1e-6) + ROUNDING
    shrunk_low, shrunk_high = np.maximum(low, middle - reach), np.minimum(high, middle + reach)
    # Rounding must not turn the box inside out: where it would, the old one stands.
    proper = shrunk_low <= shrunk_high
    return np.where(proper, shrunk_low, low), np.where(proper, shrunk_high, high)


def _scales(amplitude: Real) -> list[_Scale]:
    index = np.arange(amplitude.size)
    middle = float(np.dot(amplitude, index))
    deviation = float(np.sqrt(np.dot(amplitude, (index - middle) ** 2)))
    wanted = np.geomspace(NARROWEST, WIDEST, SCALES) * deviation
    distances = sorted({max(round(float(one)), 1) for one in wanted})
    return [_Scale(one, _weight(amplitude, one)) for one in distances if 2 * one < amplitude.size]


def _weight(amplitude: Real, distance: int) -> Real:
    """q >= 0 of the middles, (n - 2 distance,), such that its three-point sums stay below p everywhere.

    Richardson and Lucy's iteration sharpens p; the smallest of the three ratios p / (sum) then makes the
    inequality hold at each frequency, whatever the iteration did.
    """
    q = amplitude[distance:-distance].copy()
    for _ in range(SHARPENINGS):
        q *= _three(_ratio(amplitude, q, distance), distance)
    ratio = _ratio(amplitude, q, distance)
    sides = np.minimum(ratio[2 * distance :], ratio[: -2 * distance])
    return np.asarray(q * np.minimum(np.minimum(ratio[distance:-distance], sides), 1.0))


def _three(values: Real, distance: int) -> Real:
    return np.asarray(
        0.25 * values[2 * distance :] + 0.5 * values[distance:-distance] + 0.25 * values[: -2 * distance]
    )


def _ratio(amplitude: Real, q: Real, distance: int) -> Real:
    """p over the three-point sums of q; at least as large as any weight needs where the sums vanish."""
    spread = np.zeros(amplitude.size)
    spread[2 * distance :] += 0.25 * q
    spread[distance:-distance] += 0.5 * q
    spread[: -2 * distance] += 0.25 * q
    return np.asarray(amplitude / np.maximum(spread, 1e-300))
