"""JCAMP-DX: the standard's forms, its checks, and another decoder.

The example in all forms (1 2 3 3 2 1 0 -1 -2 -3) is that of the standard, R. S. McDonald and P. A. Wilks,
Appl. Spectrosc. 42, 151 (1988), from memory. The other decoder is the library jcamp, where it reads a form.
"""

from __future__ import annotations

import contextlib
import io
import itertools
import random

import jcamp
import numpy as np
import pytest

from pulseprop.errors import InputError
from pulseprop.files.jcamp import Spectrum, is_jcamp, spectra_of

EXAMPLE = [1, 2, 3, 3, 2, 1, 0, -1, -2, -3]


def document(data: str, points: int, last: float, **records: object) -> str:
    head = {
        "TITLE": "invented",
        "JCAMP-DX": "4.24",
        "DATA TYPE": "INFRARED SPECTRUM",
        "XUNITS": "1/CM",
        "YUNITS": "ABSORBANCE",
        "FIRSTX": 100,
        "LASTX": last,
        "NPOINTS": points,
        "XFACTOR": 1,
        "YFACTOR": 1,
    } | {name.replace("_", " "): value for name, value in records.items()}
    lines = [f"##{name}= {value}" for name, value in head.items() if value is not None]
    return "\n".join([*lines, "##XYDATA= (X++(Y..Y))", data, "##END="]) + "\n"


def one(text: str) -> Spectrum:
    (spectrum,) = spectra_of(text, "a.dx")
    return spectrum


@pytest.mark.parametrize(
    "packed",
    [
        "100 1 2 3 3 2 1 0 -1 -2 -3",
        "100+1+2+3+3+2+1+0-1-2-3",
        "100 ABCCBA@abc",
        "100A2B3".replace("A2B3", "ABCTBA@abc"),
        "100 1JJ%jjjjjj",
        "100 1JT%jX",
        "100 AJT%jX",
        "100ABC\n103CBA@\n107abc",
        "100AJT\n102C%jX",
        "100 1,2,3,3;2 1 0 -1 -2 -3",
    ],
)
def test_the_example_of_the_standard_in_every_form(packed: str) -> None:
    spectrum = one(document(packed, 10, 109))
    assert spectrum.y.tolist() == EXAMPLE
    assert spectrum.x.tolist() == list(range(100, 110))


LEADING = {"+": "@ABCDEFGHI", "-": "@abcdefghi"}
STEPS = {"+": "%JKLMNOPQR", "-": "%jklmnopqr"}
TIMES = " STUVWXYZs"


def packed(value: int, digits: dict[str, str]) -> str:
    text = str(abs(value))
    return digits["-" if value < 0 else "+"][int(text[0])] + text[1:]


def dif_dup(values: list[int], width: int) -> str:
    """Lines of differences with repeats, each line after the first beginning with its check."""
    lines = []
    for start in range(0, len(values) - 1, width):
        part = values[start : start + width + 1]
        words: list[str] = []
        for before, after in itertools.pairwise(part):
            words.append(packed(after - before, STEPS))
        squeezed: list[str] = []
        while words:
            count = next((n for n, word in enumerate(words) if word != words[0]), len(words))
            count = min(count, 9)
            squeezed.append(words[0] + (TIMES[count] if count > 1 else ""))
            words = words[count:]
        lines.append(f"{100 + start}{packed(part[0], LEADING)}{''.join(squeezed)}")
    return "\n".join(lines)


@pytest.mark.parametrize("seed", range(20))
def test_differences_with_repeats_agree_with_the_library(seed: int) -> None:
    draw = random.Random(seed)
    values = [draw.choice([0, 5, 5, 5, -12, 130, 7042, -999])]
    for _ in range(draw.randrange(20, 300)):
        values.append(values[-1] + draw.choice([0, 0, 0, 1, 1, -3, 12, -107, 4021]))
    text = document(dif_dup(values, 25), len(values), 100 + len(values) - 1, YFACTOR=0.0005)
    spectrum = one(text)
    with contextlib.redirect_stdout(io.StringIO()) as said:
        reference = jcamp.read(text.splitlines(keepends=True))
    assert said.getvalue() == ""
    np.testing.assert_allclose(spectrum.y, reference["y"], rtol=1e-14)
    np.testing.assert_allclose(spectrum.x, reference["x"], rtol=1e-14)
    np.testing.assert_allclose(spectrum.y, 0.0005 * np.array(values), rtol=1e-14)


@pytest.mark.parametrize("form", ["plain", "packed", "squeezed"])
def test_other_forms_agree_with_the_library(form: str) -> None:
    draw = random.Random(7)
    values = [draw.randrange(-9000, 9000) for _ in range(200)]
    words = {
        "plain": lambda value: f" {value}",
        "packed": lambda value: f"{value:+d}",
        "squeezed": lambda value: packed(value, LEADING),
    }[form]
    lines = [f"{100 + start}" + "".join(map(words, values[start : start + 8])) for start in range(0, 200, 8)]
    text = document("\n".join(lines), 200, 299, YFACTOR=1e-3)
    with contextlib.redirect_stdout(io.StringIO()):
        reference = jcamp.read(text.splitlines(keepends=True))
    np.testing.assert_allclose(one(text).y, reference["y"], rtol=1e-14)


def test_pairs_and_peak_tables_are_read() -> None:
    text = (
        "##TITLE= invented\n##XUNITS= NANOMETERS\n##YUNITS= TRANSMITTANCE\n##NPOINTS= 3\n"
        "##PEAK TABLE= (XY..XY)\n400.5, 0.51; 410, 0.6\n$$ a remark\n420 0.7 $$ another\n##END=\n"
    )
    spectrum = one(text)
    assert spectrum.form == "PEAKTABLE"
    assert spectrum.x.tolist() == [400.5, 410, 420]
    assert spectrum.y.tolist() == [0.51, 0.6, 0.7]
    assert spectrum.lines.tolist() == [6, 6, 8]
    assert (spectrum.x_half, spectrum.y_half) == pytest.approx((0.05, 0.005))
    points = one(
        text.replace("PEAK TABLE", "XYPOINTS").replace("##NPOINTS= 3\n", "##XFACTOR= 2\n##YFACTOR= 0.1\n")
    )
    assert points.x.tolist() == [801, 820, 840]
    assert points.y == pytest.approx([0.051, 0.06, 0.07])


def test_compound_files_give_each_spectrum() -> None:
    outer = "##TITLE= both\n##DATA TYPE= LINK\n##BLOCKS= 2\n"
    inner = [document("100 1JT%jX", 10, 109, YUNITS=unit) for unit in ("ABSORBANCE", "TRANSMITTANCE")]
    spectra = spectra_of(outer + "".join(inner) + "##END=\n", "a.dx")
    assert [spectrum.records["YUNITS"] for spectrum in spectra] == ["ABSORBANCE", "TRANSMITTANCE"]


def test_decimal_commas_in_the_records_are_those_of_the_data() -> None:
    spectrum = one(document("100,5 1,5 2\n102,5 3", 3, "102,5", FIRSTX="100,5", YFACTOR="0,1"))
    assert spectrum.x.tolist() == [100.5, 101.5, 102.5]
    assert spectrum.y == pytest.approx([0.15, 0.2, 0.3])


def test_points_marked_as_not_valid_are_gaps() -> None:
    spectrum = one(document("100 1 ? 3", 3, 102))
    assert spectrum.y[[0, 2]].tolist() == [1, 3]
    assert np.isnan(spectrum.y[1])
    assert np.isnan(one(document("100A?C", 3, 102)).y[1])


def test_half_a_unit_is_that_of_the_stored_digits() -> None:
    assert one(document("100 1JT%jX", 10, 109, YFACTOR=1e-4)).y_half == pytest.approx(5e-5)
    assert one(document("100 0.120 0.1", 2, 101)).y_half == pytest.approx(5e-4)
    assert one(document("100 1 2", 2, 101, FIRSTX="100.00")).x_half == pytest.approx(5e-3)


@pytest.mark.parametrize(
    ("text", "parts"),
    [
        (document("100AJT\n102D%jX", 10, 109), ["a.dx:13", "check of the ordinate", "'D'", "Allowed: 3"]),
        (document("100ABC\n104CBA@\n107abc", 10, 109), ["a.dx:13", "check of the abscissa", "'104'", "103"]),
        (document("100 1JT%jX", 11, 110), ["a.dx:8", "number of points", "10 points", "NPOINTS = 11"]),
        (document("100 1JT%jX", 10, 109, FIRSTY=2), ["FIRSTY is not the first ordinate"]),
        (document("100J", 1, 100), ["a.dx:12", "difference stands before any ordinate"]),
        (document("100S", 1, 100), ["nothing to repeat"]),
        (document("100AS99999999999", 1, 100), ["goes on for ever"]),
        (document("A100", 1, 100), ["a.dx:12", "does not begin with its abscissa"]),
        (document("100 A&B", 2, 101), ["no digit of JCAMP-DX", "'&'"]),
        (document("100 1 2", 2, 101, YFACTOR="x"), ["a.dx:10", "YFACTOR is no number"]),
        (document("100 1 2", 2, 101, YFACTOR=0), ["YFACTOR cannot be used"]),
        (document("100 1 2", 2, None, LASTX=None), ["abscissae cannot be told"]),  # type: ignore[arg-type]
        (
            document("1", 1, 1).replace("(X++(Y..Y))", "(R++(A..A))"),
            ["layout that is not read", "(R++(A..A))"],
        ),
        (document("", 0, 1), ["number of points"]),
        ("##TITLE= x\n##END=\n", ["holds no XYDATA"]),
        ("##TITLE= x\n##XYPOINTS= (XY..XY)\n1 2 3\n##END=\n", ["a.dx:3", "pairs of numbers"]),
        ("##TITLE= x\n##XYPOINTS= (XY..XY)\n? 2\n##END=\n", ["abscissa is marked as not valid"]),
    ],
)
def test_failed_checks_name_file_and_line(text: str, parts: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        spectra_of(text, "a.dx")
    for part in parts:
        assert part in str(caught.value)


def test_the_files_are_known_by_their_first_record() -> None:
    assert is_jcamp("$$ a remark\n\n##TITLE= x\n")
    assert is_jcamp("\ufeff##jcamp-dx= 4.24\n")
    assert not is_jcamp("## title of a table\n1 2\n")
    assert not is_jcamp("nm,n\n")
