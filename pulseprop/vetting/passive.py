"""The passive causal tests of `pulseprop.causality` as the judge asks for them."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from pulseprop.causality.bounds import PassiveBounds, bounds
from pulseprop.causality.conflict import suspects, without_rows
from pulseprop.causality.feasibility import feasibility
from pulseprop.causality.least_factor import factor_with
from pulseprop.causality.passive_class import PassiveClass
from pulseprop.causality.passive_data import PassiveData
from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.causal import FewRows, Part, Standing, Unresolved
from pulseprop.vetting.result import Bounds

__all__ = ["PassiveCausality"]

Real = NDArray[np.float64]
Interval = tuple[float, float]

FS2_PER_MM, FS3_PER_MM = 1e-27, 1e-42


class PassiveCausality:
    """See `causal.Causality`."""

    def standing(self, data: PassiveData, *, thorough: bool) -> Standing:
        """The least factor, certified; thorough: with proof and unresolved lines."""
        found = feasibility(data, thorough=thorough)
        line, conflict = found.unresolved, found.conflict
        return Standing(
            factor=found.factor,
            gap=found.gap,
            conflict=tuple(
                Part(quantity=row.quantity, row=row.row, weight=row.weight)
                for row in (conflict.rows if conflict else ())
            ),
            unresolved=Unresolved(omega=line.omega, spacing=line.spacing, windows=line.windows)
            if line
            else None,
            coarse=tuple(feature.omega for feature in found.coarse),
            index=_finite(found.material.index(data.omega)),
            k=None if data.k_omega is None else found.material.k(data.k_omega),
            proof=conflict,
        )

    def quick_factor(self, data: PassiveData) -> float:
        """From one programme with the first choice of masses."""
        cls = PassiveClass(data)
        count = len(cls.target)
        nothing = np.zeros((count, 0))
        factor, _ = factor_with(cls, cls.first_masses(), nothing, np.zeros(0), np.ones(count, dtype=bool))
        return factor

    def few_rows(self, data: PassiveData, standing: Standing) -> FewRows | None:
        """The heaviest row of each proof in turn, three at most."""
        found = suspects(data, standing.proof) if standing.proof is not None else None
        rest = without_rows(data, found.rows) if found is not None else None
        if found is None or rest is None:
            return None
        weights = {(part.quantity, part.row): part.weight for part in standing.conflict}
        parts = tuple(
            Part(quantity=quantity, row=row, weight=weights.get((quantity, row), 0.0))
            for quantity, row in found.rows
        )
        return FewRows(parts=parts, factor=found.factor, data=rest)

    def bounds(self, data: PassiveData, omega: Real) -> Sequence[Bounds]:
        """In the units of the answer."""
        return [_told(one) for one in bounds(data, omega)]


def _told(found: PassiveBounds) -> Bounds:
    return Bounds(
        wavelength_nm=_nm(found.omega),
        index=found.index,
        group_index=found.group_index,
        gvd_fs2_per_mm=_in(found.gvd, FS2_PER_MM),
        tod_fs3_per_mm=_in(found.tod, FS3_PER_MM),
        reason=found.reason,
    )


def _finite(index: Real) -> Real | None:
    """None where a line of the material lies on an end row."""
    return index if np.all(np.isfinite(index)) else None


def _nm(omega: float) -> float:
    """Rounded where a wavelength in nm was turned to rad/s and back."""
    return float(f"{TWO_PI_C / omega * 1e9:.12g}")


def _in(interval: Interval | None, unit: float) -> Interval | None:
    return None if interval is None else (interval[0] / unit, interval[1] / unit)
