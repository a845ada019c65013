"""Tables as vendors send them, read to SI, with everything inferred told.

Fused silica: the formula of I. H. Malitson (1965), rounded. All other numbers are invented.
"""

from __future__ import annotations

import io
import math
from pathlib import Path

import numpy as np
import openpyxl
import pytest
from hypothesis import given
from hypothesis import strategies as st

from pulseprop.errors import InputError
from pulseprop.vetting.read_options import ReadOptions
from pulseprop.vetting.reading import read_table, tables_in
from pulseprop.vetting.table import SentTable

LIGHT = 299792458.0


def sent(tmp_path: Path, text: str | bytes, **options: str) -> tuple[SentTable, ...]:
    path = tmp_path / "sent.csv"
    path.write_bytes(text if isinstance(text, bytes) else text.encode())
    return read_table(path, ReadOptions(**options))  # type: ignore[arg-type]


def one(tmp_path: Path, text: str | bytes, **options: str) -> SentTable:
    (table,) = sent(tmp_path, text, **options)
    return table


def values(table: SentTable, quantity: str) -> list[float]:
    column = table.column(quantity)  # type: ignore[arg-type]
    assert column is not None
    return column.values.tolist()


def told(table: SentTable, about: str) -> str:
    """What was taken, and why, about a matter."""
    (note,) = [note for note in table.inferred if note.about == about]
    assert note.overrule
    return f"{note.taken}: {note.why}"


@pytest.mark.parametrize("separator", [",", ";", "\t", "   "])
@pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16", "latin-1"])
@pytest.mark.parametrize("end", ["\n", "\r\n"])
def test_separators_encodings_and_line_ends_give_the_same(
    tmp_path: Path, separator: str, encoding: str, end: str
) -> None:
    rows = [["Wellenlänge [µm]", "n", "k"], ["0.40", "1.4701", "1e-8"], ["0.80", "1.4533", "2.0e-8"]]
    table = one(tmp_path, end.join(separator.join(row) for row in rows).encode(encoding))
    assert table.axis == "wavelength"
    assert table.axis_unit == "um"
    assert table.axis_cells == ("0.40", "0.80")
    assert table.lines.tolist() == [2, 3]
    assert table.omega == pytest.approx(
        [2 * math.pi * LIGHT / 0.4e-6, 2 * math.pi * LIGHT / 0.8e-6], rel=1e-14
    )
    assert values(table, "n") == [1.4701, 1.4533]
    assert values(table, "k") == [1e-8, 2e-8]
    assert told(table, "columns").startswith("wavelength in um, n, k: headings")


def test_decimal_commas_are_read_and_told(tmp_path: Path) -> None:
    for text in (
        "nm;n\n400,5;1,4701\n500;1,4623\n",
        "nm\tn\n400,5\t1,4701\n500\t1,4623\n",
        "nm n\n400,5 1,4701\n500 1,4623\n",
        '"nm","n"\n"400,5","1,4701"\n"500","1,4623"\n',
    ):
        table = one(tmp_path, text)
        assert table.axis_values.tolist() == [400.5, 500]
        assert values(table, "n") == [1.4701, 1.4623]
        assert table.axis_cells == ("400,5", "500")
        assert told(table, "decimal sign").startswith("comma")


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        ("nm,n\n0,4,1,4701\n0,5,1,4623\n", ["commas are the decimal sign and separate"]),
        ("nm;n\n1.064,5;1,44\n", ["sent.csv:2", "thousands", "1.064,5"]),
        ("nm\tn\n999\t1.45\n1,000\t1.44\n", ["sent.csv:3", "thousands", "1,000"]),
        ("nm;n\n1'064;1.44\n1'065;1.45\n", ["sent.csv:2", "thousands are separated", "1'064"]),
    ],
)
def test_doubtful_commas_are_refused(tmp_path: Path, text: str, parts: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        one(tmp_path, text)
    for part in parts:
        assert part in str(caught.value)


@pytest.mark.parametrize(
    ("heading", "cells", "axis", "omega"),
    [
        ("nm", "800", "wavelength", 2 * math.pi * LIGHT / 800e-9),
        ("Wavelength (Å)", "8000", "wavelength", 2 * math.pi * LIGHT / 800e-9),
        ("cm^-1", "12500", "wavenumber", 2 * math.pi * LIGHT * 1.25e6),
        ("eV", "1.55", "photon_energy", 1.55 * 1.602176634e-19 / 1.054571817e-34),
        ("THz", "375", "frequency", 2 * math.pi * 375e12),
        ("ω [rad/fs]", "2.35", "frequency", 2.35e15),
    ],
)
def test_every_axis_becomes_an_angular_frequency(
    tmp_path: Path, heading: str, cells: str, axis: str, omega: float
) -> None:
    table = one(tmp_path, f"{heading};n\n{cells};1.45\n")
    assert table.axis == axis
    assert table.omega[0] == pytest.approx(omega, rel=1e-9)


@pytest.mark.parametrize(
    ("heading", "cell", "quantity", "si"),
    [
        ("alpha (cm^-1)", "0.5", "alpha", 50.0),
        ("alpha [1/mm]", "0.5", "alpha", 500.0),
        ("loss (dB/m)", "10", "alpha", math.log(10)),
        ("attenuation (dB/cm)", "1", "alpha", 10 * math.log(10)),
        ("%T", "91.2", "transmittance", 0.912),
        ("T", "0.912", "transmittance", 0.912),
        ("T", "91.2", "transmittance", 0.912),
        ("T", "91.2%", "transmittance", 0.912),
        ("Reintransmissionsgrad", "0.995", "internal_transmittance", 0.995),
        ("OD", "1.25", "absorbance", 1.25),
        ("optical depth", "1.25", "napierian", 1.25),
        ("R (%)", "99.9", "reflectance", 0.999),
        ("GVD (fs^2/mm)", "36.16", "gvd", 36.16e-27),
        ("GDD (fs^2)", "-40", "gdd", -40e-30),
        ("GDD", "-40", "gdd", -40e-30),
        ("TOD (fs^3/mm)", "27", "tod", 27e-42),
        ("TOD (fs^3)", "27", "mirror_tod", 27e-45),
        ("GD [fs]", "12.5", "group_delay", 12.5e-15),
        ("phase (deg)", "90", "phase", math.pi / 2),
        ("n_g", "1.467", "group_index", 1.467),
    ],
)
def test_quantities_come_in_si(tmp_path: Path, heading: str, cell: str, quantity: str, si: float) -> None:
    table = one(tmp_path, f"nm;{heading}\n800;{cell}\n")
    assert values(table, quantity) == pytest.approx([si], rel=1e-12)


def test_percent_is_told_from_size_and_can_be_overruled(tmp_path: Path) -> None:
    text = "nm,T\n400,0.5\n410,91\n"
    assert values(one(tmp_path, text), "transmittance") == pytest.approx([0.005, 0.91])
    assert "in percent" in told(one(tmp_path, text), 'column "T" transmittance')
    small = "nm,T\n400,0.5\n410,0.91\n"
    assert values(one(tmp_path, small), "transmittance") == [0.5, 0.91]
    overruled = one(tmp_path, small, columns="wavelength,transmittance/%")
    assert values(overruled, "transmittance") == pytest.approx([0.005, 0.0091])


def test_a_mirror_sheet_takes_the_usual_units_and_says_so(tmp_path: Path) -> None:
    table = one(tmp_path, "nm,R,GD,GDD,TOD\n700,99.9,10,-40,100\n710,99.8,10.5,-41,101\n")
    assert values(table, "group_delay") == pytest.approx([10e-15, 10.5e-15])
    assert values(table, "mirror_tod") == pytest.approx([100e-45, 101e-45])
    assert told(table, "unit of gdd").startswith("fs^2")


def test_names_above_a_line_of_units(tmp_path: Path) -> None:
    table = one(tmp_path, "Lot 7\n\nWavelength\tIndex\tAbsorption coefficient\nµm\t-\tcm-1\n0.4\t1.47\t0.5\n")
    assert table.axis_unit == "um"
    assert values(table, "n") == [1.47]
    assert values(table, "alpha") == [50]


def test_columns_described_line_by_line(tmp_path: Path) -> None:
    table = one(tmp_path, "# Column 1: wavelength (nm)\n# Column 2: k\n400 0.5\n410 0.6\n")
    assert (table.axis_unit, values(table, "k")) == ("nm", [0.5, 0.6])


def test_n_and_k_in_blocks_of_their_own_are_one_table(tmp_path: Path) -> None:
    text = "wl,n\n0.4,1.47\n0.5,1.46\nwl,k\n0.40,1e-5\n0.50,2e-5\n"
    table = one(tmp_path, text)
    assert (values(table, "n"), values(table, "k")) == ([1.47, 1.46], [1e-5, 2e-5])
    assert "beside the rows from line 2" in told(table, "k")
    again = one(tmp_path, text, columns="wavelength,n,k")
    assert (values(again, "n"), values(again, "k")) == ([1.47, 1.46], [1e-5, 2e-5])


def test_blocks_over_different_axes_are_tables_of_their_own(tmp_path: Path) -> None:
    first, second = sent(tmp_path, "wl,n\n0.4,1.47\n0.5,1.46\nwl,k\n0.4,1e-5\n0.6,2e-5\n")
    assert first.column("k") is None
    assert second.column("n") is None
    assert second.lines.tolist() == [5, 6]


def test_columns_side_by_side_and_repeated_quantities_are_tables_of_their_own(tmp_path: Path) -> None:
    first, second = sent(tmp_path, "um,n_o,n_e\n0.4,1.5,1.6\n0.5,1.4,1.5\n")
    assert (first.title, values(first, "n")) == ("n_o", [1.5, 1.4])
    assert (second.title, values(second, "n")) == ("n_e", [1.6, 1.5])
    first, second = sent(tmp_path, "nm,n,,nm,k\n400,1.5,,410,1e-5\n500,1.4,,,\n")
    assert (values(first, "n"), values(second, "k")) == ([1.5, 1.4], [1e-5])


def test_samples_side_by_side_keep_their_names(tmp_path: Path) -> None:
    text = (
        "Baseline,,Sample 1,,\nWavelength (nm),%T,Wavelength (nm),%T,\n800,100.1,800,91.2,\n"
        "799,100.0,799,91.3,\n\nSample 1\nCollected: 3/4/2031\nScan rate: 600, 1\n"
    )
    first, second = sent(tmp_path, text)
    assert (first.title, second.title) == ("Baseline, %T", "Sample 1, %T")
    assert values(second, "transmittance") == pytest.approx([0.912, 0.913])


def test_a_numbered_table_and_one_with_upright_lines(tmp_path: Path) -> None:
    table = one(tmp_path, "#;nm;n\n1;400;1.47\n2;500;1.46\n")
    assert table.axis_values.tolist() == [400, 500]
    table = one(tmp_path, "| λ (µm) | n |\n|---|---|\n| 0.4 | 1.47 |\n| 0.5 | 1.46 |\n")
    assert (table.axis_unit, values(table, "n")) == ("um", [1.47, 1.46])


def test_each_transmittance_has_its_thickness(tmp_path: Path) -> None:
    heading = "nm, Internal transmittance (10 mm), Internal transmittance (25 mm)"
    first, second = sent(tmp_path, f"{heading}\n400,0.991,0.98\n500,0.999,0.998\n")
    assert (first.thickness, second.thickness) == pytest.approx((0.010, 0.025))
    assert one(tmp_path, "nm,τi (10 mm)\n400,0.99\n500,0.98\n", thickness="2 mm").thickness == 0.002


def test_rows_with_gaps_are_left_out_and_named(tmp_path: Path) -> None:
    table = one(tmp_path, "nm,n,k\n400,1.5,1e-5\n410,n.d.,2e-5\n420,1.4,-\n430,1.39,3e-5\n440,1.38,4e-5\n")
    assert table.lines.tolist() == [2, 5, 6]
    assert values(table, "n") == [1.5, 1.39, 1.38]
    assert told(table, "line 3") == "left out: the cells of n hold n.d."
    assert told(table, "line 4") == "left out: the cells of k hold -"


def test_a_column_that_is_mostly_empty_stands_alone(tmp_path: Path) -> None:
    first, second = sent(tmp_path, "nm,n,k\n400,1.5,\n410,1.45,\n420,1.4,1e-5\n")
    assert values(first, "n") == [1.5, 1.45, 1.4]
    assert values(second, "k") == [1e-5]


def test_nothing_is_sorted_repaired_or_dropped(tmp_path: Path) -> None:
    text = "nm,n\n800,1.4533\n400,1.4701\n400,1.4701\n600,-1\n"
    table = one(tmp_path, text)
    assert table.axis_values.tolist() == [800, 400, 400, 600]
    assert values(table, "n") == [1.4533, 1.4701, 1.4701, -1]
    swapped = one(tmp_path, "um,n\n1.4701,0.4\n1.4533,0.8\n")
    assert swapped.axis_values.tolist() == [1.4701, 1.4533]


@pytest.mark.parametrize("unit", ["parsec", "km", "pm", "GeV", "rad/s"])
def test_a_stated_unit_in_which_no_table_lies_is_refused(tmp_path: Path, unit: str) -> None:
    with pytest.raises(InputError) as caught:
        one(tmp_path, "wavelength,n\n400,1.47\n500,1.46\n", unit=unit)
    for part in ("sent.csv:2", f"400 {unit}", "from 10 nm to 1 m", "--unit"):
        assert part in str(caught.value)


def test_any_unit_in_which_a_table_may_lie_is_taken(tmp_path: Path) -> None:
    table = one(tmp_path, "wavelength,n\n400,1.47\n500,1.46\n", unit="mm")
    assert table.omega[0] == pytest.approx(2 * math.pi * LIGHT / 0.4)


@pytest.mark.parametrize(
    ("rows", "axis", "unit"),
    [
        ("400 1.4701\n800 1.4533\n", "wavelength", "nm"),
        ("800 1.4533\n400 1.4701\n", "wavelength", "nm"),
        ("400 1.4701\n1600 1.4434\n", "wavelength", "nm"),
        ("0.4 1.4701\n1.6 1.4434\n", "wavelength", "um"),
        ("3000 1.40\n40000 1.51\n", "wavenumber", "cm^-1"),
    ],
)
def test_without_headings_size_and_course_decide(tmp_path: Path, rows: str, axis: str, unit: str) -> None:
    table = one(tmp_path, rows)
    assert (table.axis, table.axis_unit) == (axis, unit)
    assert table.columns[0].quantity == "n"
    assert unit in told(table, "spectral axis")


def test_without_headings_k_stands_beside_n(tmp_path: Path) -> None:
    table = one(tmp_path, "0.4 1.4701 1e-5\n0.8 1.4533 0\n")
    assert values(table, "k") == [1e-5, 0]


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        ("400 0.47\n800 0.45\n", ["what the columns hold cannot be told", "--columns wavelength,k"]),
        ("nm,value\n400,47\n800,45\n", ["what the columns hold", "(got 'value')", "--columns"]),
        ("1.0 1.4434\n2.0 1.4533\n", ["micrometres or electronvolts", "--unit"]),
        ("1000 1.4434\n2000 1.4533\n", ["nanometres or reciprocal centimetres", "--unit"]),
        ("400 0.5\n4000 0.6\n", ["cannot be told", "--unit"]),
        ("wavelength,n\n1,1.47\n3000,1.46\n", ["the unit of the wavelength cannot be told", "1 to 3000"]),
        ("wavelength (cm^-1),n\n400,1.47\n500,1.46\n", ["not one of a wavelength", "--columns, --unit"]),
        ("sample,n\n400,1.47\n500,1.46\n", ["no column is known as the spectral axis", "sample, n"]),
        ("nm,Extinktion\n400,0.4\n500,0.3\n", ["extinction has several meanings", "--columns wavelength,k"]),
        ("nm,molar absorptivity\n400,1200\n500,1300\n", ["with the concentration", "2.302585"]),
        ("nm;molar absorption coefficient (M^-1 cm^-1)\n400;1200\n500;1300\n", ["with the concentration"]),
        ("nm;epsilon (L mol^-1 cm^-1)\n400;1200\n500;1300\n", ["with the concentration", "--thickness"]),
        ("nm;ε [1/(M cm)]\n400;1200\n500;1300\n", ["with the concentration"]),
        ("nm;absorption cross section (cm^2)\n400;1\n500;2\n", ["number density"]),
        ("nm,k x 1e6\n400,0.4\n500,0.3\n", ["power of ten", "k x 1e6"]),
        ("nm,k (1/cm)\n400,0.4\n500,0.3\n", ["a coefficient per length is alpha", "wavelength,alpha"]),
        ("nm,alpha\n400,0.4\n500,0.3\n", ["the unit of alpha is missing", "wavelength,alpha/cm^-1"]),
        ("nm,absorption\n400,0.4\n500,0.3\n", ["what the columns hold", "absorption"]),
        ("nm,n\n0,1.47\n500,1.46\n", ["sent.csv:2", "above zero", "'0 nm'"]),
        ("nm,n\n400,1.5\n410,1.49x\n", ["sent.csv:3", "not a number", "1.49x"]),
        ("nm,n\n400,1.5\n410,1.49\n???words here\n420,1.48\n", ["sent.csv:4", "neither a row nor a heading"]),
        ("nm,n\n400,-\n410,n.d.\n420,1.5\n".replace("1.5", "-"), ["no row of numbers"]),
        ("%PDF-1.7 ...", ["a PDF is a page", "CSV"]),
        (b"\x00\x01\x02", ["no text file"]),
    ],
)
def test_what_cannot_be_told_is_asked(tmp_path: Path, text: str | bytes, parts: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        sent(tmp_path, text)
    assert "sent.csv" in str(caught.value)
    for part in parts:
        assert part in str(caught.value)


@pytest.mark.parametrize(
    ("remark", "relative_to", "wavelength_in"),
    [
        ("refractive index relative to air", "air", "vacuum"),
        ("Brechungsindex gegen Luft", "air", "vacuum"),
        ("absolute refractive index, against vacuum", "vacuum", "vacuum"),
        ("wavelengths in air", None, "air"),
        ("Wellenlänge in Luft", None, "air"),
        ("index against air; vacuum wavelength", "air", "vacuum"),
        ("measured in air-conditioned rooms", None, "vacuum"),
        ("nothing said", None, "vacuum"),
    ],
)
def test_air_and_vacuum_are_read_from_the_words(
    tmp_path: Path, remark: str, relative_to: str | None, wavelength_in: str
) -> None:
    table = one(tmp_path, f"# {remark}\nnm,n\n400,1.47\n800,1.45\n")
    assert table.relative_to == relative_to
    assert table.wavelength_in == wavelength_in
    vacuum = 2 * math.pi * LIGHT / table.omega[1]
    # 0.2200 nm at 800 nm: P. E. Ciddor, Appl. Opt. 35, 1566 (1996), the published row of n - 1 = 275.05e-6
    assert vacuum - 800e-9 == pytest.approx(0.22e-9 if wavelength_in == "air" else 0.0, abs=1e-13)


def test_air_is_left_alone_where_its_formula_ends(tmp_path: Path) -> None:
    table = one(tmp_path, "# wavelengths in air\num,n\n0.4,1.47\n3.0,1.41\n")
    assert table.wavelength_in == "vacuum"
    assert "230 to 1690 nm" in told(table, "wavelengths")
    with pytest.raises(InputError, match="outside the range of the air formula"):
        one(tmp_path, "um,n\n0.4,1.47\n3.0,1.41\n", wavelength_in="air")


@pytest.mark.parametrize(
    ("remark", "metres"),
    [
        ("thickness 2 mm", 0.002), ("Thickness: 2.5 mm", 0.0025), ("path length = 1 cm", 0.01),
        ("Schichtdicke 10,5 µm", 10.5e-6), ("1 mm thick plate", 0.001), ("1 cm cuvette", 0.01),
        ("bandwidth 2 nm", None), ("thickness 1 mm or thickness 2 mm", None),
    ],
)  # fmt: skip
def test_the_thickness_is_read_from_the_words(tmp_path: Path, remark: str, metres: float | None) -> None:
    table = one(tmp_path, f"# {remark}\nnm,A\n400,0.5\n500,0.4\n")
    assert table.thickness == (None if metres is None else pytest.approx(metres))


def test_options_go_before_the_file(tmp_path: Path) -> None:
    text = "# against air, thickness 2 mm\nwavelength (nm),n,A\n400,1.5,0.1\n500,1.4,0.2\n"
    table = one(
        tmp_path, text, columns="photon_energy,-,k", unit="meV", relative_to="vacuum", thickness="1 cm"
    )
    assert (table.axis, table.axis_unit, table.relative_to, table.thickness) == (
        "photon_energy", "meV", "vacuum", 0.01,
    )  # fmt: skip
    assert [column.quantity for column in table.columns] == ["k"]
    assert one(tmp_path, text, unit="um").axis_unit == "um"
    assert "goes before the heading" in told(one(tmp_path, text, unit="um"), "unit of the wavelength")


@pytest.mark.parametrize("name", ["T_err", "remark", "u(k)", "Δλ", "error", "MgO (mol%)"])
def test_unknown_columns_are_left_out_and_told(tmp_path: Path, name: str) -> None:
    table = one(tmp_path, f"nm,n,{name}\n400,1.5,1\n500,1.4,2\n")
    assert [column.quantity for column in table.columns] == ["n"]
    assert told(table, "column 3") == f'left out: the heading "{name}" is not known'


@pytest.mark.parametrize(
    "heading",
    ["D (ps/(nm km))", "D [ps/nm/km]", "chromatic dispersion, ps/(nm·km)", "dispersion in ps nm^-1 km^-1"],
)
def test_the_dispersion_parameter_is_read_as_gvd(tmp_path: Path, heading: str) -> None:
    # common fibre: D = 17 ps/(nm km) at 1550 nm is -21.68 ps^2/km; 2 pi c = 1.883651567e9 m/s
    table = one(tmp_path, f"nm;{heading}\n1550;17.0\n1600;20.0\n")
    gvd = values(table, "gvd")
    assert gvd[0] == pytest.approx(-17.0 * 1.55**2 / 1.883651567 * 1e-27, rel=1e-8)
    assert table.columns[0].half_unit[0] == pytest.approx(0.05 / 17.0 * -gvd[0])
    assert "turned to GVD" in told(table, "dispersion parameter")


@pytest.mark.parametrize(
    ("heading", "cells", "quantity", "expected"),
    [
        ("n;u(n)", "1.47;2e-5", "n", 2e-5),
        ("n;uncertainty of n", "1.47;0.0003", "n", 3e-4),
        ("n;Unsicherheit", "1,47;0,0003", "n", 3e-4),
        ("n;delta n", "1.47;0.0003", "n", 3e-4),
        ("n;dn", "1.47;0.0003", "n", 3e-4),
        ("n;Δn", "1.47;0.0003", "n", 3e-4),
        ("n;k;u(k) [%]", "1.47;0.2;5", "k", 0.01),
        ("n;k;k uncertainty (%)", "1.47;0.2;5", "k", 0.01),
        ("T [%];u(T)", "90.1;0.3", "transmittance", 0.003),
        ("alpha (1/cm);uncertainty (1/mm)", "0.5;0.01", "alpha", 10.0),
        ("gdd (fs^2);u(gdd)", "-40;2", "gdd", 2e-30),
    ],
)
def test_a_column_of_uncertainties_states_those_of_another(
    tmp_path: Path, heading: str, cells: str, quantity: str, expected: float
) -> None:
    table = one(tmp_path, f"nm;{heading}\n500;{cells}\n600;{cells}\n")
    column = table.column(quantity)  # type: ignore[arg-type]
    assert column is not None
    assert column.uncertainty == pytest.approx([expected, expected])
    assert "as stated" in told(table, f"uncertainty of {quantity.replace('_', ' ')}")
    assert all(note.taken != "left out" for note in table.inferred)


def test_each_of_two_indices_has_its_own_uncertainty(tmp_path: Path) -> None:
    text = "nm,no,u(no),ne,u(ne)\n500,1.66,1e-5,1.49,2e-5\n600,1.65,1e-5,1.48,2e-5\n"
    first, second = sent(tmp_path, text)
    assert first.columns[0].uncertainty == pytest.approx([1e-5, 1e-5])
    assert second.columns[0].uncertainty == pytest.approx([2e-5, 2e-5])


@pytest.mark.parametrize(
    "text",
    [
        "nm,no,ne,Δn\n500,1.66,1.49,0.17\n600,1.65,1.48,0.17\n",  # a birefringence
        "nm,n,u(n)\n500,1.66,-1\n600,1.65,1\n",
        "nm,n,u(n)\n500,1.66,\n600,1.65,1e-5\n",
    ],
)
def test_what_may_be_no_uncertainty_is_left_out_and_told(tmp_path: Path, text: str) -> None:
    for table in sent(tmp_path, text):
        assert table.columns[0].uncertainty is None
        assert any(note.taken == "left out" for note in table.inferred)


def test_a_column_of_uncertainties_gives_way_to_an_option(tmp_path: Path) -> None:
    text = "nm,n,u(n)\n500,1.66,1e-5\n600,1.65,1e-5\n"
    table = one(tmp_path, text, uncertainty="n=1e-3")
    assert table.columns[0].uncertainty == pytest.approx([1e-3, 1e-3])
    assert one(tmp_path, text, columns="wavelength,n,-").columns[0].uncertainty is None


def test_words_beside_numbers_are_left_out_and_told(tmp_path: Path) -> None:
    table = one(tmp_path, "Line;Wavelength;n\nd;587.56;1.5168\nF;486.13;1.5224\n")
    assert table.axis_values.tolist() == [587.56, 486.13]
    assert told(table, "column 1") == "left out: it holds words"


def test_a_workbook_is_read_with_its_sheet_and_rows(tmp_path: Path) -> None:
    book = openpyxl.Workbook()
    book.active.title = "Cover"  # type: ignore[union-attr]
    sheet = book.create_sheet("Lot B")
    for row in (["index against air"], [], ["λ [nm]", "n", "k"], [400, 1.47, 1e-8], [500.5, "1,4620", None]):
        sheet.append(row)
    sheet["B5"] = 1.462
    sheet["C5"] = 2.5e-8
    path = tmp_path / "lot.xlsx"
    book.save(path)
    (table,) = read_table(path)
    assert (table.title, table.relative_to, table.lines.tolist()) == ("Lot B", "air", [4, 5])
    assert values(table, "n") == [1.47, 1.462]
    assert table.columns[0].half_unit.tolist() == pytest.approx([5e-4, 5e-4])
    assert told(table, "sheet").startswith("Lot B: the first that holds rows of numbers")


JCAMP = """##TITLE= invented filter
##JCAMP-DX= 4.24
##DATA TYPE= INFRARED SPECTRUM
##XUNITS= 1/CM
##YUNITS= {unit}
##PATHLENGTH= {length}
##FIRSTX= 400
##LASTX= 409
##NPOINTS= 10
##XFACTOR= 1
##YFACTOR= 0.01
##XYDATA= (X++(Y..Y))
400A0JT%jX
##END=
"""


@pytest.mark.parametrize(
    ("unit", "quantity", "scale"),
    [
        ("ABSORBANCE", "absorbance", 1.0),
        ("TRANSMITTANCE", "transmittance", 1.0),
        ("% TRANSMITTANCE", "transmittance", 0.01),
        ("REFLECTANCE", "reflectance", 1.0),
    ],
)
def test_a_jcamp_spectrum_is_a_table(tmp_path: Path, unit: str, quantity: str, scale: float) -> None:
    table = one(tmp_path, JCAMP.format(unit=unit, length="0.5"))
    assert (table.title, table.axis, table.axis_unit) == ("invented filter", "wavenumber", "cm^-1")
    assert table.omega[0] == pytest.approx(2 * math.pi * LIGHT * 4e4)
    steps = np.array([10, 11, 12, 12, 11, 10, 9, 8, 7, 6]) * 0.01 * scale
    assert values(table, quantity) == pytest.approx(steps)
    assert table.columns[0].half_unit == pytest.approx(np.full(10, 0.005 * scale))
    assert table.lines.tolist() == [13] * 10
    assert table.thickness == pytest.approx(0.005)
    assert told(table, "unit of PATHLENGTH").startswith("cm")
    assert told(table, "thickness") == "5 mm: the PATHLENGTH record says so"


def test_a_jcamp_spectrum_of_unknown_units_is_asked(tmp_path: Path) -> None:
    text = JCAMP.format(unit="ARBITRARY UNITS", length="2 mm")
    with pytest.raises(InputError, match=r"YUNITS does not tell .*--columns wavenumber,transmittance"):
        one(tmp_path, text)
    table = one(tmp_path, text, columns="wavenumber,absorbance")
    assert (table.columns[0].quantity, table.thickness) == ("absorbance", 0.002)


@given(
    cells=st.lists(st.tuples(st.integers(300, 3000), st.integers(0, 30000)), min_size=2, max_size=12),
    style=st.sampled_from([(",", "."), (";", "."), (";", ","), ("\t", ","), ("  ", "."), ("  ", ",")]),
)
def test_one_table_written_in_many_ways_reads_the_same(
    cells: list[tuple[int, int]], style: tuple[str, str]
) -> None:
    separator, sign = style
    rows = [(f"{place}.5", f"{number / 1e4:.4f}") for place, number in cells]
    lines = [separator.join(row).replace(".", sign) for row in rows]
    text = "\n".join([separator.join(("wavelength_nm", "Abs")), *lines])
    book = openpyxl.Workbook()
    for row in (("wavelength_nm", "Abs"), *((float(x), float(y)) for x, y in rows)):
        book.active.append(row)  # type: ignore[union-attr]
    buffer = io.BytesIO()
    book.save(buffer)
    pairs = "\n".join(f"{x}, {y}" for x, y in rows)
    head = "##TITLE= t\n##XUNITS= NANOMETERS\n##YUNITS= ABSORBANCE\n##XYPOINTS= (XY..XY)\n"
    for data in (text.encode(), buffer.getvalue(), f"{head}{pairs}\n##END=\n".encode()):
        (table,) = tables_in(data, "sent", ReadOptions())
        assert table.axis_values.tolist() == [float(x) for x, _ in rows]
        assert values(table, "absorbance") == [float(y) for _, y in rows]
