"""Files written whole or not at all: into a neighbour first, then moved over the name in one step."""

from __future__ import annotations

import json
import os
import sys
import tempfile
from collections.abc import Callable
from pathlib import Path
from typing import Any

from pulseprop.errors import InputError

__all__ = [
    "STDOUT",
    "check_directory",
    "check_target",
    "json_text",
    "make_directory",
    "write_bytes",
    "write_json",
    "write_text",
    "written_whole",
]

STDOUT = "-"
"""The target that means standard output."""


def written_whole(target: str | Path, writer: Callable[[Path], None]) -> Path:
    """Let `writer` fill a temporary file beside the target, then put it in the target's place.

    Whatever stood there stays until the new file is complete. Raises InputError where the target cannot be
    written; other failures of the writer pass through, and leave nothing behind.
    """
    target = Path(target)
    check_target(target)
    if _is_device(target):
        return _through(target, writer)
    try:
        handle, name = tempfile.mkstemp(dir=target.parent, prefix=f".{target.name}.", suffix=target.suffix)
    except OSError as error:
        raise _unwritable(target, error) from error
    os.close(handle)
    temporary = Path(name)
    try:
        writer(temporary)
        temporary.chmod(0o666 & ~_umask())
        os.replace(temporary, target)
    except OSError as error:
        raise _unwritable(target, error) from error
    finally:
        temporary.unlink(missing_ok=True)
    return target


def _through(target: Path, writer: Callable[[Path], None]) -> Path:
    """Into a pipe or a device, which no file may replace: all at once, when it is complete elsewhere."""
    with tempfile.TemporaryDirectory() as folder:
        whole = Path(folder) / target.name
        writer(whole)
        try:
            with target.open("wb") as stream:
                stream.write(whole.read_bytes())
        except OSError as error:
            raise _unwritable(target, error) from error
    return target


def _is_device(target: Path) -> bool:
    """Whether something that is no plain file stands under this name."""
    return target.exists() and not target.is_file()


def check_target(target: str | Path) -> None:
    """Raise InputError where a file of this name cannot be made: for use before the work begins."""
    target = Path(target)
    if str(target) == STDOUT:
        return
    if target.is_dir():
        raise InputError(
            "the output is a directory",
            file=str(target),
            allowed="the name of a file",
            remedy="Add a file name",
        )
    if _is_device(target):
        return
    if not target.parent.is_dir():
        raise InputError(
            "the output cannot be written",
            value=f"no directory {target.parent}",
            file=str(target),
            allowed="a file in a directory that exists",
            remedy="Make the directory, or name another place",
        )
    if not os.access(target.parent, os.W_OK):
        raise _unwritable(target, PermissionError(13, "Permission denied"))


def check_directory(directory: str | Path) -> None:
    """Raise InputError where files cannot be put into a directory of this name, or it cannot be made."""
    directory = Path(directory)
    if not directory.is_dir():
        check_target(directory)
        if directory.exists():
            raise InputError(
                "a file stands where a directory is wanted",
                file=str(directory),
                allowed="a directory, or a new name in one that exists",
                remedy="Name another place",
            )
    elif not os.access(directory, os.W_OK):
        raise _unwritable(directory, PermissionError(13, "Permission denied"))


def make_directory(directory: str | Path) -> Path:
    """The directory, made where it is not there yet. Raises InputError where it cannot be."""
    directory = Path(directory)
    check_directory(directory)
    try:
        directory.mkdir(exist_ok=True)
    except OSError as error:
        raise _unwritable(directory, error) from error
    return directory


def write_bytes(target: str | Path, data: bytes) -> None:
    """Bytes to a file, or to standard output for "-"."""
    if str(target) == STDOUT:
        sys.stdout.buffer.write(data)
        sys.stdout.buffer.flush()
    else:
        written_whole(target, lambda path: _fill(path, data))


def write_text(target: str | Path, text: str) -> None:
    """Text as UTF-8 to a file, or to standard output for "-"."""
    if str(target) == STDOUT:
        sys.stdout.write(text)
        sys.stdout.flush()
    else:
        write_bytes(target, text.encode())


def write_json(target: str | Path, document: Any) -> None:
    """One JSON document, to a file or to standard output."""
    write_text(target, json_text(document))


def json_text(document: Any) -> str:
    """Strict JSON (no NaN, no infinities) in plain ASCII, so that no terminal can spoil it."""
    return json.dumps(document, indent=2, allow_nan=False) + "\n"


def _fill(path: Path, data: bytes) -> None:
    path.write_bytes(data)


def _unwritable(target: Path, error: OSError) -> InputError:
    return InputError(
        "the output cannot be written",
        value=error.strerror or str(error),
        file=str(target),
        allowed="a place where you may write, with room on the disk",
        remedy="Name another place, or free some room; nothing was written there",
    )


def _umask() -> int:
    """The mask for new files; it can only be read by setting it."""
    mask = os.umask(0)
    os.umask(mask)
    return mask
