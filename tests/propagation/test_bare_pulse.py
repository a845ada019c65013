"""A scenario without a path is about the pulse alone."""

from __future__ import annotations

import numpy as np
import pytest

import pulseprop as pp
from pulseprop.reports.text import text_report

SCENARIO = """
title = "a chirped pulse"
note = "Invented."
[pulse]
shape = "gaussian"
centre = "800 nm"
duration = "30 fs"
gdd = "500 fs^2"
"""


@pytest.fixture
def run(tmp_path):
    (tmp_path / "bare.toml").write_text(SCENARIO)
    return pp.send(tmp_path / "bare.toml")


def test_what_leaves_is_what_enters(run):
    """30 fs sqrt(1 + (4 ln2 500/900)^2) = 55.09 fs (closed form of the Gaussian)."""
    expected = 30 * np.hypot(1, 4 * np.log(2) * 500 / 900)
    assert run.pulse_in.fwhm_fs == pytest.approx(expected, rel=1e-9)
    assert run.pulse_out.fwhm_fs == pytest.approx(expected, rel=1e-9)
    assert run.path.transmission == pytest.approx(1.0, rel=1e-14)
    assert run.path.gdd_fs2 == 0.0
    assert run.elements == ()
    assert run.causality.verdict == "causal"


def test_the_report_says_that_the_path_is_empty(run):
    assert "path is empty" in text_report(run)
