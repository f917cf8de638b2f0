"""Numbers that stand as written trees: rational ones and sums of square roots."""

from __future__ import annotations

from closedform.algebra.surds import SurdSum, root_of_rational
from closedform.notation.written.tree import (
    Apply,
    Literal,
    Negation,
    Product,
    Quotient,
    Sum,
    Written,
)

__all__ = ["number_of"]


def number_of(tree: Written) -> SurdSum:
    """Return the number that a tree of literals, their sums, products and roots stands for.

    Raises ValueError for any other tree.
    """
    match tree:
        case Literal(value):
            return SurdSum.rational(value)
        case Negation(operand):
            return -number_of(operand)
        case Sum(terms):
            return sum(map(number_of, terms), SurdSum(()))
        case Product(factors):
            total = SurdSum.rational(1)
            for factor in factors:
                total *= number_of(factor)
            return total
        case Quotient(above, below):
            return number_of(above) / number_of(below)
        case Apply("sqrt", (argument,)):
            inside = number_of(argument)
            root = root_of_rational(inside.as_fraction()) if inside.is_rational else None
            if root is not None:
                return root
    raise ValueError(f"{tree} is no number in square roots of rational ones")
