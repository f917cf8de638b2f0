"""A matrix as written, opened into its entries, each a formula."""

from __future__ import annotations

from fractions import Fraction

from closedform.notation.written.tree import (
    Apply,
    Array,
    Identity,
    Literal,
    Negation,
    Product,
    Quotient,
    Sum,
    Written,
)

__all__ = ["spread"]

Rows = tuple[tuple[Written, ...], ...]
ZERO, ONE = Literal(Fraction(0)), Literal(Fraction(1))


def spread(tree: Written, size: int | None = None) -> Rows | None:
    """Return the entries of a matrix by rows, None for what is no matrix written by entries.

    Factors in front go into every entry, products are multiplied out, sums are added; nothing
    is worked out.  `size` is that of a unit matrix without one.
    """
    match tree:
        case Array(rows):
            return rows
        case Identity(own) if (own or size) is not None:
            span = range(own or size or 1)
            return tuple(tuple(ONE if i == j else ZERO for j in span) for i in span)
        case Negation(operand):
            inside = spread(operand, size)
            return inside and tuple(tuple(Negation(e) for e in row) for row in inside)
        case Quotient(above, below):
            inside = spread(above, size)
            return inside and tuple(tuple(Quotient(e, below) for e in row) for row in inside)
        case Apply("transpose", (operand,)):
            inside = spread(operand, size)
            return inside and tuple(zip(*inside, strict=True))
        case Apply("diag", arguments) if all(spread(a) is None for a in arguments):
            span = range(len(arguments))
            return tuple(tuple(arguments[i] if i == j else ZERO for j in span) for i in span)
        case Sum(terms):
            return _sum(terms, size)
        case Product(factors):
            return _product(factors, size)
    return None


def _sum(terms: tuple[Written, ...], size: int | None) -> Rows | None:
    several = [spread(term, size) for term in terms]
    known = [rows for rows in several if rows is not None]
    if len(known) != len(several) or len({(len(r), len(r[0])) for r in known}) != 1:
        return None
    return tuple(
        tuple(Sum(entries) for entries in zip(*rows, strict=True))
        for rows in zip(*known, strict=True)
    )


def _product(factors: tuple[Written, ...], size: int | None) -> Rows | None:
    scalars: list[Written] = []
    result: Rows | None = None
    for factor in factors:
        rows = spread(factor, size)
        if rows is None:
            scalars.append(factor)
        elif result is None:
            result = rows
        elif len(result[0]) == len(rows):
            result = _times(result, rows)
        else:
            return None
    if result is None or not scalars:
        return result
    return tuple(tuple(Product((*scalars, entry)) for entry in row) for row in result)


def _times(one: Rows, other: Rows) -> Rows:
    columns = list(zip(*other, strict=True))
    return tuple(tuple(_dot(row, column) for column in columns) for row in one)


def _dot(row: tuple[Written, ...], column: tuple[Written, ...]) -> Written:
    terms = tuple(Product((a, b)) for a, b in zip(row, column, strict=True) if ZERO not in (a, b))
    if not terms:
        return ZERO
    return terms[0] if len(terms) == 1 else Sum(terms)
