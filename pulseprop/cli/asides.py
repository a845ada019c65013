"""What is told beside an answer: warnings and cautions, on standard error."""

from __future__ import annotations

import sys
from typing import TYPE_CHECKING

import rich_click as click

if TYPE_CHECKING:
    from pulseprop.propagation.result import Run

__all__ = ["tell_asides"]


def tell_asides(run: Run, *, shown: bool) -> None:
    """Warnings and cautions of a run, a line each.

    shown: the report has them already; where it stands on the same screen they are not repeated.
    """
    from pulseprop.reports.text import printable

    if shown and sys.stdout.isatty() and sys.stderr.isatty():
        return
    asides = [f"warning: {warning}" for warning in run.warnings]
    asides += [f"caution [{caution.code}] {caution.line}" for caution in run.cautions]
    for aside in asides:
        click.echo(printable(aside), err=True)
