"""How large a grid a run needs: band from the pulse's spectrum, window from delays, chirps and ringing."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.element import Element
from pulseprop.elements.group import passages
from pulseprop.elements.path import Path
from pulseprop.elements.telling import Leading
from pulseprop.errors import InputError, NumericalLimit
from pulseprop.grid import Grid
from pulseprop.propagation.numerals import span
from pulseprop.pulse.source import PulseSource

__all__ = ["GridWish", "Windows", "first_windows", "larger", "most_points"]

Real = NDArray[np.float64]

BAND_SHARE = 1e-22
"""Share of the pulse's energy that may lie outside the band it is thought to fill: amplitudes to 1e-11."""
DELAY_SHARE = 1e-9
"""Frequencies that carry less than this share of the energy do not set the window."""
FIELD_SHARE = 1e-12
FAINTEST = 1e-100
"""Amplitudes below this are as good as none."""
OVERSAMPLING = 2.2
"""Sampled band over filled band; interpolation between samples needs two."""
MARGIN = 1.15
FEWEST_POINTS = 1 << 12
ARRAYS_AT_A_TIME = 12
BYTES_PER_POINT = 16
PROBES = 1025


@dataclass(frozen=True, kw_only=True)
class GridWish:
    """What the scenario says of the grid: span in s, points, memory in bytes, form; all optional but memory
    and form.
    """

    memory: float = 4 * 2**30
    span: float | None = None
    points: int | None = None
    form: str = "envelope"


@dataclass(frozen=True, kw_only=True)
class Windows:
    """The grid at the entrance, and the start of the window (s) after each passage; the last is the exit.

    needed: what pulse and delays fill of the window anywhere on the path, s, without ringing.
    """

    grid: Grid
    starts: tuple[float, ...]
    needed: float

    def after(self, index: int) -> Grid:
        """The grid after passage `index` (from 0); the entrance for -1."""
        return self.grid if index < 0 else self.grid.moved(self.starts[index])


def most_points(memory: float) -> int:
    """The largest power of two of points whose run stays within `memory` bytes."""
    return 1 << int(np.floor(np.log2(max(memory / (ARRAYS_AT_A_TIME * BYTES_PER_POINT), 2.0))))


def first_windows(pulse: PulseSource, path: Path, wish: GridWish) -> Windows:
    """The first guess. Raises NumericalLimit where it exceeds the memory, or a stated span or points are too
    small.
    """
    step, carrier = _step_and_carrier(pulse, wish.form)
    first, last = pulse.field_extent(FIELD_SHARE)
    delays = _delays(pulse, path)
    needed = (last - first) + float(np.ptp(delays[-1])) if len(delays) else last - first
    lead = _lead(path)
    needed = MARGIN * (needed + lead)
    _refuse_gigantic(wish, step)
    _refuse_short(wish, needed)
    points = _points(needed, MARGIN * _ringing(pulse, path), step, wish)
    if wish.span is not None and wish.points is None:
        step = wish.span / points
    if wish.points is not None:
        step = _step_of(wish.points, wish.span, needed, step)
        points = wish.points
    if wish.form == "field":
        carrier = 0.5 / step
    grid = Grid(points=points, step=step, start=_start(first, last, points * step), carrier=carrier)
    return _placed(grid, first - lead, last, delays)


def _refuse_gigantic(wish: GridWish, step: float) -> None:
    """What the scenario itself asks for must fit into the memory it allows."""
    most = most_points(wish.memory)
    for key, points in (("points", wish.points), ("span", wish.span and wish.span / step)):
        if points and points > most:
            raise InputError(
                f"grid.{key} asks for more than the memory limit holds",
                value=f"{points:.4g} points, {points * ARRAYS_AT_A_TIME * BYTES_PER_POINT / 2**30:.3g} GiB",
                allowed=f"{most} points in {wish.memory / 2**30:.3g} GiB (grid.memory)",
                remedy="Leave it out, so that the grid sizes itself, or raise grid.memory",
                place=f"grid.{key}",
            )


def _refuse_short(wish: GridWish, needed: float) -> None:
    if wish.points is None and wish.span is not None and wish.span < needed / MARGIN:
        raise NumericalLimit(
            "the stated grid cannot hold the pulse",
            value=f"{wish.span * 1e12:.4g} ps",
            allowed=f"{needed * 1e12:.4g} ps or more (grid.span)",
            remedy="Leave grid.span out, so that the grid sizes itself",
        )


def _step_of(points: int, span: float | None, needed: float, coarsest: float) -> float:
    """Sampling step where the number of points is stated; refused where band and window do not both fit."""
    step = span / points if span is not None else min(coarsest, max(needed, points * coarsest) / points)
    if step > 1.05 * coarsest or points * step < needed / MARGIN:
        wanted = int(2 ** np.ceil(np.log2(needed / coarsest)))
        raise NumericalLimit(
            "the stated grid cannot hold the pulse",
            value=f"{points} points of {step * 1e15:.4g} fs",
            remedy=f"leave grid.points and grid.span out, or give about {wanted} points",
        )
    return step


def _step_and_carrier(pulse: PulseSource, form: str) -> tuple[float, float]:
    low, high = pulse.spectral_extent(BAND_SHARE)
    if form == "field":
        return 2 * np.pi / (OVERSAMPLING * high), 0.0
    middle = 0.5 * (low + high)
    return 2 * np.pi / (OVERSAMPLING * (high - low)), middle / (2 * np.pi)


def _delays(pulse: PulseSource, path: Path) -> list[Real]:
    """Group delays in s at probe frequencies, summed up to and including each passage, where light still
    passes.
    """
    low, high = pulse.spectral_extent(DELAY_SHARE)
    omega = np.linspace(max(low, high / 1e4), high, PROBES)
    total, opacity, sums = np.zeros(PROBES), np.zeros(PROBES), []
    known: dict[int, tuple[Real, Real]] = {}
    for element in passages(path):
        if id(element) not in known:
            known[id(element)] = _delay_and_loss(element, omega)
        delay, loss = known[id(element)]
        total, opacity = total + delay, opacity + loss
        strength = _strength(pulse, omega) * np.exp(-opacity)
        seen = strength > DELAY_SHARE * max(float(strength.max()), 1e-300)
        sums.append(total[seen] if seen.any() else np.zeros(1))
    return sums


def _delay_and_loss(element: Element, omega: Real) -> tuple[Real, Real]:
    """Group delay in s, and minus the logarithm of the share of energy that passes, faces and edges too."""
    series, factor = element.exponent(omega, 2), element.factor(omega)
    loss = -2 * np.real(series[0])
    if factor is not None:
        loss = loss - 2 * np.log(np.maximum(np.abs(factor), FAINTEST))
    return np.imag(series[1]), loss


def _strength(pulse: PulseSource, omega: Real) -> Real:
    amplitude = pulse.amplitude(omega)
    return np.asarray(amplitude.real**2 + amplitude.imag**2)


def _ringing(pulse: PulseSource, path: Path) -> float:
    low, high = pulse.spectral_extent(DELAY_SHARE)
    return max((element.ringing(low, high) for element in path), default=0.0)


def _lead(path: Path) -> float:
    """How long in s before the group delay the answer may begin."""
    return sum(element.lead for element in passages(path) if isinstance(element, Leading))


def _points(needed: float, ringing: float, step: float, wish: GridWish) -> int:
    """Points for the window; ringing may be cut to what memory allows, as a faint one matters little (it is
    checked).
    """
    most = most_points(wish.memory)
    least = _power_of_two((wish.span if wish.span is not None else needed) / step)
    if least > most:
        raise too_large(least, wish.memory)
    return least if wish.span is not None else min(_power_of_two((needed + ringing) / step), most)


def _power_of_two(size: float) -> int:
    return 1 << int(np.ceil(np.log2(max(size, FEWEST_POINTS))))


def too_large(points: int, memory: float) -> NumericalLimit:
    """The complaint that a grid would not fit."""
    return NumericalLimit(
        "the grid would not fit into the memory limit",
        value=f"{points} points, about {_short(points * ARRAYS_AT_A_TIME * BYTES_PER_POINT / 2**30)} GiB",
        allowed=f"{_short(memory / 2**30)} GiB (grid.memory)",
        remedy="Raise grid.memory, or shorten what makes the answer long: narrow lines, echoes, dispersion",
    )


def _short(value: float) -> str:
    """Three digits, never an exponent where a person would write none."""
    return f"{value:.0f}" if value >= 100 else f"{value:.3g}"


def _start(first: float, last: float, span: float) -> float:
    """A window of length span about [first, last], a quarter of the spare time before it."""
    return first - 0.25 * (span - (last - first))


def _placed(grid: Grid, first: float, last: float, delays: list[Real]) -> Windows:
    starts, needed = [], last - first
    for delay in delays:
        begin, end = first + float(delay.min()), last + float(delay.max())
        needed = max(needed, end - begin)
        spare = max(grid.span - (end - begin), 0.0)
        starts.append(begin - min(0.25 * spare, 0.05 * grid.span))
    return Windows(grid=grid, starts=tuple(starts), needed=needed)


def _own(pulse: PulseSource, path: Path, wish: GridWish) -> str:
    """The window that the grid would begin with by itself, where memory allows one."""
    try:
        own = first_windows(pulse, path, replace(wish, span=None, points=None)).grid.span
    except NumericalLimit:
        return ""
    return f", to {span(own * 1e15, 4)} or more"


def larger(windows: Windows, pulse: PulseSource, path: Path, wish: GridWish) -> Windows:
    """Twice the window. Raises NumericalLimit where the memory does not allow it or the span was stated."""
    points = 2 * windows.grid.points
    if wish.span is not None or wish.points is not None:
        raise NumericalLimit(
            "part of the pulse wraps around the stated window",
            value=f"{windows.grid.span * 1e12:.4g} ps",
            remedy=f"Leave out grid.span and grid.points: the grid sizes itself{_own(pulse, path, wish)}",
        )
    if points > most_points(wish.memory):
        raise too_large(points, wish.memory)
    first, last = pulse.field_extent(FIELD_SHARE)
    grid = replace(windows.grid, points=points, start=_start(first, last, points * windows.grid.step))
    return _placed(grid, first - _lead(path), last, _delays(pulse, path))
