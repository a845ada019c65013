"""Lenses, waveplates, wedge pairs, gas cells, shapers and repeats as a scenario states them."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest

import pulseprop as pp
from pulseprop.errors import InputError
from pulseprop.scenario.read import scenario_from

PULSE = {
    "shape": "gaussian",
    "centre": "800 nm",
    "duration": "30 fs",
    "energy": "1 uJ",
    "beam_radius": "2 mm",
}
SILICA = {"medium": "fused silica", "centre_thickness": "4 mm"}
PAIR = [{"medium": "N-BK7", "centre_thickness": "4 mm"}, {"medium": "SF10", "centre_thickness": "2 mm"}]
QUARTZ = {"medium": "quartz", "thickness": "1 mm"}
GAS = {"kind": "gas cell", "gas": "argon", "pressure": "1 bar", "length": "1 m"}
WEDGES = {"kind": "wedge pair", "medium": "fused silica"}
WINDOW = {"medium": "fused silica", "thickness": "1 mm"}
SHAPER = {"kind": "pulse shaper", "gdd": "-500 fs^2"}


def sent(*path: dict[str, Any], directory: Path = Path()) -> Any:
    return pp.send(scenario_from({"pulse": PULSE, "path": list(path)}, directory=directory))


@pytest.mark.parametrize(
    ("element", "parts"),
    [
        ({"kind": "lens", "glasses": []}, ["path.1.glasses", "1 or more"]),
        ({"kind": "lens", "glasses": [SILICA], "focal_length": "0 mm"}, ["no lens has this focal length"]),
        ({"kind": "lens", "glasses": [SILICA | {"thickness": "1 mm"}]}, ["path.1.glasses.1.thickness"]),
        ({"kind": "lens", "glasses": PAIR, "faces": "fresnel"}, ["cemented faces", "air_spaced"]),
        ({"kind": "lens", "glasses": [SILICA | {"medium": "BK7"}]}, ["path.1.glasses.1.medium", "N-BK7"]),
        ({"kind": "waveplate", "plates": [{"thickness": "1 mm"}]}, ["path.1.plates.1", "medium, ordinary"]),
        (
            {"kind": "waveplate", "plates": [{"ordinary": "quartz", "thickness": "1 mm"}]},
            ["path.1.plates.1.ordinary", "extraordinary beside it"],
        ),
        (
            {"kind": "waveplate", "plates": [QUARTZ | {"medium": "fused silica"}]},
            ["path.1.plates.1.medium", "an ordinary and an extraordinary axis"],
        ),
        ({"kind": "waveplate", "plates": [QUARTZ], "axis": "slow"}, ["path.1.axis", '"ordinary"']),
        (WEDGES, ["one of glass, insertion is missing"]),
        (WEDGES | {"insertion": "1 mm"}, ["insertion needs apex_angle"]),
        (WEDGES | {"glass": "1 mm", "base": "1 mm"}, ["base needs insertion"]),
        (WEDGES | {"glass": "1 mm", "angle": "95 deg"}, ["path.1.angle", "below 90 deg"]),
        (WEDGES | {"glass": "1 mm", "angle": "brewster", "faces": "fresnel"}, ["need the polarisation"]),
        (
            WEDGES | {"insertion": "-9 mm", "apex_angle": "8 deg", "base": "1 mm"},
            ["path.1", "would miss the wedges"],
        ),
        (GAS, ["needs its temperature"]),
        (GAS | {"temperature": "0 degC", "windows": [WINDOW]}, ["path.1.windows", "(got 1)", "two"]),
        (GAS | {"temperature": "0 degC", "gas": "argone"}, ["path.1.gas", "argon"]),
        (GAS | {"temperature": "0 degC", "gas": "SF10"}, ["path.1.gas", "not a gas"]),
        ({"kind": "repeat", "times": 2}, ["one of path, elements is missing"]),
        ({"kind": "repeat", "times": 0, "path": [SHAPER]}, ["path.1.times", "1 or more"]),
        ({"kind": "repeat", "times": 2, "path": [{"kind": "slab"}]}, ["path.1.path.1.medium"]),
        (
            {"kind": "repeat", "times": 2, "path": [{"kind": "slab", "medium": "x", "thickness": "1 mm"}]},
            ["path.1.path.1.medium", "no medium of this exact name"],
        ),
        (SHAPER | {"spot": 1.0}, ["spot needs pixels"]),
        (SHAPER | {"pixels": 640}, ["path.1.pixels", "need the range"]),
        ({"kind": "pulse shaper"}, ["no order is given", "or a table"]),
        (SHAPER | {"range": ["700 nm"]}, ["path.1.range", "two ends"]),
    ],
)
def test_what_cannot_be_used_is_refused_at_its_place(element: dict[str, Any], parts: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        sent(element)
    for part in parts:
        assert part in str(caught.value)


def test_names_are_unique_inside_a_repeat_too() -> None:
    window = {"kind": "slab", "name": "window", "medium": "fused silica", "thickness": "1 mm"}
    with pytest.raises(InputError, match="two elements have the same name"):
        sent(window, {"kind": "repeat", "times": 2, "path": [window]})


def test_what_has_no_name_is_called_by_kind_and_number() -> None:
    loss = {"kind": "loss", "transmittance": 0.9}
    run = sent({"kind": "repeat", "times": 2, "path": [loss, SHAPER]})
    assert run.elements[0].name == "repeat 1"
    assert [part.name for part in run.elements[0].parts] == ["loss 1.1", "pulse shaper 1.2"]


def test_a_part_for_each_glass_and_one_row_for_the_lens() -> None:
    """GDD at 800 nm of 4 mm N-BK7 and 2 mm SF10: the budget that users wrote down beforehand."""
    (row,) = sent({"kind": "lens", "name": "achromat", "glasses": PAIR}).elements
    assert [part.name for part in row.parts] == ["achromat: N-BK7", "achromat: SF10"]
    assert [round(part.gdd_fs2, 1) for part in row.parts] == [178.6, 318.9]
    assert [round(part.tod_fs3, 1) for part in row.parts] == [128.4, 202.7]
    assert [round(part.fod_fs4, 1) for part in row.parts] == [-42.4, 54.5]
    assert round(row.gdd_fs2, 1) == 497.5


def test_cemented_faces_are_two_and_air_spaced_ones_four() -> None:
    lens = {"kind": "lens", "glasses": PAIR, "reflectance": "0.5 %"}
    assert sent(lens).path.transmission == pytest.approx(0.995**2, rel=1e-12)
    assert sent(lens | {"air_spaced": True}).path.transmission == pytest.approx(0.995**4, rel=1e-12)


def test_a_lens_is_as_wide_as_its_beam() -> None:
    """12.7 fs at 5 mm; 2.03 fs at the 2 mm of the pulse."""
    lens = {"kind": "lens", "glasses": [SILICA], "focal_length": "100 mm"}
    (wide,), (narrow,) = (sent(lens | more).elements for more in ({"beam_radius": "5 mm"}, {}))
    assert wide.figures["arrival_difference_fs"] == pytest.approx(12.7, abs=0.05)
    assert narrow.figures["arrival_difference_fs"] == pytest.approx(2.035, abs=0.01)


@pytest.mark.parametrize(
    ("axis", "crossed", "gdd"),
    [
        ("ordinary", False, 42.01446657),
        ("extraordinary", False, 43.33719503),
        ("ordinary", True, 43.33719503),
        ("extraordinary", True, 42.01446657),
    ],
)
def test_axis_and_crossing_choose_the_index(axis: str, crossed: bool, gdd: float) -> None:
    """GVD of quartz, ordinary and extraordinary, G. Ghosh 1999."""
    plate = {"kind": "waveplate", "axis": axis, "plates": [QUARTZ | {"crossed": crossed}]}
    (row,) = sent(plate).elements
    assert row.gdd_fs2 == pytest.approx(gdd, rel=1e-9)
    assert abs(row.figures["walk_off_fs"]) == pytest.approx(31.6, abs=0.05)


def test_a_plate_of_two_media_by_their_names() -> None:
    named = {"ordinary": "quartz", "extraordinary": "quartz e", "thickness": "1 mm"}
    (row,) = sent({"kind": "waveplate", "plates": [named]}).elements
    assert row.figures["retardance_waves"] == pytest.approx(11.118, abs=1e-3)


def test_wedges_by_glass_and_by_insertion() -> None:
    """1 mm and two moves of 5 mm at 8 deg: 2.4054 mm."""
    moved = {"insertion": "5 mm", "base": "1 mm", "apex_angle": "8 deg"}
    (by_move,), (by_glass,) = (
        sent(WEDGES | setting).elements for setting in (moved, {"glass": "2.4054083 mm"})
    )
    assert by_move.gdd_fs2 == pytest.approx(by_glass.gdd_fs2, rel=1e-7)
    assert by_move.gdd_fs2 == pytest.approx(36.1619983 * 2.4054083, rel=1e-7)
    one = sent(WEDGES | moved | {"moved": 1}).elements[0]
    assert one.gdd_fs2 == pytest.approx(36.1619983 * 1.7027042, rel=1e-7)


def test_brewster_wedges_pass_p_light_whole() -> None:
    wedges = {"glass": "2 mm", "angle": "brewster", "polarisation": "p", "faces": "fresnel"}
    assert sent(WEDGES | wedges).path.transmission == pytest.approx(1, abs=1e-6)


def test_a_table_of_phase_and_transmission(tmp_path: Path) -> None:
    """A phase of -250 fs^2 (w - w0)^2, printed with the other sign, and half of the energy."""
    nm = np.linspace(700, 920, 221)
    detuning = 2 * np.pi * 299.792458 * (1 / nm - 1 / 800)
    rows = [f"{x:.4f}, {250 * w**2:.9g}, 50" for x, w in zip(nm, detuning, strict=True)]
    (tmp_path / "mask.csv").write_text("nm, rad, %\n" + "\n".join(rows))
    table = {"file": "mask.csv", "x": "wavelength", "x_unit": "nm", "y": "phase", "phase_sign": -1}
    more = {"transmission": 3, "transmission_unit": "%"}
    run = sent({"kind": "pulse shaper", "table": table | more}, directory=tmp_path)
    (row,) = run.elements
    assert row.gdd_fs2 == pytest.approx(-500, rel=1e-5)
    assert row.transmission == pytest.approx(0.5, rel=1e-4)
    assert run.path.broadening == pytest.approx(np.hypot(1, 4 * np.log(2) * 500 / 900), rel=1e-3)
    assert "-500 fs^2 at 800 nm" in row.notes[0]


def test_a_table_does_not_say_its_y_twice(tmp_path: Path) -> None:
    table = {"file": "mask.csv", "x_unit": "nm", "y": "phase", "phase": 3}
    with pytest.raises(InputError, match="stands in the column of y already"):
        sent({"kind": "pulse shaper", "table": table}, directory=tmp_path)


def test_a_shaper_with_pixels_undoes_what_fits_into_its_window() -> None:
    """5 mm of fused silica make 181 fs^2: against 3.9 ps of window the pixels do not show."""
    glass = {"kind": "slab", "medium": "fused silica", "thickness": "5 mm"}
    mask = {"gdd": "-180.81 fs^2", "tod": "-137.49 fs^3", "pixels": 640, "range": ["650 nm", "1000 nm"]}
    run = sent(glass, SHAPER | mask)
    assert run.pulse_out.fwhm_fs == pytest.approx(30.0, abs=0.05)
    assert run.path.transmission == pytest.approx(1, abs=2e-3)
    assert run.causality.left_out == ("pulse shaper 2",)
    assert run.elements[1].figures["time_window_fs"] == pytest.approx(3903.5, rel=1e-3)
