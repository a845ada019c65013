"""Lines too narrow for the rows that would explain numbers which contradict each other."""

from __future__ import annotations

from collections.abc import Iterator

from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.case import Case
from pulseprop.vetting.causal import Unresolved
from pulseprop.vetting.result import Finding

__all__ = ["lines_would_explain", "unresolved_line"]


def unresolved_line(case: Case) -> Iterator[Finding]:
    """Where narrow lines would do as well as wrong numbers, and which rows would tell."""
    line = case.standing.unresolved if case.standing is not None else None
    if line is None:
        return
    said = lines_would_explain(line)
    yield Finding(
        code="unresolved-line",
        severity="warning",
        text=f"{said[0].upper()}{said[1:]}. Without such rows the numbers alone cannot tell a line that was "
        "missed from a wrong number.",
    )


def lines_would_explain(line: Unresolved) -> str:
    """ "a narrow line near 800 nm that falls between the rows would explain them: rows 2 nm apart ..."."""
    place = TWO_PI_C / line.omega * 1e9
    spacing = TWO_PI_C * line.spacing / line.omega**2 * 1e9
    lines = f"a narrow line near {place:.5g} nm that falls between the rows"
    if line.windows > 1:
        lines = f"narrow lines that fall between the rows, the strongest near {place:.5g} nm,"
    return f"{lines} would explain the numbers: rows {spacing:.2g} nm apart there would settle it"
