"""Columns of printed decimals that stand for a direction: right if some length fits them all.

Whether numbers y exist with |M y - p| <= h, for the printed parts p and half the worth h of
their last digits, is decided by elimination of one unknown after the other (J. Fourier, 1827;
T. Motzkin, 1936), with numbers that are known to 200 bits, far beyond any digit that is shown.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from fractions import Fraction
from math import prod

from flint import acb, arb, ctx, fmpq

from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.compare import has_decimals
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.spread import spread
from closedform.notation.written.tree import Literal, Negation, Product, Quotient, Sum, Written

__all__ = ["rounded_direction"]

BITS = 320
SLACK = Fraction(1, 2**200)
MOST = 4000
"""Inequalities up to which an unknown is eliminated."""

Number = tuple[Fraction, Fraction]
Inequality = tuple[tuple[Fraction, ...], Fraction]
"""Coefficients a and a bound b of a y <= b."""


def rounded_direction(
    claimed: Written | Sequence[Written],
    kernel: Sequence[ExactMatrix],
    names: Callable[[], Mapping[str, arb]],
    value: Callable[[Written], acb],
) -> str | None:
    """Return words for a column of decimals that lies in a space, rounded; else None.

    `kernel` is a basis, columns of exact numbers; `names` gives balls for the names in them, and
    `value` the ball of a formula that is printed without decimals, both at flint's current
    precision.  Some combination has to exist with which every entry, rounded to the digits
    shown, is what is printed.

    Raises:  NotJudgedError where the entries are not numbers printed in full, or too many
             unknowns are left to tell.
    """
    rows = spread(claimed) if isinstance(claimed, Written) else tuple((e,) for e in claimed)
    if rows is None or len(rows[0]) != 1 or not kernel or len(rows) != kernel[0].shape[0]:
        raise NotJudgedError("it is no column of numbers")
    with ctx.workprec(BITS):
        printed = [_printed(row[0], value) for row in rows]
        known = names()
        columns = [[e.enclosure(acb(0), known) for e in vector.entries] for vector in kernel]
        is_real = all(p[0][1] == p[1][1] == 0 for p in printed) and all(
            ball.imag == 0 for vector in columns for ball in vector
        )
        ways = (acb(1),) if is_real else (acb(1), acb(0, 1))
        unknowns = [[ball * way for ball in vector] for vector in columns for way in ways]
        system: list[Inequality] = []
        for k, (number, half) in enumerate(printed):
            parts = [_parts(vector[k]) for vector in unknowns]
            for part in range(len(ways)):
                row = tuple(own[part] for own in parts)
                slack = half[part] + SLACK * (1 + max(map(abs, row)))
                system.append((row, number[part] + slack))
                system.append((tuple(-a for a in row), slack - number[part]))
    return "some length of the vector fits every digit" if _has_solution(system) else None


def _has_solution(system: list[Inequality]) -> bool:
    """Whether inequalities have a common solution, by eliminating one unknown after the other."""
    while system and system[0][0]:
        above = [(row, bound) for row, bound in system if row[-1] > 0]
        below = [(row, bound) for row, bound in system if row[-1] < 0]
        rest = {(row[:-1], bound) for row, bound in system if row[-1] == 0}
        if len(above) * len(below) > MOST:
            raise NotJudgedError("too many lengths and phases are possible to tell")
        for high, most in above:
            for low, least in below:
                a, b = -low[-1], high[-1]
                row = tuple(a * x + b * y for x, y in zip(high[:-1], low[:-1], strict=True))
                rest.add((row, a * most + b * least))
        system = sorted(rest)
    return all(bound >= 0 for _, bound in system)


def _printed(entry: Written, value: Callable[[Written], acb]) -> tuple[Number, Number]:
    """Return the parts of a printed number, and half the worth of the last digit of each.

    A part without decimals is exact.
    """
    if not has_decimals(entry):
        return _parts(value(entry)), (Fraction(0), Fraction(0))
    match entry:
        case Literal(number, last_place):
            return (number, Fraction(0)), (last_place / 2, Fraction(0))
        case Negation(inside):
            (real, imaginary), half = _printed(inside, value)
            return (-real, -imaginary), half
        case Sum(terms):
            numbers, halves = zip(*(_printed(term, value) for term in terms), strict=True)
            return _added(numbers), _added(halves)
        case Product(factors) if sum(map(has_decimals, factors)) == 1:
            own = next(f for f in factors if has_decimals(f))
            rest = [value(f) for f in factors if f is not own]
            return _scaled(_printed(own, value), prod(rest, start=acb(1)))
        case Quotient(above, below) if not has_decimals(below):
            return _scaled(_printed(above, value), 1 / value(below))
    raise NotJudgedError("an entry with decimals is no number printed in full")


def _added(numbers: Sequence[Number]) -> Number:
    return sum((n[0] for n in numbers), Fraction(0)), sum((n[1] for n in numbers), Fraction(0))


def _scaled(printed: tuple[Number, Number], factor: acb) -> tuple[Number, Number]:
    """Return a printed number times a factor that is real or imaginary."""
    (real, imaginary), half = printed
    a, b = _parts(factor)
    if a and b:
        raise NotJudgedError("a factor in front of decimals is neither real nor imaginary")
    number = (a * real - b * imaginary, a * imaginary + b * real)
    return number, (abs(a) * half[0] + abs(b) * half[1], abs(a) * half[1] + abs(b) * half[0])


def _parts(ball: acb) -> Number:
    return _middle(ball.real), _middle(ball.imag)


def _middle(ball: arb) -> Fraction:
    """Return the middle of a ball that is known to 200 bits and more."""
    if not ball.rad() < arb(fmpq(1, 2**210)) * (1 + abs(ball)):
        raise NotJudgedError("an entry is not known to enough digits")
    mantissa, exponent = ball.mid().man_exp()
    return Fraction(int(mantissa)) * Fraction(2) ** int(exponent)
