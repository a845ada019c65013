"""Sum rules of a susceptibility: what its absorption adds up to, against what its real part says.

    static rule   (2/pi) int chi2/omega d omega   = chi(0) - chi(inf)
    f-sum rule    (2/pi) int omega chi2 d omega   = lim -omega^2 chi(omega) = plasma frequency squared

(M. Altarelli, D. L. Dexter, H. M. Nussenzveig, D. Y. Smith, Phys. Rev. B 6, 4502 (1972) for the inertial
rules; from memory.)
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

__all__ = ["Feature", "SumRule", "sum_rules"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

NODES = 16
DYADIC = 2.0 ** np.arange(-2, 44)
LOWEST, HIGHEST = 1e-9, 1e7
"""The axis that is integrated, over the slowest and the fastest feature."""


@dataclass(frozen=True)
class Feature:
    """Where a susceptibility absorbs: centre and width, rad/s; a relaxation has centre 0, width 1/tau.

    edge: a knot of a compact, piecewise polynomial band, beside which nothing has to be refined.
    """

    centre: float
    width: float
    edge: bool = False


@dataclass(frozen=True)
class SumRule:
    """name of the rule; ratio of the integral over its expected value, None where that is not finite."""

    name: str
    ratio: float | None
    remark: str


def sum_rules(
    chi: Callable[[Real], Complex], features: Sequence[Feature], *, relaxes: bool
) -> tuple[SumRule, ...]:
    """Both rules by quadrature refined around the features; none where there are no features.

    chi: the completed susceptibility at omega > 0 (rad/s). relaxes: True where a Debye term makes the f-sum
    diverge or carriers make chi(0) infinite.
    """
    if not features:
        return ()
    omega, weight = _quadrature(features)
    absorbed = chi(omega).imag
    far = HIGHEST * max(feature.centre + feature.width for feature in features)
    instantaneous = float(chi(np.array([far])).real[0])
    static = float(chi(np.array([omega.min()])).real[0]) - instantaneous
    rules = [SumRule("static", None, "chi(0) or the f-sum is not finite")] if relaxes else []
    if not relaxes:
        rules.append(SumRule("static", 2 / np.pi * float(np.dot(weight, absorbed / omega)) / static, ""))
        if abs(instantaneous) > 1e-9 * abs(static):
            rules.append(
                SumRule("f-sum", None, "an offset at all frequencies stands for absorption further up")
            )
        else:
            strength = 2 / np.pi * float(np.dot(weight, absorbed * omega))
            edge = 30 * max(feature.centre + feature.width for feature in features)
            expected = _inertial(chi, edge)
            rules.append(
                SumRule(
                    "f-sum",
                    strength / expected,
                    f"plasma frequency {np.sqrt(abs(strength)) * 1e-15:.4g} rad/fs",
                )
            )
    return tuple(rules)


def _inertial(chi: Callable[[Real], Complex], edge: float) -> float:
    """-omega^2 chi far above all features, extrapolated in 1/omega^2 from three frequencies."""
    omega = edge * np.array([1.0, 2.0, 4.0])
    values = -(omega**2) * chi(omega).real
    once = (4 * values[1:] - values[:-1]) / 3
    return float((16 * once[1] - once[0]) / 15)


def _quadrature(features: Sequence[Feature]) -> tuple[Real, Real]:
    """Gauss-Legendre nodes and weights on pieces that shrink towards every feature."""
    slowest = min(max(feature.width, 1e-3 * feature.centre) for feature in features)
    fastest = max(feature.centre + feature.width for feature in features)
    edges: list[Real] = [np.geomspace(LOWEST * slowest, HIGHEST * fastest, 160)]
    for feature in features:
        edges.append(np.array([feature.centre]))
        if not feature.edge:
            offsets = np.asarray(feature.width * DYADIC, dtype=np.float64)
            edges += [feature.centre + offsets, feature.centre - offsets]
    cut = np.unique(np.concatenate(edges))
    cut = cut[(cut > LOWEST * slowest) & (cut < HIGHEST * fastest)]
    cut = cut[np.concatenate(([True], np.diff(cut) > 1e-14 * cut[1:]))]
    nodes, weights = (np.asarray(part, dtype=float) for part in np.polynomial.legendre.leggauss(NODES))
    half = 0.5 * np.diff(cut)[:, None]
    middle = (0.5 * (cut[1:] + cut[:-1]))[:, None]
    return (middle + half * nodes).ravel(), (half * weights).ravel()
