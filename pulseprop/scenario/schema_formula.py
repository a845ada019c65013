"""Published dispersion formulas; L is the wavelength in um, and numbers without a unit are as printed in
um."""

from __future__ import annotations

from functools import partial
from typing import Annotated, Any, Literal

from pydantic import Field, PlainValidator, model_validator

from pulseprop.errors import InputError
from pulseprop.scenario.fields import Against, Range, Table, collected, complain, exactly_one
from pulseprop.units import from_si, quantity

__all__ = [
    "Formula",
    "GasFormula",
    "GasTerm",
    "PoleFormula",
    "PoleTerm",
    "PowerFormula",
    "PowerTerm",
    "ResonanceTerm",
    "SellmeierFormula",
    "SellmeierTerm",
]


def _micrometres(kind: str, unit: str, *, bare: bool = False, above: bool = True) -> PlainValidator:
    """A quantity kept as a number in that power of um; with `bare`, numbers without a unit count as such."""

    def read(value: Any) -> float:
        is_number = isinstance(value, int | float) and not isinstance(value, bool)
        number = float(value) if bare and is_number else float(from_si(quantity(value, kind), unit, kind))
        if not abs(number) < float("inf") or (above and number <= 0):
            raise InputError(
                "the number is out of bounds", value=value, allowed="finite" + " and above 0" * above
            )
        return number

    return PlainValidator(partial(collected, read))


class ResonanceTerm(Table):
    """A term with a resonance, in um, or its square, in um^2."""

    resonance: Annotated[float, _micrometres("length", "um")] | None = None
    resonance_squared: Annotated[float, _micrometres("area", "um^2")] | None = None

    @property
    def squared(self) -> float:
        """The square of the resonance, um^2, whichever way it was given."""
        return self.resonance**2 if self.resonance is not None else self.resonance_squared or 0.0

    @model_validator(mode="after")
    def _one_resonance(self) -> ResonanceTerm:
        exactly_one(self, "resonance", "resonance_squared", remedy="Check whether the square was printed")
        return self


class SellmeierTerm(ResonanceTerm):
    """strength L^2 / (L^2 - resonance^2)."""

    strength: float


class PoleTerm(ResonanceTerm):
    """strength / (L^2 - resonance^2), strength in um^2."""

    strength: Annotated[float, _micrometres("area", "um^2", bare=True, above=False)]


class GasTerm(Table):
    """strength / (resonance - 1/L^2), both in um^-2."""

    strength: Annotated[float, _micrometres("inverse_area", "um^-2", bare=True, above=False)]
    resonance: Annotated[float, _micrometres("inverse_area", "um^-2", bare=True)]


class PowerTerm(Table):
    """strength L^power, the power even, so that the formula is one of omega^2."""

    strength: float
    power: int

    @model_validator(mode="after")
    def _even(self) -> PowerTerm:
        if self.power % 2 or self.power == 0:
            raise complain(
                "the power must be even and not 0", at="power", value=self.power, allowed="-2, 2, -4, …"
            )
        return self


class FormulaTable(Table):
    """What all formulas have. valid: (low, high) in rad/s. relative_to: what the printed index is against,
    if stated."""

    offset: float = 0.0
    valid: Range
    relative_to: Against | None = None
    source: str = ""


class SellmeierFormula(FormulaTable):
    """n^2 - 1 = offset + sum of terms."""

    kind: Literal["sellmeier"]
    terms: Annotated[list[SellmeierTerm], Field(min_length=1)]


class PoleFormula(FormulaTable):
    """n^2 - 1 = offset + sum of terms."""

    kind: Literal["poles"]
    terms: Annotated[list[PoleTerm], Field(min_length=1)]


class GasFormula(FormulaTable):
    """n - 1 = offset + sum of terms."""

    kind: Literal["gas"]
    terms: Annotated[list[GasTerm], Field(min_length=1)]


class PowerFormula(FormulaTable):
    """n^2 - 1 ("powers") or n - 1 ("index powers") = offset + sum of terms."""

    kind: Literal["powers", "index powers"]
    terms: Annotated[list[PowerTerm], Field(min_length=1)]


Formula = Annotated[SellmeierFormula | PoleFormula | GasFormula | PowerFormula, Field(discriminator="kind")]
"""Any formula, told apart by `kind`."""
