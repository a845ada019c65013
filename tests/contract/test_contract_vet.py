"""The contract of `vet`, asked from outside on tables of known matter.

Fused silica: I. H. Malitson, J. Opt. Soc. Am. 55, 1205 (1965); GVD and group index from the second and first
derivative of the printed formula, with 40 digits.
"""

from __future__ import annotations

import json
import math
from functools import cache
from pathlib import Path

import mpmath
import pytest

SHEETS = Path(__file__).parents[2] / "scenarios" / "sheets"
LIGHT = 299.792458
SILICA = [(0.6961663, 0.0684043), (0.4079426, 0.1162414), (0.8974794, 9.896161)]
DISPLACED = 14
"""Row of the table with a wrong digit, and the error put there."""
WRONG = 2.0e-3


@cache
def silica(wavelength_nm: float, order: int = 0) -> float:
    """d^order n / d lambda^order, lambda in nm."""

    def index(nm):
        square = (nm / 1000) ** 2
        return mpmath.sqrt(1 + sum(s * square / (square - r**2) for s, r in SILICA))

    with mpmath.workdps(40):
        return float(mpmath.diff(index, mpmath.mpf(wavelength_nm), order))


def gvd(wavelength_nm: float) -> float:
    """fs^2/mm: lambda^3 / (2 pi c^2) n''."""
    return wavelength_nm**3 / (2 * math.pi * LIGHT**2) * silica(wavelength_nm, 2) * 1e6


@pytest.fixture
def table(tmp_path):
    """table(wrong=0) writes fused silica from 400 nm to 1200 nm to five decimals."""

    def write(name="silica.csv", wrong: float = 0.0, step: int = 20):
        rows = [(nm, silica(nm)) for nm in range(400, 1201, step)]
        lines = [
            f"{nm},{index + (wrong if line == DISPLACED else 0.0):.5f}"
            for line, (nm, index) in enumerate(rows, start=2)
        ]
        path = tmp_path / name
        path.write_text("wavelength_nm,n\n" + "\n".join(lines) + "\n", encoding="utf-8")
        return path

    return write


@pytest.fixture
def vetted(command):
    """vetted(path, *options, code=0) -> the JSON document."""

    def ask(*arguments, code=0):
        told = command("vet", *arguments, "--json", "-")
        assert told.code == code, told.err
        return json.loads(told.out, parse_constant=lambda name: pytest.fail(f"{name} is no JSON"))

    return ask


KEYS = {
    "verdict": str, "uncertainty_factor": float, "implied_uncertainty": dict, "conflict": list,
    "bounds": list, "requirements": list, "findings": list,
}  # fmt: skip


def holds_the_contract(answer) -> None:
    for key, kind in KEYS.items():
        assert isinstance(answer[key], kind | type(None)), key
    assert answer["verdict"] in ("consistent", "contradictory", "doubtful")
    assert {"n", "k"} <= set(answer["implied_uncertainty"])
    for entry in answer["conflict"]:
        assert {"row", "wavelength_nm", "quantity", "weight"} <= set(entry)
        assert entry["quantity"] in ("n", "k")
    for entry in answer["bounds"]:
        assert {"wavelength_nm", "index", "group_index", "gvd_fs2_per_mm"} <= set(entry)
        intervals = [entry[key] for key in ("index", "group_index", "gvd_fs2_per_mm")]
        for interval in intervals:
            assert interval is None or (len(interval) == 2 and interval[0] <= interval[1])
        assert all(intervals) or entry["reason"]
    for entry in answer["requirements"]:
        assert {"text", "verdict", "bounds"} <= set(entry)
        assert entry["verdict"] in ("conforming", "not conforming", "not decided")
        assert entry["bounds"] or entry["reason"]
    for entry in answer["findings"]:
        assert {"code", "severity", "text", "rows"} <= set(entry)
        assert entry["severity"] in ("error", "warning", "note")


def test_bounds_hold_the_known_material(vetted, table):
    answer = vetted(table(), "--uncertainty", "n=1e-5", "--at", "800 nm")
    holds_the_contract(answer)
    assert answer["verdict"] == "consistent"
    assert answer["uncertainty_factor"] <= 1
    assert answer["conflict"] == []
    (bounds,) = answer["bounds"]
    assert bounds["wavelength_nm"] == pytest.approx(800)
    group = silica(800) - 800 * silica(800, 1)
    for key, true in (("index", silica(800)), ("group_index", group), ("gvd_fs2_per_mm", gvd(800))):
        assert bounds[key][0] <= true <= bounds[key][1], key


def test_the_conflict_gives_the_factor_by_pocket_calculator(vetted, table):
    error = 2e-5
    path = table(wrong=WRONG)
    answer = vetted(path, "--uncertainty", f"n={error}", code=1)
    holds_the_contract(answer)
    assert answer["verdict"] == "contradictory"
    printed = path.read_text(encoding="utf-8").splitlines()
    conflict = answer["conflict"]
    assert sum(abs(entry["weight"]) for entry in conflict) == pytest.approx(1, abs=1e-9)
    assert max(conflict, key=lambda entry: abs(entry["weight"]))["row"] == DISPLACED
    total = 0.0
    for entry in conflict:
        wavelength, value = printed[entry["row"] - 1].split(",")
        assert float(wavelength) == pytest.approx(entry["wavelength_nm"], rel=1e-12)
        total += entry["weight"] * (float(value) - 1)
    assert total / error == pytest.approx(answer["uncertainty_factor"], rel=2e-3)
    # The true material is of the class: weights on its exact values give at most 0.
    true = sum(entry["weight"] * (silica(entry["wavelength_nm"]) - 1) for entry in conflict)
    assert true <= 1e-12
    assert answer["factor_without_conflict_rows"] < 1


def test_the_printed_table_gives_the_factor_too(command, table):
    told = command("vet", table(wrong=WRONG), "--uncertainty", "n=2e-5")
    lines = told.out.splitlines()
    start = next(at for at, line in enumerate(lines) if line.startswith("row  wavelength"))
    total = size = 0.0
    for line in lines[start + 3 :]:
        if not line:
            break
        value, error, weight = map(float, line.split()[3:])
        total += weight * (value - 1)
        size += abs(weight) * error
    (said,) = (line for line in lines if line.startswith("Uncertainty factor: "))
    factor = float(said.split(": ")[1].split(". ")[0])
    assert total / size == pytest.approx(factor, rel=0.02)


def test_without_a_stated_uncertainty_the_implied_one_leads(vetted, table):
    answer = vetted(table(wrong=WRONG))
    holds_the_contract(answer)
    assert answer["verdict"] == "doubtful"
    assert answer["implied_uncertainty"]["n"] == pytest.approx(WRONG / 2, rel=0.2)
    assert any(DISPLACED in finding["rows"] for finding in answer["findings"])
    vetted(table(wrong=WRONG), "--strict", code=1)


def test_requirements_are_met_not_met_or_open(vetted, table):
    limits = {
        "gvd at 800 nm = 36.2 +- 2 fs^2/mm": "conforming",
        "gvd at 800 nm >= 40 fs^2/mm": "not conforming",
        f"index at 800 nm <= {silica(800):.9f}": "not decided",
        "gvd at 2000 nm <= 0 fs^2/mm": "not decided",
    }
    options = [word for text in limits for word in ("--require", text)]
    answer = vetted(table(), "--uncertainty", "n=1e-5", *options, code=1)
    holds_the_contract(answer)
    assert {entry["text"]: entry["verdict"] for entry in answer["requirements"]} == limits
    outside = answer["requirements"][-1]
    assert outside["bounds"] is None
    assert outside["reason"]
    first = next(iter(limits))
    vetted(table(), "--uncertainty", "n=1e-5", "--require", first)


def test_no_bounds_near_an_end_and_the_reason(vetted, table):
    answer = vetted(table(), "--uncertainty", "n=1e-5", "--at", "400 nm", "--at", "3 um")
    for entry in answer["bounds"]:
        assert entry["gvd_fs2_per_mm"] is None
        assert entry["reason"]


def test_several_tables_are_one_document(command, table):
    told = command("vet", table(), table("b.csv", WRONG), "--uncertainty", "n=1e-5", "--json", "-")
    assert told.code == 1
    document = json.loads(told.out)
    assert set(document) == {"verdict", "tables"}
    assert document["verdict"] == "contradictory"
    assert [entry["verdict"] for entry in document["tables"]] == ["consistent", "contradictory"]
    for entry in document["tables"]:
        holds_the_contract(entry)


@pytest.mark.parametrize(
    ("sheet", "options", "code", "verdict"),
    [
        ("window_lot.csv", ["--uncertainty", "n=1e-4"], 0, "consistent"),
        ("flint_lot.tsv", ["--uncertainty", "n=2e-5"], 1, "contradictory"),
        ("mirror_lot.xlsx", ["--require", "gdd at 800 nm = -40 +- 10 fs^2"], 0, "consistent"),
        ("green_filter.jdx", [], 0, "consistent"),
        ("dye_cell.txt", ["--thickness", "1 mm", "--ceiling", "2.8"], 0, "consistent"),
        ("crown_certificate.toml", [], 1, "contradictory"),
        ("crown_formula.toml", ["--strict"], 1, "doubtful"),
    ],
)
def test_every_kind_of_sheet(vetted, sheet, options, code, verdict):
    answer = vetted(SHEETS / sheet, *options, code=code)
    holds_the_contract(answer)
    assert answer["verdict"] == verdict


def test_planted_faults_are_named(vetted):
    flint = vetted(SHEETS / "flint_lot.tsv", "--uncertainty", "n=2e-5", code=1)
    assert any("1.68496" in (finding["repair"] or "") for finding in flint["findings"])
    formula = vetted(SHEETS / "crown_formula.toml")
    assert any("length (um), not its square" in (finding["repair"] or "") for finding in formula["findings"])
    certificate = vetted(SHEETS / "crown_certificate.toml", code=1)
    assert any(
        "1064 nm" in finding["text"] and "800 nm" in finding["text"] for finding in certificate["findings"]
    )


def test_anchors_bound_the_index_of_an_absorber(vetted):
    """Green filter of an invented host: two anchors of one smooth index hold what lies between them."""
    anchors = ["--anchor", "1.5230 +- 0.0002 at 589.3 nm", "--anchor", "1.5180 +- 0.0002 at 880 nm"]
    answer = vetted(SHEETS / "green_filter.jdx", "--at", "800 nm", *anchors)
    low, high = answer["bounds"][0]["index"]
    assert 1.51 < low < high < 1.53
    alone = vetted(SHEETS / "green_filter.jdx", "--at", "800 nm")
    assert alone["bounds"][0]["index"] is None
    assert alone["bounds"][0]["reason"]


def test_a_page_and_figures_stand_alone(command, table, tmp_path):
    page, figures = tmp_path / "page.html", tmp_path / "figures"
    told = command(
        "vet", table(wrong=WRONG), SHEETS / "mirror_lot.xlsx", "--uncertainty", "n=2e-5", "--page", page,
        "--figures", figures, "--json", tmp_path / "answer.json",
    )  # fmt: skip
    assert (told.code, told.out) == (1, "")
    text = page.read_text(encoding="utf-8")
    assert len(text) < 1_000_000
    for foreign in ("http://", "https://", "src=", "@import", "url(//"):
        assert foreign not in text.replace("http://www.w3.org/", "")
    names = {f"table-{number}.{ending}" for number in (1, 2) for ending in ("png", "svg", "csv")}
    assert {file.name for file in figures.iterdir()} == names
    json.loads((tmp_path / "answer.json").read_text(encoding="utf-8"))


@pytest.mark.parametrize(
    ("arguments", "parts"),
    [
        (["--at", "blue"], ["--at", "blue"]),
        (["--require", "shininess at 800 nm >= 3"], ["shininess", "gvd"]),
        (["--uncertainty", "n=lots"], ["lots"]),
        (["--anchor", "1.5 at 800 nm"], ["--anchor", "+-"]),
        (["--transparent", "300 nm"], ["--transparent", "300 nm to 2.5 um"]),
        (["--density", "2.2 g/cm^3"], ["--composition"]),
        (["--composition", "Xx2", "--density", "2.2 g/cm^3"], ["Xx"]),
        (["--columns", "wavelength,shine"], ["shine"]),
        (["--unit", "kilogram"], ["kilogram"]),
        (["--medium", "unobtainium"], ["unobtainium"]),
        (["--resolution", "thin"], ["thin"]),
        (["--ceiling", "high"], ["ceiling"]),
        (["--relative-to", "water"], ["air"]),
    ],
)
def test_options_that_cannot_be_used(command, table, arguments, parts):
    told = command("vet", table(), *arguments, "--json", "-")
    assert (told.code, told.out) == (2, "")
    for part in parts:
        assert part in told.err


def test_files_that_cannot_be_used(command, tmp_path):
    words = tmp_path / "words.csv"
    words.write_text("nothing here\n", encoding="utf-8")
    for path in (words, tmp_path / "missing.csv", tmp_path):
        told = command("vet", path)
        assert told.code == 2
        assert path.name in told.err
    told = command("vet", words, "--page", words)
    assert told.code == 2


def test_python_gives_the_same(vetted, table):
    import pulseprop as pp

    path = table()
    (answer,) = pp.vet(str(path), uncertainty="n=1e-5", at="800 nm")
    assert answer.as_json() is not None
    document = vetted(path, "--uncertainty", "n=1e-5", "--at", "800 nm")
    assert json.loads(json.dumps(answer.as_json())) == document
    with pytest.raises(pp.InputError, match="no such option"):
        pp.vet(str(path), colour="red")
