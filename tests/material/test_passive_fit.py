"""The linear programmes behind passive models: what their limits do."""

from __future__ import annotations

from types import SimpleNamespace

import numpy as np
import pytest

from pulseprop.errors import NumericalLimit
from pulseprop.material.passive_fit import passive_fit


def fit():
    matrix = np.array([[1.0, 0.5], [0.2, 1.0], [1.0, 1.0]])
    return passive_fit(
        matrix, matrix @ [0.3, 0.7], np.full(3, 0.01), np.ones(2), np.zeros((0, 2)), within=1e-6
    )


def test_numbers_that_absorption_explains_are_found_again():
    found = fit()
    assert found.factor == pytest.approx(0.0, abs=1e-6)
    assert found.weights == pytest.approx([0.3, 0.7], abs=1e-6)


def test_a_solver_that_stops_at_its_limit_is_not_believed(monkeypatch):
    """Status 1 is a limit reached; the solver may hand out the point at which it stood."""
    stopped = SimpleNamespace(status=1, x=np.ones(3), message="time limit reached")
    monkeypatch.setattr("scipy.optimize.linprog", lambda *given, **more: stopped)
    with pytest.raises(NumericalLimit, match="linear programme") as caught:
        fit()
    assert "time limit reached" in str(caught.value)
    assert "fewer rows" in str(caught.value)
