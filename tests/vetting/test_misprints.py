"""Slips in one printed number."""

from __future__ import annotations

import pytest

from pulseprop.vetting.misprints import misprint


@pytest.mark.parametrize(
    ("printed", "fit", "meant", "words"),
    [
        ("1.4353", (1.45325, 1.45345), "1.4533", "exchanged"),
        ("1.4633", (1.45325, 1.45345), "1.4533", "digit is wrong"),
        ("14.533", (1.45325, 1.45345), "1.4533", "point"),
        ("182.90", (1.82, 1.84), "1.8290", "point"),  # neon of Bideau-Mehu 1981, as misprinted
        ("50.578", (59.5, 59.6), "59.578", "digit is wrong"),  # xenon of the same paper
        ("1,4353", (1.45325, 1.45345), "1,4533", "exchanged"),
    ],
)
def test_a_slip_is_named_with_the_number_that_was_meant(printed, fit, meant, words):
    found = misprint(printed, fit)
    assert found is not None
    assert found.reads == meant
    assert words in found.words


def test_no_slip_explains_a_number_that_is_off_in_many_digits():
    assert misprint("1.4391", (1.45335, 1.45338)) is None
