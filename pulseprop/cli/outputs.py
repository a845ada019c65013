"""What the commands share: where answers go, told before the work begins."""

from __future__ import annotations

import os
from collections.abc import Sequence

import rich_click as click

__all__ = ["DONE", "JSON_HELP", "check_outputs"]

DONE = 0

JSON_HELP = "Write the answer as one JSON document to a file, or to standard output for '-'."


def check_outputs(
    inputs: Sequence[str], json_path: str | None, files: Sequence[str | None], directory: str | None = None
) -> None:
    """Raise where an output cannot be written, or would overwrite an input or another output."""
    from pulseprop.reports.document import STDOUT, check_directory, check_target

    if STDOUT in files:
        raise click.UsageError("only --json can go to standard output; give the others a file name")
    targets = [target for target in (json_path, *files) if target is not None]
    read = {os.path.realpath(name) for name in inputs}
    taken = set(read)
    for target in targets:
        if not target:
            raise click.UsageError("an output has no name")
        check_target(target)
        place = os.path.realpath(target)
        if target != STDOUT and place in taken:
            what = "an input" if place in read else "another output"
            raise click.UsageError(f"{target} is {what}; give each file a name of its own")
        taken.add(place)
    if directory is not None:
        check_directory(directory)
