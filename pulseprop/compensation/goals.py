"""What a pulse is worth: the score of a goal, with its variation by the spectrum.

score = ln(quality) + transmission weight x ln(yield) - size weight x size. Quality and yield by goal:

    peak power   peak ratio                            limit's peak power behind the path over that before it
    two-photon   two-photon ratio                      limit's int P^2 dt behind the path over that before it
    duration     limit of what enters over FWHM        transmission
    flat phase   exp(-mean square residual phase)      transmission
    contrast     share of the energy in the window     transmission

so that with weight 1 the first two are absolute peak power and absolute signal, in units of what enters.
"""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.functionals import (
    Varied,
    contained,
    energy,
    limit_power,
    peak_power,
    square_integral,
    width,
)
from pulseprop.compensation.problem import Goal
from pulseprop.compensation.samples import Samples
from pulseprop.measures.profile import half_maximum

__all__ = ["Judge", "Judged"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Judged:
    """score: see the module, without size. variation: of the score by ln B, complex (n,). quality: its first
    term, undone: the ratio, width or share. peak_ratio: beside it."""

    score: float
    variation: Complex
    quality: float
    peak_ratio: float


@dataclass(kw_only=True, eq=False)
class Judge:
    """Scores the field behind a transfer; counts how often a field was evaluated.

    Everything is counted from `samples.amplitude`, the pulse that enters.
    """

    samples: Samples
    goal: Goal
    evaluations: int = 0
    _entering: dict[str, float] = field(init=False)

    def __post_init__(self) -> None:
        flat = np.abs(self.samples.amplitude).astype(complex)
        limit = self.samples.envelope(flat)
        self._entering = {
            "energy": energy(self.samples, flat).value,
            "peak": limit_power(self.samples, flat).value,
            "square": square_integral(self.samples, flat, limit).value,
            "width": half_maximum(limit).width * self.samples.grid.step,
        }

    def __call__(self, exponent: Complex) -> Judged:
        """The pulse behind ln(transfer) = exponent, complex (n,)."""
        spectrum, envelope = self._evaluated(exponent)
        peak = peak_power(self.samples, spectrum, envelope)
        limit = limit_power(self.samples, spectrum)
        ratio = peak.value / limit.value
        if self.goal.name == "peak power":
            return self._joined(_log(peak), _log(limit), self._entering["peak"], ratio, ratio)
        if self.goal.name == "two-photon":
            return self._two_photon(spectrum, envelope, ratio)
        quality, term = self._quality(exponent, spectrum, envelope, peak)
        return self._with_energy(term, spectrum, quality, ratio)

    def peak(self, exponent: Complex) -> float:
        """Peak power behind the path over that of the limit of what enters."""
        spectrum, envelope = self._evaluated(exponent)
        return peak_power(self.samples, spectrum, envelope).value / self._entering["peak"]

    def _evaluated(self, exponent: Complex) -> tuple[Complex, Complex]:
        self.evaluations += 1
        spectrum = self.samples.amplitude * np.exp(exponent)
        return spectrum, self.samples.envelope(spectrum)

    def _joined(self, done: Varied, limit: Varied, entering: float, quality: float, ratio: float) -> Judged:
        """ln(done / limit) + weight ln(limit / entering), from logarithms."""
        weight = self.goal.transmission_weight
        score = done.value - limit.value + weight * (limit.value - np.log(entering))
        variation = done.variation + (weight - 1.0) * limit.variation
        return Judged(float(score), variation, quality, ratio)

    def _two_photon(self, spectrum: Complex, envelope: Complex, ratio: float) -> Judged:
        done = square_integral(self.samples, spectrum, envelope)
        height = np.abs(spectrum).astype(complex)
        limit = square_integral(self.samples, height, self.samples.envelope(height))
        # The limit knows moduli alone: its variation by a phase is none.
        limit = Varied(limit.value, limit.variation.real.astype(complex))
        quality = done.value / limit.value
        return self._joined(_log(done), _log(limit), self._entering["square"], quality, ratio)

    def _quality(
        self, exponent: Complex, spectrum: Complex, envelope: Complex, peak: Varied
    ) -> tuple[float, Varied]:
        """The quality in the goal's terms, and its term of the score."""
        if self.goal.name == "duration":
            found = width(self.samples, spectrum, envelope, peak)
            term = Varied(
                float(np.log(self._entering["width"] / found.value)), -found.variation / found.value
            )
            return found.value, term
        if self.goal.name == "contrast":
            inside = contained(self.samples, spectrum, envelope, self.goal.window or 0.0)
            whole = energy(self.samples, spectrum)
            return 1.0 - inside.value / whole.value, _over(inside, whole)
        flatness = _flatness(self.samples, exponent, spectrum)
        return float(np.sqrt(-flatness.value)), flatness

    def _with_energy(self, term: Varied, spectrum: Complex, quality: float, ratio: float) -> Judged:
        weight = self.goal.transmission_weight
        passed = _log(energy(self.samples, spectrum))
        score = term.value + weight * (passed.value - np.log(self._entering["energy"]))
        return Judged(float(score), term.variation + weight * passed.variation, quality, ratio)


def _log(found: Varied) -> Varied:
    return Varied(float(np.log(found.value)), found.variation / found.value)


def _over(part: Varied, whole: Varied) -> Varied:
    """The logarithm of a quotient."""
    above, below = _log(part), _log(whole)
    return Varied(above.value - below.value, above.variation - below.variation)


def _flatness(samples: Samples, exponent: Complex, spectrum: Complex) -> Varied:
    """Minus the mean square of the phase beyond a constant and a delay, weighted by the power spectrum."""
    power = spectrum.real**2 + spectrum.imag**2
    weight = power / power.sum()
    phase = exponent.imag + np.unwrap(np.angle(samples.amplitude))
    middle = float(np.dot(weight, samples.detuning))
    offset = samples.detuning - middle
    phase = phase - np.dot(weight, phase)
    rest = phase - offset * (np.dot(weight, offset * phase) / np.dot(weight, offset**2))
    square = float(np.dot(weight, rest**2))
    # The fitted line is where the mean square is least: it does not enter the variation (d phase is the
    # imaginary, d ln(modulus) the real part of d ln B).
    by_phase, by_modulus = -2.0 * weight * rest, -2.0 * weight * (rest**2 - square)
    return Varied(-square, by_modulus - 1j * by_phase)
