"""Cautions: when they are given, their codes, and what they never say."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

import pulseprop as pp

SCENARIOS = Path(__file__).parents[2] / "scenarios"


def codes(run) -> set[str]:
    return {caution.code for caution in run.cautions}


def test_every_run_defers_to_the_laser_safety_officer():
    run = pp.send(SCENARIOS / "cryostat.toml")
    text = next(caution.text for caution in run.cautions if caution.code == "laser-radiation")
    for word in ("laser safety officer", "IEC 60825-1", "ANSI Z136.1", "local codes", "licensed practice"):
        assert word in text


def test_a_cold_element_of_a_warm_record():
    run = pp.send(SCENARIOS / "cryostat.toml")
    assert "temperature" in codes(run)
    assert not {"x-rays", "gas-displaces-oxygen"} & codes(run)


def test_fluence_is_set_against_damage_thresholds_of_iso_21254():
    run = pp.send(SCENARIOS / "cryostat.toml")
    caution = next(caution for caution in run.cautions if caution.code == "damage-threshold")
    assert "ISO 21254" in caution.text
    bare = pp.send(SCENARIOS / "green_filter.toml")
    assert bare.hazards.beam_radius_m is None
    assert "damage-threshold" not in codes(bare)


@pytest.mark.parametrize(("energy", "warned"), [("1 uJ", False), ("10 mJ", True)])
def test_x_rays_above_1e13_w_per_cm2(energy, warned):
    """12 fs, radius 0.1 mm: 2 E 0.94 / (12 fs pi w^2) = 5e11 W/cm^2 for 1 uJ, 5e15 for 10 mJ."""
    run = pp.send(SCENARIOS / "cryostat.toml", (f'pulse.energy="{energy}"', 'pulse.beam_radius="0.1 mm"'))
    assert ("x-rays" in codes(run)) is warned


def test_inert_gas_displaces_oxygen():
    assert "gas-displaces-oxygen" in codes(pp.send(SCENARIOS / "argon_metre.toml"))


def test_no_caution_says_safe_or_gives_a_class():
    for file in sorted(SCENARIOS.glob("*.toml")):
        for caution in pp.send(file).cautions:
            words = f"{caution.line} {caution.text}".lower()
            assert not re.search(r"\bsafe\b|class [1-4]|optical density of", words), (file.name, caution.code)
