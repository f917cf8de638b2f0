"""What balls, signs and theorems say of sums: values, signs, whether one is zero."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from fractions import Fraction
from itertools import product

from flint import acb, arb, ctx, fmpq

from closedform.algebra.elementary.balls import Balls
from closedform.algebra.elementary.context import Context
from closedform.algebra.elementary.errors import NotElementaryError
from closedform.algebra.elementary.sums import Terms
from closedform.algebra.elementary.tower import roots_in

__all__ = ["demand_nonzero", "enclosure", "limit", "sign"]

MOST_BITS = 2048
INSTANTS = Fraction(5, 7), Fraction(13, 11)


def enclosure(context: Context, terms: Terms, names: Mapping[str, arb], time: acb) -> acb:
    """Return a ball for the value at an instant, at flint's current precision."""
    return _ball(context, terms, Balls(context.tower, names), time)


def _ball(context: Context, terms: Terms, balls: Balls, time: acb) -> acb:
    total = acb(0)
    for (number, k), c in terms.items():
        term = balls.of(c)
        if k:
            term *= time**k
        if number:
            rate, offset = context.sums.exponents[number]
            term *= (balls.of(rate) * time + balls.of(offset)).exp()
        total += term
    return total


def demand_nonzero(context: Context, terms: Terms) -> None:
    """Raise NotElementaryError unless a sum with terms is certainly not zero.

    One transcendental number, or exponentials of algebraic numbers, are independent by the
    theorems; of several (ln 2 and pi, say) that is not known in general, and a ball that
    does not hold zero must say so.
    """
    if not terms or not _doubtful(context, terms):
        return
    for values in _points(context, terms):
        for bits, instant in product((64, 256, MOST_BITS), INSTANTS):
            with ctx.workprec(bits):
                names = {n: _arb(v) for n, v in values.items()}
                if not enclosure(context, terms, names, acb(_arb(instant))).contains(0):
                    return
    raise NotElementaryError("two numbers agree to many digits and are not known to be equal")


def _doubtful(context: Context, terms: Terms) -> bool:
    tower = context.tower
    found: set[int] = set()
    for value in context.constants_in(terms):
        found |= tower.generators_in(value)
    numbers = {k for k in found if tower.generators[k].kind != "name"}
    constant_powers = any(context.sums.exponents[number][1] for number, _ in terms)
    return len(numbers) + constant_powers > 1


def _points(context: Context, terms: Terms) -> Iterator[dict[str, Fraction]]:
    """Yield values of the names in a sum at which the positive roots are real."""
    tower = context.tower
    constants = context.constants_in(terms)
    found = frozenset[int]().union(*map(tower.generators_in, constants))
    names = [tower.generators[k].text for k in sorted(found) if tower.generators[k].kind == "name"]
    guesses = [
        {name: Fraction(2 * k + 3, p) for k, name in enumerate(names)} for p in (2, 5, 11, 23)
    ]
    guesses += [dict.fromkeys(names, Fraction(1, p)) for p in (2, 3, 7)]
    roots = {k for value in constants for k in roots_in(value.mask()) if tower.roots[k].positive}
    for guess in (*({**guesses[0], **sample} for sample in context.samples), *guesses):
        values = {name: Fraction(guess[name]) for name in names}
        with ctx.workprec(64):
            balls = Balls(tower, {n: _arb(v) for n, v in values.items()})
            if all(balls.of(tower.roots[k].radicand).real > 0 for k in roots):
                yield values


def sign(context: Context, above: Terms, below: Terms | None) -> int | None:
    """Return the sign of a real constant, None if it is not settled, or it is no constant."""
    if not above:
        return 0
    one = _sign_of_sum(context, above)
    other = 1 if below is None else _sign_of_sum(context, below)
    return None if one is None or other is None else one * other


def _sign_of_sum(context: Context, terms: Terms) -> int | None:
    """The sign of a sum of constants times exponentials of constants."""
    exponents = context.sums.exponents
    if any(k or exponents[number][0] for number, k in terms):
        return None
    constants = context.constants_in(terms)
    if any(value.imaginary for value in constants):
        return None
    signs = {context.signs.of(c) for c in terms.values()}
    if len(signs) == 1:
        return signs.pop()
    if not all(map(context.tower.is_number, constants)):
        return None
    bits = 64
    while bits <= MOST_BITS:
        with ctx.workprec(bits):
            ball = enclosure(context, terms, {}, acb(0)).real
            if not ball.contains(0):
                return 1 if ball > 0 else -1
        bits *= 2
    return None


def limit(context: Context, terms: Terms) -> Terms | None:
    """Return the limit as the time goes on for ever, None if none is settled."""
    left: Terms = {}
    for (number, k), c in terms.items():
        rate = context.sums.exponents[number][0]
        if not rate and not k:
            left[number, k] = c
        elif context.signs.of(rate.real) != -1:
            return None
    return left


def _arb(value: Fraction) -> arb:
    return arb(fmpq(value.numerator, value.denominator))
