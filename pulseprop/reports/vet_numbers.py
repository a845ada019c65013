"""Numbers of a vetted file in print: no digit that the guarantee does not carry."""

from __future__ import annotations

import math
from decimal import ROUND_CEILING, ROUND_FLOOR, Decimal
from pathlib import PurePath

from pulseprop.propagation.numerals import significant
from pulseprop.vetting.result import Vetted

__all__ = ["Interval", "factor_text", "file_name", "interval_text", "nm_text", "plain_text"]

Interval = tuple[float, float] | None

SMALLEST_FACTOR = 1e-3
"""Uncertainty factors below this say that the numbers fit, and nothing more."""

NARROWEST = 1e-9
"""Relative width below which an interval is one number."""


def interval_text(interval: Interval) -> str:
    """Lower and upper end to two digits of the width, rounded outward, so that the guarantee still holds."""
    if interval is None:
        return ""
    low, high = interval
    width = high - low
    if not math.isfinite(width) or width <= NARROWEST * max(abs(low), abs(high)):
        return f"{plain_text(low)} to {plain_text(high)}"
    place = Decimal(1).scaleb(math.floor(math.log10(width)) - 1)
    down, up = _rounded(low, place, ROUND_FLOOR), _rounded(high, place, ROUND_CEILING)
    return f"{down} to {up}"


def _rounded(value: float, place: Decimal, how: str) -> str:
    """A multiple of the place; whole numbers for places above one."""
    multiple = (Decimal(value) / place).to_integral_value(rounding=how) * place
    return f"{multiple:f}" if place < 1 else f"{int(multiple)}"


def factor_text(factor: float) -> str:
    """Three digits; what is far below 1 only as such."""
    return "below 0.001" if 0 <= factor < SMALLEST_FACTOR else plain_text(factor, 3)


def nm_text(wavelength: float) -> str:
    """A wavelength without zeros that say nothing."""
    return f"{wavelength:.7g}"


def plain_text(value: float, digits: int = 10) -> str:
    """A number to at most so many digits, trailing zeros left out, large and small ones with an exponent."""
    text = significant(value, digits)
    mantissa, mark, exponent = text.partition("e")
    return (mantissa.rstrip("0").rstrip(".") if "." in mantissa else mantissa) + mark + exponent


def file_name(vetted: Vetted) -> str:
    """Without the folder, which is nobody's business but the buyer's."""
    return PurePath(vetted.file).name
