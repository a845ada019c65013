"""What rows must be to be held against causality."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.causality.passive_class import Masses, PassiveClass
from pulseprop.causality.passive_data import PassiveData
from pulseprop.errors import InputError

OMEGA = np.linspace(1e15, 2e15, 6)


def data(**changed):
    whole = {"omega": OMEGA, "index": np.full(6, 1.5), "index_error": np.full(6, 0.1)}
    return PassiveData(**{**whole, **changed})


@pytest.mark.parametrize(
    ("changed", "text"),
    [
        ({"omega": OMEGA[::-1]}, "row 2.*frequency cannot be used"),
        ({"index": np.full(5, 1.5)}, "differ in length"),
        ({"index": np.array([1.5, 1.5, np.nan, 1.5, 1.5, 1.5])}, "row 3"),
        ({"index_error": np.zeros(6)}, "uncertainty of n cannot be used.*above 0"),
        ({"k": np.zeros(6)}, "frequencies, values and uncertainties"),
        ({"k_omega": OMEGA[:4], "k": np.zeros(4), "k_error": np.ones(4)}, "too few rows of k"),
        ({"least": np.ones(6, dtype=bool)}, "lower limits need"),
        ({"omega": OMEGA[:0], "index": OMEGA[:0], "index_error": OMEGA[:0]}, "no rows"),
    ],
)
def test_what_cannot_be_used_is_told(changed, text):
    with pytest.raises(InputError, match=text):
        data(**changed)


def test_columns_of_masses_are_what_the_integral_says():
    """(1/pi) m / (p - s) with m = pi S, above and below; the constant is 1 in every row of n."""
    cls = PassiveClass(data())
    s = (OMEGA / OMEGA[-1]) ** 2
    columns = cls.matrix(Masses(np.array([0.1]), np.array([0.3, np.inf])))
    assert columns[:, 0] == pytest.approx(0.1 / (s[0] - 0.1 - s))
    assert columns[:, 1] == pytest.approx(0.3 / (s[-1] + 0.3 - s))
    assert columns[:, 2] == pytest.approx(np.ones(6))
    assert cls.strengths(Masses(np.array([0.1]), np.array([0.3]))) == pytest.approx(
        np.pi * np.array([0.1, 0.3])
    )
