"""Polynomials as sums of squares and terms of one sign, found by small exact searches.

Three ways, all of school algebra: a term of the wrong sign is balanced by two others as
in (x - y)² (the inequality of the means, G. H. Hardy, J. E. Littlewood and G. Pólya,
Inequalities, 1934); several such terms are taken together as in (x + y - z)²; or the
square in one parameter is completed.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from fractions import Fraction
from math import isqrt, lcm

from closedform.algebra.field import Scalar, rational
from closedform.algebra.parameter_field import PI, ParameterField, ParameterPolynomial
from closedform.algebra.sign_argument import Square, Values

__all__ = ["balanced", "coefficients_in", "completed", "joined"]

TermValues = Callable[[tuple[int, ...], Fraction], Values]
Monomial = tuple[int, ...]


def balanced(
    field: ParameterField,
    polynomial: ParameterPolynomial,
    term_values: TermValues,
    sign: int,
) -> tuple[tuple[Square, ...], ParameterPolynomial] | None:
    """Return squares and a rest with polynomial = sum of squares + rest, all of one sign.

    `term_values` gives the signs that a term may have.  Every term that may have the
    wrong sign is taken up by squares weight · (m1 - c m2)² of two terms whose monomials
    multiply to its square.  Returns None if the search ends without taking up all.
    """
    stock, taken_up = _sorted_out(polynomial, term_values, sign)
    wrong = list(taken_up.items())
    if not stock or not wrong:
        return None
    pairs = {g: _pairs(g, stock) for g, _ in wrong}
    wrong.sort(key=lambda term: (len(pairs[term[0]]), term))
    squares: list[Square] = []
    for monomial, value in wrong:
        left = value
        for a, b in pairs[monomial]:
            taken = _taken(stock[a], stock[b], left)
            if taken is None:
                continue
            share, weight, ratio = taken
            stock[a] -= weight
            stock[b] -= weight * ratio * ratio
            squares.append(_square(field, a, b, weight, ratio))
            left -= share
            if not left:
                break
        if left:
            return None
    rest = polynomial.ring.from_dict(
        {m: field.domain.domain(c.numerator, c.denominator) for m, c in stock.items() if c}
    )
    return tuple(squares), rest


def _sorted_out(
    polynomial: ParameterPolynomial, term_values: TermValues, sign: int
) -> tuple[dict[Monomial, Fraction], dict[Monomial, Fraction]]:
    """The terms that have the sign, and those that may not."""
    stock: dict[Monomial, Fraction] = {}
    wrong: dict[Monomial, Fraction] = {}
    for monomial, coefficient in polynomial.iterterms():
        value = rational(coefficient)
        kept = stock if term_values(monomial, value) <= {0, sign} else wrong
        kept[monomial] = value
    return stock, wrong


def _pairs(monomial: Monomial, stock: dict[Monomial, Fraction]) -> list[tuple[Monomial, Monomial]]:
    """The pairs of monomials in stock whose product is the square of the monomial."""
    found = []
    for a in sorted(stock, reverse=True):
        b = tuple(2 * g - e for g, e in zip(monomial, a, strict=True))
        if a > b and b in stock:
            found.append((a, b))
    return found


def _taken(
    first: Fraction, second: Fraction, wanted: Fraction
) -> tuple[Fraction, Fraction, Fraction] | None:
    """Return (share, w, c): w (m1 - c m2)² has the middle term `share` of `wanted`.

    All of it if the stocks `first` and `second` allow it, otherwise as much as two equal
    amounts give; None if there is nothing to take.
    """
    if not first or not second:
        return None
    half = -wanted / 2
    sign = 1 if first > 0 else -1
    if abs(half) <= min(abs(first), abs(second)):
        return wanted, sign * abs(half), Fraction(sign if half > 0 else -sign)
    if half * half <= first * second:
        if abs(first) <= abs(second):
            return wanted, first, half / first
        weight = half * half / second
        return wanted, weight, half / weight
    size = min(abs(first), abs(second))
    direction = 1 if half * sign > 0 else -1
    return Fraction(-2 * sign * direction) * size, sign * size, Fraction(direction)


def _square(
    field: ParameterField, a: Monomial, b: Monomial, weight: Fraction, ratio: Fraction
) -> Square:
    common = tuple(min(pair) for pair in zip(a, b, strict=True))
    first, second = (tuple((e - c) // 2 for e, c in zip(m, common, strict=True)) for m in (a, b))
    whole = ratio.denominator
    base = whole * _monomial(field, first) - ratio.numerator * _monomial(field, second)
    return Square(field.scalar(weight / whole**2) * _monomial(field, common), base)


def _monomial(field: ParameterField, exponents: Monomial) -> Scalar:
    element = field.domain.one
    for name, exponent in zip(field.parameters, exponents, strict=True):
        if exponent:
            element *= field.symbol(name) ** exponent
    return element


def joined(
    field: ParameterField, polynomial: ParameterPolynomial, term_values: TermValues, sign: int
) -> tuple[tuple[Square, ...], ParameterPolynomial] | None:
    """Return squares of several terms and a rest, as `balanced` does; the rest may have any sign.

    The terms of the right sign that differ by squares are the squares of the terms of a
    base; a term of the wrong sign says that two of these have opposite signs.
    """
    stock, wrong = _sorted_out(polynomial, term_values, sign)
    tied: dict[Monomial, dict[Monomial, int]] = {}
    for monomial, value in wrong.items():
        pair = next((p for p in _pairs(monomial, stock) if _root(stock, *p)), None)
        if pair is None:
            return None
        apart = -1 if value * stock[pair[0]] < 0 else 1
        for a, b in (pair, pair[::-1]):
            if tied.setdefault(a, {}).setdefault(b, apart) != apart:
                return None
    squares: list[Square] = []
    rest = polynomial
    seen: set[Monomial] = set()
    for first in sorted(tied, reverse=True):
        if first in seen:
            continue
        sides = _sides(first, tied)
        if sides is None:
            return None
        seen |= set(sides)
        square = _square_of_many(field, stock, sides)
        squares.append(square)
        made = square.weight * square.base**2
        rest = rest - made.numer.quo_ground(made.denom.LC)
    return (tuple(squares), rest) if squares else None


def _sides(
    first: Monomial, tied: dict[Monomial, dict[Monomial, int]]
) -> dict[Monomial, int] | None:
    """The sign of each term of a base, that of the first being 1; None if they contradict."""
    sides = {first: 1}
    queue = [first]
    for a in queue:  # it grows on the way
        for b, apart in tied[a].items():
            if b not in sides:
                sides[b] = sides[a] * apart
                queue.append(b)
            elif sides[b] != sides[a] * apart:
                return None
    return sides


def _root(stock: dict[Monomial, Fraction], first: Monomial, second: Monomial) -> Fraction | None:
    """The square root of the quotient of two coefficients, if it is rational."""
    quotient = stock[second] / stock[first]
    root = Fraction(isqrt(abs(quotient.numerator)), isqrt(quotient.denominator))
    return root if root * root == quotient else None


def _square_of_many(
    field: ParameterField, stock: dict[Monomial, Fraction], sides: dict[Monomial, int]
) -> Square:
    first, *_ = sides
    common = tuple(min(exponents) for exponents in zip(*sides, strict=True))
    roots = {m: (_root(stock, first, m) or Fraction(0)) * side for m, side in sides.items()}
    whole = lcm(*(c.denominator for c in roots.values()))
    base = field.domain.zero
    for monomial, c in sorted(roots.items(), reverse=True):
        half = tuple((e - r) // 2 for e, r in zip(monomial, common, strict=True))
        base = base + field.scalar(c * whole) * _monomial(field, half)
    return Square(field.scalar(stock[first] / whole**2) * _monomial(field, common), base)


def completed(
    field: ParameterField, polynomial: ParameterPolynomial
) -> Iterator[tuple[Square, Scalar]]:
    """Yield (square, rest) with polynomial = square + rest, one for each parameter of degree 2.

    The square is p (x + q/(2p))² for p x² + q x + r; those with a constant p come first.
    """
    ring = polynomial.ring
    found: list[tuple[bool, Square, Scalar]] = []
    for name, x in zip(field.parameters, ring.gens, strict=True):
        if name == PI or polynomial.degree(x) != 2:
            continue
        parts = coefficients_in(polynomial, ring.index(x))
        p, q = (field.of_polynomial(parts[k]) for k in (2, 1))
        if not q:
            continue
        base = field.symbol(name) + q / (2 * p)
        rest = field.of_polynomial(parts[0]) - q * q / (4 * p)
        found.append((not parts[2].is_ground, Square(p, base), rest))
    found.sort(key=lambda item: item[0])
    for _, square, rest in found:
        yield square, rest


def coefficients_in(polynomial: ParameterPolynomial, place: int) -> list[ParameterPolynomial]:
    """Return the coefficients of the powers of one parameter, lowest power first."""
    ring = polynomial.ring
    parts: list[dict[Monomial, object]] = []
    for monomial, coefficient in polynomial.iterterms():
        exponent = monomial[place]
        while len(parts) <= exponent:
            parts.append({})
        parts[exponent][(*monomial[:place], 0, *monomial[place + 1 :])] = coefficient
    return [ring.from_dict(part) for part in parts]
