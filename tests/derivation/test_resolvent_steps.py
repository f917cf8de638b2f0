"""The second route, from what it prints alone: sum of R g^(k) t^j/j! is e^(At)."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest
from flint import acb, acb_mat, ctx

import closedform
from closedform.derivation.step import Derivation, Matrix, Symbol
from closedform.notation.expression import is_expression
from closedform.response.response import Response
from tests.derivation.values import (
    BITS,
    assert_meet,
    at,
    derivation_of,
    derivatives,
    matrix_at,
    matrix_of,
    names_at,
    responded,
    statements_of,
    steps_of,
)
from tests.response.systems import response_to
from tests.strategies import every_system

TIMES = (Fraction(3, 7), Fraction(-5, 4))
NAMED = [
    (f"{order}: {name}", [list(row) for row in system.matrix])
    for order in (3, 4)
    for name, system in every_system(order)
    if any(block.degree > 2 for block in system.blocks)
]
SURDS = {
    "a cubic over surds": [[0, 1, 0], [0, 0, 1], ["1 + sqrt(2)", 1, 0]],
    "an even quartic over surds": [
        [0, 0, 1, 0],
        [0, 0, 0, 1],
        ["-sqrt(2)", 1, 0, 0],
        [1, "-2*sqrt(3)", 0, 0],
    ],
}
REPEATED = [  # (s^3 - s - 1)^2, coupled, and a simple pole beside it
    [0, 1, 0, 1, 0, 0, 0],
    [0, 0, 1, 0, 1, 0, 0],
    [1, 1, 0, 0, 0, 1, 0],
    [0, 0, 0, 0, 1, 0, 0],
    [0, 0, 0, 0, 0, 1, 0],
    [0, 0, 0, 1, 1, 0, 0],
    [0, 0, 0, 0, 0, 0, -1],
]
CASES = [
    *[pytest.param(responded, rows, id=name) for name, rows in NAMED],
    *[pytest.param(responded, rows, id=name) for name, rows in SURDS.items()],
    *[pytest.param(response_to, kind, id=kind) for kind in ("even quartic", "named cubic")],
    pytest.param(responded, REPEATED, id="a repeated cubic"),
]
each_case = pytest.mark.parametrize(("make", "argument"), CASES)


def letters_of(derivation: Derivation, names: Any) -> dict[tuple[str, ...], acb_mat]:
    found = {}
    for statement in statements_of(derivation, "resolvent", "residue matrix"):
        letter, matrix = statement.sides
        assert isinstance(letter, Symbol)
        assert isinstance(matrix, Matrix)
        assert letter.indices not in found
        found[letter.indices] = matrix_at(matrix, names)
    return found


def impulses_of(derivation: Derivation, response: Response, t: Fraction) -> dict[Any, list[Any]]:
    found = {}
    for statement in statements_of(derivation, "resolvent", "impulse response"):
        g, formula = statement.sides
        names = names_at(response, t)
        found[g.indices] = derivatives(formula, names, response.model.time, 8)
    return found


@each_case
def test_the_expansion_as_printed_is_the_exponential(make: Any, argument: Any) -> None:
    response = make(argument)
    derivation = derivation_of(response)
    n = len(response.model.states)
    (expansion,) = statements_of(derivation, "resolvent", "expansion")
    for t in TIMES:
        with ctx.workprec(BITS):
            names = names_at(response, t)
            letters, impulses = letters_of(derivation, names), impulses_of(derivation, response, t)
            total = acb_mat(n, n)
            for part in expansion.sides[1].parts:
                front, letter, g = part if len(part) == 3 else (None, *part)
                weight = acb(impulses[g.indices][g.order])
                if front is not None:
                    assert is_expression(front)
                    weight = weight * at(front, names)
                total = total + letters[letter.indices] * weight
            assert_meet(total, (matrix_of(response) * names[response.model.time]).exp())


@each_case
def test_the_functions_g_solve_their_equations_from_an_impulse(make: Any, argument: Any) -> None:
    """p(d/dt) g = 0 with g = … = 0 and g^(d-1) = 1 at 0, for the p that is printed."""
    response = make(argument)
    derivation = derivation_of(response)
    polynomials = statements_of(derivation, "resolvent", "denominator")
    for t in (Fraction(0), *TIMES):
        with ctx.workprec(BITS):
            impulses = impulses_of(derivation, response, t)
            assert len(impulses) == len(polynomials) == len(response.spectrum.factors)
            for statement, factor in zip(polynomials, response.spectrum.factors, strict=True):
                g = impulses[statement.sides[0].indices]
                coefficients = [response.field.enclose(c) for c in reversed(factor.polynomial)]
                terms = [c * value for c, value in zip(coefficients, g, strict=False)]
                assert sum(terms[1:], terms[0]).contains(0)
                if t == 0:
                    expected = [0] * (factor.degree - 1) + [1]
                    assert all(
                        v.contains(e) for v, e in zip(g[: factor.degree], expected, strict=True)
                    )
                # The polynomial in print is the factor.
                s = acb(2, 3)
                printed = at(statement.sides[1], {"s": s})
                value = acb(0)
                for c in reversed(coefficients):
                    value = value * s + c
                assert printed.overlaps(value)


def test_letters_and_facts_of_a_repeated_factor() -> None:
    (step,) = steps_of(derivation_of(responded(REPEATED)), "resolvent")
    assert step.facts["repeated"]
    assert (step.facts["factors"], step.facts["degree"], step.facts["written"]) == (2, 3, True)


def test_beyond_eight_states_no_matrix_is_printed() -> None:
    rows = [[-(k + 1) * (i == k) + (i == k + 1) for k in range(9)] for i in range(9)]
    response = closedform.respond(closedform.system(rows, initial=[1] * 9))
    (step,) = steps_of(derivation_of(response), "resolvent")
    assert not step.facts["written"]
    assert "residue matrix" not in {s.says for s in step.statements}
