"""The figure of a vetted table: the numbers, the material that fits them best, and the rows in conflict."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from pulseprop.reports.drawing import Drawing
from pulseprop.reports.figure_style import COLOURS, Frame, canvas, decades, label_x, label_y, styled
from pulseprop.vetting.result import Vetted

if TYPE_CHECKING:
    from matplotlib.axes import Axes

__all__ = ["draw_vet"]

Real = NDArray[np.float64]

SMALLEST, LARGEST = 60.0, 500.0
"""Area of the mark of a row in conflict, by its weight."""


@styled
def draw_vet(vetted: Vetted, number: int) -> Drawing | None:
    """Values over wavelength, and their distance from the best material in units of the uncertainty.

    None where there is nothing to draw. number: of the file, for the figure's name.
    """
    curves: Mapping[str, Real] = vetted.curves
    quantities = [name for name in ("n", "k") if f"{name}_nm" in curves]
    if not quantities:
        return None
    heights = tuple(height for _ in quantities for height in (1.5, 1.0))
    figure, panels = canvas(heights, source=_source(vetted), frame=Frame(top=0.93, gap=0.16))
    for at, name in enumerate(quantities):
        _values(panels[2 * at], name, curves)
        _distances(panels[2 * at + 1], name, curves, vetted)
    for panel in panels[:-1]:
        panel.tick_params(labelbottom=False)
    label_x(panels[-1], "vacuum wavelength, nm")
    _share_stretch(panels, curves, quantities)
    caption = (
        "Printed values, the passive causal material that fits them best, and the distance between the two "
        "in units of the uncertainty"
    )
    caption += "; rows in conflict are marked by their weight." if vetted.conflict else "."
    return Drawing(name=f"table-{number + 1}", caption=caption, figure=figure, columns=dict(curves))


def _source(vetted: Vetted) -> str:
    text = f"{vetted.file} · SHA-256 {vetted.sha256[:16]} · {vetted.date} · pulseprop {vetted.version}"
    return text if len(text) <= 150 else text[-150:]


def _values(panel: Axes, name: str, curves: Mapping[str, Real]) -> None:
    place, values = curves[f"{name}_nm"], curves[name]
    panel.plot(place, values, ".", color=COLOURS["before"], markersize=8, label="printed")
    if f"{name}_model" in curves:
        panel.plot(
            curves[f"{name}_model_nm"],
            curves[f"{name}_model"],
            color=COLOURS["after"],
            label="best passive causal material",
        )
    if name == "k" and np.all(values > 0) and np.ptp(np.log10(values)) > 2:
        decades(panel, 5)
    label_y(panel, "index n" if name == "n" else "k")
    panel.legend(loc="best")


def _distances(panel: Axes, name: str, curves: Mapping[str, Real], vetted: Vetted) -> None:
    place, distance = curves[f"{name}_nm"], curves[f"{name}_distance"]
    panel.axhspan(-1, 1, color=COLOURS["faint"], alpha=0.6, linewidth=0)
    panel.plot(place, distance, ".-", color=COLOURS["before"], linewidth=1.2, markersize=7)
    entries = [entry for entry in vetted.conflict if entry.quantity == name]
    if entries:
        heaviest = max(abs(entry.weight) for entry in vetted.conflict)
        at = np.array([entry.wavelength_nm for entry in entries])
        nearest = np.argmin(np.abs(place[:, None] - at), axis=0)
        area = [SMALLEST + LARGEST * abs(entry.weight) / heaviest for entry in entries]
        panel.scatter(
            place[nearest],
            distance[nearest],
            s=area,
            facecolors="none",
            edgecolors=COLOURS["warm"],
            linewidths=2.2,
        )
    largest = max(1.5, 1.2 * float(np.nanmax(np.abs(distance), initial=0.0)))
    panel.set_ylim(-largest, largest)
    label_y(panel, f"{name}: distance\nin uncertainties")


def _share_stretch(panels: list[Axes], curves: Mapping[str, Real], names: list[str]) -> None:
    places = np.concatenate([curves[f"{name}_nm"] for name in names])
    margin = 0.02 * float(np.ptp(places))
    for panel in panels:
        panel.set_xlim(float(places.min()) - margin, float(places.max()) + margin)
