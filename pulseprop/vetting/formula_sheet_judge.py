"""A coefficient file, judged: the formula as a function over its stated range."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import replace

import numpy as np

from pulseprop.constants import TWO_PI_C
from pulseprop.errors import NumericalLimit
from pulseprop.vetting.causal import Causality
from pulseprop.vetting.formula_sheet import FormulaSheet
from pulseprop.vetting.formula_sheet_checks import BROKEN, on_its_face
from pulseprop.vetting.formula_sheet_repairs import Mended, mending
from pulseprop.vetting.formula_sheet_samples import Settled, index_at, places, settled_factor
from pulseprop.vetting.request import Request
from pulseprop.vetting.requirement import read_requirement
from pulseprop.vetting.requirement_abbe import abbe_bounds
from pulseprop.vetting.requirement_answer import material_answer
from pulseprop.vetting.result import (
    NOT_SETTLED,
    Bounds,
    ConflictRow,
    Finding,
    ImpliedUncertainty,
    RequirementAnswer,
    Vetted,
)
from pulseprop.vetting.told import Stamp, told, verdict_of

__all__ = ["judge_formula"]

GROSS = 0.03
"""Implied uncertainty of n that no usual measurement has (common practice, no source)."""

BLIND = (
    "a common factor on chi, a stretched wavelength axis, a constant of 0 or more added to n, and air "
    "taken for vacuum leave every test of causality as it is; so does any wrong constant that stays positive",
)


def judge_formula(
    sheet: FormulaSheet, request: Request, *, date: str, version: str, causality: Causality
) -> Vetted:
    """Raises InputError for a requirement that cannot be read. A factor that does not settle is told."""
    sheet = _as_asked(sheet, request)
    face = tuple(on_its_face(sheet))
    broken = any(finding.code in BROKEN for finding in face)
    settled, trouble = _settled(sheet, causality, broken)
    factor = settled.standing.factor if settled else None
    above = factor is not None and factor > 1
    wanted = broken or above or any(finding.severity == "error" for finding in face)
    repairs = mending(sheet, causality) if wanted else []
    findings = (*_contradiction(sheet, settled), *face, *_repairs(repairs), *trouble)
    proven = broken or (factor is not None and above and (sheet.stated or factor * sheet.error > GROSS))
    at = _guaranteed(settled, causality)
    return told(
        file=sheet.file,
        sha256=sheet.sha256,
        stamp=Stamp(date=date, version=version),
        what=_what(sheet, settled),
        verdict=verdict_of(findings, proven=proven, mended=factor if repairs else None),
        headline=_headline(sheet, findings, factor),
        findings=findings,
        factor=factor,
        gap=settled.standing.gap if settled else None,
        stated=sheet.stated,
        implied=ImpliedUncertainty(n=None if factor is None else factor * sheet.error, k=None),
        conflict=_conflict(settled),
        bounds=tuple(at(omega) for omega in request.at or _middle(settled)),
        requirements=tuple(_required(text, at, settled) for text in request.require),
        inferred=tuple(_inferred(sheet)),
        assumptions=_assumptions(sheet),
        blind_spots=BLIND,
        curves=_curves(settled),
    )


def _as_asked(sheet: FormulaSheet, request: Request) -> FormulaSheet:
    """With the claim and the uncertainty of n that an option states in place of the file's."""
    if request.claimed is not None:
        sheet = replace(sheet, claimed=request.claimed)
    stated = request.uncertainty.get("n")
    if stated is None:
        return sheet
    size = float(np.real(index_at(sheet, places(sheet, 2))[1])) if stated.relative else 0.0
    return replace(sheet, error=stated.absolute + stated.relative * size, stated=True)


def _settled(
    sheet: FormulaSheet, causality: Causality, broken: bool
) -> tuple[Settled | None, tuple[Finding, ...]]:
    if broken:
        return None, ()
    try:
        return settled_factor(sheet, causality, thorough=True), ()
    except NumericalLimit as failure:
        return None, (Finding(code=NOT_SETTLED, severity="warning", text=f"{failure}"),)


def _contradiction(sheet: FormulaSheet, settled: Settled | None) -> Iterator[Finding]:
    if settled is None or settled.standing.factor <= 1:
        return
    factor = settled.standing.factor
    yield Finding(
        code="no-passive-material",
        severity="error",
        text=f"No passive causal material that absorbs nothing in the stated range has this index to "
        f"+-{sheet.error:.2g}: the least error at which one has is {factor * sheet.error:.2g}.",
    )


def _repairs(repairs: list[Mended]) -> Iterator[Finding]:
    for mended in repairs:
        yield Finding(
            code="misprint",
            severity="error" if len(repairs) == 1 else "warning",
            text=f"One change makes all of it agree: {mended.words}."
            + ("" if len(repairs) == 1 else " Others do too, and causality cannot tell which is meant."),
            repair=mended.words,
            factor_after_repair=mended.factor,
        )


def _middle(settled: Settled | None) -> tuple[float, ...]:
    """Where bounds are given if none are asked."""
    return () if settled is None else (float(settled.data.omega[len(settled.data.omega) // 2]),)


def _guaranteed(settled: Settled | None, causality: Causality) -> Callable[[float], Bounds]:
    """Bounds by frequency at the sheet's uncertainty."""

    def at(omega: float) -> Bounds:
        if settled is None or settled.standing.factor > 1:
            reason = (
                "the formula is no passive causal material's within its uncertainty, so it guarantees nothing"
            )
        elif not settled.data.omega[0] <= omega <= settled.data.omega[-1]:
            reason = "outside the stated range"
        else:
            return causality.bounds(settled.data, np.array([omega]))[0]
        return Bounds(wavelength_nm=1e9 * TWO_PI_C / omega, reason=reason)

    return at


def _required(text: str, at: Callable[[float], Bounds], settled: Settled | None) -> RequirementAnswer:
    sound = settled is not None and settled.standing.factor <= 1
    data = settled.data if settled is not None and sound else None
    return material_answer(
        read_requirement(text), at, abbe=None if data is None else lambda: abbe_bounds(data)
    )


def _conflict(settled: Settled | None) -> tuple[ConflictRow, ...]:
    """The places of the proof: row counts the samples of the formula along the frequency, from 1."""
    if settled is None or settled.standing.factor <= 1:
        return ()
    data = settled.data
    wavelengths = 1e9 * TWO_PI_C / data.omega
    return tuple(
        ConflictRow(
            row=part.row + 1,
            wavelength_nm=float(wavelengths[part.row]),
            quantity=part.quantity,
            weight=part.weight,
            place=f"sample at {wavelengths[part.row]:.5g} nm",
            value=float(data.index[part.row]),
            uncertainty=float(data.index_error[part.row]),
        )
        for part in settled.standing.conflict
    )


def _what(sheet: FormulaSheet, settled: Settled | None) -> str:
    shortest, longest = sheet.range_nm
    named = f" of {sheet.name}" if sheet.name else ""
    text = f"Formula ({sheet.kind}, {len(sheet.terms)} terms){named}, {shortest:.5g} to {longest:.5g} nm"
    if settled is None:
        return f"{text}."
    change = f"{100 * settled.change:.1g} %"
    return f"{text}, looked at in {settled.rows} places (half as many change the factor by {change})."


def _headline(sheet: FormulaSheet, findings: tuple[Finding, ...], factor: float | None) -> str:
    grave = next((finding for finding in findings if finding.severity == "error"), None)
    if grave is not None:
        return grave.text
    if factor is None:
        return "the uncertainty factor of the formula was not settled."
    return (
        f"a passive causal material has this index to +-{sheet.error:.2g} over the stated range "
        f"(uncertainty factor {factor:.2g})."
    )


def _inferred(sheet: FormulaSheet) -> Iterator[dict[str, str]]:
    if not sheet.stated:
        yield {
            "about": "uncertainty of n",
            "taken": f"{sheet.error:g}",
            "why": "not stated; what good formulas are printed to",
            "overrule": "uncertainty = 1e-4 in the file, or --uncertainty n=1e-4",
        }


def _assumptions(sheet: FormulaSheet) -> tuple[str, ...]:
    shortest, longest = sheet.range_nm
    against = f" The index is against {sheet.relative_to}." if sheet.relative_to else ""
    return (f"Between {shortest:.5g} and {longest:.5g} nm the material absorbs nothing.{against}",)


def _curves(settled: Settled | None) -> dict[str, object]:
    """Arrays for the figure."""
    if settled is None:
        return {}
    data, model = settled.data, settled.standing.index
    curves: dict[str, object] = {
        "n_nm": 1e9 * TWO_PI_C / data.omega,
        "n": data.index,
        "n_error": data.index_error,
        "n_distance": np.full(len(data.omega), np.nan),
    }
    if model is not None:
        curves["n_model_nm"], curves["n_model"] = curves["n_nm"], model
        curves["n_distance"] = (data.index - model) / data.index_error
    return curves
