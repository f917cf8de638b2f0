"""Values of what a derivation displays, worked out apart from the package's evaluation."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from fractions import Fraction
from math import prod
from typing import Any

from flint import acb, acb_mat, arb, arb_series, ctx, fmpq

import closedform
from closedform.derivation.build import derive
from closedform.derivation.step import IMAGINARY_UNIT, Derivation, Matrix, Statement, Step
from closedform.model.model import Model
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
from closedform.response.names import constant_values
from closedform.response.response import Response
from closedform.verification import verify
from tests.strategies import every_system

BITS = 400
Names = Mapping[str, Any]


_KEPT: dict[tuple[Model, int], Derivation] = {}


def derivation_of(response: Response, digits: int = 6) -> Derivation:
    """The derivation of a response, worked out once for each model."""
    key = (response.model, digits)
    if key not in _KEPT:
        _KEPT[key] = derive(response, verify(response), digits=digits)
    return _KEPT[key]


def steps_of(derivation: Derivation, kind: str) -> list[Step]:
    return [step for step in derivation.steps if step.kind == kind]


def statements_of(derivation: Derivation, kind: str, says: str) -> list[Statement]:
    return [s for step in steps_of(derivation, kind) for s in step.statements if s.says == says]


def small_systems() -> Iterator[tuple[str, list[list[Fraction]]]]:
    """Every structure up to order 4 that has eigenvalues of a short form only."""
    for order in range(1, 5):
        for name, system in every_system(order):
            if all(block.degree <= 2 for block in system.blocks):
                yield f"{order}: {name}", [list(row) for row in system.matrix]


def responded(rows: list[list[Any]]) -> Response:
    initial = [Fraction(i + 1, 2) for i in range(len(rows))]
    return closedform.respond(closedform.system(rows, initial=initial))


def names_at(response: Response, t: Fraction) -> dict[str, acb]:
    """The constants of a response, the time, and the imaginary unit."""
    values = constant_values(response.closed_forms.constants)
    found = {name: acb(value) for name, value in values.items()}
    found[response.model.time] = acb(fmpq(t.numerator, t.denominator))
    found[IMAGINARY_UNIT.text] = acb(0, 1)
    return found


def at(formula: Expression, names: Names) -> Any:
    """The value of a formula: a complex ball, or a power series if one of the names is one."""
    match formula:
        case Number(value):
            return acb(fmpq(value.numerator, value.denominator))
        case Name(text):
            return names[text]
        case Negation(operand):
            return -at(operand, names)
        case Sum(terms):
            first, *rest = (at(term, names) for term in terms)
            return sum(rest, first)
        case Product(factors):
            return prod((at(factor, names) for factor in factors), start=acb(1))
        case Quotient(above, below):
            return at(above, names) / at(below, names)
        case Power(base, Number(exponent)):
            assert exponent.denominator == 1
            return at(base, names) ** int(exponent)
        case Call(function, argument):
            return CALLS[function](at(argument, names))
    raise AssertionError(formula)


CALLS = {
    "exp": lambda x: x.exp(),
    "sin": lambda x: x.sin(),
    "cos": lambda x: x.cos(),
    "sqrt": lambda x: x.sqrt(),
    "sinh": lambda x: (x.exp() - (-x).exp()) / 2,
    "cosh": lambda x: (x.exp() + (-x).exp()) / 2,
}


def derivatives(formula: Expression, names: Names, t: str, count: int) -> list[arb]:
    """g, g', …, at the value of t, from a power series of the formula itself."""
    real = {name: value.real for name, value in names.items()}
    with ctx_length(count + 1):
        real[t] = arb_series([real[t], 1], prec=count + 1)
        series = series_at(formula, real)
        if not isinstance(series, arb_series):
            series = arb_series([series], prec=count + 1)
        return [series[k] * arb(k).fac() for k in range(count + 1)]


class ctx_length:  # noqa: N801  a context, in small letters as FLINT's
    """Sets the number of terms that FLINT keeps of power series."""

    def __init__(self, length: int) -> None:
        self.length = length

    def __enter__(self) -> None:
        self.before, ctx.cap = ctx.cap, self.length

    def __exit__(self, *_: object) -> None:
        ctx.cap = self.before


def series_at(formula: Expression, names: Names) -> Any:
    """As `at`, in real balls, which power series mix with."""
    match formula:
        case Number(value):
            return arb(fmpq(value.numerator, value.denominator))
        case Negation(operand):
            return -series_at(operand, names)
        case Sum(terms):
            first, *rest = (series_at(term, names) for term in terms)
            return sum(rest, first)
        case Product(factors):
            return prod((series_at(factor, names) for factor in factors), start=arb(1))
        case Quotient(above, below):
            return series_at(above, names) / series_at(below, names)
        case Power(base, Number(exponent)):
            return series_at(base, names) ** int(exponent)
        case Call(function, argument):
            return CALLS[function](series_at(argument, names))
        case Name(text):
            return names[text]
    raise AssertionError(formula)


def matrix_at(matrix: Matrix, names: Names) -> acb_mat:
    front = acb(1) if matrix.front is None else at(matrix.front, names)
    return acb_mat([[acb(at(entry, names)) * front for entry in row] for row in matrix.rows])


def matrix_of(response: Response) -> acb_mat:
    field = response.field
    return acb_mat([[acb(field.enclose(e)) for e in row] for row in response.matrix.to_list()])


def assert_meet(left: acb_mat, right: acb_mat) -> None:
    """Balls meet in every entry, and are narrow."""
    assert (left.nrows(), left.ncols()) == (right.nrows(), right.ncols())
    largest = 1 + max(abs(e).upper() for e in right.entries())
    for one, other in zip(left.entries(), right.entries(), strict=True):
        assert one.overlaps(other)
        for ball in (one, other):
            assert max(ball.real.rad(), ball.imag.rad()) <= largest * arb(10) ** -50


def unit(n: int) -> acb_mat:
    return acb_mat([[acb(int(i == k)) for k in range(n)] for i in range(n)])
