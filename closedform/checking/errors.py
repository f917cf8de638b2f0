"""What can stand in the way of a verdict on a line."""

from __future__ import annotations

from closedform.algebra.elementary import NotElementaryError
from closedform.errors import InputError

__all__ = ["UNDECIDED", "NotJudgedError", "SizeError", "UnknownNameError"]


class NotJudgedError(InputError):
    """A line that was read, but about which nothing can be decided; `reason` says why."""

    def __init__(self, reason: str) -> None:
        super().__init__(reason)
        self.reason = reason

    def __str__(self) -> str:
        return self.reason


class UnknownNameError(NotJudgedError):
    """A name that neither the model nor an earlier line gives a meaning."""

    def __init__(self, name: str) -> None:
        super().__init__(name)
        self.name = name

    def __str__(self) -> str:
        return f"nothing is called {self.name}: neither the model nor an earlier line defines it"


class SizeError(NotJudgedError):
    """Matrices whose sizes do not fit together."""

    def __init__(self, what: str, first: tuple[int, int], second: tuple[int, int] | None) -> None:
        super().__init__(what)
        self.what, self.first, self.second = what, first, second

    def __str__(self) -> str:
        one = f"{self.first[0]} by {self.first[1]}"
        if self.second is None:
            return f"{self.what} of a matrix that is {one}"
        return f"{self.what} of matrices that are {one} and {self.second[0]} by {self.second[1]}"


UNDECIDED = (NotJudgedError, NotElementaryError, ZeroDivisionError)
"""What is raised where the exact value of a formula cannot be worked out."""
