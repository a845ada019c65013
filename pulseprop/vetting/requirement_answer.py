"""Requirements against guaranteed bounds: conforming, not conforming, or not decided within the uncertainty.

The three-way rule of ISO 14253-1 (from memory): what the uncertainty allows must lie wholly inside the limits
to conform, wholly outside not to conform; all else is not decided. The bounds are what every passive causal
material with these numbers has, so no coverage factor enters.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Literal

from pulseprop.vetting.requirement import Requirement
from pulseprop.vetting.requirement_quantities import LINE_C, LINE_D, LINE_F
from pulseprop.vetting.result import Bounds, RequirementAnswer

__all__ = [
    "DECISION_RULE",
    "FS2_PER_MM",
    "FS3_PER_MM",
    "Interval",
    "Transmitted",
    "abbe_interval",
    "answered",
    "material_answer",
    "with_unmet",
]

Interval = tuple[float, float]

DECISION_RULE = (
    "Conforming: the guaranteed bounds lie inside the required limits; not conforming: they lie outside; "
    "otherwise not decided within the uncertainty (the three-way rule of ISO 14253-1, from memory)."
)

FS2_PER_MM = 1e-27
FS3_PER_MM = 1e-42

READ: dict[str, Callable[[Bounds], Interval | None]] = {
    "index": lambda bounds: bounds.index,
    "group index": lambda bounds: bounds.group_index,
    "gvd": lambda bounds: _scaled(bounds.gvd_fs2_per_mm, FS2_PER_MM),
    "tod": lambda bounds: _scaled(bounds.tod_fs3_per_mm, FS3_PER_MM),
}
"""The bounds of a quantity in SI."""

Transmitted = Callable[[float, float], tuple[Interval | None, str]]
"""(omega in rad/s, length in m) to the bounds of the internal transmittance, or None and the reason."""


def answered(requirement: Requirement, bounds: Interval | None, reason: str = "") -> RequirementAnswer:
    """The verdict on bounds in SI; those in the answer are in the unit of the requirement."""
    if bounds is None:
        return RequirementAnswer(text=requirement.text, verdict="not decided", bounds=None, reason=reason)
    low, high = bounds
    verdict: Literal["conforming", "not conforming", "not decided"] = "not decided"
    if requirement.least <= low and high <= requirement.most:
        verdict = "conforming"
    elif high < requirement.least or low > requirement.most:
        verdict = "not conforming"
    shown = requirement.in_unit(low), requirement.in_unit(high)
    return RequirementAnswer(text=requirement.text, verdict=verdict, bounds=shown, reason=reason)


def with_unmet(sentence: str, answers: Sequence[RequirementAnswer]) -> str:
    """What a supplier can answer, with the requirements that are not met."""
    unmet = [answer.text for answer in answers if answer.verdict == "not conforming"]
    if not unmet:
        return sentence
    said = f"By your numbers {'; '.join(unmet)} {'are' if len(unmet) > 1 else 'is'} not met; please comment."
    return f"{sentence} {said}".strip()


def material_answer(
    requirement: Requirement,
    at: Callable[[float], Bounds],
    *,
    transmitted: Transmitted | None = None,
    abbe: Callable[[], Interval | None] | None = None,
) -> RequirementAnswer:
    """A requirement on a material.

    at: bounds by frequency (rad/s). transmitted: of the internal transmittance, where the data have
    absorption. abbe: bounds of V_d from one functional; without it they follow from those of n_d, n_F and n_C
    one by one.
    """
    if requirement.quantity.of_mirror:
        return answered(
            requirement, None, "this is a requirement on a mirror, and the data are of a material"
        )
    bounds, reason = _material_bounds(requirement, at, transmitted, abbe)
    return answered(requirement, bounds, reason)


def _material_bounds(
    requirement: Requirement,
    at: Callable[[float], Bounds],
    transmitted: Transmitted | None,
    abbe: Callable[[], Interval | None] | None,
) -> tuple[Interval | None, str]:
    name, omega = requirement.quantity.name, requirement.low
    if name == "V_d":
        found = abbe() if abbe is not None else None
        return (found, "") if found is not None else _abbe_from(at)
    if name == "n_d" or omega is None:
        guaranteed = at(LINE_D)
        return guaranteed.index, "" if guaranteed.index else guaranteed.reason
    if name == "internal transmittance":
        if transmitted is None:
            return None, "the data hold no absorption, so they say nothing about internal transmittance"
        return transmitted(omega, requirement.length or 0.0)
    guaranteed = at(omega)
    value = READ[name](guaranteed)
    return value, "" if value else guaranteed.reason


def _scaled(interval: Interval | None, unit: float) -> Interval | None:
    return None if interval is None else (interval[0] * unit, interval[1] * unit)


def _abbe_from(at: Callable[[float], Bounds]) -> tuple[Interval | None, str]:
    lines = [at(line) for line in (LINE_D, LINE_F, LINE_C)]
    d, f, c = (line.index for line in lines)
    if d is None or f is None or c is None:
        return None, next((line.reason for line in lines if line.index is None), "")
    found = abbe_interval(d, f, c)
    if found is None:
        return None, "the bounds of n_F and n_C overlap, so they do not limit V_d"
    return found, "from the bounds of n_d, n_F and n_C one by one"


def abbe_interval(d: Interval, f: Interval, c: Interval) -> Interval | None:
    """V_d = (n_d - 1)/(n_F - n_C) in interval arithmetic; None where n_F - n_C may be 0 or less."""
    least, most = f[0] - c[1], f[1] - c[0]
    if least <= 0 or d[0] <= 1:
        return None
    return (d[0] - 1) / most, (d[1] - 1) / least
