"""Small formulas made of others, as people write them."""

from __future__ import annotations

from fractions import Fraction

from closedform.notation.written.tidied import rational_written
from closedform.notation.written.tree import (
    EULER,
    Apply,
    Literal,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    Symbol,
    Written,
    walk,
)

__all__ = ["ONE", "ZERO", "contains", "is_number", "negated", "number", "over", "times", "without"]

ZERO, ONE = Literal(Fraction(0)), Literal(Fraction(1))


def number(value: Fraction | int) -> Written:
    """Return a rational number as a formula."""
    return rational_written(Fraction(value))


def negated(tree: Written) -> Written:
    """Return the opposite of a formula."""
    match tree:
        case Negation(operand):
            return operand
        case Product((Negation(first), *rest)):
            return Product((first, *rest))
        case Quotient(Negation(above), below):
            return Quotient(above, below)
    return Negation(tree)


def times(*factors: Written) -> Written:
    """Return a product; factors 1 fall away, products are opened, a sign comes to the front."""
    flat: list[Written] = []
    sign = False
    for factor in factors:
        part = factor
        if isinstance(part, Negation):
            sign, part = not sign, part.operand
        flat += part.factors if isinstance(part, Product) else (part,)
    flat = [part for part in flat if part != ONE]
    product: Written = ONE if not flat else flat[0] if len(flat) == 1 else Product(tuple(flat))
    return Negation(product) if sign else product


def over(above: Written, below: Written) -> Written:
    """Return a quotient, the sign in front."""
    if isinstance(above, Negation):
        return Negation(over(above.operand, below))
    return above if below == ONE else Quotient(above, below)


def without(factors: tuple[Written, ...], at: int) -> Written:
    """Return the product of all factors but one."""
    return times(*factors[:at], *factors[at + 1 :]) if len(factors) > 1 else ONE


def contains(tree: Written, part: Written) -> bool:
    """Whether a part stands somewhere in a formula."""
    return any(node == part for node in walk(tree))


def is_number(tree: Written) -> bool:
    """Whether a formula has no names in it."""
    return not any(isinstance(node, Symbol) for node in walk(tree))


def exponent_of(tree: Written) -> Written | None:
    """Return the exponent of an exponential, in either notation; None for anything else."""
    match tree:
        case Power(base, exponent) if base == EULER:
            return exponent
        case Apply("exp", (exponent,)):
            return exponent
    return None


def exponential(exponent: Written, like: Written) -> Written:
    """Return an exponential in the notation of another one."""
    return Apply("exp", (exponent,)) if isinstance(like, Apply) else Power(EULER, exponent)


def terms_of(tree: Written) -> tuple[Written, ...]:
    """Return the terms of a sum; any other formula is its own single term."""
    return tree.terms if isinstance(tree, Sum) else (tree,)
