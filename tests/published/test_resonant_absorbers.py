"""Resonant absorbers: shared/published_checks.json, group F, row by row.

Sources stand in the file beside each row; a row says there where its figures were computed anew from a
published formula. Rows of a single pole are put through the grid as a function of frequency; the oscillator
of a real line, which has a partner at negative frequency, is held to 3/(omega0 T2) of them.
"""

from __future__ import annotations

import json
from dataclasses import dataclass
from math import factorial
from pathlib import Path as FilePath

import numpy as np
import pytest
from scipy.special import j1

from pulseprop.causality.front import TestPulse, front_test
from pulseprop.elements.element import orders_of_element, transfer_of
from pulseprop.elements.slab import Slab
from pulseprop.grid import Grid
from pulseprop.material.lines import LorentzLine
from pulseprop.material.medium import Medium
from pulseprop.material.orders_only import OrdersOnly
from pulseprop.material.response import View
from pulseprop.measures.delays import delay_split
from pulseprop.propagation.linear import multiply_by

CHECKS = json.loads(
    (FilePath(__file__).parents[2] / "shared/published_checks.json").read_text(encoding="utf-8")
)
ROWS = {row["id"]: row for row in CHECKS["checks"] if row["group"] == "F"}
C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
LENGTH = 1e-3


@dataclass(frozen=True)
class SinglePole:
    """exp(-(depth/2)/(1 - i (omega - centre) T2)) as an element."""

    depth: float
    memory: float
    centre: float = CENTRE
    name: str = "pole"

    def exponent(self, omega, count, view=View.AXIS):
        below = 1 - 1j * (np.asarray(omega) - self.centre) * self.memory
        return np.stack([-self.depth / 2 * (1j * self.memory) ** m / below ** (m + 1) for m in range(count)])

    def factor(self, omega, view=View.AXIS):
        return None


def real_line(depth: float, memory: float, centre: float = CENTRE) -> Slab:
    """The oscillator with the same absorption at its centre."""
    width = 2 / memory
    line = LorentzLine(strength=width * depth / LENGTH * C, centre=centre, width=width)
    return Slab(name="line", medium=Medium(name="line", response=line), thickness=LENGTH)


# F-BC, F-BC-values, F-BC-zeros: the impulse response.


def impulse_response(depth: float, memory: float, step: float, points: int) -> np.ndarray:
    """Smooth part of the response at instants 0+, step, 2 step, ... through the grid's transform.

    Three terms of the exponential series are taken out, whose responses are powers times exp(-t/T2):
    what is left falls as the fourth power of the detuning.
    """
    grid = Grid(points=points, step=step, start=0.0, carrier=0.0)
    exponent = SinglePole(depth, memory, centre=0.0).exponent(grid.omega, 1)[0]
    rest = np.exp(exponent) - sum(exponent**k / factorial(k) for k in range(4))
    t = grid.time
    known = sum(
        (-depth / 2 / memory) ** k * t ** (k - 1) / factorial(k - 1) / factorial(k) * np.exp(-t / memory)
        for k in range(1, 4)
    )
    return known + grid.to_field(rest.astype(complex)).real


@pytest.mark.parametrize(("b", "row"), [(1.0, 0), (5.0, 1)])
def test_impulse_response_of_a_lorentz_line(b, row):
    """F-BC-values: T2 = 1; the transfer of F-BC gives them back."""
    instants = [0, 100, 1000, 3000] if row == 0 else [100, 1000, 3000]
    found = impulse_response(2 * b, 1.0, 1e-3, 1 << 16)
    assert found[instants] == pytest.approx(ROWS["F-BC-values"]["value"][row], abs=1e-11), ROWS["F-BC"][
        "source"
    ]


@pytest.mark.parametrize("b", [1.0, 5.0])
def test_the_closed_form_is_the_transform_of_the_transfer(b):
    """F-BC: -exp(-t/T2) sqrt(b/t) J1(2 sqrt(b t)) over the whole ringing."""
    found = impulse_response(2 * b, 1.0, 1e-3, 1 << 16)
    t = 1e-3 * np.arange(1, 20000)
    expected = -np.exp(-t) * np.sqrt(b / t) * j1(2 * np.sqrt(b * t))
    assert np.abs(found[1:20000] - expected).max() < 1e-10 * b


@pytest.mark.parametrize("zero", ROWS["F-BC-zeros"]["value"])
def test_zeros_of_the_ringing(zero):
    """b t = j_{1,k}^2/4, here with b = 1 and T2 = 10, on a grid of which the zero is an instant."""
    count = round(zero / 0.005)
    found = impulse_response(20.0, 10.0, zero / count, 1 << 17)
    assert abs(found[count]) < 1e-11
    assert found[count - 20] * found[count + 20] < 0


# F-area


@pytest.mark.parametrize(("depth", "value"), list(zip((2.0, 10.0), ROWS["F-area"]["value"], strict=True)))
def test_the_area_of_a_resonant_pulse_falls_by_half_the_optical_depth(depth, value):
    grid = Grid(points=1 << 14, step=5e-15, start=-10e-12, carrier=CENTRE / (2 * np.pi))
    entering = np.exp(-2 * np.log(2) * (grid.time / 100e-15) ** 2).astype(complex)
    spectrum = grid.to_spectrum(entering)
    single, real = spectrum.copy(), spectrum.copy()
    multiply_by(SinglePole(depth, 1e-12), grid, single)
    multiply_by(real_line(depth, 1e-12), grid, real)
    areas = [grid.to_field(out).sum() / entering.sum() for out in (single, real)]
    assert complex(areas[0]) == pytest.approx(value, rel=1e-12), ROWS["F-area"]["source"]
    assert abs(areas[1] - value) < depth / (CENTRE * 1e-12)


# F-gd


@pytest.mark.parametrize(
    ("x", "share"), [(0.0, -0.5), (1.0, 0.0), (-1.0, 0.0), (np.sqrt(3), 1 / 16), (-np.sqrt(3), 1 / 16)]
)
def test_group_delay_of_a_line(x, share):
    """F-gd, in units of a0L T2: the pole exactly, the oscillator of a line to 3/(omega0 T2)."""
    depth, memory = 4.0, 1e-12
    omega = CENTRE + x / memory
    delay = np.imag(SinglePole(depth, memory).exponent(np.array(omega), 2)[1])
    assert delay / (depth * memory) == pytest.approx(share, abs=1e-12), ROWS["F-gd"]["source"]
    found, *_ = orders_of_element(real_line(depth, memory), omega)
    assert found / (depth * memory) == pytest.approx(share, abs=3 / (CENTRE * memory))


def test_the_delay_is_largest_at_root_three():
    x = np.linspace(1.5, 2.0, 501)
    delays = [orders_of_element(real_line(1.0, 1e-12), CENTRE + v * 1e12)[0] for v in x]
    assert x[int(np.argmax(delays))] == pytest.approx(np.sqrt(3), abs=0.01)


# F-gauss

GAUSS = [
    (100.0, 1000.0, 1.0, 0.0, "F-gauss-100-1000-1-0"),
    (100.0, 1000.0, 10.0, 0.0, "F-gauss-100-1000-10-0"),
    (1000.0, 100.0, 1.0, 0.0, "F-gauss-1000-100-1-0"),
    (100.0, 100.0, 2.0, 0.02, "F-gauss-100-100-2-0.02"),
]


def sent(element, duration: float, centre: float) -> tuple[float, float]:
    """Transmission and centroid shift in fs of a Gaussian pulse of this FWHM in fs about `centre` (rad/s)."""
    grid = Grid(points=1 << 14, step=4e-15, start=-12e-12, carrier=centre / (2 * np.pi))
    entering = grid.to_spectrum(
        np.exp(-2 * np.log(2) * (grid.time / (duration * 1e-15)) ** 2).astype(complex)
    )
    leaving = entering.copy()
    multiply_by(element, grid, leaving)
    magnitude = np.abs(transfer_of(element, grid.omega))
    split = delay_split(grid, entering, magnitude, grid.to_field(leaving))
    assert split.centroid == pytest.approx(split.net_group_delay + split.reshaping, rel=1e-12)
    assert abs(split.reshaping) < 1e-9 * duration * 1e-15
    return grid.energy(leaving) / grid.energy(entering), split.centroid * 1e15


@pytest.mark.parametrize(("duration", "memory", "depth", "detuning", "key"), GAUSS)
def test_a_gaussian_pulse_on_a_single_pole(duration, memory, depth, detuning, key):
    element = SinglePole(depth, memory * 1e-15)
    transmission, delay = sent(element, duration, CENTRE + detuning * 1e15)
    expected = ROWS[key]["value"]
    assert transmission == pytest.approx(expected[0], rel=1e-9), ROWS[key]["source"]
    assert delay == pytest.approx(expected[1], rel=1e-9)


@pytest.mark.parametrize(("duration", "memory", "depth", "detuning", "key"), GAUSS)
def test_a_gaussian_pulse_on_a_real_line(duration, memory, depth, detuning, key):
    transmission, delay = sent(real_line(depth, memory * 1e-15), duration, CENTRE + detuning * 1e15)
    expected = ROWS[key]["value"]
    limit = 3 / (CENTRE * memory * 1e-15)
    assert transmission == pytest.approx(expected[0], rel=limit)
    assert delay == pytest.approx(expected[1], rel=limit)


# F-Brillouin

BRILLOUIN = Medium(name="Brillouin", response=LorentzLine(strength=20e32, centre=4e16, width=2 * 0.28e16))


def test_static_index_of_brillouins_medium():
    assert complex(BRILLOUIN.index(np.array(1e-3))) == pytest.approx(ROWS["F-Brillouin"]["value"], rel=1e-15)


@pytest.mark.parametrize(("place", "values"), ROWS["F-Brillouin-values"]["value"].items())
def test_index_and_group_index_of_brillouins_medium(place, values):
    found = BRILLOUIN.orders(float(place) * 1e16)
    assert (found.index, found.k, found.group_index) == pytest.approx(values, rel=1e-11), ROWS["F-Brillouin"][
        "source"
    ]


# F-front, F-Wang


def test_nothing_comes_before_the_front_of_brillouins_medium():
    """F-front: a micrometre of the medium, deeply absorbing at its resonance, and a pulse below it."""
    slab = Slab(name="slab", medium=BRILLOUIN, thickness=1e-6)

    def bump(x):
        inside = (x > 0) & (x < 1)
        filled = np.where(inside, x, 0.5)
        return np.where(inside, np.exp(-1 / (filled * (1 - filled))), 0.0)

    result = front_test(
        TestPulse(envelope=bump, support=10e-15, centre=1e16),
        lambda omega: transfer_of(slab, omega, View.COMPLETED),
        first_span=40e-15,
        ringing=32 / 0.28e16,
        most_points=1 << 18,
        absorbs=True,
    )
    assert result.verdict == "causal", ROWS["F-front"]["source"]
    assert result.energy_ahead < 1e-24
    assert result.naive_verdict == "acausal"


def test_gain_assisted_advance():
    """F-Wang: group index -310 over 6 cm is an advance of 62 ns against vacuum."""
    index, advance = ROWS["F-Wang"]["value"]
    medium = Medium(
        name="caesium", causal=False, response=OrdersOnly(centre=CENTRE, index=1.0, group_index=index)
    )
    delay, *_ = orders_of_element(Slab(name="cell", medium=medium, thickness=0.06), CENTRE)
    assert -delay * 1e9 == pytest.approx(advance, rel=1e-6), ROWS["F-Wang"]["source"]
