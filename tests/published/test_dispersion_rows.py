"""Every row of shared/published_dispersion.json: n, group index and orders of published formulas.

The sources stand in the file beside each medium. The expected values were computed from the printed
coefficients with 60 digits, twice: as a Taylor series of the wave number, and from derivatives by wavelength.
Below them, figures that handbooks print.
"""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest

from pulseprop.material.catalogue import record
from pulseprop.material.catalogue_media import catalogue_medium

MEDIA = json.loads(
    (Path(__file__).parents[2] / "shared/published_dispersion.json").read_text(encoding="utf-8")
)["media"]
ROWS = [
    pytest.param(entry["medium"], float(nm), row, id=f"{entry['medium']} {nm} nm")
    for entry in MEDIA
    for nm, row in entry["rows"].items()
]

FS2_PER_MM = 1e-30 / 1e-3
FS3_PER_MM = 1e-45 / 1e-3
FS4_PER_MM = 1e-60 / 1e-3


def orders(name: str, nm: float):
    return catalogue_medium(name).orders(2 * np.pi * 299792458.0 / (nm * 1e-9))


@pytest.mark.parametrize(("name", "nm", "row"), ROWS)
def test_published_row(name, nm, row):
    found = orders(name, nm)
    assert found.index == pytest.approx(row["n"], rel=1e-9)
    assert found.group_index == pytest.approx(row["n_g"], rel=1e-9)
    assert found.gvd / FS2_PER_MM == pytest.approx(row["GVD_fs2_per_mm"], rel=1e-9)
    assert found.tod / FS3_PER_MM == pytest.approx(row["TOD_fs3_per_mm"], rel=1e-8)
    assert found.fod / FS4_PER_MM == pytest.approx(row["FOD_fs4_per_mm"], rel=1e-8)
    if "n_minus_1" in row:
        assert found.index_minus_one == pytest.approx(row["n_minus_1"], rel=1e-9)
        assert found.group_index_minus_one == pytest.approx(row["n_g_minus_1"], rel=1e-9)


@pytest.mark.parametrize("entry", MEDIA, ids=lambda entry: entry["medium"])
def test_record_cites_the_same_source_entry_and_range(entry):
    found = record(entry["medium"])
    assert found.data_set == entry["dataset"]
    assert found.valid_um == tuple(entry["range_um"])


def test_every_published_medium_is_there():
    """27 formulas, 125 rows: a file that lost rows would pass the rest."""
    assert len(MEDIA) == 27
    assert len(ROWS) == 125


def test_handbook_row_of_fused_silica():
    """1 cm at 800 nm: S. Backus et al., Rev. Sci. Instrum. 69, 1207 (1998), dispersion table.

    From memory, every digit confirmed. The table was made with c = 2.9979e8 m/s, which moves it by 1.6e-5 in
    GDD and 2.5e-5 in TOD.
    """
    found = orders("fused silica", 800.0)
    assert found.gvd * 0.01 / 1e-30 == pytest.approx(361.626, rel=2e-5)
    assert found.tod * 0.01 / 1e-45 == pytest.approx(274.979, rel=3e-5)
    assert found.fod * 0.01 / 1e-60 == pytest.approx(-114.35, rel=4e-5)


@pytest.mark.parametrize(("name", "printed"), [("sapphire", 580.0), ("fused silica", 360.0)])
def test_textbook_figure_per_centimetre(name, printed):
    """fs^2/cm at 800 nm, H. Abramczyk, Introduction to Laser Spectroscopy (2005), p. 107 (text seen)."""
    assert orders(name, 800.0).gvd * 0.01 / 1e-30 == pytest.approx(printed, abs=5.0)


def test_textbook_figure_of_sf10_is_low():
    """The same page prints 1500 fs^2/cm for SF10; the constants of SF10 give 1594.59, of N-SF10 1565.24."""
    assert orders("SF10", 800.0).gvd * 0.01 / 1e-30 == pytest.approx(1594.59, abs=0.005)
    assert orders("N-SF10", 800.0).gvd * 0.01 / 1e-30 == pytest.approx(1565.24, abs=0.005)
