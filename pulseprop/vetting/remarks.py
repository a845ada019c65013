"""What the words around a table say of the whole of it: air or vacuum, thickness of the sample."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

from pulseprop.units import quantity
from pulseprop.vetting.heading_words import plain_words

__all__ = ["Remark", "axis_medium", "index_medium", "sample_thickness"]

Surrounding = Literal["air", "vacuum"]

WAVELENGTH = r"(wave ?lengths?|wellenlangen?|longueurs? d onde|longitud de onda|lunghezza d onda|lambda)"
NEAR = r"( (in|im|at|of|is|are|given|as|sind|dans|en|the|l|standard|dry))*"
AIR = r"(air|luft|aire|aria)"
VACUUM = r"(vac(uum)?|vakuum|vide|vacio|vuoto)"
INDEX = (
    r"(n|ind(ex|ices)|indices of refraction|refractive ind(ex|ices)|brechungsindex|brechzahl(en)?"
    r"|indice de refraction)"
)
AGAINST = (
    r"( (values?|of refraction|is|are|was|were|relative|given|measured|with|respect|to|against|vs|versus|in"
    r"|gegen|uber|relativ|zu|par|rapport|a|l|the|dry|standard))*"
)
RELATIVE = r"(relative to|with respect to|against|vs|versus|relativ zu|gegen|par rapport a l)"

THICKNESS = re.compile(
    r"\b(?:thickness|path ?length|length of (?:the )?(?:path|sample|cell)|(?:schicht|proben)?dicke"
    r"|[eé]paisseur|espesor|spessore|k[uü]vette|cuvette)\b[^0-9+\-\n]{0,20}?"
    r"([0-9]+(?:[.,][0-9]+)?)\s*(nm|um|µm|μm|mm|cm|m)\b",
    re.IGNORECASE,
)
THICK = re.compile(
    r"([0-9]+(?:[.,][0-9]+)?)\s*(nm|um|µm|μm|mm|cm)[ -]*"
    r"(?:thick|dick|path|cell|[ck][uü]vette|sample|plate)\b",
    re.IGNORECASE,
)


LONGEST = 300
"""Characters of a line that are looked at; words of a table are shorter."""


@dataclass(frozen=True)
class Remark:
    """ "air", "vacuum" or a length as text, and the line that says it. length: m, 0 where there is none."""

    value: str
    words: str
    length: float = 0.0


def index_medium(lines: Sequence[str]) -> Remark | None:
    """Whether the index is against air or vacuum; None where nothing is said, or both."""
    return _only(
        lines,
        {
            "air": rf"\b({INDEX}{AGAINST} {AIR}|{RELATIVE} {AIR}|n (rel|air)|nrel"
            r"|relative (refractive )?ind(ex|ices))\b",
            "vacuum": rf"\b({INDEX}{AGAINST} {VACUUM}|{RELATIVE} {VACUUM}|n (abs|vac)|nabs"
            r"|absolute (refractive )?ind(ex|ices))\b",
        },
    )


def axis_medium(lines: Sequence[str]) -> Remark | None:
    """Whether wavelengths are those in air or in vacuum; None where nothing is said, or both."""
    return _only(
        lines,
        {
            medium: rf"\b({WAVELENGTH}{NEAR} {word}|{word} {WAVELENGTH})\b"
            for medium, word in (("air", AIR), ("vacuum", VACUUM))
        },
    )


def _only(lines: Sequence[str], patterns: dict[str, str]) -> Remark | None:
    """The one value whose pattern is met in any line."""
    found: dict[str, str] = {}
    for line in lines:
        plain = plain_words(line[:LONGEST])
        for value, pattern in patterns.items():
            if re.search(pattern, plain):
                found.setdefault(value, line.strip())
    if len(found) != 1:
        return None
    value, words = next(iter(found.items()))
    return Remark(value, words)


def sample_thickness(lines: Sequence[str]) -> Remark | None:
    """The thickness or path length; None where none or several are said."""
    found: dict[float, Remark] = {}
    for line in lines:
        for match in (*THICKNESS.finditer(line[:LONGEST]), *THICK.finditer(line[:LONGEST])):
            text = f"{match[1].replace(',', '.')} {match[2]}"
            length = quantity(text, "length")
            found.setdefault(length, Remark(text, line.strip(), length))
    return next(iter(found.values())) if len(found) == 1 else None
