"""Plane waves in a stack of films, as Taylor series: amplitudes of reflection and transmission.

Recursion from the substrate up. With q_j = sqrt(n_j^2 - sin^2 i), e_j = exp(i (omega/c) d_j q_j) and r below
the film known,

    r' = (r_01 + r e^2) / (1 + r_01 r e^2),    t' = t_01 e t / (1 + r_01 r e^2),

r_01 = (y_0 - y_1)/(y_0 + y_1) with y = q in s and q/n^2 in p polarisation. No growing exponential appears,
so thick and strongly absorbing films keep their digits. Source: M. Born, E. Wolf, Principles of Optics,
section 1.6 (from memory).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.elements.faces import Polarisation
from pulseprop.elements.oblique import normal_index
from pulseprop.material.medium import Medium
from pulseprop.material.response import View
from pulseprop.numerics.series import Numbers, Series, product, quotient, root, variable
from pulseprop.numerics.series_functions import exponential

__all__ = ["Film", "StackOfFilms"]


@dataclass(frozen=True)
class Film:
    """thickness: m, 0 or more."""

    medium: Medium
    thickness: float


@dataclass(frozen=True, kw_only=True)
class StackOfFilms:
    """films: in the order in which light from outside (vacuum) meets them. substrate: behind them, vacuum for
    None. incidence: outside, rad."""

    films: tuple[Film, ...]
    substrate: Medium | None
    incidence: float
    polarisation: Polarisation

    def reflection(self, omega: Numbers, count: int, view: View) -> Series:
        """Amplitude reflected to the outside: Taylor coefficients about each omega (rad/s)."""
        return self._climb(omega, count, view)[0]

    def transmission(self, omega: Numbers, count: int, view: View) -> Series:
        """Amplitude into the substrate, its square the share of the power (where the substrate is clear)."""
        return self._climb(omega, count, view)[1]

    def _climb(self, omega: Numbers, count: int, view: View) -> tuple[Series, Series]:
        omega = np.asarray(omega)
        layers = _Layers(omega, count, view, self.incidence, self.polarisation)
        media: Sequence[Medium | None] = (None, *(film.medium for film in self.films), self.substrate)
        reflected, passed = layers.interface(media[-2], media[-1])
        passed = product(passed, layers.into_power(self.substrate))
        for above, film in zip(media[-3::-1], self.films[::-1], strict=True):
            through = layers.through(film)
            back = product(reflected, product(through, through))
            mirror, entering = layers.interface(above, film.medium)
            many = product(mirror, back)
            many[0] += 1.0
            reflected = quotient(mirror + back, many)
            passed = quotient(product(product(entering, through), passed), many)
        return reflected, passed


class _Layers:
    """Series of each medium, evaluated once."""

    def __init__(
        self, omega: Numbers, count: int, view: View, incidence: float, polarisation: Polarisation
    ) -> None:
        self.omega, self.count, self.view = omega, count, view
        self.incidence, self.polarisation = incidence, polarisation
        self.known: dict[int, tuple[Series, Series]] = {}

    def interface(self, above: Medium | None, below: Medium | None) -> tuple[Series, Series]:
        """r and t from `above` to `below`; in p polarisation t of the magnetic field."""
        first, second = self._admittance(above), self._admittance(below)
        both = first + second
        return quotient(first - second, both), quotient(2 * first, both)

    def _admittance(self, medium: Medium | None) -> Series:
        """q in s, q/n^2 in p: r is (first - second)/(first + second) in both."""
        permittivity, normal = self._series(medium)
        return normal if self.polarisation == "s" else quotient(normal, permittivity)

    def into_power(self, medium: Medium | None) -> Series:
        """Root of the admittance of the substrate over that of the outside: makes |t|^2 a share of power."""
        ratio = quotient(self._admittance(medium), self._admittance(None))
        return root(ratio, np.sqrt(ratio[0]))

    def through(self, film: Film) -> Series:
        """exp(i (omega/c) d q) of one film."""
        wave = variable(self.omega, self.count) / SPEED_OF_LIGHT
        return exponential(1j * film.thickness * product(wave, self._series(film.medium)[1]))

    def _series(self, medium: Medium | None) -> tuple[Series, Series]:
        """n^2 and q."""
        if id(medium) not in self.known:
            chi = np.zeros((self.count, *self.omega.shape), dtype=complex)
            if medium is not None:
                chi += medium.response.series(self.omega, self.count, self.view)
            normal = normal_index(chi, self.incidence)
            chi[0] += 1.0
            self.known[id(medium)] = chi, normal
        return self.known[id(medium)]
