"""Ways to spoil a response, each in one known place."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import replace
from fractions import Fraction
from typing import Any

from closedform.algebra.exponential import ExponentialMatrix, ModalTerm
from closedform.algebra.field import FieldMatrix
from closedform.algebra.root_matrix import RootMatrix
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
)
from closedform.response.response import Response

Place = tuple[int, int, int, int, int]
"""Term, power of t, power of lambda, row, column: one number of an `ExponentialMatrix`."""


def numbers_of(function: ExponentialMatrix) -> Iterator[tuple[Place, Any]]:
    """Yield every number of a function with its place."""
    for i, term in enumerate(function.terms):
        for j, residue in enumerate(term.residues):
            for k, matrix in enumerate(residue.coefficients):
                for row, entries in enumerate(matrix.to_list()):
                    for column, element in enumerate(entries):
                        yield (i, j, k, row, column), element


def with_number(function: ExponentialMatrix, place: Place, value: Any) -> ExponentialMatrix:
    """Return the function with one number replaced."""
    i, j, k, row, column = place

    def other(matrix: FieldMatrix) -> FieldMatrix:
        rows = [list(entries) for entries in matrix.to_list()]
        rows[row][column] = value
        return function.field.matrix(rows)

    return with_coefficient(function, (i, j, k), other)


def with_coefficient(
    function: ExponentialMatrix,
    place: tuple[int, int, int],
    change: Callable[[FieldMatrix], FieldMatrix],
) -> ExponentialMatrix:
    """Return the function with the matrix at (term, power of t, power of lambda) changed."""
    i, j, k = place
    residue = function.terms[i].residues[j]
    coefficients = list(residue.coefficients)
    coefficients[k] = change(coefficients[k])
    return with_residue(function, i, j, replace(residue, coefficients=tuple(coefficients)))


def with_residue(
    function: ExponentialMatrix, i: int, j: int, residue: RootMatrix
) -> ExponentialMatrix:
    residues = list(function.terms[i].residues)
    residues[j] = residue
    return with_term(function, i, replace(function.terms[i], residues=tuple(residues)))


def with_term(function: ExponentialMatrix, i: int, term: ModalTerm) -> ExponentialMatrix:
    terms = list(function.terms)
    terms[i] = term
    return replace(function, terms=tuple(terms))


def every_residue(
    function: ExponentialMatrix, change: Callable[[RootMatrix], RootMatrix]
) -> ExponentialMatrix:
    """Return the function with every R_j changed alike."""
    return replace(
        function,
        terms=tuple(
            replace(term, residues=tuple(map(change, term.residues))) for term in function.terms
        ),
    )


def same_function(left: ExponentialMatrix, right: ExponentialMatrix) -> bool:
    """Whether two functions over the same factors are equal: their R_j are unique."""
    return all(
        (a - b).is_zero
        for one, other in zip(left.terms, right.terms, strict=True)
        for a, b in zip(one.residues, other.residues, strict=True)
    )


def followed_through(response: Response, exponential: ExponentialMatrix) -> Response:
    """Return the response that somebody gets who believes in another e^(At)."""
    state = exponential.times(response.initial)
    weights = [[response.field.scalar(w) for w in o.weights] for o in response.model.outputs]
    output = state.after(response.field.matrix(weights)) if weights else None
    return replace(response, exponential=exponential, state=state, output=output)


def rewritten(response: Response, **fields: Any) -> Response:
    """Return a response with these of its `ClosedForms` replaced, nothing else."""
    copy = replace(response)
    copy.__dict__["closed_forms"] = replace(response.closed_forms, **fields)
    return copy


def with_transition_entry(response: Response, row: int, column: int, formula: Expression) -> Any:
    rows = [list(entries) for entries in response.closed_forms.transition]
    rows[row][column] = formula
    return rewritten(response, transition=tuple(map(tuple, rows)))


def with_formula(response: Response, part: str, place: int, formula: Expression) -> Response:
    """Replace one formula of `solution` or `outputs`."""
    formulas = list(getattr(response.closed_forms, part))
    formulas[place] = formula
    return rewritten(response, **{part: tuple(formulas)})


# --- formulas ------------------------------------------------------------------------------


def slips(formula: Expression, time: str) -> Iterator[tuple[str, Expression]]:
    """Yield (kind of slip, formula) for every single slip of the pen in a formula.

    Nearly all change the value; which of them do is for the caller to find out.
    """
    yield from _slips_here(formula, time)
    for part, put_back in _parts(formula):
        for kind, other in slips(part, time):
            yield kind, put_back(other)


def _slips_here(formula: Expression, time: str) -> Iterator[tuple[str, Expression]]:
    yield "a sign is turned", _negated(formula)
    match formula:
        case Number(value):
            yield "a number is off by one", Number(value + 1)
        case Name(text) if text == time:
            yield "a t is dropped", Number(Fraction(1))
        case Sum(terms):
            for rest in _all_but_one(terms):
                yield "a term is dropped", rest[0] if len(rest) == 1 else Sum(rest)
        case Product(factors):
            for rest in _all_but_one(factors):
                yield "a factor is dropped", rest[0] if len(rest) == 1 else Product(rest)
        case Quotient(above, _):
            yield "a divisor is dropped", above
        case Power(base, _):
            yield "a power is dropped", base
        case Call(function, argument) if function in OTHER_FUNCTION:
            yield "another function is written", Call(OTHER_FUNCTION[function], argument)


PartAndPutBack = tuple[Expression, Callable[[Expression], Expression]]


def _parts(formula: Expression) -> list[PartAndPutBack]:
    """The parts of a formula, each with what puts another in its place."""
    match formula:
        case Negation(operand):
            return [(operand, Negation)]
        case Sum(parts) | Product(parts):
            kind = type(formula)
            return [
                (part, lambda x, i=i: kind((*parts[:i], x, *parts[i + 1 :])))
                for i, part in enumerate(parts)
            ]
        case Quotient(above, below):
            return [
                (above, lambda x: Quotient(x, below)),
                (below, lambda x: Quotient(above, x)),
            ]
        case Power(base, exponent):
            return [(base, lambda x: Power(x, exponent))]
        case Call(function, argument):
            return [(argument, lambda x: Call(function, x))]
    return []


def _all_but_one(parts: tuple[Expression, ...]) -> Iterator[tuple[Expression, ...]]:
    for i in range(len(parts)):
        yield (*parts[:i], *parts[i + 1 :])


OTHER_FUNCTION = {"sin": "cos", "cos": "sin", "sinh": "cosh", "cosh": "sinh", "exp": "cosh"}


def _negated(formula: Expression) -> Expression:
    return formula.operand if isinstance(formula, Negation) else Negation(formula)
