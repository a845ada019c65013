"""Figures of a compensation: the pulse today and then, the phase that is left, the mirror to be ordered."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.result import Compensation, Design, MirrorOrder
from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.propagation.numerals import scaled, span
from pulseprop.propagation.result import Fields, Run
from pulseprop.reports.curves import UNITS, bounds_of, pulse_curve, thin_pairs
from pulseprop.reports.draw_autocorrelation import draw_autocorrelation
from pulseprop.reports.draw_band import draw_budget
from pulseprop.reports.drawing import Drawing, source_line
from pulseprop.reports.figure_style import COLOURS, Frame, canvas, label_x, label_y, styled, words

__all__ = ["compensation_drawings"]

Real = NDArray[np.float64]

SEEN = 2e-3
"""Power over the peak from which on a pulse is seen on a linear axis."""

WIDEST = 40.0
"""Widths of the compensated pulse that the axis of time shows at most; today's pulse is cut there."""

BRIGHT = 1e-2
"""Share of the spectrum's peak from which on the phase that is left is drawn."""

POINTS = 1600


def compensation_drawings(answer: Compensation, run: Run) -> Iterator[Drawing]:
    """All figures that have something to show; run: the best design, sent in full."""
    yield _pulses(answer, run)
    yield _phase(answer.designs[0], run)
    for number, mirror in enumerate(answer.designs[0].mirrors, 1):
        yield _order(mirror, "" if number == 1 else f"-{number}", run)
    if run.elements:
        yield draw_budget(run)
    yield draw_autocorrelation(run)


@styled
def _pulses(answer: Compensation, run: Run) -> Drawing:
    """Power over time today and with design 1, each over the peak of the limit of what leaves."""
    best = answer.designs[0]
    reach = min(_reach(answer.before.fields), WIDEST * best.fwhm_fs / UNITS)
    reach = max(reach, 1.2 * _reach(best.fields))
    unit, factor = scaled([2 * UNITS * reach])
    figure, panels = canvas(source=source_line(run), frame=Frame(top=0.86))
    columns: dict[str, Real] = {}
    for colour, style, name, state in (
        ("before", "--", "today", answer.before),
        ("after", "-", "design 1", best),
    ):
        half = min(reach, 0.45 * state.fields.grid_out.span)
        curve = pulse_curve(state.fields.grid_out, state.fields.envelope_out, half, half)
        share = curve.power / curve.power.max() * state.peak_ratio
        label = f"{name}: {span(state.fwhm_fs, 3)}"
        panels[0].plot(curve.time * UNITS * factor, share, style, color=COLOURS[colour], label=label)
        columns |= {f"time_fs ({name})": curve.time * UNITS, f"power_over_limit ({name})": share}
    panels[0].set_xlim(-reach * UNITS * factor, reach * UNITS * factor)
    panels[0].set_ylim(0, 1.05)
    panels[0].legend(loc="upper right")
    label_x(panels[0], f"time from the peak of each pulse, {unit}")
    label_y(panels[0], "power over the limit's peak")
    caption = (
        "The pulse at the end of the path today and with design 1, over the peak power of its own limit."
    )
    return Drawing(name="compensated", caption=caption, figure=figure, columns=columns)


def _reach(fields: Fields) -> float:
    return 1.1 * max(bounds_of(fields.envelope_out, fields.grid_out.step, SEEN)[1:])


@styled
def _phase(design: Design, run: Run) -> Drawing:
    """Spectrum that leaves, and the phase left over beyond a constant and a delay."""
    frequency, power, phase = residual_phase(design.fields)
    wavelength = SPEED_OF_LIGHT / frequency * 1e9
    figure, panels = canvas(source=source_line(run), frame=Frame(right=0.885))
    panel = panels[0]
    x, y = thin_pairs(wavelength, power, POINTS)
    panel.fill_between(x, 0, y, color=COLOURS["before"], alpha=0.2, linewidth=0)
    label_y(panel, "spectrum over its peak", "before")
    panel.set_ylim(0, 1.05)
    second = panel.twinx()
    second.spines["right"].set_visible(True)
    x, y = thin_pairs(wavelength, phase, POINTS)
    second.plot(x, y, color=COLOURS["after"])
    largest = max(0.2, 1.15 * float(np.abs(phase).max()))
    second.set_ylim(-largest, largest)
    label_y(second, "phase left, rad", "after", right=True)
    panel.set_xlim(float(wavelength.min()), float(wavelength.max()))
    label_x(panel, "vacuum wavelength, nm")
    caption = (
        "Design 1: the spectrum that leaves (grey) and the spectral phase that is left beyond a constant "
        "and a delay (line)."
    )
    columns = {"wavelength_nm": wavelength, "spectrum_over_peak": power, "phase_rad": phase}
    return Drawing(name="residual-phase", caption=caption, figure=figure, columns=columns)


def residual_phase(fields: Fields) -> tuple[Real, Real, Real]:
    """Frequency in Hz, power over its peak, and phase in rad beyond the straight line that fits best."""
    spectrum, grid = fields.spectrum_out, fields.grid_out
    power = spectrum.real**2 + spectrum.imag**2
    power = power / power.max()
    bright = np.flatnonzero(power >= BRIGHT)
    part = slice(int(bright[0]), int(bright[-1]) + 1)
    frequency, weight = grid.frequency[part], power[part]
    # About the instant of the pulse's centroid the phase turns little from sample to sample.
    turned = spectrum[part] * np.exp(-2j * np.pi * frequency * grid.start)
    middle = int(np.argmax(weight))
    step = np.angle(np.sum(turned[1:] * np.conj(turned[:-1])))
    phase = np.unwrap(np.angle(turned * np.exp(-1j * step * (np.arange(turned.size) - middle))))
    slope, offset = np.polyfit(frequency - frequency[middle], phase, 1, w=np.sqrt(weight))
    return frequency, weight, phase - slope * (frequency - frequency[middle]) - offset


@styled
def _order(order: MirrorOrder, ending: str, run: Run) -> Drawing:
    """The target of a mirror over wavelength with its band."""
    figure, panels = canvas(source=source_line(run))
    panel = panels[0]
    panel.fill_between(
        order.wavelength_nm, order.low_fs2, order.high_fs2, color=COLOURS["after"], alpha=0.18, linewidth=0,
        label="band",
    )  # fmt: skip
    panel.plot(order.wavelength_nm, order.gdd_fs2, color=COLOURS["after"], label="target")
    panel.plot(order.wavelength_nm, order.ideal_gdd_fs2, "--", color=COLOURS["warm"], label="ideal")
    panel.set_title(words(f"{order.element}, one bounce"))
    panel.margins(x=0)
    panel.legend(loc="best")
    label_x(panel, "vacuum wavelength, nm")
    label_y(panel, "GDD, fs²")
    caption = (
        f"Target GDD of one bounce of {order.element} with the band within which it must stay, and the GDD "
        "that would leave no phase at all."
    )
    columns = {
        "wavelength_nm": order.wavelength_nm,
        "target_gdd_fs2": order.gdd_fs2,
        "lowest_gdd_fs2": order.low_fs2,
        "highest_gdd_fs2": order.high_fs2,
        "ideal_gdd_fs2": order.ideal_gdd_fs2,
    }
    return Drawing(name=f"mirror-order{ending}", caption=caption, figure=figure, columns=columns)
