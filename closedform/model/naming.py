"""Which names a model may use."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass

from closedform.errors import Place
from closedform.model.entries import kind_of
from closedform.model.errors import (
    DuplicateNameError,
    LookalikeNamesError,
    NoStatesError,
    TooManyStatesError,
    UnusableNameError,
    WrongKindError,
)
from closedform.model.source import Source
from closedform.notation.expression import FUNCTIONS, SIGNALS
from closedform.notation.greek import ascii_name
from closedform.notation.latex.names import printed_key

__all__ = [
    "MOST_STATES",
    "Names",
    "check_states",
    "check_time",
    "named_at",
    "named_in",
    "refuse_impulse",
]

MOST_STATES = 400
LONGEST_NAME = 64
USABLE = re.compile("[A-Za-z][A-Za-z0-9_]*")
KEPT = {
    "e": "in a formula people take it for the base of exp; write 'e_1' or a word such as 'error'",
    "pi": "in a formula people take it for the number 3.14159...; write 'p_i' or 'pi_1'",
}
"""Names that mean something else in a formula, and what to write."""
LETTERS_OF_WRITE_UPS = ("lambda", "mu", "s", "p", "g", "r", "i")
VARYING = ("an input", "an unknown")
"""What depends on the time, and so may have it in brackets."""
NOTHING: Mapping[str, str] = {}


@dataclass(frozen=True)
class Names:
    """The names of a model so far: the time, and what has each of the others."""

    time: str
    taken: Mapping[str, str]

    def added(self, names: Iterable[str], kind: str) -> Names:
        """Return these names and more."""
        return Names(self.time, {**self.taken, **dict.fromkeys(names, kind)})


def named_in(table: Iterable[str], key: str, kind: str, names: Names, source: Source) -> Names:
    """Return the names with those of a table, which are to be usable and to differ.

    `key` is the table's, `kind` what has its names, as in "an output".

    Raises:  UnusableNameError, LookalikeNamesError.
    """
    return named_at({str(name): f"{key}.{name}" for name in table}, kind, names, source)


def named_at(places: Mapping[str, str], kind: str, names: Names, source: Source) -> Names:
    """Return the names with those of `places`, which says of each under which key it stands.

    Raises:  UnusableNameError, LookalikeNamesError.
    """
    printed = {printed_key(name): name for name in (names.time, *names.taken)}
    for name, place in places.items():
        if kind in VARYING:
            refuse_impulse(name, place, source)
        check_name(name, place, source, time=names.time, taken=names.taken)
        check_lookalike(name, place, source, printed)
    return names.added(places, kind)


def refuse_impulse(name: str, key: str, source: Source) -> None:
    """Raise UnusableNameError for what depends on the time under the name of the impulse."""
    if name in SIGNALS and name not in FUNCTIONS:
        reason = f"{name}(…) means a function in formulas; write '{name}_1', or choose another"
        raise UnusableNameError(_place(key, source), name, reason)


def check_name(
    name: str,
    key: str,
    source: Source,
    *,
    time: str | None = None,
    taken: Mapping[str, str] = NOTHING,
) -> None:
    """Raise UnusableNameError unless a name can be used in formulas.

    `time` is the name of the time; `taken` holds the names that are in use, and by what.
    """
    reason = None
    if not USABLE.fullmatch(name):
        reason = (
            "a name begins with one of the letters a-z or A-Z and goes on with letters, digits "
            "and underscores"
        )
        if USABLE.fullmatch(ascii_name(name)):
            reason += f"; write '{ascii_name(name)}'"
    elif len(name) > LONGEST_NAME:
        reason = f"it has {len(name)} characters, and names have at most {LONGEST_NAME}"
    elif name in FUNCTIONS:
        reason = f"it is the name of a function; write '{name}_1', or choose another"
    elif name in KEPT:
        reason = KEPT[name]
    elif name == time:
        reason = "it is the name of the time; choose another, or set 'time'"
    elif name in taken:
        reason = f"{taken[name]} has that name; choose another"
    if reason:
        raise UnusableNameError(_place(key, source), name, reason)


def check_time(name: str, source: Source) -> None:
    """Raise UnusableNameError unless a name can stand for the time.

    The letters that a write-up uses itself, as functions or variables, are no names of it.
    """
    check_name(name, "time", source)
    if printed_key(name) in map(printed_key, LETTERS_OF_WRITE_UPS):
        reason = "a write-up uses this letter for something else; 't' or 'tau' will do"
        raise UnusableNameError(source.at("time"), name, reason)


def check_lookalike(name: str, key: str, source: Source, printed: dict[str, str]) -> None:
    """Add a name to those known so far, which `printed` holds by their `printed_key`.

    Raises:  LookalikeNamesError if another of them is printed like it.
    """
    symbol = printed_key(name)
    other = printed.setdefault(symbol, name)
    if other != name:
        raise LookalikeNamesError(_place(key, source), name, other, symbol)


def _place(key: str, source: Source) -> Place:
    """Return the place of a name: of the key where it is one, of the value where it is that."""
    return source.at_name(key) if "." in key else source.at(key)


def check_states(given: Sequence[object], time: str, source: Source) -> tuple[str, ...]:
    """Return the names of the states, each usable and different from the others and the time.

    They differ in print too: nobody could tell x1 from x_1 in a formula.

    Raises:  NoStatesError, TooManyStatesError, WrongKindError, UnusableNameError,
             DuplicateNameError, LookalikeNamesError.
    """
    if not given:
        raise NoStatesError(source.at("states"))
    if len(given) > MOST_STATES:
        raise TooManyStatesError(source.at("states"), len(given), MOST_STATES)
    states: list[str] = []
    printed = {printed_key(time): time}
    for k, name in enumerate(given, start=1):
        if not isinstance(name, str):
            place = source.at(f"states[{k}]")
            raise WrongKindError(place, "a name in quotation marks", kind_of(name))
        check_name(name, f"states[{k}]", source, time=time)
        if name in states:
            raise DuplicateNameError(source.at(f"states[{k}]"), name)
        check_lookalike(name, f"states[{k}]", source, printed)
        states.append(name)
    return tuple(states)
