"""Elements, polynomials, matrices and functions of a response as written trees."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence

from closedform.algebra.field import BaseField, Scalar
from closedform.algebra.surds import SurdSum
from closedform.checking.truth import Piece
from closedform.derivation.driven.differentiation import derivative_of
from closedform.derivation.formulas import root_variable
from closedform.notation.expression import (
    ONE,
    ZERO,
    Expression,
    power_of,
    product,
)
from closedform.notation.terms import opened, sum_of, surd_formula
from closedform.notation.written.from_expression import written_from
from closedform.notation.written.tree import Literal, Written
from closedform.response.driven.composition import element_formula

__all__ = [
    "WHOLE",
    "Functions",
    "element_written",
    "elements_written",
    "number_written",
    "pieces_of",
    "polynomial_written",
    "rows_written",
    "with_derivatives",
    "written_from",
]


Functions = Mapping[str, tuple[Expression, ...]]
"""For each name a formula in every interval."""


def element_written(field: BaseField, element: Scalar) -> Written:
    """Return an element of the field of a model."""
    return written_from(element_formula(field, element))


def number_written(number: SurdSum) -> Written:
    """Return a number."""
    return written_from(surd_formula(number))


def elements_written(
    field: BaseField, rows: Iterable[Iterable[Scalar]]
) -> tuple[tuple[Written, ...], ...]:
    """Return a matrix over the field, row by row."""
    return tuple(tuple(element_written(field, e) for e in row) for row in rows)


def rows_written(rows: Iterable[Iterable[Expression]]) -> tuple[tuple[Written, ...], ...]:
    """Return a matrix of formulas, row by row."""
    return tuple(tuple(map(written_from, row)) for row in rows)


def polynomial_written(field: BaseField, coefficients: Sequence[Scalar]) -> Written:
    """Return the polynomial with these coefficients, highest first.

    Its variable is lambda, or the next letter that no parameter begins with.
    """
    degree, root = len(coefficients) - 1, root_variable(getattr(field, "parameters", ()))
    terms = [
        _term(element_formula(field, c), power_of(root, degree - k))
        for k, c in enumerate(coefficients)
        if c
    ]
    return written_from(opened(sum_of(terms)))


def _term(coefficient: Expression, power: Expression) -> Expression:
    if power == ONE:
        return coefficient
    return power if coefficient == ONE else product((coefficient, power))


def pieces_of(
    functions: Functions, between: Sequence[tuple[Written, Written | None]]
) -> dict[str, tuple[Piece, ...]]:
    """Return functions that are given by formulas in intervals."""
    return {
        name: tuple(
            Piece(span, written_from(formula))
            for span, formula in zip(between, formulas, strict=True)
        )
        for name, formulas in functions.items()
    }


def with_derivatives(
    functions: Functions, orders: Mapping[str, int], time: str
) -> dict[str, tuple[Expression, ...]]:
    """Return functions, those with an order up to this derivative: x, x', x''.

    A derivative that is one of the functions stays as it is.
    """
    found = dict(functions)
    for name, highest in orders.items():
        for order in range(1, highest + 1):
            above, below = name + "'" * order, name + "'" * (order - 1)
            if above not in found and below in found:
                found[above] = tuple(derivative_of(f, time) for f in found[below])
    return found


WHOLE = (Literal(ZERO.value), None)
"""From 0 on, for ever."""
