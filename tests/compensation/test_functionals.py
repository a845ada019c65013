"""Scores and their exact variations: closed forms of a chirped Gaussian, and differences.

Chirped Gaussian: with x = 4 ln2 GDD / FWHM^2 the width grows and peak and signal fall by (1 + x^2)^(1/2) (A.
E. Siegman, Lasers, chapter 9; from memory). Energy of a Gaussian within a window: the error function.
"""

from __future__ import annotations

from dataclasses import replace
from math import erf

import numpy as np
import pytest

from pulseprop.compensation.goals import Judge
from pulseprop.compensation.problem import Goal

FWHM = 20e-15
GOALS = [
    Goal(),
    Goal(transmission_weight=1.0),
    Goal(name="two-photon"),
    Goal(name="two-photon", transmission_weight=0.4),
    Goal(name="duration", transmission_weight=0.5),
    Goal(name="flat phase", transmission_weight=1.0),
    Goal(name="contrast", window=70e-15, transmission_weight=0.3),
]


@pytest.fixture(scope="module")
def samples(bench):
    return bench.samples_of(bench.pulse(FWHM))


def chirped(samples, gdd: float):
    return 0.5j * gdd * (samples.omega - samples.pulse.centre) ** 2


@pytest.mark.parametrize("gdd", [-300e-30, 0.0, 45e-30, 900e-30])
def test_a_chirped_gaussian_has_its_textbook_ratio_width_and_signal(samples, gdd):
    broader = np.hypot(1, 4 * np.log(2) * gdd / FWHM**2)
    exponent = chirped(samples, gdd)

    def quality(goal):
        return Judge(samples=samples, goal=goal)(exponent).quality

    assert quality(Goal()) == pytest.approx(1 / broader, rel=1e-6)
    assert quality(Goal(name="two-photon")) == pytest.approx(1 / broader, rel=1e-6)
    assert quality(Goal(name="duration")) == pytest.approx(FWHM * broader, rel=1e-6)
    window = 70e-15
    inside = erf(np.sqrt(np.log(2)) * window / (FWHM * broader))
    assert quality(Goal(name="contrast", window=window)) == pytest.approx(1 - inside, abs=1e-6)
    # Power spectrum exp(-d^2 / (2 s^2)), s = sqrt(2 ln2) / FWHM: GDD d^2 / 2 has rms GDD s^2 / sqrt 2.
    rms = abs(gdd) * 2 * np.log(2) / FWHM**2 / np.sqrt(2)
    assert quality(Goal(name="flat phase")) == pytest.approx(rms, rel=1e-6, abs=1e-9)


def test_the_score_with_full_weight_is_absolute(samples):
    """A uniform loss of half the energy: half the peak power, a quarter of the signal."""
    half = np.full(samples.omega.size, 0.5 * np.log(0.5), dtype=complex)
    for name, left in (("peak power", 0.5), ("two-photon", 0.25), ("flat phase", 0.5)):
        judge = Judge(samples=samples, goal=Goal(name=name, transmission_weight=1.0))
        assert judge(half).score == pytest.approx(np.log(left), abs=1e-9)
        bare = Judge(samples=samples, goal=Goal(name=name))
        assert bare(half).score == pytest.approx(0.0, abs=1e-9)


@pytest.mark.parametrize("goal", GOALS, ids=lambda goal: f"{goal.name}, {goal.transmission_weight}")
@pytest.mark.parametrize("seed", [1, 2])
def test_variations_are_derivatives(samples, goal, seed):
    """Against central differences along random smooth changes of phase and loss, 1e-6 of the largest."""
    rng = np.random.default_rng(seed)
    x = samples.detuning / np.abs(samples.detuning).max() * 4
    powers = np.stack([x**order for order in range(1, 5)], axis=1)
    exponent = powers @ (1j * rng.normal(size=4) - 0.03 * np.abs(rng.normal(size=4)))
    changes = powers @ (rng.normal(size=(4, 3)) + 1j * rng.normal(size=(4, 3)))
    judge = Judge(samples=samples, goal=goal)
    found = (judge(exponent).variation @ changes).real
    step = 1e-5
    differences = [
        (judge(exponent + step * change).score - judge(exponent - step * change).score) / (2 * step)
        for change in changes.T
    ]
    assert found == pytest.approx(differences, abs=1e-6 * max(np.abs(differences).max(), 0.1))


def test_fields_are_counted(samples):
    judge = Judge(samples=samples, goal=Goal())
    for _ in range(3):
        judge(chirped(samples, 0.0))
    judge.peak(chirped(samples, 0.0))
    assert judge.evaluations == 4


def test_fewer_samples_show_the_same_short_pulse(samples):
    exponent = chirped(samples, 60e-30)
    full = Judge(samples=samples, goal=Goal())(exponent)
    fewer, taken = samples.thinned(4)
    assert fewer.omega == pytest.approx(samples.omega[taken], rel=1e-14)
    assert Judge(samples=fewer, goal=Goal())(exponent[taken]).score == pytest.approx(full.score, abs=1e-9)


def test_the_transpose_of_the_field_is_its_transpose(samples):
    rng = np.random.default_rng(3)
    spectrum = rng.normal(size=samples.omega.size) + 1j * rng.normal(size=samples.omega.size)
    field = rng.normal(size=samples.grid.points) + 1j * rng.normal(size=samples.grid.points)
    there, back = np.dot(samples.envelope(spectrum), field), np.dot(spectrum, samples.folded(field))
    assert there == pytest.approx(back, rel=1e-10)


def test_goals_refuse_what_they_cannot_use():
    from pulseprop.errors import InputError

    with pytest.raises(InputError, match="needs the length of a window"):
        Goal(name="contrast")
    with pytest.raises(InputError, match="transmission weight is out of range"):
        Goal(transmission_weight=-1.0)
    with pytest.raises(InputError, match="target is out of range"):
        replace(Goal(), target=0.0)
