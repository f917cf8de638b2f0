"""The terms of a function with parameters, and how they are gathered and set apart."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from typing import Literal

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField

__all__ = ["Kernel", "Term", "apart", "gathered", "separable", "separated"]

Kernel = Literal["cos", "sin", "cosh", "sinh"]


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


def gathered(field: ParameterField, terms: Iterable[Term]) -> tuple[Term, ...]:
    """Return the terms with those of one function added up, and none that is zero."""
    found: dict[Term, Scalar] = {}
    for term in terms:
        bare = replace(term, amount=field.scalar(0))
        found[bare] = found.get(bare, field.scalar(0)) + term.amount
    return tuple(replace(bare, amount=amount) for bare, amount in found.items() if amount)


def separable(field: ParameterField, terms: Sequence[Term]) -> list[str]:
    """Return the parameters that occur in amounts only, above and once, but not in all of it."""
    if len(terms) < 2:
        return []
    used: set[str] = set()
    for term in terms:
        below = field.of_polynomial(term.amount.denom)
        for element in filter(None, (below, term.rate, term.frequency)):
            used |= field.names_in(element)
    found = []
    for place, name in enumerate(field.parameters):
        if name in used:
            continue
        degrees = [{m[place] for m in term.amount.numer.itermonoms()} for term in terms]
        if set().union(*degrees) == {0, 1} and any(len(d) == 2 for d in degrees):
            found.append(name)
    return found


def apart(field: ParameterField, terms: Sequence[Term], names: Sequence[str]) -> list[str]:
    """Return names of which no term of an amount holds two."""
    together = [
        {n for n, e in zip(field.parameters, monomial, strict=True) if e}
        for term in terms
        for monomial in term.amount.numer.itermonoms()
    ]
    kept: list[str] = []
    for name in reversed(names):
        if not any(name in held and held.intersection(kept) for held in together):
            kept.insert(0, name)
    return kept


def separated(
    field: ParameterField, terms: Sequence[Term], names: Sequence[str]
) -> list[tuple[Term, ...]]:
    """Return the terms with each of the names in turn, and those without any of them."""
    parts, rest = [], tuple(terms)
    for name in names:
        left = [_without(field, term.amount, name) for term in rest]
        pairs = list(zip(rest, left, strict=True))
        parts.append(tuple(replace(t, amount=t.amount - r) for t, r in pairs if t.amount != r))
        rest = tuple(replace(t, amount=r) for t, r in pairs if r)
    return [*parts, rest]


def _without(field: ParameterField, element: Scalar, name: str) -> Scalar:
    """Return an element at 0 of a parameter that does not stand below."""
    place = field.parameters.index(name)
    kept = {m: c for m, c in element.numer.iterterms() if not m[place]}
    if len(kept) == len(element.numer):
        return element
    return field.of_polynomial(element.numer.ring.from_dict(kept)) / element.denom
