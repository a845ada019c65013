"""A formula against the catalogue medium that it is said to describe, and the numbers printed beside it."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from pulseprop.constants import SPEED_OF_LIGHT, TWO_PI_C
from pulseprop.material.catalogue import Record, record
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.medium import Medium
from pulseprop.material.response import View
from pulseprop.numerics.series import product, variable
from pulseprop.vetting.certificate_catalogue import catalogue_number
from pulseprop.vetting.certificate_copies import agrees
from pulseprop.vetting.formula_sheet import FormulaSheet, medium_of
from pulseprop.vetting.formula_sheet_samples import places

__all__ = ["Likeness", "checks_agree", "differing_constants", "like_claim"]

Real = NDArray[np.float64]

POINTS = 24
ALIKE_INDEX, ALIKE_GVD = 5e-3, 0.03
"""Relative differences of n - 1 and of GVD (to its largest) that melts and records explain (common practice,
no source; between papers on one gas the GVD differs more)."""
FAR_INDEX, FAR_GVD = 0.03, 0.35
"""From here on it is another medium, or a misprint."""
SAME = 1e-9
"""Relative difference of equal constants, as decimals are read."""


@dataclass(frozen=True, kw_only=True)
class Likeness:
    """Largest differences over the shared range: of n - 1, relative, and of GVD, to its largest. worst_nm:
    the wavelength of the largest of GVD."""

    index: float
    gvd: float
    worst_nm: float

    @property
    def alike(self) -> bool:
        """As melts and records are."""
        return self.index <= ALIKE_INDEX and self.gvd <= ALIKE_GVD

    @property
    def far(self) -> bool:
        """Not explained by melts and records."""
        return self.index > FAR_INDEX or self.gvd > FAR_GVD


def like_claim(sheet: FormulaSheet) -> Likeness | None:
    """How the formula lies to its claimed medium; None where there is no claim or no shared range."""
    if not sheet.claimed:
        return None
    claimed = catalogue_medium(sheet.claimed)
    omega = places(sheet, POINTS)
    omega = omega[claimed.band.contains(omega)]
    if len(omega) < 2:
        return None
    index, gvd = _index_and_gvd(medium_of(sheet), omega)
    known, known_gvd = _index_and_gvd(claimed, omega)
    apart = np.abs(gvd - known_gvd)
    return Likeness(
        index=float(np.max(np.abs(index - known) / np.abs(known))),
        gvd=float(np.max(apart) / np.max(np.abs(known_gvd))),
        worst_nm=float(1e9 * TWO_PI_C / omega[int(np.argmax(apart))]),
    )


def checks_agree(sheet: FormulaSheet) -> bool:
    """Whether the formula has every number printed beside it."""
    medium = medium_of(sheet)
    for value in sheet.check:
        number = catalogue_number(medium, value.quantity, value.omega)
        if number is None or not agrees(value.value, number, value.error):
            return False
    return True


def differing_constants(sheet: FormulaSheet) -> Iterator[str]:
    """Where the constants are those of the claimed record but for one: which, and what stands there."""
    if not sheet.claimed:
        return
    known, printed = (
        _constants(record(sheet.claimed)),
        [(t.strength, _second(sheet, t.square, t.constant)) for t in sheet.terms],
    )
    if len(printed) == len(known) - 1:
        missing = [term for term in known if not any(_same(term, other) for other in printed)]
        if len(missing) == 1:
            strength, constant = missing[0]
            yield f"the term with strength {strength:.9g} and resonance constant {constant:.9g} is missing"
    if len(printed) != len(known):
        return
    pairs = [
        (own, other, name)
        for (strength, constant), (s, c) in zip(printed, known, strict=True)
        for own, other, name in ((strength, s, "strength"), (constant, c, "resonance constant"))
    ]
    wrong = [pair for pair in pairs if not np.isclose(pair[0], pair[1], rtol=SAME)]
    if len(wrong) == 1 and len(pairs) > 2:
        own, other, name = wrong[0]
        yield f"a {name} is {own:.9g} and not, as in the catalogue's record, {other:.9g}; all others agree"


def _index_and_gvd(medium: Medium, omega: Real) -> tuple[Real, Real]:
    """n - 1 and GVD, SI, of the formula as printed."""
    refraction = medium.refraction(omega, 3, View.PRINTED)
    wave_number = product(variable(omega, 3), refraction) / SPEED_OF_LIGHT
    return np.real(refraction[0]), 2 * np.real(wave_number[2])


def _constants(entry: Record) -> tuple[tuple[float, float], ...]:
    return tuple(entry.terms)


def _second(sheet: FormulaSheet, square: float, constant: float) -> float:
    return square if sheet.kind in ("sellmeier", "poles") else constant


def _same(one: tuple[float, float], other: tuple[float, float]) -> bool:
    return bool(np.allclose(one, other, rtol=SAME))
