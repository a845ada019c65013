"""All trade checks on tables of n, n and k, or absorption: a check is one function and one line here."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import replace

from pulseprop.vetting.case import Case
from pulseprop.vetting.causal import FewRows
from pulseprop.vetting.checks_absorption import columns_disagree, face_loss_left_in, fractions_called_percent
from pulseprop.vetting.checks_amounts import (
    index_not_positive,
    negative_absorption,
    transmittance_too_high,
)
from pulseprop.vetting.checks_band import (
    ceiling_rows,
    coarse_features,
    constant_index,
    falling_index,
    narrow_lines,
)
from pulseprop.vetting.checks_catalogue import (
    claimed_medium,
    nearest_medium,
    open_orientation,
    wavelength_unit,
)
from pulseprop.vetting.checks_digits import too_few_digits
from pulseprop.vetting.checks_lines import unresolved_line
from pulseprop.vetting.checks_printed import abbe_number, printed_orders
from pulseprop.vetting.checks_rows import double_rows, empty_cells, rows_out_of_order
from pulseprop.vetting.few_rows import displaced
from pulseprop.vetting.repairs import mended_by
from pulseprop.vetting.result import Finding

__all__ = ["CHECKS", "found_in"]

CHECKS: tuple[Callable[[Case], Iterator[Finding]], ...] = (
    constant_index,
    index_not_positive,
    negative_absorption,
    transmittance_too_high,
    double_rows,
    rows_out_of_order,
    empty_cells,
    columns_disagree,
    face_loss_left_in,
    fractions_called_percent,
    wavelength_unit,
    claimed_medium,
    open_orientation,
    printed_orders,
    abbe_number,
    falling_index,
    unresolved_line,
    coarse_features,
    narrow_lines,
    ceiling_rows,
    too_few_digits,
    nearest_medium,
)

SEVERITY = {"error": 0, "warning": 1, "note": 2}

FOLLOWS = ("falling-index",)
"""What a mistake that has been named brings with it: no error of its own then."""


def found_in(case: Case, few: FewRows | None) -> tuple[Finding, ...]:
    """All findings, what is named with its repair first, the rest by severity; few: rows that carry the
    proof.
    """
    named = [*displaced(case, few)] or [*mended_by(case)]
    others = [finding for check in CHECKS for finding in check(case)]
    if named:
        others = [replace(one, severity="note") if one.code in FOLLOWS else one for one in others]
    known = {(one.code, one.repair) for one in named}
    others = [one for one in others if (one.code, one.repair) not in known or one.repair is None]
    return (*named, *sorted(others, key=lambda one: SEVERITY[one.severity]))
