"""What can be wrong with the content of a model."""

from __future__ import annotations

from closedform.errors import Place
from closedform.notation.errors import PlacedError, quoted

__all__ = [
    "BinaryFractionError",
    "ClashingKeysError",
    "DuplicateNameError",
    "InitialLengthError",
    "InputColumnsError",
    "LaterKeyError",
    "LookalikeNamesError",
    "MisplacedKeyError",
    "MissingInitialError",
    "MissingKeyError",
    "MixedFormsError",
    "ModelError",
    "NoStatesError",
    "RowCountError",
    "RowLengthError",
    "TooManyStatesError",
    "UnknownKeyError",
    "UnknownStateError",
    "UnusableNameError",
    "WrongKindError",
]


class ModelError(PlacedError):
    """A model that cannot be used as it is stated."""


class MissingKeyError(ModelError):
    """A key without which there is no model."""

    def __init__(self, place: Place, key: str, example: str) -> None:
        super().__init__(place, key, example)
        self.key, self.example = key, example

    def _paragraph(self) -> str:
        return f"the key '{self.key}' is missing; add a line such as {quoted(self.example)}"


class UnknownKeyError(ModelError):
    """A key that no model has; `nearest` is the known key most like it."""

    def __init__(self, place: Place, key: str, nearest: str | None, known: tuple[str, ...]) -> None:
        super().__init__(place, key, nearest, known)
        self.key, self.nearest, self.known = key, nearest, known

    def _paragraph(self) -> str:
        if self.nearest:
            return f"there is no key {quoted(self.key)}; did you mean '{self.nearest}'?"
        return f"there is no key {quoted(self.key)}; the keys are {', '.join(self.known)}"


class LaterKeyError(ModelError):
    """A key that is kept for something this version does not do."""

    def __init__(self, place: Place, key: str) -> None:
        super().__init__(place, key)
        self.key = key

    def _paragraph(self) -> str:
        return f"this version does not read '{self.key}' yet; take it away"


class MixedFormsError(ModelError):
    """Keys of two ways to state a model; `key` does not belong to that of `first`."""

    def __init__(self, place: Place, first: str, key: str) -> None:
        super().__init__(place, first, key)
        self.first, self.key = first, key

    def _paragraph(self) -> str:
        return (
            f"'{self.first}' and '{self.key}' state a model in two different ways; state it by "
            "'equations', or by 'mass', 'damping' and 'stiffness', or by 'matrix', and take the "
            "other keys away"
        )


class ClashingKeysError(ModelError):
    """Two keys that do not go together, and why."""

    def __init__(self, place: Place, key: str, other: str, reason: str) -> None:
        super().__init__(place, key, other, reason)
        self.key, self.other, self.reason = key, other, reason

    def _paragraph(self) -> str:
        return (
            f"'{self.key}' and '{self.other}' do not go together: {self.reason}; take one of "
            "them away"
        )


class MisplacedKeyError(ModelError):
    """A key of the model that stands inside one of its tables."""

    def __init__(self, place: Place, key: str, table: str) -> None:
        super().__init__(place, key, table)
        self.key, self.table = key, table

    def _paragraph(self) -> str:
        return (
            f"'{self.key}' is a key of the model, but it stands below the heading "
            f"[{self.table}] and so belongs to that table; move it above the heading"
        )


class WrongKindError(ModelError):
    """A value of the wrong kind: text for an array, a truth value for a number."""

    def __init__(self, place: Place, expected: str, found: str) -> None:
        super().__init__(place, expected, found)
        self.expected, self.found = expected, found

    def _paragraph(self) -> str:
        return f"here stands {self.found}, and {self.expected} is needed"


class BinaryFractionError(ModelError):
    """A Python float, which is a binary fraction and not the decimal that was typed."""

    def __init__(self, place: Place, found: float) -> None:
        super().__init__(place, found)
        self.found = found

    def _paragraph(self) -> str:
        return (
            f"{self.found!r} is a binary floating-point number, and models are exact; give it "
            f'as text, "{self.found!r}", or as a Fraction'
        )


class NoStatesError(ModelError):
    """An empty list of states."""

    def _paragraph(self) -> str:
        return "there are no states; a model has at least one"


class TooManyStatesError(ModelError):
    """More states than can be treated exactly."""

    def __init__(self, place: Place, count: int, limit: int) -> None:
        super().__init__(place, count, limit)
        self.count, self.limit = count, limit

    def _paragraph(self) -> str:
        return (
            f"there are {self.count} states, and at most {self.limit} are read: the exact "
            "numbers of a closed form grow with every state, and nobody could read the "
            "result; reduce the model first"
        )


class UnusableNameError(ModelError):
    """A name that cannot be used in formulas, and why."""

    def __init__(self, place: Place, name: str, reason: str) -> None:
        super().__init__(place, name, reason)
        self.name, self.reason = name, reason

    def _paragraph(self) -> str:
        return f"{quoted(self.name)} cannot be used as a name: {self.reason}"


class DuplicateNameError(ModelError):
    """A name that is given twice."""

    def __init__(self, place: Place, name: str) -> None:
        super().__init__(place, name)
        self.name = name

    def _paragraph(self) -> str:
        return f"the name '{self.name}' is given twice; names must differ"


class LookalikeNamesError(ModelError):
    """Two names that one symbol would stand for in print; `printed` is its plain spelling."""

    def __init__(self, place: Place, name: str, other: str, printed: str) -> None:
        super().__init__(place, name, other, printed)
        self.name, self.other, self.printed = name, other, printed

    def _paragraph(self) -> str:
        base, *indices = self.printed.split("_")
        index = f" with the index {','.join(indices)}" if indices else ""
        return (
            f"the names '{self.other}' and '{self.name}' would be printed alike, both as "
            f"{base}{index}; give one of them another letter, word or index"
        )


class RowCountError(ModelError):
    """A matrix with another number of rows than there are states."""

    def __init__(self, place: Place, rows: int, states: int) -> None:
        super().__init__(place, rows, states)
        self.rows, self.states = rows, states

    def _paragraph(self) -> str:
        return (
            f"the matrix has {_counted(self.rows, 'row')}, but there "
            f"{_are(self.states, 'state')}; write one row for each state"
        )


class RowLengthError(ModelError):
    """A row of the matrix with another number of entries than there are states."""

    def __init__(self, place: Place, row: int, length: int, states: int) -> None:
        super().__init__(place, row, length, states)
        self.row, self.length, self.states = row, length, states

    def _paragraph(self) -> str:
        relation = "is missing" if self.length < self.states else "is too many"
        difference = abs(self.length - self.states)
        return (
            f"row {self.row} of the matrix has {_counted(self.length, 'entry')}, but there "
            f"{_are(self.states, 'state')}, so {difference} "
            f"{relation if difference == 1 else relation.replace('is', 'are', 1)}; "
            "the matrix must be square"
        )


class InputColumnsError(ModelError):
    """A row of the input matrix with another number of entries than there are inputs."""

    def __init__(self, place: Place, row: int, length: int, inputs: int) -> None:
        super().__init__(place, row, length, inputs)
        self.row, self.length, self.inputs = row, length, inputs

    def _paragraph(self) -> str:
        return (
            f"row {self.row} of the input matrix has {_counted(self.length, 'entry')}, but there "
            f"{_are(self.inputs, 'input')}; write one entry for each input, in their order"
        )


class InitialLengthError(ModelError):
    """Another number of initial values than there are states."""

    def __init__(self, place: Place, length: int, states: int) -> None:
        super().__init__(place, length, states)
        self.length, self.states = length, states

    def _paragraph(self) -> str:
        return (
            f"'initial' has {_counted(self.length, 'value')}, but there "
            f"{_are(self.states, 'state')}; write one value for each state, in their order"
        )


class MissingInitialError(ModelError):
    """States to which a table of initial values gives none."""

    def __init__(self, place: Place, states: tuple[str, ...]) -> None:
        super().__init__(place, states)
        self.states = states

    def _paragraph(self) -> str:
        listed = ", ".join(f"'{state}'" for state in self.states[:8])
        more = ", …" if len(self.states) > 8 else ""
        return f"'initial' gives no value to {listed}{more}; write 0 where that is meant"


class UnknownStateError(ModelError):
    """An initial value for a name that is no state."""

    def __init__(
        self, place: Place, name: str, nearest: str | None, states: tuple[str, ...]
    ) -> None:
        super().__init__(place, name, nearest, states)
        self.name, self.nearest, self.states = name, nearest, states

    def _paragraph(self) -> str:
        if self.nearest:
            return f"there is no state {quoted(self.name)}; did you mean '{self.nearest}'?"
        listed = ", ".join(self.states[:8]) + (", …" if len(self.states) > 8 else "")
        if not listed:
            return f"there is no state, and {quoted(self.name)} is none; take it away"
        return f"there is no state {quoted(self.name)}; the states are {listed}"


def _counted(count: int, noun: str) -> str:
    plural = noun[:-1] + "ies" if noun.endswith("y") else noun + "s"
    return f"{count} {noun if count == 1 else plural}"


def _are(count: int, noun: str) -> str:
    return f"{'is' if count == 1 else 'are'} {_counted(count, noun)}"
