"""Source lines of media: where the causal model of the diagnostics departs from the print, it is told."""

from __future__ import annotations

import numpy as np

from pulseprop.elements.path import Path
from pulseprop.elements.slab import Slab
from pulseprop.material.catalogue_media import catalogue_medium
from pulseprop.propagation.sources import media_used

OMEGA = 2 * np.pi * 299792458.0 / 800e-9


def used(name: str):
    slab = Slab(name=name, medium=catalogue_medium(name), thickness=1e-3)
    return media_used(Path((slab,)), OMEGA)[0]


def test_poles_move_by_at_most_1e_8_and_need_no_word():
    glass = used("fused silica")
    assert 0 < glass.completion_shift <= 1e-8
    assert not any("causality diagnostics" in note for note in glass.notes)


def test_a_polynomial_that_no_causal_matter_has_is_told():
    liquid = used("glycerol")
    assert liquid.completion_shift > 1e-6
    assert any("as printed" in note for note in liquid.notes)


def test_other_records_of_the_substance_stand_beside_it():
    """Fused silica at 800 nm: 35.86 fs^2/mm after Arosa and de la Fuente 2020 (published row)."""
    spread = dict(used("fused silica").spread)
    assert abs(spread["fused silica (Arosa 2020)"] - 35.86260592) < 1e-6
