"""How every figure looks: colours, type, the small print, and the file formats.

16:9 and type large enough to be read at four metres on a wall. Blue against ochre, with grey for what was
before, stays apart for all common kinds of colour vision and in print; styles of line differ as well.
"""

from __future__ import annotations

import io
import re
import warnings
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from functools import wraps
from pathlib import Path
from typing import TYPE_CHECKING, Any, ParamSpec

from pulseprop.reports.document import written_whole
from pulseprop.reports.drawing import Drawing

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

__all__ = ["COLOURS", "canvas", "inline_svg", "night_map", "save_png", "save_svg", "styled", "words"]

Words = ParamSpec("Words")

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

STYLE = {
    "font.family": "sans-serif",
    "font.size": 19,
    "axes.titlesize": 21,
    "axes.titlelocation": "left",
    "axes.titlepad": 14,
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


def canvas(heights: tuple[float, ...] = (1.0,), *, source: str) -> tuple[Figure, list[Axes]]:
    """A figure with panels above each other and its source in small print."""
    from matplotlib.figure import Figure
    from matplotlib.layout_engine import ConstrainedLayoutEngine

    layout = ConstrainedLayoutEngine(rect=(0.0, 0.045, 1.0, 0.945), w_pad=0.15, h_pad=0.1)
    figure = Figure(figsize=SIZE, layout=layout, facecolor="none")
    grid = figure.add_gridspec(len(heights), 1, height_ratios=heights)
    panels = [figure.add_subplot(grid[row, 0], facecolor="none") for row in range(len(heights))]
    figure.text(0.012, 0.012, words(source), fontsize=11, color=COLOURS["before"], va="bottom")
    return figure, panels


def styled(draw: Callable[Words, Drawing]) -> Callable[Words, Drawing]:
    """Let everything a function draws have the style, legends and twin axes that come late included.

    The panels are laid out once, and not again for every format in which the figure is saved.
    """

    @wraps(draw)
    def drawn(*given: Words.args, **named: Words.kwargs) -> Drawing:
        with _in_style():
            drawing = draw(*given, **named)
            drawing.figure.draw_without_rendering()
            drawing.figure.set_layout_engine("none")
            return drawing

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
            figure.savefig(target, format="png", dpi=DOTS_PER_INCH, facecolor="white")

    return written_whole(path, write)


def save_svg(figure: Figure, path: Path) -> Path:
    """A drawing whose letters are outlines, so that it looks alike everywhere."""

    def write(target: Path) -> None:
        with _in_style(**{"svg.fonttype": "path", "svg.hashsalt": path.stem}):
            figure.savefig(target, format="svg", facecolor="white", metadata={"Date": None})

    return written_whole(path, write)


def inline_svg(figure: Figure, name: str) -> str:
    """The drawing as markup for a page: no outside references, colours as style variables, its own ids.

    Text stays text: small, searchable, and read aloud.
    """
    buffer = io.StringIO()
    with _in_style(**{"svg.fonttype": "none", "svg.hashsalt": name}):
        figure.savefig(buffer, format="svg", facecolor="none", metadata={"Date": None, "Creator": None})
    text = buffer.getvalue()
    text = text[text.index("<svg") :]
    text = re.sub(r"<metadata>.*?</metadata>", "", text, flags=re.DOTALL)
    for size in ("width", "height"):
        text = re.sub(rf'(<svg[^>]*?) {size}="[^"]*"', r"\1", text, count=1)
    text = re.sub(r'(\bid="|url\(#|href="#)', rf"\1{name}-", text)
    for meaning, colour in COLOURS.items():
        text = text.replace(colour, f"var(--{meaning})")
    return text
