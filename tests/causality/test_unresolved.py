"""Lines too narrow for the rows, and rows too wide for a feature."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.causality.coarse_features import coarse_features
from pulseprop.causality.feasibility import feasibility
from tests.causality.passive_examples import MICROMETRES, absorber, omega_of, rows, silica

OMEGA = np.linspace(2e15, 4e15, 60)
SPACING = OMEGA[1] - OMEGA[0]


@pytest.mark.parametrize(("share", "width"), [(0.5, 0.3), (0.35, 0.1), (0.6, 1.0)])
def test_a_line_between_rows_leaves_the_question_open(share, width):
    """True data, too coarse: the factor falls to 1 or by 4 and more, and the line is found in its gap."""
    centre = OMEGA[25] + share * SPACING
    index = 1 + absorber(OMEGA, width * SPACING, centre, 3e25).real
    found = feasibility(rows(OMEGA, np.round(index, 5), 5e-6))
    assert found.certified > 4
    line = found.unresolved
    assert line.factor <= max(1, found.factor / 4)
    assert abs(line.omega - centre) < SPACING
    assert line.spacing == pytest.approx(SPACING / 4)


@pytest.mark.parametrize(("row", "sign"), [(15, 1), (30, -1), (45, 1)])
def test_one_displaced_row_is_no_unresolved_line(row, sign):
    """It falls by 2.7 or so (prototype)."""
    index = np.round(silica(), 5)
    index[row] += sign * 1e-4
    found = feasibility(rows(omega_of(MICROMETRES), index, 5e-6))
    assert found.certified > 5
    assert found.unresolved is None


def test_a_line_sampled_by_three_rows_is_told_as_coarse():
    """A Lorentz line as wide as 3 spacings has 3 rows over it, one of 8 has 8."""
    for rows_over in (3.0, 8.0):
        k = absorber(OMEGA, rows_over * SPACING, OMEGA[30] + 0.2 * SPACING).imag
        found = coarse_features(OMEGA, k, np.full(60, 1e-6))
        assert len(found) == (rows_over < 5)
    narrow = coarse_features(OMEGA, absorber(OMEGA, 3 * SPACING, OMEGA[30]).imag, np.full(60, 1e-6))[0]
    assert narrow.omega == OMEGA[30]
    assert narrow.rows == pytest.approx(3.0, rel=0.15)


def test_noise_is_no_feature():
    k = 0.1 + 1e-3 * np.random.default_rng(1).uniform(-1, 1, 60)
    assert coarse_features(OMEGA, k, np.full(60, 1e-3)) == ()
