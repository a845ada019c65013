"""Figures for slides, and the numbers beside them."""

from __future__ import annotations

import csv
import struct
import xml.etree.ElementTree as tree
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from pulseprop import api
from pulseprop.errors import InputError
from pulseprop.material.lines import LorentzLine
from pulseprop.material.medium import Medium, Resonance
from pulseprop.propagation.result import Run
from pulseprop.reports.curves import field_facts, pulse_curve, thin_pairs, volts_per_metre
from pulseprop.reports.draw_band import draw_budget
from pulseprop.reports.draw_media import draw_media, draw_susceptibility
from pulseprop.reports.draw_time import draw_pulse
from pulseprop.reports.figure_style import COLOURS
from pulseprop.reports.figures import drawings, write_figure, write_figures
from pulseprop.reports.media_curves import IndexCurve, chi_curves, index_curves, strongest_line


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
    # 12 fs are four and a half cycles: some of the field is shown although what leaves has hundreds.
    reach = draw_pulse(run).figure.axes[1].get_xlim()
    assert 40 < (reach[1] - reach[0]) * 0.374740572 <= 45
    long = replace(run, pulse_in=replace(run.pulse_in, fwhm_fs=50.0))
    assert len(draw_pulse(long).figure.axes) == 1
    assert len(draw_pulse(replace(long, fields=replace(fields, form="field"))).figure.axes) == 2


def test_a_pulse_that_rings_gets_ten_decades(run: Run) -> None:
    rings = replace(run, pulse_out=replace(run.pulse_out, energy_after=0.0078))
    axes = draw_pulse(rings).figure.axes
    assert [panel.get_yscale() for panel in axes] == ["linear", "linear", "log"]


def test_the_field_of_the_main_cycle(run: Run) -> None:
    fields = run.fields
    before = field_facts(fields.grid_in, fields.envelope_in, 374.740572e12)
    assert before.arrival == pytest.approx(0.0, abs=2e-17)
    # A cosine under a Gaussian of 12 fs: the crest is the peak, the troughs half a period off are
    # exp(-2 ln2 (T / 2 / FWHM)^2) as deep.
    trough = np.exp(-2 * np.log(2) * (0.5 / 0.374740572 / 12.0) ** 2)
    assert before.peak_to_peak == pytest.approx(np.sqrt(391432.2) * (1 + trough), rel=1e-3)


def test_volts_per_metre() -> None:
    # 1e13 W/cm^2 is 8.68e9 V/m: E = 27.4 V/cm times the root of I in W/cm^2 (common practice, no source).
    radius, intensity = 1e-3, 1e17
    assert volts_per_metre(np.sqrt(intensity * np.pi * radius**2 / 2), radius) == pytest.approx(
        8.68e9, rel=1e-3
    )


def test_chi_of_glass_and_of_a_line(run: Run) -> None:
    # fused silica at 800 nm: n = 1.45332 (I. H. Malitson 1965), so chi = n^2 - 1 = 1.11214.
    glass, line = api.medium("fused silica"), resonance()
    curves = chi_curves([glass, line], 750.0, 850.0)
    place = 299792.458 / 800.0
    assert np.interp(place, curves[0].frequency, curves[0].chi.real) == pytest.approx(1.11214, abs=2e-5)
    assert np.all(curves[0].chi.imag == 0)
    # Lorentz line: Im chi at the centre is twice the largest Re chi, half a width below it (closed form).
    peak = curves[1].chi.imag.max()
    assert curves[1].chi.real.max() == pytest.approx(peak / 2, rel=0.02)
    near = strongest_line([glass, line], 750.0, 850.0)
    assert near is not None
    assert near.frequency[np.argmax(near.chi.imag)] == pytest.approx(place, rel=1e-6)
    assert strongest_line([glass], 750.0, 850.0) is None
    assert len(draw_susceptibility(run, curves, near).figure.axes) == 4
    assert len(draw_susceptibility(run, curves[:1], None).figure.axes) == 1


def resonance() -> Medium:
    centre = 2 * np.pi * 299792458.0 / 800e-9
    response = LorentzLine(centre=centre, width=1e-4 * centre, strength=1e-9 * centre**2)
    return Medium(name="line", response=response, resonances=(Resonance(centre, 1e-4 * centre, 1e-11),))


def test_gvd_of_a_curve_is_that_of_the_orders() -> None:
    # 36.16 fs^2/mm at 800 nm: Malitson's formula, differentiated.
    (curve,) = index_curves([api.medium("fused silica")], 700.0, 900.0)
    assert np.interp(800.0, curve.wavelength_nm, curve.gvd) == pytest.approx(36.16, abs=0.01)
    assert np.interp(800.0, curve.wavelength_nm, curve.excess) == pytest.approx(0.45332, abs=1e-5)


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
    curve = IndexCurve(name, nm, 0.45 + 0 * nm, 0 * nm, 36 + 0 * nm)
    for drawing in (draw_budget(named), draw_media([curve], name)):
        path = write_figure(drawing, tmp_path / "drawing.svg")
        assert tree.fromstring(path.read_text()).tag.endswith("svg")
        write_figure(drawing, tmp_path / "picture.png")
    assert draw_media([curve], name).figure.axes[0].get_legend().get_texts()
