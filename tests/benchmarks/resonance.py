"""Figures of the resonant and the causal core: `python -m tests.benchmarks.resonance`.

Prints how well a finite pulse on an exact Lorentz line meets a 30-digit quadrature of the same transfer along
a line above the real axis, how much energy the front test finds ahead of the front, and how split steps
compare with the exact linear transfer.
"""

from __future__ import annotations

import time

import mpmath as mp
import numpy as np

from pulseprop.causality.front import TestPulse, front_test
from pulseprop.elements.element import transfer_of
from pulseprop.elements.slab import Slab
from pulseprop.grid import Grid
from pulseprop.material.lines import LorentzLine, line
from pulseprop.material.medium import Medium
from pulseprop.material.response import View
from pulseprop.propagation.linear import multiply_by
from pulseprop.propagation.stepped import SteppedAdvance

C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
CYCLES = 20
SUPPORT = CYCLES * 800e-9 / C
SAMPLES = 280
"""Samples of the grid over the support: up to seven times the carrier, where the spectrum is below rounding.
"""
T2, DEPTH, LENGTH = 100e-15, 5.0, 1e-3
INSTANTS = tuple(40 + 137 * m for m in range(20))
"""In steps of SUPPORT / SAMPLES, from inside the pulse to five T2 after it."""


def envelope(x):
    """exp(4 - 1/(x(1-x))) between 0 and 1: peak 1."""
    x = np.asarray(x, float)
    inside = (x > 0) & (x < 1)
    filled = np.where(inside, x, 0.5)
    return np.where(inside, np.exp(4 - 1 / (filled * (1 - filled))), 0.0)


def line_of_depth(width: float, depth: float = DEPTH, centre: float = CENTRE) -> LorentzLine:
    """A Lorentz line in vacuum with alpha LENGTH = depth at its centre; width: FWHM in rad/s."""
    return LorentzLine(strength=width * depth / LENGTH * C, centre=centre, width=width)


def slab_of(response, thickness: float = LENGTH) -> Slab:
    return Slab(name="cell", medium=Medium(name="line", response=response), thickness=thickness)


def response_on_the_grid(points: int = 1 << 15):
    """The real field behind the line at INSTANTS, through the grid of the package."""
    step = SUPPORT / SAMPLES
    grid = Grid(points=points, step=step, start=-1000 * step, carrier=0.5 / step)
    field = envelope(grid.time / SUPPORT) * np.cos(CENTRE * (grid.time - SUPPORT / 2))
    spectrum = grid.to_spectrum(field * np.exp(2j * np.pi * grid.carrier * grid.time))
    # Analytic signal: twice the positive half; above lies the negative half, seen through the sampling.
    spectrum *= np.where(grid.frequency < grid.carrier, 2.0, 0.0)
    spectrum[0] /= 2
    multiply_by(slab_of(line_of_depth(2 / T2)), grid, spectrum)
    out = grid.carrier_resolved(grid.to_field(spectrum)).real
    return out[1000 + np.array(INSTANTS)]


def reference(digits: int = 30) -> list[mp.mpf]:
    """The same by quadrature along omega + i eta, up to ten times the carrier.

    Trapezoids: their error is what comes a period later, exp(-30) of a ringing that has fallen to exp(-10).
    """
    with mp.workdps(digits):
        w0, support, length, c = mp.mpf(CENTRE), mp.mpf(SUPPORT), mp.mpf(LENGTH), mp.mpf(C)
        width = mp.mpf(2 / T2)
        strength = mp.mpf(line_of_depth(2 / T2).strength)
        period, samples, step = mp.mpf("1e-12"), 500, mp.mpf(SUPPORT) / SAMPLES
        spacing, eta = 2 * mp.pi / period, 30 / period
        x = [mp.mpf(k) / samples for k in range(1, samples)]
        field = [mp.exp(4 - 1 / (v * (1 - v))) * mp.cos(w0 * support * (v - mp.mpf(1) / 2)) for v in x]
        totals = [mp.mpf(0)] * len(INSTANTS)
        for k in range(int(10 * w0 / spacing)):
            omega = mp.mpc(k * spacing, eta)
            turn = mp.exp(1j * omega * support / samples)
            amplitude = mp.polyval(field[::-1], turn) * turn * support / samples
            chi = strength / (w0**2 - omega**2 - 1j * width * omega)
            there = amplitude * mp.exp(1j * omega / c * length * (mp.sqrt(1 + chi) - 1))
            there *= (mp.mpf(1) / 2 if k == 0 else 1) * spacing / mp.pi
            first, gap = mp.exp(-1j * omega * step * INSTANTS[0]), mp.exp(-1j * omega * step * 137)
            for m in range(len(INSTANTS)):
                totals[m] += (there * first).real
                first *= gap
        return totals


def lorentz_response() -> None:
    begun = time.perf_counter()
    wanted = np.array([float(value) for value in reference()])
    found = response_on_the_grid()
    print(f"Lorentz line, {CYCLES} cycles, depth {DEPTH:g}, T2 {T2 * 1e15:g} fs, {len(INSTANTS)} instants:")
    print(f"  largest error {np.abs(found - wanted).max():.1e} of the peak that enters", end="")
    print(f" (reference in {time.perf_counter() - begun:.0f} s)")


def front_energies() -> None:
    pulse = TestPulse(envelope=envelope, support=80e-15, centre=CENTRE)
    for width in (1e12, 1e11):
        slab = slab_of(
            line(
                centre=CENTRE,
                width=2 * np.pi * width,
                strength=line_of_depth(2 * np.pi * width, 1e3).strength,
            )
        )
        begun = time.perf_counter()
        result = front_test(
            pulse,
            lambda omega, slab=slab: transfer_of(slab, omega, View.COMPLETED),
            first_span=32 * 2 / (2 * np.pi * width),
            most_points=1 << 22,
            absorbs=True,
            ringing=32 * 2 / (2 * np.pi * width),
        )
        print(f"Front, 80 fs support, depth 1000, line {width / 1e12:g} THz wide, {result.points} points:")
        print(f"  {result.verdict}: {result.energy_ahead:.1e} ahead, floor {result.noise_floor:.1e}", end="")
        print(f"; absorption alone {result.naive_verdict}: {result.naive_energy_ahead:.1e}", end="")
        print(f" ({time.perf_counter() - begun:.2f} s)")


def split_step_against_exact(points: int = 1 << 14) -> None:
    grid = Grid(points=points, step=0.4e-15, start=-0.5 * points * 0.4e-15, carrier=C / 800e-9)
    entering = grid.to_spectrum(np.exp(-2 * np.log(2) * (grid.time / 30e-15) ** 2).astype(complex))
    slab = slab_of(line_of_depth(2 / T2))
    exact, stepped = entering.copy(), entering.copy()
    multiply_by(slab, grid, exact)
    exponent = np.zeros(points, complex)
    exponent[grid.positive] = slab.exponent(grid.omega[grid.positive], 1)[0]
    SteppedAdvance(method="split-step", points=points)(slab, exponent, stepped)
    error = np.abs(stepped - exact).max() / np.abs(exact).max()
    print(f"Split step without terms against the exact transfer: {error:.1e}")


def main() -> None:
    lorentz_response()
    front_energies()
    split_step_against_exact()


if __name__ == "__main__":
    main()
