"""An exact value as a formula again: the right form that a report shows."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from fractions import Fraction

from closedform.algebra.elementary import Element
from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.tower import Tower, roots_in
from closedform.algebra.fraction_field import Whole
from closedform.checking.errors import NotJudgedError
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value
from closedform.notation.written.tidied import rational_written
from closedform.notation.written.tree import (
    EULER,
    IMAGINARY,
    PI,
    Apply,
    Array,
    Literal,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    Symbol,
    Written,
)

__all__ = ["written_back"]

Names = Mapping[str, str]
ZERO, ONE = Literal(Fraction(0)), Literal(Fraction(1))


def written_back(value: Value, names: Names | None = None, time: str = "t") -> Written:
    """Return a formula of an exact value: real sines and cosines where the function is real.

    `names` says how names of the field are to be written, if not as they are.

    Raises:  NotJudgedError for numbers of thousands of digits.
    """
    names = names or {}
    if isinstance(value, ExactMatrix):
        rows = tuple(tuple(_function(e, names, time) for e in row) for row in value.rows)
        return Array(rows)
    return _function(value, names, time)


def _function(value: Element, names: Names, time: str) -> Written:
    if value.below is not None:
        above, below = value.like(value.above, None), value.like(value.below, None)
        return Quotient(_function(above, names, time), _function(below, names, time))
    terms = _joined(value)
    return _sum(_term(term, names, time) for term in terms)


Term = tuple[Element, Element, int, Element, Element | None, str]
"""Rate, offset, power of t, coefficient, and the angle with cos or sin, if it is a wave."""


def _joined(value: Element) -> list[Term]:
    """Return the terms, conjugate pairs as cosines and sines.

    Each is (rate, offset, power, coefficient, frequency, function).
    """
    field = value.field
    terms = list(value.terms())
    found: list[Term] = []
    used: set[int] = set()
    for k, (rate, offset, power, coefficient) in enumerate(terms):
        if k in used:
            continue
        partner = None
        if not (field.im(rate).is_zero and field.im(offset).is_zero):
            wanted = (field.conj(rate), field.conj(offset), power, field.conj(coefficient))
            partner = next(
                (j for j in range(k + 1, len(terms)) if j not in used and terms[j] == wanted), None
            )
        if partner is None:
            found.append((rate, offset, power, coefficient, None, ""))
            continue
        used.add(partner)
        found += _waves(rate, offset, power, coefficient)
    return found


def _waves(rate: Element, offset: Element, power: int, coefficient: Element) -> list[Term]:
    """Return a term and its conjugate as a cosine and a sine."""
    field = rate.field
    frequency, phase = field.im(rate), field.im(offset)
    if (frequency.sign() or phase.sign()) == -1:
        frequency, phase, coefficient = -frequency, -phase, field.conj(coefficient)
    parts = ((2 * field.re(coefficient), "cos"), (-2 * field.im(coefficient), "sin"))
    return [
        (field.re(rate), field.re(offset), power, part, frequency * field.t + phase, function)
        for part, function in parts
        if not part.is_zero
    ]


def _term(term: Term, names: Names, time: str) -> Written:
    rate, offset, power, coefficient, angle, function = term
    t = Symbol(time)
    factors: list[Written] = []
    if power:
        factors.append(t if power == 1 else Power(t, Literal(Fraction(power))))
    exponent = [_times(_constant(rate, names), t)] if not rate.is_zero else []
    if not offset.is_zero:
        exponent.append(_constant(offset, names))
    if exponent:
        factors.append(Power(EULER, _sum(exponent)))
    if angle is not None:
        factors.append(Apply(function, (_function(angle, names, time),)))
    return _times(_constant(coefficient, names), *factors)


def _constant(value: Element, names: Names) -> Written:
    constant = value.constant
    if constant is None:  # a constant with exponentials of numbers
        return _function(value, names, "t")
    return _Writer(value.context.tower, names).constant(constant)


@dataclass(frozen=True, slots=True)
class _Writer:
    """Writes constants of a tower."""

    tower: Tower
    names: Names

    def constant(self, constant: Constant) -> Written:
        """Return a constant as a formula: a sum, or a quotient of sums."""
        if not constant.parts:
            return ZERO
        whole = constant.as_fraction()
        if whole is not None:
            return _fraction(whole)
        number = _is_number(constant.below)
        flat = int(constant.below.leading_coefficient()) if number else 1
        terms = []
        for mask, polynomial in sorted(constant.parts.items()):
            roots = [self._root(k) for k in roots_in(mask)]
            if number:
                terms += [_times(term, *roots) for term in self._terms(polynomial, flat)]
            else:
                terms.append(_times(_sum(self._terms(polynomial)), *roots))
        above = _sum(terms)
        if number:
            return above
        below = _sum(self._terms(constant.below))
        if isinstance(above, Negation):
            return Negation(Quotient(above.operand, below))
        return Quotient(above, below)

    def _terms(self, polynomial: Whole, divisor: int = 1) -> list[Written]:
        """Return the terms of a polynomial over a number."""
        terms = []
        for exponents, weight in polynomial.to_dict().items():
            factors: list[Written] = []
            for k, exponent in enumerate(exponents):
                if exponent:
                    base = self._generator(k)
                    power = Literal(Fraction(int(exponent)))
                    factors.append(base if exponent == 1 else Power(base, power))
            terms.append(_times(_fraction(Fraction(int(weight), divisor)), *factors))
        return terms

    def _generator(self, k: int) -> Written:
        generator = self.tower.generators[k]
        match generator.kind:
            case "pi":
                return PI
            case "ln" | "atan" if generator.of is not None:
                return Apply(generator.kind, (self.constant(generator.of),))
        return Symbol(self.names.get(generator.text, generator.text))

    def _root(self, k: int) -> Written:
        if k == 0:
            return IMAGINARY
        return Apply("sqrt", (self.constant(self.tower.roots[k].radicand),))


def _is_number(polynomial: Whole) -> bool:
    return all(degree <= 0 for degree in polynomial.degrees())


MOST_BITS = 13_000
"""Binary digits of a number that is written out: some 4000 decimal ones."""


def _fraction(value: Fraction) -> Written:
    if max(value.numerator.bit_length(), value.denominator.bit_length()) > MOST_BITS:
        raise NotJudgedError("there are numbers of thousands of digits in its right form")
    return rational_written(value)


def _times(*factors: Written) -> Written:
    """Return a product: signs in front, ones left out, products opened."""
    negative = False
    flat: list[Written] = []
    for factor in factors:
        inside = factor
        if isinstance(inside, Negation):
            negative, inside = not negative, inside.operand
        flat += inside.factors if isinstance(inside, Product) else (inside,)
    flat = [factor for factor in flat if factor != ONE]
    if ZERO in flat:
        return ZERO
    if not flat:
        result: Written = ONE
    else:
        result = flat[0] if len(flat) == 1 else Product(tuple(flat))
    return Negation(result) if negative else result


def _sum(terms: Iterable[Written]) -> Written:
    found = [term for term in terms if term != ZERO]
    found.sort(key=lambda term: isinstance(term, Negation))
    if not found:
        return ZERO
    return found[0] if len(found) == 1 else Sum(tuple(found))
