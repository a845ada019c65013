"""The order sheet of a mirror that is yet to be made: its GDD over wavelength, and how true it must be.

A GDD ripple g cos(T (omega - omega0) + place) on each of b bounces is a phase of amplitude b g / T^2; to
second order half its square is the share of the peak that it takes. The figures here come from the field
itself.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from pulseprop.compensation.assembly import Assembly
from pulseprop.compensation.drifts import Loose, farthest
from pulseprop.compensation.goals import Judge
from pulseprop.compensation.models import Model
from pulseprop.compensation.result import MirrorOrder, Ripple
from pulseprop.compensation.samples import Samples
from pulseprop.constants import FEMTO, TWO_PI_C
from pulseprop.elements.element import Element, orders_of_element
from pulseprop.material.response import View
from pulseprop.measures.widths import spectral_fwhm
from pulseprop.pulse.measured import MeasuredPulse
from pulseprop.pulse.pulse import Pulse

__all__ = ["mirror_orders"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

BAND = 0.01
"""Power over the peak of the spectrum inside which the mirror is ordered."""
ROWS = 121
PERIODS = (1.0, 0.5, 0.25)
"""Of the ripples, over the FWHM of the spectrum."""
PLACES = 4
"""Positions of a ripple that are tried over half a period; the other half is its mirror image."""


def mirror_orders(
    assembly: Assembly, u: Real, elements: tuple[Element, ...], judge: Judge, pulse: Pulse | MeasuredPulse
) -> tuple[MirrorOrder, ...]:
    """One sheet for each mirror that is used and yet to be made; elements: the whole path of the design."""
    return tuple(
        _order(model, values, assembly.exponent(u), elements, judge, pulse)
        for model, values in zip(assembly.models, assembly.values(u), strict=True)
        if model.part.to_order
    )


def _order(
    model: Model,
    values: Real,
    exponent: Complex,
    elements: tuple[Element, ...],
    judge: Judge,
    pulse: Pulse | MeasuredPulse,
) -> MirrorOrder:
    centre = pulse.centre
    mirrors = model.elements(values)
    stated = sum(getattr(mirror, "bounces", 1) for mirror in mirrors)
    bounces = float(model.settings(values).get("bounces", stated))
    gdd, tod = _orders_of_bounce(mirrors, centre, bounces)
    own = {element.name for element in mirrors}
    rest = [element for element in elements if element.name not in own]
    spectrum = judge.samples.amplitude * np.exp(exponent)
    low, high = _band(judge.samples, spectrum)
    omega = TWO_PI_C / np.linspace(TWO_PI_C / high, TWO_PI_C / low, ROWS)
    target = gdd + tod * (omega - centre)
    width = spectral_fwhm(judge.samples.whole(spectrum), 1 / judge.samples.grid.span)
    ripples = tuple(_ripple(share * width, exponent, bounces, judge) for share in PERIODS)
    slowest = ripples[0].amplitude_fs2
    offset = _least(exponent, judge, [_offset(bounces, centre, judge)])
    return MirrorOrder(
        element=model.part.name,
        bounces=bounces,
        centre_nm=TWO_PI_C / centre * 1e9,
        gdd_at_centre_fs2=gdd * FEMTO**2,
        tod_at_centre_fs3=tod * FEMTO**3,
        band_nm=(TWO_PI_C / high * 1e9, TWO_PI_C / low * 1e9),
        offset_fs2=offset,
        ripples=ripples,
        wavelength_nm=TWO_PI_C / omega * 1e9,
        gdd_fs2=target * FEMTO**2,
        ideal_gdd_fs2=-(_gdd_of(rest, omega) + _chirp_of(pulse, omega)) / bounces * FEMTO**2,
        low_fs2=target * FEMTO**2 - slowest,
        high_fs2=target * FEMTO**2 + slowest,
    )


def _orders_of_bounce(mirrors: tuple[Element, ...], centre: float, bounces: float) -> tuple[float, float]:
    """GDD in s^2 and TOD in s^3 of one bounce at the centre, rad/s."""
    _, gdd, tod, _ = np.sum([orders_of_element(mirror, centre) for mirror in mirrors], axis=0) / bounces
    return float(gdd), float(tod)


def _band(samples: Samples, spectrum: Complex) -> tuple[float, float]:
    """Outermost angular frequencies, rad/s, at which the power is above BAND of its peak."""
    power = spectrum.real**2 + spectrum.imag**2
    inside = np.flatnonzero(power > BAND * power.max())
    return float(samples.omega[inside[0]]), float(samples.omega[inside[-1]])


def _offset(bounces: float, centre: float, judge: Judge) -> Complex:
    """The exponent of a GDD of 1 s^2 on every bounce."""
    return np.asarray(0.5j * bounces * (judge.samples.omega - centre) ** 2)


def _ripple(period: float, exponent: Complex, bounces: float, judge: Judge) -> Ripple:
    """period: Hz. The phase of a GDD ripple cos(x) is -cos(x) over the square of its frequency."""
    delay = 1 / period
    turn = delay * judge.samples.detuning
    places = np.pi / PLACES * np.arange(PLACES)
    phases = [np.asarray(-1j * bounces / delay**2 * np.cos(turn + place)) for place in places]
    return Ripple(period_THz=period * 1e-12, amplitude_fs2=_least(exponent, judge, phases) or np.inf)


def _least(exponent: Complex, judge: Judge, phases: list[Complex]) -> float | None:
    """The smallest GDD in fs^2 that, times one of these exponents a unit of GDD, costs 5 % of the peak."""
    met = [farthest(_error(phase), exponent, judge, sign) for phase in phases for sign in (-1.0, 1.0)]
    known = [one * FEMTO**2 for one in met if one is not None]
    return min(known) if known else None


def _error(phase: Complex) -> Loose:
    def moved(gdd: float) -> Complex:
        return phase * gdd

    return Loose(
        element="",
        parameter="gdd",
        unit="fs^2",
        unit_size=FEMTO**-2,
        moved=moved,
        typical=FEMTO**-2,
        sigma=None,
        set_by_hand=False,
    )


def _gdd_of(elements: list[Element], omega: Real) -> Real:
    """Sum of the GDD in s^2 at omega (rad/s), exact."""
    total = np.zeros(omega.size)
    for element in elements:
        total += 2 * np.imag(element.exponent(omega, 3, View.AXIS)[2])
    return total


def _chirp_of(pulse: Pulse | MeasuredPulse, omega: Real) -> Real:
    """Stated GDD in s^2 of the pulse that enters, at omega."""
    detuning = omega - pulse.centre
    return np.asarray(pulse.gdd + detuning * (pulse.tod + detuning * pulse.fod / 2))
