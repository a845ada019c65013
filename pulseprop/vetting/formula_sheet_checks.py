"""What is wrong with a formula on its face: poles and imaginary index inside the range, an index that falls
with frequency or below 1, a range beyond the printed one, numbers and media that it does not agree with."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import TWO_PI_C
from pulseprop.errors import InputError
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.vetting.certificate_catalogue import catalogue_number
from pulseprop.vetting.certificate_copies import agrees
from pulseprop.vetting.formula_sheet import FormulaSheet, medium_of
from pulseprop.vetting.formula_sheet_claim import differing_constants, like_claim
from pulseprop.vetting.formula_sheet_samples import index_at, places
from pulseprop.vetting.result import Finding

__all__ = ["BROKEN", "on_its_face"]

LOOK = 512
"""Intervals at which the course of the index is looked at."""
BROKEN = ("pole-in-range", "index-not-real")
"""Codes of formulas that give no index over their range."""
BEYOND = 0.02
"""Share by which a range may go beyond the record's before it is told."""


def on_its_face(sheet: FormulaSheet) -> Iterator[Finding]:
    """All that can be said without causality; no more than that where the formula gives no index at all."""
    yield from _beyond_range(sheet)
    omega = places(sheet, LOOK)
    try:
        index = index_at(sheet, omega)
    except InputError as error:
        yield Finding(
            code="pole-in-range",
            severity="error",
            text=f"The formula has a pole inside its own range, at {error.complaint.value}: the index is "
            "infinite there.",
        )
        return
    imaginary = ~np.isfinite(index) | (np.abs(np.imag(index)) > 1e-12)
    if imaginary.any():
        yield Finding(
            code="index-not-real",
            severity="error",
            text=f"The formula gives no real index at {_stretch(omega, imaginary)}: n^2 is negative there.",
        )
        return
    yield from _course(sheet, omega, np.real(index))
    yield from _beside(sheet)
    yield from _claim(sheet)


def _course(sheet: FormulaSheet, omega: NDArray[np.float64], index: NDArray[np.float64]) -> Iterator[Finding]:
    falling = np.append(np.diff(index) < -1e-13, False)
    if falling.any():
        yield Finding(
            code="falls-with-frequency",
            severity="error",
            text=f"The index falls with frequency at {_stretch(omega, falling)}: no transparent passive "
            "material does that.",
        )
    below = index < 1 - sheet.error
    if below.any():
        yield Finding(
            code="index-below-1",
            severity="warning",
            text=f"The index is below 1 at {_stretch(omega, below)}: transparent matter has that only beside "
            "strong absorption at longer wavelengths.",
        )


def _beyond_range(sheet: FormulaSheet) -> Iterator[Finding]:
    if not sheet.claimed:
        return
    band = catalogue_medium(sheet.claimed).band
    low, high = sheet.valid
    if low < band.low * (1 - BEYOND) or high > band.high * (1 + BEYOND):
        shortest, longest = (1e9 * TWO_PI_C / end for end in (band.high, band.low))
        own = "{:.5g} to {:.5g} nm".format(*sheet.range_nm)
        yield Finding(
            code="beyond-published-range",
            severity="warning",
            text=f"The stated range, {own}, goes beyond that of the published record of {sheet.claimed}, "
            f"{shortest:.5g} to {longest:.5g} nm: there a formula is no measurement.",
        )


def _beside(sheet: FormulaSheet) -> Iterator[Finding]:
    """Numbers printed beside the formula that it does not give."""
    medium = medium_of(sheet)
    fitting = []
    for value in sheet.check:
        number = catalogue_number(medium, value.quantity, value.omega)
        unit = f" {value.unit}" if value.unit else ""
        if number is not None and agrees(value.value, number, value.error):
            fitting.append(value.words)
            continue
        shown = "nothing there" if number is None else f"{value.in_unit(number):.7g}{unit}"
        yield Finding(
            code="check-differs",
            severity="error",
            text=f"{value.words} is printed as {value.text}, and the formula gives {shown}.",
            rows=(value.line,) if value.line else (),
        )
    if fitting:
        yield Finding(
            code="check-agrees",
            severity="note",
            text=f"The formula gives what is printed: {', '.join(fitting)}.",
        )


def _claim(sheet: FormulaSheet) -> Iterator[Finding]:
    like = like_claim(sheet)
    if like is None:
        return
    text = (
        f"Against the catalogue's {sheet.claimed} n - 1 differs by up to {100 * like.index:.2g} % and the "
        f"GVD by up to {100 * like.gvd:.2g} % of its largest, at {like.worst_nm:.4g} nm"
    )
    slips = "; ".join(differing_constants(sheet))
    more: dict[str, Any] = {"repair": slips or None}
    if slips:
        text += f": {slips}"
    if like.alike:
        more["severity"] = "warning" if slips else "note"
        yield Finding(code="like-claimed-medium", text=text + ".", **more)
    else:
        yield Finding(
            code="not-the-claimed-medium",
            severity="error" if like.far or slips else "warning",
            text=text + ".",
            **more,
        )


def _stretch(omega: NDArray[np.float64], where: NDArray[np.bool_]) -> str:
    """Wavelengths of the first and last place."""
    nm = 1e9 * TWO_PI_C / omega[where]
    if len(nm) == 1 or f"{nm.min():.4g}" == f"{nm.max():.4g}":
        return f"{nm[0]:.4g} nm"
    return f"{nm.min():.4g} to {nm.max():.4g} nm"
