"""A dispersion formula as a vendor prints it: its constants, its range, and numbers printed beside it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from pulseprop.constants import TWO_PI_C
from pulseprop.material.formulas import Formula, Pole, Power, gas_term, pole_term, sellmeier_term
from pulseprop.material.medium import Medium
from pulseprop.material.response import Band
from pulseprop.vetting.certificate_values import PrintedValue

__all__ = ["DEFAULT_ERROR", "FormulaKind", "FormulaSheet", "PrintedTerm", "medium_of"]

FormulaKind = Literal["sellmeier", "poles", "gas", "powers", "index powers"]

DEFAULT_ERROR = 1e-5
"""Uncertainty of n where none is stated."""


@dataclass(frozen=True, kw_only=True)
class PrintedTerm:
    """strength, and the second constant of the term: a resonance (um), its square (um^2) where `squared`, of
    a gas in um^-2; or the power of the wavelength."""

    strength: float
    constant: float
    squared: bool = True

    @property
    def square(self) -> float:
        """The resonance squared, um^2."""
        return self.constant if self.squared else self.constant**2


@dataclass(frozen=True, kw_only=True)
class FormulaSheet:
    """Kinds as in `material.formulas`. valid: (low, high) in rad/s. error: of n, above 0.

    claimed: exact catalogue name of what the formula is said to describe, else "". check: numbers printed
    beside it.
    """

    file: str
    sha256: str
    name: str
    kind: FormulaKind
    terms: tuple[PrintedTerm, ...]
    valid: tuple[float, float]
    offset: float = 0.0
    relative_to: Literal["air", "vacuum"] | None = None
    source: str = ""
    error: float = DEFAULT_ERROR
    stated: bool = False
    claimed: str = ""
    check: tuple[PrintedValue, ...] = ()

    @property
    def range_nm(self) -> tuple[float, float]:
        """Shortest and longest wavelength, nm; infinity where the range reaches to zero frequency."""
        low, high = self.valid
        return 1e9 * TWO_PI_C / high, 1e9 * TWO_PI_C / low if low > 0 else float("inf")


def medium_of(sheet: FormulaSheet) -> Medium:
    """The medium of the formula. Raises InputError where a pole lies inside its range."""
    poles: list[Pole] = []
    powers: list[Power] = []
    offset = sheet.offset
    for term in sheet.terms:
        if sheet.kind == "sellmeier":
            poles.append(sellmeier_term(term.strength, term.square))
        elif sheet.kind == "gas":
            poles.append(gas_term(term.strength, term.constant))
        elif sheet.kind == "poles":
            pole, shift = pole_term(term.strength, term.square)
            poles.append(pole)
            offset += shift
        else:
            powers.append(Power(term.strength, -round(term.constant) // 2))
    return Medium(
        name=sheet.name,
        response=Formula(
            band=Band(*sheet.valid),
            of="refraction" if sheet.kind in ("gas", "index powers") else "chi",
            offset=offset,
            poles=tuple(poles),
            powers=tuple(powers),
        ),
        source=sheet.source,
        relative_to=sheet.relative_to or "vacuum",
    )
