"""Broken files of every kind: an answer or an InputError, never anything else, and no hang."""

from __future__ import annotations

import io
import random
from functools import cache

import numpy as np
import openpyxl
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from pulseprop.errors import InputError
from pulseprop.vetting.read_options import ReadOptions
from pulseprop.vetting.reading import tables_in
from pulseprop.vetting.table import SentTable

TEXTS = {
    "two blocks": "wl,n\n0.4,1.4701\n0.5,1.4623\nwl,k\n0.4,1e-5\n0.5,2.0e-5\n",
    "decimal commas": "Wellenlänge [nm];Brechungsindex n\n400,5;1,4701\n500;1,4623\n",
    "remarks": "# thickness 2 mm, wavelength in air\n\nwavelength (nm)  T(%)\n400   90.1\n450   -\n",
    "quotes": '"Wavelength (nm)","Absorbance"\n"400","0.5"\n"410","0.6"\n',
    "words": "Line;nm;n;remark\nd;587.56;1.5168;ok\nF;486.13;1.5224;\n",
    "mirror": "nm\tR\tGD\tGDD\n700\t99.9\t10\t-40\n710\t99.8\t10.5\t-41\n",
    "packed": (
        "##TITLE=t\n##JCAMP-DX=4.24\n##XUNITS=1/CM\n##YUNITS=ABSORBANCE\n##FIRSTX=599.86\n##LASTX=608.86\n"
        "##NPOINTS=10\n##XFACTOR=1\n##YFACTOR=0.001\n##PATHLENGTH=0.1\n##XYDATA=(X++(Y..Y))\n"
        "599.86AJJ%j\n603.86Bjj\n605.86@jjj\n##END=\n"
    ),
    "peaks": (
        "##TITLE=t\n##XUNITS=NANOMETERS\n##YUNITS=TRANSMITTANCE\n##NPOINTS=3\n"
        "##PEAK TABLE=(XY..XY)\n400,0.5;410,0.6\n420,0.7\n##END=\n"
    ),
}
PIECES = [
    ",", ";", "\t", "\n", "\r", '"', "nan", "-", "1e999", "1e-999", "0", "%", "(", ")", "[", "/", "cm-1",
    "nm", "k", "n", "T", "1,064", "1.064,5", "##", "$$", "?", "@", "S999999999999", "Z99", "E", "_", "'", "−",
    "10^-6", "a b " * 2000, "1 " * 2000,
    "\x1c", "9" * 400, "٣", "λ", "in air", "0 mm thick", "##NPOINTS=0\n", "##LASTX=1e308\n", "D3", "\ufeff",
]  # fmt: skip
OPTIONS = [
    {},
    {"columns": "wavelength,n"},
    {"columns": "-,wavenumber,absorbance"},
    {"unit": "um"},
    {"unit": "cm^-1"},
    {"wavelength_in": "air"},
    {"uncertainty": "n=1e-4,k=2%,transmittance=1%", "thickness": "2 mm"},
]


@cache
def workbook() -> bytes:
    book = openpyxl.Workbook()
    for row in (
        ["lot 7"],
        ["λ [nm]", "n", "k"],
        [400, 1.4701, 1e-8],
        [500.5, "1.4623", None],
        [600, 1.458, 1e-8],
    ):
        book.active.append(row)  # type: ignore[union-attr]
    buffer = io.BytesIO()
    book.save(buffer)
    return buffer.getvalue()


edits = st.lists(
    st.tuples(
        st.floats(0, 1),
        st.integers(0, 12),
        st.one_of(st.binary(max_size=3), st.sampled_from([piece.encode() for piece in PIECES])),
    ),
    min_size=1,
    max_size=8,
)
"""Where (as a share of the length), how many bytes go, and what comes instead."""


def mutated(data: bytes, changes: list[tuple[float, int, bytes]]) -> bytes:
    for place, gone, new in changes:
        at = int(place * len(data))
        data = data[:at] + new + data[at + gone :]
    return data


def check(data: bytes, options: dict[str, str]) -> None:
    """An InputError, or whole tables."""
    try:
        tables = tables_in(data, "sent", ReadOptions(**options))  # type: ignore[arg-type]
    except InputError:
        return
    assert tables
    for table in tables:
        assert_whole(table)


def assert_whole(table: SentTable) -> None:
    rows = len(table.lines)
    assert rows == len(table.axis_cells) == len(table.axis_values) == len(table.omega)
    assert rows >= 1
    assert np.all(table.omega > 0)
    assert np.isfinite(table.omega).all()
    assert table.columns
    for column in table.columns:
        assert rows == len(column.cells) == len(column.values) == len(column.half_unit)
        assert np.isfinite(column.values).all()
        assert np.all(column.half_unit >= 0)


soon = settings(
    max_examples=60,
    deadline=2000,
    suppress_health_check=[HealthCheck.too_slow],
)


@pytest.mark.parametrize("kind", TEXTS)
@soon
@given(changes=edits, options=st.sampled_from(OPTIONS), encoding=st.sampled_from(["utf-8", "utf-16"]))
def test_mutated_texts(
    kind: str,
    changes: list[tuple[float, int, bytes]],
    options: dict[str, str],
    encoding: str,
) -> None:
    check(mutated(TEXTS[kind].encode(encoding), changes), options)


@soon
@given(changes=edits, options=st.sampled_from(OPTIONS))
def test_mutated_workbooks(changes: list[tuple[float, int, bytes]], options: dict[str, str]) -> None:
    check(mutated(workbook(), changes), options)


def test_thousands_of_broken_files() -> None:
    """Plain random edits: many more cases in the same time."""
    draw = random.Random(20)
    files = [*(text.encode() for text in TEXTS.values()), workbook()]
    for _ in range(2000):
        count = draw.choice([1, 1, 2, 3, 8])
        changes = [
            (draw.random(), draw.randrange(6), draw.choice([*PIECES, chr(draw.randrange(256))]).encode())
            for _ in range(count)
        ]
        check(mutated(draw.choice(files), changes), draw.choice(OPTIONS))


def test_endless_lines_and_rows_are_no_hang() -> None:
    check(b"word " * 150_000, {})
    check(b"nm (" * 150_000, {})
    check(b"1 " * 150_000, {})
    check(b"nm,n\n" * 8_000 + b"400,1.5\n500,1.4\n", {})
    check(b"400,1.5\nwords\n" * 8_000, {})


@soon
@given(data=st.binary(max_size=200))
def test_any_bytes(data: bytes) -> None:
    check(data, {})


@soon
@given(text=st.text(alphabet='0123456789.,;eE-+ \t\n#xnk"%λ', max_size=80))
def test_any_text_of_the_signs_of_tables(text: str) -> None:
    check(text.encode(), {})
