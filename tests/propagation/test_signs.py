"""Both signs of a chirp that a measured duration leaves open."""

from __future__ import annotations

from dataclasses import fields, replace

import numpy as np
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


TRACE = """
title = "a pulse and its trace"
[pulse]
shape = "gaussian"
centre = "800 nm"
duration = "22 fs"
autocorrelation = {{ file = "trace.csv", x = "delay", x_unit = "fs" }}
{0}
[[path]]
name = "silica"
kind = "slab"
medium = "fused silica"
thickness = "5 mm"
"""


def traced(folder, stated="", width=62.0):
    """A Gaussian trace of that FWHM in fs, off centre and on a background, beside a pulse of 22 fs."""
    delay = np.arange(-200.0, 260.0, 2.0)
    trace = 0.03 + 1.7 * np.exp(-4 * np.log(2) * ((delay - 37) / width) ** 2)
    rows = [f"{x},{y:.6f}" for x, y in zip(delay, trace, strict=True)]
    (folder / "trace.csv").write_text("delay_fs,signal\n" + "\n".join(rows))
    (folder / "trace.toml").write_text(TRACE.format(stated))
    return pp.send(folder / "trace.toml")


def test_a_trace_that_asks_for_a_chirp_is_answered_with_both_signs(tmp_path):
    """62 fs over sqrt(2) is 43.84 fs; 22 sqrt(1 + (4 ln2 G / 22^2)^2) = 43.84 gives G = 300.9 fs^2 (closed
    form). 5 mm of silica add 180.8: traces of 91.3 fs and 37.8 fs at the end, by the same formula.
    """
    found = traced(tmp_path)
    assert [case.gdd_in_fs2 for case in found.signs] == pytest.approx([300.9, -300.9], rel=1e-3)
    assert [case.autocorrelation_fwhm_fs for case in found.signs] == pytest.approx([91.3, 37.8], rel=0.01)
    assert "|GDD| of 301 fs^2" in found.headline
    assert any("it asks for |GDD| = 301 fs^2" in warning for warning in found.warnings)


@pytest.mark.parametrize(("stated", "width"), [('gdd = "300.9 fs^2"', 62.0), ("", 22.0 * 2**0.5)])
def test_a_trace_of_the_pulse_as_stated_asks_for_nothing(tmp_path, stated, width):
    found = traced(tmp_path, stated, width)
    assert found.signs == ()
    assert "autocorrelation" not in found.headline
    assert not any("autocorrelation" in warning for warning in found.warnings)
