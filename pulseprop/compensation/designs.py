"""From settings that a search found to a design that can be built: bench units, moves, tolerances, data."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.assembly import Assembly
from pulseprop.compensation.drifts import ANGLES, drift_of, loose_quantities
from pulseprop.compensation.goals import Judge
from pulseprop.compensation.mirror_order import mirror_orders
from pulseprop.compensation.problem import Adjustment, Alternative, Goal, Part, Problem, Value
from pulseprop.compensation.refine import Refined, refined
from pulseprop.compensation.result import AngleError, DataCase, Design, Setting
from pulseprop.compensation.today import in_place
from pulseprop.compensation.together import together
from pulseprop.compensation.verify import Sent
from pulseprop.constants import FEMTO
from pulseprop.elements.element import Element, orders_of_element
from pulseprop.elements.path import Path
from pulseprop.errors import InputError

__all__ = ["design_of", "path_of"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

ANGLE_ERROR = np.radians(0.1)
AT_LIMIT = 1e-6
"""Share of the range within which a setting stands at its end."""


def path_of(problem: Problem, found: Refined) -> Path:
    """The elements of a design in path order."""
    used = found.assembly.elements(found.u)
    row: list[Element] = []
    for part in problem.parts:
        row += used.get(part.name, () if part.movable else part.build({}))
    return Path(tuple(row))


def design_of(problem: Problem, found: Refined, checked: Sent, judge: Judge) -> Design:
    """The whole answer for one set-up. checked: its path, sent in full. judge: of the search's grid."""
    assembly, u = found.assembly, found.u
    exponent = assembly.exponent(u)
    loose = loose_quantities(problem.parts, assembly, u)
    tolerance = tuple(drift_of(one, exponent, judge) for one in loose)
    after = checked.pulse_out
    used = {model.part.name for model in assembly.models}
    settings = _settings(assembly, u)
    return Design(
        settings=settings,
        fwhm_fs=after.fwhm_fs,
        peak_ratio=after.peak_ratio or 0.0,
        two_photon_ratio=after.two_photon_ratio or 0.0,
        transmission=checked.transmission,
        residual_gdd_fs2=checked.gdd,
        residual_tod_fs3=checked.tod,
        residual_fod_fs4=checked.fod,
        quality=_quality(problem.goal, found, checked),
        score=found.score,
        size_m=assembly.size(u),
        cautions=_cautions(problem.parts, settings),
        left_out=tuple(part.name for part in problem.parts if in_place(part) and _gone(part, used)),
        pulse_out=after,
        tolerance=tolerance,
        angles=_angles(problem, assembly, u),
        together=together(loose, tolerance, exponent, judge, problem.seed),
        data=tuple(_case(one, found, judge) for one in problem.alternatives),
        mirrors=mirror_orders(assembly, u, checked.path.elements, judge, problem.pulse),
        path=checked.path,
        fields=checked.fields,
    )


def _cautions(parts: Sequence[Part], settings: Sequence[Setting]) -> tuple[str, ...]:
    """A sentence for each window made thinner and each pressure raised."""
    today = {
        (part.name, one.parameter): None
        if isinstance(one.now, str) or one.now is None
        else one.now / one.unit_size
        for part in parts
        for one in part.adjustments
    }
    said = []
    for setting in settings:
        now = today[setting.element, setting.parameter]
        if isinstance(setting.value, str) or now is None:
            continue
        thinner = "thickness" in setting.parameter and setting.value < now
        higher = "pressure" in setting.parameter and setting.value > now
        if thinner or higher:
            change = f"goes from {now:.4g} to {setting.value:.4g} {setting.unit}"
            said.append(
                f"{setting.element}: {setting.parameter} {change}; mechanical strength is not considered"
            )
    return tuple(said)


def _gone(part: Part, used: set[str]) -> bool:
    return part.movable and part.name not in used


def _quality(goal: Goal, found: Refined, checked: Sent) -> float:
    """In the goal's terms and SI; ratios and the width are those of the full run."""
    after = checked.pulse_out
    if goal.name == "peak power":
        return after.peak_ratio or 0.0
    if goal.name == "two-photon":
        return after.two_photon_ratio or 0.0
    return after.fwhm_fs / FEMTO if goal.name == "duration" else found.judged.quality


def _settings(assembly: Assembly, u: Real) -> tuple[Setting, ...]:
    return tuple(
        _setting(model.part.name, one, model.settings(values)[one.parameter])
        for model, values in zip(assembly.models, assembly.values(u), strict=True)
        for one in model.part.adjustments
    )


def _setting(element: str, one: Adjustment, value: Value) -> Setting:
    if not isinstance(value, int | float):
        return Setting(element=element, parameter=one.parameter, value=value, unit="")
    return Setting(
        element=element,
        parameter=one.parameter,
        value=float(value / one.unit_size),
        unit=one.unit,
        move=float((value - one.now) / one.unit_size) if isinstance(one.now, int | float) else None,
        at_limit=_limit(one, value),
    )


def _limit(one: Adjustment, value: float) -> Literal["low", "high"] | None:
    near = AT_LIMIT * (one.high - one.low)
    if one.choices or one.high == one.low or one.low + near < value < one.high - near:
        return None
    return "low" if value <= one.low + near else "high"


@dataclass(frozen=True, eq=False)
class _Orders:
    gdd: float
    tod: float
    fod: float


def _angles(problem: Problem, assembly: Assembly, u: Real) -> tuple[AngleError, ...]:
    """Every angle that is set or may drift, on parts that are used."""
    used = {
        model.part.name: model.settings(values)
        for model, values in zip(assembly.models, assembly.values(u), strict=True)
    }
    found: list[AngleError] = []
    for part in problem.parts:
        if part.movable and part.name not in used:
            continue
        settings = used.get(part.name, {})
        for one in (*part.adjustments, *part.drifts):
            nominal = settings.get(one.parameter, one.now)
            if one.unit in ANGLES and isinstance(nominal, int | float):
                found += _angle(part, one.parameter, float(nominal), settings, problem.pulse.centre)
    return tuple(found)


def _angle(
    part: Part, parameter: str, nominal: float, settings: dict[str, Value], omega: float
) -> Sequence[AngleError]:
    try:
        here, below, above = (
            _orders(part.build({**settings, parameter: nominal + shift}), omega)
            for shift in (0.0, -ANGLE_ERROR, ANGLE_ERROR)
        )
    except InputError:
        return ()
    gdd, tod, fod = (
        _larger(getattr(above, key) - getattr(here, key), getattr(below, key) - getattr(here, key))
        for key in ("gdd", "tod", "fod")
    )
    return [
        AngleError(
            element=part.name,
            parameter=parameter,
            angle_deg=float(np.degrees(ANGLE_ERROR)),
            gdd_error_fs2=gdd * FEMTO**2,
            tod_error_fs3=tod * FEMTO**3,
            fod_error_fs4=fod * FEMTO**4,
        )
    ]


def _larger(up: float, down: float) -> float:
    """The larger of the two errors, with the sign that goes with the positive direction."""
    return up if abs(up) >= abs(down) else -down


def _orders(elements: tuple[Element, ...], omega: float) -> _Orders:
    sums = np.sum([orders_of_element(element, omega) for element in elements], axis=0)
    return _Orders(float(sums[1]), float(sums[2]), float(sums[3]))


def _case(one: Alternative, found: Refined, judge: Judge) -> DataCase:
    """The design under another truth, as it stands and set anew."""
    samples, assembly = found.assembly.samples, found.assembly
    other = one.exponent(samples.omega)
    asis = judge(assembly.exponent(found.u) + other).peak_ratio
    moved = Assembly(samples=samples, background=assembly.background + other, models=assembly.models)
    again = refined(moved, judge, found.u)
    return DataCase(
        name=one.name,
        peak_ratio=min(asis, 1.0),
        peak_ratio_reset=min(max(asis, again.judged.peak_ratio if again else 0.0), 1.0),
    )
