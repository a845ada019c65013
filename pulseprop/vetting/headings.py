"""Headings of columns: what they call the column, its unit, and a thickness they may mention."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import lru_cache

from pulseprop.files.blocks import Block, Line
from pulseprop.files.text_blocks import cells_of
from pulseprop.units import quantity
from pulseprop.vetting.heading_units import AXIS_OF_DIMENSION, dimension, is_dispersion_parameter, unit_named
from pulseprop.vetting.heading_words import (
    AXES,
    Axis,
    Meaning,
    is_attenuation,
    is_extinction,
    is_molar,
    meaning_of,
)

__all__ = ["Heading", "heading_of", "headings_of", "is_heading"]

BRACKETED = re.compile(r"[\[({<]([^\[\](){}<>]*(?:\([^()]*\))?[^\[\](){}<>]*)[\])}>]")
POWER_OF_TEN = re.compile(r"10\s*\^|10\s*\*\*|10[⁻⁺⁰¹²³⁴-⁹]|[x×*]\s*10|\b1e[-+]?[0-9]|\b10\s?-[0-9]\b")
LENGTH = re.compile(r"([0-9]+(?:[.,][0-9]+)?)\s*(um|µm|μm|mm|cm|m)\b")
TEMPERATURE = re.compile(r"T\b.*(°\s?C|\b[dD]eg ?C\b|[\[(]\s*K\s*[\])]|/\s*K\b|[kK]elvin|[cC]elsius).*")
"""T may be a temperature."""
CONDITION = re.compile(r"\s+(?:at|bei|@|à|a)\s+[0-9].*|\s*@.*")
"""What a heading adds about the sample: "n at 20 °C"."""
FARTHEST = 8
"""Lines above the rows among which headings are looked for."""
LONGEST = 60
"""Characters of a heading; longer cells are sentences."""
LONGEST_LINE = 4000


@dataclass(frozen=True, kw_only=True)
class Heading:
    """One heading as understood.

    text: as printed. meaning: None where the words are not known. unit: in our spelling, None where none is
    said. thickness: m, of the sample, None where none is said. scaled: a power of ten stands in it. molar:
    it names absorption per amount of substance.
    """

    text: str
    meaning: Meaning | None = None
    unit: str | None = None
    thickness: float | None = None
    extinction: bool = False
    scaled: bool = False
    molar: bool = False

    @property
    def axis(self) -> Axis | None:
        """The meaning, where it is a spectral axis."""
        return next((axis for axis in AXES if axis == self.meaning), None)


@lru_cache(maxsize=4096)
def heading_of(text: str) -> Heading:
    """What one heading says."""
    text = text.strip().strip('"').strip("# ").strip()
    told = CONDITION.sub("", text)
    if len(text) > LONGEST or TEMPERATURE.fullmatch(told):
        return Heading(text=text)
    words, unit = _taken_apart(told)
    meaning = meaning_of(words) if words else None
    if meaning is None and not words and unit:
        meaning = _axis_of(unit)
    if meaning is None and unit and is_dispersion_parameter(unit):
        meaning = "gvd"
    if meaning is None and unit and dimension(unit) == "m^-1" and is_attenuation(words):
        meaning = "alpha"
    return Heading(
        text=text,
        meaning=meaning,
        unit=unit,
        thickness=_thickness(text),
        extinction=is_extinction(text),
        scaled=_is_scaled(text),
        molar=is_molar(text),
    )


def _is_scaled(text: str) -> bool:
    """Whether a power of ten stands beside words that are known without it."""
    if not POWER_OF_TEN.search(text):
        return False
    words = POWER_OF_TEN.sub(" ", BRACKETED.sub(" ", text))
    first = re.sub(r"[⁻⁺⁰-⁹¹²³0-9^*×+/-]|\bx\b", " ", words).strip()
    return meaning_of(first) is not None or is_extinction(first)


def _taken_apart(text: str) -> tuple[str, str | None]:
    """The words and the unit; what stands in brackets and is no unit is left out."""
    if unit_named(text) and not meaning_of(text):
        return "", unit_named(text)
    if meaning_of(text) and "%" not in text:
        return text, None
    unit = None
    for inside in BRACKETED.findall(text):
        unit = unit if unit is not None else unit_named(inside)
    words = BRACKETED.sub(" ", text).strip(" .:,;-") or text
    if unit is not None or (meaning_of(words) and "%" not in words):
        return words, unit
    behind = _unit_behind(words)
    return behind if behind[1] is not None else _unit_behind(text)


def _unit_behind(words: str) -> tuple[str, str | None]:
    """A unit behind a slash, a comma, "in", an underscore or a space, or a percent sign."""
    for pattern in (r"\s*/\s*", r"\s*,\s*", r"\s+in\s+", r"_", r"\s+"):
        for found in re.finditer(pattern, words):
            name, unit = words[: found.start()], unit_named(words[found.end() :])
            if unit and not name.endswith("dB") and (_is_known(name) or is_dispersion_parameter(unit)):
                return name, unit
    if "%" in words:
        return words.replace("%", " ").strip(), "%"
    return words, None


def _is_known(name: str) -> bool:
    return meaning_of(name) is not None or is_extinction(name) or is_attenuation(name)


def _axis_of(unit: str) -> Axis | None:
    """The axis that a unit alone names."""
    return AXIS_OF_DIMENSION.get(dimension(unit))


def _thickness(text: str) -> float | None:
    """A length of millimetres in a heading, such as "internal transmittance (10 mm)"."""
    found = LENGTH.search(text)
    return quantity(f"{found[1].replace(',', '.')} {found[2]}", "length") if found else None


def is_heading(line: str) -> bool:
    """Whether a line names an axis and a quantity, and little else: a table begins below it."""
    return any(_named(names) for names in _splits(line))


def _named(names: Sequence[str]) -> bool:
    heads = [heading_of(name) for name in names]
    axes = sum(head.axis is not None for head in heads)
    quantities = sum(head.extinction or (head.meaning is not None and not head.axis) for head in heads)
    return axes > 0 and quantities > 0 and 2 * (axes + quantities) >= len(heads)


def headings_of(block: Block, width: int) -> tuple[Heading, ...]:
    """The headings of a block's columns, empty where none are found: the last line above the rows with as
    many names as columns, one of them known; or a line of names above a line of units."""
    above = [line for line in block.above if line.text.strip()][-FARTHEST:]
    described = _numbered(above, width)
    if described:
        return described
    for position in range(len(above) - 1, -1, -1):
        heads = _heads(above[position], width)
        if heads is None or not any(head.meaning or head.extinction for head in heads):
            continue
        names = _heads(above[position - 1], width) if position else None
        if names and _only_units(heads) and any(head.meaning or head.extinction for head in names):
            return _joined(names, heads)
        below = _heads(above[position + 1], width) if position + 1 < len(above) else None
        return _joined(heads, below) if below and _only_units(below) else heads
    return ()


def _heads(line: Line, width: int) -> tuple[Heading, ...] | None:
    """The best reading of a line as so many headings."""
    fitting = [tuple(map(heading_of, names)) for names in _splits_of(line) if len(names) == width]
    return max(fitting, key=lambda heads: sum(head.meaning is not None for head in heads), default=None)


def _only_units(heads: Sequence[Heading]) -> bool:
    return all(not head.text or unit_named(head.text) is not None for head in heads)


def _joined(names: Sequence[Heading], units: Sequence[Heading]) -> tuple[Heading, ...]:
    """Names with the units of the line below them, where the names say none."""
    joined = [
        heading_of(f"{name.text} [{unit.text}]") if unit.text and name.unit is None else name
        for name, unit in zip(names, units, strict=True)
    ]
    return tuple(joined)


def _splits_of(line: Line) -> Iterator[tuple[str, ...]]:
    if line.cells is not None:
        yield line.cells
    yield from _splits(line.text)


def _splits(text: str) -> Iterator[tuple[str, ...]]:
    """The ways to take a line of headings apart; none for what is too long to be one."""
    if len(text) > LONGEST_LINE:
        return
    whole = text.strip()
    bare = re.sub(r"^[#;!/ ]+|^% ", "", whole).strip()
    for separator in ("\t", ";", ",", "|"):
        if separator in bare:
            yield cells_of(bare, separator)
            yield cells_of(whole, separator)
    yield tuple(re.split(r"\s{2,}", bare))
    yield tuple(re.split(r"\s+(?![\[(])(?![^\[(]*[\])])", bare))


def _numbered(above: Sequence[Line], width: int) -> tuple[Heading, ...]:
    """Headings from lines such as "column 2: n"."""
    named: dict[int, str] = {}
    for line in above:
        found = re.fullmatch(
            r"[#%;!/\s]*(?:col(?:umn)?|spalte|colonne|columna|colonna)\.?\s*([0-9]{1,2})\s*[:=.)]\s*(.+)",
            line.text.strip(),
            re.IGNORECASE,
        )
        if found:
            named[int(found[1])] = found[2]
    if not named or max(named) > width or min(named) < 1:
        return ()
    return tuple(heading_of(named.get(column, "")) for column in range(1, width + 1))
