"""Both signs of a chirp that a measured duration leaves open."""

from __future__ import annotations

from dataclasses import fields, replace

import pytest

import pulseprop as pp
from pulseprop.elements.path import Path
from pulseprop.elements.slab import Slab
from pulseprop.propagation.send import run
from pulseprop.scenario.build import build

SCENARIO = """
title = "a cell with a narrow line"
note = "Invented."
[pulse]
shape = "gaussian"
centre = "800 nm"
duration = "100 fs"
measured_duration = "150 fs"
[[path]]
name = "cell"
kind = "slab"
medium = "vapour"
thickness = "10 mm"
[medium.vapour]
lines = [{ centre = "800 nm", width = "20 GHz", peak_absorption = "500 1/m" }]
"""


class Unsuspecting(Slab):
    """A slab that does not say how long it rings, so that the first window is too short."""

    def ringing(self, low: float, high: float) -> float:
        return 0.0


def test_both_signs_are_watched_as_the_run_is(tmp_path):
    """The case of positive sign is the run itself, in a window that had to grow."""
    (tmp_path / "cell.toml").write_text(SCENARIO)
    experiment = build(pp.read(tmp_path / "cell.toml"))
    slab = experiment.path.elements[0]
    cell = Unsuspecting(**{field.name: getattr(slab, field.name) for field in fields(Slab)})
    found = run(replace(experiment, path=Path((cell,))), "test", "")
    assert found.solver.enlargements > 0
    assert found.signs[0].peak_ratio == pytest.approx(found.pulse_out.peak_ratio, rel=1e-12)
    assert found.signs[0].fwhm_fs == pytest.approx(found.pulse_out.fwhm_fs, rel=1e-12)
