"""How every figure looks: colours, type, the small print, and the file formats.

16:9 and type large enough to be read at four metres on a wall. Blue against ochre, with grey for what was
before, stays apart for all common kinds of colour vision and in print; styles of line differ as well.
"""

from __future__ import annotations

import io
import math
import re
import warnings
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from functools import wraps
from pathlib import Path
from typing import TYPE_CHECKING, Any, NamedTuple, ParamSpec, TypeVar

from pulseprop.reports.document import written_whole

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.axis import Axis
    from matplotlib.figure import Figure

__all__ = [
    "COLOURS",
    "Frame",
    "canvas",
    "decades",
    "in_thousands",
    "inline_svg",
    "label_x",
    "label_y",
    "night_map",
    "power_of_ten",
    "save_png",
    "styled",
    "svg_document",
    "svg_of",
    "words",
]

Words = ParamSpec("Words")
Drawn = TypeVar("Drawn")

COLOURS = {
    "ink": "#22303c",
    "faint": "#c3ccd4",
    "before": "#5f6a73",
    "after": "#1b5e92",
    "warm": "#a8580a",
    "green": "#2b7d6d",
}
"""Names by meaning; a page replaces each by a style variable of the same name."""

SIZE = (12.8, 7.2)
DOTS_PER_INCH = 150

COMPRESSION = 1
"""Of a picture: half the time of the usual 6 for a fifth more bytes."""

MOST_ACROSS, MOST_UP = 7, 5
"""Intervals of an axis: few enough to be read from the back of a room."""

STEPS = (1, 2, 2.5, 5, 10)

TO_THE_LEFT, TO_THE_RIGHT = 0.092, 0.085
"""From a panel to the labels of its vertical axes, in shares of the figure."""

RAISED = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")

STYLE = {
    "font.family": "sans-serif",
    "font.size": 19,
    "axes.titlesize": 21,
    "axes.titlelocation": "left",
    "axes.titlepad": 14,
    "axes.titley": 1.0,
    "axes.labelsize": 19,
    "axes.titleweight": "bold",
    "axes.edgecolor": COLOURS["ink"],
    "axes.labelcolor": COLOURS["ink"],
    "axes.titlecolor": COLOURS["ink"],
    "axes.linewidth": 1.2,
    "axes.spines.top": False,
    "axes.spines.right": False,
    "axes.grid": False,
    "text.color": COLOURS["ink"],
    "xtick.color": COLOURS["ink"],
    "ytick.color": COLOURS["ink"],
    "xtick.labelsize": 17,
    "ytick.labelsize": 17,
    "xtick.major.size": 6,
    "ytick.major.size": 6,
    "lines.linewidth": 2.6,
    "legend.frameon": False,
    "legend.labelcolor": COLOURS["ink"],
    "legend.fontsize": 17,
    "axes.unicode_minus": True,
    "axes.formatter.useoffset": False,
}


class Frame(NamedTuple):
    """Margins of the panels in shares of the figure; between them, in shares of their mean height and width.

    They are fixed: pictures that follow each other on a wall keep their axes in one place, and no layout has
    to be searched for.
    """

    left: float = 0.125
    right: float = 0.975
    top: float = 0.905
    bottom: float = 0.15
    gap: float = 0.12
    beside: float = 0.3


def canvas(
    heights: tuple[float, ...] = (1.0,),
    *,
    source: str,
    frame: Frame = Frame(),  # noqa: B008 - a tuple, never changed
    widths: tuple[float, ...] = (1.0,),
) -> tuple[Figure, list[Axes]]:
    """A figure with panels, row by row, and its source in small print."""
    from matplotlib.figure import Figure
    from matplotlib.ticker import MaxNLocator

    figure = Figure(figsize=SIZE, facecolor="none")
    grid = figure.add_gridspec(
        len(heights),
        len(widths),
        height_ratios=heights,
        width_ratios=widths,
        left=frame.left,
        right=frame.right,
        top=frame.top,
        bottom=frame.bottom,
        hspace=frame.gap,
        wspace=frame.beside,
    )
    panels = [
        figure.add_subplot(grid[row, column], facecolor="none")
        for row in range(len(heights))
        for column in range(len(widths))
    ]
    for panel in panels:
        panel.xaxis.set_major_locator(MaxNLocator(MOST_ACROSS, steps=STEPS))
        panel.yaxis.set_major_locator(MaxNLocator(MOST_UP, steps=STEPS))
    figure.text(0.012, 0.012, words(source), fontsize=11, color=COLOURS["before"], va="bottom")
    return figure, panels


def label_x(panel: Axes, text: str) -> None:
    """Label of the horizontal axis, at its place."""
    place = panel.get_position()
    panel.set_xlabel(text)
    _put(panel.xaxis, (place.x0 + place.x1) / 2, place.y0 - 0.057)


def label_y(panel: Axes, text: str, colour: str = "ink", *, right: bool = False) -> None:
    """Label of the vertical axis; those of all panels stand in one line."""
    place = panel.get_position()
    panel.set_ylabel(text, color=COLOURS[colour])
    edge = place.x1 + TO_THE_RIGHT if right else place.x0 - TO_THE_LEFT
    _put(panel.yaxis, edge, (place.y0 + place.y1) / 2)


def _put(axis: Axis, x: float, y: float) -> None:
    """The label of an axis at a place of the figure, whatever its marks take up."""
    figure = axis.get_figure()
    assert figure is not None
    axis.set_label_coords(x, y, transform=figure.transFigure)


def decades(panel: Axes, marks: int = 7) -> None:
    """A logarithmic vertical axis with at most so many powers of ten."""
    from matplotlib.ticker import FuncFormatter, LogLocator, NullLocator

    panel.set_yscale("log")
    panel.yaxis.set_major_locator(LogLocator(numticks=marks))
    panel.yaxis.set_minor_locator(NullLocator())
    panel.yaxis.set_major_formatter(FuncFormatter(lambda value, _: power_of_ten(round(math.log10(value)))))


def power_of_ten(exponent: int) -> str:
    """10 with a small raised exponent."""
    return "10" + str(exponent).translate(RAISED)


def in_thousands(largest: float) -> tuple[float, str]:
    """A factor that brings numbers up to `largest` to a readable size, and what to say for a unit then."""
    if largest == 0 or not math.isfinite(largest) or 1e-2 <= largest < 1e5:
        return 1.0, ""
    exponent = 3 * math.floor(math.log10(largest) / 3)
    return 10.0**-exponent, power_of_ten(exponent)


def styled(draw: Callable[Words, Drawn]) -> Callable[Words, Drawn]:
    """Let everything a function draws have the style, legends and twin axes that come late included."""

    @wraps(draw)
    def drawn(*given: Words.args, **named: Words.kwargs) -> Drawn:
        with _in_style():
            return draw(*given, **named)

    return drawn


def night_map() -> Any:
    """A sequential map of rising lightness, dark where nothing is: the same on light and on dark pages."""
    from matplotlib.colors import LinearSegmentedColormap

    stops = ["#0f1a24", "#163a5a", "#1f6a8c", "#4aa08f", "#b9c46a", "#fbf3c4"]
    return LinearSegmentedColormap.from_list("night", stops)


@contextmanager
def _in_style(**more: str) -> Iterator[None]:
    """The style while it draws. A name in a script that the font lacks becomes boxes, without a complaint."""
    from matplotlib import rc_context

    with rc_context({**STYLE, **more}), warnings.catch_warnings():
        warnings.filterwarnings("ignore", message="Glyph .* missing from")
        yield


def words(text: str) -> str:
    """Text of a scenario as it stands: no formula, no control characters, never taken for a hidden label."""
    text = re.sub(r"[\x00-\x1f\x7f-\x9f]", "\ufffd", text).replace("$", r"\$")
    return f" {text}" if text.startswith("_") else text


def save_png(figure: Figure, path: Path) -> Path:
    """A picture of 1920 x 1080 dots on white."""

    def write(target: Path) -> None:
        with _in_style():
            figure.savefig(
                target,
                format="png",
                dpi=DOTS_PER_INCH,
                facecolor="white",
                pil_kwargs={"compress_level": COMPRESSION},
            )

    return written_whole(path, write)


def svg_of(figure: Figure, name: str) -> str:
    """The drawing as an SVG element on nothing. Text stays text: small, searchable, open to change."""
    buffer = io.StringIO()
    with _in_style(**{"svg.fonttype": "none", "svg.hashsalt": name}):
        figure.savefig(buffer, format="svg", facecolor="none", metadata={"Date": None, "Creator": None})
    text = buffer.getvalue()
    return re.sub(r"<metadata>.*?</metadata>", "", text[text.index("<svg") :], flags=re.DOTALL)


def svg_document(svg: str) -> str:
    """The drawing as a file of its own, on white."""
    start = svg.index(">") + 1
    paper = '<rect width="100%" height="100%" fill="#ffffff"/>'
    return f'<?xml version="1.0" encoding="utf-8" standalone="no"?>\n{svg[:start]}{paper}{svg[start:]}'


def inline_svg(svg: str, name: str) -> str:
    """The drawing for a page: no outside references, colours as style variables, its own ids."""
    text = svg
    for size in ("width", "height"):
        text = re.sub(rf'(<svg[^>]*?) {size}="[^"]*"', r"\1", text, count=1)
    text = re.sub(r'(\bid="|url\(#|href="#)', rf"\1{name}-", text)
    for meaning, colour in COLOURS.items():
        text = text.replace(colour, f"var(--{meaning})")
    return text
