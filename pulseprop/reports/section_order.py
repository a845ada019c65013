"""The order sheet: what a mirror that is yet to be made must do, as tables that a coater can read."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from pulseprop.compensation.result import Design, MirrorOrder
from pulseprop.elements.chirped_mirror import ChirpedMirror
from pulseprop.propagation.numerals import NOTHING, percent, quantity, significant
from pulseprop.propagation.result import Run
from pulseprop.reports.blocks import Column, Paragraph, Section, Table

__all__ = ["order_items", "order_section"]

ROWS = 17
TO_BE_STATED = "to be stated by you: no part of this calculation"


def order_section(design: Design, run: Run) -> Section | None:
    """The mirrors of a design that are to be ordered; None where there are none. run: of that design."""
    if not design.mirrors:
        return None
    blocks = [block for mirror in design.mirrors for block in _mirror(mirror, design, run)]
    return Section("order", "Order sheet", tuple(blocks))


def _mirror(order: MirrorOrder, design: Design, run: Run) -> Iterator[Paragraph | Table]:
    yield Paragraph("one bounce, as follows. Positive GDD means red first.", label=order.element)
    yield Table((Column("item", words=True), Column("value", words=True)), order_items(order, design, run))
    yield Paragraph(
        "target GDD of one bounce, and the band in which it must stay where a deviation swings as slowly as "
        "the spectrum is wide; a faster ripple may swing more, as stated above. Ideal: what would leave no "
        "phase at all.",
        label="Curve",
    )
    yield _curve(order)


def order_items(order: MirrorOrder, design: Design, run: Run) -> tuple[tuple[str, str], ...]:
    """Item and value, for sheet and CSV; what the calculation does not know is asked for."""
    low, high = order.band_nm
    items = [
        ("GDD of one bounce", f"{significant(order.gdd_at_centre_fs2, 4)} fs^2"),
        ("TOD of one bounce", f"{significant(order.tod_at_centre_fs3, 4)} fs^3"),
        ("at", f"{significant(order.centre_nm, 5)} nm"),
        ("bounces", f"{order.bounces:g}"),
        ("band", f"{significant(low, 4)} nm to {significant(high, 4)} nm (spectrum above 1 % of its peak)"),
        ("GDD error for 5 % of the peak", f"{_offset(order)}, alike at all wavelengths and mirrors"),
        *(
            (
                f"ripple for 5 %, period {significant(ripple.period_THz, 3)} THz",
                f"{significant(ripple.amplitude_fs2, 2)} fs^2 a bounce, alike in all mirrors",
            )
            for ripple in order.ripples
        ),
        ("reflectance in the band", _reflectance(order, design)),
        ("angle of incidence", TO_BE_STATED),
        ("polarisation", TO_BE_STATED),
        ("peak fluence on it", _fluence(order, run)),
        ("repetition rate", quantity(run.hazards.repetition_rate_Hz, "Hz")),
        ("average power", quantity(run.hazards.average_power_W, "W")),
    ]
    return tuple((item, TO_BE_STATED if value == NOTHING else value) for item, value in items)


def _offset(order: MirrorOrder) -> str:
    return f"{significant(order.offset_fs2, 2)} fs^2 a bounce"


def _reflectance(order: MirrorOrder, design: Design) -> str:
    for element in design.path.elements:
        if element.name == order.element and isinstance(element, ChirpedMirror) and element.reflectance < 1:
            return f"{percent(element.reflectance)} a bounce, as the scenario has it"
    return "as high as can be had; the calculation counts no loss"


def _fluence(order: MirrorOrder, run: Run) -> str:
    fluence = next((row.peak_fluence_J_per_cm2 for row in run.elements if row.name == order.element), None)
    return NOTHING if fluence is None else f"{significant(fluence, 2)} J/cm^2 on axis"


def _curve(order: MirrorOrder) -> Table:
    chosen = np.unique(np.linspace(0, len(order.wavelength_nm) - 1, ROWS).round().astype(int))
    columns = (
        Column("wavelength", "nm"),
        Column("target GDD", "fs^2"),
        Column("from", "fs^2"),
        Column("to", "fs^2"),
        Column("ideal GDD", "fs^2"),
    )
    curves = (order.wavelength_nm, order.gdd_fs2, order.low_fs2, order.high_fs2, order.ideal_gdd_fs2)
    rows = tuple(
        (f"{order.wavelength_nm[at]:.1f}", *(f"{curve[at]:.2f}" for curve in curves[1:])) for at in chosen
    )
    return Table(columns, rows)
