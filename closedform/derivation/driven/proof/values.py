"""Values of what driven steps display: steps, impulses, pieces, jets, at an instant."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from flint import acb, acb_series

from closedform.derivation.proof.evaluation import ball_at
from closedform.derivation.proof.finding import Comparison, Finding
from closedform.derivation.step import Matrix, Side, Symbol
from closedform.notation.expression import (
    ZERO,
    Call,
    Expression,
    is_expression,
    number,
    rebuilt,
)

__all__ = [
    "NoPieceError",
    "as_matrix",
    "column_at",
    "derivative",
    "equal",
    "formula_at",
    "side_at",
    "with_steps",
]


class NoPieceError(Exception):
    """Pieces of which none, or several, hold at an instant."""


def formula_at(formula: Expression, names: Mapping[str, Any], now: Mapping[str, Any]) -> Any:
    """Return a formula's value; `now` are the names with the instant, for the signs of steps."""
    return ball_at(with_steps(formula, now), names)


def with_steps(formula: Expression, now: Mapping[str, Any]) -> Expression:
    """Return a formula with every unit step put in as 0 or 1, and every impulse as 0."""

    def switched(node: Expression) -> Expression | None:
        match node:
            case Call("step", argument):
                return number(int(bool(_value(with_steps(argument, now), now).real > 0)))
            case Call("delta", _):
                return ZERO
        return None

    return rebuilt(formula, switched)


def _value(formula: Expression, names: Mapping[str, Any]) -> Any:
    return ball_at(formula, names)


def side_at(side: Side, names: Mapping[str, Any], now: Mapping[str, Any]) -> Any:
    """Return the value of a formula, of pieces, or of a sum of both.

    Raises:  NoPieceError if not exactly one piece holds.
    """
    if isinstance(side, Symbol) and side.kind == "sum":
        total: Any = acb(0)
        for part in side.parts:
            total = total + side_at(part, names, now)
        return total
    if isinstance(side, Symbol) and side.kind == "cases":
        return side_at(_piece(side, now), names, now)
    if not is_expression(side):
        raise TypeError(f"{side} is no formula")
    return formula_at(side, names, now)


def _piece(cases: Symbol, now: Mapping[str, Any]) -> Side:
    """The piece that holds at an instant; `now` are the names with a value for the time."""
    values, places = cases.parts[::2], cases.parts[1::2]
    held = [v for v, p in zip(values, places, strict=True) if _holds(p, now)]
    rest = [v for v, p in zip(values, places, strict=True) if _is_rest(p)]
    found = held or rest
    if len(found) != 1:
        raise NoPieceError(f"{len(found)} pieces hold")
    return found[0]


def _is_rest(place: Side) -> bool:
    return isinstance(place, Symbol) and place.indices == ("otherwise",)


def _holds(place: Side, now: Mapping[str, Any]) -> bool:
    if not isinstance(place, Symbol) or place.kind != "interval":
        raise TypeError(f"{place} is no interval")
    if _is_rest(place):
        return False
    if place.argument is None:
        raise TypeError("an interval is of the time")
    t = ball_at(place.argument, now).real
    bounds = [side_at(part, now, now).real for part in place.parts]
    match place.indices[0]:
        case "both":
            return bool(bounds[0] <= t) and bool(t < bounds[1])
        case "from":
            return bool(bounds[0] <= t)
        case "until":
            return bool(t < bounds[0])
    raise ValueError(f"no interval is {place.indices[0]!r}")


def as_matrix(side: Side) -> Matrix:
    """Return a side that is a matrix, or the one entry of one."""
    if isinstance(side, Matrix):
        return side
    if not is_expression(side):
        raise TypeError(f"{side} is no matrix")
    return Matrix(((side,),))


def column_at(side: Side, names: Mapping[str, Any], now: Mapping[str, Any]) -> list[Any]:
    """Return the values of a column of formulas."""
    column = as_matrix(side)
    if any(len(row) != 1 for row in column.rows):
        raise TypeError(f"{side} is no column")
    front = acb(1) if column.front is None else formula_at(column.front, names, now)
    return [front * formula_at(row[0], names, now) for row in column.rows]


def equal(place: str, left: Any, right: Any) -> Finding:
    """Return the finding that two numbers are equal, measured by their size."""
    size = max(abs(acb(left)).upper(), abs(acb(right)).upper(), abs(acb(1)))
    return Comparison(place, acb(left) - acb(right), acb(0), scale=size)


def derivative(value: Any, order: int) -> acb:
    """Return a derivative of what a power series stands for; of a number, that of a constant."""
    if not isinstance(value, acb_series):
        return acb(value) if order == 0 else acb(0)
    factorial = acb(1)
    for k in range(2, order + 1):
        factorial *= k
    return value[order] * factorial
