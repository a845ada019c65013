"""TOML files of `vet`: read, checked, and turned into what vetting takes."""

from __future__ import annotations

import hashlib
from collections.abc import Iterator
from pathlib import Path
from typing import Any

from pydantic import ValidationError

from pulseprop.errors import InputError
from pulseprop.material.catalogue import record
from pulseprop.scenario.complaints import findings_of
from pulseprop.scenario.places import Keys, Places, places_in
from pulseprop.scenario.read import Where, parsed, read_scenario, summary, text_of
from pulseprop.scenario.schema_formula import Formula, GasFormula, PoleFormula, PowerFormula, SellmeierFormula
from pulseprop.scenario.schema_vet import ValueTable, VetFile
from pulseprop.vetting.certificate_values import Certificate, PrintedValue
from pulseprop.vetting.formula_sheet import DEFAULT_ERROR, FormulaSheet, PrintedTerm

__all__ = ["read_vet_file"]


def read_vet_file(path: str | Path) -> tuple[Certificate | FormulaSheet, ...]:
    """The certificate, or the formulas, of a TOML file; a whole scenario gives those of its media.

    Raises InputError: all that is wrong with keys and values at once, with their places.
    """
    file = str(path)
    text = text_of(Path(path), file)
    document = parsed(text, file)
    if "pulse" in document:
        return _of_scenario(path)
    try:
        content = VetFile.model_validate(document)
    except ValidationError as error:
        findings = findings_of(error.errors(include_url=False), document)
        raise summary(findings, Where(text, file, {})) from None
    return tuple(_built(content, _Source(file, text)))


class _Source:
    """The file, its checksum, and the lines of its keys."""

    def __init__(self, file: str, text: str) -> None:
        self.file, self.text = file, text
        self.sha256 = hashlib.sha256(text.encode()).hexdigest()
        self._places: Places | None = None

    def line(self, keys: Keys) -> int:
        """Line of a value, counted from 1."""
        if self._places is None:
            self._places = places_in(self.text)
        found = self._places.of_value(keys)
        return found[0] if found else 0


def _of_scenario(path: str | Path) -> tuple[FormulaSheet, ...]:
    scenario = read_scenario(path)
    sheets = tuple(
        _sheet(name, table.formula, scenario.file, scenario.sha256)
        for name, table in scenario.content.medium.items()
        if table.formula is not None
    )
    if not sheets:
        raise InputError(
            "the scenario describes no medium by a formula, so there is nothing to vet",
            file=scenario.file,
            allowed='a [medium."NAME".formula], a [formula] or a [certificate]',
            remedy="To vet a table, name its file and not the scenario",
        )
    return sheets


def _built(content: VetFile, source: _Source) -> Iterator[Certificate | FormulaSheet]:
    if content.certificate is not None:
        yield _certificate(content, source)
        return
    formulas = {name: holder.formula for name, holder in content.medium.items()}
    if content.formula is not None:
        formulas = {content.name or content.title: content.formula}
    beside: dict[str, Any] = {
        "claimed": content.claimed,
        "check": _values(content.check, ("check",), source),
        "error": content.uncertainty or DEFAULT_ERROR,
        "stated": content.uncertainty is not None,
    }
    _check_claim(content.claimed, source)
    for name, formula in formulas.items():
        yield _sheet(name, formula, source.file, source.sha256, **beside)


def _certificate(content: VetFile, source: _Source) -> Certificate:
    table = content.certificate
    assert table is not None
    return Certificate(
        file=source.file,
        sha256=source.sha256,
        name=table.name,
        values=_values(table.values, ("certificate", "values"), source),
        relative_to=table.relative_to,
        temperature=table.temperature,
        source=table.source,
        orientation=table.orientation,
        transparent=table.transparent,
    )


def _values(tables: list[ValueTable], keys: Keys, source: _Source) -> tuple[PrintedValue, ...]:
    return tuple(table.printed(source.line((*keys, number))) for number, table in enumerate(tables))


def _check_claim(name: str, source: _Source) -> None:
    if not name:
        return
    try:
        record(name)
    except InputError as error:
        raise error.located(file=f"{source.file}:{source.line(('claimed',))}", place="claimed") from None


def _sheet(name: str, formula: Formula, file: str, sha256: str, **beside: Any) -> FormulaSheet:
    return FormulaSheet(
        file=file,
        sha256=sha256,
        name=name,
        kind=formula.kind,
        terms=tuple(_terms(formula)),
        valid=formula.valid,
        offset=formula.offset,
        relative_to=formula.relative_to,
        source=formula.source,
        **beside,
    )


def _terms(formula: Formula) -> Iterator[PrintedTerm]:
    """Constants as printed: a resonance stays one, a square a square."""
    if isinstance(formula, SellmeierFormula | PoleFormula):
        for term in formula.terms:
            squared = term.resonance is None
            constant = term.squared if squared else term.resonance
            yield PrintedTerm(strength=term.strength, constant=constant or 0.0, squared=squared)
    elif isinstance(formula, GasFormula):
        for gas in formula.terms:
            yield PrintedTerm(strength=gas.strength, constant=gas.resonance)
    elif isinstance(formula, PowerFormula):
        for power in formula.terms:
            yield PrintedTerm(strength=power.strength, constant=float(power.power))
