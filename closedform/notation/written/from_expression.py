"""From the tree of this program's own formulas to the wider tree of what is written."""

from __future__ import annotations

from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Number,
)
from closedform.notation.expression import Negation as Opposite
from closedform.notation.expression import Power as Raised
from closedform.notation.expression import Product as Times
from closedform.notation.expression import Quotient as Over
from closedform.notation.expression import Sum as Plus
from closedform.notation.jets import jet_of
from closedform.notation.latex.names import IMAGINARY as UNIT_NAME
from closedform.notation.written.tree import (
    EULER,
    FUNCTIONS,
    IMAGINARY,
    PI,
    Apply,
    Jet,
    Literal,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    Symbol,
    Written,
)

__all__ = ["written_from"]


def written_from(expression: Expression, *, functions: frozenset[str] = frozenset()) -> Written:
    """Return a formula of ours as one that is written: the same shape in the wider tree.

    `functions` are the names of functions of time.  A rational number is a quotient of two
    literals; ``pi`` is the number, and exp(x) is e^x; names with primes are derivatives.

    >>> written_from(Call("exp", Name("t")))
    Power(base=Constant(name='e'), exponent=Symbol(name='t', bold=False))
    """

    def put(node: Expression) -> Written:
        match node:
            case Number(value):
                above, below = map(Literal, map(type(value), value.as_integer_ratio()))
                return above if value.denominator == 1 else Quotient(above, below)
            case Name(text):
                return _named(text, functions)
            case Opposite(operand):
                return Negation(put(operand))
            case Plus(terms):
                return Sum(tuple(map(put, terms)))
            case Times(factors):
                return Product(tuple(map(put, factors)))
            case Over(above_, below_):
                return Quotient(put(above_), put(below_))
            case Raised(base, exponent):
                return Power(put(base), put(exponent))
            case Call("exp", argument):
                return Power(EULER, put(argument))
            case Call(function, argument) if function in FUNCTIONS:
                return Apply(function, (put(argument),))
            case Call(function, argument):
                return Jet(*jet_of(function), put(argument))

    return put(expression)


def _named(text: str, functions: frozenset[str]) -> Written:
    name, order = jet_of(text)
    if order or name in functions:
        return Jet(name, order)
    return {"pi": PI, UNIT_NAME: IMAGINARY}.get(text) or Symbol(text)
