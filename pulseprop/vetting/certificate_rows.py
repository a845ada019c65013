"""From printed numbers to rows that are linear in where the material absorbs.

An index, a group index or an order is one as it stands. V_d says (n_d - 1) - V_d (n_F - n_C) = 0 within its
error times n_F - n_C, a zero-dispersion wavelength GVD = 0 within its error times the slope of GVD; these two
factors are taken from the material that fits best, and settle in a few rounds.
"""

from __future__ import annotations

from collections.abc import Sequence

from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.certificate_functionals import Order, Term
from pulseprop.vetting.certificate_proof import KnownRow, LeastFactor, Printed
from pulseprop.vetting.certificate_values import PrintedValue
from pulseprop.vetting.requirement_quantities import LINE_C, LINE_D, LINE_F

__all__ = ["ABBE_ABOVE", "ABBE_BELOW", "INDICES", "ORDERS", "proof_of", "terms_of"]

ORDERS: dict[str, Order] = {
    "n_d": "index",
    "n_F": "index",
    "n_C": "index",
    "index": "index",
    "group index": "group index",
    "gvd": "gvd",
    "tod": "tod",
    "fod": "fod",
    "zero dispersion wavelength": "gvd",
}
INDICES = ("index", "group index")

ABBE_ABOVE = (Term(order="index", omega=LINE_D),)
ABBE_BELOW = (
    Term(order="index", omega=LINE_F),
    Term(order="index", omega=LINE_C, weight=-1.0),
)
"""V_d is the first over the second."""

ROUNDS = 3
TYPICAL_ABBE_BELOW, TYPICAL_TOD = 0.01, 75e-42
"""n_F - n_C and TOD (s^3/m) of glasses, to begin with."""


def terms_of(value: PrintedValue) -> tuple[Term, ...]:
    """What the row of the value sums; for V_d the difference that is 0."""
    if value.quantity == "V_d":
        return (
            *ABBE_ABOVE,
            *(Term(order=t.order, omega=t.omega, weight=-value.value * t.weight) for t in ABBE_BELOW),
        )
    return (Term(order=ORDERS[value.quantity], omega=value.omega),)


def proof_of(values: Sequence[PrintedValue], band: tuple[float, float]) -> Printed:
    """The rows of these values, with a transparent band (rad/s)."""
    proof = Printed([_row(value, None) for value in values], band)
    if all(value.quantity not in ("V_d", "zero dispersion wavelength") for value in values):
        return proof
    for _ in range(ROUNDS):
        proof = Printed([_row(value, proof.least_factor) for value in values], band)
    return proof


def _row(value: PrintedValue, material: LeastFactor | None) -> KnownRow:
    terms = terms_of(value)
    if value.quantity == "V_d":
        below = TYPICAL_ABBE_BELOW if material is None else material.value(ABBE_BELOW)
        return KnownRow(terms=terms, value=0.0, error=value.error * max(below, 1e-3 * TYPICAL_ABBE_BELOW))
    if value.quantity == "zero dispersion wavelength":
        slope = (
            TYPICAL_TOD if material is None else abs(material.value((Term(order="tod", omega=value.omega),)))
        )
        reach = value.omega**2 / TWO_PI_C * value.error
        return KnownRow(terms=terms, value=0.0, error=max(slope, 1e-2 * TYPICAL_TOD) * reach)
    less = 1.0 if ORDERS[value.quantity] in INDICES else 0.0
    return KnownRow(terms=terms, value=value.value - less, error=value.error)
