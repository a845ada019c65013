"""What may be off in a design, and how far until 5 % of the peak power are lost."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.assembly import Assembly
from pulseprop.compensation.goals import Judge
from pulseprop.compensation.models import exponent_of
from pulseprop.compensation.phase_fit import whitened
from pulseprop.compensation.problem import Adjustment, Part, Value
from pulseprop.compensation.result import Drift
from pulseprop.elements.slab import Slab
from pulseprop.errors import InputError

__all__ = ["LOSS", "Loose", "drift_of", "farthest", "loose_quantities"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

LOSS = 0.05
"""Share of the peak power whose loss ends a tolerance."""
GROWTH = 1.4
STEPS = 40
ANGLES = {"deg", "mrad", "rad", "arcmin", "arcsec"}
PRESSURES = {"bar", "mbar", "Pa", "hPa", "kPa", "atm", "Torr"}
WORKSHOP_LENGTH = 1e-4
"""m. Thickness tolerance of ordinary windows; common practice, no source."""
WORKSHOP_ANGLE = np.radians(0.1)
"""rad. What a rotation stage without fine scale is set to; common practice, no source."""
WORKSHOP_SHARE = 0.01
"""Of a pressure as a gauge reads it, common practice, no source."""


@dataclass(frozen=True, kw_only=True, eq=False)
class Loose:
    """A quantity that may be off. moved(x): exponent (n,) that is added when it is off by x (SI).

    Raises InputError where no element can be built. typical: a first step, SI. sigma: one standard deviation
    of an ordinary workshop, SI, None where there is none to state. set_by_hand: it is an adjustment.
    """

    element: str
    parameter: str
    unit: str
    unit_size: float
    moved: Callable[[float], Complex]
    typical: float
    sigma: float | None
    set_by_hand: bool


def loose_quantities(parts: Sequence[Part], assembly: Assembly, u: Real) -> list[Loose]:
    """All continuous adjustments, stated drifts and thicknesses of slabs of a design, in path order.

    A slab on which something continuous is set is held by that; a stated drift of thickness comes first.
    """
    used = {
        model.part.name: (model, values)
        for model, values in zip(assembly.models, assembly.values(u), strict=True)
    }
    found: list[Loose] = []
    for part in parts:
        if part.name in used:
            model, values = used[part.name]
            settings: dict[str, Value] = model.settings(values)
            found += [_of(part, one, settings, assembly, by_hand=True) for one in part.continuous]
        elif part.movable:
            continue
        else:
            settings = {}
        found += [_of(part, one, settings, assembly, by_hand=False) for one in part.drifts]
        if not part.continuous and "thickness" not in {one.parameter for one in part.drifts}:
            found += [
                _thickness(part, element, assembly)
                for element in part.build(settings)
                if isinstance(element, Slab) and element.thickness > 0
            ]
    return found


def _of(
    part: Part, one: Adjustment, settings: dict[str, Value], assembly: Assembly, *, by_hand: bool
) -> Loose:
    nominal = settings.get(one.parameter, one.now)
    if not isinstance(nominal, int | float):
        raise InputError(
            f"{part.name}: the drift of {one.parameter} needs its nominal value",
            value=nominal,
            allowed="a number",
        )
    omega = assembly.samples.omega
    here = exponent_of(part.build({**settings, one.parameter: nominal}), omega)

    def moved(distance: float) -> Complex:
        there = part.build({**settings, one.parameter: nominal + distance})
        return np.asarray(exponent_of(there, omega) - here)

    reach = one.high - one.low if one.high > one.low else abs(nominal) or one.unit_size
    return Loose(
        element=part.name,
        parameter=one.parameter,
        unit=one.unit,
        unit_size=one.unit_size,
        moved=moved,
        typical=1e-4 * reach,
        sigma=one.sigma if one.sigma is not None else _workshop(one.unit, nominal),
        set_by_hand=by_hand,
    )


def _thickness(part: Part, element: Slab, assembly: Assembly) -> Loose:
    # Faces and echoes are left as they are: glass adds phase and absorption in proportion to its length.
    bare = replace(element, faces="ideal")
    per_length = exponent_of((bare,), assembly.samples.omega) / element.thickness

    def moved(distance: float) -> Complex:
        if distance < -element.thickness:
            raise InputError("a slab needs a thickness", value=element.thickness + distance)
        return per_length * distance

    # A beam's way through air is paced out, not ground: no workshop holds it to a tenth of a millimetre.
    sigma = WORKSHOP_LENGTH if element.thickness < 1.0 else WORKSHOP_SHARE * element.thickness
    return Loose(
        element=element.name if element.name == part.name else f"{part.name}: {element.name}",
        parameter="thickness",
        unit="mm",
        unit_size=1e-3,
        moved=moved,
        typical=1e-4 * element.thickness,
        sigma=sigma,
        set_by_hand=False,
    )


def _workshop(unit: str, nominal: float) -> float | None:
    if unit in ("mm", "um", "cm", "m"):
        return WORKSHOP_LENGTH
    if unit in ANGLES:
        return float(WORKSHOP_ANGLE)
    return WORKSHOP_SHARE * abs(nominal) if unit in PRESSURES else None


def drift_of(loose: Loose, exponent: Complex, judge: Judge) -> Drift:
    """How far it may go alone, both ways; exponent (n,): that of the design."""
    below, above = (farthest(loose, exponent, judge, sign) for sign in (-1.0, 1.0))
    size = loose.unit_size
    return Drift(
        element=loose.element,
        parameter=loose.parameter,
        unit=loose.unit,
        below=None if below is None else float(below / size),
        above=None if above is None else float(above / size),
        sigma=None if loose.sigma is None else float(loose.sigma / size),
        set_by_hand=loose.set_by_hand,
    )


def farthest(loose: Loose, exponent: Complex, judge: Judge, sign: float) -> float | None:
    """Distance (SI, > 0) in the direction of sign at which the peak power first falls by 5 %.

    None where it does not while the element can be built.
    """
    from scipy.optimize import brentq

    full = judge.peak(exponent)

    def excess(distance: float) -> float:
        return 1.0 - judge.peak(exponent + loose.moved(sign * distance)) / full - LOSS

    inner = 0.0
    try:
        outer = _first_step(loose, sign, exponent, judge)
        for _ in range(STEPS):
            if excess(outer) >= 0:
                return float(brentq(excess, inner, outer, rtol=1e-6, xtol=1e-12 * outer))
            inner, outer = outer, GROWTH * outer
    except InputError:
        return None
    return None


def _first_step(loose: Loose, sign: float, exponent: Complex, judge: Judge) -> float:
    """A third of the distance at which the mean square phase alone would cost 5 %."""
    amplitude = np.abs(judge.samples.amplitude * np.exp(exponent.real))
    window = amplitude / amplitude.sum()
    moved = loose.moved(sign * loose.typical)
    phase = float(np.linalg.norm(whitened(moved.imag, judge.samples.detuning, window)))
    lost = abs(float(2 * np.dot(window, moved.real)))
    guess = min(np.sqrt(LOSS) / max(phase, 1e-9), LOSS / max(lost, 1e-9))
    return float(loose.typical * guess / 3)
