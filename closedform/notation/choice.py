"""Choosing among equal formulas: the fewest operations, then what a person would rather write."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from typing import TypeVar

from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
    operations,
)
from closedform.notation.terms import opened

__all__ = ["places_of", "shortest_formula", "shortest_of"]

T = TypeVar("T")


def shortest_formula(formulas: Iterable[Expression], places: Mapping[str, int]) -> Expression:
    """Return the formula that is shortest; `places` says which name comes before which."""
    return shortest_of(map(opened, formulas), lambda formula: formula, places)


def shortest_of(
    items: Iterable[T],
    formula_of: Callable[[T], Expression],
    places: Mapping[str, int],
    length_of: Callable[[T], int] | None = None,
) -> T:
    """Return the item whose formula has the fewest operations.

    Of equals, the one with the fewest fractions within fractions, then with the fewest names,
    then with the fewest sums inside of other operations, then with the fewest minus signs in
    these, then with the fewest differences whose names come in the other order; then the
    earlier.  `length_of` counts the operations of an item without writing it; then only those
    that are shortest are written.
    """
    kept = list(items)
    if len(kept) == 1:
        return kept[0]
    counts = [length_of(i) if length_of else operations(formula_of(i)) for i in kept]
    least = min(counts)
    best = [item for item, count in zip(kept, counts, strict=True) if count == least]
    return best[0] if len(best) == 1 else min(best, key=lambda i: _taste(formula_of(i), places))


def places_of(names: Iterable[str]) -> dict[str, int]:
    """Return the place of each name."""
    return {name: place for place, name in enumerate(names)}


def _taste(formula: Expression, places: Mapping[str, int]) -> tuple[int, int, int, int, int]:
    fractions = names = sums = signs = turned = 0
    waiting: list[tuple[Expression, str]] = [(formula, "alone")]
    while waiting:
        part, within = waiting.pop()
        match part:
            case Name():
                names += 1
            case Number():
                pass
            case Sum(terms):
                fractions += within == "fraction" and sum(map(_is_fraction, terms))
                sums += within != "alone"
                signs += within != "alone" and sum(isinstance(term, Negation) for term in terms)
                turned += len(terms) == 2 and _is_turned(*terms, places)
                waiting += [(t.operand if isinstance(t, Negation) else t, "sum") for t in terms]
            case Product(factors):
                place = within if within == "fraction" else "product"
                waiting += [(factor, place) for factor in factors]
            case Negation(operand) | Call(_, operand):
                waiting.append((operand, "product"))
            case Quotient(above, below):
                waiting += [(above, "fraction"), (below, "fraction")]
            case Power(base, exponent):
                waiting += [(base, "product"), (exponent, "product")]
    return fractions, names, sums, signs, turned


def _is_fraction(term: Expression) -> bool:
    return isinstance(term.operand if isinstance(term, Negation) else term, Quotient)


def _is_turned(first: Expression, second: Expression, places: Mapping[str, int]) -> bool:
    if not isinstance(second, Negation):
        return False
    return _first_place(first, places) > _first_place(second.operand, places)


def _first_place(formula: Expression, places: Mapping[str, int]) -> int:
    match formula:
        case Name(text):
            return places.get(text, len(places))
        case Number():
            return len(places)
        case Sum(parts) | Product(parts):
            return min(_first_place(part, places) for part in parts)
        case Negation(part) | Call(_, part):
            return _first_place(part, places)
        case Quotient(first, second) | Power(first, second):
            return min(_first_place(first, places), _first_place(second, places))
