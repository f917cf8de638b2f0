"""The commands and their options.

Only what parsing a command line needs is imported here; what a command works with is
imported when it runs, so that ``closedform --help`` answers at once.
"""

from __future__ import annotations

import signal
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Annotated, Literal

import typer

from closedform.cli.screen import Screen, prepare_streams
from closedform.cli.status import INTERRUPTED, status_of
from closedform.errors import ClosedformError

__all__ = ["app", "main"]

app = typer.Typer(
    help="Exact, proved closed-form responses of linear models, free or driven by inputs, "
    "written up as LaTeX.",
    epilog="Exit status: 0 all well, 1 a result or a line was refuted, 2 an input is not "
    "usable or too extreme to be proved, 3 something outside is missing, such as a TeX engine.",
    no_args_is_help=True,
    add_completion=False,
    rich_markup_mode=None,  # drawn help takes twice as long to appear
    pretty_exceptions_enable=False,  # a fault of the program shows as Python shows it
    context_settings={"help_option_names": ["--help", "-h"]},
)


Depth = Literal["summary", "working", "full"]


def main() -> None:
    """Run the command line of this process and exit with its status."""
    prepare_streams()
    signal.signal(signal.SIGTERM, _leave)
    app(prog_name="closedform")


def _leave(number: int, _frame: object) -> None:
    """End as by an error: the terminal is put right, TeX is ended, no part of a file stays."""
    sys.exit(128 + number)


def _version(asked: bool) -> None:  # noqa: FBT001 - the value of a flag, handed in by position
    if asked:
        from closedform.cli.version import version

        _finish(Screen(), lambda: Screen().line(f"closedform {version()}"))


@app.callback()
def closedform(
    *,
    version: Annotated[
        bool,
        typer.Option(
            "--version", help="Show the version and exit.", callback=_version, is_eager=True
        ),
    ] = False,
) -> None:
    """Take the options that stand before a command."""


@app.command(short_help="Solve and prove models, and write each one up.")
def writeup(  # noqa: PLR0913 - one parameter for each option
    *,
    models: Annotated[
        list[str],
        typer.Argument(metavar="MODEL.toml", hidden=True),
    ],
    into: Annotated[
        Path, typer.Option(metavar="DIR", help="The folder for the files; made if missing.")
    ] = Path("out"),
    pdf: Annotated[
        bool, typer.Option("--pdf", help="Compile each write-up to a PDF, too.")
    ] = False,
    depth: Annotated[Depth, typer.Option(help="How much of the derivation is shown.")] = "working",
    digits: Annotated[
        int,
        typer.Option(min=1, max=40, metavar="N", help="Significant digits of the tables."),
    ] = 6,
    template: Annotated[
        str,
        typer.Option(
            metavar="NAME-OR-DIR", help="A shipped template, or a folder with files of your own."
        ),
    ] = "latex",
    record: Annotated[
        bool,
        typer.Option("--record/--no-record", help="Write NAME.record.json with the exact results."),
    ] = True,
    quiet: Annotated[bool, typer.Option("--quiet", help="Print nothing but errors.")] = False,
) -> None:
    """Solve and prove each model, and write it up as a LaTeX document.

    The write-up of tank.toml is out/tank.tex. On a terminal a summary of each model is
    shown; in a pipe the paths of the files written, one per line. One model that fails
    does not stop the others.
    """
    screen = Screen(quiet=quiet)

    def work() -> int:
        from closedform.cli.batch import Wishes, write_models

        wishes = Wishes(into, depth, digits, template, record=record, pdf=pdf)
        return write_models(models, wishes, screen)

    _finish(screen, work)


@app.command(short_help="Check hand derivations, line by line, against their model.")
def check(  # noqa: PLR0913 - one parameter for each option
    *,
    sources: Annotated[
        list[str],
        typer.Argument(metavar="SOURCE", hidden=True),
    ],
    model: Annotated[
        Path | None,
        typer.Option(metavar="MODEL.toml", help="The model; not needed if the source names it."),
    ] = None,
    into: Annotated[
        Path, typer.Option(metavar="DIR", help="The folder for the reports; made if missing.")
    ] = Path("out"),
    pdf: Annotated[bool, typer.Option("--pdf", help="Compile each report to a PDF, too.")] = False,
    template: Annotated[
        str,
        typer.Option(
            metavar="NAME-OR-DIR", help="A shipped template, or a folder with files of your own."
        ),
    ] = "latex",
    record: Annotated[
        bool,
        typer.Option("--record/--no-record", help="Write NAME.check.json with every verdict."),
    ] = True,
    junit: Annotated[
        bool, typer.Option("--junit", help="Write NAME.check.xml, JUnit for build servers.")
    ] = False,
    allow_unread: Annotated[
        bool, typer.Option("--allow-unread", help="A line that is not read is no fault.")
    ] = False,
    quiet: Annotated[bool, typer.Option("--quiet", help="Print nothing but errors.")] = False,
) -> None:
    """Hold each line of a derivation against the exact solution of its model.

    A SOURCE is a LaTeX file with displayed formulas, or a TOML list of claims. The
    report on notes.tex is out/notes.check.tex. The status is 0 if every line holds,
    1 if one is wrong, 2 if none is wrong but one was not read.
    """
    screen = Screen(quiet=quiet)

    def work() -> int:
        from closedform.cli.check_batch import CheckWishes, check_sources

        wishes = CheckWishes(
            model,
            into,
            template,
            pdf=pdf,
            record=record,
            junit=junit,
            allow_unread=allow_unread,
        )
        return check_sources(sources, wishes, screen)

    _finish(screen, work)


@app.command(short_help="List the starters, models and derivations, or copy one.")
def starter(
    *,
    name: Annotated[
        str | None,
        typer.Argument(metavar="NAME", hidden=True),
    ] = None,
    into: Annotated[
        Path, typer.Option(metavar="DIR", help="The folder for the copy; made if missing.")
    ] = Path(),
    replace: Annotated[
        bool, typer.Option("--replace", help="Replace a file of the same name.")
    ] = False,
) -> None:
    """Copy a starter to work from; without a NAME, list them all.

    A starter is a model, or a derivation to be checked, which comes with its model.
    """
    screen = Screen()

    def work() -> None:
        import shlex

        from closedform.cli.starters import copy_starter, listing

        if name is not None:
            command, paths = copy_starter(name, into, replace=replace)
            for path in paths:
                screen.path(path)
            words = "Check it" if command == "check" else "Write it up"
            hint = f"{words} with: closedform {command} {shlex.quote(str(paths[0]))}"
        else:
            for line in listing():
                screen.line(line)
            hint = "Copy one with: closedform starter NAME"
        if screen.shows_results:
            screen.line(f"\n{hint}")

    _finish(screen, work)


def _finish(screen: Screen, work: Callable[[], int | None]) -> None:
    """Do the work of a command and leave with its status.

    Errors that this package raises on purpose are told in their paragraph; any other
    exception is a fault of the program and is let through.
    """
    try:
        status = work() or 0
    except ClosedformError as error:
        screen.error(error)
        status = status_of(error)
    except KeyboardInterrupt:
        screen.notice("stopped; every file written so far is complete")
        status = INTERRUPTED
    raise typer.Exit(status)
