"""Values ready to take more factors: a number times factors over others, none written yet.

Their operations are counted without writing them, so that of many forms only the shortest
need be written.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from dataclasses import field as field_of
from fractions import Fraction
from functools import cached_property, lru_cache
from operator import attrgetter

from closedform.algebra.parameter_field import PI, ParameterField
from closedform.notation.choice import places_of, shortest_of
from closedform.notation.expression import (
    ONE,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    power_of,
    product,
)
from closedform.notation.terms import sum_of

__all__ = [
    "Weight",
    "monomial_weight",
    "power_of_weight",
    "product_of_weights",
    "shortest",
    "sum_of_weights",
    "written",
]


@dataclass(frozen=True)
class Weight:
    """number · above / below, the number with the sign: a value ready to take more factors.

    The factors are no products and not 1; `cost` counts the operations inside of them.
    """

    number: Fraction
    above: tuple[Expression, ...] = ()
    below: tuple[Expression, ...] = ()
    cost: int = field_of(default=0, compare=False)

    @cached_property
    def size(self) -> int:
        """The operations of the value without its sign."""
        above = len(self.above) + (abs(self.number.numerator) != 1)
        below = len(self.below) + (self.number.denominator != 1)
        return self.cost + max(above - 1, 0) + below

    @cached_property
    def length(self) -> int:
        """The operations of the value written as one term."""
        return self.length_with(0, 0)

    def length_with(self, factors: int, cost: int) -> int:
        """The operations with more factors, no numbers, that have so many operations inside."""
        plain = abs(self.number.numerator) == 1  # no number above: a sign is an operation
        alone = plain and not self.above
        sign = self.number < 0 and plain and bool(self.above or factors)
        return self.size + cost + factors - (alone and factors > 0) + sign

    @cached_property
    def term(self) -> Expression:
        """The value written as one term, its sign outside."""
        return written(self)


def written(
    weight: Weight, factors: Sequence[Expression] = (), divisors: Sequence[Expression] = ()
) -> Expression:
    """Return weight · factors / divisors as one term, its sign outside."""
    above = _product(abs(weight.number.numerator), weight.above, factors)
    below = _product(weight.number.denominator, weight.below, divisors)
    if below == ONE:
        term = above
    elif isinstance(above, Number) and isinstance(below, Number):
        term = Number(above.value / below.value)
    else:
        term = Quotient(above, below)
    return Negation(term) if weight.number < 0 else term


def _product(
    number: int, inside: tuple[Expression, ...], others: Sequence[Expression]
) -> Expression:
    front = () if number == 1 else (Number(Fraction(number)),)
    if others:
        return product([*front, *inside, *others])
    factors = front + inside
    if len(factors) > 1:
        return Product(factors)
    return factors[0] if factors else ONE


def shortest(field: ParameterField, forms: Iterable[Weight]) -> Weight:
    """Return the form with the fewest operations; of equals, what a person would write."""
    return shortest_of(forms, _term, _places(field), _length)


_term: Callable[[Weight], Expression] = attrgetter("term")
_length: Callable[[Weight], int] = attrgetter("length")


@lru_cache(maxsize=64)
def _places(field: ParameterField) -> dict[str, int]:
    return places_of(field.parameters)


def product_of_weights(weights: Iterable[Weight]) -> Weight:
    """Return the product; single parameters come before sums, else the order is kept."""
    number, cost = Fraction(1), 0
    above: list[Expression] = []
    below: list[Expression] = []
    for weight in weights:
        number *= weight.number
        cost += weight.cost
        above += weight.above
        below += weight.below
    above.sort(key=_is_long)
    below.sort(key=_is_long)
    return Weight(number, tuple(above), tuple(below), cost)


def power_of_weight(weight: Weight, exponent: int) -> Weight:
    """Return a weight to a positive integer power."""
    if exponent == 1:
        return weight
    above, below = (
        tuple(_raised(factor, exponent) for factor in factors)
        for factors in (weight.above, weight.below)
    )
    bases = sum(not _is_power(factor) for factor in (*weight.above, *weight.below))
    return Weight(weight.number**exponent, above, below, weight.cost + bases)


def _is_power(factor: Expression) -> bool:
    return isinstance(factor, Power) and isinstance(factor.exponent, Number)


def _raised(factor: Expression, exponent: int) -> Expression:
    if isinstance(factor, Power) and isinstance(factor.exponent, Number):
        return Power(factor.base, Number(factor.exponent.value * exponent))
    return power_of(factor, exponent)


def _is_long(factor: Expression) -> bool:
    base = factor.base if isinstance(factor, Power) else factor
    return not isinstance(base, Name)


def monomial_weight(field: ParameterField, exponents: Sequence[int], number: Fraction) -> Weight:
    """Return number · product of parameter^exponent, pi behind the number: 2 pi w."""
    pairs = list(zip(field.parameters, exponents, strict=True))
    pairs.sort(key=lambda pair: pair[0] != PI)
    above = tuple(power_of(Name(n), e) for n, e in pairs if e > 0)
    below = tuple(power_of(Name(n), -e) for n, e in pairs if e < 0)
    return Weight(number, above, below, sum(abs(e) > 1 for e in exponents))


def sum_of_weights(weights: Sequence[Weight]) -> Weight:
    """Return a sum of at least two values, its sign outside where all terms are negative."""
    total = sum_of([weight.term for weight in weights])
    cost = sum(weight.size for weight in weights) + len(weights) - 1
    if isinstance(total, Negation):
        return Weight(Fraction(-1), (total.operand,), cost=cost)
    return Weight(Fraction(1), (total,), cost=cost)
