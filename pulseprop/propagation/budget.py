"""The walk along the path: the spectrum after each element, and the rows of the dispersion budget."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, field, replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import FEMTO
from pulseprop.elements.element import Element, orders_of_element
from pulseprop.elements.group import Group
from pulseprop.elements.path import Path
from pulseprop.elements.slab import Slab
from pulseprop.elements.telling import Telling
from pulseprop.errors import InputError
from pulseprop.grid import Grid
from pulseprop.measures.widths import fwhm
from pulseprop.propagation.intensity import b_integral, coarser, on_axis, peak_power
from pulseprop.propagation.linear import blocks
from pulseprop.propagation.result import ElementMeasures
from pulseprop.propagation.sizing import Windows

__all__ = ["Advance", "Walk", "largest", "summed", "walk"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]
Advance = Callable[[Element, Complex, Complex], None]
"""advance(element, exponent, spectrum) takes a spectrum through one element in place, faces left out."""

PER_CM2 = 1e-4
FAINTEST_ENERGY = 1e-140
"""J: below, the square of the power, which autocorrelations need, leaves the range of double precision."""
FAINTEST_ECHO = 1e-12
MOST_ECHOES = 12
"""Echoes are listed down to this share of the energy, and this many at most; the field holds all of them."""
FORMULA_DIGITS = 4
"""Significant digits that rows of the budget show where a published formula stands behind them."""


@dataclass(kw_only=True)
class Walk:
    """State while walking; `rows` is the result, `spectrum` what leaves. passed: elements so far, the parts
    of a group on each passage.

    transmission: |transfer|^2, and group_delay: of the direct passage in s, both of all elements so far, on
    the frequencies.
    """

    windows: Windows
    spectrum: Complex
    transmission: Real
    group_delay: Real
    omega: float
    advance: Advance
    passed: int = 0
    rows: list[ElementMeasures] = field(default_factory=list)
    gdd: float | None = 0.0
    tod: float | None = 0.0


def walk(
    path: Path, windows: Windows, spectrum: Complex, omega: float, radius: float | None, advance: Advance
) -> Walk:
    """Take a copy of the spectrum A(omega) through the path; omega: centre in rad/s; radius: of the pulse's
    beam, m.
    """
    state = Walk(
        windows=windows,
        spectrum=spectrum.copy(),
        transmission=np.zeros(spectrum.size),
        group_delay=np.zeros(spectrum.size),
        omega=omega,
        advance=advance,
    )
    state.transmission[windows.grid.positive] = 1.0
    for element in path:
        state.rows.append(_told(element, _row(state, element, radius)))
    return state


def _told(element: Element, row: ElementMeasures) -> ElementMeasures:
    if not isinstance(element, Telling):
        return row
    return replace(row, figures=dict(element.figures), notes=element.notes)


def _row(state: Walk, element: Element, outer_radius: float | None) -> ElementMeasures:
    """The row of an element; outer_radius: of the beam where the element states none, m."""
    radius = element.beam_radius or outer_radius
    if isinstance(element, Group):
        return _row_of_group(state, element, radius)
    return _row_of_one(state, element, radius)


def _row_of_group(state: Walk, group: Group, radius: float | None) -> ElementMeasures:
    rounds = [[_row(state, part, radius) for part in group.parts] for _ in range(group.times)]
    parts = [
        _told(part, _joined([passes[place] for passes in rounds])) for place, part in enumerate(group.parts)
    ]
    whole = _joined([row for passes in rounds for row in passes])
    shown = tuple(parts) if len(parts) > 1 else ()
    return replace(whole, name=group.name, kind=group.kind, detail=group.detail, parts=shown)


def _joined(rows: Sequence[ElementMeasures]) -> ElementMeasures:
    """One row, named as the first, for several in the order of the beam."""
    last = rows[-1]
    return replace(
        rows[0],
        group_delay_fs=summed(row.group_delay_fs for row in rows),
        gdd_fs2=summed(row.gdd_fs2 for row in rows),
        tod_fs3=summed(row.tod_fs3 for row in rows),
        fod_fs4=summed(row.fod_fs4 for row in rows),
        transmission=float(np.prod([row.transmission for row in rows])),
        gdd_sum_fs2=last.gdd_sum_fs2,
        tod_sum_fs3=last.tod_sum_fs3,
        fwhm_after_fs=last.fwhm_after_fs,
        peak_fluence_J_per_cm2=largest(row.peak_fluence_J_per_cm2 for row in rows),
        peak_intensity_W_per_cm2=largest(row.peak_intensity_W_per_cm2 for row in rows),
        b_integral_rad=summed(row.b_integral_rad for row in rows),
        digits=min(row.digits for row in rows),
    )


def summed(values: Iterable[float | None]) -> float | None:
    """The sum, or None where one of the values is unknown."""
    total = 0.0
    for value in values:
        if value is None:
            return None
        total += value
    return total


def largest(values: Iterable[float | None]) -> float | None:
    """The largest of those that are known, None where there is none."""
    return max((value for value in values if value is not None), default=None)


def _row_of_one(state: Walk, element: Element, radius: float | None) -> ElementMeasures:
    before = state.windows.after(state.passed - 1)
    grid = state.windows.after(state.passed)
    state.passed += 1
    energy_in = before.energy(state.spectrum)
    exponent = _exponent(state, element, before)
    b = _b_of(state, element, before, radius, exponent)
    peak_in = _peak_in(state, before) if radius else None
    state.advance(element, exponent, state.spectrum)
    _through_faces(state, element, exponent, grid)
    orders = _orders(element, state.omega)
    state.gdd = None if orders[1] is None or state.gdd is None else state.gdd + orders[1]
    state.tod = None if orders[2] is None or state.tod is None else state.tod + orders[2]
    energy_out = grid.energy(state.spectrum)
    if not energy_out > FAINTEST_ENERGY:
        raise InputError(
            "nothing leaves this element: it absorbs all light of the pulse",
            value=f"{element.name}, {element.detail}",
            allowed=f"energies above {FAINTEST_ENERGY:g} J",
            remedy="Check thickness and absorption, and their units",
            place=element.name,
        )
    return ElementMeasures(
        name=element.name,
        kind=element.kind,
        detail=element.detail,
        group_delay_fs=_scaled(orders[0], 1),
        gdd_fs2=_scaled(orders[1], 2),
        tod_fs3=_scaled(orders[2], 3),
        fod_fs4=_scaled(orders[3], 4),
        transmission=energy_out / energy_in,
        gdd_sum_fs2=_scaled(state.gdd, 2),
        tod_sum_fs3=_scaled(state.tod, 3),
        fwhm_after_fs=fwhm(grid.to_field(state.spectrum), grid.step) * FEMTO,
        peak_fluence_J_per_cm2=on_axis(energy_in, radius) * PER_CM2 if radius else None,
        peak_intensity_W_per_cm2=on_axis(peak_in, radius) * PER_CM2
        if radius and peak_in is not None
        else None,
        b_integral_rad=b,
        digits=_digits(element),
        echoes=_echoes(element, state.omega),
    )


def _orders(element: Element, omega: float) -> tuple[float | None, ...]:
    """Orders, None where they are not finite (a table that says nothing of them)."""
    return tuple(value if np.isfinite(value) else None for value in orders_of_element(element, omega))


def _scaled(value: float | None, order: int) -> float | None:
    return None if value is None else float(value * FEMTO**order)


def _exponent(state: Walk, element: Element, grid: Grid) -> Complex:
    """ln(transfer) of the direct passage on the frequencies; adds the element's group delay to the state."""
    exponent = np.zeros(grid.points, dtype=complex)
    for part in blocks(grid):
        series = element.exponent(2 * np.pi * grid.frequency[part], 2)
        exponent[part] = series[0]
        state.group_delay[part] += np.imag(series[1])
    return exponent


def _through_faces(state: Walk, element: Element, exponent: Complex, grid: Grid) -> None:
    """Apply what the faces do, and take the whole element into the transmission."""
    for part in blocks(grid):
        state.transmission[part] *= np.exp(2 * exponent[part].real)
        factor = element.factor(2 * np.pi * grid.frequency[part])
        if factor is not None:
            state.spectrum[part] *= factor
            state.transmission[part] *= np.abs(factor) ** 2


def _b_of(state: Walk, element: Element, grid: Grid, radius: float | None, exponent: Complex) -> float | None:
    if radius is None:
        return None
    if element.medium is None:
        return 0.0
    known = element.medium.nonlinear_index(state.omega)
    if known is None:
        return None
    coarse, every = coarser(grid, state.windows.needed)
    spectrum = state.spectrum[::every].copy()
    return b_integral(coarse, spectrum, exponent[::every], state.omega, known.value, radius, element.length)


def _peak_in(state: Walk, grid: Grid) -> float:
    coarse, every = coarser(grid, state.windows.needed)
    return peak_power(coarse, state.spectrum[::every])


def _digits(element: Element) -> int:
    medium = element.medium
    return FORMULA_DIGITS if medium is None or medium.printed_digits is None else medium.printed_digits


def _echoes(element: Element, omega: float) -> tuple[tuple[float, float], ...]:
    """Delay (fs) and share of the energy that leaves of the echoes, at the centre frequency."""
    if not isinstance(element, Slab) or element.faces != "echoes":
        return ()
    delay, ratio = element.echo(omega)
    strength = abs(ratio) ** 2
    found = []
    for trip in range(1, MOST_ECHOES + 1):
        share = (1 - strength) * strength**trip
        if share < FAINTEST_ECHO:
            break
        found.append((trip * delay * FEMTO, share))
    return tuple(found)
