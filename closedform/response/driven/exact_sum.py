"""Values of the driven solution that are algebraic numbers, exactly.

At one algebraic instant each part of it is a sum of e^a with algebraic coefficients.  Those
of one exponent are added up; if no exponent but 0 is left, what stands beside it is the
value.  If one is left and no exponent has pi in it, the value is transcendental (the
theorem of Lindemann and Weierstrass; A. Baker, Transcendental Number Theory, 1975,
chapter 1) and there is no exact value to be had.
"""

from __future__ import annotations

import dataclasses
from collections.abc import Hashable, Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction

from closedform.algebra.field import BaseField, Polynomial, Scalar
from closedform.algebra.surds import SurdSum
from closedform.algebra.value_field import FieldWithPi
from closedform.algebra.waves import Constant
from closedform.response.driven.in_field import InField, Spot, ValueTerm, root_in

__all__ = ["exact_value"]

_COSINES = {
    Fraction(0): SurdSum.rational(1),
    Fraction(1, 6): SurdSum.of({3: Fraction(1, 2)}),
    Fraction(1, 4): SurdSum.of({2: Fraction(1, 2)}),
    Fraction(1, 3): SurdSum.rational(Fraction(1, 2)),
    Fraction(1, 2): SurdSum(()),
}
"""cos(pi q) for q from 0 to 1/2, where it is short."""

_Complex = tuple[Scalar, Scalar]
"""Real and imaginary part."""


def exact_value(solution: InField, row: int, spots: Sequence[Spot], t: SurdSum) -> SurdSum | None:
    """Return a row at t, in these spots, as a surd sum, or None if none is found."""
    field = solution.field
    at = field.scalar(t)
    for instant, place, value in solution.fixed:
        if place == row and not at - instant:
            return field.number(value)
    sums = {"": _Sums(field)}
    for spot in spots:
        part = solution.parts[spot.part]
        for summand in part.intervals[spot.interval].summands:
            since = solution.since(spot, summand.origin, t)
            beside = sums.setdefault(summand.constant.named, _Sums(field))
            for term in part.terms:
                beside.add(term, row, summand.place, since, summand.constant)
    named = [own.value() for name, own in sums.items() if name]
    if any(value is None or not value.is_zero for value in named):
        return None  # the constants that conditions determine are not looked into
    return sums[""].value()


@dataclass
class _Sum:
    """What stands beside e^(growth + i angle)."""

    growth: Scalar
    angle: Scalar
    real: Scalar
    imaginary: Scalar


@dataclass
class _Sums:
    """Coefficients by exponent; those that stand for all roots of a polynomial apart.

    An exponent is growth + i angle, or lambda s + growth + i angle for the roots lambda of
    a polynomial whose degree is above that of the coefficients: such a sum is 0 for all
    roots, or for none.
    """

    field: BaseField
    single: dict[Hashable, _Sum] = dataclasses.field(default_factory=dict)
    of_roots: dict[Hashable, list[Polynomial]] = dataclasses.field(default_factory=dict)

    def value(self) -> SurdSum | None:
        """Return the sum if it is a surd sum."""
        if any(not p.is_zero for pair in self.of_roots.values() for p in pair):
            return None
        beside: dict[int, Scalar] = {}  # what stands beside each square root
        for own in self.single.values():
            if not own.real and not own.imaginary:
                continue
            turned = None if own.growth else _turned(self.field, own.angle)
            if turned is None:
                return None
            for amount, part in zip((own.real, -own.imaginary), turned, strict=True):
                for radicand, c in part.terms:
                    more = amount * self.field.scalar(c)
                    beside[radicand] = beside.get(radicand, self.field.domain.zero) + more
        total = SurdSum(())
        for radicand, amount in beside.items():
            number = self.field.number(amount)
            if number is None:
                return None
            total += number * SurdSum.of({radicand: Fraction(1)})
        return total

    def add(self, term: ValueTerm, row: int, column: int, s: Scalar, constant: Constant) -> None:
        """Add constant times what a term is, s after its origin."""
        number = self.field.domain.convert
        entries = term.entries[row][column]
        held = [_sum_of_powers(own, s, number(0)) for own in zip(*entries, strict=True)]
        if not any(held):
            return
        for factor, angle in _turning(self.field, constant):
            if not s:  # Euler's formula: the sum of lambda^k/p'(lambda) is 0 but for k = d - 1
                self._put(constant.growth, angle, _times(factor, (held[-1], number(0))))
                continue
            for part, weight in _weights(self.field, term, held, s):
                self._add_part(part, weight, s, constant.growth, angle, factor)

    def _add_part(
        self,
        part: Polynomial,
        weight: Polynomial,
        s: Scalar,
        growth: Scalar,
        angle: Scalar,
        factor: _Complex,
    ) -> None:
        zero = self.field.domain.zero
        if part.degree() == 1:
            self._put(growth - part.nth(0) * s, angle, _times(factor, (weight.nth(0), zero)))
            return
        centre = -part.nth(1) / self.field.domain.convert(2)
        square = part.nth(0) - centre**2
        frequency = None
        if part.degree() == len("bc") and self.field.sign(square) > 0:
            frequency = root_in(self.field, square)
        if frequency is None:
            key = tuple(_key(self.field, e) for e in (*part.to_list(), s, growth, angle))
            held = self.of_roots.setdefault(key, [self.field.polynomial([])] * 2)
            for k, c in enumerate(factor):
                held[k] = held[k] + weight * c
            return
        for turn in (frequency, -frequency):
            own = (weight.nth(0) + weight.nth(1) * centre, weight.nth(1) * turn)
            self._put(growth + centre * s, angle + turn * s, _times(factor, own))

    def _put(self, growth: Scalar, angle: Scalar, amount: _Complex) -> None:
        zero = self.field.domain.zero
        key = (_key(self.field, growth), _key(self.field, angle))
        own = self.single.setdefault(key, _Sum(growth, angle, zero, zero))
        own.real += amount[0]
        own.imaginary += amount[1]


def _sum_of_powers(coefficients: Sequence[Scalar], s: Scalar, zero: Scalar) -> Scalar:
    """The sum of c_j s^j/j!."""
    total = zero
    for j in range(len(coefficients) - 1, -1, -1):
        total = total * s / (j + 1) + coefficients[j]
    return total


def _weights(
    field: BaseField, term: ValueTerm, held: list[Scalar], s: Scalar
) -> Iterable[tuple[Polynomial, Polynomial]]:
    """Each part of p, and a polynomial whose values at its roots stand before e^(lambda s)."""
    r = field.polynomial(list(reversed(held)))
    for part in term.parts:
        if term.is_square:
            yield part, (r.diff() + r * s).rem(part)
        else:
            yield part, (r * field.inverse_modulo(part, term.p.diff())).rem(part)


def _turning(field: BaseField, constant: Constant) -> list[tuple[_Complex, Scalar]]:
    """The cosine or sine of an angle as sums of e^(±i angle), each with its factor."""
    zero, one = field.domain.zero, field.domain.one
    if constant.kernel == "one":
        return [((one, zero), zero)]
    half = one / field.domain.convert(2)
    pairs = [(half, zero), (half, zero)]
    if constant.kernel == "sin":
        pairs = [(zero, -half), (zero, half)]
    return list(zip(pairs, (constant.angle, -constant.angle), strict=True))


def _times(a: _Complex, b: _Complex) -> _Complex:
    return a[0] * b[0] - a[1] * b[1], a[0] * b[1] + a[1] * b[0]


def _turned(field: BaseField, angle: Scalar) -> tuple[SurdSum, SurdSum] | None:
    """Cosine and sine of an angle where they are known: of 0, or of rational times pi."""
    turns: SurdSum | None = SurdSum(())
    if angle:
        turns = field.number(angle / field.pi) if isinstance(field, FieldWithPi) else None
    if turns is None or not turns.is_rational:
        return None
    q = turns.as_fraction()
    cosine, sine = _cosine(q), _cosine(q - Fraction(1, 2))
    return None if cosine is None or sine is None else (cosine, sine)


def _cosine(q: Fraction) -> SurdSum | None:
    """cos(pi q) where it is short, else None."""
    turned = abs(q) % 2
    turned = min(turned, 2 - turned)
    value = _COSINES.get(min(turned, 1 - turned))
    return -value if value is not None and turned > Fraction(1, 2) else value


def _key(field: BaseField, element: Scalar) -> Hashable:
    """What is equal for equal elements, also for fractions in pi, whose form is not unique."""
    if not isinstance(field, FieldWithPi):
        plain: Hashable = element
        return plain
    lead = element.denom.LC
    return element.numer.quo_ground(lead), element.denom.quo_ground(lead)
