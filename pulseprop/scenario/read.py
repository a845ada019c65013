"""A scenario file: read, overridden, checked; all faults of a file in one message with their places."""

from __future__ import annotations

import hashlib
import re
import tomllib
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import Any

from pydantic import ValidationError

from pulseprop.errors import Complaint, InputError, PulsepropError
from pulseprop.scenario.adjustable import NoSetting, Setting, settled
from pulseprop.scenario.complaints import Finding, findings_of
from pulseprop.scenario.override import overridden
from pulseprop.scenario.places import Keys, Places, key_path, places_in
from pulseprop.scenario.schema import ScenarioTable
from pulseprop.scenario.settings_of import settings_of

__all__ = ["Scenario", "Where", "parsed", "read_scenario", "scenario_from", "summary", "text_of"]

LARGEST_FILE = 8 << 20
"""Bytes; a scenario is written by hand, its tables stand in files of their own."""

MOST_SHOWN = 8
"""Findings shown in one message."""


@dataclass(frozen=True, kw_only=True)
class Scenario:
    """A checked scenario.

    content: the tables with SI floats. file: its path as given. directory: paths in the file are relative to
    it. text, sha256: of the file as it stands, without overrides. document: plain tables with overrides, for
    those who change and check again. settings: those of its elements that are ranges or lists; in content
    today's values stand for them.
    """

    content: ScenarioTable
    file: str
    directory: Path
    text: str
    sha256: str
    overrides: tuple[str, ...] = ()
    document: Mapping[str, Any] = field(repr=False)
    origins: Mapping[Keys, str] = field(default_factory=dict, repr=False)
    settings: tuple[Setting, ...] = ()

    def path_of(self, name: str) -> Path:
        """The path of a file that the scenario names."""
        return self.directory / name

    def blamed(self, error: PulsepropError, *keys: str | int) -> PulsepropError:
        """The error with file, line, column and key path added; keys count list entries from 0.

        An error that names a file of its own keeps it, and the key path comes to it.
        """
        where = Where(self.text, self.file, self.origins)
        file, place = where.of(keys, value=True)
        if error.complaint.file:
            return error.located(place=error.complaint.place or f"named by {file}, {place}")
        return error.located(file=file, place=place)


def read_scenario(path: str | Path, overrides: Iterable[str] = ()) -> Scenario:
    """The scenario in a file, with overrides KEY=VALUE applied.

    Raises InputError: a file that cannot be read or is no TOML, or all that is wrong with its keys and values
    at once.
    """
    file = str(path)
    text = text_of(Path(path), file)
    document = parsed(text, file)
    return scenario_from(document, text=text, file=file, directory=Path(path).parent, overrides=overrides)


def scenario_from(
    document: Mapping[str, Any],
    *,
    text: str = "",
    file: str = "",
    directory: Path = Path(),
    overrides: Iterable[str] = (),
) -> Scenario:
    """The scenario in plain tables, as TOML gives them; `text` is what they were read from, for places in
    messages."""
    overrides = tuple(overrides)
    changed, origins = overridden(dict(document), overrides)
    where = Where(text, file, origins)
    try:
        settings = settings_of(changed)
        today = settled(changed, settings) if settings else changed
        content = ScenarioTable.model_validate(today)
    except NoSetting as error:
        raise summary([(error.keys, error.complaint)], where) from None
    except ValidationError as error:
        raise summary(findings_of(error.errors(include_url=False), today), where) from None
    return Scenario(
        content=content,
        file=file,
        directory=directory,
        text=text,
        sha256=hashlib.sha256(text.encode()).hexdigest(),
        overrides=overrides,
        document=changed,
        origins=origins,
        settings=settings,
    )


class Where:
    """Names the place of keys: in the file with line and column, or on the command line."""

    def __init__(self, text: str, file: str, origins: Mapping[Keys, str]) -> None:
        self.text, self.file, self.origins = text, file, origins
        self._places: Places | None = None

    @property
    def places(self) -> Places:
        if self._places is None:
            self._places = places_in(self.text)
        return self._places

    def of(self, keys: Keys, *, value: bool) -> tuple[str, str]:
        """File and place of a message; the place of the value or of the key."""
        if any(keys[: len(origin)] == origin for origin in self.origins):
            return "--set", key_path(keys)
        if keys not in self.places.keys and any(origin[: len(keys)] == keys for origin in self.origins):
            return "--set", key_path(keys)
        found = self.places.of_value(keys) if value else self.places.of_key(keys)
        line = f":{found[0]}:{found[1]}" if found else ""
        return self.file + line, key_path(keys)


def summary(findings: list[Finding], where: Where) -> InputError:
    """All findings in one error: the finding itself, or a list of the first few."""
    placed = [_placed(keys, complaint, where) for keys, complaint in findings]
    if len(placed) == 1:
        return _raised(placed[0])
    lines = [complaint.text for complaint in placed[:MOST_SHOWN]]
    if len(placed) > MOST_SHOWN:
        lines.append(f"and {len(placed) - MOST_SHOWN} more.")
    return InputError(f"{len(placed)} things cannot be used:\n  " + "\n  ".join(lines), file=where.file)


def _placed(keys: Keys, complaint: Complaint, where: Where) -> Complaint:
    file, place = where.of(keys, value=complaint.value is not None)
    return replace(complaint, file=file, place=place)


def _raised(complaint: Complaint) -> InputError:
    return InputError(
        complaint.problem,
        value=complaint.value,
        allowed=complaint.allowed,
        remedy=complaint.remedy,
        file=complaint.file,
        place=complaint.place,
    )


def text_of(path: Path, file: str) -> str:
    """The text of a TOML file, named `file` in messages. Raises InputError."""
    if not path.exists():
        raise InputError(
            "there is no such file", file=file, remedy="Check the path; it is relative to where you are"
        )
    if not path.is_file():
        raise InputError("this is not a file", file=file, allowed="a scenario file in TOML")
    try:
        size = path.stat().st_size
        data = path.read_bytes() if size <= LARGEST_FILE else b""
    except OSError as error:
        raise InputError(f"the file cannot be read: {error.strerror}", file=file) from None
    if size > LARGEST_FILE:
        raise InputError(
            "the file is too large for a scenario",
            value=f"{size / 2**20:.0f} MiB",
            allowed="up to 8 MiB",
            remedy="Put tables into files of their own",
            file=file,
        )
    text = _decoded(data, file)
    if not text.strip():
        raise InputError("the file is empty", file=file, allowed="a scenario with a [pulse] table")
    return text


def _decoded(data: bytes, file: str) -> str:
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = data[: error.start].count(b"\n") + 1
        raise InputError(
            "the file is not in UTF-8",
            value=f"byte 0x{data[error.start]:02x}",
            allowed="text in UTF-8, as TOML demands",
            remedy="Save the file anew with that encoding",
            file=f"{file}:{line}",
        ) from None


TOML_PLACE = re.compile(r"(.*?) \(at (?:line (\d+), column (\d+)|end of document)\)", re.DOTALL)


def parsed(text: str, file: str) -> dict[str, Any]:
    """Plain tables of a TOML text. Raises InputError with line and column."""
    try:
        return tomllib.loads(text)
    except (tomllib.TOMLDecodeError, RecursionError) as error:
        raise _not_toml(str(error), text, file) from None


def _not_toml(message: str, text: str, file: str) -> InputError:
    match = TOML_PLACE.fullmatch(message)
    problem, row, column = match.groups() if match else (message, None, None)
    lines = text.splitlines()
    line = (
        lines[int(row) - 1].strip()
        if row and int(row) <= len(lines)
        else (lines[-1].strip() if lines else "")
    )
    return InputError(
        f"this is not TOML: {problem[:1].lower()}{problem[1:]}",
        value=line[:80],
        remedy='Texts, and values with a unit, stand in quotes: thickness = "3 mm"',
        file=f"{file}:{row}:{column}" if row else f"{file}:{max(len(lines), 1)}",
    )
