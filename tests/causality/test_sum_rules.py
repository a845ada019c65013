"""Sum rules of responses whose strength is known.

M. Altarelli, D. L. Dexter, H. M. Nussenzveig, D. Y. Smith, Phys. Rev. B 6, 4502 (1972), from memory: the
f-sum is the plasma frequency squared, the static sum chi(0).
"""

from __future__ import annotations

import numpy as np
import pytest

from pulseprop.causality.sum_rules import Feature, sum_rules
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.material.features import features_of, knots_of, relaxes
from pulseprop.material.lines import Carriers, LorentzLine, Relaxation, VoigtLine
from pulseprop.material.response import Sum, View


def rules_of(response):
    features = [Feature(centre, width) for centre, width in features_of(response)]
    features += [Feature(knot, 0.0, edge=True) for knot in knots_of(response)]
    found = sum_rules(
        lambda omega: response.series(omega, 1, View.COMPLETED)[0].astype(complex),
        features,
        relaxes=relaxes(response),
    )
    return {rule.name: rule for rule in found}


LINES = {
    "broad": LorentzLine(strength=20e30, centre=4e15, width=0.56e15),
    "narrow": LorentzLine(strength=1e22, centre=2.35e15, width=1e10),
    "voigt": VoigtLine(strength=1e22, centre=2.35e15, width=1e10, doppler_width=3e10),
    "gaussian": VoigtLine(strength=1e22, centre=2.35e15, width=0.0, doppler_width=3e10),
    "two": Sum(
        (
            LorentzLine(strength=2e30, centre=4e15, width=1e14),
            LorentzLine(strength=1e26, centre=1e14, width=1e11),
        )
    ),
}


@pytest.mark.parametrize("name", sorted(LINES))
def test_both_rules_hold_for_lines(name):
    rules = rules_of(LINES[name])
    assert rules["static"].ratio == pytest.approx(1, abs=1e-6)
    assert rules["f-sum"].ratio == pytest.approx(1, abs=1e-6)


def test_the_f_sum_names_the_plasma_frequency():
    """wp^2 = 20 (rad/fs)^2: 4.472 rad/fs."""
    assert "4.472 rad/fs" in rules_of(LINES["broad"])["f-sum"].remark


@pytest.mark.parametrize("name", ["fused silica", "argon", "sapphire"])
def test_the_static_rule_holds_for_completed_formulas(name):
    assert rules_of(catalogue_medium(name).response)["static"].ratio == pytest.approx(1, abs=1e-5)


@pytest.mark.parametrize(
    "response", [Relaxation(static=73.16, time=8.27e-12), Carriers(plasma_frequency=9e15, rate=1e14)]
)
def test_no_verdict_where_a_sum_is_not_finite(response):
    rules = rules_of(response)
    assert rules["static"].ratio is None
    assert "not finite" in rules["static"].remark


def test_half_the_absorption_is_half_the_ratio():
    """A response whose absorption is halved by hand fails both rules by that factor."""
    line = LINES["broad"]

    def halved(omega):
        chi = line.series(omega, 1)[0]
        return chi.real + 0.5j * chi.imag

    rules = sum_rules(halved, [Feature(4e15, 0.56e15)], relaxes=False)
    assert [rule.ratio for rule in rules] == pytest.approx([0.5, 0.5], abs=1e-6)


def test_nothing_that_absorbs_has_no_rules():
    assert sum_rules(lambda omega: np.zeros(omega.shape, complex), [], relaxes=False) == ()
