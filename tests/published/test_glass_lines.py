"""Printed glass indices, Abbe numbers and zero-dispersion wavelengths.

SCHOTT: data sheet collection of 2018-06. CATALOGUE_2017 holds the n_d and V_d that the open data set
(refractiveindex.info, CC0) carries beside the constants, from the SCHOTT catalogue of 2017-01-20.
Zero-dispersion wavelengths are roots of d2n/dL2 of the published formulas, computed with 60 digits.
"""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest
from scipy.optimize import brentq

from pulseprop.material.catalogue_media import catalogue_medium

CHECKS = json.loads((Path(__file__).parents[2] / "shared/published_checks.json").read_text(encoding="utf-8"))[
    "checks"
]

# Spectral lines in nm, in air, as the trade puts them into the formulas: d, e; hydrogen F, C; cadmium F', C'.
LINES = {"d": 587.5618, "e": 546.0740, "F": 486.1327, "C": 656.2725, "F'": 479.9914, "C'": 643.8469}

PRINTED_LINES = [c for c in CHECKS if c["id"].startswith("C-cat-") and "medium" in c]
COMPUTED_LINES = [c for c in CHECKS if c["id"].startswith("C-nd-")]
ZERO_DISPERSION = [c for c in CHECKS if c["id"].startswith("C-zdw-")]

# n_d, V_d, printed (catalogue 2017) for the glasses that the list above leaves out.
CATALOGUE_2017 = [
    ("N-SF10", 1.72828, 28.53),
    ("SF11", 1.78472, 25.76),
    ("N-F2", 1.62005, 36.43),
    ("N-SF57", 1.84666, 23.78),
    ("N-SF6", 1.80518, 25.36),
    ("SF14", 1.76182, 26.53),
    ("SF66", 1.92286, 20.88),
    ("N-SF66", 1.92286, 20.88),
    ("SF5", 1.6727, 32.21),
    ("N-SF5", 1.67271, 32.25),
    ("N-LASF9", 1.85025, 32.17),
    ("N-LASF44", 1.8042, 46.5),
    ("N-BAF10", 1.67003, 47.11),
    ("BAFN6", 1.589, 48.45),
    ("N-BAK4", 1.56883, 55.98),
    ("N-K5", 1.52249, 59.48),
    ("N-FK51A", 1.48656, 84.47),
    ("N-PK51", 1.52855, 76.98),
    ("N-SK16", 1.62041, 60.32),
]


def omega(nm: float) -> float:
    return 2 * np.pi * 299792458.0 / (nm * 1e-9)


def index(name: str, line: str) -> float:
    return catalogue_medium(name).orders(omega(LINES[line])).index


def abbe(name: str, centre: str, blue: str, red: str) -> float:
    return (index(name, centre) - 1) / (index(name, blue) - index(name, red))


@pytest.mark.parametrize("check", PRINTED_LINES, ids=lambda check: check["id"])
def test_printed_catalogue_figures_to_half_a_unit_of_the_last_digit(check):
    name, (n_d, n_e, v_d, v_e) = check["medium"], check["value"]
    assert index(name, "d") == pytest.approx(n_d, abs=5.001e-6)
    assert index(name, "e") == pytest.approx(n_e, abs=5.001e-6)
    assert abbe(name, "d", "F", "C") == pytest.approx(v_d, abs=5.001e-3)
    assert abbe(name, "e", "F'", "C'") == pytest.approx(v_e, abs=5.001e-3)


@pytest.mark.parametrize(("name", "n_d", "v_d"), CATALOGUE_2017)
def test_data_set_figures_beside_the_constants(name, n_d, v_d):
    assert index(name, "d") == pytest.approx(n_d, abs=5.001e-6)
    assert abbe(name, "d", "F", "C") == pytest.approx(v_d, abs=5.001e-3)


@pytest.mark.parametrize("check", COMPUTED_LINES, ids=lambda check: check["id"])
def test_n_d_and_abbe_number_of_formulas(check):
    n_d, v_d = check["value"]
    assert index(check["medium"], "d") == pytest.approx(n_d, rel=1e-9)
    assert abbe(check["medium"], "d", "F", "C") == pytest.approx(v_d, rel=1e-9)


@pytest.mark.parametrize("check", ZERO_DISPERSION, ids=lambda check: check["id"])
def test_zero_dispersion_wavelength(check):
    """GVD = (L^3 / 2 pi c^2) d2n/dL2, so both vanish together."""
    medium, expected = catalogue_medium(check["medium"]), check["value"]

    def gvd(um: float) -> float:
        return medium.orders(omega(um * 1e3)).gvd / 1e-27

    found = brentq(gvd, 0.95 * expected, 1.05 * expected, xtol=1e-12, rtol=1e-13)
    assert found == pytest.approx(expected, rel=1e-8)


TWINS = {"F2": "11.83", "N-F2": "0.056", "SF10": "34.1", "N-SF10": "25.5", "SF11": "46.5", "N-SF11": "35.9"}


@pytest.mark.parametrize(("name", "printed"), TWINS.items())
def test_leaded_and_lead_free_twins_differ_in_the_infrared(name, printed):
    """GVD in fs^2/mm at 1550 nm from the SCHOTT constants of 2017; half a unit of the last digit."""
    half = 0.5 * 10.0 ** -len(printed.partition(".")[2])
    assert catalogue_medium(name).orders(omega(1550)).gvd / 1e-27 == pytest.approx(float(printed), abs=half)


def test_zero_dispersion_of_silica_is_near_the_glossary_figure():
    """US Federal Standard 1037C, "material dispersion": zero "in the vicinity of 1.27" um (text seen)."""
    medium = catalogue_medium("fused silica")
    assert medium.orders(omega(1265)).gvd > 0 > medium.orders(omega(1280)).gvd
