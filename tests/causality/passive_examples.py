"""Materials for tests of passive feasibility: published, invented, random, all passive by construction."""

from __future__ import annotations

import numpy as np
from scipy.special import wofz

from pulseprop.causality.passive_data import PassiveData

C = 299792458.0


def omega_of(micrometres):
    """rad/s."""
    return 2 * np.pi * C / (micrometres * 1e-6)


MICROMETRES = np.linspace(1.6, 0.4, 61)


def silica(micrometres=MICROMETRES):
    """Fused silica: I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965)."""
    square = micrometres**2
    terms = ((0.6961663, 0.0684043), (0.4079426, 0.1162414), (0.8974794, 9.896161))
    return np.sqrt(1 + sum(strength * square / (square - place**2) for strength, place in terms))


def absorber(omega, width=1.5e14, centre=3e15, strength=9e27):
    """n - 1 + i k of an invented crystal: an ultraviolet band and a Lorentz line, on the principal root."""
    chi = 0.8 * 36e30 / (36e30 - omega**2 - 1e13j * omega)
    chi = chi + strength / (centre**2 - omega**2 - 1j * width * omega)
    return chi / (1 + np.sqrt(1 + chi))


def rows(omega, index, error, k=None, k_error=None):
    """Data with one uncertainty for all rows of a quantity."""
    absorbing = {} if k is None else {"k_omega": omega, "k": k, "k_error": np.full(len(omega), k_error)}
    return PassiveData(omega=omega, index=index, index_error=np.full(len(omega), error), **absorbing)


def random_data(seed, fewest=8.0):
    """A random passive causal material, sampled and rounded: bands outside the rows and, for odd seeds, Voigt
    lines (from Gauss to Lorentz) between them with at least `fewest` rows over the width of each."""
    source = np.random.default_rng(seed)
    count = int(source.integers(30, 90))
    low = source.uniform(0.3, 1.0) * 1e15
    omega = low * np.linspace(1, source.uniform(1.6, 4), count)
    places = omega[-1] * source.uniform(1.1, 5, 3)
    value = sum(
        source.uniform(0.02, 0.3) * place**2 / (place**2 - omega**2).astype(complex) for place in places
    )
    value = value - source.uniform(0, 0.01) * low**2 * 0.25 / (omega**2 - (0.5 * low) ** 2)
    decimals = int(source.integers(3, 7))
    unit = 0.5 * 10.0**-decimals
    if seed % 2 == 0:
        return rows(omega, np.round(1 + value.real, decimals), unit)
    spacing = omega[1] - omega[0]
    for _ in range(source.integers(1, 4)):
        width = spacing * fewest * source.uniform(1, 2)
        centre = omega[0] + source.uniform(0.1, 0.9) * (omega[-1] - omega[0])
        value = value + source.uniform(0.01, 0.2) * line(omega, centre, width, source.uniform(0, 1))
    return rows(
        omega, np.round(1 + value.real, decimals), unit, np.round(np.maximum(value.imag, 0), decimals), unit
    )


def line(omega, centre, width, gauss):
    """n + i k of a Voigt line of k with its partner at -centre; width at half height, gauss: its share."""
    sigma = max(gauss, 1e-3) * width / 2.354820045
    gamma = (1 - gauss) * width / 2
    scale = np.sqrt(2) * sigma
    upper = 1j * wofz((omega - centre + 1j * gamma) / scale)
    lower = 1j * wofz((omega + centre + 1j * gamma) / scale)
    peak = np.real(wofz(1j * gamma / scale))
    return (upper - lower) / peak
