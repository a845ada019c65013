"""A run as an xarray.Dataset, and the NetCDF file of it.

In memory the fields are complex. NetCDF knows no complex numbers: the file has a dimension `part` (re, im).
"""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from pulseprop.propagation.result import Fields, Run
from pulseprop.reports.document import written_whole

if TYPE_CHECKING:
    import xarray

__all__ = ["save_dataset", "to_dataset"]

Complex = NDArray[np.complex128]
Real = NDArray[np.float64]

FEMTO, TERA = 1e15, 1e-12

INSIDE = 1e-9
"""Share of the entering energy outside the leaving window up to which both are shown in that window."""

FORMS = {
    "envelope": "analytic signal divided by exp(-i omega_c t), omega_c = 2 pi carrier_THz",
    "field": "analytic signal, not divided by a carrier",
}


def to_dataset(run: Run) -> xarray.Dataset:
    """Fields, spectra, group delay and transmission of a run, units in the attributes.

    time: fs on the clock of a front that travels at c, the window of the pulse that leaves. time_in: the
    instants of field_in, the same as time wherever that window holds the pulse that enters. frequency: THz,
    absolute and ascending; spectra are zero at and below zero. The integral of a spectrum over frequency is
    the energy.
    """
    import xarray

    fields = run.fields
    entering = _entering_window(fields)
    time, frequency = fields.grid_out.time * FEMTO, fields.grid_out.frequency * TERA
    variables: dict[str, Any] = {
        "field_in": ("time", _shown(entering), _field_attributes(fields, "entering")),
        "field_out": ("time", _shown(fields), _field_attributes(fields, "leaving")),
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
            time,
            {"units": "fs", "long_name": "time on the clock of a front that travels at c"},
        ),
        "time_in": (
            "time",
            entering.grid_out.time * FEMTO,
            {"units": "fs", "long_name": "instants of field_in, on the same clock as time"},
        ),
        "frequency": ("frequency", frequency, {"units": "THz", "long_name": "ordinary frequency"}),
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


def _entering_window(fields: Fields) -> Fields:
    """The pulse that enters as one that leaves: in the leaving window where it lies there, else in its own.

    Seen through a window that does not hold it, a field would come back as an alias from the other side.
    """
    own, common = fields.grid_in, fields.grid_out
    height = np.abs(fields.envelope_in) ** 2
    outside = (own.time < common.start) | (own.time > common.start + common.span)
    held = float(height[outside].sum()) <= INSIDE * float(height.sum())
    return Fields(
        grid_in=own,
        grid_out=common if held else own,
        spectrum_in=fields.spectrum_in,
        spectrum_out=fields.spectrum_in,
        transmission=fields.transmission,
        group_delay=fields.group_delay,
        form=fields.form,
    )


def _shown(fields: Fields) -> Complex:
    """The field that leaves, in the form that was asked for."""
    envelope = fields.envelope_out
    return fields.grid_out.carrier_resolved(envelope) if fields.form == "field" else envelope


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
        "scenario_sha256": run.scenario_sha256,
        "catalogue_sha256": run.catalogue_sha256,
        "pulseprop_version": run.version,
        "numpy_version": version("numpy"),
        "scipy_version": version("scipy"),
        "warnings": list(run.warnings) or "",
        "cautions": [f"[{caution.code}] {caution.text}" for caution in run.cautions] or "",
    }
