"""What the conditions of a domain say at once: signs of parameters, of terms, and bounds."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property, reduce

from closedform.algebra.field import Scalar, rational
from closedform.algebra.parameter_field import PI, ParameterField, ParameterPolynomial
from closedform.algebra.sign_argument import (
    ANY,
    Comparison,
    Values,
    power,
    product,
    relation_values,
    total,
)
from closedform.algebra.squares import coefficients_in

__all__ = ["Bound", "Condition", "Conditions", "cleared", "side"]


@dataclass(frozen=True)
class Condition:
    """A comparison whose element holds parameters, and that taken apart."""

    comparison: Comparison
    content: Fraction
    exponents: dict[ParameterPolynomial, int]

    @property
    def values(self) -> Values:
        """The signs with which it holds."""
        return relation_values(self.comparison.relation)


@dataclass(frozen=True)
class Bound:
    """A condition slope · x - slope · free compared with 0, x the parameter at `place`.

    So x = free + (the element of the condition)/slope, and `free` does not hold x.
    """

    comparison: Comparison
    place: int
    slope: Fraction
    free: ParameterPolynomial

    @property
    def values(self) -> Values:
        """The signs with which the condition holds."""
        return relation_values(self.comparison.relation)


@dataclass(frozen=True)
class Conditions:
    """The comparisons of a domain, taken apart once."""

    field: ParameterField
    comparisons: tuple[Comparison, ...]

    @cached_property
    def apart(self) -> tuple[Condition, ...]:
        """The comparisons whose elements hold parameters."""
        made = []
        for comparison in self.comparisons:
            if self.field.number_sign(comparison.element) is None:
                parts = self.field.factored(comparison.element)
                made.append(Condition(comparison, parts.content, dict(parts.factors)))
        return tuple(made)

    @cached_property
    def parameters(self) -> tuple[Values, ...]:
        """The signs of the parameters, in the order of the field, by conditions and bounds."""
        gens = self.field.domain.field.ring.gens
        found = [self._stated(x) if str(x) != PI else side(Fraction(1)) for x in gens]
        bounds = _bounds([c.comparison for c in self.apart])
        changed = True
        while changed:
            changed = False
            for bound in bounds:
                terms = (_term(found, m, rational(c)) for m, c in bound.free.iterterms())
                values = total([*terms, product(bound.values, side(bound.slope))])
                better = found[bound.place] & values
                if better and better != found[bound.place]:
                    found[bound.place], changed = better, True
        return tuple(found)

    def _stated(self, factor: ParameterPolynomial) -> Values:
        """The signs that conditions leave to a factor outright, as in c·f > 0 or f·g != 0."""
        values = ANY
        for condition in self.apart:
            exponent = condition.exponents.get(factor, 0)
            stated = ANY
            if exponent % 2 and len(condition.exponents) == 1:
                stated = product(condition.values, side(condition.content))
            if exponent < 0 or (exponent and 0 not in condition.values):
                stated -= {0}
            values = (values & stated) or values  # nothing left: the conditions contradict
        return values

    @cached_property
    def cores(self) -> tuple[Comparison, ...]:
        """The conditions without factors of known sign, where more than one term is left."""
        made = []
        for condition in self.apart:
            core, sign = self.field.domain.one, _sign(condition.content)
            for factor, exponent in condition.exponents.items():
                values = power(self.terms(factor), exponent)
                if len(values) == 1 and 0 not in values:
                    sign *= min(values)
                else:
                    core *= self.field.of_polynomial(factor) ** abs(exponent)
            same = self.field.constant(core / condition.comparison.element)
            if same is not None:
                made.append(condition.comparison)
            elif self.field.number_sign(core) is None:
                made.append(Comparison(core * sign, condition.comparison.relation))
        return tuple(c for c in made if len(c.element.numer) > 1 and c.relation != "!=")

    @cached_property
    def bounds(self) -> tuple[Bound, ...]:
        """The conditions that bound a parameter."""
        return _bounds(self.cores)

    def term(self, monomial: tuple[int, ...], factor: Fraction) -> Values:
        """Return the signs that factor · monomial may have."""
        return _term(self.parameters, monomial, factor)

    def terms(self, polynomial: ParameterPolynomial) -> Values:
        """Return the signs that the sum may have, as far as those of its terms tell."""
        return total(self.term(m, rational(c)) for m, c in polynomial.iterterms())


def _bounds(comparisons: Iterable[Comparison]) -> tuple[Bound, ...]:
    """The conditions that are linear in a parameter, with a number as its coefficient."""
    found = []
    for comparison in comparisons:
        if comparison.relation == "!=" or not comparison.element.denom.is_ground:
            continue
        polynomial = cleared(comparison.element)
        for place, x in enumerate(polynomial.ring.gens):
            if str(x) != PI and polynomial.degree(x) == 1 and len(polynomial) > 1:
                free, slope = coefficients_in(polynomial, place)
                if slope.is_ground:
                    number = slope.LC
                    found.append(
                        Bound(comparison, place, rational(number), -free.quo_ground(number))
                    )
    return tuple(found)


def _term(parameters: Sequence[Values], monomial: tuple[int, ...], factor: Fraction) -> Values:
    powers = (power(v, e) for v, e in zip(parameters, monomial, strict=True) if e)
    return reduce(product, powers, side(factor))


def cleared(element: Scalar) -> ParameterPolynomial:
    """Return an element whose denominator is a number as a polynomial."""
    return element.numer.quo_ground(element.denom.LC)


def side(value: Fraction) -> Values:
    """Return the sign of a number."""
    return frozenset({_sign(value)})


def _sign(value: Fraction) -> int:
    return (value > 0) - (value < 0)
