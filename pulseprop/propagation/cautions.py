"""Cautions where they belong: what can hurt someone, and what must not be taken for more than it is.

The program never gives a laser class, an exposure limit or an eyewear figure, and replaces no local code and
no licensed practice.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from pulseprop.elements.element import Element
from pulseprop.elements.gas_cell import GasCell
from pulseprop.elements.group import every
from pulseprop.elements.path import Path
from pulseprop.material.medium import Medium
from pulseprop.propagation.numerals import significant
from pulseprop.propagation.result import Caution, ElementMeasures

__all__ = ["cautions_for"]

IONISING_W_PER_CM2 = 1e13
"""Peak intensity from which X-rays are expected in material processing; a legal figure of Germany
(Strahlenschutzgesetz, section 17; from memory).
"""

ATMOSPHERE = 101325.0
PRESSURE_THAT_MATTERS = 1e3
"""Pa of difference from a normal atmosphere from which a cell is a vessel (the weather changes more)."""

KELVINS_THAT_MATTER = 5.0
"""From here on a stated temperature is set against that of the record (common practice, no source)."""

DISPLACING = (
    "argon", "helium", "neon", "krypton", "xenon", "nitrogen", "carbon dioxide", "sulfur hexafluoride",
)  # fmt: skip

LASER = Caution(
    code="laser-radiation",
    line="laser radiation: work under the local laser safety officer",
    text=(
        "Laser radiation. Work only under the local laser safety officer and after an assessment to "
        "IEC 60825-1 and, where it applies, ANSI Z136.1. This program gives no laser class, no exposure "
        "limit and no eyewear figure, and replaces neither local codes nor licensed practice. Ultrashort "
        "pulses need protection rated for ultrashort pulses."
    ),
)


def cautions_for(
    path: Path, rows: Sequence[ElementMeasures], substances: Sequence[str] = ()
) -> tuple[Caution, ...]:
    """The cautions of a run, most general first; substances: what media of other names are made of."""
    found = [LASER, *_strong_light(rows), *_gases([*(medium.name for medium in path.media), *substances])]
    for element in every(path):
        found += _temperature(element)
        if isinstance(element, GasCell):
            found += _vessel(element)
    for medium in path.media:
        found += _of_medium(medium)
    return tuple(found)


def _strong_light(rows: Sequence[ElementMeasures]) -> Iterator[Caution]:
    fluence = max((row.peak_fluence_J_per_cm2 or 0.0 for row in rows), default=0.0)
    if fluence > 0:
        yield Caution(
            code="damage-threshold",
            line=(
                f"peak fluence {significant(fluence, 2)} J/cm^2: compare with the maker's damage threshold "
                "(ISO 21254)"
            ),
            text=(
                f"The highest on-axis fluence in the path is {significant(fluence, 2)} J/cm^2. Compare it "
                "with damage thresholds measured to ISO 21254 at the same wavelength, duration and beam "
                "diameter; thresholds do not carry over from others. Hot spots and dust lower them."
            ),
        )
    intensity = max((row.peak_intensity_W_per_cm2 or 0.0 for row in rows), default=0.0)
    if intensity > IONISING_W_PER_CM2:
        yield Caution(
            code="x-rays",
            line=(
                f"peak intensity {significant(intensity, 2)} W/cm^2: ask the radiation protection officer "
                "about X-rays"
            ),
            text=(
                f"The peak intensity reaches {significant(intensity, 2)} W/cm^2. On matter, intensities "
                "above 1e13 W/cm^2 can make X-rays; German radiation-protection law asks for notice or "
                "permission there, mainly in material processing. The figure is that of one country: ask the "
                "local radiation protection officer."
            ),
        )


def _gases(media: Sequence[str]) -> Iterator[Caution]:
    names = {name.split(" at ")[0].split(" (")[0] for name in media}
    listed = ", ".join(sorted(names.intersection(DISPLACING)))
    if listed:
        yield Caution(
            code="gas-displaces-oxygen",
            line=f"{listed}: displaces oxygen in closed rooms",
            text=(
                f"The path holds {listed}, which displaces oxygen in closed rooms. Ventilate, and follow the "
                "local rules for compressed gases; the strength of cells and windows is not considered."
            ),
        )


def _vessel(cell: GasCell) -> Iterator[Caution]:
    difference = abs(cell.pressure - ATMOSPHERE)
    if difference > PRESSURE_THAT_MATTERS:
        yield Caution(
            code="pressure-vessel",
            line=f"{cell.name}: {cell.pressure / 1e5:.4g} bar absolute: mechanical strength not considered",
            text=(
                f"The cell {cell.name!r} holds {cell.pressure / 1e5:.4g} bar absolute, about "
                f"{difference / 1e5:.2g} bar from a normal atmosphere. The mechanical strength of its "
                "windows and body is not considered: have it rated for this pressure under the local rules "
                "for pressure and vacuum equipment."
            ),
        )


def _temperature(element: Element) -> Iterator[Caution]:
    stated, medium = element.temperature_K, element.medium
    if stated is None or medium is None or medium.temperature_K is None:
        return
    if abs(stated - medium.temperature_K) > KELVINS_THAT_MATTER:
        yield Caution(
            code="temperature",
            line=f"{element.name}: {stated:.4g} K, but {medium.name} is recorded at {medium.temperature}",
            text=(
                f"Element {element.name!r} is stated to be at {stated:.4g} K; the record of {medium.name} is "
                f"for {medium.temperature}. Index and dispersion change with temperature; no correction was "
                "made."
            ),
        )


def _of_medium(medium: Medium) -> Iterator[Caution]:
    if medium.health:
        yield Caution(
            code="substance", line=f"{medium.name}: {medium.health}", text=f"{medium.name}: {medium.health}."
        )
    if not medium.causal:
        yield Caution(
            code="not-a-causal-model",
            line=f"{medium.name}: not a causal model",
            text=(
                f"{medium.name} is given by numbers that are no causal model (orders, a table as printed). "
                "Its absorption says nothing about its dispersion; where only orders are known it is left "
                "out of the front test."
            ),
        )
    if medium.index_is_relative:
        yield Caution(
            code="no-anchor",
            line=f"{medium.name}: no anchor: the index is known up to what absorbs outside the table",
            text=(
                f"The dispersion of {medium.name} comes from its absorption table alone. Absorption outside "
                "the table adds to the index, mostly a constant: give an anchor, that is the index of the "
                "whole medium at one wavelength."
            ),
        )
