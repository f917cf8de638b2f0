"""Where a command speaks: results to standard output, all else to standard error.

On a terminal text is laid out and lightly coloured; in a pipe it is plain, so that
scripts can read it.  Whether there is a terminal is asked of each stream by itself.
"""

from __future__ import annotations

import io
import os
import sys
import textwrap
from collections.abc import Iterable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass, field
from pathlib import Path
from typing import TYPE_CHECKING, TextIO

from closedform.errors import ClosedformError, InputError

if TYPE_CHECKING:
    from rich.console import Console

    from closedform.cli.progress import Progress

__all__ = ["Line", "Screen", "StreamError", "prepare_streams", "printable"]

Line = tuple[tuple[str, str], ...]
"""A line of output: pieces of text, each with the name of a rich style, or none."""

NARROWEST = 40
PLAIN_STYLES = {
    "bar.back": "dim",
    "bar.complete": "default",
    "bar.finished": "default",
    "progress.download": "default",
    "progress.elapsed": "dim",
}
"""The moving line has no colours: colour is kept for errors."""


class StreamError(InputError):
    """Standard output or standard error takes no more text."""

    def __init__(self, reason: str) -> None:
        super().__init__(reason)
        self.reason = reason

    def __str__(self) -> str:
        return (
            f"What was to be printed cannot be written: {self.reason}. Every file written so far "
            "is complete; send the output elsewhere, or make room."
        )


def prepare_streams() -> None:
    """Make the streams of this process fit to be written to, whatever they are.

    A closed one takes everything and keeps nothing, and a sign that an encoding does not
    have is shown as a question mark.
    """
    if sys.stdout is None:
        sys.stdout = Path(os.devnull).open("w")  # noqa: SIM115 - open as long as the process
    if sys.stderr is None:
        sys.stderr = Path(os.devnull).open("w")  # noqa: SIM115 - as standard output
    if isinstance(sys.stdout, io.TextIOWrapper):
        sys.stdout.reconfigure(errors="replace")


def printable(text: str) -> str:
    """Return text that cannot move the cursor or recolour the terminal; line ends stay."""
    return "".join(c if c.isprintable() or c == "\n" else " " for c in text)


@dataclass
class Screen:
    """The two streams of a command; with `quiet`, nothing but errors is said."""

    quiet: bool = False
    _progress: Progress | None = None
    _told: set[str] = field(default_factory=set)

    @property
    def shows_results(self) -> bool:
        """Whether somebody reads the results: standard output is a terminal."""
        return not self.quiet and sys.stdout.isatty()

    @property
    def width(self) -> int:
        """The columns of the terminal on standard output."""
        return max(_console(sys.stdout).width, NARROWEST)

    def line(self, text: str) -> None:
        """Print a line of text on standard output."""
        if not self.quiet:
            self._say(sys.stdout, f"{printable(text)}\n")

    def lines(self, lines: Iterable[Line]) -> None:
        """Print styled lines on a terminal, as they are: the terminal breaks longer ones."""
        from rich.text import Text

        with self._aside():
            console = _console(sys.stdout)
            for line in lines:
                pieces = [(printable(text), style) for text, style in line]
                console.print(Text.assemble(*pieces), soft_wrap=True)

    def path(self, path: Path) -> None:
        """Print the path of a file that was written, byte for byte what the system calls it."""
        if sys.stdout.isatty():
            self.line(str(path))
        elif not self.quiet:
            sys.stdout.flush()
            self._say(sys.stdout, os.fsencode(path) + b"\n")

    def error(self, error: ClosedformError) -> None:
        """Print the paragraph of an error on standard error, but the same one only once.

        The lines below the paragraph are an excerpt and its caret, and are never wrapped.
        """
        text = str(error)
        if text in self._told:
            return
        self._told.add(text)
        head, *excerpt = f"error: {printable(text)}".split("\n")
        if not sys.stderr.isatty():
            self._say(sys.stderr, "\n".join([head, *excerpt, ""]))
            return
        from rich.text import Text

        console = _console(sys.stderr)
        folded = textwrap.fill(
            head,
            max(console.width, NARROWEST),
            break_long_words=False,  # a path or a number can be copied whole
            break_on_hyphens=False,
        )
        shown = Text("\n".join([folded, *excerpt]))
        shown.stylize("bold red", 0, len("error:"))
        with self._aside():
            console.print(shown, soft_wrap=True)

    def notice(self, text: str) -> None:
        """Print one line on standard error."""
        self._say(sys.stderr, f"{text}\n")

    @contextmanager
    def progress(self, total: int) -> Iterator[Progress]:
        """Show what is being done on standard error, if that is a terminal, until the end."""
        from closedform.cli.progress import Progress

        shown = not self.quiet and sys.stderr.isatty()
        with Progress(_console(sys.stderr) if shown else None, total) as progress:
            self._progress = progress
            try:
                yield progress
            finally:
                self._progress = None

    @contextmanager
    def _aside(self) -> Iterator[None]:
        """Take the progress line off the terminal while something else is printed."""
        if self._progress is None:
            yield
            return
        with self._progress.hidden():
            yield

    def _say(self, stream: TextIO, said: str | bytes) -> None:
        with self._aside():
            try:
                if isinstance(said, bytes):
                    stream.buffer.write(said)
                else:
                    stream.write(said)
                stream.flush()
            except OSError as error:
                # What is still in the buffer would fail again when Python ends.
                os.dup2(os.open(os.devnull, os.O_WRONLY), stream.fileno())
                if isinstance(error, BrokenPipeError):
                    return  # nobody reads any more; the files are still wanted
                raise StreamError((error.strerror or str(error)).lower()) from error


def _console(stream: TextIO) -> Console:
    from rich.console import Console
    from rich.theme import Theme

    return Console(
        file=stream, theme=Theme(PLAIN_STYLES), highlight=False, markup=False, emoji=False
    )
