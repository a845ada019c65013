"""Published pairs of real and imaginary parts, and sum rules: shared/published_checks.json, group G.

Rows of tables through Kramers-Kronig stand in test_kramers_kronig_published.py.
"""

from __future__ import annotations

import json
from pathlib import Path as FilePath

import numpy as np
import pytest

from pulseprop.causality.sum_rules import Feature, sum_rules
from pulseprop.material.lines import Carriers, LorentzLine, Relaxation, VoigtLine
from pulseprop.material.medium import Medium
from pulseprop.numerics.faddeeva import faddeeva

CHECKS = json.loads(
    (FilePath(__file__).parents[2] / "shared/published_checks.json").read_text(encoding="utf-8")
)
ROWS = {row["id"]: row for row in CHECKS["checks"] if row["group"] == "G"}

LORENTZ = LorentzLine(strength=20.0, centre=4.0, width=0.56)
DRUDE = Carriers(plasma_frequency=9.0, rate=0.1)
# exp(-((w - 3)/0.5)^2): standard deviation 0.5/sqrt 2, height sqrt(pi) S / (2 * 3 * 0.5) = 1.
GAUSS = VoigtLine(strength=3 / np.sqrt(np.pi), centre=3.0, width=0.0, doppler_width=np.sqrt(np.log(2)))
RESPONSES = {
    "G-lorentz": (LORENTZ, 1e-13),
    "G-debye": (Relaxation(static=73.16, time=8.27), 1e-13),
    "G-drude": (DRUDE, 1e-13),
    "G-gauss-open": (GAUSS, 1e-12),
}
PAIRS = [
    pytest.param(key, float(omega), pair, id=f"{key} at {omega}")
    for key in RESPONSES
    for omega, pair in ROWS[key]["value"].items()
]


@pytest.mark.parametrize(("key", "omega", "pair"), PAIRS)
def test_real_and_imaginary_part(key, omega, pair):
    response, tolerance = RESPONSES[key]
    chi = complex(response.series(np.array([omega]), 1)[0, 0])
    assert chi.real == pytest.approx(pair[0], rel=tolerance, abs=1e-14), ROWS[key]["source"]
    # A Gaussian's far wing of 2e-16 is below the rounding of its pair.
    assert chi.imag == pytest.approx(pair[1], rel=tolerance, abs=1e-15)


@pytest.mark.parametrize(("omega", "pair"), ROWS["G-drude-n"]["value"].items())
def test_complex_index_of_carriers(omega, pair):
    index = complex(Medium(name="metal", response=DRUDE).index(np.array(float(omega))))
    assert (index.real, index.imag) == pytest.approx(pair, rel=1e-12), ROWS["G-drude-n"]["source"]


@pytest.mark.parametrize(("place", "pair"), ROWS["G-faddeeva"]["value"].items())
def test_faddeeva_function(place, pair):
    """M. Abramowitz, I. A. Stegun, table 7.9, prints 0.304744 and 0.208219 at 1 + i (memory)."""
    z = {"i": 1j, "1+i": 1 + 1j, "0.5+0.1i": 0.5 + 0.1j, "10+i": 10 + 1j}[place]
    value = complex(faddeeva(np.array([z]), 1)[0, 0])
    assert (value.real, value.imag) == pytest.approx(pair, rel=1e-12, abs=1e-15), ROWS["G-faddeeva"]["source"]


def axis() -> tuple[np.ndarray, np.ndarray]:
    """Gauss nodes and weights from 0 to 1e7, in pieces that shrink towards the line at 4."""
    close = 4 + 0.56 * np.array([s * 2.0**k for k in range(-2, 3) for s in (-1, 1)])
    edges = np.unique(np.concatenate(([0.0, 4.0], close, np.geomspace(0.01, 1e7, 120))))
    nodes, weights = np.polynomial.legendre.leggauss(24)
    half = np.diff(edges)[:, None] / 2
    return ((edges[:-1] + edges[1:])[:, None] / 2 + half * nodes).ravel(), (half * weights).ravel()


def test_sum_rules_of_a_lorentz_medium():
    """G-sum, from 0 to infinity; beyond 1e7 chi1 = -20/w^2 and n - 1 = -10/w^2 are added in closed form."""
    omega, weight = axis()
    chi = LORENTZ.series(omega, 1)[0]
    index = Medium(name="line", response=LORENTZ).refraction(omega)[0]
    found = (
        weight @ (omega * chi.imag) + 20 * 0.56 / 1e7,
        weight @ (chi.imag / omega),
        weight @ index.real - 10 / 1e7,
        weight @ (omega * index.imag) + 10 * 0.56 / 1e7,
        weight @ chi.real - 20 / 1e7,
    )
    assert found == pytest.approx(ROWS["G-sum"]["value"], rel=1e-11, abs=1e-10), ROWS["G-sum"]["source"]


def test_the_programs_own_sum_rules_agree():
    """Both of its ratios to the published integrals are one: f-sum (pi/2) wp^2, static (pi/2) chi(0)."""
    rules = sum_rules(lambda omega: LORENTZ.series(omega, 1)[0], [Feature(4.0, 0.56)], relaxes=False)
    assert [rule.ratio for rule in rules] == pytest.approx([1, 1], abs=1e-8)
