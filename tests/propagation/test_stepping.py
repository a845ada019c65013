"""The stepping loop: exact without terms; with a Kerr phase the published soliton, and its order."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import pytest

from pulseprop.elements.element import transfer_of
from pulseprop.elements.slab import Slab
from pulseprop.errors import NumericalLimit
from pulseprop.grid import Grid
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.numerics.plans import Plan
from pulseprop.propagation.stepped import SteppedAdvance
from pulseprop.propagation.stepping import FixedSteps, SymmetricSplit, march

SATSUMA = (
    "J. Satsuma, N. Yajima, Prog. Theor. Phys. Suppl. 55, 284 (1974); formula from memory, residual 3e-25"
)
SINKIN = "O. V. Sinkin et al., J. Lightwave Technol. 21, 61 (2003)"


@pytest.mark.parametrize(("thickness", "tolerance"), [(0.2e-3, 1e-12), (10e-3, 3e-11)])
def test_without_terms_the_loop_is_the_exact_transfer(thickness, tolerance):
    """To 1e-12, and to four roundings where the phase itself, 3.6 rad a micrometre, is large."""
    grid = Grid(points=4096, step=0.5e-15, start=-1e-12, carrier=375e12)
    slab = Slab(name="window", medium=catalogue_medium("fused silica"), thickness=thickness)
    seen = (grid.omega > slab.medium.band.low) & (grid.omega < slab.medium.band.high) & (grid.omega > 0)
    exponent = np.zeros(grid.points, complex)
    exponent[seen] = slab.exponent(grid.omega[seen], 1)[0]
    entering = grid.to_spectrum(np.exp(-((grid.time / 20e-15) ** 2)).astype(complex))
    expected = entering.copy()
    expected[seen] *= transfer_of(slab, grid.omega[seen])
    advance = SteppedAdvance(method="split-step", points=grid.points)
    advance(slab, exponent, entering)
    assert np.abs(entering - expected).max() < tolerance * np.abs(expected).max()
    assert advance.steps == 16
    assert advance.transforms == 32


@dataclass(frozen=True)
class Kerr:
    """u -> u exp(i |u|^2 h): the nonlinear part of i u_x + u_tt/2 + |u|^2 u = 0."""

    def act(self, field, length):
        field *= np.exp(1j * length * np.abs(field) ** 2)


SPAN, POINTS = 40.0, 2048
TIME = (np.arange(POINTS) - POINTS // 2) * (SPAN / POINTS)


def closed_form(x):
    """The second-order soliton."""
    t = TIME
    below = np.cosh(4 * t) + 4 * np.cosh(2 * t) + 3 * np.cos(4 * x)
    return 4 * np.exp(0.5j * x) * (np.cosh(3 * t) + 3 * np.exp(4j * x) * np.cosh(t)) / below


def soliton(length, steps):
    """u(x, t) from u(0, t) = 2 sech t in `steps` steps, on 2048 points over 40 T0."""
    plan = Plan(POINTS, effort="estimate")
    plan.buffer[:] = 2 / np.cosh(TIME)
    plan.to_spectrum()
    omega = 2 * np.pi * np.fft.fftfreq(POINTS, SPAN / POINTS)
    travelled = march(plan, -0.5j * omega**2, (Kerr(),), length, SymmetricSplit(), FixedSteps(steps))
    plan.to_field()
    return plan.buffer * plan.scale, travelled


@pytest.mark.parametrize(
    ("x", "t", "power"),
    [
        (np.pi / 8, 0.0, 6.4),
        (np.pi / 4, 0.0, 16.0),
        (np.pi / 4, 0.5, 0.35331058605),
        (0.3, 0.7, 2.12017184959),
    ],
)
def test_second_order_soliton(x, t, power):
    """Values of |u|^2 to 12 digits from the closed form (Satsuma, Yajima 1974); 6400 steps leave 5e-6."""
    field, _ = soliton(x, 6400)
    spectrum = np.fft.fft(field)
    here = np.mean(spectrum * np.exp(2j * np.pi * np.fft.fftfreq(POINTS) * (t - TIME[0]) / (SPAN / POINTS)))
    assert abs(here) ** 2 == pytest.approx(power, rel=2e-5), SATSUMA


def test_after_a_period_the_soliton_is_itself_again():
    """Period pi/2; errors of 400 and 1600 steps are those of an independent code, within a factor of two."""
    expected = closed_form(np.pi / 2)
    for steps, reference in ((400, 0.0011731), (1600, 7.3457e-05)):
        found, travelled = soliton(np.pi / 2, steps)
        error = np.linalg.norm(found - expected) / np.linalg.norm(expected)
        assert 0.5 * reference < error < 2 * reference
        assert travelled.transforms == 2 * steps
        assert travelled.steps == steps


def test_global_order_two_over_two_halvings():
    expected = closed_form(np.pi / 2)
    errors = [np.linalg.norm(soliton(np.pi / 2, steps)[0] - expected) for steps in (400, 800, 1600)]
    orders = np.log2(np.array(errors[:-1]) / errors[1:])
    assert orders == pytest.approx([2, 2], abs=0.2), SINKIN


def test_power_is_kept_by_phase_alone():
    field, _ = soliton(1.0, 50)
    assert np.sum(np.abs(field) ** 2) == pytest.approx(np.sum((2 / np.cosh(TIME)) ** 2), rel=1e-12)


def test_too_many_steps_are_refused_with_the_way_past():
    plan = Plan(8, effort="estimate")
    with pytest.raises(NumericalLimit) as caught:
        march(plan, np.zeros(8, complex), (), 2.0, SymmetricSplit(), FixedSteps(100), most_steps=10)
    for word in ("split-step", "0.2 m of 2 m after 10 steps", "local_error", "shorten"):
        assert word in str(caught.value)


@dataclass(frozen=True)
class Uneven:
    """Every other step is half as long: the kept half transfer must follow."""

    def next(self, done, total, error):
        return min(0.1 if round(done * 20) % 3 else 0.05, total - done)


def test_uneven_steps_reach_the_end_with_the_right_phase():
    plan = Plan(16, effort="estimate")
    plan.buffer[:] = 1.0
    travelled = march(plan, np.full(16, 2j), (), 1.0, SymmetricSplit(), Uneven())
    assert plan.buffer == pytest.approx(np.full(16, np.exp(2j)), rel=1e-13)
    assert travelled.steps > 10
    assert travelled.estimated_error is None
