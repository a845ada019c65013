"""Share of a susceptibility's response that comes before its cause."""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.causality.residual import acausal_share
from pulseprop.material.lines import LorentzLine

LINE = LorentzLine(strength=20e30, centre=4e15, width=0.56e15)


def chi(omega):
    return LINE.series(omega, 1)[0]


def test_a_causal_line_has_almost_none():
    """What remains is the step of chi2 at the end of the axis, eight times above the data."""
    assert acausal_share(chi, 8e15) < 1e-6


@pytest.mark.parametrize("part", [lambda x: x.real + 0j, lambda x: 1j * x.imag], ids=["index", "absorption"])
def test_index_alone_and_absorption_alone_are_half_early(part):
    """An even or an odd response has equal energy on both sides of t = 0 (closed form)."""
    assert acausal_share(lambda omega: part(chi(omega)), 8e15) == pytest.approx(0.5, abs=1e-6)


def test_the_other_sign_convention_is_all_early():
    assert acausal_share(lambda omega: np.conj(chi(omega)), 8e15) > 1 - 1e-6


def test_what_answers_at_once_does_not_count():
    assert acausal_share(lambda omega: chi(omega) + 1.25, 8e15) == pytest.approx(
        acausal_share(chi, 8e15), rel=1e-6
    )
    assert acausal_share(lambda omega: np.full(omega.shape, 1.25 + 0j), 8e15) == 0.0
