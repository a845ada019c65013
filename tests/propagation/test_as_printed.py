"""A table that no passive causal matter has, used as printed: the diagnostics say so, exit code 1."""

from __future__ import annotations

import numpy as np
import pytest

import pulseprop as pp

SCENARIO = """
title = "a table against the law"
note = "Invented."
[pulse]
shape = "gaussian"
centre = "800 nm"
duration = "30 fs"
[[path]]
kind = "slab"
medium = "stock"
thickness = "3 mm"
[medium.stock]
index = { file = "stock.csv", x_unit = "um", relative_to = "air" }
"""


@pytest.fixture
def scenario(tmp_path):
    """An index that falls towards short waves without absorbing, to five decimals."""
    wavelength = np.linspace(0.5, 1.3, 40)
    rows = [f"{at:.4f},{1.5 - 0.02 / at**2:.5f}" for at in wavelength]
    (tmp_path / "stock.csv").write_text("\n".join(["wavelength,n", *rows]))
    (tmp_path / "stock.toml").write_text(SCENARIO)
    return tmp_path / "stock.toml"


def test_it_is_refused_unless_asked_for_as_printed(scenario):
    with pytest.raises(pp.InputError, match=r"no passive causal medium.*as_printed"):
        pp.send(scenario)


def test_as_printed_it_answers_early_and_the_exit_code_says_so(scenario):
    run = pp.send(scenario, ("medium.stock.as_printed=true",))
    assert run.causality.verdict == "acausal"
    assert run.exit_code == 1
    assert run.causality.energy_ahead_of_front > 1e4 * run.causality.noise_floor
    assert run.causality.kk_residual == pytest.approx(0.5, abs=0.01)
    assert "as printed" in run.causality.kk_basis
    assert "not-a-causal-model" in {caution.code for caution in run.cautions}
    # Negative GDD: 3 mm of d2k/domega2 = -265.6 fs^2/mm, from n = 1.5 - 0.02/L^2: L^3/(2 pi c^2) d2n/dL2.
    length, bend = 0.8e-6, -6 * 0.02e-12 / 0.8e-6**4
    gvd = length**3 / (2 * np.pi * 299792458.0**2) * bend
    assert run.path.gdd_fs2 == pytest.approx(3e-3 * gvd * 1e30, rel=2e-3)
