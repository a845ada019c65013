"""A file as bytes and as text: read once, within a size, in the usual encodings."""

from __future__ import annotations

from pathlib import Path

from pulseprop.errors import InputError

__all__ = ["contents", "decoded"]

LARGEST = 256 << 20
"""Bytes; larger files are refused before they are read."""


def contents(path: Path) -> bytes:
    """The bytes of a file. Raises InputError where there is none, or more than 256 MiB."""
    if not path.is_file():
        problem = "this is not a file" if path.exists() else "there is no such file"
        remedy = "Check the path (in a scenario it is relative to the scenario file)"
        raise InputError(problem, file=str(path), remedy=remedy)
    size = path.stat().st_size
    if size > LARGEST:
        raise InputError(
            "the file is too large", value=f"{size / 2**20:.0f} MiB", allowed="256 MiB", file=str(path)
        )
    try:
        return path.read_bytes()
    except OSError as error:
        raise InputError(f"the file cannot be read: {error.strerror}", file=str(path)) from None


def decoded(data: bytes, file: str) -> str:
    """Text of the usual encodings: numbers are the same in all of them, so that only headers depend on the
    choice. Raises InputError for bytes that are no text; `file` is named there."""
    if data.startswith((b"\xff\xfe", b"\xfe\xff")):
        return data.decode("utf-16", errors="replace")
    if b"\0" in data:
        raise InputError("this is no text file", file=file, allowed="columns of numbers as text")
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError:
        return data.decode("latin-1")
