"""Lines too narrow for the rows, and rows too wide for a feature."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.causality.coarse_features import coarse_features
from pulseprop.causality.feasibility import feasibility
from tests.benchmarks.unresolved import KINDS, data_of, sheet
from tests.causality.passive_examples import MICROMETRES, absorber, line, omega_of, rows, silica

OMEGA = np.linspace(2e15, 4e15, 60)
SPACING = OMEGA[1] - OMEGA[0]


@pytest.mark.parametrize(("share", "width"), [(0.5, 0.3), (0.35, 0.1), (0.6, 1.0)])
def test_a_line_between_rows_leaves_the_question_open(share, width):
    """True data, too coarse: the factor falls to 1 or by 4 and more, and the line is found in its gap."""
    centre = OMEGA[25] + share * SPACING
    index = 1 + absorber(OMEGA, width * SPACING, centre, 3e25).real
    found = feasibility(rows(OMEGA, np.round(index, 5), 5e-6))
    assert found.certified > 4
    unresolved = found.unresolved
    assert unresolved.windows == 1
    assert unresolved.factor <= max(1, found.factor / 4)
    assert abs(unresolved.omega - centre) < SPACING
    assert unresolved.spacing == pytest.approx(SPACING / 4)


def test_lines_far_apart_are_explained_by_a_window_each():
    index = 1.4 + 0.01 * (OMEGA / OMEGA[-1]) ** 2
    for at in (14, 44):
        index = index + 1e-3 * line(OMEGA, OMEGA[at] + SPACING / 2, 0.2 * SPACING, 0.0).real
    found = feasibility(rows(OMEGA, np.round(index, 6), 5e-7))
    assert found.certified > 4
    assert found.unresolved.windows == 2


@pytest.mark.parametrize("kind", KINDS)
def test_true_tables_sampled_too_coarsely_are_never_contradictory(kind):
    """Factor at most 1, or lines between rows explain it, or a feature of k with fewer than five rows."""
    for seed in range(100, 108):
        found = feasibility(data_of(sheet(kind, seed, most_rows=40)))
        assert found.certified <= 1 or found.unresolved is not None or found.coarse


@pytest.mark.parametrize(("row", "sign"), [(15, 1), (30, -1), (45, 1)])
def test_one_displaced_row_asks_for_lines_in_more_places_than_one(row, sign):
    index = np.round(silica(), 5)
    index[row] += sign * 1e-4
    found = feasibility(rows(omega_of(MICROMETRES), index, 5e-6))
    assert found.certified > 5
    assert found.unresolved is None or found.unresolved.windows > 1


def test_a_line_sampled_by_three_rows_is_told_as_coarse():
    """A Lorentz line as wide as 3 spacings has 3 rows over it, one of 8 has 8."""
    for rows_over in (3.0, 8.0):
        k = absorber(OMEGA, rows_over * SPACING, OMEGA[30] + 0.2 * SPACING).imag
        found = coarse_features(OMEGA, k, np.full(60, 1e-6))
        assert len(found) == (rows_over < 5)
    narrow = coarse_features(OMEGA, absorber(OMEGA, 3 * SPACING, OMEGA[30]).imag, np.full(60, 1e-6))[0]
    assert narrow.omega == OMEGA[30]
    assert narrow.rows == pytest.approx(3.0, rel=0.15)


@pytest.mark.parametrize("end", [0, 59])
def test_a_line_cut_off_by_the_end_is_coarse_where_one_row_alone_sees_it(end):
    for rows_over in (0.5, 8.0):
        k = absorber(OMEGA, rows_over * SPACING, OMEGA[end]).imag
        found = coarse_features(OMEGA, k, np.full(60, 1e-6))
        assert [feature.omega for feature in found] == [OMEGA[end]] * (rows_over < 5)


def test_noise_is_no_feature():
    k = 0.1 + 1e-3 * np.random.default_rng(1).uniform(-1, 1, 60)
    assert coarse_features(OMEGA, k, np.full(60, 1e-3)) == ()


def test_a_rounded_flat_absorption_has_no_feature():
    """k of half a unit and less turns up as single units of the last digit."""
    k = np.round(5e-4 + 1e-5 * np.sin(np.arange(60)), 3)
    assert len(np.unique(k)) == 2
    assert coarse_features(OMEGA, k, np.full(60, 5e-4)) == ()
