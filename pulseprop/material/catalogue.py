"""The catalogue of media: published dispersion formulas, read one file a family of media.

A file is a run of [[record]] tables; a record is parsed only when it is asked for. Keys of a record:

    names               every exact name, the first being the one printed; all are names of one substance
                        (SF10 and N-SF10 are two records)
    refused             words people type that say too little or mean something else; used in messages only
    axis                "o", "e", "x", "y" or "z" where the crystal is birefringent
    kind, offset, ...   the formula as printed, see `Record`
    valid_um            range of vacuum wavelength, um
    temperature         as printed; for gases pressure_Pa and temperature_K too
    relative_to         what the printed index is against, "air" or "vacuum"; relative_to_assumed = true where
                        what was seen of the source does not say
    source, data_set    the publication; the open data-set entry from which the coefficients were taken
    from_memory         true where coefficients were recalled and not seen
    spread              other records of the same substance, for the spread between published values
    n2                  published nonlinear indices
    second_virial       of gases, with its source
    note, health        what a user should know; `health` is common practice, without source
"""

from __future__ import annotations

import difflib
import json
import re
import tomllib
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any

from pulseprop.errors import InputError

__all__ = ["Nonlinearity", "Record", "names", "near_names", "record"]

FAMILIES = {
    "glass": "catalogue_glasses.toml",
    "crystal": "catalogue_crystals.toml",
    "semiconductor": "catalogue_semiconductors.toml",
    "liquid": "catalogue_liquids.toml",
    "gas": "catalogue_gases.toml",
    "polymer": "catalogue_polymers.toml",
}
HEADING = "[[record]]\n"
OFFERED = 8

Pairs = tuple[tuple[float, float], ...]


@dataclass(frozen=True, kw_only=True)
class Nonlinearity:
    """A published nonlinear index in m^2/W, the vacuum wavelength and the pulses it was measured with.

    For gases `pressure_Pa` and `temperature_K` give the density it was measured at.
    """

    value: float
    wavelength_um: float
    source: str
    pulse: str = ""
    pressure_Pa: float | None = None
    temperature_K: float | None = None
    note: str = ""


@dataclass(frozen=True, kw_only=True)
class Record:
    """One published description of one substance (and one axis). L is the vacuum wavelength in um.

    kind "sellmeier"      n^2 - 1 = offset + sum s L^2/(L^2 - r) over `terms` (s, r)
                          + sum s/(L^2 - r) over `pole_terms` (s, r) + sum s L^p over `power_terms` (s, p);
                          r is the squared resonance, um^2; s of a pole term is in um^2
    kind "gas"            n - 1 = offset + sum s/(r - 1/L^2) over `terms` (s, r), both in um^-2
    kind "index powers"   n - 1 = offset + sum s L^p over `power_terms` (s, p)
    kind "debye"          n^2 - 1 = offset + sum s/(1 - i omega t) over `relaxations` (s, t), t in s
    kind "humid air"      no formula here: see the module `humid_air`

    second_virial: (temperature in K, coefficient in m^3/mol) pairs.
    """

    names: tuple[str, ...]
    family: str
    kind: str
    offset: float
    valid_um: tuple[float, float]
    temperature: str
    relative_to: str
    source: str
    axis: str = ""
    terms: Pairs = ()
    pole_terms: Pairs = ()
    power_terms: tuple[tuple[float, int], ...] = ()
    relaxations: Pairs = ()
    pressure_Pa: float | None = None
    temperature_K: float | None = None
    relative_to_assumed: bool = False
    data_set: str = ""
    from_memory: bool = False
    spread: tuple[str, ...] = ()
    n2: tuple[Nonlinearity, ...] = ()
    second_virial: Pairs = ()
    second_virial_source: str = ""
    note: str = ""
    health: str = ""
    refused: tuple[str, ...] = ()

    @property
    def name(self) -> str:
        """The name that answers print."""
        return self.names[0]


def names() -> tuple[str, ...]:
    """The printed name of every record, in the order of the files."""
    return tuple(entry.names[0] for entry in _entries())


@cache
def record(name: str) -> Record:
    """The record that carries this exact name.

    Raises InputError, with the names that may have been meant, where there is none.
    """
    for entry in _entries():
        if name in entry.names:
            return _parsed(entry)
    near = [repr(other) for other in near_names(name)]
    raise InputError(
        "the catalogue has no medium of this exact name",
        value=name,
        allowed="a name that `pulseprop media` lists, or a [medium.NAME] of the scenario",
        remedy=f"Did you mean {' or '.join(near)}?" if near else "Run `pulseprop media` for the list",
    )


def near_names(name: str) -> tuple[str, ...]:
    """Printed names that someone who typed `name` may have meant, nearest first; twins stand side by side."""
    stem = _stem(name)
    known = _printed_by_stem()
    found = list(known.get(stem, ()))
    for close in difflib.get_close_matches(stem, known, n=4, cutoff=0.75):
        found.extend(known[close])
    found.sort(key=lambda other: _letters(other) != _letters(name))
    return tuple(dict.fromkeys(found))[:OFFERED]


@dataclass(frozen=True)
class _Entry:
    """A record not parsed yet."""

    names: tuple[str, ...]
    refused: tuple[str, ...]
    family: str
    text: str


@cache
def _entries() -> tuple[_Entry, ...]:
    found = []
    for family, file in FAMILIES.items():
        text = Path(__file__).with_name(file).read_text(encoding="utf-8")
        for block in text.split(HEADING)[1:]:
            found.append(
                _Entry(_strings(block, "names"), _strings(block, "refused"), family, HEADING + block)
            )
    return tuple(found)


def _strings(block: str, key: str) -> tuple[str, ...]:
    """An array of plain strings on one line, which is JSON as well as TOML."""
    line = re.search(rf"^{key} = (\[.*\])$", block, re.MULTILINE)
    return tuple(json.loads(line.group(1))) if line else ()


@cache
def _printed_by_stem() -> dict[str, tuple[str, ...]]:
    found: dict[str, list[str]] = {}
    for entry in _entries():
        for name in entry.names + entry.refused:
            found.setdefault(_stem(name), []).append(entry.names[0])
    return {stem: tuple(printed) for stem, printed in found.items()}


def _stem(name: str) -> str:
    """What is left of a name without author, axis, punctuation and the N- or P- of newer glasses."""
    plain = re.sub(r"\(.*\)| [oexyz]$", "", name.strip())
    return re.sub(r"^[np](?=[a-z]+\d)", "", _letters(plain))


def _letters(name: str) -> str:
    return re.sub(r"[^a-z0-9]", "", name.lower())


def _parsed(entry: _Entry) -> Record:
    table: dict[str, Any] = tomllib.loads(entry.text)["record"][0]
    term = _gas_term if table["kind"] == "gas" else _resonance_term
    table["terms"] = tuple(term(row) for row in table.get("terms", ()))
    table["pole_terms"] = tuple(_resonance_term(row) for row in table.get("pole_terms", ()))
    table["power_terms"] = tuple((row["strength"], row["power"]) for row in table.get("power_terms", ()))
    table["relaxations"] = tuple(
        (row["strength"], row["time_ps"] * 1e-12) for row in table.get("relaxations", ())
    )
    table["second_virial"] = tuple(
        (row["temperature_K"], row["value_m3_per_mol"]) for row in table.get("second_virial", ())
    )
    table["n2"] = tuple(Nonlinearity(value=row.pop("value_m2_per_W"), **row) for row in table.get("n2", ()))
    for key in ("names", "refused", "spread", "valid_um"):
        table[key] = tuple(table.get(key, ()))
    return Record(family=entry.family, **table)


def _gas_term(row: dict[str, float]) -> tuple[float, float]:
    return row["strength"], row["resonance"]


def _resonance_term(row: dict[str, float]) -> tuple[float, float]:
    """Strength and squared resonance, whichever way the resonance was printed."""
    squared = row["resonance_squared"] if "resonance_squared" in row else row["resonance"] ** 2
    return row["strength"], squared
