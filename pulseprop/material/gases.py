"""Gases at another pressure and temperature than their record's.

The polarisability of Lorentz and Lorenz is proportional to the number of molecules, which is p/(k T), with
the second virial coefficient B where it is published: p = rho R T (1 + B rho), rho in mol/m^3. n2 goes with
the density.
"""

from __future__ import annotations

from dataclasses import replace

import numpy as np

from pulseprop.errors import InputError
from pulseprop.material.catalogue import Record, record
from pulseprop.material.catalogue_media import VACUUM, catalogue_medium
from pulseprop.material.composition import Scaled
from pulseprop.material.medium import Medium
from pulseprop.material.molar_density import molar_density

__all__ = ["gas_at"]


def gas_at(name: str, pressure: float, temperature: float, humidity: float | None = None) -> Medium:
    """The catalogue gas `name` at pressure (Pa, >= 0) and temperature (K, > 0); humidity 0..1 for air.

    Air with a humidity stated is humid air (P. E. Ciddor, 1996, moist), whatever record of dry air was named.

    Raises InputError for a record that is no gas, and for a state that makes no sense.
    """
    _check_state(pressure, temperature)
    entry = record(name)
    if entry.kind == "humid air" or (humidity is not None and entry.name.startswith("air")):
        return _humid_air(record("humid air"), pressure, temperature, humidity)
    if humidity is not None:
        raise InputError("humidity goes with air only", value=name, allowed='medium = "humid air" or "air"')
    if entry.pressure_Pa is None or entry.temperature_K is None:
        raise InputError(
            "this record is not a gas of known density",
            value=name,
            allowed="a gas of the catalogue, which has a pressure and a temperature of its own",
        )
    ratio = molar_density(pressure, temperature, _virial(entry, temperature)) / molar_density(
        entry.pressure_Pa, entry.temperature_K, _virial(entry, entry.temperature_K)
    )
    if not np.isfinite(ratio):
        raise InputError(
            "the gas would have condensed",
            value=f"{pressure:.4g} Pa at {temperature:.2f} K",
            allowed="a state in which the second virial coefficient still describes a gas",
        )
    base = catalogue_medium(name)
    return replace(
        base,
        name=f"{base.name} at {pressure / 1e5:.4g} bar, {temperature:.2f} K",
        response=Scaled(base.response, ratio) if ratio > 0 else VACUUM.response,
        temperature=f"{temperature:.2f} K (record: {entry.temperature})",
        temperature_K=temperature,
        n2=tuple(replace(known, value=known.value * ratio) for known in base.n2),
        notes=(
            *base.notes,
            *_virial_notes(entry, temperature),
            f"density {ratio:.6g} times that of the record",
        ),
    )


def _check_state(pressure: float, temperature: float) -> None:
    if not (np.isfinite(pressure) and pressure >= 0):
        raise InputError("a gas needs a pressure", value=pressure, allowed="0 Pa or more")
    if not (np.isfinite(temperature) and temperature > 0):
        raise InputError("a gas needs a temperature", value=temperature, allowed="above 0 K")


def _virial(entry: Record, temperature: float) -> float:
    """Second virial coefficient, m^3/mol: between the published ones, held beyond; 0 where there is none."""
    if not entry.second_virial:
        return 0.0
    known = np.array(sorted(entry.second_virial))
    return float(np.interp(temperature, known[:, 0], known[:, 1]))


def _virial_notes(entry: Record, temperature: float) -> tuple[str, ...]:
    """Where the second virial coefficient comes from, and that it is held where none is published."""
    if not entry.second_virial:
        return ()
    known = [place for place, _ in entry.second_virial]
    first, last = min(known), max(known)
    held = "" if first <= temperature <= last else f", held beyond its {first:.2f} to {last:.2f} K"
    return (f"second virial coefficient: {entry.second_virial_source}{held}",)


def _humid_air(entry: Record, pressure: float, temperature: float, humidity: float | None) -> Medium:
    from pulseprop.material.humid_air import humid_air_response

    if humidity is None:
        raise InputError("humid air needs its humidity", allowed='humidity = "0 %" to "100 %"')
    return Medium(
        name=f"humid air at {pressure / 100:.4g} hPa, {temperature:.2f} K, {100 * humidity:.3g} %",
        response=humid_air_response(pressure, temperature, humidity),
        source=entry.source,
        temperature=f"{temperature:.2f} K",
        temperature_K=temperature,
        relative_to="vacuum",
    )
