"""Kramers-Kronig of a sampled Lorentz line: error, order, time, memory.

    python -m tests.benchmarks.kramers_kronig

Errors are the largest |N - exact| on the rows and three places between each two, over the peak of k.
"""

from __future__ import annotations

import time
import tracemalloc

import numpy as np

from pulseprop.material.kramers_kronig import refraction_from_absorption

CENTRE, WIDTH, STRENGTH = 1.0, 0.02, 2e-4
PLACES = 2**16


def lorentz(omega):
    """n - 1 + i k of chi = strength / (centre^2 - omega^2 - i width omega)."""
    chi = STRENGTH / (CENTRE**2 - omega**2 - 1j * WIDTH * omega)
    return chi / (1 + np.sqrt(1 + chi))


def placed_rows(count, order):
    """Rows over six decades, spacing^order times the order-th derivative of k nearly the same everywhere."""
    a = WIDTH / 2
    reach = np.arcsinh((1e-3 - CENTRE) / a), np.arcsinh((1e3 - CENTRE) / a)
    fine = CENTRE + a * np.sinh(np.linspace(*reach, 200001))
    x = fine - CENTRE
    # |d^m/dx^m of a^2/(x^2 + a^2)| is at most m! a / (x^2 + a^2)^((m+1)/2); far off, a share by the logarithm
    weight = (a / (x**2 + a**2) ** ((order + 1) / 2)) ** (1 / order) + 0.03 / np.sqrt(x**2 + a**2)
    share = np.concatenate(([0.0], np.cumsum((weight[1:] + weight[:-1]) / 2 * np.diff(fine))))
    return np.interp(np.linspace(0, share[-1], count), share, fine)


def largest_error(rows, form):
    """Over the peak of k."""
    inner = rows[(rows > 0.01) & (rows < 100)]
    omega = np.concatenate([inner[:-1] + part * np.diff(inner) for part in (0.0, 0.21, 0.5, 0.8)])
    found = refraction_from_absorption(rows, lorentz(rows).imag, omega, form=form).values
    return float(np.max(np.abs(found - lorentz(omega))) / lorentz(np.array([CENTRE])).imag[0])


def main() -> None:
    """Print the figures."""
    for form, order, goal in (("linear", 2, 3e-8), ("c2", 4, 1e-10)):
        errors = {
            count: largest_error(placed_rows(count, order), form) for count in (1250, 2500, 5000, 20000)
        }
        measured = np.log2(errors[1250] / errors[2500])
        print(f"{form}: " + ", ".join(f"{count} rows {error:.1e}" for count, error in errors.items()))
        print(f"    order {measured:.2f} (of {order}); {errors[20000] / goal:.2f} of the goal {goal:.0e}")
    rows = placed_rows(20000, 4)
    k, omega = lorentz(rows).imag, np.linspace(0.5, 1.5, PLACES)
    start = time.perf_counter()
    refraction_from_absorption(rows, k, omega)
    seconds = time.perf_counter() - start
    tracemalloc.start()
    refraction_from_absorption(rows, k, omega)
    peak = tracemalloc.get_traced_memory()[1] / 1e6
    start = time.perf_counter()
    for _ in range(5):
        np.fft.fft(np.ones(PLACES, dtype=complex))
    transforms = (time.perf_counter() - start) / 5
    print(f"20000 rows onto {PLACES}: {seconds:.2f} s ({seconds / transforms:.0f} such FFTs), {peak:.0f} MB")


if __name__ == "__main__":
    main()
