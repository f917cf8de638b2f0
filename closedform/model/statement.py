"""What a model states, whatever its entries are: kinds of values, names, shapes."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from typing import TypeVar

from closedform.algebra.surds import SurdSum
from closedform.model.entries import kind_of, number_from
from closedform.model.errors import (
    InitialLengthError,
    InputColumnsError,
    MissingInitialError,
    RowCountError,
    RowLengthError,
    UnknownStateError,
    WrongKindError,
)
from closedform.model.keys import refuse_misplaced
from closedform.model.naming import Names, check_states, check_time, named_in
from closedform.model.source import Source

__all__ = [
    "Heading",
    "array_of",
    "heading_of",
    "initial_of",
    "input_matrix_of",
    "matrix_of",
    "outputs_of",
    "table_of",
    "text_of",
]

T = TypeVar("T")
Entry = Callable[[object, str], T]
"""What makes a value of an entry, given with its key."""
LONGEST_STEM = 100


@dataclass(frozen=True, slots=True)
class Heading:
    """What every model has: `name` is the stem under which results are filed.

    There are no `states` where equations are to tell the unknowns.
    """

    name: str
    title: str
    summary: str
    time: str
    states: tuple[str, ...]
    times: tuple[SurdSum, ...]

    @property
    def names(self) -> Names:
        """The names that are in use before there are others."""
        return Names(self.time, dict.fromkeys(self.states, "a state"))


def heading_of(mapping: Mapping[str, object], name: str, source: Source) -> Heading:
    """Return what a mapping states before its matrix."""
    title = text_of(mapping["title"], "title", source)
    if not title:
        raise WrongKindError(source.at("title"), "a title", "empty text")
    time = text_of(mapping.get("time", "t"), "time", source)
    check_time(time, source)
    states: tuple[str, ...] = ()
    if "states" in mapping:
        given = array_of(mapping["states"], "an array of names", "states", source)
        states = check_states(given, time, source)
    return Heading(
        name=_stem(name),
        title=" ".join(title.split()),
        summary=text_of(mapping.get("summary", ""), "summary", source),
        time=time,
        states=states,
        times=tuple(
            number_from(entry, f"times[{k}]", source)
            for k, entry in enumerate(
                array_of(mapping.get("times", ()), "an array of numbers", "times", source), start=1
            )
        ),
    )


def text_of(value: object, key: str, source: Source) -> str:
    """Return a value that is text, without blanks around it.  Raises WrongKindError."""
    if not isinstance(value, str):
        raise WrongKindError(source.at(key), "text in quotation marks", kind_of(value))
    return value.strip()


def array_of(value: object, expected: str, key: str, source: Source) -> Sequence[object]:
    """Return a value as a sequence; arrays of other packages give theirs by `tolist`."""
    value = value.tolist() if hasattr(value, "tolist") else value
    if isinstance(value, str) or not isinstance(value, Sequence):
        raise WrongKindError(source.at(key), expected, kind_of(value))
    return value


def table_of(value: object, expected: str, key: str, source: Source) -> Mapping[str, object]:
    """Return a value that is a table.  Raises WrongKindError."""
    if not isinstance(value, Mapping):
        raise WrongKindError(source.at(key), expected, kind_of(value))
    return value


def matrix_of(
    value: object, n: int, source: Source, entry: Entry[T], key: str = "matrix"
) -> tuple[tuple[T, ...], ...]:
    """Return n rows of n entries, each made by `entry`; `key` says where they stand."""
    given = array_of(value, "an array of rows", key, source)
    rows = [
        array_of(row, f"a row, an array of {n} numbers,", f"{key}[{k}]", source)
        for k, row in enumerate(given, start=1)
    ]
    if len(rows) != n:
        raise RowCountError(source.at(key), len(rows), n)
    for k, row in enumerate(rows, start=1):
        if len(row) != n:
            raise RowLengthError(source.at(f"{key}[{k}]"), k, len(row), n)
    return tuple(_entries(row, f"{key}[{k}]", entry) for k, row in enumerate(rows, start=1))


def input_matrix_of(
    value: object, n: int, m: int, source: Source, entry: Entry[T]
) -> tuple[tuple[T, ...], ...]:
    """Return n rows of m entries, a row for each state and a column for each input."""
    key = "input_matrix"
    given = array_of(value, "an array of rows", key, source)
    rows = [
        array_of(row, f"a row, an array of {m} numbers,", f"{key}[{k}]", source)
        for k, row in enumerate(given, start=1)
    ]
    for k, row in enumerate(rows, start=1):
        if len(row) != m:
            raise InputColumnsError(source.at(f"{key}[{k}]"), k, len(row), m)
    if len(rows) != n:
        raise RowCountError(source.at(key), len(rows), n)
    return tuple(_entries(row, f"{key}[{k}]", entry) for k, row in enumerate(rows, start=1))


def initial_of(
    value: object, states: tuple[str, ...], source: Source, entry: Entry[T]
) -> tuple[T, ...]:
    """Return an entry for each state, made by `entry` from an array or from a table by name."""
    if not isinstance(value, Mapping):
        expected = "an array of numbers, or a table with a number for each state,"
        given = array_of(value, expected, "initial", source)
        if len(given) != len(states):
            raise InitialLengthError(source.at("initial"), len(given), len(states))
        return _entries(given, "initial", entry)
    for name in value:
        if name not in states:
            refuse_misplaced(str(name), "initial", source)
            near = get_close_matches(str(name), states, n=1)
            place = source.at_name(f"initial.{name}")
            raise UnknownStateError(place, str(name), near[0] if near else None, states)
    missing = tuple(state for state in states if state not in value)
    if missing:
        raise MissingInitialError(source.at("initial"), missing)
    return tuple(entry(value[state], f"initial.{state}") for state in states)


def outputs_of(
    value: object, names: Names, source: Source, weigh: Entry[T]
) -> tuple[tuple[str, T], ...]:
    """Return the name of each output, and what `weigh` makes of its formula."""
    table = table_of(value, "a table with a formula for each output", "outputs", source)
    for name in table:
        refuse_misplaced(str(name), "outputs", source)
    named_in(table, "outputs", "an output", names, source)
    return tuple((name, weigh(formula, f"outputs.{name}")) for name, formula in table.items())


def _entries(given: Sequence[object], key: str, entry: Entry[T]) -> tuple[T, ...]:
    return tuple(entry(item, f"{key}[{k}]") for k, item in enumerate(given, start=1))


def _stem(name: str) -> str:
    """Return a name that is safe as the stem of a file name on every system."""
    plain = unicodedata.normalize("NFKD", name).encode("ascii", "ignore").decode()
    safe = re.sub(r"[^A-Za-z0-9_.-]+", "-", plain)[:LONGEST_STEM].strip("-.")
    return safe or "model"
