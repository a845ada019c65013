"""The command line: it parses, calls, renders, and turns failures into one message and an exit code.

Exit codes: 0 done; 1 done, and the answer is a physical "no"; 2 the input cannot be used; 3 a numerical limit
was reached, and the answer would not be trustworthy.
"""

from __future__ import annotations

import os
import sys
from collections.abc import Sequence

import rich_click as click

from pulseprop.cli.compensate import compensate
from pulseprop.cli.media import media
from pulseprop.cli.outputs import DONE
from pulseprop.cli.send import send
from pulseprop.cli.vet import vet

__all__ = ["TRACEBACK", "commands", "main"]

UNUSABLE, UNTRUSTWORTHY, INTERRUPTED = 2, 3, 130

TRACEBACK = "PULSEPROP_TRACEBACK"
"""Set in the environment, it shows where an unexpected failure came from."""


def main(arguments: Sequence[str] | None = None) -> None:
    """Entry point: run a command and leave with its exit code."""
    _replace_unprintable()
    try:
        code = _guarded(arguments)
        sys.stdout.flush()
    except BrokenPipeError:
        # The reader of a pipe has gone; a second failure while the interpreter closes is no news.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        code = DONE
    sys.exit(code)


def _guarded(arguments: Sequence[str] | None) -> int:
    """Exit code of a command; whatever goes wrong becomes one message."""
    from pulseprop.errors import PulsepropError

    try:
        code = commands.main(arguments, prog_name="pulseprop", standalone_mode=False)
        return code if isinstance(code, int) else DONE
    except click.ClickException as error:
        context = getattr(error, "ctx", None)
        hint = f" `{context.command_path} --help` shows how it is used." if context else ""
        return _failed(f"{error.format_message().rstrip('.')}.{hint}", UNUSABLE)
    except PulsepropError as error:
        return _failed(str(error), error.exit_code)
    except (KeyboardInterrupt, click.Abort):
        return _failed("interrupted; nothing half done was written.", INTERRUPTED)
    except BrokenPipeError:
        raise
    except SystemExit as left:
        if left.code == 1:  # so the parser leaves when the reader of a pipe has gone
            raise BrokenPipeError from left
        return left.code if isinstance(left.code, int) else DONE
    except MemoryError:
        return _failed(
            "the memory of this machine does not suffice. Lower grid.memory in the scenario.", UNTRUSTWORTHY
        )
    except Exception as error:
        if os.environ.get(TRACEBACK):
            raise
        return _failed(_unexpected(error), UNUSABLE if isinstance(error, OSError) else UNTRUSTWORTHY)


def _unexpected(error: Exception) -> str:
    told = " ".join(str(error).split())[:200]
    return (
        f"an unexpected failure, {type(error).__name__}: {told}. This is a fault of the program: please "
        f"report it with the scenario file. {TRACEBACK}=1 in the environment shows where it happened."
    )


def _failed(message: str, code: int) -> int:
    from pulseprop.reports.text import printable

    print(f"pulseprop: {printable(message)}", file=sys.stderr)
    return code


def _replace_unprintable() -> None:
    """Replace what a terminal cannot show, rather than stop."""
    for stream in (sys.stdout, sys.stderr):
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(errors="replace")


def _print_version(context: click.Context, parameter: click.Parameter, wanted: bool) -> None:
    if wanted and not context.resilient_parsing:
        from pulseprop import __version__

        click.echo(f"pulseprop {__version__}")
        context.exit()


@click.group(context_settings={"help_option_names": ["-h", "--help"]})
@click.option(
    "--version",
    is_flag=True,
    is_eager=True,
    expose_value=False,
    callback=_print_version,
    help="Print the version.",
)
def commands() -> None:
    """A laser pulse through causal matter: what arrives, and whether the data can be true.

    Exit codes: 0 done; 1 done, and the answer is a physical "no"; 2 the input cannot be used; 3 a numerical
    limit was reached.
    """


for command in (send, vet, compensate, media):
    commands.add_command(command)
