"""A run as an xarray.Dataset, and the NetCDF file of it.

In memory the fields are complex. NetCDF knows no complex numbers: the file has a dimension `part` (re, im).
"""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.propagation.result import Fields, Run
from pulseprop.reports.common_clock import on_one_clock
from pulseprop.reports.document import written_whole

if TYPE_CHECKING:
    import xarray

__all__ = ["save_dataset", "to_dataset"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

FEMTO, TERA = 1e15, 1e-12

APART = {"instants": "time_in: the pulse enters too long before it leaves for one time axis"}

FORMS = {
    "envelope": "analytic signal divided by exp(-i omega_c t), omega_c = 2 pi carrier_THz",
    "field": "analytic signal, not divided by a carrier",
}


def to_dataset(run: Run) -> xarray.Dataset:
    """Fields, spectra, group delay and transmission of a run, units in the attributes.

    time: fs on the clock of a front that travels at c, over the windows of both pulses; a field is zero
    outside its own. Where they lie too far apart (over two million samples) it is the window of the pulse
    that leaves, and time_in holds the instants of field_in; else time_in is time. frequency: THz, absolute
    and ascending; spectra are zero at and below zero. The integral of a spectrum over frequency is the
    energy.
    """
    import xarray

    fields = run.fields
    clock = on_one_clock(fields)
    apart = clock.time_in is not clock.time
    variables: dict[str, Any] = {
        "field_in": (
            "time",
            clock.entering,
            _field_attributes(fields, "entering") | (APART if apart else {}),
        ),
        "field_out": ("time", clock.leaving, _field_attributes(fields, "leaving")),
        "spectrum_in": _spectrum(fields.spectrum_in, "entering"),
        "spectrum_out": _spectrum(fields.spectrum_out, "leaving"),
        "group_delay": (
            "frequency",
            fields.group_delay * FEMTO,
            {"units": "fs", "long_name": "group delay of the path against the same path in vacuum"},
        ),
        "transmission": (
            "frequency",
            fields.transmission,
            {"units": "1", "long_name": "share of the spectral energy that leaves"},
        ),
    }
    coordinates: dict[str, Any] = {
        "time": (
            "time",
            clock.time * FEMTO,
            {"units": "fs", "long_name": "time on the clock of a front that travels at c"},
        ),
        "time_in": (
            "time",
            clock.time_in * FEMTO,
            {"units": "fs", "long_name": "instants of field_in, on the same clock as time"},
        ),
        "frequency": (
            "frequency",
            fields.grid_out.frequency * TERA,
            {"units": "THz", "long_name": "ordinary frequency"},
        ),
    }
    return xarray.Dataset(variables, coordinates, _attributes(run))


def save_dataset(run: Run, path: str | Path) -> Path:
    """The dataset as a NetCDF-4 file, complex numbers along `part`; written whole or not at all.

    Raises InputError where the file cannot be written.
    """
    import xarray

    dataset = to_dataset(run)
    for name in ("field_in", "field_out"):
        value = dataset[name]
        split = np.stack((value.values.real, value.values.imag), axis=-1)
        dataset[name] = xarray.Variable(("time", "part"), split, value.attrs)
    dataset = dataset.assign_coords(part=("part", ["re", "im"]))

    def write(target: Path) -> None:
        dataset.to_netcdf(target, engine="h5netcdf")

    return written_whole(path, write)


def _field_attributes(fields: Fields, which: str) -> dict[str, Any]:
    attributes: dict[str, Any] = {
        "units": "W^(1/2)",
        "long_name": f"field of the {which} pulse; |field|^2 is the power averaged over the carrier",
        "form": fields.form,
        "convention": FORMS[fields.form],
    }
    if fields.form == "envelope":
        attributes["carrier_THz"] = fields.grid_out.carrier * TERA
    return attributes


def _spectrum(amplitude: Complex, which: str) -> tuple[str, Real, dict[str, str]]:
    """|A|^2 is energy per ordinary frequency in J/Hz."""
    density = (amplitude.real**2 + amplitude.imag**2) / TERA
    return "frequency", density, {"units": "J/THz", "long_name": f"spectrum of the {which} pulse"}


def _attributes(run: Run) -> dict[str, Any]:
    from importlib.metadata import version

    return {
        "title": run.scenario,
        "comment": run.note,
        "source": f"pulseprop {run.version}",
        "sign_convention": "exp(-i omega t); positive GDD means red first",
        "scenario": run.scenario_text,
        "scenario_file": run.file,
        "overrides": list(run.overrides) or "",
        "scenario_sha256": run.scenario_sha256,
        "catalogue_sha256": run.catalogue_sha256,
        "pulseprop_version": run.version,
        "numpy_version": version("numpy"),
        "scipy_version": version("scipy"),
        "warnings": list(run.warnings) or "",
        "cautions": [f"[{caution.code}] {caution.text}" for caution in run.cautions] or "",
    }
