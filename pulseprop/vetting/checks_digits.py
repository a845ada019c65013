"""Too few digits, or too large an uncertainty, for the GVD that is asked for."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import replace

import numpy as np

from pulseprop.causality.passive_data import PassiveData
from pulseprop.errors import InputError, NumericalLimit
from pulseprop.vetting.case import Case
from pulseprop.vetting.guaranteed import at_implied_uncertainty, guaranteed
from pulseprop.vetting.requirement import read_requirement
from pulseprop.vetting.requirement_answer import FS2_PER_MM
from pulseprop.vetting.result import Finding

__all__ = ["too_few_digits"]

LOOSE = 0.1
"""Width of the bounds over the GVD from which on they are loose, where no tolerance is stated."""
SMALL = 1.0
"""GVD in fs^2/mm that stands in its place near a zero of the GVD."""
MORE = 4
"""Further digits that are tried."""


def too_few_digits(case: Case) -> Iterator[Finding]:
    """For each asked GVD whose bounds are too wide: how well the index has to be known."""
    asked = _asked(case)
    if not asked:
        return
    for bounds, omega, wanted in zip(
        guaranteed(case, np.array(list(asked))), asked, asked.values(), strict=True
    ):
        gvd = bounds.gvd_fs2_per_mm
        if gvd is None:
            continue
        limit = wanted or max(LOOSE * abs(sum(gvd) / 2), SMALL * LOOSE)
        if gvd[1] - gvd[0] > limit:
            yield _finding(case, bounds.wavelength_nm, omega, gvd, limit)


def _asked(case: Case) -> dict[float, float | None]:
    """Frequencies at which a GVD is asked, and how wide its limits are in fs^2/mm where that was said."""
    asked: dict[float, float | None] = dict.fromkeys(case.request.at)
    for text in case.request.require:
        try:
            requirement = read_requirement(text)
        except InputError:
            continue
        width = requirement.most - requirement.least
        if requirement.quantity.name == "gvd" and requirement.low is not None and math.isfinite(width):
            asked[requirement.low] = width / FS2_PER_MM
    return asked


def _finding(case: Case, nm: float, omega: float, gvd: tuple[float, float], limit: float) -> Finding:
    data, _ = at_implied_uncertainty(case)
    error = float(np.median(data.index_error)) if data is not None else 0.0
    low, high = gvd
    text = (
        f"An index known to +-{error:.1g} leaves the GVD at {nm:.6g} nm anywhere from "
        f"{low:.4g} to {high:.4g} fs^2/mm. "
    )
    index = case.standing.index if case.standing is not None else None
    if data is None or index is None:
        return Finding(code="too-few-digits", severity="warning", text=text.rstrip())
    needed = _needed(case, replace(data, index=index), omega, limit)
    if needed is None:
        text += f"Even an index {10**MORE:,} times better known does not narrow it to {limit:.2g} fs^2/mm."
    else:
        digits = math.ceil(-math.log10(2 * needed) - 1e-9)
        text += (
            f"To know it within {limit:.2g} fs^2/mm the index has to be true to about +-{needed:.0e}, which "
            f"takes {digits} decimals."
        )
    return Finding(code="too-few-digits", severity="warning", text=text)


def _needed(case: Case, data: PassiveData, omega: float, limit: float) -> float | None:
    """The uncertainty of n at which the bounds are no wider than `limit`, by powers of ten.

    data: with the index of the material of least factor, for the printed digits themselves may have no
    material at the finer uncertainty.
    """
    for digits in range(1, MORE + 1):
        finer = replace(data, index_error=data.index_error * 10.0**-digits)
        try:
            gvd = case.causality.bounds(finer, np.array([omega]))[0].gvd_fs2_per_mm
        except NumericalLimit:
            return None
        if gvd is not None and gvd[1] - gvd[0] <= limit:
            return float(np.median(finer.index_error))
    return None
