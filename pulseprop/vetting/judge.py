"""The judge: a table of n, of n and k, or of absorption, and the answer to `vet`."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import asdict, replace
from typing import Any

import numpy as np

from pulseprop.causality.passive_data import PassiveData
from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.absorption_rows import absorption_column
from pulseprop.vetting.case import Case, case_of
from pulseprop.vetting.causal import Causality, Part
from pulseprop.vetting.checks import found_in
from pulseprop.vetting.faces import inferred_medium
from pulseprop.vetting.few_rows import few_rows
from pulseprop.vetting.grade import implied_uncertainty
from pulseprop.vetting.guaranteed import guaranteed, guaranteed_abbe, guaranteed_transmittance
from pulseprop.vetting.request import Request
from pulseprop.vetting.requirement import read_requirement
from pulseprop.vetting.requirement_answer import DECISION_RULE as THREE_WAY
from pulseprop.vetting.requirement_answer import material_answer, with_unmet
from pulseprop.vetting.result import NOT_SETTLED, Bounds, ConflictRow, Finding, Vetted
from pulseprop.vetting.table import Inference, SentTable
from pulseprop.vetting.verdict import decision_rule, verdict_on
from pulseprop.vetting.words import BLIND_SPOTS, assumptions, headline, sentence, what_was_vetted

__all__ = ["judge"]

SHOWN = 2
"""Rows at each end of which the wavelength asked by default keeps away."""


def judge(table: SentTable, request: Request, *, date: str, version: str, causality: Causality) -> Vetted:
    """The whole answer on one table.

    Raises InputError for a requirement or a claimed medium that cannot be read.
    """
    asked = [read_requirement(text) for text in request.require]
    case = case_of(table, request, causality)
    few = few_rows(case)
    findings = (*found_in(case, few), *_not_settled(case))
    verdict = verdict_on(case, findings)
    conflict, implied = _conflict(case), implied_uncertainty(case)
    answers = tuple(
        material_answer(
            requirement,
            lambda omega: guaranteed(case, np.array([omega]))[0],
            transmitted=lambda omega, length: guaranteed_transmittance(case, omega, length),
            abbe=lambda: guaranteed_abbe(case),
        )
        for requirement in asked
    )
    return Vetted(
        file=table.file,
        sha256=table.sha256,
        date=date,
        version=version,
        what=what_was_vetted(case),
        verdict=verdict,
        headline=headline(case, verdict, implied, conflict, few, findings),
        sentence=with_unmet(sentence(case, verdict, conflict, few, findings), answers),
        decision_rule=" ".join((decision_rule(case), *([THREE_WAY] if asked else []))),
        uncertainty_factor=case.factor,
        certified_gap=case.standing.gap if case.standing else None,
        uncertainty_stated=case.numbers.stated,
        implied_uncertainty=implied,
        factor_without_conflict_rows=few.factor if few else None,
        conflict=conflict,
        bounds=_bounds(case),
        requirements=answers,
        findings=findings,
        inferred=tuple(asdict(inference) for inference in _inferred(table, request)),
        assumptions=assumptions(case),
        blind_spots=BLIND_SPOTS,
        curves=_curves(case),
    )


def _inferred(table: SentTable, request: Request) -> Iterator[Inference]:
    """What reading the file and what judging it had to find out."""
    yield from table.inferred
    faces = inferred_medium(table, request)
    if faces is not None:
        yield faces


def _not_settled(case: Case) -> Iterator[Finding]:
    if case.trouble:
        yield Finding(code=NOT_SETTLED, severity="warning", text=case.trouble)


def _conflict(case: Case) -> tuple[ConflictRow, ...]:
    """The rows of the proof with their lines in the file, in the order of the file."""
    numbers, standing = case.numbers, case.standing
    repeat = numbers.repeat
    if repeat is not None and repeat.factor > 1 and (standing is None or repeat.factor >= standing.factor):
        low, high = repeat.rows
        place = case.wavelength_nm(max(low, high))
        pair = ((low, -0.5), (high, 0.5))
        return tuple(
            ConflictRow(row=0, wavelength_nm=place, quantity="n", weight=weight, place="anchor")
            if row < 0
            else _row(case, row, repeat.quantity, weight)
            for row, weight in pair
        )
    if standing is None or standing.factor <= 1:
        return ()
    entries = []
    for part in standing.conflict:
        row = int((numbers.index_rows if part.quantity == "n" else numbers.k_rows)[part.row])
        entry = _anchor(case, part) if row < 0 else _row(case, row, part.quantity, part.weight)
        value, uncertainty = _in_proof(numbers.data, part)
        entries.append(replace(entry, value=value, uncertainty=uncertainty))
    return tuple(sorted(entries, key=lambda entry: entry.row))


def _in_proof(data: PassiveData | None, part: Part) -> tuple[float | None, float | None]:
    """Value and uncertainty of a row."""
    if data is None:
        return None, None
    columns = (data.index, data.index_error) if part.quantity == "n" else (data.k, data.k_error)
    value, error = (None if column is None else float(column[part.row]) for column in columns)
    return value, error


def _anchor(case: Case, part: Part) -> ConflictRow:
    """Row 0, where no line of the file is."""
    data = case.numbers.data
    assert data is not None
    nm = float(TWO_PI_C / data.omega[part.row] * 1e9)
    return ConflictRow(row=0, wavelength_nm=nm, quantity="n", weight=part.weight, place="anchor")


def _row(case: Case, row: int, quantity: Any, weight: float) -> ConflictRow:
    return ConflictRow(
        row=case.lines([row])[0], wavelength_nm=case.wavelength_nm(row), quantity=quantity, weight=weight
    )


def _bounds(case: Case) -> tuple[Bounds, ...]:
    """At the asked frequencies; where none was asked, at the middle of a transparent table (they cost more
    where it absorbs).
    """
    asked = case.request.at
    if not asked and case.numbers.data is not None and case.numbers.data.k is None:
        omega = case.numbers.data.omega
        asked = (float(omega[len(omega) // 2]),) if len(omega) > 2 * SHOWN else ()
    return tuple(guaranteed(case, np.array(asked))) if asked else ()


def _curves(case: Case) -> dict[str, Any]:
    """Arrays for the figure: printed values over wavelength, the best material, distance in uncertainties.

    Where no material was looked for, the column of n or of absorption alone.
    """
    data, standing = case.numbers.data, case.standing
    if data is None or standing is None:
        return _column_alone(case.table)
    curves: dict[str, Any] = {}
    parts = [("n", data.omega, data.index, data.index_error, standing.index)]
    if data.k_omega is not None and data.k is not None and data.k_error is not None:
        parts.append(("k", data.k_omega, data.k, data.k_error, standing.k))
    for name, omega, values, error, model in parts:
        curves[f"{name}_nm"] = TWO_PI_C / omega * 1e9
        curves[name], curves[f"{name}_error"] = values, error
        curves[f"{name}_distance"] = np.full(len(values), np.nan)
        if model is not None:
            curves[f"{name}_model_nm"], curves[f"{name}_model"] = TWO_PI_C / omega * 1e9, model
            curves[f"{name}_distance"] = (values - model) / error
    return curves


def _column_alone(table: SentTable) -> dict[str, Any]:
    column = absorption_column(table) or table.column("n")
    if column is None:
        return {}
    return {
        f"{column.quantity}_nm": TWO_PI_C / table.omega * 1e9,
        column.quantity: column.values * (100 if column.quantity == "transmittance" else 1),
        f"{column.quantity}_row": table.lines,
    }
