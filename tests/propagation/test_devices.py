"""Devices in whole runs: bands, edges, warnings, stray light, media of coatings."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest

from pulseprop.errors import InputError, RangeError
from pulseprop.propagation.result import Run
from pulseprop.propagation.send import run
from pulseprop.scenario.build import build
from pulseprop.scenario.read import scenario_from

C = 299792458.0
GRATINGS = {"kind": "grating pair", "grooves": "1200 /mm", "incidence": "20 deg", "separation": "10 mm"}


def sent(*path: dict[str, Any], duration: str = "30 fs", directory: Path = Path(), **pulse: Any) -> Run:
    document = {
        "pulse": {"shape": "gaussian", "centre": "800 nm", "duration": duration, "energy": "1 uJ", **pulse},
        "path": list(path),
    }
    return run(build(scenario_from(document, directory=directory)), "0", "0")


def test_a_pulse_that_gratings_do_not_diffract_is_refused_with_what_would_do():
    """833.33 nm (1 + sin 20 deg) = 1118.35 nm; the stated incidence lets the same pulse through."""
    with pytest.raises(RangeError) as caught:
        sent(GRATINGS, duration="8 fs")
    message = str(caught.value)
    assert "lies above 1118.35 nm" in message
    assert "grating pair 1" in message
    angle = message.split("an incidence above ")[1].split(" deg")[0]
    better = {**GRATINGS, "incidence": f"{float(angle) + 1} deg", "separation": "10 um"}
    assert sent(better, duration="8 fs").path.transmission == pytest.approx(1, abs=1e-6)


def test_a_mirror_is_not_used_beyond_its_table(tmp_path):
    rows = "\n".join(f"{nm} -40" for nm in range(650, 1001, 10))
    (tmp_path / "mirror.txt").write_text(rows, encoding="utf-8")
    mirror = {
        "kind": "chirped mirror",
        "table": {"file": "mirror.txt", "x_unit": "nm", "y": "gdd"},
        "bounces": 5,
    }
    assert sent(mirror, directory=tmp_path).path.gdd_fs2 == pytest.approx(-200, rel=1e-9)
    with pytest.raises(RangeError, match=r"outside 650 nm to 1000 nm.*none is extended beyond its rows"):
        sent(mirror, duration="8 fs", directory=tmp_path)


def test_glass_and_mirrors_that_undo_it_leave_the_pulse_as_it_was():
    """36.162 fs^2/mm and 27.497 fs^3/mm of silica at 800 nm (Malitson 1965), 20 mm, in 20 bounces."""
    glass = {"kind": "slab", "medium": "fused silica", "thickness": "20 mm"}
    mirror = {
        "kind": "chirped mirror",
        "gdd": "-36.1619983 fs^2",
        "tod": "-27.4972617 fs^3",
        "fod": "11.434620 fs^4",
        "bounces": 20,
    }
    assert sent(glass).pulse_out.fwhm_fs > 60
    assert sent(glass, mirror).pulse_out.fwhm_fs == pytest.approx(30, abs=0.01)


def test_a_stretcher_and_its_compressor_leave_nothing():
    stretcher = {**GRATINGS, "kind": "stretcher"}
    result = sent(stretcher, {"kind": "loss", "transmittance": 0.5}, GRATINGS)
    assert result.elements[0].fwhm_after_fs > 1000
    assert result.pulse_out.fwhm_fs == pytest.approx(30, rel=1e-7)
    assert result.path.transmission == pytest.approx(0.5, rel=1e-9)


def test_clipping_is_energy_lost_and_said():
    narrow = {**GRATINGS, "width": "4 mm"}
    result = sent(narrow, duration="15 fs", beam_radius="0.5 mm")
    lost = 1 - result.path.transmission
    assert 0.005 < lost < 0.5
    assert any(f"{100 * lost:.2g} % of the energy misses the second grating" in w for w in result.warnings)
    assert sent({**GRATINGS, "width": "200 mm"}, beam_radius="0.5 mm").path.transmission == pytest.approx(
        1, abs=1e-9
    )


def test_prisms_near_the_tip_lose_what_misses_them():
    prisms = {"kind": "prism pair", "medium": "SF10", "apex_separation": "300 mm", "insertion": "1 mm"}
    result = sent(prisms, duration="20 fs", beam_radius="1 mm")
    assert result.path.transmission < 0.9
    assert any("tip cuts into the beam" in warning for warning in result.warnings)
    assert any("misses the tips of the prisms" in warning for warning in result.warnings)
    assert sent({**prisms, "insertion": "12 mm"}, beam_radius="1 mm").path.transmission > 0.9999


def test_stray_light_and_media_of_devices_are_listed():
    coating = {
        "kind": "coating",
        "films": [{"medium": "sapphire", "thickness": "113 nm"}],
        "substrate": "N-BK7",
        "side": "transmission",
    }
    result = sent(GRATINGS, coating, {"kind": "prism pair", "medium": "SF10", "apex_separation": "10 mm"})
    stray = " | ".join(result.hazards.stray_beams)
    assert "zero order of each grating leaves at 20 deg" in stray
    assert "is reflected or absorbed each time" in stray
    assert "of s-polarised light" in stray
    assert {medium.name for medium in result.media} == {"sapphire", "N-BK7", "SF10"}


def test_a_coating_refuses_a_pulse_outside_its_media():
    """N-BK7 ends at 2.5 um."""
    coating = {"kind": "coating", "films": [], "substrate": "N-BK7"}
    with pytest.raises(RangeError, match="medium N-BK7"):
        sent(coating, centre="2.6 um", duration="60 fs")


def test_settings_that_do_not_fit_name_their_element():
    with pytest.raises(InputError, match=r"path\.1"):
        sent({**GRATINGS, "grooves": "2000 /mm"})


def test_figures_for_the_bench():
    """theta_d = asin(0.96 - sin 20 deg) = 38.1737 deg; Littrow asin(0.48) = 28.6854 deg."""
    figures = sent(GRATINGS).elements[0].figures
    assert figures["diffraction_angle_deg"] == pytest.approx(
        np.degrees(np.arcsin(0.96 - np.sin(np.radians(20)))), rel=1e-12
    )
    assert figures["littrow_angle_deg"] == pytest.approx(28.6854, abs=1e-4)
    assert figures["distance_along_beam_mm"] == pytest.approx(
        10 / np.cos(np.arcsin(0.96 - np.sin(np.radians(20)))), rel=1e-12
    )
    prisms = {"kind": "prism pair", "medium": "fused silica", "apex_separation": "1 m", "insertion": "5 mm"}
    figures = sent(prisms).elements[0].figures
    # Brewster's angle and the apex of group D of the published checks; 2 x 5 mm x 2 tan(apex/2) of glass.
    assert figures["incidence_deg"] == pytest.approx(55.46887825, abs=1e-7)
    assert figures["glass_mm_a_pass"] == pytest.approx(20 * np.tan(np.radians(69.0622435 / 2)), rel=1e-8)
