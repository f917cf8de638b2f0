"""The line on a terminal that says what is being done."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager
from types import TracebackType
from typing import TYPE_CHECKING, Self

if TYPE_CHECKING:
    from rich import progress as rich_progress
    from rich.console import Console

__all__ = ["Progress"]


class Progress:
    """A moving line with the model and the stage of work, gone when the work is done.

    With several models it counts them.  Without a console, nothing is shown.
    """

    def __init__(self, console: Console | None, total: int) -> None:
        self._bar = None if console is None else _bar(console, total)
        self._task = None if self._bar is None else self._bar.add_task("", total=total)

    def stage(self, model: str, work: str) -> None:
        """Say which model is worked on, and how."""
        if self._bar is not None and self._task is not None:
            self._bar.update(self._task, description=f"{model}: {work}")

    def done(self) -> None:
        """Count one model more."""
        if self._bar is not None and self._task is not None:
            self._bar.advance(self._task)

    @contextmanager
    def hidden(self) -> Iterator[None]:
        """Take the line off the terminal for a while."""
        if self._bar is None:
            yield
            return
        self._bar.stop()
        try:
            yield
        finally:
            self._bar.start()

    def __enter__(self) -> Self:
        if self._bar is not None:
            self._bar.start()
        return self

    def __exit__(
        self,
        kind: type[BaseException] | None,
        error: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        if self._bar is not None:
            self._bar.stop()


def _bar(console: Console, total: int) -> rich_progress.Progress:
    from rich.progress import (
        BarColumn,
        MofNCompleteColumn,
        Progress,
        ProgressColumn,
        SpinnerColumn,
        TextColumn,
        TimeElapsedColumn,
    )
    from rich.table import Column

    columns: list[ProgressColumn] = [SpinnerColumn("line", style="")]
    if total > 1:
        columns += [BarColumn(16), MofNCompleteColumn()]
    columns += [
        TimeElapsedColumn(),
        TextColumn(
            "{task.description}",
            markup=False,
            table_column=Column(no_wrap=True, overflow="ellipsis"),
        ),
    ]
    return Progress(
        *columns,
        console=console,
        transient=True,
        disable=console.is_dumb_terminal,
        redirect_stdout=False,  # results may go to a pipe
        redirect_stderr=False,
    )
