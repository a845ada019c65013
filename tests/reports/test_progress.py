"""Progress: silent while things are quick, one line when they are not."""

from __future__ import annotations

import io
import time

import pytest

from pulseprop.reports import progress
from pulseprop.reports.progress import CLEAR, Progress


class Terminal(io.StringIO):
    def isatty(self) -> bool:
        return True


def shown_after(stream: io.StringIO, quiet: float, monkeypatch: pytest.MonkeyPatch) -> str:
    monkeypatch.setattr(progress, "QUIET", quiet)
    with Progress(stream) as tell:
        tell("propagating", 0.1)
        deadline = time.monotonic() + 5
        while quiet < 1 and not tell.visible and time.monotonic() < deadline:
            time.sleep(0.01)
        tell("measuring", 0.5)
        tell("measuring", 0.504)
    return stream.getvalue()


def test_quick_work_says_nothing(monkeypatch: pytest.MonkeyPatch) -> None:
    assert shown_after(Terminal(), 60.0, monkeypatch) == ""


def test_a_terminal_shows_one_line_and_is_left_clean(monkeypatch: pytest.MonkeyPatch) -> None:
    shown = shown_after(Terminal(), 0.0, monkeypatch)
    assert " 50 %  measuring" in shown
    assert "\n" not in shown
    assert shown.endswith(CLEAR)


def test_a_file_gets_a_line_a_stage(monkeypatch: pytest.MonkeyPatch) -> None:
    shown = shown_after(io.StringIO(), 0.0, monkeypatch)
    assert shown.splitlines()[-1] == "pulseprop: measuring …"
    assert shown.count("measuring") == 1
    assert "\x1b" not in shown
