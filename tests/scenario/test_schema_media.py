"""Media of a scenario: every form, in SI, and what is refused.

17 ps/(nm km) at 1550 nm is -21.7 fs^2/mm: common practice, no source; by hand -17e-6 (1550e-9)^2 / (2 pi c) =
-2.16829e-26 s^2/m.
"""

from __future__ import annotations

import math
from typing import Any

import pytest

from pulseprop.errors import InputError
from pulseprop.scenario.read import scenario_from
from pulseprop.scenario.schema_formula import GasFormula, PoleFormula, PowerFormula, SellmeierFormula
from pulseprop.scenario.schema_medium import MediumTable

LIGHT = 299792458.0
LINE = {"centre": "780.24 nm", "width": "1 GHz", "peak_absorption": "12 cm^-1"}
FILE = {"file": "filter.csv", "x": "wavelength", "x_unit": "nm", "y": "absorbance", "path_length": "2 mm"}
FORMULA = {
    "kind": "sellmeier",
    "terms": [{"strength": 1.0, "resonance": "100 nm"}],
    "valid": ["300 nm", "2 um"],
}


def medium(**table: Any) -> MediumTable:
    pulse = {"shape": "gaussian", "centre": "800 nm", "duration": "30 fs"}
    return scenario_from({"pulse": pulse, "medium": {"m": table}}).content.medium["m"]


def refused(**table: Any) -> str:
    with pytest.raises(InputError) as caught:
        medium(**table)
    return str(caught.value)


def test_a_line_in_si() -> None:
    line = medium(lines=[LINE | {"doppler_width": "500 MHz"}]).lines[0]
    assert line.centre.omega == pytest.approx(2 * math.pi * LIGHT / 780.24e-9, rel=1e-14)
    assert (line.full_width, line.gaussian_width) == (1e9, 5e8)
    assert (line.strength_kind, line.peak_absorption) == ("peak_absorption", 1200.0)


@pytest.mark.parametrize(
    "width",
    [
        {"width": "1 GHz"},
        {"half_width": "0.5 GHz"},
        {"dephasing_time": f"{1e12 / (math.pi * 1e9)!r} ps"},
        {"width": f"{1e9 / LIGHT / 100!r} cm^-1"},
        {"width": f"{2 * math.pi * 1e9!r} rad/s"},
        {"width": "4.135667696923859e-6 eV"},
    ],
)
def test_all_ways_to_say_a_width_agree(width: dict[str, str]) -> None:
    table = {key: value for key, value in LINE.items() if key != "width"} | width
    assert medium(lines=[table]).lines[0].full_width == pytest.approx(1e9, rel=1e-9)


@pytest.mark.parametrize(
    ("strength", "value"),
    [
        ({"peak_absorption": "10 dB/m"}, math.log(10)),
        ({"integrated_absorption": "2 GHz/cm"}, 2e11),
        ({"integrated_absorption": "0.1 cm^-2"}, 1e3 * LIGHT),
        ({"oscillator_strength": 0.69, "number_density": "1e12 cm^-3"}, 0.69),
        ({"plasma_frequency": "1 THz"}, 2e12 * math.pi),
        ({"static_susceptibility": 2e-6}, 2e-6),
    ],
)
def test_all_strengths_of_a_line_are_read(strength: dict[str, Any], value: float) -> None:
    line = medium(lines=[{"centre": "384 THz", "width": "1 GHz"} | strength]).lines[0]
    assert line.strength_kind == next(iter(strength))
    assert getattr(line, line.strength_kind) == pytest.approx(value, rel=1e-12)


@pytest.mark.parametrize(
    ("line", "parts"),
    [
        ({"width": "0 GHz"}, ["medium.m.lines.1", "no width"]),
        ({"width": "-1 GHz"}, ["medium.m.lines.1.width", "negative"]),
        ({"width": "1 ns^-1"}, ["lines.1.width", "bare rate", "rad/s"]),
        ({"half_width": "1 GHz"}, ["lines.1.half_width", "exclude each other", "HWHM"]),
        ({"static_susceptibility": 1.0}, ["lines.1.static_susceptibility", "exclude each other"]),
        ({"number_density": "1 cm^-3"}, ["lines.1.number_density", "needs oscillator_strength"]),
        ({"centre": "0 THz"}, ["lines.1.centre", "above zero"]),
        ({"centre": "384 THz", "wavelength_in": "air"}, ["lines.1.wavelength_in", "the same in air"]),
        ({"extinction": "3 cm^-1"}, ["lines.1.extinction", "molar absorption"]),
    ],
)
def test_lines_that_contradict_themselves_are_refused(line: dict[str, Any], parts: list[str]) -> None:
    found = refused(lines=[LINE | line])
    for part in parts:
        assert part in found


def test_a_line_needs_one_width_and_one_strength() -> None:
    assert "one of width, half_width, dephasing_time is missing" in refused(
        lines=[{"centre": "1 THz", "static_susceptibility": 1.0}]
    )
    assert "one of peak_absorption" in refused(lines=[{"centre": "1 THz", "width": "1 GHz"}])
    assert "needs number_density" in refused(
        lines=[{"centre": "1 THz", "width": "1 GHz", "oscillator_strength": 0.5}]
    )
    gaussian = {"centre": "1 THz", "doppler_width": "1 GHz", "static_susceptibility": 1.0}
    assert medium(lines=[gaussian]).lines[0].full_width == 0.0


def test_relaxations_and_carriers_in_si() -> None:
    table = medium(
        relaxations=[{"static_susceptibility": 73.16, "time": "8.27 ps", "valid": ["0 THz", "1 THz"]}],
        carriers=[{"plasma_frequency": "9 rad/fs", "scattering_time": "10 fs"}],
    )
    assert table.relaxations[0].time == 8.27e-12
    assert table.relaxations[0].valid == (0.0, pytest.approx(2e12 * math.pi))
    assert table.carriers[0].plasma_frequency == 9e15
    assert table.carriers[0].scattering_time == 1e-14


def test_every_kind_of_formula() -> None:
    valid = {"valid": ["2.5 um", "300 nm"]}
    sellmeier = medium(
        formula=valid
        | {
            "kind": "sellmeier",
            "terms": [
                {"strength": 1.03961212, "resonance_squared": "0.00600069867 um^2"},
                {"strength": 1, "resonance": "100 nm"},
            ],
        }
    ).formula
    assert isinstance(sellmeier, SellmeierFormula)
    assert [term.squared for term in sellmeier.terms] == pytest.approx([0.00600069867, 0.01], rel=1e-14)
    assert sellmeier.valid == pytest.approx(
        (2 * math.pi * LIGHT / 2.5e-6, 2 * math.pi * LIGHT / 300e-9), rel=1e-14
    )
    gas = medium(
        formula=valid
        | {
            "kind": "gas",
            "terms": [
                {"strength": 0.05792105, "resonance": 238.0185},
                {"strength": "0.00167917 um^-2", "resonance": "57.362 um^-2"},
            ],
        }
    ).formula
    assert isinstance(gas, GasFormula)
    assert gas.terms[0].resonance == 238.0185
    assert gas.terms[1].resonance == pytest.approx(57.362, rel=1e-14)
    poles = medium(
        formula=valid | {"kind": "poles", "terms": [{"strength": 0.01, "resonance_squared": "0.02 um^2"}]}
    ).formula
    assert isinstance(poles, PoleFormula)
    assert poles.terms[0].strength == 0.01
    for kind in ("powers", "index powers"):
        powers = medium(formula=valid | {"kind": kind, "terms": [{"strength": -0.01, "power": 2}]}).formula
        assert isinstance(powers, PowerFormula)


@pytest.mark.parametrize(
    ("change", "parts"),
    [
        ({"kind": "1"}, ["medium.m.formula.kind", "'1'", '"sellmeier"', '"index powers"']),
        ({"terms": []}, ["formula.terms", "a list of 1 or more"]),
        (
            {"terms": [{"strength": 1.0}]},
            ["formula.terms.1", "one of resonance, resonance_squared is missing"],
        ),
        (
            {"terms": [{"strength": 1.0, "resonance": 0.1}]},
            ["terms.1.resonance", "unit is missing (got 0.1)"],
        ),
        ({"terms": [{"strength": 1.0, "resonance": "1 um^2"}]}, ["terms.1.resonance", "that of an area"]),
        (
            {"terms": [{"strength": "1", "resonance": "1 um"}]},
            ["terms.1.strength", "a number without a unit"],
        ),
        ({"terms": [{"strength": math.inf, "resonance": "1 um"}]}, ["terms.1.strength", "finite"]),
        ({"valid": ["300 nm"]}, ["formula.valid", "two ends", '["300 nm", "2.5 um"]']),
        ({"valid": ["300 nm", "300 nm"]}, ["formula.valid", "two different ends"]),
        ({"relative_to": "water"}, ["formula.relative_to", "'water'", '"air", "vacuum"']),
        ({"kind": "gas", "terms": [{"strength": 1, "resonance": -2}]}, ["terms.1.resonance", "above 0"]),
        ({"kind": "gas", "terms": [{"strength": 1, "resonance": "2 um"}]}, ["terms.1.resonance", "um^-2"]),
        ({"kind": "powers", "terms": [{"strength": 1.0, "power": 3}]}, ["terms.1.power", "even", "got 3"]),
    ],
)
def test_bad_formulas_are_refused(change: dict[str, Any], parts: list[str]) -> None:
    found = refused(formula=FORMULA | change)
    for part in parts:
        assert part in found


@pytest.mark.parametrize(
    ("change", "parts"),
    [
        ({"y": "extinction"}, ["absorption.y", "extinction means three things", "absorbance (decadic)"]),
        ({"y": "absorbence"}, ["absorption.y", 'Did you mean "absorbance"?']),
        ({"x_unit": "THz"}, ["absorption.x_unit", "does not belong to a wavelength (got 'THz')", '"nm"']),
        ({"x": "wavenumber"}, ["absorption.x_unit", "does not belong to a wavenumber", '"cm^-1"']),
        ({"x_unit": "furlongs2"}, ["absorption.x_unit", "not a unit (got 'furlongs2')"]),
        ({"y": "alpha"}, ["path_length has no meaning"]),
        ({"y": "molar"}, ["path_length has no meaning"]),
        ({"path_length": "2 s"}, ["absorption.path_length", "that of a time"]),
        ({"y_unit": "cm^-1"}, ["absorption.y_unit", "no such unit", "no y_unit"]),
        ({"concentration": "1 mmol/L"}, ["molar", "concentration", "belong together"]),
        ({"tails": {"above": "flat"}}, ["absorption.tails.above", '"matched", "none"']),
        ({"x": "frequency", "x_unit": "THz", "wavelength_in": "air"}, ["wavelength_in", "same in air"]),
    ],
)
def test_bad_absorption_tables_are_refused(change: dict[str, Any], parts: list[str]) -> None:
    found = refused(absorption=FILE | change)
    for part in parts:
        assert part in found


def test_what_an_absorption_needs_beside_it() -> None:
    bare = {key: value for key, value in FILE.items() if key != "path_length"}
    assert "needs path_length" in refused(absorption=bare)
    assert "needs y_unit" in refused(absorption=bare | {"y": "alpha"})
    assert "y_unit" in refused(absorption=bare | {"y": "alpha", "y_unit": "nm"})
    assert medium(absorption=bare | {"y": "alpha", "y_unit": "cm^-1"}).absorption is not None
    molar = bare | {"y": "molar", "y_unit": "L/(mol cm)", "concentration": "200 umol/L"}
    table = medium(background="ethanol", absorption=molar).absorption
    assert table is not None
    assert table.concentration == pytest.approx(0.2)
    assert medium(absorption=FILE | {"y": "transmittance", "y_unit": "%"}).absorption is not None
    assert "anchor needs absorption" in refused(background=1.5, anchor=[{"at": "1 um", "index": 1.5}])


def test_orders_from_a_fibre_sheet() -> None:
    sheet = {
        "at": "1550 nm",
        "index": 1.45,
        "dispersion": "17 ps/(nm km)",
        "dispersion_slope": "0.06 ps/(nm^2 km)",
    }
    orders = medium(orders=sheet).orders
    assert orders is not None
    assert orders.second_order == pytest.approx(-2.16829e-26, rel=1e-5)
    # By hand, (lambda^2 / 2 pi c)^2 (S + 2 D / lambda), lambda^2 / 2 pi c = 1.275462e-21 m s.
    assert orders.third_order == pytest.approx(1.275462e-21**2 * (60.0 + 2 * 17e-6 / 1550e-9), rel=1e-5)
    plain = medium(orders={"at": "1550 nm", "gvd": "-22 fs^2/mm", "tod": "90 fs^3/mm"}).orders
    assert plain is not None
    assert (plain.second_order, plain.third_order) == pytest.approx((-22e-27, 90e-42))


@pytest.mark.parametrize(
    ("table", "parts"),
    [
        ({}, ["medium.m", "says nothing", "background"]),
        ({"background": 1.5, "formula": FORMULA}, ["background and formula exclude each other"]),
        ({"background": 0.5}, ["medium.m.background", "1 or more"]),
        ({"backgroud": "air"}, ["medium.m.backgroud", 'mean "background"?']),
        ({"formula": FORMULA, "absolute": True}, ["medium.m.absolute", "relative_to"]),
        (
            {"orders": {"at": "1 um", "gvd": "1 fs^2/mm"}, "lines": [LINE]},
            ["medium.m.lines", "no causal response"],
        ),
        ({"orders": {"at": "1 um"}}, ["one of gvd, dispersion is missing"]),
        ({"orders": {"at": "1 um", "gvd": "1 fs^2"}}, ["orders.gvd", '"36 fs^2/mm"']),
        ({"gas": {"medium": "argon", "pressure": "1 bar"}}, ["gas.temperature", "missing"]),
        (
            {"gas": {"medium": "argon", "pressure": "0 bar", "temperature": "1 K"}},
            ["gas.pressure", "above 0"],
        ),
        (
            {"gas": {"medium": "argon", "pressure": "1 bar", "temperature": "-300 degC"}},
            ["gas.temperature", "above 0"],
        ),
        ({"mixture": [{"medium": "water", "fraction": 1.0}]}, ["medium.m.mixture", "a list of 2 or more"]),
        (
            {"mixture": [{"medium": "water", "fraction": 0.7}, {"medium": "x", "fraction": 0.2}]},
            ["medium.m.mixture", "add up to 1 (got '0.9')"],
        ),
        ({"background": 1.5, "rule": "bruggeman"}, ["medium.m.rule", "needs mixture"]),
        (
            {"mixture": [{"medium": n, "fraction": 1 / 3} for n in "abc"], "rule": "bruggeman"},
            ["medium.m.mixture", "takes two media (got '3 media')"],
        ),
        ({"background": 1.5, "kerr": {"n2": "3 m"}}, ["kerr.n2", '"2.6e-20 m^2/W"']),
        ({"lines_file": 3}, ["medium.m.lines_file", "expected a table"]),
    ],
)
def test_media_that_contradict_themselves_are_refused(table: dict[str, Any], parts: list[str]) -> None:
    found = refused(**table)
    for part in parts:
        assert part in found


def test_a_line_file_may_be_a_name_or_a_table() -> None:
    first = medium(lines_file="lines.csv").lines_file
    second = medium(lines_file={"file": "lines.csv", "wavelength_in": "air"}).lines_file
    assert first is not None
    assert second is not None
    assert (first.file, first.wavelength_in) == ("lines.csv", "vacuum")
    assert second.wavelength_in == "air"


def test_a_medium_tells_what_it_stands_on() -> None:
    assert medium(lines=[LINE]).base == ""
    assert medium(background="vacuum", lines=[LINE]).base == "background"
    assert medium(formula=FORMULA, lines=[LINE]).base == "formula"
