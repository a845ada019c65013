"""The command line, a file a command."""

from __future__ import annotations

from pulseprop.cli.entry import TRACEBACK, main

__all__ = ["TRACEBACK", "main"]
