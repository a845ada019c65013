"""The order sheet: what a mirror that is yet to be made must do, as a table that a coater can read."""

from __future__ import annotations

import numpy as np

from pulseprop.compensation.result import Design, MirrorOrder
from pulseprop.propagation.numerals import significant
from pulseprop.reports.blocks import Column, Paragraph, Section, Table

__all__ = ["order_section"]

ROWS = 17


def order_section(design: Design) -> Section | None:
    """The mirrors of a design that are to be ordered; None where there are none."""
    if not design.mirrors:
        return None
    blocks = [block for mirror in design.mirrors for block in _mirror(mirror)]
    return Section("order", "Order sheet", tuple(blocks))


def _mirror(order: MirrorOrder) -> list[Paragraph | Table]:
    low, high = order.band_nm
    target = (
        f"GDD {significant(order.gdd_at_centre_fs2, 4)} fs^2 and TOD "
        f"{significant(order.tod_at_centre_fs3, 4)} "
        f"fs^3 a bounce at {significant(order.centre_nm, 5)} nm, {order.bounces:g} bounces, from "
        f"{significant(low, 4)} to {significant(high, 4)} nm. Positive GDD means red first."
    )
    blocks: list[Paragraph | Table] = [Paragraph(target, label=order.element)]
    if order.offset_fs2 is not None:
        blocks.append(
            Paragraph(
                f"an error of {significant(order.offset_fs2, 2)} fs^2 a bounce, alike at all wavelengths and "
                "in all mirrors, costs 5 % of the peak power.",
                label="Tolerance",
            )
        )
    if order.ripples:
        listed = "; ".join(
            f"{significant(ripple.amplitude_fs2, 2)} fs^2 at a period of "
            f"{significant(ripple.period_THz, 2)} THz"
            for ripple in order.ripples
        )
        blocks.append(Paragraph(f"the same loss from a ripple of {listed}.", label="Ripple"))
    blocks.append(_curve(order))
    blocks.append(
        Paragraph(
            "state beside it: reflectance over the band, angle of incidence and polarisation, fluence and "
            "repetition rate of the beam, number of mirrors and whether they come as pairs of opposite "
            "ripple.",
            label="For the purchase order",
        )
    )
    return blocks


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
