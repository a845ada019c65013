"""The data beside the scenarios are what their script writes, to the byte, and say that they are invented."""

from __future__ import annotations

import importlib.util
from pathlib import Path

DATA = Path(__file__).parents[2] / "scenarios" / "data"


def test_same_bytes(tmp_path: Path) -> None:
    spec = importlib.util.spec_from_file_location("make_data", DATA / "make_data.py")
    assert spec
    assert spec.loader
    script = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(script)
    script.write_all(tmp_path)
    kept = {file.name for file in DATA.iterdir() if file.suffix in (".csv", ".txt")}
    assert kept == set(script.FILES)
    for name in kept:
        assert (DATA / name).read_bytes() == (tmp_path / name).read_bytes()
        assert "invented data" in (DATA / name).read_text(encoding="utf-8").splitlines()[0]
