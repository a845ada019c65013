"""Speed and memory of vetting, as seconds and over a floor of the same run.

    python -m tests.benchmarks.vet_speed [ROUNDS]

Floor: ten dense Cholesky factorisations as large as the rows of n and of k together; a plain interior point
needs some tens. The best of several rounds, for machines are busy. Goals on two free cores: the factor of 250
rows of n and k in 0.5 s, of 1,000 in 5 s; bounds at one wavelength for 250 rows in 2 s; under 1 GiB at 2,000
rows. Leaves with 1 where memory fails; times are told with the load, and judged by who reads them.
"""

from __future__ import annotations

import os
import resource
import subprocess
import sys
import time
from collections.abc import Callable

import numpy as np
from scipy.linalg import cho_factor

from pulseprop.causality.bounds import bounds
from pulseprop.causality.feasibility import feasibility
from pulseprop.causality.passive_data import PassiveData
from tests.benchmarks.random_matter import Line, Matter

__all__ = ["absorbing", "peak_memory"]

CHOLESKIES = 10
GIBIBYTE = 2**30

MATTER = Matter(
    (
        Line(centre=12.0, peak=1.0),
        Line(centre=0.1, peak=0.3),
        Line(centre=2.6, peak=0.05, width=0.3),
        Line(centre=3.4, peak=0.02, width=0.1, spread=0.1),
    )
)


def absorbing(rows: int) -> PassiveData:
    """n to five decimals and k to five, evenly spaced from 1.5 to 5 rad/fs."""
    w = np.linspace(1.5, 5.0, rows)
    exact = MATTER.refraction(w)
    return PassiveData(
        omega=w * 1e15,
        index=np.round(exact.real, 5),
        index_error=np.full(rows, 5e-6),
        k_omega=w * 1e15,
        k=np.round(exact.imag, 5),
        k_error=np.full(rows, 5e-6),
    )


def best(action: Callable[[], object], rounds: int) -> tuple[float, float]:
    """Shortest time of the clock and of the processor, s."""
    clock, processor = [], []
    for _ in range(rounds):
        start = time.perf_counter(), time.process_time()
        action()
        clock.append(time.perf_counter() - start[0])
        processor.append(time.process_time() - start[1])
    return min(clock), min(processor)


def floor(size: int, rounds: int) -> float:
    """Ten Cholesky factorisations, s of the clock."""
    matrix = np.random.default_rng(1).normal(size=(size, size))
    matrix = matrix @ matrix.T + size * np.eye(size)
    return CHOLESKIES * best(lambda: cho_factor(matrix), max(rounds, 5))[0]


def peak_memory(rows: int) -> int:
    """Bytes of a fresh process that finds the factor of so many rows."""
    code = (
        "import resource; from tests.benchmarks.vet_speed import absorbing;"
        "from pulseprop.causality.feasibility import feasibility;"
        f"assert feasibility(absorbing({rows})).factor < 1;"
        "print(resource.getrusage(resource.RUSAGE_SELF).ru_maxrss)"
    )
    done = subprocess.run([sys.executable, "-c", code], check=True, capture_output=True, text=True)
    return 1024 * int(done.stdout)


def told(name: str, seconds: tuple[float, float], base: float, goal: str) -> None:
    """One line."""
    clock, processor = seconds
    over = clock / base
    print(f"{name}: {clock:.2f} s, processor {processor:.2f} s, {over:.1f} floors (goal {goal})", flush=True)


def main() -> int:
    rounds = int(sys.argv[1]) if len(sys.argv) > 1 else 3
    threads = os.environ.get("OMP_NUM_THREADS", "all")
    print(f"load {os.getloadavg()[0]:.1f} on {os.cpu_count()} cores, threads: {threads}")
    for rows, goal in ((250, "0.5 s"), (1000, "5 s")):
        data = absorbing(rows)
        told(
            f"factor of {rows} rows of n and k",
            best(lambda data=data: feasibility(data), rounds),  # type: ignore[misc]
            floor(2 * rows, rounds),
            goal,
        )
    data = absorbing(250)
    known = feasibility(data)
    at = np.array([2.1e15])
    found = best(lambda: bounds(data, at, known), rounds)
    told("bounds of 250 rows at one wavelength", found, floor(500, rounds), "2 s")
    memory = peak_memory(2000)
    print(f"peak memory at 2,000 rows: {memory / GIBIBYTE:.2f} GiB (at most 1)")
    print(f"of this process: {resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 2**20:.2f} GiB")
    return int(memory > GIBIBYTE)


if __name__ == "__main__":
    sys.exit(main())
