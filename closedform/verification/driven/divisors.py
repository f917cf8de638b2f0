"""Divisors with sines, cosines and exponentials at instants: names for them, and their signs."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from flint import arb, ctx

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.errors import Place
from closedform.notation import enclose
from closedform.notation.errors import FormulaError
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
    names_in,
)
from closedform.notation.rational import rational_value

__all__ = ["CallNames"]

_BITS = 256


class CallNames:
    """Names in the place of functions at instants, in which a divisor is rational then.

    `nonzero` are formulas that are known not to vanish, or are stated not to.
    """

    def __init__(self, nonzero: Sequence[Expression]) -> None:
        self._known: dict[Call, str] = {}
        self._nonzero = [self.put(formula) for formula in nonzero]

    @property
    def names(self) -> tuple[str, ...]:
        """The names that were given so far."""
        return tuple(self._known.values())

    def put(self, formula: Expression) -> Expression:
        """Return a formula with names in the place of functions."""
        match formula:
            case Call():
                name = self._known.setdefault(formula, f"@call{len(self._known) + 1}")
                return Name(name)
            case Negation(inside):
                return Negation(self.put(inside))
            case Sum(terms):
                return Sum(tuple(map(self.put, terms)))
            case Product(factors):
                return Product(tuple(map(self.put, factors)))
            case Quotient(above, below):
                return Quotient(self.put(above), self.put(below))
            case Power(base, exponent):
                return Power(self.put(base), exponent)
            case Name() | Number():
                return formula

    def facts(self, field: ParameterField, domain: ParameterDomain) -> Iterator[Comparison]:
        """Yield what is known of the names in `field`; `domain` is of what it was before."""
        for call, name in self._known.items():
            symbol = field.symbol(name)
            sign = _sign(field, domain, call)
            if sign:
                yield Comparison(symbol * sign, ">")
        for formula in self._nonzero:
            yield Comparison(rational_value(formula, field, Place()), "!=")


def _sign(field: ParameterField, domain: ParameterDomain, call: Call) -> int:
    """The sign of a function at an instant, 0 if it is open."""
    if call.function in ("exp", "cosh"):
        return 1
    if not names_in(call.argument) - {"pi"}:
        return _sign_of_number(call)
    if call.function not in ("sinh", "sqrt"):
        return 0
    try:
        value: Scalar = rational_value(call.argument, field, Place())
    except FormulaError:
        return 0
    signs = domain.sign_of(value).values
    return min(signs) if len(signs) == 1 else 0


def _sign_of_number(call: Call) -> int:
    with ctx.workprec(_BITS):
        ball = enclose(call, {"pi": arb.pi()})
    if not ball.is_finite() or ball.contains(0):
        return 0
    return 1 if ball > 0 else -1
