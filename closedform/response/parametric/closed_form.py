"""From exact amounts in the parameters to the formula that is printed: the shortest one.

A function is a sum of groups that share an exponential.  Factors that the amounts have in
common, or their common denominator, may stand in front of the whole, in front of a group, or
nowhere; the parts that belong to single parameters (initial values) may be set apart.  Every
combination is written out and the one with the fewest operations is kept; of equals, the
earlier.  The amounts are kept as products of irreducible factors, so that a division is a
subtraction of exponents.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from functools import cached_property, lru_cache
from operator import attrgetter

from closedform.algebra.field import Scalar
from closedform.algebra.lowest_terms import multiplied_out
from closedform.algebra.parameter_field import Factored, ParameterField
from closedform.notation.choice import places_of, shortest_formula, shortest_of
from closedform.notation.expression import (
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    operations,
    power_of,
)
from closedform.notation.rational_formula import (
    taken_apart,
    weight_of,
    weighted_parts,
    weighted_rational,
)
from closedform.notation.terms import opened, sum_of
from closedform.response.parametric.fronts import MINUS, UNIT, fronts_of, over
from closedform.response.parametric.terms import (
    Kernel,
    Term,
    apart,
    gathered,
    separable,
    separated,
)

__all__ = ["Kernel", "Term", "closed_form", "fronted_matrix"]


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
    return _closed_form(field, gathered(field, terms), time)


Rows = tuple[tuple[Expression, ...], ...]


def fronted_matrix(
    field: ParameterField, entries: Sequence[Sequence[Sequence[Term]]], written: Rows, time: str
) -> tuple[Expression | None, Rows]:
    """Return a matrix of functions with a common factor in front, if that is shorter.

    `written` is the same matrix with nothing in front.  The factor may be an exponential
    that all entries share, a common factor or denominator, or both.
    """
    kept = [[gathered(field, terms) for terms in row] for row in entries]
    everything = [term for row in kept for terms in row for term in terms]
    forms: list[tuple[Expression | None, Rows]] = [(None, written)]
    rates = {term.rate for term in everything}
    shared: list[Expression] = []
    if len(rates) == 1 and (rate := rates.pop()):
        shared = [_exponential(field, rate, time)]
        kept = [[_without_rate(field, terms) for terms in row] for row in kept]
        forms.append((shared[0], _written_rows(field, kept, time)))
    amounts = [taken_apart(term.amount) for term in everything]
    # beyond three states only what all entries share is worth a try: the rest is rarely shorter
    for front in fronts_of(amounts, few=True, partial=len(kept) <= 3):
        if front != UNIT:
            inside = [[_over(field, terms, front) for terms in row] for row in kept]
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


def _over(field: ParameterField, terms: Sequence[Term], front: Factored) -> tuple[Term, ...]:
    return tuple(
        replace(term, amount=multiplied_out(field, over(taken_apart(term.amount), front)))
        for term in terms
    )


@lru_cache(maxsize=4096)
def _closed_form(field: ParameterField, terms: tuple[Term, ...], time: str) -> Expression:
    if not terms:
        return ZERO
    forms = [_plain(field, terms, time)]
    names = separable(field, terms)
    if len(names) > SEPARATED:
        names = apart(field, terms, names)
        parts = separated(field, terms, names)
        forms.append(sum_of([_plain(field, part, time) for part in parts if part]))
    separate: list[Expression] = []
    rest = terms
    while names and len(names) <= SEPARATED and rest:
        options = []
        for name in names:
            own, others = separated(field, rest, [name])
            options.append((_plain(field, own, time), _plain(field, others, time), name, others))
        best = min(options, key=lambda option: operations(option[0]) + operations(option[1]))
        separate.append(best[0])
        forms.append(sum_of([*separate, best[1]]))
        names, rest = [name for name in names if name != best[2]], best[3]
    return opened(shortest_formula(forms, places_of(field.parameters)))


SEPARATED = 3
"""Up to this number of initial values each is tried on its own; beyond it, all or none."""


@lru_cache(maxsize=16384)
def _plain(field: ParameterField, terms: tuple[Term, ...], time: str) -> Expression:
    return _written(field, _groups(field, terms, time), time) if terms else ZERO


def _exponential(field: ParameterField, rate: Scalar, time: str) -> Expression:
    return Call("exp", weighted_rational(field, rate, [Name(time)], []))


def _groups(field: ParameterField, terms: Sequence[Term], time: str) -> tuple[_Group, ...]:
    found: dict[Scalar, list[_Part]] = {}
    for term in terms:
        kernel = None
        if term.kernel is not None and term.frequency:
            argument = weighted_rational(field, term.frequency, [Name(time)], [])
            kernel = Call(term.kernel, argument)
        part = _Part(taken_apart(term.amount), term.power, kernel)
        found.setdefault(term.rate, []).append(part)
    return tuple(
        _Group(_exponential(field, rate, time) if rate else None, tuple(parts))
        for rate, parts in found.items()
    )


def _written(
    field: ParameterField, groups: Sequence[_Group], time: str, *, few: bool = False
) -> Expression:
    if len(groups) == 1:
        return _written_group(field, groups[0], time)
    forms = []
    amounts = [part.amount for group in groups for part in group.parts]
    for front in fronts_of(amounts, few=few, partial=len(groups) < 3):
        inside = _sum(field, [_divided(group, front) for group in groups], time)
        forms.append(inside if front == UNIT else _product(field, front, [], inside))
    return shortest_formula(forms, places_of(field.parameters))


def _sum(field: ParameterField, groups: Sequence[_Group], time: str) -> Expression:
    """The groups one by one, or those first that share a denominator that others lack."""
    forms = [sum_of([_written_group(field, group, time) for group in groups])]
    for sharing in _sharing(groups) if len(groups) > 2 else ():
        others = [group for group in groups if group not in sharing]
        both = [_written(field, part, time, few=True) for part in (sharing, others)]
        forms.append(sum_of(both if groups[0] in sharing else both[::-1]))
    return shortest_formula(forms, places_of(field.parameters))


def _sharing(groups: Sequence[_Group]) -> list[list[_Group]]:
    """Return sets of at least two groups, not all, with the same factors of two terms below.

    Sets that share only some of these factors would be shorter at times, but the sum loses
    the likeness of its terms.
    """
    alike: dict[frozenset[object], list[_Group]] = {}
    for group in groups:
        long = [
            frozenset((f, e) for f, e in part.amount.factors if e < 0 and len(f) > 1)
            for part in group.parts
        ]
        if long[0] and all(factors == long[0] for factors in long):
            alike.setdefault(long[0], []).append(group)
    return [sharing for sharing in alike.values() if 1 < len(sharing) < len(groups)]


def _written_group(field: ParameterField, group: _Group, time: str) -> Expression:
    outside = [] if group.exponential is None else [group.exponential]
    if len(group.parts) == 1:
        return _written_part(field, group.parts[0], outside, time)
    least = min(part.power for part in group.parts)
    lowered = replace(
        group, parts=tuple(replace(part, power=part.power - least) for part in group.parts)
    )
    outside = [power_of(Name(time), least), *outside] if least else outside
    forms = []
    for front in fronts_of([part.amount for part in group.parts]):
        inside = _sum_of_parts(field, _divided(lowered, front).parts, time)
        forms.append(_Fronted(field, front, tuple(outside), *inside))
    best = shortest_of(forms, _formula, places_of(field.parameters), _length)
    return best.formula


@lru_cache(maxsize=16384)
def _sum_of_parts(
    field: ParameterField, parts: tuple[_Part, ...], time: str
) -> tuple[Expression, int]:
    """Return a sum, and its operations without a sign outside of it."""
    total = sum_of([_written_part(field, part, [], time) for part in parts])
    return total, operations(total.operand if isinstance(total, Negation) else total)


@dataclass(frozen=True)
class _Fronted:
    """front · outside · (a sum of `size` operations), not written yet."""

    field: ParameterField
    front: Factored
    outside: tuple[Expression, ...]
    inside: Expression
    size: int

    @cached_property
    def formula(self) -> Expression:
        if self.front == UNIT and not self.outside:
            return opened(self.inside)
        return _product(self.field, self.front, self.outside, self.inside)

    @cached_property
    def length(self) -> int:
        """The operations of the formula, counted without writing it."""
        if self.front in (UNIT, MINUS) and not self.outside:
            return operations(self.formula)
        negative = isinstance(self.inside, Negation)
        weight = weight_of(self.field, over(self.front, MINUS) if negative else self.front)
        cost = self.size + sum(map(operations, self.outside))
        return weight.length_with(len(self.outside) + 1, cost)


_formula: Callable[[_Fronted], Expression] = attrgetter("formula")
_length: Callable[[_Fronted], int] = attrgetter("length")


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
        front, inside = over(front, MINUS), inside.operand
    return weighted_parts(field, front, [*outside, inside])


def _divided(group: _Group, front: Factored) -> _Group:
    if front == UNIT:
        return group
    parts = tuple(replace(part, amount=over(part.amount, front)) for part in group.parts)
    return replace(group, parts=parts)
