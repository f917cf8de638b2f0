"""What a file says of a driven model's equations, in whichever form: rows over jets and inputs."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Generic, TypeVar

from closedform.model.driven.model import Form, Jet
from closedform.model.driven.numerals import Numerals
from closedform.notation.expression import ZERO, Expression, Name, Negation, Sum, product
from closedform.notation.plain import plain
from closedform.notation.terms import negated

__all__ = ["Row", "Statement", "combination_formula", "row_of"]

T = TypeVar("T")


@dataclass(frozen=True, slots=True)
class Row(Generic[T]):
    """An equation: weights of jets and of inputs, by their place, that add up to zero.

    `key` is where it stands.
    """

    text: str
    left: Expression
    right: Expression
    of_unknowns: tuple[tuple[Jet, T], ...]
    of_inputs: tuple[tuple[int, T], ...]
    key: str


@dataclass(frozen=True, slots=True)
class Statement(Generic[T]):
    """The rows of a model and its unknowns; `guessed` are those that nobody declared."""

    form: Form
    unknowns: tuple[str, ...]
    rows: tuple[Row[T], ...]
    guessed: frozenset[str] = frozenset()

    @property
    def orders(self) -> dict[str, int]:
        """The highest derivative of each unknown, 0 for an algebraic one."""
        found = dict.fromkeys(self.unknowns, 0)
        for row in self.rows:
            for jet, _ in row.of_unknowns:
                found[jet.name] = max(found[jet.name], jet.order)
        return found


def row_of(
    numerals: Numerals[T],
    of_unknowns: Sequence[tuple[Jet, T]],
    right: tuple[Sequence[tuple[Jet, T]], Sequence[tuple[int, str, T]]],
    key: str,
) -> Row[T]:
    """Return the equation of a row of matrices: jets on the left, jets and inputs on the right.

    Inputs come with their place and their name.
    """
    jets, inputs = right
    minus = numerals.arithmetic.negated
    left = combination_formula(numerals, ((jet.text, weight) for jet, weight in of_unknowns))
    driven = combination_formula(
        numerals,
        [*((jet.text, weight) for jet, weight in jets), *((n, weight) for _, n, weight in inputs)],
    )
    zero = numerals.arithmetic.number(Fraction(0))
    unknowns = [*of_unknowns, *((jet, minus(weight)) for jet, weight in jets)]
    return Row(
        f"{plain(left)} = {plain(driven)}",
        left,
        driven,
        tuple((jet, weight) for jet, weight in unknowns if weight != zero),
        tuple((place, minus(weight)) for place, _, weight in inputs if weight != zero),
        key,
    )


def combination_formula(numerals: Numerals[T], parts: Iterable[tuple[str, T]]) -> Expression:
    """Return a linear combination of names as it is written, 0 where nothing is left."""
    zero = numerals.arithmetic.number(Fraction(0))
    terms = []
    for name, weight in parts:
        if weight == zero:
            continue
        factor = numerals.formula(weight)
        minus = isinstance(factor, Negation)
        term = product([negated(factor) if minus else factor, Name(name)])
        terms.append(negated(term) if minus else term)
    if not terms:
        return ZERO
    return Sum(tuple(terms)) if len(terms) > 1 else terms[0]
