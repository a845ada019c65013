"""`compensate` held to its contract from outside: keys, figures, exit codes, files, bad input."""

from __future__ import annotations

import contextlib
import copy
import csv
import json
import math
import re
import subprocess
import sys
import tomllib
from html.parser import HTMLParser

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

import pulseprop
from pulseprop.errors import PulsepropError
from pulseprop.scenario.read import scenario_from

GLASS = '[[path]]\nkind = "slab"\nname = "glass"\nmedium = "fused silica"\nthickness = "10 mm"\n'
MIRRORS = """[[compensate.with]]
name = "mirrors"
kind = "chirped mirror"
gdd = "-40 fs^2"
bounces = { from = 0, to = 12, step = 2 }
"""
GRATINGS = """[[path]]
kind = "grating pair"
name = "gratings"
grooves = "300 /mm"
incidence = "10 deg"
separation = { from = "0.5 mm", to = "8 mm", now = "1 mm" }
"""
BEFORE = {
    "fwhm_fs", "peak_ratio", "two_photon_ratio", "transmission", "residual_gdd_fs2", "residual_tod_fs3",
    "residual_fod_fs4", "in_place",
}  # fmt: skip


@pytest.fixture
def compensated(scenario, command):
    """compensated(path, *options, code=0, **pulse) -> the JSON document of `compensate --json -`."""

    def ask(path: str, *options: str, code: int = 0, **pulse: str):
        told = command("compensate", scenario(path, **pulse), "--json", "-", *options)
        assert told.code == code, told.err
        return told.json

    return ask


@pytest.fixture
def turned_down(scenario, command):
    """turned_down(path, *options, code=2) -> the message; nothing may stand on standard output."""

    def ask(path: str, *options: str, code: int = 2) -> str:
        told = command("compensate", scenario(path), "--json", "-", *options)
        assert (told.code, told.out) == (code, "")
        assert "Traceback" not in told.err
        assert "fault of the program" not in told.err
        return told.err

    return ask


def numbers(value: object, path: str = "") -> list[tuple[str, float]]:
    if isinstance(value, dict):
        return [found for key, one in value.items() for found in numbers(one, f"{path}.{key}")]
    if isinstance(value, list):
        return [found for at, one in enumerate(value, 1) for found in numbers(one, f"{path}.{at}")]
    return [(path, value)] if isinstance(value, float) else []


def test_every_key_of_the_contract_is_there_with_its_type(compensated):
    answer = compensated(GLASS + MIRRORS)
    assert type(answer["transform_limit_fwhm_fs"]) is float
    assert set(answer["before"]) >= BEFORE
    design = answer["designs"][0]
    for key in ("fwhm_fs", "peak_ratio", "transmission", "residual_gdd_fs2", "residual_tod_fs3"):
        assert type(design[key]) is float, key
    (setting,) = design["settings"]
    assert set(setting) >= {"element", "parameter", "value", "unit", "move"}
    assert (setting["element"], setting["parameter"], setting["unit"]) == ("mirrors", "bounces", "")
    assert design["tolerance"]
    assert set(design["tolerance"][0]) >= {"element", "parameter", "unit", "below", "above"}
    assert answer["target"]["reached"] is True
    assert all({"code", "text"} <= set(caution) for caution in answer["cautions"])
    assert all(math.isfinite(number) for _, number in numbers(answer))


def test_ten_millimetres_of_silica_ask_for_eight_bounces(compensated):
    """GVD of fused silica at 800 nm: 36.162 fs^2/mm (I. H. Malitson 1965): eight or nine bounces null it,
    and only even numbers are allowed."""
    answer = compensated(GLASS + MIRRORS)
    assert answer["before"]["residual_gdd_fs2"] == pytest.approx(361.62, abs=0.01)
    bounces = answer["designs"][0]["settings"][0]["value"]
    assert bounces in (8, 10)
    left = answer["designs"][0]["residual_gdd_fs2"]
    assert left == pytest.approx(361.62 - 40 * bounces, abs=0.01)


def test_a_separation_is_a_move_from_today(compensated):
    """300 /mm, 10 deg, 800 nm: -82.142 fs^2 for each millimetre and pass (E. B. Treacy 1969, own
    computation in 40 digits); two passes of 361.62 / 164.28 = 2.201 mm null the GDD, and the highest peak
    lies near."""
    answer = compensated(GLASS + GRATINGS, pulse='duration = "60 fs"')
    (setting,) = answer["designs"][0]["settings"]
    assert setting["value"] == pytest.approx(2.201, abs=0.01)
    assert setting["move"] == pytest.approx(setting["value"] - 1.0, abs=1e-9)
    assert setting["unit"] == "mm"


def test_a_target_out_of_reach_is_a_no_and_names_the_nearest_miss(compensated, scenario, command):
    few = MIRRORS.replace("to = 12", "to = 2") + '[compensate]\ngoal = "duration"\ntarget = "30.5 fs"\n'
    few = "[compensate]\n" + few.split("[compensate]\n")[1] + few.split("[compensate]\n")[0]
    answer = compensated(GLASS + few, code=1)
    target = answer["target"]
    assert target["reached"] is False
    assert target["nearest"] == pytest.approx(answer["designs"][0]["fwhm_fs"])
    assert target["nearest"] > 30.5
    assert any("bounces at its high limit" in limit for limit in target["limits"])
    told = command("compensate", scenario(GLASS + few))
    assert told.code == 1
    assert "is not reached: the nearest design has" in told.out


def test_what_is_kept_is_not_touched(compensated, turned_down):
    kept = GLASS.replace('"10 mm"', '{ from = "1 mm", to = "10 mm", now = "5 mm" }') + "keep = true\n"
    assert "nothing to set" in turned_down(kept)
    answer = compensated(kept + MIRRORS)
    assert {one["element"] for one in answer["designs"][0]["settings"]} <= {"mirrors"}
    assert answer["before"]["residual_gdd_fs2"] == pytest.approx(5 * 36.162, abs=0.01)


def test_a_thinner_window_says_that_strength_is_not_considered(compensated):
    thin = GLASS.replace('"10 mm"', '{ from = "1 mm", to = "10 mm", now = "5 mm" }')
    listed = GLASS.replace('"10 mm"', '{ choices = ["1 mm", "3 mm", "5 mm"], now = "5 mm" }')
    for path in (thin, listed):
        design = compensated(path)["designs"][0]
        assert design["settings"][0]["value"] == pytest.approx(1.0)
        assert any("mechanical strength is not considered" in text for text in design["cautions"])


def test_places(compensated, turned_down):
    after = MIRRORS.replace("kind =", 'place = "after:glass"\nkind =')
    answer = compensated(GLASS + GLASS.replace('"glass"', '"second"') + after)
    assert [row["name"] for row in answer["build_sheet"]] == ["glass", "mirrors", "second"]
    start = compensated(GLASS + MIRRORS.replace("kind =", 'place = "start"\nkind ='))
    assert [row["name"] for row in start["build_sheet"]] == ["mirrors", "glass"]
    assert "no element of the path has this name" in turned_down(
        GLASS + MIRRORS.replace("kind =", 'place = "after:glas"\nkind =')
    )


def test_overrides_reach_ranges(compensated):
    held = compensated(GLASS + GRATINGS + MIRRORS, "--set", 'path.gratings.separation="2 mm"')
    assert {one["element"] for one in held["designs"][0]["settings"]} <= {"mirrors"}
    less = compensated(GLASS + GRATINGS, "--set", 'path.gratings.separation.to="1.5 mm"')
    (setting,) = less["designs"][0]["settings"]
    assert (setting["value"], setting["at_limit"]) == (pytest.approx(1.5), "high")


def test_standard_output_holds_one_document_and_the_same_twice(scenario):
    file = scenario(GLASS + GRATINGS + MIRRORS)
    call = [sys.executable, "-m", "pulseprop", "compensate", str(file), "--json", "-"]
    first, second = (subprocess.run(call, capture_output=True, check=True) for _ in range(2))
    assert first.stdout == second.stdout
    json.loads(first.stdout)
    assert b"caution [laser-radiation]" in first.stderr


class _Page(HTMLParser):
    def __init__(self) -> None:
        super().__init__()
        self.open: list[str] = []
        self.ids: list[str] = []
        self.fetched: list[str] = []

    def handle_starttag(self, tag: str, attributes: list[tuple[str, str | None]]) -> None:
        named = dict(attributes)
        self.ids += [value for key, value in attributes if key == "id" and value]
        self.fetched += [value or "" for key, value in named.items() if key == "src"]
        if tag not in ("meta", "br", "link", "hr", "img", "input", "rect", "path", "use"):
            self.open.append(tag)

    def handle_endtag(self, tag: str) -> None:
        if tag in self.open:
            while self.open.pop() != tag:
                pass


def test_page_figures_and_tables(scenario, command, tmp_path):
    ordered = """[[compensate.with]]
name = "to order"
kind = "chirped mirror"
gdd = { from = "-80 fs^2", to = "0 fs^2" }
tod = { from = "-90 fs^3", to = "90 fs^3" }
bounces = 8
"""
    page, folder = tmp_path / "page.html", tmp_path / "figures"
    told = command("compensate", scenario(GLASS + ordered), "--page", page, "--figures", folder)
    assert told.code == 0, told.err
    read = _Page()
    read.feed(page.read_text(encoding="utf-8"))
    assert read.open == []
    assert read.fetched == []
    assert len(read.ids) == len(set(read.ids))
    assert {"designs", "design-1", "order", "build", "hazards", "figure-mirror-order"} <= set(read.ids)
    names = {path.name for path in folder.iterdir()}
    for name in ("compensated", "residual-phase", "mirror-order", "budget", "autocorrelation"):
        assert {f"{name}.png", f"{name}.svg", f"{name}.csv"} <= names
    with (folder / "mirror-order.csv").open(encoding="utf-8") as stream:
        rows = list(csv.DictReader(stream))
    assert all(
        float(row["lowest_gdd_fs2"]) < float(row["target_gdd_fs2"]) < float(row["highest_gdd_fs2"])
        for row in rows
    )
    sheet = (folder / "order-sheet.csv").read_text(encoding="utf-8")
    assert "bounces,8" in sheet
    assert all(len(line) <= 108 for line in told.out.splitlines())


WORDS_OF_OTHERS = ("knob", "corner", "pricing", "dual", "exchange", "strain", "witness", "impossible")


def test_words_of_the_report(scenario, command):
    out = command("compensate", scenario(GLASS + GRATINGS + MIRRORS)).out.lower()
    for word in (*WORDS_OF_OTHERS, "safe"):
        assert not re.search(rf"\b{word}\b", out), word
    assert "laser safety officer" in out
    assert "zero order of each grating" in out


GOOD = tomllib.loads(
    '[pulse]\nshape = "gaussian"\ncentre = "800 nm"\nduration = "40 fs"\n'
    + GLASS + GRATINGS + MIRRORS + '[grid]\npoints = 4096\nspan = "4 ps"\n'
)  # fmt: skip
GARBAGE = st.one_of(
    st.sampled_from(
        [
            "",
            "1",
            "-3 mm",
            "3 kg",
            "0 mm",
            "1e400 mm",
            "nan mm",
            "slab",
            "air",
            "0 deg",
            "90 deg",
            "1e-30 mm",
            [],
        ]
    ),
    st.integers(-5, 40),
    st.floats(allow_nan=False, width=32),
    st.booleans(),
    st.fixed_dictionaries(
        {"from": st.sampled_from(["1 mm", 0, "2 fs", "9 mm"]), "to": st.sampled_from(["3 mm", 4])}
    ),
    st.lists(st.sampled_from(["1 mm", "2 mm", "fused silica", 3]), max_size=3),
)


def places(value: object, path: tuple[str | int, ...] = ()) -> list[tuple[str | int, ...]]:
    found = [path] if path else []
    if isinstance(value, dict):
        found += [more for key, one in value.items() for more in places(one, (*path, key))]
    if isinstance(value, list):
        found += [more for at, one in enumerate(value) for more in places(one, (*path, at))]
    return found


@settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(place=st.sampled_from(places(GOOD)), value=GARBAGE)
def test_no_scenario_ends_in_a_traceback(place, value):
    document = copy.deepcopy(GOOD)
    holder = document
    for step in place[:-1]:
        holder = holder[step]
    holder[place[-1]] = value
    with contextlib.suppress(PulsepropError):
        answer = pulseprop.compensate(scenario_from(document, file="made up.toml"))
        assert all(math.isfinite(number) for _, number in numbers(answer.as_json()))
