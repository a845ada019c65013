"""Guaranteed bounds: how narrow, how near the optimum, how long, how much memory.

    python -m tests.benchmarks.bounds

Fused silica (I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965)) on 61 rows from 0.4 to 1.6 um at several
uncertainties of the index, and an absorbing material, invented, on 250 rows of n and k.
"""

from __future__ import annotations

import resource
import time

import numpy as np

from pulseprop.causality.bounds import bounds
from pulseprop.causality.bounds_functionals import quantity_weights
from pulseprop.causality.bounds_sources import GIVEN_AWAY, Absorbing
from pulseprop.causality.feasibility import feasibility
from pulseprop.causality.passive_data import PassiveData
from pulseprop.constants import TWO_PI_C

FS2_PER_MM = 1e-27
SECONDS, GIGABYTES = 2.0, 1.0
"""Floors: GVD at one wavelength for 250 rows of n and k, setting up included; memory."""


def silica(error):
    """61 rows, evenly spaced in wavelength."""
    um = np.linspace(1.6, 0.4, 61)
    terms = ((0.6961663, 0.0684043), (0.4079426, 0.1162414), (0.8974794, 9.896161))
    index = np.sqrt(1 + sum(b * um**2 / (um**2 - q**2) for b, q in terms))
    return PassiveData(omega=TWO_PI_C / (um * 1e-6), index=index, index_error=np.full(61, error))


def absorber(rows):
    """A line at 3.5 rad/fs, 0.4 wide, one at 12 and one at 0.1; n +-1e-4, k +-(1e-5 + 1 %)."""
    w = np.linspace(1.2, 6.0, rows)
    chi = 1 / (1 - (w / 12) ** 2 - 0.1j * w / 144) + 0.245 / (3.5**2 - w**2 - 0.4j * w)
    exact = np.sqrt(1 + chi + 1e-4 / (0.01 - w**2 - 0.02j * w))
    omega = w * 1e15
    return PassiveData(
        omega=omega,
        index=exact.real,
        index_error=np.full(rows, 1e-4),
        k_omega=omega,
        k=exact.imag,
        k_error=1e-5 + 0.01 * exact.imag,
    )


def transparent() -> None:
    """All four quantities at 800 nm, once with setting up and once without."""
    for error in (1e-3, 3e-4, 1e-4, 1e-5, 1e-6):
        data, omega = silica(error), TWO_PI_C / 800e-9
        start = time.perf_counter()
        found = bounds(data, np.array([omega]))[0]
        first = time.perf_counter() - start
        start = time.perf_counter()
        bounds(data, omega * np.array([1.0, 0.9, 1.1]))
        more = (time.perf_counter() - start - first) / 2
        low, high = np.array(found.gvd) / FS2_PER_MM
        print(f"n +-{error:.0e}: GVD {low:.3f} … {high:.3f} fs^2/mm; {first:.2f} s, then {more:.2f} s each")


def absorbing() -> None:
    """GVD alone, and everything, after the uncertainty factor is known."""
    data = absorber(250)
    known = feasibility(data, thorough=False)
    start = time.perf_counter()
    source = Absorbing(data, 3, known.material.attained.masses)
    omega = 2.4e15 / source.unit
    gvd = source.proofs.materials.functional(omega, quantity_weights(omega)[2])
    source.proofs.interval(gvd, GIVEN_AWAY)
    alone = time.perf_counter() - start
    start = time.perf_counter()
    bounds(data, np.array([2.4e15]), known)
    everything = time.perf_counter() - start
    peak = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss * 1024 / 1e9
    print(
        f"250 rows of n and k: GVD {alone:.2f} s ({alone / SECONDS:.2f} of the floor), all {everything:.2f} s"
    )
    print(f"memory {peak:.2f} GB ({peak / GIGABYTES:.2f} of the floor)")


def main() -> None:
    """Print the figures."""
    bounds(silica(1e-3), np.array([TWO_PI_C / 800e-9]))  # what loads late is loaded
    transparent()
    absorbing()


if __name__ == "__main__":
    main()
