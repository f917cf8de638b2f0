"""Signs over a domain, each with an argument, tried from the plainest to the longest.

What is decided is true wherever the element is defined on the domain.  No argument found
means "unknown": that is no statement that the sign changes.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property, partial
from itertools import chain

from sympy.polys.domains import QQ

from closedform.algebra.conditions import Conditions, cleared, side
from closedform.algebra.field import Scalar, rational
from closedform.algebra.one_parameter import InOneParameter
from closedform.algebra.parameter_field import Factored, ParameterField, ParameterPolynomial
from closedform.algebra.sign_argument import (
    ANY,
    ByCondition,
    ByExpansion,
    ByFactors,
    ByPi,
    BySquares,
    ByTerms,
    Combined,
    Constant,
    Reason,
    SignArgument,
    Undecided,
    Values,
    named,
    power,
    product,
    relation_values,
    total,
)
from closedform.algebra.squares import balanced, coefficients_in, completed, joined

__all__ = ["Facts"]

Way = Callable[[ParameterPolynomial, int], Iterator[tuple[Values, Reason]]]

LONGEST = 120
"""The most terms of a polynomial that is searched for squares and expansions."""
HIGHEST = 6
"""The highest power of a parameter that is expanded."""
DEPTH = 3
"""How many arguments may stand inside each other (expansions, rests, completed squares)."""


@dataclass(frozen=True)
class Facts:
    """What the conditions on the parameters of a field say; answers are kept."""

    conditions: Conditions

    @property
    def field(self) -> ParameterField:
        """The field of the elements."""
        return self.conditions.field

    @cached_property
    def in_one_parameter(self) -> InOneParameter:
        """What the conditions say about one parameter at a time."""
        return InOneParameter(self.conditions)

    @cached_property
    def _answers(self) -> dict[tuple[Scalar, int], SignArgument]:
        return {}

    def sign_of(self, element: Scalar, depth: int = DEPTH) -> SignArgument:
        """Return the sign of an element with its argument.

        `depth` bounds how many arguments may stand inside each other.
        """
        key = (element, depth)
        if key not in self._answers:
            self._answers[key] = self._decided(element, depth)
        return self._answers[key]

    def _decided(self, element: Scalar, depth: int) -> SignArgument:
        number = self._number(element)
        if number is not None:
            return number
        found: list[SignArgument] = []
        left = ANY
        last = self.in_one_parameter.signs(element) if depth else ()
        for values, reason in chain(self._ways(element, depth, found), last):
            if left <= values or not values & left:
                continue  # nothing new, or the conditions contradict: the first one stays
            left &= values
            found.append(SignArgument(element, named(values), reason))
            if len(left) == 1:
                break
        return _chosen(element, found, left)

    def _ways(
        self, element: Scalar, depth: int, found: list[SignArgument]
    ) -> Iterator[tuple[Values, Reason]]:
        """The arguments for an element that is no number, the plain ones first.

        The long ones are tried only as long as `found`, which the caller fills, tells nothing
        but that the element is not 0.
        """
        yield from self._by_same(element)
        if not _is_parameter(element):
            yield from self._by_terms(element)
        parts = self.field.factored(element)
        if len(parts.factors) > 1 or parts.factors[0][1] != 1:
            yield self._by_factors(parts, depth)
            if depth:
                yield from self._by_conditions(element, parts, depth)
            return
        ways: list[Way] = [self._by_squares]
        if depth:
            yield from self._by_conditions(element, parts, depth)
            ways += [self._by_rest, self._by_expansion, self._by_square_in_one]
        polynomial = cleared(element)
        if len(polynomial) > LONGEST:
            return
        for way in ways:
            known = any(argument.sign != "nonzero" for argument in found)
            if known and not _is_parameter(element):
                return
            yield from way(polynomial, depth)
        yield from self._by_terms(element)

    def _by_same(self, element: Scalar) -> Iterator[tuple[Values, Reason]]:
        """Conditions on a rational multiple of the element."""
        for condition in self.conditions.apart:
            other = condition.comparison.element
            if len(element.numer) != len(other.numer) or len(element.denom) != len(other.denom):
                continue  # no division is needed to see that it is no multiple
            multiple = self._number(element / other)
            if multiple is not None:
                values = product(condition.values, multiple.values)
                yield values, ByCondition(condition.comparison, multiple)

    def _number(self, element: Scalar) -> SignArgument | None:
        """The sign of a number, rational or in pi alone."""
        sign = self.field.number_sign(element)
        if sign is None:
            return None
        reason = ByPi() if self.field.holds_pi(element) else Constant()
        return SignArgument(element, named(frozenset({sign})), reason)

    def _by_terms(self, element: Scalar) -> Iterator[tuple[Values, Reason]]:
        below = self.conditions.terms(element.denom) - {0}
        if len(below) == 1:
            yield product(self.conditions.terms(element.numer), below), ByTerms()

    def _by_factors(self, parts: Factored, depth: int) -> tuple[Values, Reason]:
        values = side(parts.content)
        made = []
        for factor, exponent in parts.factors:
            argument = self.sign_of(self.field.of_polynomial(factor), depth)
            made.append((argument, exponent))
            values = product(values, power(argument.values, exponent))
        return values, ByFactors(parts.content, tuple(made))

    def _by_conditions(
        self, element: Scalar, parts: Factored, depth: int
    ) -> Iterator[tuple[Values, Reason]]:
        """Conditions that differ from the element by factors of known sign, or hold it."""
        mine = dict(parts.factors)
        for condition in self.conditions.apart:
            theirs = condition.exponents
            common = [f for f in mine if f in theirs]
            if not common:
                continue
            multiple = element / condition.comparison.element
            if self.field.constant(multiple) is not None:
                continue  # asked before
            values, strict = ANY, 0 not in condition.values
            if len(self.field.names_in(element) | self.field.names_in(multiple)) == 1:
                depth = 1  # what is not short is told by cells
            argument = self._by_known_factors(multiple, depth)
            lost = [f for f, e in theirs.items() if e > max(mine.get(f, 0), 0)]
            if strict or all(self._known(f, depth).never_zero for f in lost):
                values = product(argument.values, condition.values)
            if len(mine) == 1 and (strict or theirs[common[0]] < 0):
                values -= {0}
            if values != ANY:
                yield values, ByCondition(condition.comparison, argument)

    def _known(self, factor: ParameterPolynomial, depth: int) -> SignArgument:
        return self.sign_of(self.field.of_polynomial(factor), depth - 1)

    def _by_known_factors(self, element: Scalar, depth: int) -> SignArgument:
        values, reason = self._by_factors(self.field.factored(element), depth - 1)
        return SignArgument(element, named(values), reason)

    def _short(self, polynomial: ParameterPolynomial) -> SignArgument:
        """The sign of a rest by its terms, or by squares; nothing is factored."""
        element = self.field.of_polynomial(polynomial)
        number = self._number(element)
        if number is not None:
            return number
        found = [(v, r) for v, r in self._by_terms(element) if v != ANY]
        for values, reason in found or self._by_squares(polynomial):
            return SignArgument(element, named(values), reason)
        return SignArgument(element, "unknown", Undecided())

    def _by_squares(
        self, polynomial: ParameterPolynomial, _depth: int = 0
    ) -> Iterator[tuple[Values, Reason]]:
        for search in (balanced, joined):
            for sign in (1, -1):
                taken = search(self.field, polynomial, self.conditions.term, sign)
                if taken is None:
                    continue
                squares, rest = taken
                left = self.conditions.terms(rest)
                values = total([frozenset({0, sign}), left])
                if values != ANY:
                    shown = SignArgument(self.field.of_polynomial(rest), named(left), ByTerms())
                    yield values, BySquares(squares, shown if rest else None)
                    return

    def _by_rest(
        self, polynomial: ParameterPolynomial, _depth: int
    ) -> Iterator[tuple[Values, Reason]]:
        """The element as a multiple of a condition and a rest of the same sign."""
        for comparison in self.conditions.cores:
            condition = cleared(comparison.element)
            tried = set()
            for m, c in polynomial.iterterms():
                for n, d in condition.iterterms():
                    exponents = tuple(a - b for a, b in zip(m, n, strict=True))
                    factor = (exponents, rational(c) / rational(d))
                    if min(exponents) < 0 or factor in tried:
                        continue
                    tried.add(factor)
                    sign = self.conditions.term(*factor)
                    values = product(sign, relation_values(comparison.relation))
                    multiple = polynomial.ring.from_dict({exponents: c / d})
                    if values == ANY:
                        continue
                    rest = self._short(polynomial - multiple * condition)
                    if total([values, rest.values]) != ANY:
                        shown = self.field.of_polynomial(multiple)
                        argument = SignArgument(shown, named(sign), ByTerms())
                        yield _with_rest(values, rest, partial(ByCondition, comparison, argument))
                        return

    def _by_expansion(
        self, polynomial: ParameterPolynomial, depth: int
    ) -> Iterator[tuple[Values, Reason]]:
        """Powers of the distance of a parameter from its bound."""
        for bound in self.conditions.bounds:
            x = polynomial.ring.gens[bound.place]
            if not 0 < polynomial.degree(x) <= HIGHEST:
                continue
            shifted = polynomial.compose(x, x.quo_ground(_number(bound.slope)) + bound.free)
            parts = coefficients_in(shifted, bound.place)
            if bound.comparison.relation == "=":
                parts = parts[:1]
            made = []
            for part in parts:
                made.append(self.sign_of(self.field.of_polynomial(part), depth - 1))
                if made[-1].sign == "unknown":
                    break
            values = total(product(a.values, power(bound.values, j)) for j, a in enumerate(made))
            if len(made) == len(parts) and values != ANY:
                name = self.field.parameters[bound.place]
                yield values, ByExpansion(bound.comparison, name, tuple(made))
                return

    def _by_square_in_one(
        self, polynomial: ParameterPolynomial, depth: int
    ) -> Iterator[tuple[Values, Reason]]:
        for square, rest in completed(self.field, polynomial):
            weight = self.sign_of(square.weight, 0).values
            if weight not in ({1}, {-1}):
                continue
            argument = self.sign_of(rest, depth - 1)
            if total([weight | {0}, argument.values]) != ANY:
                yield _with_rest(weight | {0}, argument, partial(BySquares, (square,)))
                return


def _chosen(element: Scalar, found: list[SignArgument], left: Values) -> SignArgument:
    """The one argument that says all, or all of them together."""
    if not found:
        return SignArgument(element, "unknown", Undecided())
    for argument in found:
        if argument.values == left:
            return argument
    return SignArgument(element, named(left), Combined(tuple(found)))


def _with_rest(
    values: Values, rest: SignArgument, reason: Callable[[SignArgument | None], Reason]
) -> tuple[Values, Reason]:
    return total([values, rest.values]), reason(rest if rest.element else None)


def _is_parameter(element: Scalar) -> bool:
    return bool(element.denom.is_ground and element.numer.is_generator)


def _number(value: Fraction) -> Scalar:
    return QQ(value.numerator, value.denominator)
