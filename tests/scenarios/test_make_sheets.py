"""The vendors' sheets are what their script writes, and say that they are invented."""

from __future__ import annotations

import importlib.util
from pathlib import Path

import openpyxl

SHEETS = Path(__file__).parents[2] / "scenarios" / "sheets"


def cells(path: Path) -> list[tuple[object, ...]]:
    return list(openpyxl.load_workbook(path).active.iter_rows(values_only=True))


def test_same_sheets(tmp_path: Path) -> None:
    spec = importlib.util.spec_from_file_location("make_sheets", SHEETS / "make_sheets.py")
    assert spec
    assert spec.loader
    script = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(script)
    script.write_all(tmp_path)
    kept = {file.name for file in SHEETS.iterdir() if file.suffix not in (".py", ".xlsx") and file.is_file()}
    assert kept == set(script.FILES)
    for name in kept:
        assert (SHEETS / name).read_bytes() == (tmp_path / name).read_bytes()
        assert "invented data" in (SHEETS / name).read_text(encoding="utf-8")
    # A workbook holds the time of writing: its cells are compared.
    assert cells(SHEETS / "mirror_lot.xlsx") == cells(tmp_path / "mirror_lot.xlsx")
    assert "invented data" in str(cells(SHEETS / "mirror_lot.xlsx")[0][0])
