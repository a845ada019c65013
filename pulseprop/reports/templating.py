"""From template to page: everything a template is given is escaped, and nothing is fetched."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from typing import TYPE_CHECKING, Any

from pulseprop.reports.blocks import Table, padded_rows
from pulseprop.reports.drawing import Drawing
from pulseprop.reports.figure_style import inline_svg

if TYPE_CHECKING:
    from markupsafe import Markup

__all__ = ["Placed", "placed", "rendered"]

Placed = dict[str, list[tuple[str, str, "Markup"]]]
"""Section to its figures: name, caption, markup."""

FIGURE_SPACE = "\u2007"
"""A space as wide as a digit."""


def rendered(template: str, **given: Any) -> str:
    """The page that a template of this package makes of what it is given."""
    from jinja2 import Environment, PackageLoader, StrictUndefined

    environment = Environment(
        loader=PackageLoader("pulseprop.reports", "templates"),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
    )
    environment.filters["powers"] = _powers
    environment.globals["lined_up"] = _lined_up
    return environment.get_template(template).render(**given)


def placed(drawn: Iterable[Drawing], places: Mapping[str, Iterable[str]]) -> Placed:
    """Figures below the sections that `places` says."""
    figures = {
        drawing.name: (drawing.caption, _trusted(inline_svg(drawing.svg, drawing.name))) for drawing in drawn
    }
    return {
        key: [(name, *figures[name]) for name in names if name in figures] for key, names in places.items()
    }


def _lined_up(table: Table) -> tuple[list[tuple[str, ...]], list[tuple[str, ...]]]:
    """Rows and footer of a table, numbers padded with spaces as wide as a digit."""
    rows = padded_rows(table, FIGURE_SPACE)
    return rows[: len(table.rows)], rows[len(table.rows) :]


def _trusted(markup: str) -> Markup:
    """Markup of our own making, in which the drawing library has escaped all text."""
    from markupsafe import Markup

    return Markup(markup)


def _powers(text: str) -> Markup:
    """Escaped text with fs^2 set as a power, and no line broken between a number and its per cent."""
    from markupsafe import Markup, escape

    text = str(escape(text)).replace(" %", "\u00a0%")
    return Markup(re.sub(r"\^(-?[0-9]+|\(-?[0-9/]+\))", r"<sup>\1</sup>", text))
