"""The keys of a model file."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from difflib import get_close_matches

from closedform.algebra.parameter_field import PI
from closedform.model.errors import (
    ClashingKeysError,
    LaterKeyError,
    MisplacedKeyError,
    MissingKeyError,
    MixedFormsError,
    UnknownKeyError,
)
from closedform.model.source import Source
from closedform.notation.greek import ascii_name

__all__ = ["check_keys", "check_table", "form_of", "is_driven", "refuse_misplaced", "uses_pi"]

TITLE = {"title": 'title = "Two tanks in series"'}
STATES = {"states": 'states = ["x1", "x2"]'}
FORMS: dict[str, dict[str, str]] = {
    "equations": {"equations": "equations = [\"m*x'' + k*x = F\"]"},
    "mass": {
        "mass": "mass = [[2, 0], [0, 1]]",
        "stiffness": "stiffness = [[2, -1], [-1, 1]]",
        **STATES,
    },
    "matrix": {**STATES, "matrix": "matrix = [[-1, 0], [1, -2]]"},
}
"""What each way to state a model needs, with an example; the first key is the form's own."""
ONLY: dict[str, tuple[str, ...]] = {
    "equations": ("equations",),
    "mass": ("mass", "damping", "stiffness"),
    "matrix": ("matrix",),
}
"""The keys that belong to one form only."""
INITIAL = {
    "equations": """initial = { x = "1", "x'" = "0" }""",
    "mass": """initial = { x1 = "1", "x1'" = "0", x2 = "0", "x2'" = "0" }""",
    "matrix": "initial = [1, 0]",
}
"""The line that gives values at the start, for each form."""
OPTIONAL = ("summary", "time", "outputs", "times")
DRIVEN = ("inputs", "input_matrix", "start", "at_points")
PARAMETRIC = ("parameters", "conditions", "substitute", "abbreviations", "values")
LATER = ("document",)
KNOWN = (
    *("title", "states", "matrix", "initial", "equations", "mass", "damping", "stiffness"),
    *DRIVEN,
    *OPTIONAL,
    *PARAMETRIC,
)
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
    "odes": "equations",
    "equation": "equations",
    "ode": "equations",
    "m": "mass",
    "c": "damping",
    "k": "stiffness",
    "b": "input_matrix",
    "mass_matrix": "mass",
    "damping_matrix": "damping",
    "stiffness_matrix": "stiffness",
    "input": "inputs",
    "forcing": "inputs",
    "loads": "inputs",
    "excitation": "inputs",
    "t0": "start",
    "boundary": "at_points",
    "boundary_conditions": "at_points",
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
INPUT_TABLE = '[inputs] with F = "sin(t)" below it'
INPUT_MATRIX = "input_matrix = [[0], [1]]"
FORMULAS = (
    *("equations", "matrix", "mass", "damping", "stiffness", "input_matrix", "inputs", "initial"),
    *("start", "at_points", "outputs", "conditions", "substitute", "abbreviations"),
)
"""The keys below which formulas stand."""
DESCRIBING = ("unit", "meaning")
NAMES = re.compile(r"[^\W\d]\w*")


def form_of(mapping: Mapping[str, object]) -> str:
    """Return the key that says how a model is stated: equations, mass or matrix."""
    found = (form for form, keys in ONLY.items() if any(key in mapping for key in keys))
    return next(found, "matrix")


def is_driven(mapping: Mapping[str, object]) -> bool:
    """Say whether a mapping states more than x' = A x and the values at 0."""
    return form_of(mapping) != "matrix" or any(key in mapping for key in DRIVEN)


def check_keys(mapping: Mapping[str, object], source: Source) -> None:
    """Raise an error for a key that no model has, keys that do not go together, or a lack.

    Raises:  LaterKeyError, UnknownKeyError, MissingKeyError, MixedFormsError,
             ClashingKeysError.
    """
    for key in mapping:
        if key in LATER:
            raise LaterKeyError(source.at_name(key), key)
    check_table(mapping, KNOWN, "", source, usual=USUAL_KEYS)
    form = form_of(mapping)
    for other, keys in ONLY.items():
        for key in keys:
            if other != form and key in mapping:
                first = next(own for own in ONLY[form] if own in mapping)
                raise MixedFormsError(source.at_name(key), first, key)
    _check_driven(mapping, form, source)
    needed = TITLE | FORMS[form]
    if "damping" in mapping and "mass" not in mapping:  # C q' + K q = G u, of first order
        needed = {key: example for key, example in needed.items() if key != "mass"}
    if "at_points" not in mapping:
        needed |= {"initial": INITIAL[form]}
    for key, example in needed.items():
        if key not in mapping:
            raise MissingKeyError(source.place, key, example)
    for key in PARAMETRIC:
        if key in mapping and "parameters" not in mapping and not uses_pi(mapping):
            raise MissingKeyError(source.at_name(key), "parameters", PARAMETER_TABLE)


def _check_driven(mapping: Mapping[str, object], form: str, source: Source) -> None:
    """Raise an error for keys of inputs and of values elsewhere that do not go together."""
    if "at_points" in mapping and "initial" in mapping:
        reason = "the values at single instants take the place of initial values"
        raise ClashingKeysError(source.at_name("at_points"), "at_points", "initial", reason)
    if form == "equations":
        if "input_matrix" in mapping:
            reason = "in equations an input stands by its name, where it acts"
            raise ClashingKeysError(
                source.at_name("input_matrix"), "input_matrix", "equations", reason
            )
    elif "input_matrix" in mapping and "inputs" not in mapping:
        raise MissingKeyError(source.at_name("input_matrix"), "inputs", INPUT_TABLE)
    elif "inputs" in mapping and "input_matrix" not in mapping:
        raise MissingKeyError(source.at_name("inputs"), "input_matrix", INPUT_MATRIX)


def uses_pi(mapping: Mapping[str, object]) -> bool:
    """Say whether the number pi stands in a formula of the model."""
    return any(_holds_pi(mapping[key]) for key in FORMULAS if key in mapping)


def _holds_pi(value: object) -> bool:
    """Whether pi stands in a text within arrays and tables; what describes is passed by."""
    pending = [value]
    while pending:
        match pending.pop():
            case str(text):
                if any(ascii_name(name) == PI for name in NAMES.findall(text)):
                    return True
            case Mapping() as table:
                pending += [inner for key, inner in table.items() if key not in DESCRIBING]
            case list() | tuple() as several:
                pending += several
    return False


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
