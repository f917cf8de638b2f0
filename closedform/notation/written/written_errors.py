"""What can keep a written formula from being read: each error holds its place and its facts."""

from __future__ import annotations

from closedform.errors import Place
from closedform.notation.errors import PlacedError, quoted

__all__ = [
    "NotReadError",
    "StopError",
    "UnbalancedError",
    "UnexpectedPartError",
    "UnknownCommandError",
    "UnknownEnvironmentError",
    "UnusableNotationError",
    "WrittenDepthError",
    "WrittenLengthError",
]


class NotReadError(PlacedError):
    """Something written that cannot be read; it is never guessed what is meant."""


class UnknownCommandError(NotReadError):
    """A command of LaTeX without a known meaning in a formula: `command` with its backslash."""

    def __init__(self, place: Place, command: str) -> None:
        super().__init__(place, command)
        self.command = command

    def _paragraph(self) -> str:
        return (
            f"the command {quoted(self.command)} is not known, so what it stands for cannot be "
            "read; write what it stands for in its place"
        )


class UnknownEnvironmentError(NotReadError):
    """An environment that holds no formula known here: `environment` is its name."""

    def __init__(self, place: Place, environment: str) -> None:
        super().__init__(place, environment)
        self.environment = environment

    def _paragraph(self) -> str:
        return (
            f"the environment {quoted(self.environment)} is not known; use one of amsmath for "
            "matrices, cases or lines of equations"
        )


class UnbalancedError(NotReadError):
    """A bracket without its partner: `found` is it."""

    def __init__(self, place: Place, found: str) -> None:
        super().__init__(place, found)
        self.found = found

    def _paragraph(self) -> str:
        return f"{quoted(self.found)} has no partner; close every bracket that is opened, in order"


class UnexpectedPartError(NotReadError):
    """A part that does not fit where it stands: `found`, or the end if that is empty."""

    def __init__(self, place: Place, found: str, expected: str) -> None:
        super().__init__(place, found, expected)
        self.found, self.expected = found, expected

    def _paragraph(self) -> str:
        what = quoted(self.found) if self.found else "the end"
        return f"{what} comes where {self.expected} is expected; write the formula in full"


class UnusableNotationError(NotReadError):
    """Something known that cannot be used: `found`, why not, and what to do."""

    def __init__(self, place: Place, found: str, why: str) -> None:
        super().__init__(place, found, why)
        self.found, self.why = found, why

    def _paragraph(self) -> str:
        return f"{quoted(self.found)} cannot be read: {self.why}"


class WrittenDepthError(NotReadError):
    """Brackets, scripts and fractions inside each other deeper than `limit`."""

    def __init__(self, place: Place, found: str, limit: int) -> None:
        super().__init__(place, found, limit)
        self.found, self.limit = found, limit

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} is nested more than {self.limit} deep; name a part of the "
            "formula and write the name"
        )


class WrittenLengthError(NotReadError):
    """A text of more characters than `limit`, which is no formula."""

    def __init__(self, place: Place, length: int, limit: int) -> None:
        super().__init__(place, length, limit)
        self.length, self.limit = length, limit

    def _paragraph(self) -> str:
        return f"{self.length} characters are more than the {self.limit} of one formula; part it"


class StopError(Exception):
    """Reading stopped between two offsets; the reader makes an error of `kind` of it."""

    def __init__(self, kind: type[NotReadError], start: int, end: int, *facts: object) -> None:
        super().__init__(kind, start, end, *facts)
        self.kind, self.start, self.end, self.facts = kind, start, end, facts

    def placed(self, place: Place) -> NotReadError:
        """Return the error with its place."""
        return self.kind(place, *self.facts)
