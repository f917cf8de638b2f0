"""Whether a reading means what a collection of formulas says it means: decided with SymPy."""

from __future__ import annotations

import json
from collections.abc import Iterator, Mapping
from functools import cache
from pathlib import Path
from typing import Any

import mpmath
import sympy
from sympy.core.function import AppliedUndef

from closedform.notation.written.sympy_form import (
    sympy_eigenvalues,
    sympy_matrix,
    sympy_of,
    sympy_value,
)
from closedform.notation.written.tree import Declared, Reading

COLLECTION = Path(__file__).with_name("written_notation.json")
POINTS = 3
"""Instants and values of the parameters at which two formulas are compared."""


@cache
def items() -> tuple[Mapping[str, Any], ...]:
    return tuple(json.loads(COLLECTION.read_text(encoding="utf-8"))["items"])


def declared_of(item: Mapping[str, Any]) -> Declared:
    """Return the declared names of an item; the names of a matrix may come with its size."""
    given = item["declared"]
    return Declared(
        states=frozenset(given.get("states", ())),
        parameters=frozenset(given.get("parameters", ())),
        inputs=frozenset(given.get("inputs", ())),
        functions=frozenset(given.get("functions", ())),
        matrices=frozenset(given.get("matrices", ())),
        time=given.get("time", "t"),
    )


def meant(item: Mapping[str, Any], text: str | None = None) -> Any:
    """Return the meaning of an item, or another text in its names, as SymPy objects."""
    given = item["declared"]
    names: dict[str, Any] = {}
    for name in (*given.get("parameters", ()), given.get("time", "t"), "lamda", "s"):
        names[name] = sympy.Symbol(name)
    for kind in ("states", "inputs", "functions"):
        names |= {name: sympy.Function(name) for name in given.get(kind, ())}
    return sympy.sympify(text or item["meaning"], locals=names, rational=True)


def made(item: Mapping[str, Any], reading: Reading) -> Any:
    """Return what was read in the form in which the meaning of an item is given."""
    declared = declared_of(item)
    match item["kind"]:
        case "eigenvalues":
            return sympy_eigenvalues(reading, declared)
        case "matrix":
            return sympy_matrix(reading, declared)
        case "piecewise":
            return sympy_value(reading, declared)
    return sympy_of(reading, declared)


def alike(left: Any, right: Any) -> bool:
    """Decide whether two SymPy objects, or lists of them, mean the same."""
    if isinstance(left, list) or isinstance(right, list):
        both = isinstance(left, list) and isinstance(right, list) and len(left) == len(right)
        return both and all(map(alike, left, right))
    if left == right:
        return True
    if isinstance(left, sympy.MatrixBase) and isinstance(right, sympy.MatrixBase):
        return left.shape == right.shape and all(map(alike, left, right))
    if isinstance(left, sympy.Piecewise) and isinstance(right, sympy.Piecewise):
        pairs = zip(left.args, right.args, strict=False)
        same = all(alike(a.expr, b.expr) and a.cond == b.cond for a, b in pairs)
        return same and len(left.args) == len(right.args)
    if isinstance(left, sympy.core.relational.Relational | bool | sympy.logic.boolalg.BooleanAtom):
        return type(left) is type(right) and all(map(alike, left.args, right.args))
    if not (isinstance(left, sympy.Expr) and isinstance(right, sympy.Expr)):
        return False
    return _equal(left, right)


def _equal(left: sympy.Expr, right: sympy.Expr) -> bool:
    """Decide whether two expressions are equal: their difference is nought at several points.

    What is not worked out (functions, integrals, limits) counts as a name of its own.
    """
    held = (AppliedUndef, sympy.Derivative, sympy.Subs, sympy.Integral, sympy.Sum, sympy.Limit)
    held += (sympy.LaplaceTransform, sympy.InverseLaplaceTransform, sympy.DiracDelta)
    held += (sympy.Determinant, sympy.Heaviside)
    named: dict[Any, sympy.Symbol] = {}

    def put(expression: Any) -> Any:
        if isinstance(expression, held):
            arguments = expression.func(*map(put, expression.args)) if expression.args else None
            key = sympy.srepr(sympy.expand(arguments))
            return named.setdefault(key, sympy.Symbol(f"held_{len(named)}"))
        return expression.func(*map(put, expression.args)) if expression.args else expression

    difference = put(left) - put(right)
    if sympy.expand(difference) == 0:
        return True
    return all(abs(value) < mpmath.mpf(10) ** -40 for value in _values(difference))


def _values(expression: sympy.Expr) -> Iterator[mpmath.mpf]:
    names = sorted(expression.free_symbols, key=str)
    for point in range(POINTS):
        at = {
            name: sympy.Rational(7 * k + 5 * point + 3, 11 + 2 * k + 3 * point)
            for k, name in enumerate(names)
        }
        value = sympy.N(expression.subs(at), 60, maxn=200)
        yield mpmath.mpmathify(sympy.re(value)) + 1j * mpmath.mpmathify(sympy.im(value))
