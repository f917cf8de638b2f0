"""The keys of a model file."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from difflib import get_close_matches

from closedform.model.errors import (
    LaterKeyError,
    MisplacedKeyError,
    MissingKeyError,
    UnknownKeyError,
)
from closedform.model.source import Source

__all__ = ["check_keys", "check_table", "refuse_misplaced"]

REQUIRED = {
    "title": 'title = "Two tanks in series"',
    "states": 'states = ["x1", "x2"]',
    "matrix": "matrix = [[-1, 0], [1, -2]]",
    "initial": "initial = [1, 0]",
}
OPTIONAL = ("summary", "time", "outputs", "times")
PARAMETRIC = ("parameters", "conditions", "substitute", "abbreviations", "values")
LATER = ("equations", "mass", "damping", "stiffness", "inputs", "document")
KNOWN = (*REQUIRED, *OPTIONAL, *PARAMETRIC)
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
    "params": "parameters",
    "constants": "parameters",
    "symbols": "parameters",
    "assumptions": "conditions",
    "constraints": "conditions",
    "assume": "conditions",
    "substitutions": "substitute",
    "definitions": "abbreviations",
}
"""What people call the keys elsewhere, in small letters, beside slips of the pen."""
PARAMETER_TABLE = "[parameters.k]"


def check_keys(mapping: Mapping[str, object], source: Source) -> None:
    """Raise an error for a key that no model has, or the lack of one that it must have."""
    for key in mapping:
        if key in LATER:
            raise LaterKeyError(source.at_name(key), key)
    check_table(mapping, KNOWN, "", source, usual=USUAL_KEYS)
    for key, example in REQUIRED.items():
        if key not in mapping:
            raise MissingKeyError(source.place, key, example)
    for key in PARAMETRIC:
        if key in mapping and "parameters" not in mapping:
            raise MissingKeyError(source.at_name(key), "parameters", PARAMETER_TABLE)


def check_table(
    table: Mapping[str, object],
    known: Sequence[str],
    key: str,
    source: Source,
    *,
    usual: Mapping[str, str] | None = None,
) -> None:
    """Raise UnknownKeyError for a key of a table that is none of the known ones.

    `key` is that of the table itself, empty for the model; `usual` holds other names of
    the keys.
    """
    for name in table:
        if name in known:
            continue
        if key:
            refuse_misplaced(str(name), key, source)
        small = str(name).lower()
        near = (usual or {}).get(small) or next(iter(get_close_matches(small, known, n=1)), None)
        place = source.at_name(f"{key}.{name}" if key else str(name))
        raise UnknownKeyError(place, str(name), near, tuple(known))


def refuse_misplaced(name: str, table: str, source: Source) -> None:
    """Raise MisplacedKeyError if a key of a table is one of the model."""
    if name in KNOWN:
        raise MisplacedKeyError(source.at_name(f"{table}.{name}"), name, table)
