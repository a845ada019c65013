"""Units as headings of tables write them, in one spelling: "1/cm", "CM-1", "[µm]", "microns", "%"."""

from __future__ import annotations

import re

from pulseprop.units import unit_from
from pulseprop.vetting.heading_words import Axis

__all__ = ["AXIS_OF_DIMENSION", "dimension", "is_dispersion_parameter", "known_unit", "unit_named"]

JOULE = "kg m^2 s^-2"
AXIS_OF_DIMENSION: dict[str, Axis] = {
    "m": "wavelength",
    "m^-1": "wavenumber",
    "Hz": "frequency",
    "rad s^-1": "frequency",
    JOULE: "photon_energy",
}
"""Which spectral axis a unit belongs to."""

PREFIXED = {
    "m": ("nm", "um", "mm", "cm", "m", "pm", "km"),
    "Hz": ("Hz", "kHz", "MHz", "GHz", "THz", "PHz"),
    "eV": ("eV", "meV", "keV"),
    "s": ("as", "fs", "ps", "ns"),
}
SPOKEN = {
    "nm": r"nanomet(er|re)s?|nanometern|nanometri|nanometros",
    "um": r"microns?|mikron|mum|u|micromet(er|re)s?|mikrometern?|micrometri|micrometros",
    "mm": r"millimet(er|re)s?",
    "cm": r"centimet(er|re)s?|zentimeter",
    "angstrom": r"a|å|angstroms?|angstroem",
    "THz": r"terahertz",
    "eV": r"e\.?v\.?|electron ?volts?|elektronenvolt",
    "cm^-1": r"wavenumbers?|kayser|(inverse|reciprocal) (cm|centimet(er|re)s?)",
    "%": r"%|percent|per cent|prozent|pct|pour ?cent|por ?cent[oi]|per ?cento|procent",
    "rad": r"rad|radians?",
    "deg": r"deg|°|degrees?|grad",
    "": r"|-|1|a\.?\s?u\.?|arb(\.|itrary)?( units?)?|none|dimensionless|unitless|u\.\s?a\.?",
}
"""Words, in lower case, for a unit in our spelling."""

INVERSE = re.compile(
    r"(?:1\s*/\s*|/\s*|per\s+)(?P<a>[nuµμcm]?m|km)|(?P<b>[nucm]?m|km)\s*(?:\^|\*\*)?\s*\(?-1\)?",
    re.IGNORECASE,
)
DECIBEL = re.compile(r"db\s*(?:/|per)?\s*\(?\s*(?:/\s*)?(?P<a>[cmk]?m)\)?", re.IGNORECASE)
RATE = re.compile(r"rad\s*/\s*(?P<a>[fpn]?s)", re.IGNORECASE)
DISPERSION = re.compile(r"(?P<t>[fp]s)\s*\^?\s*(?P<p>[234])\s*(?:/\s*(?P<l>[mck]?m))?", re.IGNORECASE)
PARAMETER = re.compile(
    r"ps\s*(?:/\s*\(?\s*(?:nm\s*[/*. ]?\s*km|km\s*[/*. ]?\s*nm)\s*\)?"
    r"|[*. ]?\s*(?:nm\^?\(?-1\)?\s*[*. ]?\s*km\^?\(?-1\)?|km\^?\(?-1\)?\s*[*. ]?\s*nm\^?\(?-1\)?))",
    re.IGNORECASE,
)
"""The unit of fibres' D, in its spellings."""
BRACKETS = {"[": "]", "(": ")", "{": "}", "<": ">"}
SUPERSCRIPTS = str.maketrans("⁻¹²³⁴", "-1234")


def unit_named(text: str) -> str | None:
    """The unit in the spelling of `pulseprop.units`; "" for a plain number; None where it is no such unit."""
    bare = _bare(text)
    lower = bare.lower()
    for unit, words in SPOKEN.items():
        if re.fullmatch(words, lower):
            return unit
    for unit in (unit for family in PREFIXED.values() for unit in family):
        if bare == unit:
            return unit
    return _compound(bare) or _any_case(lower)


def dimension(unit: str) -> str:
    """Base symbols and powers of a unit in our spelling; "" for a plain number."""
    return unit_from(unit).dimension if unit else ""


def is_dispersion_parameter(unit: str) -> bool:
    """Whether it is a unit of D = -2 pi c GVD / lambda^2, the dispersion parameter of fibres."""
    return bool(unit) and dimension(unit) == "m^-2 s"


def _bare(text: str) -> str:
    """Without brackets; micro as u; raised digits on the line."""
    text = text.strip().translate(SUPERSCRIPTS).replace("µ", "u").replace("μ", "u").replace("·", " ")
    while text[:1] in BRACKETS and text.endswith(BRACKETS[text[:1]]) and len(text) > 1:
        text = text[1:-1].strip()
    return text


def _compound(text: str) -> str | None:
    if found := INVERSE.fullmatch(text):
        return f"{(found['a'] or found['b']).lower()}^-1"
    if found := DECIBEL.fullmatch(text):
        return f"dB/{found['a'].lower()}"
    if found := RATE.fullmatch(text):
        return f"rad/{found['a'].lower()}"
    if PARAMETER.fullmatch(text):
        return "ps/(nm km)"
    if found := DISPERSION.fullmatch(text):
        per = f"/{found['l'].lower()}" if found["l"] else ""
        return f"{found['t'].lower()}^{found['p']}{per}"
    return None


def _any_case(lower: str) -> str | None:
    """NM for nm, THZ for THz: where capitals do not matter, they are not held against the writer."""
    for unit in (*PREFIXED["m"], "THz", "GHz", "PHz", "Hz", "eV", "keV", "fs", "ps"):
        if lower == unit.lower():
            return unit
    return None


def known_unit(text: str) -> str:
    """The unit that an option states. Raises InputError where it is none."""
    unit = unit_named(text)
    if unit is None:
        unit_from(text)
        return text.strip()
    return unit
