"""The figure of a vetted table: the numbers, the material that fits them best, and the rows in conflict."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from pulseprop.reports.draw_columns import draw_columns
from pulseprop.reports.drawing import Drawing
from pulseprop.reports.figure_style import COLOURS, Frame, canvas, decades, label_x, label_y, styled
from pulseprop.reports.vet_numbers import file_name
from pulseprop.vetting.result import ConflictRow, Vetted

if TYPE_CHECKING:
    from matplotlib.axes import Axes

__all__ = ["draw_vet", "vet_drawings"]

Real = NDArray[np.float64]

SMALLEST, LARGEST = 90.0, 500.0
"""Area of the ring around a row in conflict, by its weight."""

RINGED, NAMED = 0.01, 0.6
"""Rows are ringed, and named by their line, from these shares of the heaviest weight on."""

MOST_NAMED = 6

LONGEST_SOURCE = 150


def vet_drawings(answers: Sequence[Vetted]) -> dict[int, Drawing]:
    """The figures of all tables that have one, by their number among the answers."""
    drawn = {number: draw_vet(answer, number) for number, answer in enumerate(answers)}
    return {number: drawing for number, drawing in drawn.items() if drawing is not None}


@styled
def draw_vet(vetted: Vetted, number: int) -> Drawing | None:
    """Values over wavelength, and their distance from the best material in units of the uncertainty.

    None where there is nothing to draw. number: of the table, for the figure's name.
    """
    curves: Mapping[str, Real] = vetted.curves
    quantities = [name for name in ("n", "k") if f"{name}_distance" in curves]
    name, source = f"table-{number + 1}", _source(vetted)
    if not quantities:
        return draw_columns(vetted, name, source)
    heights = tuple(height for _ in quantities for height in (1.4, 1.0))
    figure, panels = canvas(heights, source=source, frame=Frame(left=0.14, top=0.95, gap=0.16))
    for at, quantity in enumerate(quantities):
        marked = _ringed(vetted.conflict, quantity)
        _values(panels[2 * at], quantity, curves, marked)
        _distances(panels[2 * at + 1], quantity, curves, marked)
    panels[0].legend(loc="best")
    for panel in panels[:-1]:
        panel.tick_params(labelbottom=False)
    label_x(panels[-1], "vacuum wavelength, nm")
    _share_stretch(panels, curves, quantities)
    caption = (
        "Printed values, the passive causal material that comes nearest to all of them, and the distance "
        "between the two in units of the uncertainty u"
    )
    caption += "; rows in conflict are ringed, the larger the heavier." if vetted.conflict else "."
    return Drawing(name=name, caption=caption, figure=figure, columns=dict(curves))


def _source(vetted: Vetted) -> str:
    """Small print; of a long path the end."""
    text = f"{file_name(vetted)} · SHA-256 {vetted.sha256[:16]} · {vetted.date} · pulseprop {vetted.version}"
    return text if len(text) <= LONGEST_SOURCE else f"…{text[1 - LONGEST_SOURCE :]}"


def _ringed(conflict: Sequence[ConflictRow], quantity: str) -> list[tuple[ConflictRow, float]]:
    """The rows of a quantity that are heavy enough to be seen, with their share of the heaviest weight."""
    heaviest = max((abs(entry.weight) for entry in conflict), default=1.0)
    shares = [(entry, abs(entry.weight) / heaviest) for entry in conflict if entry.quantity == quantity]
    return [(entry, share) for entry, share in shares if share >= RINGED and entry.wavelength_nm > 0]


def _values(
    panel: Axes, name: str, curves: Mapping[str, Real], marked: list[tuple[ConflictRow, float]]
) -> None:
    place, values = curves[f"{name}_nm"], curves[name]
    panel.plot(place, values, ".", color=COLOURS["before"], markersize=8, label="printed")
    if f"{name}_model" in curves:
        panel.plot(
            curves[f"{name}_model_nm"],
            curves[f"{name}_model"],
            color=COLOURS["after"],
            label="nearest passive causal material",
        )
    if name == "k" and np.all(values > 0) and np.ptp(np.log10(values)) > 2:
        decades(panel, 5)
    label_y(panel, "index n" if name == "n" else "k")
    _rings(panel, place, values, marked)
    heaviest = sorted(marked, key=lambda pair: -pair[1])[:MOST_NAMED]
    for entry, share in heaviest:
        if share >= NAMED:
            at = int(np.argmin(np.abs(place - entry.wavelength_nm)))
            panel.annotate(
                entry.place or f"row {entry.row}",
                (float(place[at]), float(values[at])),
                xytext=(10, 8 if entry.weight > 0 else -24),
                textcoords="offset points",
                fontsize=15,
                color=COLOURS["warm"],
            )


def _distances(
    panel: Axes, name: str, curves: Mapping[str, Real], marked: list[tuple[ConflictRow, float]]
) -> None:
    place, distance = curves[f"{name}_nm"], curves[f"{name}_distance"]
    panel.axhspan(-1, 1, color=COLOURS["faint"], alpha=0.6, linewidth=0)
    panel.plot(place, distance, ".-", color=COLOURS["before"], linewidth=1.2, markersize=7)
    _rings(panel, place, distance, marked)
    finite = np.abs(distance[np.isfinite(distance)])
    largest = max(1.5, 1.2 * float(finite.max(initial=0.0)))
    panel.set_ylim(-largest, largest)
    label_y(panel, "distance, u")


def _rings(panel: Axes, place: Real, height: Real, marked: list[tuple[ConflictRow, float]]) -> None:
    if not marked:
        return
    rows = [int(np.argmin(np.abs(place - entry.wavelength_nm))) for entry, _ in marked]
    panel.scatter(
        place[rows],
        height[rows],
        s=[SMALLEST + LARGEST * share for _, share in marked],
        facecolors="none",
        edgecolors=COLOURS["warm"],
        linewidths=2.2,
    )


def _share_stretch(panels: list[Axes], curves: Mapping[str, Real], names: list[str]) -> None:
    places = np.concatenate([curves[f"{name}_nm"] for name in names])
    margin = 0.02 * float(np.ptp(places)) or 1.0
    for panel in panels:
        panel.set_xlim(float(places.min()) - margin, float(places.max()) + margin)
