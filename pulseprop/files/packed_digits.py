"""Ordinates of JCAMP-DX lines: plain (AFFN), packed (PAC), squeezed (SQZ), differences (DIF), repeats (DUP).

R. S. McDonald and P. A. Wilks, Appl. Spectrosc. 42, 151-162 (1988), the IUPAC standard for infrared and other
spectra (from memory): each line begins with its abscissa in plain digits. A sign begins a packed number; the
letters of SQUEEZED stand for the leading digit and its sign, those of DIFFERENCES for a difference to the
ordinate before; REPEATS says how often the last ordinate or difference stands in all. A line that ends in a
difference is checked by the first ordinate of the next, which repeats its last one.
"""

from __future__ import annotations

import math
import re
from collections.abc import Iterable
from dataclasses import dataclass, field

from pulseprop.errors import InputError

__all__ = ["DataLine", "Ordinates", "ordinates_of"]

SQUEEZED = {sign: digit for digit, sign in enumerate("@ABCDEFGHI")} | {
    sign: -digit for digit, sign in enumerate("abcdefghi", start=1)
}
DIFFERENCES = {sign: digit for digit, sign in enumerate("%JKLMNOPQR")} | {
    sign: -digit for digit, sign in enumerate("jklmnopqr", start=1)
}
REPEATS = {sign: digit for digit, sign in enumerate("STUVWXYZs", start=1)}

PLAIN = r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)"
WORD = re.compile(PLAIN + r"(?:[eE][+-]?[0-9]{1,3})?")
TOKEN = re.compile(
    rf"(?P<plain>{PLAIN}(?:[eE][+-][0-9]{{1,3}})?)|(?P<packed>[@A-Ia-i%J-Rj-r][0-9]*\.?[0-9]*)"
    r"|(?P<repeat>[S-Zs][0-9]*)|(?P<gap>\?)|(?P<space>[\s,;]+)"
)
MOST = 20_000_000
"""Ordinates in one spectrum; a repeat count beyond it is a broken file."""


@dataclass(frozen=True)
class DataLine:
    """A line of the data, with its number in the file."""

    number: int
    text: str


@dataclass(kw_only=True)
class Ordinates:
    """values: as printed, NaN where the file has "?". lines: the line of each. places: most decimal places.

    starts: for each line its number, its abscissa as printed, the index of the ordinate it belongs to, and
    whether that ordinate is a check of the one before.
    """

    values: list[float] = field(default_factory=list)
    lines: list[int] = field(default_factory=list)
    starts: list[tuple[int, str, int, bool]] = field(default_factory=list)
    places: int = 0


def ordinates_of(lines: Iterable[DataLine], file: str) -> Ordinates:
    """The ordinates of (X++(Y..Y)) data.

    Raises InputError with the line for signs that are no packed digits, for a failed check of an ordinate,
    and for a difference or a repeat of nothing.
    """
    found = [line for line in lines if line.text.strip()]
    if all(_is_plain(line.text) for line in found):
        return _plain(found)
    return _Decoder(file).decode(found)


def _words(text: str) -> list[str]:
    return re.split(r"[\s,;]+", text.strip(" \t,;"))


def _is_plain(text: str) -> bool:
    words = _words(text)
    return len(words) > 1 and all(WORD.fullmatch(word) or word == "?" for word in words)


def _plain(lines: Iterable[DataLine]) -> Ordinates:
    """Free-format numbers; nothing is packed."""
    result = Ordinates()
    for line in lines:
        abscissa, *words = _words(line.text)
        result.starts.append((line.number, abscissa, len(result.values), False))
        result.values += [math.nan if word == "?" else float(word) for word in words]
        result.lines += [line.number] * len(words)
        result.places = max(result.places, *map(_places, words))
    return result


def _places(word: str) -> int:
    mantissa, _, exponent = word.lower().partition("e")
    return len(mantissa.partition(".")[2]) - int(exponent or 0) if word != "?" else 0


class _Decoder:
    """Ordinate by ordinate; `step` is the last difference, None after an ordinate that stands for itself."""

    def __init__(self, file: str) -> None:
        self.file = file
        self.result = Ordinates()
        self.step: float | None = None
        self.line = 0
        self.check = False

    def decode(self, lines: Iterable[DataLine]) -> Ordinates:
        for line in lines:
            self.line = line.number
            self._decode_line(line.text)
        return self.result

    def _decode_line(self, text: str) -> None:
        tokens = self._tokens(text)
        if not tokens or tokens[0][0] != "plain":
            raise self._broken("the line does not begin with its abscissa", text)
        self.check = self.step is not None
        place = len(self.result.values) - self.check
        self.result.starts.append((self.line, tokens[0][1], place, self.check))
        for kind, word in tokens[1:]:
            self._take(kind, word, text)

    def _tokens(self, text: str) -> list[tuple[str, str]]:
        tokens, position = [], 0
        while position < len(text):
            match = TOKEN.match(text, position)
            if match is None:
                raise self._broken("this is no digit of JCAMP-DX data", text[position])
            position = match.end()
            if match.lastgroup != "space":
                tokens.append((str(match.lastgroup), match.group()))
        return tokens

    def _take(self, kind: str, word: str, text: str) -> None:
        if kind == "gap":
            self._add(math.nan, None)
        elif kind == "plain":
            self.result.places = max(self.result.places, _places(word))
            self._value(float(word), word)
        elif kind == "repeat":
            self._repeat(REPEATS[word[0]], word)
        elif word[0] in SQUEEZED:
            self._value(_unpacked(SQUEEZED[word[0]], word), word)
        else:
            self._difference(_unpacked(DIFFERENCES[word[0]], word), text)
        if kind == "packed":
            self.result.places = max(self.result.places, len(word.partition(".")[2]))

    def _value(self, value: float, word: str) -> None:
        """An ordinate that stands for itself; the first after a difference is a check."""
        if not self.check:
            self._add(value, None)
            return
        self.check, self.step = False, None
        before = self.result.values[-1]
        if abs(value - before) > 1e-9 * max(abs(value), abs(before)):
            raise InputError(
                "the check of the ordinate fails: the line before ends at another value",
                value=word,
                allowed=f"{before:g}",
                remedy="The file was changed or cut; ask for it again",
                file=f"{self.file}:{self.line}",
            )

    def _difference(self, step: float, text: str) -> None:
        if not self.result.values or self.check:
            raise self._broken("a difference stands before any ordinate of its line", text)
        self._add(self.result.values[-1] + step, step)

    def _repeat(self, count: float, word: str) -> None:
        """The last ordinate or difference stands `count` times in all."""
        count = float(str(int(count)) + word[1:])
        if not self.result.values or self.check or count < 1:
            raise self._broken("a repeat stands where there is nothing to repeat", word)
        if len(self.result.values) + count > MOST:
            raise self._broken("a repeat goes on for ever", word)
        for _ in range(int(count) - 1):
            self._add(self.result.values[-1] + (self.step or 0.0), self.step)

    def _add(self, value: float, step: float | None) -> None:
        self.result.values.append(value)
        self.result.lines.append(self.line)
        self.step = step

    def _broken(self, problem: str, text: str) -> InputError:
        return InputError(
            problem,
            value=text.strip()[:60],
            allowed="AFFN, PAC, SQZ, DIF and DUP digits of JCAMP-DX",
            file=f"{self.file}:{self.line}",
        )


def _unpacked(leading: int, word: str) -> float:
    """The number whose leading digit and sign are packed in its first letter."""
    sign = -1.0 if leading < 0 else 1.0
    return sign * float(f"{abs(leading)}{word[1:]}")
