"""Exit statuses: 0 all well, 1 refuted, 2 input not usable, 3 something outside is missing.

A result that could not be proved, though nothing is wrong with it, counts as 2: 1 asks for
the program to be mended, 2 for another input.
"""

from __future__ import annotations

from collections.abc import Iterable

from closedform.errors import ClosedformError, InputError, MissingToolError, RefutedError

__all__ = ["INTERRUPTED", "status_of", "worst"]

INTERRUPTED = 130
"""What shells give a command that was stopped by Ctrl-C: 128 + SIGINT."""

BRANCHES: tuple[tuple[type[ClosedformError], int], ...] = (
    (RefutedError, 1),
    (InputError, 2),
    (MissingToolError, 3),
)


def status_of(error: ClosedformError) -> int:
    """Return the exit status that an error stands for."""
    for branch, status in BRANCHES:
        if isinstance(error, branch):
            return status
    raise error  # a branch of the family that has no status yet: let it show


def worst(statuses: Iterable[int]) -> int:
    """Return the status of several models together: 1 before 2 before 3 before 0."""
    return min((status for status in statuses if status), default=0)
