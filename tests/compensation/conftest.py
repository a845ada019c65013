"""Parts of an invented bench, and a brute force that shares nothing with the search but the elements."""

from __future__ import annotations

from types import SimpleNamespace

import numpy as np
import pytest

from pulseprop.compensation.assembly import Assembly
from pulseprop.compensation.candidates import background_of
from pulseprop.compensation.models import Model
from pulseprop.compensation.problem import Adjustment, Part, fixed
from pulseprop.compensation.samples import samples_for
from pulseprop.elements.gratings import GratingPair
from pulseprop.elements.phase_orders import PhaseOrders
from pulseprop.elements.prisms import PrismPair
from pulseprop.elements.slab import Slab
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.propagation.sizing import GridWish
from pulseprop.pulse.pulse import Pulse

OMEGA = 2 * np.pi * 299792458.0 / 800e-9
MM = {"unit": "mm", "unit_size": 1e-3}
FS2 = {"unit": "fs^2", "unit_size": 1e-30}
FS3 = {"unit": "fs^3", "unit_size": 1e-45}
DEG = {"unit": "deg", "unit_size": float(np.radians(1.0))}


def pulse(duration: float = 12e-15, **more) -> Pulse:
    return Pulse(centre=OMEGA, duration=duration, energy=1e-9, **more)


def glass(name: str, thickness: float) -> Part:
    return fixed(Slab(name=name, medium=catalogue_medium(name), thickness=thickness))


def wedge(medium: str = "fused silica", most: float = 5e-3, **more) -> Part:
    def build(settings):
        return (Slab(name="wedge", medium=catalogue_medium(medium), thickness=float(settings["insertion"])),)

    return Part(
        name="wedge",
        build=build,
        adjustments=(Adjustment(parameter="insertion", low=0.0, high=most, **MM),),
        **more,
    )


def mirrors(
    name: str, gdd: float, tod: float = 0.0, most: int = 24, step: int = 2, loss: float = 0.0, **more
):
    def build(settings):
        count = float(settings["bounces"])
        kept = (1 - loss) ** count
        return (PhaseOrders(name=name, centre=OMEGA, gdd=gdd * count, tod=tod * count, transmittance=kept),)

    adjustment = Adjustment(parameter="bounces", low=0.0, high=float(most), step=float(step))
    return Part(name=name, build=build, adjustments=(adjustment,), **{"optional": True, **more})


def ordered_mirror(bounces: float = 20.0) -> Part:
    def build(settings):
        count = float(settings["bounces"])
        gdd, tod = float(settings["gdd"]) * count, float(settings["tod"]) * count
        return (PhaseOrders(name="mirror to order", centre=OMEGA, gdd=gdd, tod=tod),)

    return Part(
        name="mirror to order",
        build=build,
        to_order=True,
        adjustments=(
            Adjustment(parameter="gdd", low=-80e-30, high=0.0, **FS2),
            Adjustment(parameter="tod", low=-80e-45, high=80e-45, **FS3),
            Adjustment(parameter="bounces", low=bounces, high=bounces),
        ),
    )


def gratings(grooves: float = 300e3, angle: tuple[float, float] = (10.0, 10.0), most: float = 40e-3, **more):
    def build(settings):
        return (
            GratingPair(
                name="gratings",
                centre=OMEGA,
                grooves=grooves,
                incidence=float(settings["incidence"]),
                separation=float(settings["separation"]),
            ),
        )

    low, high = np.radians(angle)
    return Part(
        name="gratings",
        build=build,
        adjustments=(
            Adjustment(parameter="separation", low=0.0, high=most, **MM),
            Adjustment(parameter="incidence", low=low, high=high, **DEG),
        ),
        **more,
    )


def prisms(medium: str = "fused silica", most: float = 1.5, insertion: float = 10e-3, **more) -> Part:
    def build(settings):
        return (
            PrismPair(
                name="prisms",
                centre=OMEGA,
                medium=catalogue_medium(medium),
                apex_separation=float(settings["apex_separation"]),
                insertion=float(settings["insertion"]),
            ),
        )

    return Part(
        name="prisms",
        build=build,
        adjustments=(
            Adjustment(parameter="apex_separation", low=0.1, high=most, **MM),
            Adjustment(parameter="insertion", low=0.0, high=insertion, **MM),
        ),
        **more,
    )


def samples_of(source: Pulse):
    return samples_for(source, GridWish())


def assembly_of(source: Pulse, parts, discrete=()) -> Assembly:
    """All parts used; discrete: settings of the stepped adjustments, a dictionary for each movable part."""
    samples = samples_of(source)
    movable = [part for part in parts if part.movable]
    settings = discrete or [{one.parameter: one.values[0] for one in part.discrete} for part in movable]
    return Assembly(
        samples=samples,
        background=background_of(parts, samples),
        models=tuple(
            Model(part=part, discrete=dict(chosen), samples=samples)
            for part, chosen in zip(movable, settings, strict=True)
        ),
    )


class Brute:
    """Peak ratios by a plain transform: a Gaussian spectrum on 1024 frequencies, padded four times, a
    parabola through the highest samples."""

    def __init__(self, duration: float = 12e-15, points: int = 1024, reach: float = 5.0) -> None:
        sigma = np.sqrt(2 * np.log(2)) / duration
        detuning = np.linspace(-reach, reach, points) * sigma * np.sqrt(2)
        self.omega = OMEGA + detuning
        self.amplitude = np.exp(-(detuning**2) / (4 * sigma**2))

    def exponent(self, *elements) -> np.ndarray:
        total = np.zeros(self.omega.size, dtype=complex)
        for element in elements:
            total += element.exponent(self.omega, 1)[0]
        slope = np.polyfit(self.omega - OMEGA, total.imag, 1, w=self.amplitude)
        return total - 1j * np.polyval(slope, self.omega - OMEGA)

    def power(self, exponent: np.ndarray) -> np.ndarray:
        field = np.fft.fft(self.amplitude * np.exp(exponent), 4 * self.omega.size)
        return np.abs(field) ** 2

    def peak(self, exponent: np.ndarray) -> float:
        """Absolute peak, over that of the flat phase without loss."""
        height = self.power(exponent)
        top = int(np.argmax(height))
        below, here, above = height[top - 1], height[top], height[(top + 1) % height.size]
        bend = below - 2 * here + above
        vertex = here - 0.125 * (below - above) ** 2 / bend if bend < 0 else here
        return float(vertex / self.amplitude.sum() ** 2)

    def ratio(self, exponent: np.ndarray) -> float:
        kept = (self.amplitude * np.exp(exponent.real)).sum() / self.amplitude.sum()
        return self.peak(exponent) / kept**2


def lattice_best(score, low, high, points: int, levels: int):
    """Exhaustive lattices, each around the best of the last: (best score, place)."""
    low, high = np.asarray(low, float), np.asarray(high, float)
    begin, end = low.copy(), high.copy()
    best, place = -np.inf, low
    for _ in range(levels):
        axes = [np.linspace(a, b, points) for a, b in zip(begin, end, strict=True)]
        for at in np.stack([axis.ravel() for axis in np.meshgrid(*axes, indexing="ij")], axis=1):
            value = score(at)
            if value > best:
                best, place = value, at
        reach = 2 * (end - begin) / (points - 1)
        begin, end = np.maximum(place - reach, low), np.minimum(place + reach, high)
    return best, place


@pytest.fixture(scope="session")
def bench() -> SimpleNamespace:
    return SimpleNamespace(
        OMEGA=OMEGA,
        pulse=pulse,
        glass=glass,
        wedge=wedge,
        mirrors=mirrors,
        ordered_mirror=ordered_mirror,
        gratings=gratings,
        prisms=prisms,
        samples_of=samples_of,
        assembly_of=assembly_of,
        Brute=Brute,
        lattice_best=lattice_best,
    )
