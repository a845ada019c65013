"""The uncertainty factor: time and memory by rows of n and k, of n alone, and of a contradiction with proof.

    python -m tests.benchmarks.feasibility

An invented crystal with one line, rounded to 1e-5. Goals on two free cores: 250 rows of n and k in 0.5 s,
1,000 in 5 s, under 1 GiB at 2,000; 60 rows of n in 30 ms. The processor's time is told too: machines are
busy, and threads of the linear algebra that wait for one another count there.
"""

from __future__ import annotations

import resource
import time

import numpy as np

from pulseprop.causality.feasibility import feasibility
from pulseprop.causality.passive_data import PassiveData


def crystal(omega):
    """n - 1 + i k."""
    chi = 0.8 * 36e30 / (36e30 - omega**2 - 1e13j * omega)
    chi = chi + 9e27 / (9e30 - omega**2 - 1.5e14j * omega)
    return chi / (1 + np.sqrt(1 + chi))


def absorbing(count, factor=1.0):
    """Rows of n and k; k too large by the factor."""
    omega = np.linspace(2e15, 4e15, count)
    value, error = crystal(omega), np.full(count, 5e-6 * factor)
    return PassiveData(
        omega=omega,
        index=np.round(1 + value.real, 5),
        index_error=error,
        k_omega=omega,
        k=np.round(factor * value.imag, 5),
        k_error=error,
    )


def transparent(count):
    """Rows of n below the line."""
    omega = np.linspace(0.8e15, 2e15, count)
    chi = 0.8 * 36e30 / (36e30 - omega**2)
    return PassiveData(omega=omega, index=np.round(np.sqrt(1 + chi), 5), index_error=np.full(count, 5e-6))


def measured(name, data):
    """Print one line."""
    wall, processor = time.perf_counter(), time.process_time()
    found = feasibility(data)
    wall, processor = time.perf_counter() - wall, time.process_time() - processor
    memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
    print(
        f"{name}: factor {found.factor:.4g}, gap {found.gap:.1e}; {wall:.3f} s, processor {processor:.3f} s, "
        f"{memory:.0f} MiB so far",
        flush=True,
    )


def main() -> None:
    """Print the figures."""
    feasibility(transparent(20))  # modules that load
    measured("60 rows of n", transparent(60))
    for count in (250, 1000):
        measured(f"{count} rows of n and k", absorbing(count))
    measured("250 rows, k too large by ln 10, with proof", absorbing(250, np.log(10)))
    measured("2000 rows of n and k", absorbing(2000))


if __name__ == "__main__":
    main()
