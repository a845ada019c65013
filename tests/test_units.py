"""Units at the edge: strict text in, SI out, ordinary and angular frequency never mixed.

Outside values: CODATA 2022 and the exact constants of the SI (hc = 1239.841984 eV nm; 1 atm = 101325 Pa, 1
Torr = 1/760 of it, NIST SP 811 appendix B); ln 10 = 2.302585092994046.
"""

from __future__ import annotations

import math
import subprocess
import sys

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from pulseprop.errors import InputError
from pulseprop.units import (
    KINDS,
    from_si,
    position,
    quantity,
    show,
    spectral_width,
    to_si,
    unit_from,
)
from pulseprop.units.symbols import OURS, PLAIN, resolved

LIGHT = 299792458.0


@pytest.mark.parametrize("text", sorted(PLAIN))
def test_the_table_of_plain_units_agrees_with_the_units_library(text: str) -> None:
    ours, theirs = PLAIN[text], resolved(text)
    assert ours.dimension == theirs.dimension
    assert ours.factor == pytest.approx(theirs.factor, rel=1e-14)


@pytest.mark.parametrize(
    ("text", "kind", "expected"),
    [
        ("3 mm", "length", 3e-3),
        ("1.5e-3 m", "length", 1.5e-3),
        ("30 fs", "time", 30e-15),
        ("-40 fs^2", "gdd", -40e-30),
        ("-40 fs²", "gdd", -40e-30),
        ("22 degC", "temperature", 295.15),
        ("0.25 °C", "temperature", 273.4),
        ("2.6e-20 m^2/W", "nonlinear_index", 2.6e-20),
        ("2.6e-16 cm^2/W", "nonlinear_index", 2.6e-20),
        ("17 ps/(nm km)", "dispersion", 17e-6),
        ("0.06 ps/(nm^2 km)", "dispersion_slope", 60.0),
        ("36 fs^2/mm", "gvd", 36e-27),
        ("-22 ps^2/km", "gvd", -22e-27),
        ("3 µm", "length", 3e-6),
        ("3 μm", "length", 3e-6),
        ("3 um", "length", 3e-6),
        ("5000 Å", "length", 5e-7),
        ("40 %", "fraction", 0.4),
        ("120 ppm", "fraction", 120e-6),
        (0.4, "fraction", 0.4),
        (1, "fraction", 1.0),
        ("4 GiB", "memory", 4 * 2**30),
        ("1 Gbit", "memory", 1.25e8),
        ("1 atm", "pressure", 101325.0),
        ("760 Torr", "pressure", 101325.0),
        ("1013 hPa", "pressure", 101300.0),
        ("10 dB/m", "inverse_length", 2.302585092994046),
        ("300 /mm", "inverse_length", 3e5),
        ("3 1/cm", "inverse_length", 300.0),
        ("1 GHz/cm", "integrated_absorption", 1e11),
        ("1 cm^-2", "integrated_absorption", 1e4 * LIGHT),
        ("85000 L/(mol cm)", "molar_absorption", 8500.0),
        ("200 umol/L", "concentration", 0.2),
        ("90 deg", "angle", math.pi / 2),
        ("0.5 cm/GW", "two_photon", 5e-12),
        ("0.5 J/cm^2", "fluence", 5e3),
    ],
)
def test_text_becomes_si(text: object, kind: str, expected: float) -> None:
    assert quantity(text, kind) == pytest.approx(expected, rel=2e-15)


@pytest.mark.parametrize(
    ("text", "nanometres"),
    [
        ("800 nm", 800.0),
        ("374.740572500 THz", 800.0),
        ("12500 cm^-1", 800.0),
        ("1.5498024804 eV", 800.0),
        ("2.354564459136066 rad/fs", 800.0),
        ("1 eV", 1239.841984332),
    ],
)
def test_places_on_the_spectrum_agree(text: str, nanometres: float) -> None:
    omega = 2 * math.pi * LIGHT / (nanometres * 1e-9)
    assert quantity(text, "spectral") == pytest.approx(omega, rel=1e-10)
    assert position(text).wavelength == pytest.approx(nanometres * 1e-9, rel=1e-10)
    assert position(text).axis == ("wavelength" if text.endswith("nm") else "frequency")


def test_widths_are_ordinary_unless_written_in_radians() -> None:
    assert quantity("1 GHz", "width") == 1e9
    assert quantity("1 rad/s", "width") == pytest.approx(1 / (2 * math.pi), rel=1e-15)
    assert quantity("1 cm^-1", "width") == pytest.approx(29979245800.0, rel=1e-15)
    assert quantity("1 eV", "width") == pytest.approx(2.417989242e14, rel=1e-9)  # CODATA eV-Hz relationship


def test_a_width_in_wavelength_is_the_distance_of_the_two_edges() -> None:
    width = spectral_width("200 nm")
    assert width.axis == "wavelength"
    f = LIGHT / 800e-9
    spread = width.about(2 * math.pi * f)
    assert LIGHT / (f - spread / 2) - LIGHT / (f + spread / 2) == pytest.approx(200e-9, rel=1e-13)
    assert spectral_width("12 THz").about(1.0) == 12e12


@pytest.mark.parametrize("kind", ["spectral", "width", "repetition_rate", "angular_frequency"])
@pytest.mark.parametrize("unit", ["1/s", "s^-1", "ps^-1"])
def test_a_bare_rate_is_refused(kind: str, unit: str) -> None:
    with pytest.raises(InputError, match="bare rate") as caught:
        quantity(f"5 {unit}", kind)
    assert "rad/s" in str(caught.value)
    assert "Hz" in str(caught.value)


@pytest.mark.parametrize(
    ("value", "kind", "parts"),
    [
        ("1,5 mm", "length", ["comma", "'1,5 mm'", 'Write "1.5 mm" with a point']),
        ("2 3 mm", "length", ["more than one number", "'2 3 mm'", "one number and one unit"]),
        ("1 mm + 2 mm", "length", ["more than one number"]),
        ("3 mm 2", "length", ["more than one number"]),
        ("1 - 2 mm", "length", ["more than one number"]),
        ("3", "length", ["unit is missing", '"3 mm"']),
        (3, "length", ["unit is missing", "got 3", '"3 mm"', "in quotes"]),
        (2.5, "temperature", ["unit is missing", '"22 degC"']),
        ("nan mm", "length", ["not finite"]),
        ("inf mm", "length", ["not finite"]),
        ("1e999 m", "length", ["not finite"]),
        (float("nan"), "fraction", ["not finite"]),
        ("3 s", "length", ["expected a length", "that of a time", '"3 mm"']),
        ("3 mm", "time", ["expected a time", "that of a length", '"30 fs"']),
        ("3 fs", "gdd", ["expected a group delay dispersion", "that of a time", '"-40 fs^2"']),
        ("5 nm", "width", ["that of a length", '"1 GHz"']),
        ("3 rad", "fraction", ["expected a share", "that of an angle"]),
        ("3 mn", "length", ['"mn" is not a unit', "spelling"]),
        ("3 fs2", "gdd", ['"fs2" is not a unit', '"fs^2"']),
        ("17 ps/nm km", "dispersion", ["not a unit", "parentheses"]),
        ("20 degF", "temperature", ["not a unit", '"22 degC"']),
        ("3 dB", "fraction", ["not a unit", '"0.5 %"']),
        ("1 mm^999", "length", ["not a unit"]),
        ("0 nm", "spectral", ["wavelength must be above zero"]),
        ("", "length", ["one number and its unit"]),
        ("mm", "length", ["one number and its unit"]),
        ("1.2.3 m", "length", ["one number and its unit"]),
        ("1 __import__('os')", "length", ["not a unit"]),
        (True, "fraction", ["expected a share", "True"]),
        ([1], "length", ["expected a length"]),
        ({"from": "1 mm"}, "length", ["expected a length", "from"]),
    ],
)
def test_what_is_refused_says_what_came_and_what_is_allowed(
    value: object, kind: str, parts: list[str]
) -> None:
    with pytest.raises(InputError) as caught:
        quantity(value, kind)
    message = str(caught.value)
    for part in [*parts, "Allowed: "]:
        assert part in message


@pytest.mark.parametrize("value", ["0 THz", "-800 nm", "-3 eV"])
def test_a_place_on_the_spectrum_lies_above_zero(value: str) -> None:
    with pytest.raises(InputError, match="above zero"):
        position(value)


plain_units = st.sampled_from(sorted(PLAIN) + sorted(set(OURS) - {"dB/m", "dB/km", "dB/cm", "dB/mm"}))
sizes = st.floats(min_value=1e-6, max_value=1e6)


def kind_of(unit: str) -> str:
    dimension = unit_from(unit).dimension
    return next(name for name, kind in KINDS.items() if dimension in kind.forms)


@given(value=sizes, unit=plain_units)
def test_text_to_si_and_back(value: float, unit: str) -> None:
    kind = kind_of(unit)
    si = quantity(f"{value!r} {unit}", kind)
    offset = unit_from(unit).offset
    assert from_si(si, unit, kind) == pytest.approx(value, rel=1e-14, abs=1e-13 * offset)
    assert to_si(value, unit, kind) == pytest.approx(si, rel=1e-14)


@given(value=sizes, unit=st.sampled_from(["nm", "THz", "cm^-1", "eV", "rad/fs"]))
def test_every_way_to_say_a_place_comes_back(value: float, unit: str) -> None:
    array = to_si(np.array([value, 2 * value]), unit, "spectral")
    assert from_si(array, unit, "spectral") == pytest.approx([value, 2 * value], rel=1e-13)


@given(text=st.text(max_size=12))
def test_any_text_is_a_number_or_an_input_error(text: str) -> None:
    try:
        value = quantity(text, "length")
    except InputError:
        return
    assert math.isfinite(value)


@given(
    value=st.floats(min_value=-1e5, max_value=1e5).filter(lambda v: abs(v) > 1e-3), digits=st.integers(1, 9)
)
def test_shown_numbers_keep_the_digits_asked_for(value: float, digits: int) -> None:
    shown = float(show(value * 1e-3, "mm", digits).split()[0])
    assert shown == pytest.approx(value, rel=0.5001 * 10 ** (1 - digits))


def test_shown_numbers_are_aligned_with_their_unit() -> None:
    assert show(36.1629e-27, "fs^2/mm") == "36.16 fs^2/mm"
    assert show(0.0005, "mm", 2) == "0.50 mm"
    assert show(0.0, "mm", 3) == "0 mm"
    assert show(9.9996e-3, "mm", 4) == "10.00 mm"
    assert show(1.6e22, "W", 2) == "1.6e+22 W"
    assert show(295.15, "degC") == "22.00 degC"
    assert show(2 * math.pi * LIGHT / 780.24e-9, "nm", 5, kind="spectral") == "780.24 nm"


def test_plain_units_do_not_load_the_units_library() -> None:
    code = (
        "import sys; from pulseprop.units import quantity; quantity('3 mm', 'length');"
        "quantity('22 degC', 'temperature');"
        "quantity('17 ps/(nm km)', 'dispersion'); assert 'pint' not in sys.modules"
    )
    subprocess.run([sys.executable, "-c", code], check=True)
