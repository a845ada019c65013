"""Could any passive causal material have these numbers? The uncertainty factor, and what follows from it."""

from __future__ import annotations

from dataclasses import dataclass

from pulseprop.causality.coarse_features import CoarseFeature, coarse_features
from pulseprop.causality.conflict import Conflict, conflict_of, fewer_rows
from pulseprop.causality.least_factor import FLOOR, least_factor
from pulseprop.causality.passive_class import PassiveClass
from pulseprop.causality.passive_data import PassiveData
from pulseprop.causality.passive_material import PassiveMaterial
from pulseprop.causality.proof import Proof
from pulseprop.causality.proof_check import check_conflict
from pulseprop.causality.unresolved import UnresolvedLine, unresolved_line
from pulseprop.errors import NumericalLimit
from pulseprop.numerics.threads import one_thread

__all__ = ["Feasibility", "feasibility"]


@dataclass(frozen=True, kw_only=True, eq=False)
class Feasibility:
    """What causality says of data.

    factor: of the uncertainties, attained by `material`; certified: proven least factor; gap: their
    difference over the factor (over 0.01 where the factor is less), at most 1e-3. conflict: the proof, where
    the factor is above 1. unresolved: a line too narrow for the rows that would explain the conflict: data
    with one are not to be called contradictory. coarse: features of k with fewer than five rows over their
    width.
    """

    factor: float
    certified: float
    gap: float
    conflict: Conflict | None
    unresolved: UnresolvedLine | None
    coarse: tuple[CoarseFeature, ...]
    material: PassiveMaterial


@one_thread()
def feasibility(data: PassiveData, *, thorough: bool = True) -> Feasibility:
    """The least factor by which all uncertainties of the data must be stretched for a material to exist.

    thorough: with conflict and unresolved lines, where the factor is above 1.

    Raises NumericalLimit where the factor cannot be proven to a thousandth.
    """
    cls = PassiveClass(data)
    attained, proof = least_factor(cls)
    conflict, unresolved = None, None
    if thorough and proof.factor > 1:
        shorter = fewer_rows(cls, proof)
        conflict = _checked(data, cls, shorter)
        unresolved = unresolved_line(cls, attained, shorter)
    return Feasibility(
        factor=attained.factor,
        certified=proof.factor,
        gap=(attained.factor - proof.factor) / max(attained.factor, FLOOR),
        conflict=conflict,
        unresolved=unresolved,
        coarse=_coarse(data),
        material=PassiveMaterial(cls, attained),
    )


def _checked(data: PassiveData, cls: PassiveClass, proof: Proof) -> Conflict:
    conflict = conflict_of(cls, proof)
    checked = check_conflict(data, conflict)
    if not checked.holds:
        raise NumericalLimit(
            "the rows in conflict do not prove it when checked on their own",
            value=f"an excess of {checked.worst:.2g}",
            allowed="0 or less",
            remedy="Give fewer rows, or larger uncertainties: these are near the limit of double precision",
        )
    return conflict


def _coarse(data: PassiveData) -> tuple[CoarseFeature, ...]:
    if data.k_omega is None or data.k is None or data.k_error is None:
        return ()
    return coarse_features(data.k_omega, data.k, data.k_error)
