"""What the user says of a table instead of having it inferred."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from pulseprop.errors import InputError
from pulseprop.units import quantity
from pulseprop.vetting.heading_units import known_unit
from pulseprop.vetting.heading_words import AXES, QUANTITIES, Meaning, is_extinction, meaning_of

__all__ = ["MOLAR_REMEDY", "Named", "ReadOptions", "named_columns"]

Surrounding = Literal["air", "vacuum"]
SKIPPED = ("-", "skip", "")
MOLAR_REMEDY = (
    "Multiply a molar (decadic) column by the concentration and by 2.302585, a cross section by the number "
    "density, and call it alpha with its unit; or send the absorbance with --thickness"
)


@dataclass(frozen=True, kw_only=True)
class ReadOptions:
    """Options of reading, as typed; None leaves the matter to inference.

    columns: "wavelength,n,k", "-" leaves one out, "alpha/cm^-1" has a unit. unit: of the spectral axis.
    thickness: "2 mm", or a number in m. uncertainty: "n=1e-4,k=2%"; see `uncertainty_text`.
    """

    columns: str | None = None
    unit: str | None = None
    relative_to: Surrounding | None = None
    wavelength_in: Surrounding | None = None
    thickness: str | float | None = None
    uncertainty: str | None = None

    def length(self) -> float | None:
        """The thickness in m. Raises InputError where it is no length above zero."""
        if self.thickness is None:
            return None
        given = self.thickness
        length = quantity(given, "length") if isinstance(given, str) else float(given)
        if not 0 < length < float("inf"):
            raise InputError("a thickness must be above zero", value=self.thickness, place="thickness")
        return length

    def axis_unit(self) -> str | None:
        """The unit of the axis in our spelling. Raises InputError where it is none."""
        return None if self.unit is None else known_unit(self.unit)


@dataclass(frozen=True)
class Named:
    """A column as the option calls it; meaning is None for one left out, unit None where none is said."""

    meaning: Meaning | None
    unit: str | None = None


def named_columns(text: str) -> tuple[Named, ...]:
    """The columns of an option "wavelength,n,k". Raises InputError for names that are not known, for no axis
    or more than one, or for a quantity that stands twice."""
    named = tuple(_named(part.strip()) for part in text.split(","))
    meanings = [column.meaning for column in named if column.meaning is not None]
    axes = [meaning for meaning in meanings if meaning in AXES]
    if len(axes) != 1:
        problem = "no column is the spectral axis" if not axes else "more than one column is a spectral axis"
        raise _refused(problem, text, "one of " + ", ".join(AXES))
    if len(meanings) < 2:
        raise _refused("no column holds a quantity", text, ", ".join(QUANTITIES))
    if len(set(meanings)) < len(meanings):
        raise _refused("a quantity stands twice", text, 'each once; "-" leaves a column out')
    return named


def _named(part: str) -> Named:
    if part in SKIPPED:
        return Named(None)
    name, _, unit = part.partition("/")
    meaning = _meaning(name.strip(), part)
    return Named(meaning, known_unit(unit.strip()) if unit.strip() else None)


def _meaning(name: str, part: str) -> Meaning:
    for known in (*AXES, *QUANTITIES):
        if name.lower() == known:
            return known
    if is_extinction(name):
        raise _refused(
            "the word extinction has several meanings", part, "k, absorbance, or alpha, whichever is meant"
        )
    if name.lower().startswith("molar"):
        raise InputError(
            "absorption per amount of substance gives an absorption only with the concentration",
            value=part,
            allowed="alpha (Napierian, per length), absorbance, k",
            remedy=MOLAR_REMEDY,
            place="columns",
        )
    meaning = meaning_of(name)
    if meaning is None:
        raise _refused("no such column", part, ", ".join((*AXES, *QUANTITIES, '"-" to leave one out')))
    return meaning


def _refused(problem: str, value: str, allowed: str) -> InputError:
    return InputError(problem, value=value, allowed=allowed, place="columns")
