"""The figure of a table that no material was fitted to, a mirror's or an absorption: its columns as read."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.reports.drawing import Drawing
from pulseprop.reports.figure_style import COLOURS, Frame, canvas, label_x, label_y
from pulseprop.vetting.result import Vetted

if TYPE_CHECKING:
    from matplotlib.axes import Axes

__all__ = ["draw_columns"]

LABELS: dict[str, tuple[str, str, float]] = {
    "n": ("index", "index n", 1.0),
    "reflectance": ("reflectance", "R, %", 1.0),
    "transmittance": ("transmittance", "T, %", 1.0),
    "phase": ("phase", "phase, rad", 1.0),
    "group_delay": ("group delay", "delay, fs", 1.0),
    "gdd": ("GDD", "GDD, fs²", 1.0),
    "mirror_tod": ("TOD", "TOD, fs³", 1.0),
    "absorbance": ("absorbance", "absorbance", 1.0),
    "napierian": ("Napierian absorbance", "ln(1/T)", 1.0),
    "internal_transmittance": ("internal transmittance", "T inside", 1.0),
    "alpha": ("absorption", "alpha, 1/mm", 1e-3),
    "k": ("k", "k", 1.0),
}
"""Words, label of the axis, and what a value is multiplied with for it."""

CEILING = "instrument-ceiling"
"""Code of the finding that names rows which are lower limits."""

MARK = 160.0
"""Area of the ring around a row."""


def draw_columns(vetted: Vetted, name: str, source: str) -> Drawing | None:
    """A panel a column, rows named by an error ringed; None where no column could be read."""
    shown = [quantity for quantity in LABELS if f"{quantity}_nm" in vetted.curves]
    if not shown:
        return None
    figure, panels = canvas((1.0,) * len(shown), source=source, frame=Frame(left=0.14, top=0.95, gap=0.2))
    wrong = _rows(vetted, lambda finding: finding.severity == "error")
    limits = _rows(vetted, lambda finding: finding.code == CEILING)
    columns: dict[str, NDArray[np.float64]] = {}
    for quantity, panel in zip(shown, panels, strict=True):
        place = vetted.curves[f"{quantity}_nm"]
        values = vetted.curves[quantity] * LABELS[quantity][2]
        columns[f"{quantity}_nm"], columns[quantity] = place, values
        panel.plot(place, values, ".-", color=COLOURS["after"], linewidth=1.4, markersize=6)
        label_y(panel, LABELS[quantity][1])
        lines = vetted.curves.get(f"{quantity}_row", np.zeros(len(place), dtype=np.int64))
        _ringed(panel, place, values, np.isin(lines, wrong))
        _pointed(panel, place, values, np.isin(lines, limits))
        panel.margins(x=0.02)
    for panel in panels[:-1]:
        panel.tick_params(labelbottom=False)
    label_x(panels[-1], "vacuum wavelength, nm")
    caption = f"The table as it was read: {', '.join(LABELS[quantity][0] for quantity in shown)}"
    caption += "; rows named by an error are ringed" if wrong else ""
    caption += "; triangles are lower limits" if limits else ""
    return Drawing(name=name, caption=f"{caption}.", figure=figure, columns=columns)


def _rows(vetted: Vetted, wanted: Any) -> list[int]:
    """Lines of the file that the wanted findings name."""
    return sorted({row for finding in vetted.findings if wanted(finding) for row in finding.rows})


def _ringed(panel: Axes, place: Any, values: Any, chosen: NDArray[np.bool_]) -> None:
    if chosen.any():
        panel.scatter(
            place[chosen],
            values[chosen],
            s=MARK,
            facecolors="none",
            edgecolors=COLOURS["warm"],
            linewidths=2.2,
        )


def _pointed(panel: Axes, place: Any, values: Any, chosen: NDArray[np.bool_]) -> None:
    if chosen.any():
        panel.plot(place[chosen], values[chosen], "^", color=COLOURS["warm"], markersize=10)
