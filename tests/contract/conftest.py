"""The command line as a user calls it, in this process: exit code, standard output, standard error."""

from __future__ import annotations

import contextlib
import io
import json
from dataclasses import dataclass

import pytest

from pulseprop import cli


@dataclass(frozen=True)
class Told:
    """What a command left behind."""

    code: int
    out: str
    err: str

    @property
    def json(self):
        return json.loads(self.out)


def called(*arguments: object) -> Told:
    out, err = io.StringIO(), io.StringIO()
    with (
        contextlib.redirect_stdout(out),
        contextlib.redirect_stderr(err),
        pytest.raises(SystemExit) as left,
    ):
        cli.main([str(argument) for argument in arguments])
    return Told(left.value.code, out.getvalue(), err.getvalue())


@pytest.fixture
def command():
    """command("send", file, ...) -> Told."""
    return called


@pytest.fixture
def scenario(tmp_path):
    """scenario(path, pulse=...) writes a file and returns its path; `path` is all but the [pulse] table."""

    def write(
        path: str,
        pulse: str = 'duration = "30 fs"\nenergy = "1 nJ"',
        centre: str = "800 nm",
        shape="gaussian",
    ):
        file = tmp_path / "scenario.toml"
        file.write_text(f'[pulse]\nshape = "{shape}"\ncentre = "{centre}"\n{pulse}\n{path}', encoding="utf-8")
        return file

    return write


@pytest.fixture
def sent(scenario):
    """sent(path, *options, **pulse) -> the JSON document of `send --json -`."""

    def send(path: str, *options: str, **pulse: str):
        told = called("send", scenario(path, **pulse), "--json", "-", *options)
        assert told.code == 0, told.err
        return told.json

    return send


@pytest.fixture
def refused(scenario):
    """refused(path, *options, code=2, **pulse) -> the message; nothing may stand on standard output."""

    def send(path: str, *options: str, code: int = 2, **pulse: str):
        told = called("send", scenario(path, **pulse), "--json", "-", *options)
        assert (told.code, told.out) == (code, "")
        assert "Traceback" not in told.err
        assert "fault of the program" not in told.err
        return told.err

    return send


@pytest.fixture
def medium(scenario):
    """medium(tables, *wavelengths) -> the JSON document of `media FILE:m`; `tables` describe [medium.m]."""

    def ask(tables: str, *places: str):
        options = [word for place in places for word in ("--at", place)]
        told = called("media", f"{scenario(tables)}:m", *options, "--json", "-")
        assert told.code == 0, told.err
        return told.json

    return ask
