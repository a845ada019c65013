"""The proof that printed numbers contradict each other, in their printed units, for a pocket calculator."""

from __future__ import annotations

from collections.abc import Sequence

from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.certificate_proof import KnownRow, Printed
from pulseprop.vetting.certificate_rows import INDICES, ORDERS
from pulseprop.vetting.certificate_values import PrintedValue
from pulseprop.vetting.requirement_answer import FS2_PER_MM
from pulseprop.vetting.result import ConflictRow

__all__ = ["conflict_of"]

LEAST = 1e-9
"""Share of the proof below which a number is left out: it would change no printed digit."""


def conflict_of(values: Sequence[PrintedValue], proof: Printed) -> tuple[ConflictRow, ...]:
    """The numbers that carry the proof, in the order of the file; none where the factor is at most 1.

    The weights are those of the printed values, each in its unit. V_d stands as the difference that it makes
    0, (n_d - 1) - V_d (n_F - n_C), and a zero-dispersion wavelength as the GVD there, in fs^2/mm.
    """
    if proof.least_factor.factor <= 1:
        return ()
    weights = -proof.least_factor.weights  # so that no material is above 0
    parts = [
        (value, row, float(weight), _unit(value))
        for value, row, weight in zip(values, proof.rows, weights, strict=True)
        if abs(weight) * row.error > LEAST
    ]
    total = sum(abs(weight) * unit for _, _, weight, unit in parts)
    return tuple(_entry(value, row, weight * unit / total, unit) for value, row, weight, unit in parts)


def _unit(value: PrintedValue) -> float:
    """SI of one unit of the row."""
    if value.quantity == "V_d":
        return 1.0
    if value.quantity == "zero dispersion wavelength":
        return FS2_PER_MM
    return 1.0 / value.in_unit(1.0)


def _entry(value: PrintedValue, row: KnownRow, weight: float, unit: float) -> ConflictRow:
    less = 1.0 if ORDERS.get(value.quantity) in INDICES else 0.0
    return ConflictRow(
        row=value.line,
        wavelength_nm=float(1e9 * TWO_PI_C / value.omega),
        quantity=_quantity(value),
        weight=weight,
        place=value.words,
        value=row.value / unit + less,
        uncertainty=row.error / unit,
    )


def _quantity(value: PrintedValue) -> str:
    if value.quantity == "V_d":
        return f"n_d - 1 - {value.text} (n_F - n_C)"
    if value.quantity == "zero dispersion wavelength":
        return "gvd, fs^2/mm"
    if ORDERS[value.quantity] == "index":
        return "n"
    return f"{value.quantity}, {value.unit}" if value.unit else value.quantity
