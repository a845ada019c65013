"""The command line as a user meets it: answers, exit codes, and one message where something is wrong."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from dataclasses import replace
from pathlib import Path

import pytest

import pulseprop
from pulseprop import api, cli
from pulseprop.errors import NumericalLimit
from pulseprop.propagation.result import Run

SCENARIO = """
title = "invented window"
question = "How long is a 12 fs pulse behind 3 mm of glass?"
note = "Invented laboratory, invented data."
[pulse]
shape = "gaussian"
centre = "800 nm"
duration = "12 fs"
energy = "5 nJ"
[[path]]
name = "cold window"
kind = "slab"
medium = "fused silica"
thickness = "3 mm"
"""


@pytest.fixture(scope="module")
def scenario(tmp_path_factory: pytest.TempPathFactory) -> str:
    path = tmp_path_factory.mktemp("laboratory") / "window.toml"
    path.write_text(SCENARIO)
    return str(path)


@pytest.fixture(scope="module")
def answer(scenario: str) -> Run:
    return api.send(scenario)


def called(*arguments: str) -> int:
    with pytest.raises(SystemExit) as left:
        cli.main(arguments)
    code = left.value.code
    assert isinstance(code, int)
    return code


def test_json_is_one_document_and_nothing_else(scenario: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert called("send", scenario, "--json", "-") == 0
    told = capsys.readouterr()
    document = json.loads(told.out)
    # 3 mm of fused silica at 36.16 fs^2/mm (Malitson 1965) make 108.5 fs^2, and by the closed form 27.8 fs.
    assert document["path"]["gdd_fs2"] == pytest.approx(108.48, abs=0.05)
    assert document["pulse_out"]["fwhm_fs"] == pytest.approx(27.8, abs=0.2)
    assert "caution [laser-radiation]" in told.err


def test_a_person_gets_the_answer_first(scenario: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert called("send", scenario) == 0
    told = capsys.readouterr()
    assert " fs " in told.out.splitlines()[0]
    assert "DISPERSION BUDGET" in told.out
    assert "[laser-radiation]" in told.err


def test_values_are_set_by_number_and_by_name(scenario: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert called("send", scenario, "--json", "-", "--set", "path.1.thickness=6 mm") == 0
    by_number = json.loads(capsys.readouterr().out)
    assert called("send", scenario, "--json", "-", "--set", "path.cold window.thickness=6 mm") == 0
    by_name = json.loads(capsys.readouterr().out)
    assert by_number["path"] == by_name["path"]
    assert by_number["path"]["gdd_fs2"] == pytest.approx(2 * 108.48, abs=0.1)


def test_all_outputs_at_once(scenario: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    outputs = ["--json", "a.json", "--save", "a.nc", "--page", "a.html", "--figures", "slides"]
    named = [str(tmp_path / word) if not word.startswith("--") else word for word in outputs]
    assert called("send", scenario, *named) == 0
    assert capsys.readouterr().out == ""
    assert json.loads((tmp_path / "a.json").read_text())["scenario"] == "invented window"
    assert (tmp_path / "a.nc").read_bytes()[:4] == b"\x89HDF"
    assert (tmp_path / "a.html").read_text().startswith("<!DOCTYPE html>")
    assert "Index and group-velocity dispersion" in (tmp_path / "a.html").read_text()
    assert {"pulse.png", "media.svg", "susceptibility.svg", "budget.csv"} <= {
        path.name for path in (tmp_path / "slides").iterdir()
    }
    assert {path.name for path in tmp_path.iterdir()} == {"a.json", "a.nc", "a.html", "slides"}


def test_an_acausal_answer_leaves_with_one(
    answer: Run, scenario: str, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    acausal = replace(answer, causality=replace(answer.causality, verdict="acausal"))
    monkeypatch.setattr(api, "send", lambda *given, **named: acausal)
    assert called("send", scenario) == 1
    assert "Acausal" in capsys.readouterr().out
    unresolved = replace(answer, causality=replace(answer.causality, verdict="unresolved"))
    monkeypatch.setattr(api, "send", lambda *given, **named: unresolved)
    assert called("send", scenario) == 0


@pytest.mark.parametrize(
    ("arguments", "parts"),
    [
        (["send", "missing.toml"], ["missing.toml", "no such file"]),
        (["send"], ["Missing argument", "pulseprop send --help"]),
        (["send", "x.toml", "--jsn", "-"], ["No such option", "--json"]),
        (["send", "x.toml", "--page", "-"], ["only --json can go to standard output"]),
        (["send", "x.toml", "--figures", "/nowhere/slides"], ["/nowhere/slides", "no directory"]),
        (["fly"], ["No such command"]),
        (["media", "unobtainium"], ["unobtainium", "pulseprop media"]),
        (["media", "fused silica", "--at", "800"], ["unit", "800"]),
        (["media", "fused silica", "--at", "9 um"], ["9000 nm", "210 nm to 3710 nm"]),
        (["media", "--at", "800 nm"], ["name of a medium"]),
        (["media", "fused silica", "--figure", "x.bmp"], [".png or .svg"]),
        (["media", "fused silica", "--json", "/nowhere/x.json"], ["/nowhere/x.json", "no directory"]),
    ],
)
def test_bad_input_is_one_message_and_exit_code_two(
    arguments: list[str], parts: list[str], capsys: pytest.CaptureFixture[str]
) -> None:
    assert called(*arguments) == 2
    told = capsys.readouterr()
    assert told.out == ""
    assert told.err.startswith("pulseprop: ")
    assert "Traceback" not in told.err
    for part in parts:
        assert part in told.err


def test_a_wrong_value_is_told_with_file_and_place(scenario: str, capsys: pytest.CaptureFixture[str]) -> None:
    assert called("send", scenario, "--set", "path.1.thickness=-3 mm") == 2
    told = capsys.readouterr().err
    assert "-3 mm" in told
    assert "thickness" in told


def test_outputs_are_checked_before_the_work(
    scenario: str, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
) -> None:
    monkeypatch.setattr(api, "send", lambda *given, **named: pytest.fail("the work began"))
    assert called("send", scenario, "--page", "/nowhere/report.html") == 2
    assert "/nowhere/report.html" in capsys.readouterr().err


@pytest.mark.parametrize(
    ("failure", "code", "part"),
    [
        (NumericalLimit("the grid does not fit", remedy="Raise grid.memory"), 3, "Raise grid.memory"),
        (ZeroDivisionError("division by zero"), 3, "ZeroDivisionError: division by zero. This is a fault"),
        (PermissionError(13, "Permission denied"), 2, "PermissionError"),
        (MemoryError(), 3, "Lower grid.memory"),
        (KeyboardInterrupt(), 130, "interrupted"),
    ],
)
def test_failures_leave_with_their_code_and_no_traceback(
    failure: BaseException,
    code: int,
    part: str,
    scenario: str,
    monkeypatch: pytest.MonkeyPatch,
    capsys: pytest.CaptureFixture[str],
) -> None:
    def fail(*given: object, **named: object) -> Run:
        raise failure

    monkeypatch.setattr(api, "send", fail)
    monkeypatch.delenv(cli.TRACEBACK, raising=False)
    assert called("send", scenario) == code
    told = capsys.readouterr().err
    assert part in told
    assert "Traceback" not in told


def test_a_developer_can_ask_for_the_traceback(scenario: str, monkeypatch: pytest.MonkeyPatch) -> None:
    def fail(*given: object, **named: object) -> Run:
        raise ZeroDivisionError("division by zero")

    monkeypatch.setattr(api, "send", fail)
    monkeypatch.setenv(cli.TRACEBACK, "1")
    with pytest.raises(ZeroDivisionError):
        cli.main(["send", scenario])


def test_a_medium_as_its_maker_prints_it(capsys: pytest.CaptureFixture[str]) -> None:
    # N-BK7: n_d = 1.51680 at 587.5618 nm, n_F = 1.52238 at 486.1327 nm: SCHOTT data sheet 517642.251.
    lines = ["--at", "587.5618 nm", "--at", "486.1327 nm"]
    assert called("media", "N-BK7", *lines, "--json", "-") == 0
    document = json.loads(capsys.readouterr().out)
    assert [row["index"] for row in document["at"]] == pytest.approx([1.51680, 1.52238], abs=6e-6)
    assert document["name"] == "N-BK7"
    assert set(document) >= {"name", "source", "temperature", "relative_to", "valid_nm", "at"}
    assert set(document["at"][0]) == {
        "wavelength_nm",
        "index",
        "k",
        "absorption_per_mm",
        "group_index",
        "gvd_fs2_per_mm",
        "tod_fs3_per_mm",
        "fod_fs4_per_mm",
    }


def test_several_media_make_a_list(capsys: pytest.CaptureFixture[str]) -> None:
    assert called("media", "SF10", "N-SF10", "--json", "-") == 0
    assert [document["name"] for document in json.loads(capsys.readouterr().out)] == ["SF10", "N-SF10"]


def test_a_medium_for_a_person(capsys: pytest.CaptureFixture[str]) -> None:
    assert called("media", "fused silica", "--at", "800 nm") == 0
    told = capsys.readouterr().out
    # Malitson 1965 at 800 nm: n = 1.45332, GVD = 36.16 fs^2/mm.
    assert "1.45332" in told
    assert "36.16" in told
    assert "20 degC" in told
    assert "Malitson" in told


def test_a_medium_of_a_scenario(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = tmp_path / "cell.toml"
    line = '{ centre = "780.24 nm", width = "1 GHz", peak_absorption = "12 cm^-1" }'
    path.write_text(f'{SCENARIO}[medium."cell: vapour"]\nbackground = "vacuum"\nlines = [{line}]\n')
    # The last colon splits, so a name with a colon of its own is not found.
    assert called("media", f"{path}:cell: vapour") == 2
    path.write_text(path.read_text().replace("cell: vapour", "cell vapour"))
    capsys.readouterr()
    assert called("media", f"{path}:cell vapour", "--at", "780.24 nm", "--json", "-") == 0
    document = json.loads(capsys.readouterr().out)
    # The Napierian peak absorption that the scenario states: 12 per cm.
    assert document["at"][0]["absorption_per_mm"] == pytest.approx(1.2, rel=1e-6)
    assert called("media", f"{path}:cell vapour", "--figure", str(tmp_path / "cell.png")) == 2
    assert "--at, twice" in capsys.readouterr().err
    ends = ["--at", "779 nm", "--at", "781 nm"]
    assert called("media", f"{path}:cell vapour", *ends, "--figure", str(tmp_path / "cell.png")) == 0


def test_the_catalogue_is_listed(capsys: pytest.CaptureFixture[str]) -> None:
    assert called("media") == 0
    told, aside = capsys.readouterr()
    assert aside == ""
    assert len(told.splitlines()) > 50
    assert max(map(len, told.splitlines())) <= 110
    assert any(line.startswith("humid air") and "needs its state" in line for line in told.splitlines())
    assert called("media", "--json", "-") == 0
    names = {document["name"] for document in json.loads(capsys.readouterr().out)}
    assert {"fused silica", "SF10", "water"} <= names


def test_long_waves_are_listed_by_frequency(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert called("media", "silicon THz", "--at", "0.8 THz") == 0
    # 299.792458 / 0.8 um: SI, definition of the metre.
    assert "0.800000     374.741" in capsys.readouterr().out


def test_a_figure_of_a_medium(tmp_path: Path) -> None:
    assert called("media", "sapphire", "--figure", str(tmp_path / "sapphire.svg")) == 0
    assert "<svg" in (tmp_path / "sapphire.svg").read_text()


def test_version_and_help(capsys: pytest.CaptureFixture[str]) -> None:
    assert called("--version") == 0
    assert capsys.readouterr().out == f"pulseprop {pulseprop.__version__}\n"
    assert called("send", "--help") == 0
    assert "--figures" in capsys.readouterr().out


def run_outside(code: str, **options: object) -> subprocess.CompletedProcess[str]:
    root = str(Path(cli.__file__).parents[2])
    environment = {**os.environ, "PYTHONPATH": root}
    return subprocess.run(  # type: ignore[call-overload,no-any-return]
        [sys.executable, "-c", code], capture_output=True, text=True, env=environment, timeout=60, **options
    )


def test_the_command_starts_light() -> None:
    heavy = {"numpy", "scipy", "matplotlib", "xarray", "pint", "numba", "pydantic", "jinja2", "h5py"}
    done = run_outside(f"import sys, pulseprop.cli; print(sorted({heavy!r} & set(sys.modules)))")
    assert done.stdout.strip() == "[]"


def test_a_reader_who_leaves_is_no_failure() -> None:
    code = (
        "import os, sys; from pulseprop.cli import main\n"
        "reading, writing = os.pipe(); os.close(reading); os.dup2(writing, 1)\n"
        "main(['media'])"
    )
    done = run_outside(code)
    assert done.returncode == 0
    assert "Traceback" not in done.stderr
    assert "BrokenPipe" not in done.stderr


def test_outputs_never_overwrite_the_scenario_or_one_another(
    scenario: str, capsys: pytest.CaptureFixture[str]
) -> None:
    """Nothing is read and then lost: each file has a name of its own."""
    before = Path(scenario).read_text()
    assert called("send", scenario, "--json", scenario) == 2
    assert "an input" in capsys.readouterr().err
    assert Path(scenario).read_text() == before
    one = str(Path(scenario).with_name("one.out"))
    assert called("send", scenario, "--json", one, "--page", one) == 2
    assert "another output" in capsys.readouterr().err
    assert not Path(one).exists()


def test_a_device_is_written_through_and_stays_a_device(scenario: str) -> None:
    assert called("send", scenario, "--json", "/dev/null") == 0
    assert Path("/dev/null").is_char_device()


def test_without_a_command_the_help_is_shown(capsys: pytest.CaptureFixture[str]) -> None:
    """Nothing was asked: exit code 2, and what can be asked."""
    assert called() == 2
    told = capsys.readouterr()
    assert "send" in told.out + told.err
