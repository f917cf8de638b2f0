"""From a mapping of keys to values, as a TOML file gives it, to the model."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Mapping, Sequence
from difflib import get_close_matches

from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.model.entries import kind_of, number_from
from closedform.model.errors import (
    InitialLengthError,
    LaterKeyError,
    MisplacedKeyError,
    MissingInitialError,
    MissingKeyError,
    RowCountError,
    RowLengthError,
    UnknownKeyError,
    UnknownStateError,
    WrongKindError,
)
from closedform.model.model import Model, Output
from closedform.model.naming import check_lookalike, check_name, check_states, check_time
from closedform.model.source import Source
from closedform.notation.latex.names import printed_key
from closedform.notation.linear import linear_combination
from closedform.notation.reader import read_formula

__all__ = ["build", "model_from", "system"]

REQUIRED = {
    "title": 'title = "Two tanks in series"',
    "states": 'states = ["x1", "x2"]',
    "matrix": "matrix = [[-1, 0], [1, -2]]",
    "initial": "initial = [1, 0]",
}
OPTIONAL = ("summary", "time", "outputs", "times")
LATER = ("equations", "mass", "damping", "stiffness", "parameters", "inputs", "document")
USUAL_KEYS = {
    "a": "matrix",
    "system": "matrix",
    "ic": "initial",
    "x0": "initial",
    "y0": "initial",
    "initial_conditions": "initial",
    "x": "states",
    "variables": "states",
    "unknowns": "states",
    "y": "outputs",
    "name": "title",
    "description": "summary",
    "abstract": "summary",
    "t": "times",
    "independent_variable": "time",
}
"""What people call the keys elsewhere, in small letters, beside slips of the pen."""
LONGEST_STEM = 100

NOWHERE = Place()


def model_from(mapping: Mapping[str, object], *, name: str, place: Place = NOWHERE) -> Model:
    """Return the model stated by a mapping with the keys of a model file.

    Numbers are int, Fraction (or any other exact rational), Decimal, SurdSum, or text such
    as "0.1" or "sqrt(2)/2"; arrays are sequences, or anything with `tolist`.  `name` is the
    stem under which results are filed, made safe for a file name.

    Shapes:  `matrix` is n rows of n entries, `initial` has n, n = len(states) >= 1.
    Raises:  the errors of ``closedform.model.errors`` and ``closedform.notation.errors``.

    >>> model = model_from(
    ...     {"title": "Decay", "states": ["n"], "matrix": [["-0.1"]], "initial": [1]},
    ...     name="decay",
    ... )
    >>> model.matrix[0][0].as_fraction()
    Fraction(-1, 10)
    """
    return build(mapping, name, Source(place))


def system(  # noqa: PLR0913  the keys of a model file, each by its name
    matrix: object,
    *,
    initial: object,
    states: Sequence[str] | None = None,
    title: str = "A linear system",
    outputs: Mapping[str, str] | None = None,
    times: object = (),
    time: str = "t",
    name: str = "system",
) -> Model:
    """Return the model x' = matrix x, x(0) = initial, from Python values.

    Numbers are as in `model_from`; the states are called x1, x2, … unless named.

    >>> system([[0, 1], ["-1/4", 0]], initial=[1, 0]).states
    ('x1', 'x2')
    """
    rows = _array(matrix, "an array of rows", "matrix", Source(NOWHERE))
    mapping = {
        "title": title,
        "states": states or [f"x{k}" for k in range(1, len(rows) + 1)],
        "matrix": matrix,
        "initial": initial,
        "outputs": outputs or {},
        "times": times,
        "time": time,
    }
    return model_from(mapping, name=name)


def build(mapping: Mapping[str, object], name: str, source: Source) -> Model:
    """Return the model stated by a mapping; errors give the lines of `source`."""
    _check_keys(mapping, source)
    title = _text(mapping["title"], "title", source)
    if not title:
        raise WrongKindError(source.at("title"), "a title", "empty text")
    time = _text(mapping.get("time", "t"), "time", source)
    check_time(time, source)
    given = _array(mapping["states"], "an array of names", "states", source)
    states = check_states(given, time, source)
    return Model(
        name=_stem(name),
        title=" ".join(title.split()),
        states=states,
        matrix=_matrix(mapping["matrix"], len(states), source),
        initial=_initial(mapping["initial"], states, source),
        outputs=_outputs(mapping.get("outputs", {}), states, time, source),
        times=_numbers(mapping.get("times", ()), "times", source),
        time=time,
        summary=_text(mapping.get("summary", ""), "summary", source),
    )


def _check_keys(mapping: Mapping[str, object], source: Source) -> None:
    known = (*REQUIRED, *OPTIONAL)
    for key in mapping:
        if key in LATER:
            raise LaterKeyError(source.at_name(key), key)
        if key not in known:
            raise UnknownKeyError(source.at_name(str(key)), str(key), _nearest(str(key)), known)
    for key, example in REQUIRED.items():
        if key not in mapping:
            raise MissingKeyError(source.place, key, example)


def _nearest(key: str) -> str | None:
    """Return the key that was probably meant, if one comes near."""
    small = key.lower()
    if small in USUAL_KEYS:
        return USUAL_KEYS[small]
    near = get_close_matches(small, (*REQUIRED, *OPTIONAL), n=1)
    return near[0] if near else None


def _text(value: object, key: str, source: Source) -> str:
    if not isinstance(value, str):
        raise WrongKindError(source.at(key), "text in quotation marks", kind_of(value))
    return value.strip()


def _array(value: object, expected: str, key: str, source: Source) -> Sequence[object]:
    """Return a value as a sequence; arrays of other packages give theirs by `tolist`."""
    value = value.tolist() if hasattr(value, "tolist") else value
    if isinstance(value, str) or not isinstance(value, Sequence):
        raise WrongKindError(source.at(key), expected, kind_of(value))
    return value


def _numbers(value: object, key: str, source: Source) -> tuple[SurdSum, ...]:
    entries = _array(value, "an array of numbers", key, source)
    return tuple(
        number_from(entry, f"{key}[{k}]", source) for k, entry in enumerate(entries, start=1)
    )


def _matrix(value: object, n: int, source: Source) -> tuple[tuple[SurdSum, ...], ...]:
    given = _array(value, "an array of rows", "matrix", source)
    rows = [
        _array(row, f"a row, an array of {n} numbers,", f"matrix[{k}]", source)
        for k, row in enumerate(given, start=1)
    ]
    if len(rows) != n:
        raise RowCountError(source.at("matrix"), len(rows), n)
    for k, row in enumerate(rows, start=1):
        if len(row) != n:
            raise RowLengthError(source.at(f"matrix[{k}]"), k, len(row), n)
    return tuple(_numbers(row, f"matrix[{k}]", source) for k, row in enumerate(rows, start=1))


def _initial(value: object, states: tuple[str, ...], source: Source) -> tuple[SurdSum, ...]:
    if not isinstance(value, Mapping):
        expected = "an array of numbers, or a table with a number for each state,"
        given = _array(value, expected, "initial", source)
        if len(given) != len(states):
            raise InitialLengthError(source.at("initial"), len(given), len(states))
        return _numbers(given, "initial", source)
    for name in value:
        if name not in states:
            _refuse_misplaced(name, "initial", source)
            near = get_close_matches(str(name), states, n=1)
            place = source.at_name(f"initial.{name}")
            raise UnknownStateError(place, str(name), near[0] if near else None, states)
    missing = tuple(state for state in states if state not in value)
    if missing:
        raise MissingInitialError(source.at("initial"), missing)
    return tuple(number_from(value[state], f"initial.{state}", source) for state in states)


def _outputs(
    value: object, states: tuple[str, ...], time: str, source: Source
) -> tuple[Output, ...]:
    if not isinstance(value, Mapping):
        expected = "a table with a formula for each output"
        raise WrongKindError(source.at("outputs"), expected, kind_of(value))
    printed = {printed_key(name): name for name in (time, *states)}
    outputs = []
    for name, formula in value.items():
        outputs.append(_output(name, formula, states, time, source))
        check_lookalike(name, f"outputs.{name}", source, printed)
    return tuple(outputs)


def _output(
    name: str, formula: object, states: tuple[str, ...], time: str, source: Source
) -> Output:
    key = f"outputs.{name}"
    _refuse_misplaced(name, "outputs", source)
    check_name(name, key, source, time=time, states=states)
    if not isinstance(formula, str):
        raise WrongKindError(source.at(key), "a formula in quotation marks", kind_of(formula))

    def work(place: Place) -> tuple[SurdSum, ...]:
        names = frozenset(states) | {time}
        return linear_combination(read_formula(formula, names=names, place=place), states, place)

    return Output(name, source.read(formula, key, work))


def _refuse_misplaced(name: str, table: str, source: Source) -> None:
    if name in REQUIRED or name in OPTIONAL:
        raise MisplacedKeyError(source.at_name(f"{table}.{name}"), name, table)


def _stem(name: str) -> str:
    """Return a name that is safe as the stem of a file name on every system."""
    plain = unicodedata.normalize("NFKD", name).encode("ascii", "ignore").decode()
    safe = re.sub(r"[^A-Za-z0-9_.-]+", "-", plain)[:LONGEST_STEM].strip("-.")
    return safe or "model"
