"""One family of errors.  Each says where, what was found, and what to do.

Every class keeps its facts as fields and composes its one paragraph of text in
``__str__``; nothing here prints.  The command line maps the branches to exit
statuses: `InputError` to 2, `RefutedError` to 1, `MissingToolError` to 3.
"""

from __future__ import annotations

from dataclasses import dataclass

__all__ = ["ClosedformError", "InputError", "MissingToolError", "Place", "RefutedError"]


@dataclass(frozen=True, slots=True)
class Place:
    """Where something stands: a file, the key inside it, and line and column if known.

    `line` and `column` count from 1 and refer to `excerpt`'s source (the file, or the
    formula under `key`).  `excerpt` is the one line of text concerned.
    """

    file: str | None = None
    key: str | None = None
    line: int | None = None
    column: int | None = None
    excerpt: str | None = None

    def __str__(self) -> str:
        parts = [self.file] if self.file else []
        if self.key:
            parts.append(self.key)
        if self.line is not None:
            parts.append(f"line {self.line}")
        if self.column is not None:
            parts.append(f"column {self.column}")
        return ", ".join(parts)


class ClosedformError(Exception):
    """Base of all errors that this package raises on purpose."""


class InputError(ClosedformError, ValueError):
    """What was handed in cannot be used as it stands."""


class RefutedError(ClosedformError):
    """A result failed its own proof, so it is not issued."""


class MissingToolError(ClosedformError):
    """Something outside this program is needed and is not there (a TeX engine, say)."""
