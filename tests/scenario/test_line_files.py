"""Line lists in files give the same lines as inline tables. All lines here are invented."""

from __future__ import annotations

from pathlib import Path

import pytest

from pulseprop.errors import InputError
from pulseprop.scenario.line_files import lines_in, quantity_and_unit
from pulseprop.scenario.schema_lines import LinesFile, LineTable


def lines(directory: Path, text: str) -> list[LineTable]:
    path = directory / "lines.csv"
    path.write_text(text)
    return lines_in(path, LinesFile(file="lines.csv"))


@pytest.mark.parametrize(
    ("name", "quantity", "unit"),
    [
        ("centre_THz", "centre", "THz"),
        ("width_GHz", "width", "GHz"),
        ("half_width_per_cm", "half_width", "1/cm"),
        ("doppler_width_MHz", "doppler_width", "MHz"),
        ("peak_absorption_per_cm", "peak_absorption", "1/cm"),
        ("integrated_absorption_GHz_per_cm", "integrated_absorption", "GHz/cm"),
        ("integrated_absorption_per_cm2", "integrated_absorption", "1/cm^2"),
        ("number_density_per_cm3", "number_density", "1/cm^3"),
        ("plasma_frequency_rad_per_fs", "plasma_frequency", "rad/fs"),
        ("dephasing_time_ps", "dephasing_time", "ps"),
        ("oscillator_strength", "oscillator_strength", ""),
    ],
)
def test_column_names_are_a_quantity_and_its_unit(name: str, quantity: str, unit: str) -> None:
    assert quantity_and_unit(name) == (quantity, unit)


def test_a_file_gives_the_lines_that_inline_tables_give(tmp_path: Path) -> None:
    found = lines(
        tmp_path,
        "# invented\ncentre_THz,width_GHz,doppler_width_GHz,peak_absorption_per_cm\n"
        "0.557,3.1,0,0.8\n0.752,2.9,0.1,1.25\n",
    )
    inline = [
        {"centre": "0.557 THz", "width": "3.1 GHz", "doppler_width": "0 GHz", "peak_absorption": "0.8 cm^-1"},
        {
            "centre": "0.752 THz",
            "width": "2.9 GHz",
            "doppler_width": "0.1 GHz",
            "peak_absorption": "1.25 cm^-1",
        },
    ]
    for line, data in zip(found, inline, strict=True):
        expected = LineTable.model_validate(data)
        assert line.centre == expected.centre
        assert line.full_width == expected.full_width
        assert line.gaussian_width == expected.gaussian_width
        assert line.peak_absorption == pytest.approx(expected.peak_absorption, rel=1e-15)


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        ("0.5,3\n0.6,3\n", ["lines.csv", "no names", "centre_THz"]),
        ("centre_THz,widht_GHz\n0.5,3\n", ["no usable name (got 'widht_GHz')"]),
        ("centre_THz,width,peak_absorption_per_cm\n0.5,3,1\n", ["no usable name (got 'width')"]),
        ("centre_THz,width_GHz,width_MHz\n0.5,3,1\n", ["the same quantity (got 'width_MHz')"]),
        (
            "centre_THz,width_GHz,peak_absorption_per_cm\n0.5,3,1\n0.6,-3,1\n",
            ["lines.csv:3, column width", "negative"],
        ),
        (
            "centre_THz,width_GHz,peak_absorption_GHz\n0.5,3,1\n",
            ["lines.csv:2, column peak_absorption", "frequency"],
        ),
        ("centre_THz,width_per_s,peak_absorption_per_cm\n0.5,3,1\n", ["column width", "bare rate"]),
        ("centre_THz,width_GHz\n0.5,3\n", ["lines.csv:2", "one of peak_absorption", "missing"]),
        (
            "centre_THz,width_GHz,peak_absorption_per_cm\n0,3,1\n",
            ["lines.csv:2, column centre", "above zero"],
        ),
    ],
)
def test_a_bad_line_file_is_named_with_line_and_column(tmp_path: Path, text: str, parts: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        lines(tmp_path, text)
    for part in parts:
        assert part in str(caught.value)
