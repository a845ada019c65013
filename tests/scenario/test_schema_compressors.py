"""Compressors and mirrors of a scenario: what each needs, in SI, and what is refused."""

from __future__ import annotations

import math
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from pulseprop.elements.element import Element, orders_of_element
from pulseprop.errors import InputError
from pulseprop.scenario.build import build
from pulseprop.scenario.read import scenario_from

PULSE = {"shape": "gaussian", "centre": "800 nm", "duration": "30 fs"}
C = 299792458.0
CENTRE = 2 * np.pi * C / 800e-9
FS = 1e-15


def built(table: dict[str, Any], directory: Path = Path(), **pulse: Any) -> Element:
    document = {"pulse": {**PULSE, **pulse}, "path": [table]}
    return build(scenario_from(document, file="case.toml", directory=directory)).path.elements[0]


def gratings(**changed: Any) -> dict[str, Any]:
    return {
        "kind": "grating pair",
        "grooves": "600 /mm",
        "incidence": "20 deg",
        "separation": "10 mm",
        **changed,
    }


def test_gratings_in_si() -> None:
    found = built(gratings(order=-1, efficiency="94 %", width="50 mm"), beam_radius="2 mm")
    assert (found.grooves, found.separation, found.passes, found.width) == (600e3, 10e-3, 2, 50e-3)
    assert found.incidence == pytest.approx(math.radians(20), rel=1e-15)
    assert (found.efficiency, found.beam_radius, found.name) == (0.94, 2e-3, "grating pair 1")
    assert found.detail == "600 /mm, 20 deg, 10 mm apart, 2 passes"


def test_a_stretcher_has_the_opposite_sign() -> None:
    pair, stretcher = built(gratings()), built(gratings(kind="stretcher"))
    assert orders_of_element(stretcher, CENTRE)[1:] == pytest.approx(
        [-order for order in orders_of_element(pair, CENTRE)[1:]], rel=1e-14
    )


def test_prisms_in_si() -> None:
    found = built(
        {
            "kind": "prism pair",
            "medium": "SF10",
            "apex_separation": "30 cm",
            "insertion": "3 mm",
            "second_insertion": "5 mm",
            "apex_angle": "60.6 deg",
            "passes": 1,
        }
    )
    assert (found.apex_separation, found.insertion, found.second, found.passes) == (0.3, 3e-3, 5e-3, 1)
    assert found.apex == pytest.approx(math.radians(60.6), rel=1e-15)
    assert found.medium.name == "SF10"


def test_one_insertion_holds_for_both_prisms() -> None:
    table = {"kind": "prism pair", "medium": "SF10", "apex_separation": "30 cm", "insertion": "3 mm"}
    assert built(table).second == 3e-3


def test_grisms_in_si() -> None:
    found = built(
        {
            "kind": "grism pair",
            "medium": "fused silica",
            "grooves": "600 /mm",
            "apex_angle": "35 deg",
            "incidence": "-10 deg",
            "separation": "1 mm",
            "insertion": "3 mm",
        }
    )
    assert (found.separation, found.second, found.order) == (1e-3, 3e-3, -1)
    assert found.incidence == pytest.approx(math.radians(-10), rel=1e-15)


@pytest.mark.parametrize(
    ("y", "unit", "column"),
    [
        ("gdd", None, lambda x: -40 + 30 * x),
        ("gdd", "ps^2", lambda x: (-40 + 30 * x) * 1e-6),
        ("group_delay", None, lambda x: -40 * x + 15 * x**2 + 3),
        ("phase", None, lambda x: -20 * x**2 + 5 * x**3 + 3 * x - 1),
    ],
)
def test_a_table_of_a_mirror(tmp_path: Path, y: str, unit: str | None, column: Any) -> None:
    """Any of the three says -40 fs^2 and 30 fs^3 a bounce at 800 nm."""
    nanometres = np.linspace(650, 1000, 71)
    x = (2 * np.pi * C / (nanometres * 1e-9) - CENTRE) * FS
    rows = "\n".join(f"{nm:.6f},{value:.12g}" for nm, value in zip(nanometres, column(x), strict=True))
    (tmp_path / "mirror.csv").write_text(f"wavelength_nm,{y}\n{rows}\n", encoding="utf-8")
    table = {"file": "mirror.csv", "x_unit": "nm", "y": y} | ({"y_unit": unit} if unit else {})
    found = built({"kind": "chirped mirror", "table": table, "bounces": 4}, tmp_path)
    assert orders_of_element(found, CENTRE)[1:3] == pytest.approx((-160 * FS**2, 120 * FS**3), rel=1e-5)
    assert found.detail == "-40 fs^2 and 30 fs^3 a bounce at 800 nm; 4 bounces"
    assert 2e9 * np.pi * C / found.band.high == pytest.approx(650)


def test_the_sign_of_a_phase_is_that_of_the_file(tmp_path: Path) -> None:
    nanometres = np.linspace(650, 1000, 71)
    x = (2 * np.pi * C / (nanometres * 1e-9) - CENTRE) * FS
    rows = "\n".join(f"{nm:.6f},{-20 * value**2:.12g}" for nm, value in zip(nanometres, x, strict=True))
    (tmp_path / "mirror.csv").write_text(rows, encoding="utf-8")
    for sign in (1, -1):
        table = {"file": "mirror.csv", "x_unit": "nm", "y": "phase", "phase_sign": sign}
        found = built({"kind": "chirped mirror", "table": table}, tmp_path)
        assert orders_of_element(found, CENTRE)[1] == pytest.approx(-40 * sign * FS**2, rel=1e-5)


def test_a_pair_of_mirrors_in_turn() -> None:
    ripple = {"amplitude": "20 fs^2", "period": "30 THz", "phase": "90 deg"}
    found = built(
        {
            "kind": "chirped mirror",
            "pair": [{"gdd": "-40 fs^2", "ripple": ripple}, {"gdd": "-45 fs^2", "tod": "10 fs^3"}],
            "bounces": 3,
        }
    )
    # Of the ripple, 20 cos(x/30 THz + 90 deg), nothing stands at the centre.
    assert orders_of_element(found, CENTRE)[1] == pytest.approx(-255 * FS**2, rel=1e-9)
    assert found.detail.endswith("3 bounces off each")


def test_a_coating_of_repeated_films() -> None:
    films = [
        {
            "films": [
                {"medium": "high", "thickness": "89 nm"},
                {"medium": "fused silica", "thickness": "138 nm"},
            ],
            "times": 7,
        },
        {"medium": "high", "thickness": "89 nm"},
    ]
    document = {
        "pulse": PULSE,
        "medium": {"high": {"background": 2.25}},
        "path": [{"kind": "coating", "films": films, "substrate": "N-BK7", "bounces": 2}],
    }
    found = build(scenario_from(document)).path.elements[0]
    assert [film.thickness for film in found.films] == pytest.approx([89e-9, 138e-9] * 7 + [89e-9])
    assert {medium.name for medium in found.media} == {"high", "fused silica", "N-BK7"}
    assert found.share(np.array(CENTRE)) > 0.99


def test_a_gires_tournois_mirror_in_si() -> None:
    found = built(
        {
            "kind": "gires-tournois mirror",
            "medium": "fused silica",
            "thickness": "3 um",
            "front": "10 %",
            "bounces": 6,
        }
    )
    assert (found.thickness, found.front, found.back, found.bounces) == (3e-6, 0.1, 1.0, 6)


@pytest.mark.parametrize(
    ("table", "parts"),
    [
        (gratings(incidence="95 deg"), ["path.1.incidence", "below 90 deg"]),
        (gratings(order=0), ["path.1.order", "mirror"]),
        (gratings(passes=0), ["path.1.passes"]),
        (gratings(efficiency="0 %"), ["path.1.efficiency", "above 0"]),
        (gratings(separation="-1 mm"), ["path.1.separation", "0 m or more"]),
        (gratings(grooves="600 mm"), ["path.1.grooves", '"600 /mm"']),
        (gratings(width="20 mm"), ["path.1", "beam_radius"]),
        (gratings(grooves="2000 /mm", incidence="10 deg"), ["path.1", "36.97 deg"]),
        ({"kind": "prism pair", "apex_separation": "1 m"}, ["path.1.medium", "missing"]),
        (
            {"kind": "prism pair", "medium": "SF11x", "apex_separation": "1 m"},
            ["path.1.medium", "SF11"],
        ),
        (
            {"kind": "prism pair", "medium": "SF10", "apex_separation": "1 m", "apex_angle": "89 deg"},
            ["path.1", "at minimum deviation"],
        ),
        ({"kind": "chirped mirror"}, ["path.1", "nothing is said of a bounce"]),
        ({"kind": "chirped mirror", "gdd": "-40 fs^2", "bounces": -1}, ["path.1.bounces"]),
        (
            {"kind": "chirped mirror", "gdd": "-40 fs^2", "pair": [{"gdd": "1 fs^2"}, {"gdd": "2 fs^2"}]},
            ["path.1.gdd", "inside pair"],
        ),
        ({"kind": "chirped mirror", "pair": [{"gdd": "1 fs^2"}]}, ["path.1.pair"]),
        (
            {"kind": "chirped mirror", "table": {"file": "x", "x_unit": "nm", "y": "gdd", "phase_sign": -1}},
            ["path.1.table.phase_sign", "no sign to choose"],
        ),
        (
            {"kind": "chirped mirror", "table": {"file": "x", "x_unit": "nm", "y": "gdd", "y_unit": "fs"}},
            ["path.1.table.y_unit", "group delay dispersion"],
        ),
        ({"kind": "coating"}, ["path.1", "films, a substrate, or both"]),
        ({"kind": "coating", "films": [{"medium": "water"}]}, ["path.1.films.1", "no film"]),
        (
            {"kind": "coating", "substrate": "water", "incidence": "45 deg"},
            ["path.1.incidence", "polarisation"],
        ),
        (
            {"kind": "gires-tournois mirror", "medium": "water", "thickness": "3 um", "front": "100 %"},
            ["path.1", "front"],
        ),
    ],
)
def test_what_cannot_be_used_is_refused_with_its_place(table: dict[str, Any], parts: list[str]) -> None:
    with pytest.raises(InputError) as caught:
        built(table)
    for part in parts:
        assert part in str(caught.value)


def test_a_table_that_is_too_short_is_named(tmp_path: Path) -> None:
    (tmp_path / "mirror.csv").write_text("700 -40\n800 -40\n900 -40\n", encoding="utf-8")
    table = {"file": "mirror.csv", "x_unit": "nm", "y": "gdd"}
    with pytest.raises(InputError, match=r"mirror\.csv.*too few rows.*3 rows.*4 or more"):
        built({"kind": "chirped mirror", "table": table}, tmp_path)
