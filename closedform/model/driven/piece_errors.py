"""What can be wrong with the inputs that a model declares."""

from __future__ import annotations

from closedform.errors import Place
from closedform.model.errors import ModelError
from closedform.notation.errors import quoted

__all__ = [
    "EarlyRepeatError",
    "ImpulseOutsideError",
    "OutsidePeriodError",
    "PeriodError",
    "PeriodMissingError",
    "PieceOrderError",
    "PiecesOverlapError",
    "RepeatCountError",
    "TwoFormsError",
]


class TwoFormsError(ModelError):
    """An input with a formula and with pieces."""

    def __init__(self, place: Place, name: str) -> None:
        super().__init__(place, name)
        self.name = name

    def _paragraph(self) -> str:
        return (
            f"the input '{self.name}' has both 'is' and 'pieces'; write the formula as the 'is' "
            "of a piece, or leave the pieces out"
        )


class PieceOrderError(ModelError):
    """A piece that does not begin before it ends, or is not known to; `known` tells which."""

    def __init__(self, place: Place, piece: str, start: str, end: str, known: bool) -> None:  # noqa: FBT001  as pickled
        super().__init__(place, piece, start, end, known)
        self.piece, self.start, self.end, self.known = piece, start, end, known

    def _paragraph(self) -> str:
        if self.known:
            return f"the piece {self.piece} does not begin before it ends; correct 'from' or 'to'"
        return (
            f"the piece {self.piece} is not known to begin before it ends; add the condition "
            f'"{self.start} < {self.end}"'
        )


class PiecesOverlapError(ModelError):
    """Two pieces that are on at one time."""

    def __init__(self, place: Place, one: str, other: str) -> None:
        super().__init__(place, one, other)
        self.one, self.other = one, other

    def _paragraph(self) -> str:
        return (
            f"the pieces {self.one} and {self.other} overlap; let one end where the other begins, "
            "or declare two inputs, which add up in the equation"
        )


class ImpulseOutsideError(ModelError):
    """A piece or a period in which not all of its impulses strike."""

    def __init__(self, place: Place, piece: str) -> None:
        super().__init__(place, piece)
        self.piece = piece

    def _paragraph(self) -> str:
        return (
            f"{self.piece} holds an impulse that strikes outside of it, where it is 0; an impulse "
            "at the very end is outside too: let it strike at the beginning of what follows"
        )


class OutsidePeriodError(ModelError):
    """A piece that is not known to lie within the first period."""

    def __init__(self, place: Place, piece: str, start: str, end: str) -> None:
        super().__init__(place, piece, start, end)
        self.piece, self.start, self.end = piece, start, end

    def _paragraph(self) -> str:
        return (
            f"the piece {self.piece} has to lie within the first period, from {self.start} to "
            f"{self.end}; correct it, 'period' or 'start', or add a condition on the parameters "
            "from which this follows"
        )


class PeriodError(ModelError):
    """A period that is not positive, or not known to be; `known` tells which."""

    def __init__(self, place: Place, period: str, known: bool) -> None:  # noqa: FBT001  as pickled
        super().__init__(place, period, known)
        self.period, self.known = period, known

    def _paragraph(self) -> str:
        if self.known:
            return f"the period {quoted(self.period)} is not positive; a period is a time span > 0"
        return (
            f"the period {quoted(self.period)} is not known to be positive; declare its "
            f'parameters as positive, or add the condition "{self.period} > 0"'
        )


class PeriodMissingError(ModelError):
    """A key that says something of repeats, in an input without a period."""

    def __init__(self, place: Place, key: str) -> None:
        super().__init__(place, key)
        self.key = key

    def _paragraph(self) -> str:
        return (
            f"'{self.key}' belongs to an input that repeats, and there is no 'period'; add one, or "
            f"take '{self.key}' away"
        )


class RepeatCountError(ModelError):
    """A number of repeats that is none."""

    def __init__(self, place: Place, found: str) -> None:
        super().__init__(place, found)
        self.found = found

    def _paragraph(self) -> str:
        return (
            f"'count' is {self.found}, and it has to be a whole number from 1 on; leave it out "
            "for an input that repeats for ever"
        )


class EarlyRepeatError(ModelError):
    """An input whose first period begins before the start of time."""

    def __init__(self, place: Place, found: str, begins: str, start: str) -> None:
        super().__init__(place, found, begins, start)
        self.found, self.begins, self.start = found, begins, start

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} repeats from {self.begins} on, which is before the start of "
            f"time, {self.start}; begin the model at {self.begins} too, or let the periods begin "
            f"at {self.start}: set the 'start' of the input to it, and state one period from there"
        )
