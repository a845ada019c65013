"""A tabulated function of frequency continued over the whole axis, and its Cauchy transform.

    N(z) = (1/pi) int_{-inf}^{inf} density(w) / (w - z) dw,

the density odd (an absorption index k: N = n - 1 + i k) or even. Up to the last edge it is a cubic on each
piece, beyond it falls as an inverse power; below the first edge it is zero. Derivatives of N are transforms
of the derivatives of a continuous density.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.numerics.cauchy import Level, cauchy_levels, piecewise_cauchy, piecewise_value
from pulseprop.numerics.principal_value import inverse_power_cauchy
from pulseprop.numerics.spline import cubic_pieces, derivative_pieces, linear_pieces

__all__ = ["AbsorptionDensity", "Form", "Parity", "Tails", "density_through"]

Real = NDArray[np.float64]
Complex = NDArray[np.complex128]
Numbers = NDArray[np.inexact[Any]]

Form = Literal["c2", "linear"]
Parity = Literal[-1, 1]
Tail = Literal["matched", "none"]

FALL = {-1: 3, 1: 2}
"""Power of the tail above the table: chi2, and so k, falls as omega^-3; n - 1 as omega^-2."""
JUMP = 1e-9
"""A step at an end row below this share of the largest value counts as rounding."""


@dataclass(frozen=True, kw_only=True)
class Tails:
    """What is assumed outside the rows: "matched" to the end row, or "none" (zero).

    Matched, an absorption index k is proportional to omega below and to omega^-3 above (the wings of bound
    charges); a refraction n - 1 is constant below and proportional to omega^-2 above (free charges).
    """

    below: Tail = "matched"
    above: Tail = "matched"


@dataclass(frozen=True, eq=False, kw_only=True)
class AbsorptionDensity:
    """edges: rad/s, ascending, (pieces + 1,). pieces: (pieces, 4), see `pulseprop.numerics.spline`.

    far: value that the inverse power has at the last edge; power: its exponent; parity: -1 odd, +1 even;
    smoothness: how many derivatives are continuous at the inner edges.
    """

    edges: Real
    pieces: Real
    far: float = 0.0
    power: int = 3
    parity: Parity = -1
    smoothness: int = 2

    def value(self, omega: Real) -> Real:
        """The density at real omega of either sign, shape kept."""
        size = np.abs(omega)
        inside = np.real(piecewise_value(self.edges, self.pieces, size))
        beyond = self.far * (self.edges[-1] / np.maximum(size, self.edges[-1])) ** self.power
        sign = np.where(omega < 0, self.parity, 1)
        return np.asarray(sign * np.where(size > self.edges[-1], beyond, inside))

    def transform(self, z: Numbers) -> Complex:
        """N(z), shape kept: real z gives the limit from above the axis.

        Raises InputError where z lies below the axis, or at an end row where the density jumps.
        """
        z = np.asarray(z)
        if not np.iscomplexobj(z):
            return self._on_axis(np.asarray(z, dtype=float))
        if np.any(z.imag < 0):
            raise InputError("a tabulated absorption is known on and above the real axis only")
        on_axis = z.imag == 0
        result = np.empty(z.shape, dtype=complex)
        result[on_axis] = self._on_axis(z.real[on_axis])
        result[~on_axis] = self._sum(z[~on_axis])
        return result

    @cached_property
    def derivative(self) -> AbsorptionDensity:
        """d density / d omega, whose transform is dN/d omega. Raises InputError where the density jumps."""
        if self.smoothness < 0 or self.jumps:
            raise InputError(
                "the tabulated absorption has a step, so slopes of the index are infinite there",
                value=f"{self.jumps[0]:.9g} rad/s" if self.jumps else None,
                allowed="zero absorption at the end rows, or a matched tail, and the C2 form between rows",
            )
        parity: Parity = 1 if self.parity < 0 else -1
        return AbsorptionDensity(
            edges=self.edges,
            pieces=derivative_pieces(self.edges, self.pieces),
            far=-self.power * self.far / float(self.edges[-1]),
            power=self.power + 1,
            parity=parity,
            smoothness=self.smoothness - 1,
        )

    @cached_property
    def jumps(self) -> tuple[float, ...]:
        """Frequencies of the steps at the ends, rad/s."""
        first, last = float(self.pieces[0, 0]), float(np.sum(self.pieces[-1]))
        rounding = JUMP * float(np.max(np.abs(self.pieces[:, 0])))
        steps = []
        if abs(first) > rounding and (self.edges[0] > 0 or self.parity < 0):
            steps.append(float(self.edges[0]))
        if abs(last - self.far) > max(rounding, JUMP * abs(last)):
            steps.append(float(self.edges[-1]))
        return tuple(steps)

    def _on_axis(self, omega: Real) -> Complex:
        for jump in self.jumps:
            if np.any(np.abs(omega) == jump):
                raise InputError(
                    "the index is infinite where the tabulated absorption breaks off",
                    value=f"{jump:.9g} rad/s",
                    allowed="frequencies off the end rows, or a matched tail",
                )
        return self._sum(omega) + 1j * self.value(omega)

    @cached_property
    def _levels(self) -> list[Level]:
        return cauchy_levels(self.edges / self.edges[-1], self.pieces)

    def _sum(self, z: Numbers) -> Complex:
        unit = float(self.edges[-1])
        both = np.concatenate((z.ravel(), -z.ravel())) / unit
        total = piecewise_cauchy(self.edges / unit, self.pieces, both, self._levels)
        if self.far:
            total = total + self.far * inverse_power_cauchy(both, self.power)
        here, mirrored = np.split(total, 2)
        return np.asarray(((here - self.parity * mirrored) / np.pi).reshape(z.shape))


def density_through(
    rows: Real, values: Real, *, form: Form, tails: Tails, parity: Parity
) -> AbsorptionDensity:
    """The density through the rows (rad/s, ascending, above 0) in straight lines, or as a C2 cubic spline.

    The spline takes the slopes of the matched tails at its ends, so that its derivative is continuous there;
    without a tail it comes in flat from a zero value, else its last two pieces are one cubic. Raises
    InputError for too few rows.
    """
    least = 4 if form == "c2" else 2
    if len(rows) < least:
        raise InputError("too few rows", value=len(rows), allowed=f"{least} or more")
    power = FALL[parity]
    edges, below = rows, np.zeros((0, 4))
    if tails.below == "matched":
        edges = np.concatenate(([0.0], rows))
        below = np.array([[0.0, values[0], 0.0, 0.0] if parity < 0 else [values[0], 0.0, 0.0, 0.0]])
    if form == "linear":
        pieces = linear_pieces(rows, values)
    else:
        matched_first = float(values[0] / rows[0]) if parity < 0 else 0.0
        first = _end_slope(tails.below, float(values[0]), matched_first)
        last = _end_slope(tails.above, float(values[-1]), -power * float(values[-1] / rows[-1]))
        pieces = cubic_pieces(rows, values, first, last)
    return AbsorptionDensity(
        edges=edges,
        pieces=np.concatenate((below, pieces)),
        far=float(values[-1]) if tails.above == "matched" else 0.0,
        power=power,
        parity=parity,
        smoothness=2 if form == "c2" else 0,
    )


def _end_slope(tail: Tail, value: float, matched: float) -> float | None:
    if tail == "matched":
        return matched
    return 0.0 if value == 0 else None
