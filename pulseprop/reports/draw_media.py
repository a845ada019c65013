"""Figures of what media are: index, GVD and absorption, and the susceptibility behind them."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.propagation.numerals import LONG_NM, terahertz
from pulseprop.propagation.result import Run
from pulseprop.reports.curves import thin_pairs
from pulseprop.reports.drawing import Drawing, source_line
from pulseprop.reports.figure_style import (
    COLOURS,
    Frame,
    canvas,
    decades,
    in_thousands,
    label_x,
    label_y,
    styled,
    words,
)
from pulseprop.reports.media_curves import ChiCurve, IndexCurve

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.ticker import FuncFormatter

__all__ = ["draw_media", "draw_susceptibility"]

Real = NDArray[np.float64]

THIN = 0.01
"""Below this, n - 1 is shown in place of n."""

ABSORBS = 1e-12
"""Below this, k and the imaginary part of chi are rounding."""

SIDE_BY_SIDE = 4
"""Names in a row of the legend."""

LINES = ("after", "warm", "green", "before", "ink")
STYLES = ("-", "--", "-.", ":")


def _look(number: int) -> dict[str, Any]:
    """Colour and style of the line of a medium: twenty differ."""
    return {
        "color": COLOURS[LINES[number % len(LINES)]],
        "linestyle": STYLES[(number + number // len(LINES)) % len(STYLES)],
    }


def _legend(panel: Axes, count: int) -> None:
    panel.legend(
        loc="lower left",
        bbox_to_anchor=(-0.02, 1.0),
        ncols=min(count, SIDE_BY_SIDE),
        borderaxespad=0.1,
        handlelength=2.6,
    )


def _top(count: int) -> float:
    """Upper edge of the panels that leaves room for the rows of a legend."""
    return 0.985 - 0.052 * -(-count // SIDE_BY_SIDE)


@styled
def draw_media(curves: Sequence[IndexCurve], source: str) -> Drawing:
    """Index, GVD and absorption of media over wavelength."""
    absorbs = any(float(np.max(curve.k, initial=0.0)) > ABSORBS for curve in curves)
    heights = (1.0,) * (3 if absorbs else 2)
    figure, panels = canvas(heights, source=source, frame=Frame(top=_top(len(curves)), gap=0.16))
    long_waves = max(float(curve.wavelength_nm.max()) for curve in curves) >= LONG_NM
    shift, factor, label = _index_axis(curves)
    slope, steep = _gvd_axis(curves)
    for number, curve in enumerate(curves):
        k = np.where(curve.k > 0, curve.k, np.nan)
        columns = ((curve.excess + shift) * factor, curve.gvd * slope, k)
        for panel, values in zip(panels, columns, strict=False):
            place = terahertz(1.0) / curve.wavelength_nm if long_waves else curve.wavelength_nm
            panel.plot(place, values, label=words(curve.name), **_look(number))
    label_y(panels[0], label)
    label_y(panels[1], steep)
    if absorbs:
        label_y(panels[2], "k")
        decades(panels[2], 5)
    for panel in panels:
        panel.margins(x=0)
    for panel in panels[:-1]:
        panel.tick_params(labelbottom=False)
    label_x(panels[-1], "frequency, THz" if long_waves else "vacuum wavelength, nm")
    _legend(panels[0], len(curves))
    caption = "Index and group-velocity dispersion of the media" + (", and their k." if absorbs else ".")
    return Drawing(name="media", caption=caption, figure=figure, columns=dict(_media_columns(curves)))


def _index_axis(curves: Sequence[IndexCurve]) -> tuple[float, float, str]:
    """What to add to n - 1 and to multiply it with, and what the axis then shows."""
    largest = max(float(np.abs(curve.excess).max()) for curve in curves)
    if largest > THIN:
        return 1.0, 1.0, "index n"
    factor, unit = in_thousands(largest)
    return 0.0, factor, f"n − 1, {unit}" if unit else "n − 1"


def _gvd_axis(curves: Sequence[IndexCurve]) -> tuple[float, str]:
    """Steep media are shown in ps^2."""
    largest = max(float(np.abs(curve.gvd).max()) for curve in curves)
    return (1.0, "GVD, fs²/mm") if largest < 1e5 else (1e-6, "GVD, ps²/mm")


def _media_columns(curves: Sequence[IndexCurve]) -> Iterator[tuple[str, Real]]:
    for curve in curves:
        yield f"wavelength_nm ({curve.name})", curve.wavelength_nm
        yield f"n_minus_1 ({curve.name})", curve.excess
        yield f"k ({curve.name})", curve.k
        yield f"gvd_fs2_per_mm ({curve.name})", curve.gvd


@styled
def draw_susceptibility(run: Run, curves: Sequence[ChiCurve], line: ChiCurve | None) -> Drawing:
    """Real and imaginary part of chi over the pulse's band, and about the strongest line in it."""
    absorbs = any(float(np.abs(curve.chi.imag).max()) > ABSORBS for curve in curves)
    figure, panels = canvas(
        (1.0, 1.0) if absorbs else (1.0,),
        source=source_line(run),
        frame=Frame(top=_top(len(curves)), gap=0.16),
        widths=(1.0,) if line is None else (1.7, 1.0),
    )
    band = panels[:: 1 if line is None else 2]
    for number, curve in enumerate(curves):
        _parts(band, curve.frequency, curve, words(curve.name), **_look(number))
    _axes(band, curves, "frequency, THz")
    _pulse(band[0], run)
    _legend(band[0], len(curves))
    if line is not None:
        _line(panels[1::2], line, [curve.name for curve in curves].index(line.name))
    if not absorbs:
        label_y(band[0], "Re χ  (Im χ = 0)")
    caption = (
        "Susceptibility chi of the media over the pulse's band, real "
        + ("and imaginary part" if absorbs else "part (the imaginary part is zero)")
        + (f"; beside it the strongest line, of {line.name}" if line is not None else "")
        + ". Grey: the spectrum of the pulse that enters."
    )
    return Drawing(
        name="susceptibility", caption=caption, figure=figure, columns=dict(_chi_columns(curves, line))
    )


def _parts(panels: Sequence[Axes], x: Real, curve: ChiCurve, label: str = "", **look: Any) -> None:
    for panel, values in zip(panels, (curve.chi.real, curve.chi.imag), strict=False):
        panel.plot(x, values, label=label, **look)


def _axes(panels: Sequence[Axes], curves: Sequence[ChiCurve], across: str) -> None:
    for panel, part in zip(panels, ("real", "imag"), strict=False):
        largest = max(float(np.abs(getattr(curve.chi, part)).max()) for curve in curves)
        factor, unit = in_thousands(largest)
        name = "Re χ" if part == "real" else "Im χ"
        label_y(panel, f"{name}, {unit}" if unit else name)
        panel.yaxis.set_major_formatter(_times(factor))
        panel.margins(x=0)
    for panel in panels[:-1]:
        panel.tick_params(labelbottom=False)
    label_x(panels[-1], across)


def _times(factor: float) -> FuncFormatter:
    from matplotlib.ticker import FuncFormatter

    return FuncFormatter(lambda value, _: f"{value * factor:g}".replace("-", "−"))


def _pulse(panel: Axes, run: Run) -> None:
    """The spectrum of the pulse behind the curves, from the floor of the panel to its ceiling."""
    fields, (low, high) = run.fields, panel.get_xlim()
    frequency = fields.grid_in.frequency * 1e-12
    seen = (frequency >= low) & (frequency <= high)
    strength = np.abs(fields.spectrum_in[seen]) ** 2
    x, y = thin_pairs(frequency[seen], strength / max(float(strength.max(initial=0.0)), 1e-300), 400)
    panel.fill_between(
        x, 0, y, transform=panel.get_xaxis_transform(), color=COLOURS["before"], alpha=0.16, linewidth=0
    )


def _line(panels: Sequence[Axes], line: ChiCurve, number: int) -> None:
    """The line over its distance from the centre, in a unit of the size of its width."""
    centre = float(line.frequency[line.frequency.size // 2])
    reach = float(line.frequency[-1]) - centre
    scale, unit = next(
        (scale, unit)
        for scale, unit in ((1.0, "THz"), (1e3, "GHz"), (1e6, "MHz"), (1e9, "kHz"))
        if reach * scale >= 1 or unit == "kHz"
    )
    _parts(panels, (line.frequency - centre) * scale, line, **_look(number))
    _axes(panels, [line], f"{unit} from {centre:.6g} THz")
    for panel in panels:
        panel.set_ylabel("")
        panel.locator_params(axis="x", nbins=4)


def _chi_columns(curves: Sequence[ChiCurve], line: ChiCurve | None) -> Iterator[tuple[str, Real]]:
    named = [(curve, curve.name) for curve in curves]
    if line is not None:
        named.append((line, f"line of {line.name}"))
    for curve, name in named:
        yield f"frequency_THz ({name})", curve.frequency
        yield f"chi_real ({name})", curve.chi.real
        yield f"chi_imag ({name})", curve.chi.imag
