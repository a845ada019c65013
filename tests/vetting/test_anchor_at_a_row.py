"""An anchor at the wavelength of a row: the better known of the two stands, and a quarrel is told."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.constants import TWO_PI_C
from pulseprop.vetting.numbers import numbers_of
from pulseprop.vetting.request import Anchor, Request, Stated

NM = np.arange(500.0, 1001.0, 50.0)
ERROR = 1e-4
ROW = 6  # 800 nm


def numbers(printed, sent, index: float, error: float):
    table = sent(NM, printed("n", 1.5 + 10 / NM, 5))
    nearly = TWO_PI_C / 800e-9 * (1 + 2e-16)
    anchor = Anchor(omega=nearly, index=index, error=error)
    return numbers_of(table, Request(uncertainty={"n": Stated(absolute=ERROR)}, anchors=(anchor,)))


def value_at_800(found) -> tuple[float, float]:
    place = int(np.argmin(np.abs(found.data.omega - TWO_PI_C / 800e-9)))
    return float(found.data.index[place]), float(found.data.index_error[place])


def test_a_better_anchor_stands_for_the_row(printed, sent) -> None:
    found = numbers(printed, sent, 1.51253, 1e-6)
    assert value_at_800(found) == (1.51253, 1e-6)
    assert len(found.data.omega) == len(NM)
    assert found.repeat is None


def test_a_worse_anchor_changes_nothing(printed, sent) -> None:
    found = numbers(printed, sent, 1.513, 1e-2)
    assert value_at_800(found)[0] == pytest.approx(1.5125, abs=1e-12)
    assert len(found.data.omega) == len(NM)
    assert found.repeat is None


def test_one_that_disagrees_is_told(printed, sent) -> None:
    found = numbers(printed, sent, 1.52, 1e-6)
    assert found.repeat is not None
    assert set(found.repeat.rows) == {ROW, -1}
    assert found.repeat.factor == pytest.approx(0.0075 / (ERROR + 5e-6 + 1e-6), rel=0.1)
