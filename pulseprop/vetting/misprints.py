"""Slips of the pen in one number: a wrong digit, two digits exchanged, a decimal point in the wrong place."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise

__all__ = ["Misprint", "misprint"]


@dataclass(frozen=True)
class Misprint:
    """reads: the number as it may have been meant. words: what happened, a sentence."""

    reads: str
    words: str


def misprint(printed: str, fit: tuple[float, float]) -> Misprint | None:
    """The slip that turns a number within `fit` into the printed one; None where no single slip does.

    Digits exchanged go before a wrong digit. Of several digits that would do, that whose number lies nearest
    the middle is taken.
    """
    middle = sum(fit) / 2
    for words, candidates in (
        ("Two neighbouring digits are exchanged.", _exchanged(printed)),
        ("One digit is wrong.", _changed(printed)),
        ("The decimal point is in the wrong place.", _moved_point(printed)),
    ):
        fitting = [text for text in candidates if fit[0] <= float(text.replace(",", ".")) <= fit[1]]
        if fitting:
            best = min(fitting, key=lambda text: abs(float(text.replace(",", ".")) - middle))
            return Misprint(best, words)
    return None


def _exchanged(text: str) -> list[str]:
    places = [at for at, sign in enumerate(text) if sign.isdigit()]
    found = []
    for one, other in pairwise(places):
        if text[one] != text[other]:
            signs = list(text)
            signs[one], signs[other] = signs[other], signs[one]
            found.append("".join(signs))
    return [other for other in found if _is_number(other)]


def _changed(text: str) -> list[str]:
    digits = [at for at, sign in enumerate(text) if sign.isdigit()]
    found = [
        text[:at] + digit + text[at + 1 :] for at in digits for digit in "0123456789" if digit != text[at]
    ]
    return [other for other in found if _is_number(other)]


def _moved_point(text: str) -> list[str]:
    point = next((sign for sign in ".," if sign in text), None)
    if point is None:
        return []
    bare = text.replace(point, "")
    return [
        bare[:at] + point + bare[at:]
        for at in range(1, len(bare))
        if at != text.index(point) and bare.isdigit()
    ]


def _is_number(text: str) -> bool:
    try:
        float(text.replace(",", "."))
    except ValueError:
        return False
    return True
