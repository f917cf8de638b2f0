"""From exact amounts of modes to the formula that is printed: the shortest of equal forms.

A function is a sum of groups that share an exponential.  Common factors may stand in
front of the whole, in front of a group, or nowhere; exponentials in pairs a ± w may be
written with cosh and sinh or on their own.  Every combination is written out and the
one with the fewest operations is kept; of equals, the earlier.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from math import lcm

from closedform.algebra.surds import SurdSum
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    operations,
    power_of,
)
from closedform.notation.terms import content_of, opened, sum_of, weighted
from closedform.response.modes import Amount, Contribution

__all__ = ["closed_form", "exponential_of_rate", "fronted_matrix"]

_UNIT = SurdSum.rational(1)


@dataclass(frozen=True)
class _Term:
    """An amount of power · kernel inside a group: power is t^j, kernel cos, sin, cosh or sinh."""

    amount: Amount
    power: Expression
    kernel: Expression | None


@dataclass(frozen=True)
class _Group:
    """The terms under one exponential (None for e^0)."""

    exponential: Expression | None
    terms: tuple[_Term, ...]


def closed_form(contributions: Sequence[Contribution], time: str) -> Expression:
    """Return the shortest formula of a sum of contributions, as a function of `time`."""
    forms = [_written(_groups(contributions, time, paired=True))]
    if any(_splits(c) for c in contributions):
        forms.append(_written(_groups(contributions, time, paired=False)))
    return opened(min(forms, key=operations))


Rows = tuple[tuple[Expression, ...], ...]


def fronted_matrix(
    entries: Sequence[Sequence[Sequence[Contribution]]], written: Rows, time: str
) -> tuple[Expression | None, Rows]:
    """Return a matrix of functions with a common factor in front, if that is shorter.

    `written` is the same matrix with nothing in front.  The factor may be an exponential
    that all entries share, a common denominator, or both.
    """
    rates = {c.mode.rate for row in entries for parts in row for c in parts}
    forms: list[tuple[Expression | None, Rows]] = [(None, written)]
    shared = exponential_of_rate(rates.pop(), time) if len(rates) == 1 else None
    kept = [[list(parts) for parts in row] for row in entries]
    if shared is not None:
        kept = [[[_without_rate(c) for c in parts] for parts in row] for row in kept]
        forms.append((shared, _written_rows(kept, time)))
    common = lcm(*(d for row in kept for parts in row for c in parts for d in _denominators(c)))
    if common > 1:
        scaled = [[[_times(c, common) for c in parts] for parts in row] for row in kept]
        front = weighted(SurdSum.rational(Fraction(1, common)), [shared] if shared else [], [])
        forms.append((front, _written_rows(scaled, time)))
    return min(forms, key=_operations_of_fronted)


def _written_rows(entries: Sequence[Sequence[Sequence[Contribution]]], time: str) -> Rows:
    return tuple(tuple(closed_form(parts, time) for parts in row) for row in entries)


def _operations_of_fronted(form: tuple[Expression | None, Rows]) -> int:
    front, rows = form
    inside = sum(operations(entry) for row in rows for entry in row)
    return inside + (operations(front) + 1 if front is not None else 0)


def _without_rate(contribution: Contribution) -> Contribution:
    return replace(contribution, mode=replace(contribution.mode, rate=SurdSum(())))


def _denominators(contribution: Contribution) -> list[int]:
    values = [a.value for pair in contribution.amounts for a in pair if a.name is None]
    return [c.denominator for value in values for _, c in value.terms]


def _times(contribution: Contribution, factor: int) -> Contribution:
    scale = SurdSum.rational(factor)
    amounts = tuple(
        (replace(even, value=even.value * scale), replace(odd, value=odd.value * scale))
        for even, odd in contribution.amounts
    )
    return replace(contribution, amounts=amounts)


def exponential_of_rate(rate: SurdSum | str, time: str) -> Expression | None:
    """Return e^(rate t), or None for the rate 0."""
    exponent = _times_time(rate, time)
    return None if exponent is None else Call("exp", exponent)


def _times_time(rate: SurdSum | str, time: str) -> Expression | None:
    if isinstance(rate, str):
        return weighted(_UNIT, [Name(rate), Name(time)], [])
    return None if rate.is_zero else weighted(rate, [Name(time)], [])


def _surd(value: SurdSum | str | None) -> SurdSum:
    """Narrow the type of a number of which `_splits` said that it has no name."""
    if not isinstance(value, SurdSum):
        raise TypeError(f"a surd sum is needed here, not {value!r}")
    return value


def _splits(contribution: Contribution) -> bool:
    """Whether exponentials with surd rates are worth a try in place of cosh and sinh.

    They are shorter only where one of the pair drops out: c cosh + c sinh = c e^(w t).
    """
    mode = contribution.mode
    if mode.kind != "hyperbolic" or isinstance(mode.rate, str):
        return False
    return isinstance(mode.frequency, SurdSum) and any(
        not even.is_zero and even.value in (odd.value, -odd.value)
        for even, odd in contribution.amounts
    )


def _groups(
    contributions: Sequence[Contribution], time: str, *, paired: bool
) -> tuple[_Group, ...]:
    found: dict[Expression | None, list[_Term]] = {}
    for contribution in contributions:
        for exponential, term in _terms(contribution, time, paired=paired):
            if not term.amount.is_zero:
                found.setdefault(exponential, []).append(term)
    return tuple(_Group(e, tuple(terms)) for e, terms in found.items())


def _terms(
    contribution: Contribution, time: str, *, paired: bool
) -> list[tuple[Expression | None, _Term]]:
    mode = contribution.mode
    result: list[tuple[Expression | None, _Term]] = []
    if not paired and _splits(contribution):
        half = SurdSum.rational(Fraction(1, 2))
        rate, gap = _surd(mode.rate), _surd(mode.frequency)
        for sign in (1, -1):  # the slower of the two first
            signed = SurdSum.rational(sign)
            exponential = exponential_of_rate(rate + signed * gap, time)
            for power, (even, odd) in enumerate(contribution.amounts):
                amount = Amount((even.value + signed * odd.value) * half)
                result.append((exponential, _Term(amount, power_of(Name(time), power), None)))
        return result
    exponential = exponential_of_rate(mode.rate, time)
    names = {"real": (None, None), "circular": ("cos", "sin"), "hyperbolic": ("cosh", "sinh")}
    for power, amounts in enumerate(contribution.amounts):
        for function, amount in zip(names[mode.kind], amounts, strict=True):
            kernel = None
            if function is not None and mode.frequency is not None:
                argument = _times_time(mode.frequency, time)
                if argument is not None:
                    kernel = Call(function, argument)
            result.append((exponential, _Term(amount, power_of(Name(time), power), kernel)))
    return result


def _written(groups: Sequence[_Group]) -> Expression:
    if not groups:
        return Number(Fraction(0))
    if len(groups) == 1:
        return _written_group(groups[0])
    forms = []
    for front in _fronts([term for group in groups for term in group.terms]):
        inside = sum_of([_written_group(_divided(group, front)) for group in groups])
        forms.append(inside if front == _UNIT else _signed_product(front, [], inside))
    return min(forms, key=operations)


def _fronts(terms: Sequence[_Term]) -> tuple[SurdSum, ...]:
    values = [term.amount.value for term in terms]
    if any(term.amount.name is not None for term in terms):
        return (_UNIT,)
    return content_of(values)


def _divided(group: _Group, front: SurdSum) -> _Group:
    if front == _UNIT:
        return group
    terms = tuple(
        _Term(
            replace(term.amount, value=term.amount.value / front),
            term.power,
            term.kernel,
        )
        for term in group.terms
    )
    return _Group(group.exponential, terms)


def _written_group(group: _Group) -> Expression:
    outside = [] if group.exponential is None else [group.exponential]
    if len(group.terms) == 1:
        return _written_term(group.terms[0], outside)
    forms = []
    for front in _fronts(group.terms):
        terms = [_written_term(term, []) for term in _divided(group, front).terms]
        inside = sum_of(terms)
        forms.append(
            inside if front == _UNIT and not outside else _signed_product(front, outside, inside)
        )
    return min(forms, key=operations)


def _signed_product(front: SurdSum, outside: list[Expression], inside: Expression) -> Expression:
    if isinstance(inside, Negation):
        return weighted(-front, [*outside, inside.operand], [])
    return weighted(front, [*outside, inside], [])


def _written_term(term: _Term, outside: list[Expression]) -> Expression:
    factors: list[Expression] = []
    factors += [Name(name) for name in (term.amount.name, term.amount.times) if name is not None]
    factors += [term.power, *outside]
    if term.kernel is not None:
        factors.append(term.kernel)
    divisors: list[Expression] = [] if term.amount.over is None else [Name(term.amount.over)]
    return weighted(term.amount.value, factors, divisors)
