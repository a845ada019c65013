"""What `vet` takes as TOML: the printed numbers of a certificate, or a dispersion formula.

[certificate]                 name, relative_to, temperature, orientation, transparent, source, values
[formula]                     as in a scenario; or [medium.NAME.formula]
check, uncertainty, claimed   beside a formula: printed numbers, the uncertainty of n, a catalogue name
"""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import Field, PlainValidator, model_validator

from pulseprop.errors import InputError
from pulseprop.scenario.fields import Against, Name, Range, Table, complain, exactly_one
from pulseprop.scenario.schema_formula import Formula
from pulseprop.vetting.certificate_values import PRINTABLE, PrintedValue, printed_value

__all__ = ["CertificateTable", "FormulaHolder", "ValueTable", "VetFile"]

PLAIN = {name.replace(" ", "_"): name for name in PRINTABLE}
"""Keys with underscores are read too, as TOML writers like them."""


def _as_printed(value: Any) -> str:
    """A text keeps its digits; a number is taken as its shortest decimal."""
    if isinstance(value, str) and value.strip():
        return value
    if isinstance(value, int | float) and not isinstance(value, bool) and abs(value) < float("inf"):
        return repr(value)
    raise complain(
        "this is no printed number", value=value, allowed='a text such as "1.51680" or "36.2 fs^2/mm"'
    )


def _quantity(value: Any) -> str:
    name = PLAIN.get(value, value) if isinstance(value, str) else value
    if name not in PRINTABLE:
        raise complain("nothing of this name can be printed", value=value, allowed=", ".join(PRINTABLE))
    return str(name)


AsPrinted = Annotated[str, PlainValidator(_as_printed)]


class ValueTable(Table):
    """One printed number. value and uncertainty: texts, which keep their digits and units."""

    quantity: Annotated[str, PlainValidator(_quantity)]
    value: AsPrinted
    at: str | None = None
    uncertainty: AsPrinted | None = None

    @model_validator(mode="after")
    def _readable(self) -> ValueTable:
        try:
            self.printed()
        except InputError as error:
            known = error.complaint
            raise complain(
                known.problem,
                at="value" if known.value is not None else "",
                value=known.value,
                allowed=known.allowed,
                remedy=known.remedy,
            ) from None
        return self

    def printed(self, line: int = 0) -> PrintedValue:
        """The number in SI."""
        return printed_value(self.quantity, self.value, at=self.at, uncertainty=self.uncertainty, line=line)


class CertificateTable(Table):
    """[certificate]. transparent: where the material absorbs nothing. orientation: of a crystal."""

    name: str = ""
    values: Annotated[list[ValueTable], Field(min_length=1)]
    relative_to: Against | None = None
    temperature: str = ""
    source: str = ""
    orientation: Literal["", "random", "o", "e", "x", "y", "z"] = ""
    transparent: Range | None = None


class FormulaHolder(Table):
    """[medium.NAME] with a formula and nothing else."""

    formula: Formula
    source: str = ""
    note: str = ""


def _error(value: Any) -> float:
    """An uncertainty of n, as a number or a text."""
    try:
        number = float(value) if not isinstance(value, bool) else float("nan")
    except (TypeError, ValueError):
        number = float("nan")
    if not 0 < number < 1:
        raise complain("this is no uncertainty of n", value=value, allowed="a number above 0 such as 1e-5")
    return number


class VetFile(Table):
    """The file: a certificate, a formula, or media with formulas."""

    title: str = ""
    note: str = ""
    laboratory: str = ""
    certificate: CertificateTable | None = None
    formula: Formula | None = None
    medium: dict[Name, FormulaHolder] = Field(default_factory=dict)
    name: str = ""
    claimed: str = ""
    uncertainty: Annotated[float, PlainValidator(_error)] | None = None
    check: list[ValueTable] = Field(default_factory=list)

    @model_validator(mode="after")
    def _one_thing(self) -> VetFile:
        exactly_one(
            self,
            "certificate",
            "formula",
            "medium",
            remedy='Give a [certificate] with values, a [formula], or a [medium."NAME".formula]',
        )
        beside = self.given("check", "claimed", "uncertainty")
        if self.certificate is not None and beside:
            raise complain(
                "this belongs to a formula", at=beside[0], remedy="Put it into the certificate's values"
            )
        if len(self.medium) > 1 and self.given("check", "claimed"):
            raise complain(
                "it is not clear which of the media this is about",
                at=self.given("check", "claimed")[0],
                remedy="Put each medium into a file of its own",
            )
        return self
