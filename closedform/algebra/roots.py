"""How the roots of an irreducible factor are told apart, ordered, enclosed and shown.

Four forms: one root in K; a pair a ± sqrt(D); 2q roots a ± sqrt(mu) with the mu the
real roots of a polynomial q (undamped modes, where mu = -omega^2); and named roots.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property, lru_cache
from itertools import pairwise
from typing import Literal

from flint import acb, arb, ctx

from closedform.algebra.enclosure import MOST_BITS, UnsettledError
from closedform.algebra.field import BaseField, Polynomial, Scalar, rational
from closedform.algebra.isolation import isolated_columns
from closedform.algebra.surds import SurdSum, root_of_rational

__all__ = [
    "EQUAL_BITS",
    "ORDERING_BITS",
    "RootForm",
    "RootSet",
    "arrangement",
    "enclosed_roots",
    "root_set",
    "roots_by_real_part",
]

RootForm = Literal["single", "quadratic", "even", "named"]

ORDERING_BITS = 256
"""The precision of the first look at the order of roots; no ball is wider than there."""
EQUAL_BITS = 2048
"""Real parts that so many bits, measured by the roots' size, do not tell apart count as equal."""
_KEY_BITS = 96

_STIFF = 100


@dataclass(frozen=True)
class RootSet:
    """The roots of the irreducible monic polynomial `p`.

    `centre` is their mean a.  For the forms "quadratic" and "even", p(s) = q((s - a)^2)
    with `squares` = q, whose roots mu are all real, so that the roots are a ± sqrt(mu).
    "even" is said where it helps: with all mu negative, or over Q with q of degree 2 and
    its roots known as surds.
    """

    field: BaseField
    p: Polynomial
    form: RootForm
    centre: Scalar
    squares: Polynomial | None = None

    @cached_property
    def discriminant(self) -> Scalar:
        """D with roots a ± sqrt(D); of the form "quadratic" only."""
        if self.form != "quadratic" or self.squares is None:
            raise ValueError(f"the form {self.form!r} has no single discriminant")
        return -self.squares.nth(0)

    @cached_property
    def half_gap(self) -> SurdSum | None:
        """sqrt(E) with mu = b ± sqrt(E), of the form "even" where this is a surd; else None."""
        if self.form != "even" or self.squares is None:
            return None
        return _half_gap(self.field, self.squares)

    def enclosures(self) -> tuple[acb, ...]:
        """Return balls, one for each root, as `enclosed_roots` does."""
        return enclosed_roots(self.field, self.p)

    def square_places(self) -> tuple[tuple[bool, int], ...]:
        """Return for every mu, in order of growing modulus, (whether mu < 0, its place).

        The place is that of a + sqrt(mu), counted from 1 as `enclosures` orders the roots.
        Of the form "even" only.  If all roots are a ± i omega, the one with the k-th
        smallest omega stands k behind the middle.  Pairs a ± kappa stand around these.
        """
        if self.form != "even" or self.squares is None:
            raise ValueError(f"the form {self.form!r} has no squares to place")
        signs = [bool(mu.real < 0) for mu in enclosed_roots(self.field, self.squares)]
        below, above = signs.count(True), signs.count(False)
        circular = [(True, above + below + k) for k in range(1, below + 1)]
        hyperbolic = [(False, above + 2 * below + k) for k in range(1, above + 1)]
        # With one of each, -mu < mu' exactly when the sum of the two is positive.
        if self.field.sign(-self.squares.nth(len(signs) - 1)) < 0:
            return (*hyperbolic, *circular)
        return (*circular, *hyperbolic)


def root_set(field: BaseField, p: Polynomial) -> RootSet:
    """Return the roots of an irreducible monic polynomial over the field, classified."""
    d = int(p.degree())
    centre = _mean(field, p)
    if d == 1:
        return RootSet(field, p, "single", centre)
    moved = p.shift(centre)
    if d % 2 or any(moved.nth(k) for k in range(1, d, 2)):
        return RootSet(field, p, "named", centre)
    squares = field.polynomial([moved.nth(k) for k in range(d, -1, -2)])
    if d == 2:
        if _far_apart(field, p):
            return RootSet(field, p, "named", centre)
        return RootSet(field, p, "quadratic", centre, squares)
    found = enclosed_roots(field, squares)
    all_real = all(mu.imag == 0 for mu in found)
    if all_real and (all(mu.real < 0 for mu in found) or _half_gap(field, squares) is not None):
        return RootSet(field, p, "even", centre, squares)
    return RootSet(field, p, "named", centre)


def _far_apart(field: BaseField, p: Polynomial) -> bool:
    """Whether p has a fast and a slow real root of one sign, more than `_STIFF` times apart.

    a ± sqrt(D) is then no good form: over the time of the slow root, cosh and sinh grow
    beyond what a program holds, and cancel.  Only the form hangs on it.
    """
    low, high = enclosed_roots(field, p)
    if low.imag != 0 or not low.real * high.real > 0:
        return False
    slow, fast = sorted((abs(low.real), abs(high.real)), key=lambda ball: ball.mid())
    return bool(fast > _STIFF * slow)


def _mean(field: BaseField, p: Polynomial) -> Scalar:
    d = int(p.degree())
    return -p.nth(d - 1) / (p.LC() * field.domain.convert(d))


def _half_gap(field: BaseField, squares: Polynomial) -> SurdSum | None:
    if field.encloses_only or int(squares.degree()) != len("ab"):
        return None
    b, c = rational(squares.nth(1)), rational(squares.nth(0))
    return root_of_rational(b * b / 4 - c) if b * b >= 4 * c else None


def enclosed_roots(field: BaseField, p: Polynomial) -> tuple[acb, ...]:
    """Return certified balls for the roots of a squarefree polynomial over the field.

    Ordered by real part, then imaginary part, the same at every precision.  A radius is
    about 2^-prec of the root's modulus or less, with FLINT's current precision prec.  Real
    roots have imaginary part exactly 0, and those on the axis of a symmetric polynomial
    the same real part.  Real parts that are not known to be equal count as equal if they
    are not told apart with `EQUAL_BITS` bits.
    """
    return _enclosed_roots(field, p, ctx.prec)


def roots_by_real_part(field: BaseField, p: Polynomial) -> tuple[tuple[int, ...], ...]:
    """Return the places (from 1) of the roots in groups of one real part, growing."""
    groups, start = [], 1
    for size in _ordered(field, p).sizes:
        groups.append(tuple(range(start, start + size)))
        start += size
    return tuple(groups)


@dataclass(frozen=True)
class _Order:
    """The roots in their order, at the precision that settles it."""

    bits: int
    balls: tuple[acb, ...]
    sizes: tuple[int, ...]


@lru_cache(maxsize=256)
def _enclosed_roots(field: BaseField, p: Polynomial, bits: int) -> tuple[acb, ...]:
    order = _ordered(field, p)
    if bits <= order.bits:
        return order.balls
    while True:
        balls = [z for column in isolated_columns(field, p, _axis(field, p), bits) for z in column]
        met = [[k for k, known in enumerate(order.balls) if known.overlaps(z)] for z in balls]
        if all(len(places) == 1 for places in met):
            by_place = {places[0]: z for places, z in zip(met, balls, strict=True)}
            return tuple(by_place[k] for k in range(len(balls)))
        bits *= 2


@lru_cache(maxsize=256)
def _ordered(field: BaseField, p: Polynomial) -> _Order:
    """Find the order, at precisions that do not hang on the one that is asked for."""
    bits = ORDERING_BITS
    while bits <= MOST_BITS:
        columns = isolated_columns(field, p, _axis(field, p), bits)
        with ctx.workprec(bits):
            merged = _merged(columns)
            apart = all(
                not low.imag.overlaps(high.imag)
                for column in merged
                for low, high in pairwise(column)
            )
        if apart and (len(merged) == len(columns) or bits >= EQUAL_BITS):
            balls = tuple(z for column in merged for z in column)
            return _Order(bits, balls, tuple(map(len, merged)))
        bits *= 2
    raise UnsettledError(f"the order of the roots of a polynomial of degree {p.degree()}", bits)


def _merged(columns: list[list[acb]]) -> list[list[acb]]:
    """Join columns whose real parts are not told apart; sort each by imaginary part."""
    joined: list[list[acb]] = []
    for column in sorted(columns, key=lambda column: column[0].real.mid()):
        if joined and any(z.real.overlaps(column[0].real) for z in joined[-1]):
            joined[-1].extend(column)
        else:
            joined.append(list(column))
    return [sorted(column, key=lambda z: z.imag.mid()) for column in joined]


def _axis(field: BaseField, p: Polynomial) -> Scalar | None:
    """The centre a if p(a + x) is even or odd in x: then 2a - conj(lambda) is a root too."""
    centre = _mean(field, p)
    coefficients = p.shift(centre).to_list()
    return None if any(coefficients[1::2]) else centre


def arrangement(roots: RootSet) -> tuple[object, ...]:
    """Return the sorting key of a factor: slowest mode first, then lowest frequency.

    Only the order of printing depends on it; no equality is decided here.
    """
    last = roots_by_real_part(roots.field, roots.p)[-1]

    def leading() -> acb:
        balls = (roots.enclosures()[place - 1] for place in last)
        return next(z for z in balls if not z.imag < 0)

    rate, turn = _key(lambda: leading().real), _key(lambda: leading().imag)
    return (-rate, turn, int(roots.p.degree()))


def _key(evaluate: Callable[[], arb]) -> Fraction:
    """Return a real or imaginary part of a root, which is known if it is zero, to 96 bits."""
    bits = ORDERING_BITS
    while True:
        with ctx.workprec(bits):
            ball = evaluate()
        if ball == 0:
            return Fraction(0)
        if ball.rel_accuracy_bits() > _KEY_BITS + 32:
            mantissa, exponent = map(int, ball.mid().man_exp())
            dropped = abs(mantissa).bit_length() - _KEY_BITS
            if dropped > 0:  # rounded, so that two balls around one number give one key
                mantissa, exponent = (mantissa >> dropped - 1) + 1 >> 1, exponent + dropped
            return mantissa * Fraction(2) ** exponent
        bits *= 2
