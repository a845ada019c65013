"""The README's Python blocks run, and its commands are the ones that CI runs."""

from __future__ import annotations

import re
from pathlib import Path

import numpy as np
import pytest

ROOT = Path(__file__).parents[1]
README = (ROOT / "README.md").read_text(encoding="utf-8")
BLOCKS = re.findall(r"```python\n(.*?)```", README, re.DOTALL)


@pytest.mark.parametrize("code", BLOCKS, ids=range(len(BLOCKS)))
def test_python_blocks_run(code, monkeypatch, capsys):
    monkeypatch.chdir(ROOT)
    names: dict[str, object] = {}
    exec(code, names)  # the README is our own
    if "back" in names:
        k, back = names["k"], names["back"].values.real
        assert np.abs(back - k).max() < 1e-2 * np.abs(k).max()  # tails of n beyond the rows are assumed
    capsys.readouterr()


def test_a_block_goes_there_and_back():
    """The check of `back` above has something to check."""
    assert sum("back = " in code for code in BLOCKS) == 1


def test_there_is_one_test_command_and_ci_takes_it_from_here():
    assert len(re.findall(r"^python3 .*-m tests$", README, re.MULTILINE)) == 1
    assert "grep -m 1 -- '-m tests$' README.md" in (ROOT / ".ci" / "run").read_text(encoding="utf-8")


def test_the_scenario_of_the_first_command_is_there():
    named = re.search(r"pulseprop send (scenarios/\S+\.toml)", README).group(1)
    assert (ROOT / named).is_file()
