"""Spectra in JCAMP-DX files: labelled records, and data as XYDATA, XYPOINTS or PEAK TABLE.

R. S. McDonald and P. A. Wilks, Appl. Spectrosc. 42, 151-162 (1988), version 4.24, from memory. The
abscissae are those of FIRSTX, LASTX and NPOINTS; what each line prints is a check. All checks of the standard
are made: number of points, abscissa of each line, ordinates after differences, first ordinate.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from pulseprop.errors import InputError
from pulseprop.files.packed_digits import DataLine, Ordinates, ordinates_of

__all__ = ["Spectrum", "is_jcamp", "spectra_of"]

Real = NDArray[np.float64]

NUMBER = re.compile(r"[+-]?(?:[0-9]+[.,]?[0-9]*|[.,][0-9]+)(?:[eE][+-]?[0-9]{1,3})?")
COMMA = re.compile(r"[+-]?[0-9]*,[0-9]+(?:[eE][+-]?[0-9]{1,3})?")
FORMS = ("XYDATA", "XYPOINTS", "PEAKTABLE")
FACTORS = ("XFACTOR", "YFACTOR", "FIRSTX", "LASTX", "DELTAX", "FIRSTY")


@dataclass(frozen=True, kw_only=True, eq=False)
class Spectrum:
    """x, y: in XUNITS and YUNITS, factors applied, (R,); y is NaN where the file marks a point as not valid.

    lines: of the file, (R,). x_half, y_half: half a unit of the last place stored, one number each.
    records: all labelled records, labels without spaces and signs, in capitals.
    """

    title: str
    form: str
    records: Mapping[str, str]
    x: Real
    y: Real
    lines: NDArray[np.int64]
    x_half: float
    y_half: float


@dataclass
class _Section:
    """One TITLE to END: records, and data lines by label."""

    number: int
    records: dict[str, str] = field(default_factory=dict)
    places: dict[str, int] = field(default_factory=dict)
    data: dict[str, list[DataLine]] = field(default_factory=dict)


def is_jcamp(text: str) -> bool:
    """Whether a text begins with the record TITLE or JCAMP-DX, remarks aside."""
    for line in text.lstrip("\ufeff").splitlines()[:20]:
        if line.strip() and not line.lstrip().startswith("$$"):
            return re.match(r"\s*##\s*(TITLE|JCAMP-?DX)\s*=", line, re.IGNORECASE) is not None
    return False


def spectra_of(text: str, file: str) -> tuple[Spectrum, ...]:
    """All spectra of a file, those of a compound file in order.

    Raises InputError with file and line for what is missing, is no number, or fails a check.
    """
    sections = [section for section in _sections(text) if any(form in section.data for form in FORMS)]
    if not sections:
        raise InputError(
            "the JCAMP-DX file holds no XYDATA, XYPOINTS or PEAK TABLE",
            file=file,
            remedy="Save the spectrum as XYDATA, or as CSV",
        )
    return tuple(_Reader(section, file).spectrum() for section in sections)


def _sections(text: str) -> list[_Section]:
    sections: list[_Section] = []
    label = ""
    for number, raw in enumerate(text.splitlines(), start=1):
        line = raw.partition("$$")[0].rstrip()
        if line.lstrip().startswith("##"):
            name, _, value = line.lstrip()[2:].partition("=")
            label = re.sub(r"[\s\-/_]", "", name).upper()
            if label == "TITLE" or not sections:
                sections.append(_Section(number))
            if label in FORMS and label in sections[-1].data:
                label += "AGAIN"
            sections[-1].records[label] = value.strip()
            sections[-1].places[label] = number
            if label in FORMS:
                sections[-1].data[label] = []
        elif sections and label in sections[-1].data and line.strip():
            sections[-1].data[label].append(DataLine(number, line))
    return sections


class _Reader:
    """One section made a spectrum."""

    def __init__(self, section: _Section, file: str) -> None:
        self.section, self.file = section, file
        self.form = next(form for form in FORMS if form in section.data)
        self.commas = any(COMMA.fullmatch(section.records.get(name, "")) for name in FACTORS)

    def spectrum(self) -> Spectrum:
        layout = re.sub(r"\s", "", self.section.records[self.form]).upper()
        if layout.startswith("(X++(Y..Y))"):
            x, y, lines, halves = self._even()
        elif layout.startswith("(XY..XY)"):
            x, y, lines, halves = self._pairs()
        else:
            raise self._refused(
                "the data have a layout that is not read here",
                self.form,
                value=layout[:40],
                allowed="(X++(Y..Y)) or (XY..XY)",
            )
        if not (np.isfinite(x).all() and not np.isinf(y).any()):
            raise self._refused("the data hold numbers too large for a double", self.form)
        return Spectrum(
            title=self.section.records.get("TITLE", ""),
            form=self.form,
            records=self.section.records,
            x=x,
            y=y,
            lines=np.array(lines, dtype=np.int64),
            x_half=halves[0],
            y_half=halves[1],
        )

    def _even(self) -> tuple[Real, Real, list[int], tuple[float, float]]:
        """(X++(Y..Y)): evenly spaced abscissae."""
        found = ordinates_of(map(self._pointed, self.section.data[self.form]), self.file)
        count = len(found.values)
        self._check_count(count)
        factor = self._number("YFACTOR", 1.0)
        first, last, x_half = self._ends(found, count)
        x = np.linspace(first, last, count)
        self._check_abscissae(found, x)
        with np.errstate(over="ignore", invalid="ignore"):
            y = np.array(found.values) * factor
        self._check_first(y, abs(factor) * 10.0**-found.places)
        return x, y, found.lines, (x_half, 0.5 * abs(factor) * 10.0**-found.places)

    def _pairs(self) -> tuple[Real, Real, list[int], tuple[float, float]]:
        """(XY..XY): pairs of numbers, in any number a line."""
        words: list[str] = []
        lines: list[int] = []
        for line in map(self._pointed, self.section.data[self.form]):
            found = [word for word in re.split(r"[\s,;]+", line.text) if word]
            bad = next((word for word in found if word != "?" and not NUMBER.fullmatch(word)), None)
            if bad is not None or len(found) % 2:
                raise InputError(
                    "the line does not hold pairs of numbers",
                    value=(bad or line.text.strip())[:60],
                    allowed="x, y; x, y",
                    file=f"{self.file}:{line.number}",
                )
            words += found
            lines += [line.number] * (len(found) // 2)
        if "?" in words[::2]:
            raise self._refused("an abscissa is marked as not valid", self.form, value="?")
        self._check_count(len(lines))
        factors = self._number("XFACTOR", 1.0), self._number("YFACTOR", 1.0)
        pairs = np.array([np.nan if word == "?" else float(word) for word in words]).reshape(-1, 2)
        halves = [
            0.5 * abs(factor) * 10.0 ** -max(map(_places, words[part::2]))
            for part, factor in enumerate(factors)
        ]
        with np.errstate(over="ignore", invalid="ignore"):
            return pairs[:, 0] * factors[0], pairs[:, 1] * factors[1], lines, (halves[0], halves[1])

    def _ends(self, found: Ordinates, count: int) -> tuple[float, float, float]:
        """First and last abscissa, and half a unit of the last place they are printed to."""
        printed = self._number("XFACTOR", 1.0) * float(found.starts[0][1]) if found.starts else None
        first = self._number("FIRSTX", printed)
        step = self._number("DELTAX", np.nan)
        last = self._number("LASTX", first + step * (count - 1))
        if not np.isfinite(last) or (count > 1 and first == last):
            raise self._refused("the abscissae cannot be told", "LASTX", allowed="LASTX or DELTAX")
        return first, last, 0.5 * 10.0 ** -_places(self.section.records.get("FIRSTX", "0"))

    def _check_count(self, count: int) -> None:
        stated = self._number("NPOINTS", float(count))
        if count == 0 or stated != count:
            raise self._refused(
                "the number of points is not the one stated",
                "NPOINTS",
                value=f"{count} points",
                allowed=f"NPOINTS = {stated:g}",
                remedy="The file was changed or cut; ask for it again",
            )

    def _check_abscissae(self, found: Ordinates, x: Real) -> None:
        """Each line's abscissa against the point it begins with, within half a step and its own rounding."""
        factor = self._number("XFACTOR", 1.0)
        step = abs(x[-1] - x[0]) / max(len(x) - 1, 1)
        for number, word, place, check in found.starts:
            printed = float(word) * factor
            unit = abs(factor) * 10.0 ** -_places(word)
            near = max(0.5 * (step + unit), unit) * (1 - 1e-6)
            places = [place, place + 1] if check else [place]
            if len(x) > 1 and not any(abs(printed - x[min(at, len(x) - 1)]) < near for at in places):
                raise InputError(
                    "the check of the abscissa fails: points are missing or too many before this line",
                    value=word,
                    allowed=f"{x[min(place, len(x) - 1)] / factor:.8g}",
                    remedy="The file was changed or cut; ask for it again",
                    file=f"{self.file}:{number}",
                )

    def _check_first(self, y: Real, unit: float) -> None:
        """FIRSTY is the first ordinate, factor applied (some write it without)."""
        first = self._number("FIRSTY", np.nan)
        if not np.isfinite(first) or not np.isfinite(y[0]):
            return
        factor = self._number("YFACTOR", 1.0)
        near = 0.5 * unit + 0.5 * 10.0 ** -_places(self.section.records["FIRSTY"])
        if min(abs(first - y[0]), abs(first * factor - y[0])) >= near * (1 - 1e-9):
            raise self._refused(
                "FIRSTY is not the first ordinate", "FIRSTY", value=f"{first:g}", allowed=f"{y[0]:g}"
            )

    def _number(self, name: str, default: float | None) -> float:
        """A record's number; the default where there is no such record."""
        text = self.section.records.get(name, "").split(" ")[0]
        if not text and default is not None:
            return default
        if not NUMBER.fullmatch(text):
            raise self._refused(f"{name} is no number", name, value=text[:40] or None, allowed="a number")
        number = float(text.replace(",", "."))
        if not np.isfinite(number) or (name.endswith("FACTOR") and number == 0):
            raise self._refused(f"{name} cannot be used", name, value=text[:40], allowed="a finite number")
        return number

    def _pointed(self, line: DataLine) -> DataLine:
        """The line with decimal points, where the records show decimal commas."""
        return DataLine(line.number, line.text.replace(",", ".")) if self.commas else line

    def _refused(
        self, problem: str, label: str, *, value: object = None, allowed: str = "", remedy: str = ""
    ) -> InputError:
        number = self.section.places.get(label, self.section.number)
        return InputError(problem, value=value, allowed=allowed, remedy=remedy, file=f"{self.file}:{number}")


def _places(word: str) -> int:
    """Decimal places of a printed number, negative for 1e3."""
    found = NUMBER.match(word)
    if found is None:
        return 0
    mantissa, _, exponent = found.group().replace(",", ".").lower().partition("e")
    return len(mantissa.partition(".")[2]) - int(exponent or 0)
