"""The split-step loop on a linear path against the exact transfer: 1e-12 of the peak, also in thick glass."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

import pulseprop as pp

SCENARIO = Path(__file__).parents[2] / "scenarios" / "cryostat.toml"


@pytest.mark.parametrize("window", ["3 mm", "30 mm"])
def test_split_steps_without_terms_give_the_exact_field(window):
    sets = (f"path.cryostat window.thickness={window}",)
    exact = pp.send(SCENARIO, (*sets, "propagation.method=exact")).fields
    stepped = pp.send(SCENARIO, (*sets, "propagation.method=split-step")).fields
    peak = np.abs(exact.envelope_out).max()
    assert np.abs(stepped.envelope_out - exact.envelope_out).max() <= 1e-12 * peak


def test_the_report_says_how_many_steps_were_taken():
    run = pp.send(SCENARIO, ("propagation.method=split-step",))
    assert run.solver.method == "symmetric split step"
    assert run.solver.steps > len(run.elements)
    assert run.solver.transforms > run.solver.steps


def test_a_linear_path_states_no_local_error():
    """What the scenario wishes is not reported as what was kept: the steps are of fixed length."""
    run = pp.send(SCENARIO, ("propagation.method=split-step", "propagation.local_error=1e-6"))
    assert run.solver.local_error is None
    assert any("local_error is not used" in warning for warning in run.warnings)
