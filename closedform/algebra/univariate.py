"""Signs in one parameter: the line is cut at the real roots of all polynomials involved.

Between neighbouring roots no polynomial changes its sign, so one rational point tells it.  At
a root of an irreducible polynomial this one vanishes and no other does: the others keep the
sign that they have beside it.  So every sign is exact.
Source:  G. E. Collins, Quantifier elimination for real closed fields by cylindrical algebraic
         decomposition, 1975 (here in dimension one); the roots are isolated by FLINT.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from itertools import pairwise
from typing import Any, Literal

from flint import arb, ctx, fmpq, fmpz_poly

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sign_argument import ByCells, Comparison, Values, Whereabouts
from closedform.algebra.sign_argument import relation_values as holding

__all__ = ["Cell", "admissible_cells", "needed_for_none", "sign_by_cells", "simplest_between"]

HIGHEST = 40
"""The highest degree of the different factors of an element, taken together."""

Factor = tuple[int, ...]
"""An irreducible polynomial: whole coefficients without common divisor, lowest power first."""


@dataclass(frozen=True)
class Cell:
    """A root, or the open interval between neighbouring ones, and the signs of factors there.

    `low` and `high` are rational: a root lies between them, or is both; an interval holds
    all that lies between them, and has None at an end that is infinite.
    """

    kind: Literal["root", "interval"]
    low: Fraction | None
    high: Fraction | None
    signs: Mapping[Factor, int]


@dataclass(frozen=True)
class _Parts:
    """An element in one parameter that is not 0: a sign times powers of factors."""

    sign: int
    factors: tuple[tuple[Factor, int], ...]

    @property
    def degree(self) -> int:
        return sum(len(f) - 1 for f, _ in self.factors)

    def sign_in(self, cell: Cell) -> int | None:
        """Return the sign in a cell, or None where the element is not defined."""
        sign = self.sign
        for factor, exponent in self.factors:
            there = cell.signs[factor]
            if not there and exponent < 0:
                return None
            sign *= there ** abs(exponent)
        return sign


def sign_by_cells(
    field: ParameterField, name: str, element: Scalar, comparisons: Sequence[Comparison]
) -> tuple[Values, ByCells] | None:
    """Return the signs that an element takes where all the comparisons hold, with the reason.

    Element and comparisons hold the parameter `name` and no other.  Every sign returned is
    taken.  Returns None where the degree is too high, where the comparisons contradict each
    other, or where the element is defined nowhere.
    """
    parts = _parts(field, element)
    if parts.degree > HIGHEST:
        return None
    apart = _apart(field, comparisons)
    cells = _line(_factors([parts, *(p for _, p in apart)]))
    values = _values(parts, apart, cells)
    if not values:
        return None
    needed = list(apart)
    for pair in reversed(apart):
        fewer = [p for p in needed if p is not pair]
        if _values(parts, fewer, cells) == values:
            needed = fewer
    said = tuple(c for c, _ in needed)
    return values, ByCells(name, said, _whereabouts(parts, needed, cells))


def admissible_cells(field: ParameterField, comparisons: Sequence[Comparison]) -> tuple[Cell, ...]:
    """Return the cells of the line at which comparisons in one parameter hold, growing.

    Comparisons of too high a degree are left out.
    """
    apart = _apart(field, comparisons)
    cells = _line(_factors([p for _, p in apart]))
    return tuple(cell for cell in cells if _hold(apart, cell))


def needed_for_none(
    field: ParameterField, comparisons: Sequence[Comparison]
) -> tuple[int, ...] | None:
    """Return the places of comparisons in one parameter that hold nowhere together, or None.

    None of those returned can be left out.
    """
    if admissible_cells(field, comparisons):
        return None
    needed = list(range(len(comparisons)))
    for place in reversed(range(len(comparisons))):
        fewer = [k for k in needed if k != place]
        if not admissible_cells(field, [comparisons[k] for k in fewer]):
            needed = fewer
    return tuple(needed)


def simplest_between(low: Fraction, high: Fraction) -> Fraction:
    """Return the fraction with the smallest denominator strictly between two numbers.

    >>> simplest_between(Fraction(3, 10), Fraction(2, 5))
    Fraction(1, 3)
    """
    if low < 0 < high:
        return Fraction(0)
    if high <= 0:
        return -simplest_between(-high, -low)
    whole = low // 1
    if whole + 1 < high:
        return Fraction(whole + 1)
    if low == whole:
        return whole + Fraction(1, 1 // (high - whole) + 1)
    return whole + 1 / simplest_between(1 / (high - whole), 1 / (low - whole))


_Apart = Sequence[tuple[Comparison, _Parts]]


def _apart(field: ParameterField, comparisons: Sequence[Comparison]) -> _Apart:
    pairs = [(c, _parts(field, c.element)) for c in comparisons]
    return [(c, p) for c, p in pairs if p.degree <= HIGHEST]


def _parts(field: ParameterField, element: Scalar) -> _Parts:
    found = field.factored(element)
    factors = []
    for polynomial, exponent in found.factors:
        terms = {sum(m): int(c) for m, c in polynomial.iterterms()}
        factor = tuple(terms.get(k, 0) for k in range(max(terms) + 1))
        factors.append((factor, exponent))
    return _Parts(1 if found.content > 0 else -1, tuple(factors))


def _factors(parts: Sequence[_Parts]) -> tuple[Factor, ...]:
    return tuple(sorted({f for p in parts for f, _ in p.factors}))


def _hold(apart: _Apart, cell: Cell) -> bool:
    return all(parts.sign_in(cell) in holding(c.relation) for c, parts in apart)


def _values(parts: _Parts, apart: _Apart, cells: Sequence[Cell]) -> Values:
    signs = {parts.sign_in(cell) for cell in cells if _hold(apart, cell)}
    return frozenset(s for s in signs if s is not None)


def _whereabouts(parts: _Parts, apart: _Apart, cells: Sequence[Cell]) -> Whereabouts:
    """Where the cells at which the comparisons hold lie, seen from the zeros of the element."""
    zeros = [k for k, cell in enumerate(cells) if not all(cell.signs[f] for f, _ in parts.factors)]
    inside = [k for k, c in enumerate(cells) if _hold(apart, c) and parts.sign_in(c) is not None]
    if not zeros:
        return "no zeros"
    if set(inside) <= set(zeros):
        return "zeros"
    if set(inside) & set(zeros):
        return "several"
    below = {sum(zero < k for zero in zeros) for k in inside}
    if below == {0}:
        return "below"
    if below == {len(zeros)}:
        return "above"
    return "between" if len(below) == 1 else "several"


@lru_cache(maxsize=4096)
def _line(factors: tuple[Factor, ...]) -> tuple[Cell, ...]:
    """The cells of the line, growing; the factors are different from each other."""
    roots = _isolated(factors)
    cells: list[Cell] = []
    low: Fraction | None = None
    for start, end, factor in roots:
        cells.append(_interval(factors, low, start))
        cells.append(Cell("root", start, end, {**cells[-1].signs, factor: 0}))
        low = end
    cells.append(_interval(factors, low, None))
    return tuple(cells)


def _interval(factors: tuple[Factor, ...], low: Fraction | None, high: Fraction | None) -> Cell:
    bottom = low if low is not None else (Fraction(0) if high is None else high - 2)
    inside = simplest_between(bottom, high if high is not None else bottom + 2)
    point = fmpq(inside.numerator, inside.denominator)
    signs = {}
    for factor in factors:
        value: Any = fmpz_poly(list(factor))(point)
        signs[factor] = 1 if value > 0 else -1
    return Cell("interval", low, high, signs)


def _isolated(factors: Sequence[Factor]) -> list[tuple[Fraction, Fraction, Factor]]:
    """The real roots of all factors, growing, each between two numbers that no other is between.

    No two of the factors have a root in common, so the balls are apart with enough bits.
    """
    bits = 64
    while True:
        found = sorted((*ends, f) for f in factors for ends in _real_roots(f, bits))
        if all(a[1] < b[0] for a, b in pairwise(found)):
            return found
        bits *= 2


@lru_cache(maxsize=4096)
def _real_roots(factor: Factor, bits: int) -> tuple[tuple[Fraction, Fraction], ...]:
    """Numbers below and above each real root of an irreducible polynomial."""
    if len(factor) == 2:
        root = Fraction(-factor[0], factor[1])
        return ((root, root),)
    with ctx.workprec(bits):
        pairs: Any = fmpz_poly(list(factor)).complex_roots()  # the stubs leave out multiplicities
        real = [z.real for z, _ in pairs if z.imag == 0]
        return tuple((_exact(x.lower()), _exact(x.upper())) for x in real)


def _exact(number: arb) -> Fraction:
    mantissa, exponent = map(int, number.man_exp())
    return Fraction(mantissa) * Fraction(2) ** exponent
