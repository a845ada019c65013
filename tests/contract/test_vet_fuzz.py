"""Spoilt files and odd options: an answer or one message, never a failure of the program."""

from __future__ import annotations

import json
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from pulseprop import cli

SHEETS = Path(__file__).parents[2] / "scenarios" / "sheets"
NAMES = (
    "window_lot.csv", "flint_lot.tsv", "mirror_lot.xlsx", "green_filter.jdx", "dye_cell.txt",
    "crown_certificate.toml", "crown_formula.toml",
)  # fmt: skip
PIECES = (
    b",", b";", b"\t", b"\n", b"\r", b'"', b"nan", b"-", b"1e999", b"1e-999", b"0", b"%", b"[", b"=", b"\x00",
    b"##", b"n", b"k", b"T", b"GDD", b"cm^-1", b"1e300", b"9" * 40, "−".encode(), "λ".encode(), b"\xff",
)  # fmt: skip
OPTIONS = {
    "--columns": ("wavelength,n", "wavelength,n,k", "n,wavelength", "-,n", "wavelength,R,GDD", ""),
    "--unit": ("nm", "um", "cm^-1", "eV", "furlong"),
    "--uncertainty": ("n=1e-4", "n=1e-9,k=2%", "n=1e300", "n=0", "absorbance=0.002"),
    "--relative-to": ("air", "vacuum"),
    "--wavelength-in": ("air", "vacuum"),
    "--thickness": ("1 mm", "0 mm", "1e30 m", "thin"),
    "--at": ("800 nm", "0 nm", "1e9 m", "589.3 nm", "inf nm"),
    "--require": (
        "gvd at 800 nm = 36.2 +- 0.5 fs^2/mm", "V_d >= 50", "reflectance from 750 nm to 850 nm >= 99.8 %",
        "internal transmittance at 600 nm for 1 mm >= 0.9", "tod at 800 nm <= 1e9 fs^3/mm", "x",
    ),
    "--medium": ("fused silica", "argon", "nothing"),
    "--anchor": ("1.5230 +- 0.0002 at 589.3 nm", "0.5 +- 0.1 at 10 um", "1e300 +- 1 at 1 um"),
    "--transparent": ("300 nm to 2 um", "1 nm to 1 m", "0 nm to 1 nm"),
    "--ceiling": ("2.8", "0", "-1", "nan"),
    "--resolution": ("2 nm", "1 m", "0 nm"),
    "--angle": ("5 deg", "90 deg", "1e9 deg"),
    "--composition": ("SiO2", "X9"),
    "--density": ("2.2 g/cm^3", "0 g/cm^3"),
}  # fmt: skip

changes = st.lists(
    st.tuples(
        st.sampled_from(["insert", "cut", "overwrite", "double"]),
        st.floats(0, 1),
        st.sampled_from(PIECES),
        st.integers(1, 60),
    ),
    max_size=5,
)
options = st.lists(
    st.sampled_from([(name, value) for name, values in OPTIONS.items() for value in values]), max_size=3
)


def spoilt(data: bytes, steps) -> bytes:
    for how, where, piece, length in steps:
        at = int(where * len(data))
        if how == "insert":
            data = data[:at] + piece + data[at:]
        elif how == "cut":
            data = data[:at] + data[at + length :]
        elif how == "overwrite":
            data = data[:at] + piece + data[at + len(piece) :]
        else:
            data = data[:at] + data[max(at - length, 0) :]
    return data


@settings(
    deadline=None,
    max_examples=60,
    derandomize=True,
    suppress_health_check=[HealthCheck.function_scoped_fixture, HealthCheck.too_slow],
)
@given(name=st.sampled_from(NAMES), steps=changes, chosen=options)
def test_an_answer_or_a_message(command, tmp_path, monkeypatch, name, steps, chosen):
    monkeypatch.delenv(cli.TRACEBACK, raising=False)
    path = tmp_path / name
    path.write_bytes(spoilt((SHEETS / name).read_bytes(), steps))
    told = command("vet", path, *(word for pair in chosen for word in pair), "--json", "-")
    assert told.code in (0, 1, 2, 3)
    assert "unexpected failure" not in told.err, told.err
    assert "Traceback" not in told.err
    if told.out:
        json.loads(told.out, parse_constant=lambda word: pytest.fail(word))
    else:
        assert told.code in (2, 3)
        assert told.err.startswith("pulseprop: ")
