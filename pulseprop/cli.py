"""The command line: it parses, calls, renders, and turns failures into one message and an exit code.

Exit codes: 0 done; 1 done, and the answer is a physical "no"; 2 the input cannot be used; 3 a numerical limit
was reached, and the answer would not be trustworthy.
"""

from __future__ import annotations

import os
import sys
from collections.abc import Sequence
from typing import TYPE_CHECKING

import rich_click as click

if TYPE_CHECKING:
    from pulseprop.api import MediumReport
    from pulseprop.material.medium import Medium
    from pulseprop.propagation.result import Run
    from pulseprop.scenario.read import Scenario

__all__ = ["main"]

DONE, UNUSABLE, UNTRUSTWORTHY, INTERRUPTED = 0, 2, 3, 130

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


JSON_HELP = "Write the answer as one JSON document to a file, or to standard output for '-'."


@commands.command()
@click.argument("scenario", metavar="SCENARIO.toml")
@click.option("--json", "json_path", metavar="PATH|-", help=JSON_HELP)
@click.option("--save", "save_path", metavar="RESULT.nc", help="Write fields and spectra as NetCDF.")
@click.option("--page", "page_path", metavar="REPORT.html", help="Write a self-contained page.")
@click.option(
    "--figures", "figures_path", metavar="DIR", help="Write figures (PNG, SVG) with their numbers (CSV)."
)
@click.option(
    "--set",
    "overrides",
    metavar="KEY=VALUE",
    multiple=True,
    help='Override a value: pulse.duration="20 fs", "path.cold window.thickness=0.5 mm".',
)
def send(
    scenario: str,
    json_path: str | None,
    save_path: str | None,
    page_path: str | None,
    figures_path: str | None,
    overrides: tuple[str, ...],
) -> int:
    """Send the pulse of a scenario through its path, and report what arrives."""
    from pulseprop import api
    from pulseprop.reports.progress import Progress

    _check_outputs(scenario, json_path, (save_path, page_path), figures_path)
    read = api.read(scenario, overrides)
    with Progress(sys.stderr) as progress:
        run = api.send(read, progress=progress)
        if save_path:
            progress("saving fields", 0.96)
            _save(run, save_path)
        if page_path or figures_path:
            progress("drawing figures", 0.97)
            _draw(run, read, page_path, figures_path)
    _answer(run, json_path)
    return run.exit_code


def _check_outputs(
    scenario: str, json_path: str | None, files: Sequence[str | None], directory: str | None
) -> None:
    """Whatever cannot be written is told before the work begins."""
    from pulseprop.reports.document import STDOUT, check_directory, check_target

    if STDOUT in files:
        raise click.UsageError("only --json can go to standard output; give the others a file name")
    targets = [target for target in (json_path, *files) if target is not None]
    taken = [os.path.realpath(scenario)]
    for target in targets:
        if not target:
            raise click.UsageError("an output has no name")
        check_target(target)
        place = os.path.realpath(target)
        if target != STDOUT and place in taken:
            what = "the scenario itself" if place == taken[0] else "another output"
            raise click.UsageError(f"{target} is {what}; give each file a name of its own")
        taken.append(place)
    if directory is not None:
        check_directory(directory)


def _save(run: Run, path: str) -> None:
    from pulseprop.reports.dataset import save_dataset

    save_dataset(run, path)


def _draw(run: Run, scenario: Scenario, page: str | None, figures: str | None) -> None:
    from pulseprop.reports.figures import drawings, write_figures

    drawn = list(drawings(run, _media(run, scenario)))
    if page:
        from pulseprop.reports.page import write_page

        write_page(run, page, drawn)
    if figures:
        write_figures(drawn, figures)


def _media(run: Run, scenario: Scenario) -> tuple[Medium, ...]:
    """The media of the path; what else the scenario holds is not built again."""
    from math import pi

    from pulseprop.propagation.numerals import terahertz
    from pulseprop.scenario.build import media_of
    from pulseprop.scenario.build_path import built_path

    centre = 2e12 * pi * terahertz(run.pulse_in.centre_nm)
    return built_path(scenario, media_of(scenario), centre).media


def _answer(run: Run, json_path: str | None) -> None:
    """The report on standard output; warnings and cautions on standard error, unless both are one screen."""
    from pulseprop.reports.document import write_json
    from pulseprop.reports.text import printable, text_report

    if json_path is not None:
        write_json(json_path, run.as_json())
    else:
        click.echo(text_report(run), nl=False)
        if sys.stdout.isatty() and sys.stderr.isatty():
            return
    asides = [f"warning: {warning}" for warning in run.warnings]
    asides += [f"caution [{caution.code}] {caution.line}" for caution in run.cautions]
    for aside in asides:
        click.echo(printable(aside), err=True)


@commands.command()
@click.argument("names", metavar="[NAME | SCENARIO.toml:NAME]...", nargs=-1)
@click.option(
    "--at", "places", metavar="WAVELENGTH", multiple=True, help='Where to give orders, such as "800 nm".'
)
@click.option("--json", "json_path", metavar="PATH|-", help=JSON_HELP)
@click.option("--figure", "figure_path", metavar="FILE", help="Draw index, GVD and absorption; .png or .svg.")
def media(
    names: tuple[str, ...], places: tuple[str, ...], json_path: str | None, figure_path: str | None
) -> int:
    """Show media: source, range, and orders at wavelengths. Without a name, list the catalogue.

    With --json one name gives an object, several names a list of such objects in their order, no name the
    list of the catalogue; humid air, which is nothing without its state, is left out of that list.
    """
    from pulseprop import api
    from pulseprop.reports.document import check_target, write_json
    from pulseprop.reports.media_text import catalogue_text, media_text

    if json_path is not None:
        check_target(json_path)
    if not names and (places or figure_path):
        raise click.UsageError("--at and --figure need the name of a medium")
    found, stateless = (api.media(names, places), ()) if names else _catalogue()
    if figure_path:
        _draw_media(names, found, figure_path)
    if json_path is not None:
        documents = [medium.as_json() for medium in found]
        write_json(json_path, documents[0] if len(names) == 1 else documents)
    else:
        click.echo(media_text(found) if names else catalogue_text(found, stateless), nl=False)
    return DONE


def _catalogue() -> tuple[tuple[MediumReport, ...], tuple[str, ...]]:
    """Every record that stands by itself, and the names of those that need a state (humid air)."""
    from pulseprop import api
    from pulseprop.errors import InputError

    found: list[MediumReport] = []
    stateless: list[str] = []
    for name in api.catalogue():
        try:
            found += api.media([name])
        except InputError:
            stateless.append(name)
    return tuple(found), tuple(stateless)


def _draw_media(names: tuple[str, ...], found: Sequence[MediumReport], path: str) -> None:
    """Curves over the wavelengths asked for, or over the range that all the media share in part."""
    from pulseprop import api
    from pulseprop.errors import InputError
    from pulseprop.reports.document import check_target
    from pulseprop.reports.draw_media import draw_media
    from pulseprop.reports.figures import write_figure
    from pulseprop.reports.media_curves import index_curves

    check_target(path)
    places = [row.wavelength_nm for row in found[0].at]
    ranges = [medium.valid_nm for medium in found if medium.valid_nm is not None]
    edges = places if len(set(places)) > 1 else [edge for valid in ranges for edge in valid]
    if not edges:
        raise InputError(
            "the range to draw is not known",
            value=", ".join(names),
            allowed="two wavelengths or more",
            remedy="Give the ends of the range with --at, twice",
        )
    curves = index_curves([api.medium(name) for name in names], min(edges), max(edges))
    source = "; ".join(f"{medium.name}: {medium.source}" for medium in found)[:150]
    write_figure(draw_media(curves, source), path)


if __name__ == "__main__":
    main()
