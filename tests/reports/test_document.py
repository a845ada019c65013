"""Files are written whole or not at all."""

from __future__ import annotations

from pathlib import Path

import pytest

from pulseprop.errors import InputError
from pulseprop.reports.document import check_target, json_text, write_json, write_text, written_whole


def test_a_failing_writer_leaves_the_old_file_and_nothing_else(tmp_path: Path) -> None:
    target = tmp_path / "report.json"
    target.write_text("old")

    def half(path: Path) -> None:
        path.write_text("half of")
        raise RuntimeError("the power failed")

    with pytest.raises(RuntimeError, match="the power failed"):
        written_whole(target, half)
    assert target.read_text() == "old"
    assert list(tmp_path.iterdir()) == [target]


def test_a_full_disk_is_told_with_the_file(tmp_path: Path) -> None:
    def full(path: Path) -> None:
        raise OSError(28, "No space left on device")

    with pytest.raises(
        InputError, match=r"run\.nc: the output cannot be written.*No space left.*Name another place"
    ):
        written_whole(tmp_path / "run.nc", full)


def test_targets_that_cannot_be_are_told_before_the_work(tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"no directory .*missing.*Make the directory"):
        check_target(tmp_path / "missing" / "x.json")
    with pytest.raises(InputError, match="the output is a directory"):
        check_target(tmp_path)
    check_target("-")


def test_json_is_strict(tmp_path: Path) -> None:
    with pytest.raises(ValueError, match="JSON compliant"):
        json_text({"width": float("nan")})
    write_json(tmp_path / "x.json", {"unit": "fs²"})
    assert (tmp_path / "x.json").read_bytes() == b'{\n  "unit": "fs\\u00b2"\n}\n'


def test_a_dash_means_standard_output(capsys: pytest.CaptureFixture[str]) -> None:
    write_text("-", "to the screen\n")
    assert capsys.readouterr().out == "to the screen\n"


def test_files_have_the_permissions_of_ordinary_files(tmp_path: Path) -> None:
    write_text(tmp_path / "ours", "text")
    (tmp_path / "ordinary").write_text("text")
    assert (tmp_path / "ours").stat().st_mode == (tmp_path / "ordinary").stat().st_mode
