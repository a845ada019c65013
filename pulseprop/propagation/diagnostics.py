"""Causality of a path: the front test on the real field, the naive filter beside it, passivity, and sum
rules.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.front import TestPulse, front_test
from pulseprop.causality.residual import acausal_share
from pulseprop.causality.sum_rules import Feature, sum_rules
from pulseprop.elements.element import Element
from pulseprop.elements.group import Group, every, kept
from pulseprop.elements.path import Path
from pulseprop.elements.slab import DEPTH_OF_DECAY
from pulseprop.material.features import features_of, knots_of, relaxes
from pulseprop.material.medium import Medium
from pulseprop.material.response import View
from pulseprop.propagation.result import Causality, NaiveFilter
from pulseprop.pulse.shapes import FINITE_FWHM, finite_field

__all__ = ["causality_of"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

RINGING_PER_DEPTH = 32.0 / DEPTH_OF_DECAY
"""The front test follows ringing to exp(-32) in amplitude, farther than the grid of a run."""
MOST_POINTS = 1 << 22
RESONANT_POINTS = 1 << 24
"""Points of the front test at most, without resonances and with them."""
LOSSLESS = 1e-12
"""ln(amplitude) that varies by less over the band: nothing absorbs."""
ROUNDING = 1e-12
"""Of n - 1: how far rounding may take k below zero."""
DIP = 1e-6
"""Of the largest absorption: how far the curve through a rounded table may dip below zero."""
CLOSED_FORM = "closed form: every response tested is a Kramers-Kronig pair by construction"
WEIGHTY = 1e-4
"""Spectral amplitude over its peak down to which frequencies set the first window of the test."""


def causality_of(
    path: Path,
    centre: float,
    duration: float,
    memory: float,
    progress: Callable[[float], None] | None = None,
) -> Causality:
    """Diagnostics of a path for a finite pulse of this centre (rad/s) and FWHM (s); memory: bytes allowed."""
    tested = Path(tuple(found for element in path if (found := kept(element, _is_testable)) is not None))
    left_out = tuple(
        element.name
        for element in every(path)
        if not isinstance(element, Group) and not _is_testable(element)
    )
    passive = all(_is_passive(medium, centre) for medium in path.media)
    rules = tuple(rule for medium in tested.media for rule in _sum_rules(medium))
    if not tested.media:
        return _nothing_to_test(left_out, passive)
    pulse = _test_pulse(centre, duration)
    low, high = pulse.band(WEIGHTY)
    ringing = max(element.ringing(low, high) for element in tested) * RINGING_PER_DEPTH
    first_span = 2 * pulse.support + _latest(tested, low, high)
    most_points = _allowed(memory, resonant=ringing > 0)
    if first_span > most_points * pulse.step():
        return _too_long(tested, first_span, most_points * pulse.step(), passive, rules, left_out)
    residual, basis = _residual(tested)
    result = front_test(
        pulse,
        lambda omega: tested.transfer(omega, View.COMPLETED),
        first_span=first_span,
        ringing=ringing,
        most_points=most_points,
        absorbs=_absorbs(tested, low, high),
        progress=progress,
    )
    naive = None
    if result.naive_energy_ahead is not None and result.naive_verdict is not None:
        naive = NaiveFilter(energy_ahead_of_front=result.naive_energy_ahead, verdict=result.naive_verdict)
    return Causality(
        verdict=result.verdict,
        energy_ahead_of_front=result.energy_ahead,
        noise_floor=result.noise_floor,
        kk_residual=residual,
        kk_basis=basis,
        passive=passive,
        naive_filter=naive,
        sum_rules=rules,
        left_out=left_out,
        front_points=result.points,
        remark=_remark(result.verdict, result.span),
    )


def _is_testable(element: Element) -> bool:
    return not element.phase_only and (element.medium is None or not element.medium.orders_only)


def _residual(path: Path) -> tuple[float, str]:
    """Largest share of a susceptibility that answers early, and how it is known."""
    printed = [medium for medium in path.media if not medium.causal]
    if not printed:
        return 0.0, CLOSED_FORM
    shares = [acausal_share(medium.susceptibility, medium.band.high) for medium in printed]
    names = ", ".join(medium.name for medium in printed)
    return max(shares), f"measured on {names}, used as printed and held at its ends; else closed form"


def _nothing_to_test(left_out: tuple[str, ...], passive: bool) -> Causality:
    return Causality(
        verdict="unresolved" if left_out else "causal",
        energy_ahead_of_front=None if left_out else 0.0,
        noise_floor=None if left_out else 0.0,
        kk_residual=None if left_out else 0.0,
        kk_basis="" if left_out else "closed form: vacuum",
        passive=passive,
        naive_filter=None,
        left_out=left_out,
        remark="no matter in the path to which the front test applies" if left_out else "",
    )


def _too_long(
    path: Path,
    needed: float,
    fitting: float,
    passive: bool,
    rules: tuple[tuple[str, str, float | None, str], ...],
    left_out: tuple[str, ...],
) -> Causality:
    residual, basis = _residual(path)
    return Causality(
        verdict="unresolved",
        energy_ahead_of_front=None,
        noise_floor=None,
        kk_residual=residual,
        kk_basis=basis,
        passive=passive,
        naive_filter=None,
        sum_rules=rules,
        left_out=left_out,
        remark=(
            f"the front test needs {needed * 1e12:.3g} ps of carrier-resolved field, "
            f"{fitting * 1e12:.3g} ps fit"
        ),
    )


def _test_pulse(centre: float, duration: float) -> TestPulse:
    return TestPulse(
        envelope=lambda x: finite_field((x - 0.5) / FINITE_FWHM),
        support=duration / FINITE_FWHM,
        centre=centre,
    )


def _sum_rules(medium: Medium) -> tuple[tuple[str, str, float | None, str], ...]:
    features = [Feature(centre, width) for centre, width in features_of(medium.response)]
    features += [Feature(knot, 0.0, edge=True) for knot in knots_of(medium.response)]
    rules = sum_rules(
        lambda omega: medium.susceptibility(omega, View.COMPLETED), features, relaxes=relaxes(medium.response)
    )
    return tuple((medium.name, rule.name, rule.ratio, rule.remark) for rule in rules)


def _latest(path: Path, low: float, high: float) -> float:
    """The latest group delay in s that matters, at frequencies that still pass."""
    series = path.exponent(np.linspace(low, high, 513), 2, View.COMPLETED)
    seen = np.real(series[0]) > -20
    return float(np.max(np.imag(series[1]), where=seen, initial=0.0))


def _allowed(memory: float, *, resonant: bool) -> int:
    """Points for the front test: four real and complex arrays of half its length at a time."""
    fitting = 1 << int(np.log2(max(memory / 64.0, 4096.0)))
    return min(RESONANT_POINTS if resonant else MOST_POINTS, fitting)


def _absorbs(path: Path, low: float, high: float) -> bool:
    exponent = np.real(path.exponent(np.linspace(low, high, 513), 1, View.COMPLETED)[0])
    varies = float(np.ptp(exponent)) > LOSSLESS
    return varies or any(medium.resonances for medium in path.media)


def _is_passive(medium: Medium, centre: float) -> bool:
    """k >= 0 at every resonance, and but for dips over two decades about the centre."""
    axis = medium.index(np.geomspace(centre / 10, centre * 10, 801))
    lines = medium.index(np.array([line.centre for line in medium.resonances]))
    dip = DIP * max(float(axis.imag.max()), 0.0)
    return bool(
        np.all(axis.imag >= -dip - ROUNDING * np.abs(axis - 1))
        and np.all(lines.imag >= -ROUNDING * np.abs(lines - 1))
    )


def _remark(verdict: str, span: float) -> str:
    if verdict != "unresolved":
        return ""
    return (
        f"the answer lasts longer than the window of {span * 1e12:.3g} ps that fits; what wraps around hides "
        "whether anything leaves early"
    )
