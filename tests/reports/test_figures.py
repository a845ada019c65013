"""Figures for slides, and the numbers beside them."""

from __future__ import annotations

import csv
import struct
import xml.etree.ElementTree as tree
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.propagation.result import Run
from pulseprop.reports.curves import IndexCurve, pulse_curve, thin_pairs
from pulseprop.reports.draw_band import draw_budget, draw_media
from pulseprop.reports.draw_time import draw_pulse
from pulseprop.reports.figure_style import COLOURS
from pulseprop.reports.figures import drawings, write_figure, write_figures


@pytest.fixture(scope="module")
def written(run: Run, tmp_path_factory: pytest.TempPathFactory) -> dict[str, Path]:
    files = write_figures(drawings(run), tmp_path_factory.mktemp("slides") / "figures")
    return {path.name: path for path in files}


def columns_of(path: Path) -> dict[str, list[str]]:
    rows = list(csv.reader(path.read_text().splitlines()))
    return {name: [row[at] for row in rows[1:] if row[at]] for at, name in enumerate(rows[0])}


def test_every_figure_comes_as_picture_drawing_and_numbers(written: dict[str, Path]) -> None:
    names = {
        "pulse",
        "spectrum",
        "contrast",
        "spectrogram",
        "autocorrelation",
        "autocorrelation-measured",
        "budget",
    }
    assert set(written) == {f"{name}.{ending}" for name in names for ending in ("png", "svg", "csv")}


def test_pictures_are_sixteen_to_nine(written: dict[str, Path]) -> None:
    # Width and height stand in the header chunk: PNG specification (ISO/IEC 15948), 11.2.2.
    for name, path in written.items():
        if name.endswith(".png"):
            assert struct.unpack(">II", path.read_bytes()[16:24]) == (1920, 1080)


def test_drawings_are_well_formed(written: dict[str, Path]) -> None:
    for name, path in written.items():
        if name.endswith(".svg"):
            assert tree.fromstring(path.read_text()).tag.endswith("svg")


def test_numbers_beside_the_pulse_are_the_pulse(written: dict[str, Path]) -> None:
    columns = columns_of(written["pulse.csv"])
    # Gaussian of 12 fs and 5 nJ: 2 sqrt(ln2 / pi) E / FWHM.
    assert max(map(float, columns["power_in_W"])) == pytest.approx(391432.2, rel=1e-4)
    time, power = (np.array(columns[name], dtype=float) for name in ("time_out_fs", "power_out_W"))
    half = time[power >= power.max() / 2]
    assert half[-1] - half[0] == pytest.approx(59.005, rel=5e-3)


def test_budget_numbers(written: dict[str, Path]) -> None:
    columns = columns_of(written["budget.csv"])
    assert columns["element"] == ["start", "cryostat window", "objective"]
    assert columns["gdd_fs2"] == ["108.4567", "141.5433"]


def test_group_delay_is_the_slope_of_gdd(written: dict[str, Path]) -> None:
    columns = columns_of(written["spectrum.csv"])
    slope = np.polyfit(
        2 * np.pi * 1e-3 * np.array(columns["frequency_THz"], dtype=float),
        np.array(columns["group_delay_fs"], dtype=float),
        1,
    )[0]
    assert slope == pytest.approx(250.0, rel=1e-5)


def test_the_fringes_begin_at_eight(written: dict[str, Path]) -> None:
    # Eight to one, whatever the pulse: J.-C. M. Diels, J. J. Fontaine, I. C. McMichael, F. Simoni,
    # Appl. Opt. 24, 1270 (1985); from memory.
    fringes = np.array(columns_of(written["autocorrelation.csv"])["interferometric"], dtype=float)
    assert fringes.max() == pytest.approx(8.0, rel=1e-3)


def test_thinning_keeps_every_peak() -> None:
    signal = np.zeros(100_000)
    signal[12_345] = 1.0
    signal[54_321] = -1.0
    x, y = thin_pairs(np.arange(100_000.0), signal, 1000)
    assert x.size <= 1002
    assert set(x[y != 0]) == {12_345.0, 54_321.0}


def test_few_cycles_are_drawn_with_their_carrier(run: Run) -> None:
    fields = run.fields
    curve = pulse_curve(fields.grid_in, fields.envelope_in, 20e-15, 20e-15)
    # E(t) = sqrt(P) cos(omega t) about the peak: the transform-limited pulse of zero carrier phase.
    expected = np.sqrt(curve.power) * np.cos(2 * np.pi * 374.740572e12 * curve.time)
    np.testing.assert_allclose(curve.field, expected, atol=1e-6 * np.sqrt(391432.2))
    short = replace(run, fields=replace(fields, spectrum_out=fields.spectrum_in, grid_out=fields.grid_in))
    assert len(draw_pulse(short).figure.axes) == 2
    assert len(draw_pulse(run).figure.axes) == 1


def test_a_pulse_that_rings_gets_ten_decades(run: Run) -> None:
    rings = replace(run, pulse_out=replace(run.pulse_out, energy_after=0.0078))
    axes = draw_pulse(rings).figure.axes
    assert axes[1].get_yscale() == "log"


def test_no_figure_of_what_is_not_there(run: Run) -> None:
    bare = replace(run, elements=(), media=(), autocorrelation=None)
    assert "budget" not in {drawing.name for drawing in drawings(bare)}


def test_a_figure_needs_a_known_ending(run: Run, tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"\.png or \.svg"):
        write_figure(draw_pulse(run), tmp_path / "pulse.bmp")


def test_a_directory_that_cannot_be_made(tmp_path: Path) -> None:
    (tmp_path / "taken").write_text("")
    with pytest.raises(InputError, match=r"taken.*a file stands where a directory is wanted"):
        write_figures([], tmp_path / "taken")
    with pytest.raises(InputError, match=r"figures: .*no directory .*taken"):
        write_figures([], tmp_path / "taken" / "figures")


def test_colours_differ_for_every_eye() -> None:
    # Red-green deficiencies keep the blue-yellow direction: the two leading colours stand on opposite sides
    # of grey along it (common practice, no source).
    after, warm = ([int(COLOURS[name][at : at + 2], 16) for at in (1, 3, 5)] for name in ("after", "warm"))
    assert after[2] > max(after[:2])
    assert warm[2] < min(warm[:2])


@pytest.mark.parametrize("name", ["costs $5 and $6", "$\\frac{", "_hidden", "\x1b]0;title\x07", "窓 🪟"])
def test_any_name_can_stand_in_a_figure(run: Run, tmp_path: Path, name: str) -> None:
    elements = (replace(run.elements[0], name=name), run.elements[1])
    named = replace(run, scenario=name, elements=elements, media=(replace(run.media[0], name=name),))
    nm = np.linspace(700.0, 900.0, 5)
    curve = IndexCurve(name, nm, 1.45 + 0 * nm, 0 * nm, 36 + 0 * nm)
    for drawing in (draw_budget(named), draw_media([curve], name)):
        path = write_figure(drawing, tmp_path / "drawing.svg")
        assert tree.fromstring(path.read_text()).tag.endswith("svg")
        write_figure(drawing, tmp_path / "picture.png")
    assert draw_media([curve], name).figure.axes[0].get_legend().get_texts()
