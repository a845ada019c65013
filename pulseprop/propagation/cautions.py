"""Cautions where they belong: what can hurt someone, and what must not be taken for more than it is.

The program never gives a laser class, an exposure limit or an eyewear figure, and replaces no local code and no licensed practice.
"""

from __future__ import annotations

from collections.abc import Sequence

from pulseprop.elements.path import Path
from pulseprop.propagation.result import Caution, ElementMeasures

__all__ = ["cautions_for"]

IONISING_W_PER_CM2 = 1e13
"""Peak intensity from which X-rays are expected in material processing; a legal figure of one country (Germany)."""

DISPLACING = (
    "argon",
    "helium",
    "neon",
    "krypton",
    "xenon",
    "nitrogen",
    "CO2",
    "carbon dioxide",
    "SF6",
    "N2O",
)

LASER = Caution(
    code="laser-radiation",
    line="laser radiation: work under the local laser safety officer",
    text=(
        "Laser radiation. Work only under the local laser safety officer and after an assessment to IEC 60825-1 and, where it "
        "applies, ANSI Z136.1. This program gives no laser class, no exposure limit and no eyewear figure, and replaces neither "
        "local codes nor licensed practice. Ultrashort pulses need protection rated for ultrashort pulses."
    ),
)


def cautions_for(path: Path, rows: Sequence[ElementMeasures]) -> tuple[Caution, ...]:
    """The cautions of a run, most general first."""
    found = [LASER]
    fluence = max((row.peak_fluence_J_per_cm2 or 0.0 for row in rows), default=0.0)
    intensity = max((row.peak_intensity_W_per_cm2 or 0.0 for row in rows), default=0.0)
    if fluence > 0:
        found.append(_damage(fluence))
    if intensity > IONISING_W_PER_CM2:
        found.append(_xrays(intensity))
    found += [*_gases(path), *_health(path), *_temperatures(path), *_models(path)]
    return tuple(found)


def _damage(fluence: float) -> Caution:
    return Caution(
        code="damage-threshold",
        line=f"peak fluence up to {fluence:.2g} J/cm^2: compare with the maker's damage threshold (ISO 21254)",
        text=(
            f"The highest on-axis fluence in the path is {fluence:.3g} J/cm^2. Compare it with damage thresholds measured to "
            "ISO 21254 at the same wavelength, pulse duration and beam diameter; thresholds do not carry over from others. Hot "
            "spots and dust lower them."
        ),
    )


def _xrays(intensity: float) -> Caution:
    return Caution(
        code="x-rays",
        line=f"peak intensity {intensity:.2g} W/cm^2 is above 1e13: ask the radiation protection officer about X-rays",
        text=(
            f"The peak intensity reaches {intensity:.3g} W/cm^2. On matter, intensities above 1e13 W/cm^2 can make X-rays; German "
            "radiation-protection law asks for notice or permission there, mainly in material processing. The figure is that of "
            "one country: ask the local radiation protection officer."
        ),
    )


def _gases(path: Path) -> list[Caution]:
    names = sorted(
        {m.name.split(" at ")[0] for m in path.media if m.name.split(" at ")[0].split(" (")[0] in DISPLACING}
    )
    if not names:
        return []
    listed = ", ".join(names)
    return [
        Caution(
            code="gas-displaces-oxygen",
            line=f"{listed}: displaces oxygen in closed rooms",
            text=(
                f"The path holds {listed}, which displaces oxygen in closed rooms. Ventilate, and follow the local rules for "
                "compressed gases; mechanical strength of cells and windows is not considered here."
            ),
        )
    ]


def _health(path: Path) -> list[Caution]:
    return [
        Caution(
            code="substance", line=f"{medium.name}: {medium.health}", text=f"{medium.name}: {medium.health}."
        )
        for medium in path.media
        if medium.health
    ]


def _temperatures(path: Path) -> list[Caution]:
    found = []
    for element in path:
        stated = getattr(element, "temperature_K", None)
        medium = element.medium
        if stated is None or medium is None or medium.temperature_K is None:
            continue
        if abs(stated - medium.temperature_K) > 5:
            found.append(
                Caution(
                    code="temperature",
                    line=f"{element.name}: at {stated:.4g} K, but the record of {medium.name} is for {medium.temperature}",
                    text=(
                        f"Element {element.name!r} is stated to be at {stated:.4g} K; the record of {medium.name} is for "
                        f"{medium.temperature}. Index and dispersion change with temperature; no correction was made."
                    ),
                )
            )
    return found


def _models(path: Path) -> list[Caution]:
    found = []
    for medium in path.media:
        if not medium.causal:
            found.append(
                Caution(
                    code="not-a-causal-model",
                    line=f"{medium.name}: not a causal model, left out of the causality diagnostics",
                    text=(
                        f"{medium.name} is given by numbers that are no causal model (orders, or a table as printed). It is left "
                        "out of the front test, and its absorption says nothing about its dispersion."
                    ),
                )
            )
        if medium.index_is_relative:
            found.append(
                Caution(
                    code="no-anchor",
                    line=f"{medium.name}: no anchor, so the index is known up to what absorbs outside the table",
                    text=(
                        f"The dispersion of {medium.name} comes from its absorption table alone. Absorption outside the table adds "
                        "to the index, mostly a constant: give an anchor, that is the index of the whole medium at one wavelength."
                    ),
                )
            )
    return found
