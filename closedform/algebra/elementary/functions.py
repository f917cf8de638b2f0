"""Square roots, exponentials, logarithms and angles of elements."""

from __future__ import annotations

from fractions import Fraction
from typing import TypeVar

from flint import fmpz

from closedform.algebra.elementary.closed_form import ClosedForm
from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.errors import NotElementaryError

__all__ = [
    "arccosine",
    "arctangent",
    "direction",
    "exponential",
    "linear",
    "logarithm",
    "modulus",
    "root",
    "square_root",
]

F = TypeVar("F", bound=ClosedForm)
"""Values and results are elements of one field."""


def square_root(value: F) -> F:
    """Return the principal square root of a constant, or of a single term."""
    context = value.context
    constant = value.constant
    if constant is not None:
        return value.of(context.radicals.root(constant))
    if value.below is not None:
        above, below = value.quotient(value.above, None), value.quotient(value.below, None)
        if _sign(below) is None or not value.is_constant:
            raise NotElementaryError("the square root of a quotient of functions of time")
        return square_root(above * below) / modulus(below)
    c, rate, offset, power = _single(value, "the square root")
    if power % 4:  # the root of t^2 is |t|
        raise NotElementaryError("the square root of a function of time that is no square")
    half = context.tower.number(Fraction(1, 2))
    front = value.of(context.radicals.root(c)) * value.time ** (power // 2)
    return front * value.exponential_of(rate * half, offset * half)


def root(value: F, degree: int) -> F:
    """Return the principal root of a degree from 1 on."""
    if degree < 1:
        raise NotElementaryError(f"a root of degree {degree}")
    while degree % 2 == 0:
        value, degree = square_root(value), degree // 2
    return value if degree == 1 else _odd_root(value, degree)


def _odd_root(value: F, degree: int) -> F:
    """The root of a positive term whose root is exact."""
    context = value.context
    if not value.above:
        return value
    c, rate, offset, power = _single(value, "a root")
    if power or not c.is_flat or context.signs.of(c) != 1:
        raise NotElementaryError(f"a root of degree {degree} of something that is not positive")
    result = value.of(1)
    for polynomial, sign in ((c.parts[0], 1), (c.below, -1)):
        content, factors = polynomial.factor()
        primes = [
            (context.tower.number(int(p)), int(e)) for p, e in fmpz(abs(int(content))).factor()
        ]
        primes += [(context.tower.polynomial(f), int(e)) for f, e in factors]
        for factor, exponent in primes:
            whole, left = divmod(exponent, degree)
            of_factor = context.signs.of(factor)
            if left or not of_factor:
                raise NotElementaryError(f"a root of degree {degree} that is not exact")
            positive = factor if of_factor > 0 else -factor
            result = result * value.of(positive ** (sign * whole))
    share = context.tower.number(Fraction(1, degree))
    return result * value.exponential_of(rate * share, offset * share)


def exponential(value: F) -> F:
    """Return e^x for x = a t + b."""
    amount = linear(value)
    if amount is None:
        raise NotElementaryError("the exponential of something that is not linear in the time")
    return value.exponential_of(*amount)


def linear(value: ClosedForm) -> tuple[Constant, Constant] | None:
    """Return (a, b) if an element is a t + b with a and b in the field of constants."""
    if value.below is not None or value.above.keys() - {(0, 0), (0, 1)}:
        return None
    zero = value.context.tower.zero
    return value.above.get((0, 1), zero), value.above.get((0, 0), zero)


def logarithm(value: F) -> F:
    """Return the principal logarithm of a constant, or of a positive exponential."""
    context = value.context
    constant = value.constant
    if constant is not None:
        return value.of(context.angles.logarithm(constant))
    c, rate, offset, power = _single(value, "the logarithm")
    if power:
        raise NotElementaryError("the logarithm of the time")
    front = value.of(context.angles.logarithm(c))
    return front + value.of(rate) * value.time + value.of(offset)


def modulus(value: F) -> F:
    """Return the absolute value of a constant, or of a single term without power of t."""
    context = value.context
    if value.below is None and len(value.above) == 1:
        ((number, power), c) = next(iter(value.above.items()))
        rate, offset = context.sums.exponents[number]
        if power % 2:
            raise NotElementaryError("the absolute value of a function that changes its sign")
        for part in (rate, offset):
            context.radicals.demand_settled(part)
        front = value.of(context.radicals.modulus(c)) * value.time**power
        return front * value.exponential_of(rate.real, offset.real)
    if not value.above:
        return value
    sign = _sign(value)
    if sign is None:
        square = value * value.conjugate()
        if square.constant is None:
            raise NotElementaryError("the absolute value of something whose sign is not known")
        return square_root(square)
    return value if sign > 0 else -value


def _sign(value: F) -> int | None:
    sign = value.sign()
    return sign or None


def arctangent(value: F) -> F:
    """Return the arctangent of a real constant."""
    return value.of(value.context.angles.arctangent(_real(value)))


def direction(x: F, y: F) -> F:
    """Return the angle of the point (x, y)."""
    if not x.above and not y.above:
        raise ZeroDivisionError("the origin has no angle")
    if x.constant is None or y.constant is None:
        raise NotElementaryError("an angle of something with exponentials in it")
    return x.of(x.context.angles.direction(_real(x), _real(y)))


def arccosine(value: F) -> F:
    """Return the arccosine of a real constant between -1 and 1."""
    context, x = value.context, _real(value)
    height = context.radicals.root(context.tower.one - x * x)
    if height.imaginary:
        raise NotElementaryError("the arccosine of a number beyond 1")
    if not height:
        return value.of(0 if context.signs.of(x) == 1 else context.tower.pi)
    if context.signs.of(x) is None:
        angle = context.angles.arctangent(x / height)
        return value.of(context.tower.pi) / 2 - value.of(angle)
    return value.of(context.angles.direction(x, height))


def _real(value: F) -> Constant:
    constant = value.constant
    if constant is None or constant.imaginary:
        raise NotElementaryError("an angle of something that is no real constant without e^x")
    return constant


def _single(value: F, what: str) -> tuple[Constant, Constant, Constant, int]:
    """c, lambda, alpha, k of a value that is one term with a real exponent."""
    context = value.context
    if value.below is not None or len(value.above) != 1:
        raise NotElementaryError(f"{what} of a sum of functions")
    ((number, power), c) = next(iter(value.above.items()))
    rate, offset = context.sums.exponents[number]
    if rate.imaginary or offset.imaginary:
        raise NotElementaryError(f"{what} of an exponential with a complex exponent")
    for part in (rate, offset):
        context.radicals.demand_settled(part)
    return c, rate, offset, power
