"""An exact value as a formula again: the right form that a report shows."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from fractions import Fraction

from closedform.algebra.elementary import Element
from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.tower import roots_in
from closedform.algebra.fraction_field import Whole
from closedform.checking.exact import Value
from closedform.checking.matrices import ExactMatrix
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
    """
    names = names or {}
    if isinstance(value, ExactMatrix):
        rows = tuple(tuple(_function(e, names, time) for e in row) for row in value.rows)
        return Array(rows)
    return _function(value, names, time)


def _function(value: Element, names: Names, time: str) -> Written:
    if value.below is not None:
        field = value.field
        above, below = Element(field, value.above), Element(field, value.below)
        return Quotient(_function(above, names, time), _function(below, names, time))
    terms = _joined(value)
    return _sum(_term(term, names, time) for term in terms)


Term = tuple[Element, Element, int, Element, str]
"""rate, offset, power of t, coefficient, and "" or the function cos, sin of the frequency."""


def _joined(value: Element) -> list[tuple[Element, Element, int, Element, Element | None, str]]:
    """Return the terms, conjugate pairs as cosines and sines.

    Each is (rate, offset, power, coefficient, frequency, function).
    """
    field = value.field
    terms = list(value.terms())
    found: list[tuple[Element, Element, int, Element, Element | None, str]] = []
    used: set[int] = set()
    for k, (rate, offset, power, coefficient) in enumerate(terms):
        if k in used:
            continue
        frequency = field.im(rate)
        partner = None
        if not frequency.is_zero:
            wanted = (field.conj(rate), field.conj(offset), power, field.conj(coefficient))
            partner = next(
                (j for j in range(k + 1, len(terms)) if j not in used and terms[j] == wanted), None
            )
        if partner is None:
            found.append((rate, offset, power, coefficient, None, ""))
            continue
        used.add(partner)
        if frequency.sign() == -1:
            frequency, coefficient = -frequency, field.conj(coefficient)
        phase = field.im(offset)
        if not phase.is_zero:
            coefficient = coefficient * field.exp(field.i * phase)
            offset = field.re(offset)
        for part, function in (
            (2 * field.re(coefficient), "cos"),
            (-2 * field.im(coefficient), "sin"),
        ):
            if not part.is_zero:
                found.append((field.re(rate), offset, power, part, frequency, function))
    return found


def _term(
    term: tuple[Element, Element, int, Element, Element | None, str], names: Names, time: str
) -> Written:
    rate, offset, power, coefficient, frequency, function = term
    t = Symbol(time)
    factors: list[Written] = []
    if power:
        factors.append(t if power == 1 else Power(t, Literal(Fraction(power))))
    exponent = [_times(_constant(rate, names), t)] if not rate.is_zero else []
    if not offset.is_zero:
        exponent.append(_constant(offset, names))
    if exponent:
        factors.append(Power(EULER, _sum(exponent)))
    if frequency is not None:
        factors.append(Apply(function, (_times(_constant(frequency, names), t),)))
    return _times(_constant(coefficient, names), *factors)


def _constant(value: Element, names: Names) -> Written:
    constant = value.constant
    if constant is None:  # a constant with exponentials of numbers
        return _function(value, names, "t")
    return _of_tower(constant, names)


def _of_tower(constant: Constant, names: Names) -> Written:
    if not constant.parts:
        return ZERO
    whole = constant.as_fraction()
    if whole is not None:
        return _fraction(whole)
    flat = int(constant.below.leading_coefficient()) if _is_number(constant.below) else None
    terms = []
    for mask, polynomial in sorted(constant.parts.items()):
        roots = [_root(constant, k, names) for k in roots_in(mask)]
        if flat is not None:
            terms += [
                _times(_fraction(Fraction(weight, flat)), *monomial, *roots)
                for weight, monomial in _monomials(constant, polynomial, names)
            ]
        else:
            inside = _sum(
                _times(_fraction(Fraction(weight)), *monomial)
                for weight, monomial in _monomials(constant, polynomial, names)
            )
            terms.append(_times(inside, *roots))
    if flat is not None:
        return _sum(terms)
    below = _sum(
        _times(_fraction(Fraction(weight)), *monomial)
        for weight, monomial in _monomials(constant, constant.below, names)
    )
    above = _sum(terms)
    if isinstance(above, Negation):
        return Negation(Quotient(above.operand, below))
    return Quotient(above, below)


def _is_number(polynomial: Whole) -> bool:
    return all(degree <= 0 for degree in polynomial.degrees())


def _monomials(
    constant: Constant, polynomial: Whole, names: Names
) -> Iterable[tuple[int, list[Written]]]:
    for exponents, weight in polynomial.to_dict().items():
        factors: list[Written] = []
        for k, exponent in enumerate(exponents):
            if exponent:
                base = _generator(constant, k, names)
                power = Literal(Fraction(int(exponent)))
                factors.append(base if exponent == 1 else Power(base, power))
        yield int(weight), factors


def _generator(constant: Constant, k: int, names: Names) -> Written:
    generator = constant.tower.generators[k]
    match generator.kind:
        case "pi":
            return PI
        case "ln" | "atan" if generator.of is not None:
            return Apply(generator.kind, (_of_tower(generator.of, names),))
    return Symbol(names.get(generator.text, generator.text))


def _root(constant: Constant, k: int, names: Names) -> Written:
    if k == 0:
        return IMAGINARY
    return Apply("sqrt", (_of_tower(constant.tower.roots[k].radicand, names),))


def _fraction(value: Fraction) -> Written:
    if value < 0:
        return Negation(_fraction(-value))
    if value.denominator == 1:
        return Literal(value)
    return Quotient(Literal(Fraction(value.numerator)), Literal(Fraction(value.denominator)))


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
