"""The saved fields: energies, clocks and forms, read back with another library."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import h5py
import numpy as np
import pytest
import xarray

from pulseprop.errors import InputError
from pulseprop.propagation.result import Run
from pulseprop.reports.dataset import save_dataset, to_dataset


def with_fields(run: Run, **changes: object) -> Run:
    return replace(run, fields=replace(run.fields, **changes))


def energy_of(field: xarray.DataArray) -> float:
    return float((np.abs(field) ** 2).integrate("time")) * 1e-15


def test_integrals_are_the_energy(run: Run) -> None:
    data = to_dataset(run)
    for name in ("spectrum_in", "spectrum_out"):
        assert float(data[name].integrate("frequency")) == pytest.approx(5e-9, rel=1e-12)
    for name in ("field_in", "field_out"):
        assert energy_of(data[name]) == pytest.approx(5e-9, rel=1e-12)


def test_peak_power_is_that_of_a_gaussian(run: Run) -> None:
    # 2 sqrt(ln2 / pi) E / FWHM: closed form.
    data = to_dataset(run)
    peak = 2 * np.sqrt(np.log(2) / np.pi) * 5e-9 / 12e-15
    assert float((np.abs(data.field_in) ** 2).max()) == pytest.approx(peak, rel=1e-9)


def test_the_clock_is_that_of_the_front(run: Run) -> None:
    data = to_dataset(run)
    power = np.abs(data.field_out) ** 2
    assert float((data.time * power).sum() / power.sum()) == pytest.approx(10_000.0, abs=1e-6)


def test_both_pulses_stand_on_one_clock(run: Run) -> None:
    """10 ps apart: the pulse that enters is at 0, the one that leaves at its group delay."""
    data = to_dataset(run)
    np.testing.assert_array_equal(data.time, data.time_in)
    for name, centre in (("field_in", 0.0), ("field_out", 10_000.0)):
        power = np.abs(data[name]) ** 2
        assert float((data.time * power).sum() / power.sum()) == pytest.approx(centre, abs=1e-6)
        assert energy_of(data[name]) == pytest.approx(5e-9, rel=1e-12)


def test_windows_that_overlap_become_one_clock(run: Run) -> None:
    grid = run.fields.grid_in.moved(-1036.2e-15)
    data = to_dataset(with_fields(run, grid_out=grid, spectrum_out=run.fields.spectrum_in))
    np.testing.assert_array_equal(data.time, data.time_in)
    power = np.abs(data.field_in) ** 2
    assert float((data.time * power).sum() / power.sum()) == pytest.approx(0.0, abs=1e-6)
    assert energy_of(data.field_in) == pytest.approx(5e-9, rel=1e-12)


def test_a_pulse_that_enters_much_earlier_keeps_its_own_instants(run: Run) -> None:
    """Five nanoseconds, a metre of fibre: three million samples of 1.5 fs would hold both."""
    grid = run.fields.grid_in.moved(4.9e-9)
    data = to_dataset(with_fields(run, grid_out=grid, spectrum_out=run.fields.spectrum_in))
    power = np.abs(data.field_in) ** 2
    assert float((data.time_in * power).sum() / power.sum()) == pytest.approx(0.0, abs=1e-6)
    assert float(data.time.min()) > float(data.time_in.max())
    assert "time_in" in data.field_in.attrs["instants"]


def test_envelope_times_carrier_is_the_field(run: Run) -> None:
    envelope, field = to_dataset(run).field_out, to_dataset(with_fields(run, form="field")).field_out
    carrier = np.exp(-2j * np.pi * envelope.attrs["carrier_THz"] * 1e12 * envelope.time.values * 1e-15)
    np.testing.assert_allclose(envelope.values * carrier, field.values, rtol=1e-9, atol=1e-9 * 600)
    assert "carrier_THz" not in field.attrs


def test_file_as_another_library_sees_it(run: Run, tmp_path: Path) -> None:
    path = save_dataset(run, tmp_path / "run.nc")
    with h5py.File(path) as file:
        assert {"time", "frequency", "part", "field_in", "field_out", "spectrum_in", "spectrum_out"} <= set(
            file
        )
        assert {"group_delay", "transmission"} <= set(file)
        assert file["field_out"].shape == (2048 + 6667, 2)
        assert file["field_out"].dtype == np.float64
        assert file["field_out"].attrs["units"] == "W^(1/2)"
        assert file["spectrum_out"].attrs["units"] == "J/THz"
        assert file["time"].attrs["units"] == "fs"
        assert file["frequency"].attrs["units"] == "THz"
        assert np.all(np.diff(file["frequency"][:]) > 0)
        assert file.attrs["scenario"] == 'title = "invented window"\n'
        assert file.attrs["scenario_sha256"] == "ab" * 32
        assert file.attrs["catalogue_sha256"] == "cd" * 32


def test_there_and_back(run: Run, tmp_path: Path) -> None:
    path = save_dataset(run, tmp_path / "run.nc")
    with xarray.open_dataset(path, engine="h5netcdf") as back:
        field = back.field_out.sel(part="re").values + 1j * back.field_out.sel(part="im").values
        np.testing.assert_array_equal(field, to_dataset(run).field_out.values)
        np.testing.assert_array_equal(back.group_delay, run.fields.group_delay * 1e15)


def test_no_file_where_none_can_be(run: Run, tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"run\.nc.*no directory"):
        save_dataset(run, tmp_path / "missing" / "run.nc")
