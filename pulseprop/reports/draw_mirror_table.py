"""The figure of a mirror or coating table: its columns over wavelength, rows named by an error marked."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from pulseprop.reports.drawing import Drawing
from pulseprop.reports.figure_style import COLOURS, Frame, canvas, label_x, label_y, words
from pulseprop.vetting.mirror_rows import FEMTO, WORDS
from pulseprop.vetting.result import Vetted

if TYPE_CHECKING:
    from matplotlib.axes import Axes

__all__ = ["draw_mirror_table"]

SYMBOLS = {
    "reflectance": "R",
    "transmittance": "T",
    "phase": "phase",
    "group_delay": "delay",
    "gdd": "GDD",
    "mirror_tod": "TOD",
}
"""Short, for panels of little height."""

MARK = 160.0
"""Area of the ring around a row."""


def draw_mirror_table(vetted: Vetted, name: str, source: str) -> Drawing | None:
    """A panel a column; None where no column could be read."""
    shown = [quantity for quantity in WORDS if quantity in vetted.curves]
    if not shown:
        return None
    figure, panels = canvas((1.0,) * len(shown), source=source, frame=Frame(left=0.14, top=0.95, gap=0.2))
    rows = {row for finding in vetted.findings if finding.severity == "error" for row in finding.rows}
    for quantity, panel in zip(shown, panels, strict=True):
        place, values = vetted.curves[f"{quantity}_nm"], vetted.curves[quantity]
        panel.plot(place, values, ".-", color=COLOURS["after"], linewidth=1.4, markersize=6)
        label_y(panel, words(f"{SYMBOLS[quantity]}, {_unit(FEMTO[quantity][1])}"))
        _marked(panel, vetted, quantity, rows)
        panel.margins(x=0.02)
    for panel in panels[:-1]:
        panel.tick_params(labelbottom=False)
    label_x(panels[-1], "vacuum wavelength, nm")
    caption = f"The table as it was read: {', '.join(WORDS[quantity] for quantity in shown)}"
    caption += "; rows named by an error are ringed." if rows else "."
    columns = {
        f"{quantity}{part}": vetted.curves[f"{quantity}{part}"] for quantity in shown for part in ("_nm", "")
    }
    return Drawing(name=name, caption=caption, figure=figure, columns=columns)


def _unit(unit: str) -> str:
    return unit.replace("^2", "²").replace("^3", "³")


def _marked(panel: Axes, vetted: Vetted, quantity: str, rows: set[int]) -> None:
    """Rings around rows of the file that an error names, where the answer knows their lines."""
    lines = vetted.curves.get(f"{quantity}_row")
    if lines is None or not rows:
        return
    named = np.isin(lines, sorted(rows))
    panel.scatter(
        vetted.curves[f"{quantity}_nm"][named],
        vetted.curves[quantity][named],
        s=MARK,
        facecolors="none",
        edgecolors=COLOURS["warm"],
        linewidths=2.2,
    )
