"""The terms of a function with parameters, and how they are gathered and set apart."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache
from typing import Literal

from closedform.algebra.field import Scalar
from closedform.algebra.lowest_terms import fraction
from closedform.algebra.parameter_field import PI, ParameterField

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
        if name in used or name == PI:
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
        pairs = [(term, *_parted(field, term.amount, name)) for term in rest]
        parts.append(tuple(replace(t, amount=own) for t, own, _ in pairs if own))
        rest = tuple(replace(t, amount=other) for t, _, other in pairs if other)
    return [*parts, rest]


@lru_cache(maxsize=4096)
def _parted(field: ParameterField, element: Scalar, name: str) -> tuple[Scalar, Scalar]:
    """Return the terms above with a parameter, and those without it, each over what is below."""
    place = field.parameters.index(name)
    ring = element.numer.ring
    own = {m: c for m, c in element.numer.iterterms() if m[place]}
    if not own:
        return field.domain.zero, element
    if len(own) == len(element.numer):
        return element, field.domain.zero
    other = {m: c for m, c in element.numer.iterterms() if not m[place]}
    with_it, without = (
        fraction(field, [ring.from_dict(part)], [element.denom]) for part in (own, other)
    )
    return with_it, without
