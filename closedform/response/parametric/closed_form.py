"""From exact amounts in the parameters to the formula that is printed: the shortest one.

A function is a sum of groups that share an exponential.  Factors that the amounts have in
common, or their common denominator, may stand in front of the whole, in front of a group, or
nowhere; the parts that belong to single parameters (initial values) may be set apart.  Every
combination is written out and the one with the fewest operations is kept; of equals, the
earlier.  The amounts are kept as products of irreducible factors, so that a division is a
subtraction of exponents.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import lru_cache
from math import gcd, lcm
from typing import Literal

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import Factored, ParameterField
from closedform.notation.expression import (
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    operations,
    power_of,
)
from closedform.notation.rational_formula import taken_apart, weighted_parts, weighted_rational
from closedform.notation.terms import opened, sum_of

__all__ = ["Kernel", "Term", "closed_form", "fronted_matrix"]

Kernel = Literal["cos", "sin", "cosh", "sinh"]

_UNIT = Factored(Fraction(1), ())


@dataclass(frozen=True)
class Term:
    """Amount · t^power · e^(rate t) · kernel(frequency t).

    Amount, rate and frequency are elements of one field of parameters and names; the rate is
    zero where there is no exponential, kernel and frequency are both None or both given.
    """

    amount: Scalar
    power: int
    rate: Scalar
    kernel: Kernel | None = None
    frequency: Scalar | None = None


@dataclass(frozen=True)
class _Part:
    """A term inside a group, its amount taken apart."""

    amount: Factored
    power: int
    kernel: Expression | None


@dataclass(frozen=True)
class _Group:
    """The terms under one exponential (None for e^0)."""

    exponential: Expression | None
    parts: tuple[_Part, ...]


def closed_form(field: ParameterField, terms: Sequence[Term], time: str) -> Expression:
    """Return the shortest formula of a sum of terms, as a function of `time`."""
    return _closed_form(field, _gathered(field, terms), time)


Rows = tuple[tuple[Expression, ...], ...]


def fronted_matrix(
    field: ParameterField, entries: Sequence[Sequence[Sequence[Term]]], written: Rows, time: str
) -> tuple[Expression | None, Rows]:
    """Return a matrix of functions with a common factor in front, if that is shorter.

    `written` is the same matrix with nothing in front.  The factor may be an exponential
    that all entries share, a common factor or denominator, or both.
    """
    kept = [[_gathered(field, terms) for terms in row] for row in entries]
    everything = [term for row in kept for terms in row for term in terms]
    forms: list[tuple[Expression | None, Rows]] = [(None, written)]
    rates = {term.rate for term in everything}
    shared: list[Expression] = []
    if len(rates) == 1 and (rate := rates.pop()):
        shared = [_exponential(field, rate, time)]
        kept = [[_without_rate(field, terms) for terms in row] for row in kept]
        forms.append((shared[0], _written_rows(field, kept, time)))
    amounts = [taken_apart(field, term.amount) for term in everything]
    for front in _fronts(amounts, few=True):
        if front != _UNIT:
            scale = 1 / field.product_of(front)
            inside = [[_scaled(terms, scale) for terms in row] for row in kept]
            outside = weighted_parts(field, front, shared)
            forms.append((outside, _written_rows(field, inside, time)))
    return min(forms, key=_operations_of_fronted)


def _written_rows(
    field: ParameterField, entries: Sequence[Sequence[tuple[Term, ...]]], time: str
) -> Rows:
    return tuple(tuple(_closed_form(field, terms, time) for terms in row) for row in entries)


def _operations_of_fronted(form: tuple[Expression | None, Rows]) -> int:
    front, rows = form
    inside = sum(operations(entry) for row in rows for entry in row)
    return inside + (operations(front) + 1 if front is not None else 0)


def _without_rate(field: ParameterField, terms: Sequence[Term]) -> tuple[Term, ...]:
    return tuple(replace(term, rate=field.scalar(0)) for term in terms)


def _scaled(terms: Sequence[Term], factor: Scalar) -> tuple[Term, ...]:
    return tuple(replace(term, amount=term.amount * factor) for term in terms)


def _gathered(field: ParameterField, terms: Iterable[Term]) -> tuple[Term, ...]:
    """Return the terms with those of one function added up, and none that is zero."""
    found: dict[Term, Scalar] = {}
    for term in terms:
        bare = replace(term, amount=field.scalar(0))
        found[bare] = found.get(bare, field.scalar(0)) + term.amount
    return tuple(replace(bare, amount=amount) for bare, amount in found.items() if amount)


@lru_cache(maxsize=4096)
def _closed_form(field: ParameterField, terms: tuple[Term, ...], time: str) -> Expression:
    if not terms:
        return ZERO
    forms = [_written(field, _groups(field, terms, time), time)]
    for own, others in _separations(field, terms):
        both = [_closed_form(field, own, time), _closed_form(field, others, time)]
        forms.append(sum_of(both))
    return opened(min(forms, key=operations))


def _separations(
    field: ParameterField, terms: Sequence[Term]
) -> Iterator[tuple[tuple[Term, ...], tuple[Term, ...]]]:
    """The terms parted by a parameter that occurs in amounts only, above and once: x0·f + g."""
    if len(terms) < 2:
        return
    for place, name in enumerate(field.parameters):
        zero, symbol = field.scalar(0), field.symbol(name)
        used = {n for t in terms for e in (t.rate, t.frequency) if e for n in field.names_in(e)}
        if name in used or any(term.amount.denom.degree(symbol.numer) > 0 for term in terms):
            continue
        degrees = [{m[place] for m in term.amount.numer.itermonoms()} for term in terms]
        if set().union(*degrees) != {0, 1} or not any(len(d) == 2 for d in degrees):
            continue
        rests = [field.substituted(term.amount, {name: zero}) for term in terms]
        own = [replace(t, amount=t.amount - r) for t, r in zip(terms, rests, strict=True)]
        others = [replace(t, amount=r) for t, r in zip(terms, rests, strict=True)]
        yield tuple(t for t in own if t.amount), tuple(t for t in others if t.amount)


def _exponential(field: ParameterField, rate: Scalar, time: str) -> Expression:
    return Call("exp", weighted_rational(field, rate, [Name(time)], []))


def _groups(field: ParameterField, terms: Sequence[Term], time: str) -> tuple[_Group, ...]:
    found: dict[Scalar, list[_Part]] = {}
    for term in terms:
        kernel = None
        if term.kernel is not None and term.frequency:
            argument = weighted_rational(field, term.frequency, [Name(time)], [])
            kernel = Call(term.kernel, argument)
        part = _Part(taken_apart(field, term.amount), term.power, kernel)
        found.setdefault(term.rate, []).append(part)
    return tuple(
        _Group(_exponential(field, rate, time) if rate else None, tuple(parts))
        for rate, parts in found.items()
    )


def _written(field: ParameterField, groups: Sequence[_Group], time: str) -> Expression:
    if len(groups) == 1:
        return _written_group(field, groups[0], time)
    forms = []
    for front in _fronts([part.amount for group in groups for part in group.parts]):
        parts = [_written_group(field, _divided(group, front), time) for group in groups]
        inside = sum_of(parts)
        forms.append(inside if front == _UNIT else _product(field, front, [], inside))
    return min(forms, key=operations)


def _written_group(field: ParameterField, group: _Group, time: str) -> Expression:
    outside = [] if group.exponential is None else [group.exponential]
    if len(group.parts) == 1:
        return _written_part(field, group.parts[0], outside, time)
    forms = []
    least = min(part.power for part in group.parts)
    lowered = replace(
        group, parts=tuple(replace(part, power=part.power - least) for part in group.parts)
    )
    outside = [power_of(Name(time), least), *outside] if least else outside
    for front in _fronts([part.amount for part in group.parts]):
        divided = _divided(lowered, front)
        inside = sum_of([_written_part(field, part, [], time) for part in divided.parts])
        bare = front == _UNIT and not outside
        forms.append(inside if bare else _product(field, front, outside, inside))
    return min(forms, key=operations)


def _written_part(
    field: ParameterField, part: _Part, outside: Sequence[Expression], time: str
) -> Expression:
    factors = [power_of(Name(time), part.power), *outside]
    if part.kernel is not None:
        factors.append(part.kernel)
    return weighted_parts(field, part.amount, factors)


def _product(
    field: ParameterField, front: Factored, outside: Sequence[Expression], inside: Expression
) -> Expression:
    if isinstance(inside, Negation):
        front, inside = _over(front, _MINUS), inside.operand
    return weighted_parts(field, front, [*outside, inside])


def _divided(group: _Group, front: Factored) -> _Group:
    if front == _UNIT:
        return group
    parts = tuple(replace(part, amount=_over(part.amount, front)) for part in group.parts)
    return replace(group, parts=parts)


_MINUS = Factored(Fraction(-1), ())


def _over(value: Factored, divisor: Factored) -> Factored:
    exponents = dict(value.factors)
    for factor, exponent in divisor.factors:
        exponents[factor] = exponents.get(factor, 0) - exponent
    return Factored(
        value.content / divisor.content, tuple((f, e) for f, e in exponents.items() if e)
    )


def _fronts(amounts: Sequence[Factored], *, few: bool = False) -> tuple[Factored, ...]:
    """Return factors that may stand in front of a sum with these amounts, 1 first.

    They are made of the factors shared above, those shared below, and the least common
    denominator, with the number or without; each takes the sign of the first amount, or its
    opposite.  `few` leaves out the signs and what is rarely the best.
    """
    factors = list(dict.fromkeys(f for amount in amounts for f, _ in amount.factors))
    above, below, common = [], [], []
    for factor in factors:
        exponents = [dict(amount.factors).get(factor, 0) for amount in amounts]
        low, high = min(exponents), max(exponents)
        above += [(factor, low)] if low > 0 else []
        below += [(factor, high)] if high < 0 else []
        common += [(factor, low)] if low < 0 else []
    numbers = [amount.content for amount in amounts]
    size = gcd(*(n.numerator for n in numbers))
    shared = gcd(*(n.denominator for n in numbers))
    bottom = lcm(*(n.denominator for n in numbers))
    one = Fraction(1)
    found = [
        (above + common, Fraction(size, bottom)),
        (above + below, Fraction(size, shared)),
        (common, Fraction(1, bottom)),
    ]
    if not few:
        found += [
            (above + common, one),
            (above + below, one),
            (above, Fraction(size)),
            (above, one),
            (below, Fraction(1, shared)),
            (below, one),
            (common, one),
        ]
    sign = 1 if numbers[0] > 0 else -1
    fronts = [_UNIT]
    for powers, number in found:
        signed = [number * sign] if few else [number * sign, -number * sign]
        fronts += [Factored(n, tuple(powers)) for n in signed]
    return tuple(dict.fromkeys(fronts))
