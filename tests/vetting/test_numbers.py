"""What a printed table says in numbers: uncertainties, k from what was measured, rows twice, ceilings."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.vetting.absorption_rows import AbsorptionRows, absorption_rows
from pulseprop.vetting.numbers import ANCHOR, numbers_of
from pulseprop.vetting.reading import read_table
from pulseprop.vetting.request import Anchor, Request, Stated
from pulseprop.vetting.retold import only_rows
from pulseprop.vetting.uncertainty import column_uncertainty

NM = np.linspace(400.0, 800.0, 9)


def k_of(table, request=None):
    found = absorption_rows(table, table.columns[-1], request or Request())
    assert isinstance(found, AbsorptionRows), found
    return found


def test_printed_digits_are_half_a_unit_of_the_last_place(sent, printed):
    table = sent(NM, printed("n", np.linspace(1.47, 1.45, 9), 4))
    assert column_uncertainty(table, table.columns[0], Request()) == pytest.approx(np.full(9, 5e-5))


def test_an_uneven_axis_adds_its_own_rounding(sent, printed):
    nm = np.array([404.7, 435.8, 486.1, 546.1, 587.6, 656.3])  # spectral lines printed to 0.1 nm
    slope = -5e-5  # per nm
    table = sent(nm, printed("n", 1.5 + slope * nm, 6))
    error = column_uncertainty(table, table.columns[0], Request())
    assert error == pytest.approx(np.full(6, 5e-7 + 5e-5 * 0.05), rel=1e-3)


def test_zeros_at_the_end_of_a_printed_wavelength_are_digits(tmp_path):
    # as plain numbers these are whole nanometres, with a half unit a thousand times this one
    path = tmp_path / "lines.csv"
    path.write_text(
        "wavelength (nm),n\n400.000,1.480000\n450.000,1.477500\n"
        "600.000,1.470000\n700.000,1.465000\n850.000,1.457500\n"
    )
    (table,) = read_table(path)
    error = column_uncertainty(table, table.columns[0], Request())
    assert error == pytest.approx(np.full(5, 5e-7 + 5e-5 * 5e-4), rel=1e-3)
    kept = only_rows(table, np.array([0, 1, 2, 4]))
    assert column_uncertainty(kept, kept.columns[0], Request()) == pytest.approx(error[:4], rel=1e-3)


def test_a_stated_uncertainty_stands_as_stated(sent, printed):
    table = sent(NM, printed("n", np.full(9, 1.5), 5), printed("k", np.full(9, 0.2), 5))
    request = Request(uncertainty={"n": Stated(absolute=1e-4), "k": Stated(relative=0.02)})
    data = numbers_of(table, request).data
    assert data.index_error == pytest.approx(np.full(9, 1e-4))
    assert data.k_error == pytest.approx(np.full(9, 4e-3))


def test_no_statement_makes_a_number_better_than_its_print(sent, printed):
    table = sent(NM, printed("n", np.full(9, 1.5), 3))
    request = Request(uncertainty={"n": Stated(absolute=1e-5)})
    assert column_uncertainty(table, table.columns[0], request) == pytest.approx(np.full(9, 5.1e-4))


def test_internal_transmittance_to_three_decimals_gives_the_uncertainty_of_k(sent, printed):
    # a melt's two catalogue editions, 10 mm: 0.993 and 0.995 are k = 5.6e-8 and 4.0e-8 at 1 um, and three
    # decimals leave k open by 10 % (figures of a public thread on an open index data set; recomputed)
    table = sent([1000.0, 1000.5], printed("internal_transmittance", [0.993, 0.995], 3), thickness=10e-3)
    rows = k_of(table)
    assert rows.k == pytest.approx([5.59e-8, 3.99e-8], rel=2e-3)
    assert rows.error / rows.k == pytest.approx(
        [0.0005 / 0.993 / 0.007025, 0.0005 / 0.995 / 0.0050125], rel=1e-3
    )


def test_a_bare_plate_loses_its_faces_before_k(sent, printed):
    # lossless plate of index 1.5: 2n/(n^2+1) = 0.923077 (A. J. Fresnel, both faces, all echoes)
    table = sent(
        NM,
        printed("n", np.full(9, 1.5), 4),
        printed("transmittance", np.full(9, 0.923077), 6),
        thickness=1e-3,
    )
    rows = k_of(table)
    assert np.all(np.abs(rows.k) < rows.error)


def test_transmittance_without_index_or_thickness_says_why_it_gives_no_k(sent, printed):
    table = sent(NM, printed("transmittance", np.full(9, 0.9), 3), thickness=1e-3)
    assert "index" in numbers_of(table, Request()).reason
    table = sent(NM, printed("absorbance", np.full(9, 0.9), 3))
    assert "thickness" in numbers_of(table, Request()).reason


def test_absorbance_is_to_base_ten(sent, printed):
    # A = 1 over 1 mm is alpha = ln(10)/mm = 2302.585 /m, k = alpha lambda / (4 pi) = 1.8323e-4 at 1 um
    table = sent([1000.0, 1001.0], printed("absorbance", [1.0, 1.0], 3), thickness=1e-3)
    assert k_of(table).k[0] == pytest.approx(1.83234e-4, rel=1e-5)


def test_rows_at_a_stated_ceiling_are_lower_limits(sent, printed):
    values = [0.1, 0.5, 1.5, 2.9, 3.0, 3.0, 2.8, 1.0, 0.1]
    table = sent(NM, printed("absorbance", values, 1), thickness=1e-3)
    rows = k_of(table, Request(ceiling=3.0))
    assert list(np.flatnonzero(rows.least)) == [4, 5]


def test_a_plateau_at_the_top_is_taken_for_the_ceiling(sent, printed):
    values = [0.10, 0.50, 1.50, 2.90, 3.01, 3.01, 3.01, 1.00, 0.10]
    table = sent(NM, printed("absorbance", values, 2), thickness=1e-3)
    assert list(np.flatnonzero(k_of(table).least)) == [4, 5, 6]


def test_no_light_at_all_is_a_lower_limit(sent, printed):
    table = sent([500.0, 510.0], printed("internal_transmittance", [0.500, 0.000], 3), thickness=1e-3)
    rows = k_of(table)
    assert list(rows.least) == [False, True]
    assert rows.k[1] - rows.error[1] == pytest.approx(-np.log(0.0005) / 1e-3 * 510e-9 / (4 * np.pi), rel=1e-9)


def test_rows_come_in_order_of_frequency_with_their_places_in_the_table(sent, printed):
    table = sent([500.0, 700.0, 600.0, 400.0], printed("n", [1.52, 1.50, 1.51, 1.53], 2))
    numbers = numbers_of(table, Request())
    assert list(numbers.index_rows) == [1, 2, 0, 3]
    assert list(numbers.data.index) == [1.50, 1.51, 1.52, 1.53]


def test_two_rows_at_one_wavelength_count_by_how_far_they_are_apart(sent, printed):
    table = sent([500.0, 600.0, 600.0, 700.0], printed("n", [1.520, 1.510, 1.514, 1.500], 3))
    numbers = numbers_of(table, Request())
    assert len(numbers.data.omega) == 3
    assert numbers.repeat.factor == pytest.approx(4.0)  # 0.004 over twice 0.0005
    assert numbers.repeat.rows == (1, 2)


def test_anchors_are_rows_that_stand_in_no_line(sent, printed):
    anchor = Anchor(omega=3e15, index=1.4, error=1e-3)
    table = sent(NM, printed("alpha", np.full(9, 2.0), 1, "1/cm", 100.0))
    numbers = numbers_of(table, Request(anchors=(anchor,)))
    assert list(numbers.index_rows) == [ANCHOR]
    assert list(numbers.data.index) == [1.4]


def test_absorption_alone_says_nothing_against_causality(sent, printed):
    table = sent(NM, printed("alpha", np.full(9, 2.0), 1, "1/cm", 100.0))
    numbers = numbers_of(table, Request())
    assert numbers.data is None
    assert "without an index" in numbers.reason
