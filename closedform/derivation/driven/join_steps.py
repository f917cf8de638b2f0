"""The step that puts the instants of switching into the pieces on both sides."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from closedform.derivation.driven.differentiation import times
from closedform.derivation.driven.solution_steps import blow_at
from closedform.derivation.driven.writing import Writing
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
    number,
)
from closedform.notation.terms import negated, opened, sum_of
from closedform.response.driven.response import DrivenSolution

__all__ = ["joins_step", "value_at"]

_AT_ZERO = {"exp": ONE, "cos": ONE, "cosh": ONE, "sin": ZERO, "sinh": ZERO}


def joins_step(writing: Writing, solution: DrivenSolution, facts: dict[str, object]) -> Step | None:
    """State what the pieces give at each instant, from both sides; None without switching."""
    instants = writing.instants()
    if len(instants) < 2:
        return None
    rows = [
        {
            "place": place,
            "at": at,
            "blow": None if blow is None else blow.sides[0],
            "statements": list(_from_both_sides(writing, solution, place, at, struck=bool(blow))),
        }
        for place, at in enumerate(instants)
        if place
        for blow in [blow_at(writing, solution, place)]
    ]
    return Step("joins", (), {**facts, "rows": rows}, ("driven_solution",))


def _from_both_sides(
    writing: Writing, solution: DrivenSolution, place: int, at: Expression, *, struck: bool
) -> list[Statement]:
    """x(a^-) = … = x(a^+) for every state; two statements where an impulse strikes."""
    found: list[Statement] = []
    for row, name in enumerate(writing.model.names):
        before, after = (
            value_at(solution.pieces[side][row], writing.model.time, at)
            for side in (place - 1, place)
        )
        left, right = (Symbol("one-sided", (sign,), at, name) for sign in "-+")
        if struck:
            found += [Statement("join", (left, before)), Statement("join", (right, after))]
        else:
            middle: tuple[Side, ...] = (before,) if before == after else (before, after)
            found.append(Statement("join", (left, *middle, right)))
    return found


def value_at(formula: Expression, variable: str, at: Expression) -> Expression:
    """Return a formula with a formula put in for a variable, what is plainly zero left out."""

    def put(node: Expression) -> Expression:
        match node:
            case Name(text):
                return at if text == variable else node
            case Number():
                return node
            case Negation(inside):
                value = put(inside)
                return ZERO if value == ZERO else negated(value)
            case Sum(terms):
                return _total([put(term) for term in terms])
            case Product(factors):
                return times([put(factor) for factor in factors])
            case Quotient(above, below):
                return times([put(above), Quotient(ONE, put(below))])
            case Power(base, exponent):
                return _power(put(base), exponent)
            case Call(function, argument):
                inside = put(argument)
                return _AT_ZERO[function] if inside == ZERO else Call(function, inside)

    return put(formula)


def _power(base: Expression, exponent: Expression) -> Expression:
    match base, exponent:
        case Number(value), Number(times_) if times_.denominator == 1 and times_ > 0:
            return number(value ** int(times_))
    return Power(base, exponent)


def _total(terms: Sequence[Expression]) -> Expression:
    """The sum, numbers added up and opposite terms left out."""
    numbers = Fraction(0)
    kept: list[Expression] = []
    for term in _opened(terms):
        sign, size = (-1, term.operand) if isinstance(term, Negation) else (1, term)
        if isinstance(size, Number):
            numbers += sign * size.value
        elif negated(term) in kept:
            kept.remove(negated(term))
        else:
            kept.append(term)
    if numbers:
        kept.append(number(numbers))
    return opened(sum_of(kept)) if kept else ZERO


def _opened(terms: Sequence[Expression]) -> list[Expression]:
    found: list[Expression] = []
    for term in terms:
        if isinstance(term, Sum):
            found += _opened(term.terms)
        elif isinstance(term, Negation) and isinstance(term.operand, Sum):
            found += [negated(part) for part in _opened(term.operand.terms)]
        else:
            found.append(term)
    return found
