"""Grating and prism pairs, row by row: shared/published_checks.json, group D.

Sources stand in the rows: E. B. Treacy (1969), S. Backus et al. (1998), R. L. Fork et al. (1984).
"""

from __future__ import annotations

import json
from pathlib import Path as FilePath
from typing import Any

import numpy as np
import pytest

from pulseprop.elements.element import orders_of_element
from pulseprop.elements.gratings import GratingPair
from pulseprop.elements.prisms import PrismPair
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.propagation.send import run
from pulseprop.scenario.build import build
from pulseprop.scenario.read import scenario_from

CHECKS = json.loads(
    (FilePath(__file__).parents[2] / "shared/published_checks.json").read_text(encoding="utf-8")
)
ROWS = {row["id"]: row for row in CHECKS["checks"]}
C = 299792458.0
FS = 1e-15

GRATINGS = [
    ("D-grating-0.8-1200", 800e-9, 1200e3, 40.0),
    ("D-grating-1.03-1000", 1030e-9, 1000e3, 31.0),
    ("D-grating-0.8-300", 800e-9, 300e3, 10.0),
]
PRISMS = [
    ("D-prism-fused-0.8", "fused silica", 800e-9),
    ("D-prism-SF10-0.8", "SF10", 800e-9),
    ("D-prism-N-SF14-1.03", "N-SF14", 1030e-9),
    ("D-prism-N-BK7-0.8", "N-BK7", 800e-9),
]


def in_femtoseconds(element: Any) -> list[float]:
    """GDD, TOD, FOD."""
    orders = orders_of_element(element, element.centre)
    return [order / FS**power for power, order in enumerate(orders[1:], start=2)]


def gratings(wavelength: float, grooves: float, degrees: float, separation: float) -> GratingPair:
    return GratingPair(
        name="pair",
        centre=2 * np.pi * C / wavelength,
        grooves=grooves,
        incidence=np.radians(degrees),
        separation=separation,
        passes=1,
    )


def prisms(name: str, wavelength: float) -> PrismPair:
    return PrismPair(
        name="pair",
        centre=2 * np.pi * C / wavelength,
        medium=catalogue_medium(name),
        apex_separation=1e-3,
        passes=1,
    )


@pytest.mark.parametrize(("row", "wavelength", "grooves", "degrees"), GRATINGS)
def test_grating_pairs_per_millimetre(row, wavelength, grooves, degrees):
    found = in_femtoseconds(gratings(wavelength, grooves, degrees, 1e-3))
    assert found == pytest.approx(ROWS[row]["value"], rel=1e-10), ROWS[row]["source"]


@pytest.mark.parametrize(("wavelength", "grooves", "degrees"), [row[1:] for row in GRATINGS])
def test_treacys_closed_form(wavelength, grooves, degrees):
    """D-Treacy: GDD and TOD as the row states them."""
    sine, ratio = np.sin(np.radians(degrees)), wavelength * grooves
    rest = 1 - (ratio - sine) ** 2
    gdd = -(wavelength**3) * 1e-3 * grooves**2 / (2 * np.pi * C**2) * rest**-1.5
    tod = -gdd * 3 * wavelength / (2 * np.pi * C) * (1 + ratio * sine - sine**2) / rest
    found = in_femtoseconds(gratings(wavelength, grooves, degrees, 1e-3))
    assert found[:2] == pytest.approx([gdd / FS**2, tod / FS**3], rel=1e-12), ROWS["D-Treacy"]["source"]


def test_a_handbook_row_of_a_grating_compressor():
    """D-grating-Backus: printed with c = 2.9979e8 m/s; the exact c moves it by 3e-5."""
    row = ROWS["D-grating-Backus"]
    found = in_femtoseconds(gratings(800e-9, 600e3, 13.89, 1e-2))
    assert found == pytest.approx(row["value"], rel=3e-5), row["source"]
    assert found == pytest.approx(row["computed"]["exact_c"], rel=1e-10)


@pytest.mark.parametrize(("row", "name", "wavelength"), PRISMS)
def test_brewster_prism_pairs_per_millimetre(row, name, wavelength):
    pair = prisms(name, wavelength)
    assert in_femtoseconds(pair) == pytest.approx(ROWS[row]["value"], rel=1e-9), ROWS[row]["source"]
    computed = ROWS[row]["computed"]
    assert np.degrees(pair.apex) == pytest.approx(computed["apex_deg"], abs=1e-8)
    assert np.degrees(pair.incidence) == pytest.approx(computed["brewster_deg"], abs=1e-8)


@pytest.mark.parametrize(("name", "wavelength"), [row[1:] for row in PRISMS])
def test_the_gdd_of_prisms_is_that_of_fork_martinez_and_gordon(name, wavelength):
    """-4 n'^2 L^3/(2 pi c^2) per length, n' = dn/dL: the slope from n_g = n - L n'."""
    centre = 2 * np.pi * C / wavelength
    orders = catalogue_medium(name).orders(centre)
    slope = (orders.index_minus_one - orders.group_index_minus_one) / wavelength
    expected = -4 * slope**2 * wavelength**3 / (2 * np.pi * C**2) * 1e-3 / FS**2
    assert in_femtoseconds(prisms(name, wavelength))[0] == pytest.approx(expected, rel=1e-12)


def test_a_double_pass_doubles_in_a_whole_run():
    """D-grating-0.8-300 and D-prism-fused-0.8 through a scenario: 5 mm of gratings, 600 mm of prisms, there
    and back."""
    document = {
        "pulse": {"shape": "gaussian", "centre": "800 nm", "duration": "30 fs"},
        "path": [
            {"kind": "grating pair", "grooves": "300 /mm", "incidence": "10 deg", "separation": "5 mm"},
            {"kind": "prism pair", "medium": "fused silica", "apex_separation": "600 mm"},
        ],
    }
    rows = run(build(scenario_from(document)), "0", "0").elements
    for row, source, factor in zip(rows, ("D-grating-0.8-300", "D-prism-fused-0.8"), (10, 1200), strict=True):
        expected = [factor * value for value in ROWS[source]["value"]]
        assert [row.gdd_fs2, row.tod_fs3, row.fod_fs4] == pytest.approx(expected, rel=1e-9)
        assert row.group_delay_fs == pytest.approx(0, abs=1e-9)
        assert row.transmission == pytest.approx(1, abs=1e-12)


def test_chirped_mirrors_of_common_practice_say_what_they_give():
    """D-chirped (common practice, no source): -40 to -250 fs^2 a bounce; here its ends through a run."""
    low, high = -40, -250
    assert f"{low} to {high} fs^2 per bounce" in ROWS["D-chirped"]["value"]
    document = {
        "pulse": {"shape": "gaussian", "centre": "800 nm", "duration": "30 fs"},
        "path": [
            {"kind": "chirped mirror", "gdd": f"{low} fs^2", "bounces": 6},
            {"kind": "chirped mirror", "gdd": f"{high} fs^2", "bounces": 2},
        ],
    }
    result = run(build(scenario_from(document)), "0", "0")
    assert result.path.gdd_fs2 == pytest.approx(6 * low + 2 * high, rel=1e-12)
    # FWHM of a Gaussian: 30 sqrt(1 + (4 ln2 GDD/30^2)^2).
    expected = 30 * np.hypot(1, 4 * np.log(2) * -740 / 900)
    assert result.pulse_out.fwhm_fs == pytest.approx(expected, rel=1e-6)
