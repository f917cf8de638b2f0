"""The main job against values from outside: each check is named by its source."""

from __future__ import annotations

import json
from collections.abc import Callable, Sequence
from fractions import Fraction
from functools import cache
from pathlib import Path
from typing import Any

import pytest
from flint import acb, acb_mat, arb, ctx

import closedform
from tests.exact import at_balls, fractions_of, polynomial_of
from tests.published.formulas import ball

VALUES = {
    value["id"]: value
    for value in json.loads((Path(__file__).parent / "values.json").read_text(encoding="utf-8"))[
        "values"
    ]
}
TIMES = (Fraction(0), Fraction(1, 3), Fraction(7, 5), Fraction(3))
BITS = 400
DIGITS = 60

Value = dict[str, Any]
Published = list[list[str]]


@cache
def response_of(identifier: str) -> Any:
    value = VALUES[identifier]
    n = len(value["matrix"])
    return closedform.respond(
        closedform.system(
            title=identifier,
            states=[f"x{i + 1}" for i in range(n)],
            matrix=value["matrix"],
            initial=value.get("initial", [0] * n),
        )
    )


def formula(value: Value, text: str, time: Fraction | None = None) -> acb:
    return ball(text, value.get("parameters"), time)


def assert_same_balls(ours: Sequence[Sequence[arb]], theirs: list[list[acb]]) -> None:
    """Ours and the published formula's balls meet, and both are narrow."""
    largest = max(abs(entry).upper() for row in theirs for entry in row)
    for own_row, their_row in zip(ours, theirs, strict=True):
        for own, their in zip(own_row, their_row, strict=True):
            assert their.overlaps(acb(own))
            assert own.rad() <= largest * arb(10) ** -40
            assert their.real.rad() <= largest * arb(10) ** -40


def meets(ours: Sequence[Sequence[arb]], expected: Value) -> bool:
    """Whether every printed number is within its tolerance of the largest entry."""
    largest = max(abs(entry).lower() for row in ours for entry in row)
    allowed = arb(expected["relative"]) * largest
    return all(
        abs(own - arb(text)) <= allowed
        for own_row, row in zip(ours, expected["entries"], strict=True)
        for own, text in zip(own_row, row, strict=True)
        if text is not None
    )


def transition_numbers(_: Value, response: Any, expected: Value) -> None:
    assert meets(response.transition_at(Fraction(expected["time"]), DIGITS), expected)


def transition_misprint(_: Value, response: Any, expected: Value) -> None:
    assert not meets(response.transition_at(Fraction(expected["time"]), DIGITS), expected)


def solution_numbers(_: Value, response: Any, expected: Value) -> None:
    ours = [response.solution_at(Fraction(expected["time"]), DIGITS)]
    assert meets(ours, {**expected, "entries": [expected["entries"]]})


def solution_misprint(_: Value, response: Any, expected: Value) -> None:
    ours = [response.solution_at(Fraction(expected["time"]), DIGITS)]
    assert not meets(ours, {**expected, "entries": [expected["entries"]]})


def transition_at(value: Value, response: Any, expected: Value) -> None:
    theirs = [[formula(value, text) for text in row] for row in expected["entries"]]
    assert_same_balls(response.transition_at(Fraction(expected["time"]), DIGITS), theirs)


def transition(value: Value, response: Any, expected: Published) -> None:
    for time in TIMES:
        theirs = [[formula(value, text, time) for text in row] for row in expected]
        assert_same_balls(response.transition_at(time, DIGITS), theirs)


def solution(value: Value, response: Any, expected: list[str]) -> None:
    """Only as many states as the source gives: the others are their rates."""
    for time in TIMES:
        ours = response.solution_at(time, DIGITS)[: len(expected)]
        assert_same_balls([ours], [[formula(value, text, time) for text in expected]])


def observed(value: Value, response: Any, expected: Value) -> None:
    """A Laplace pair as row e^(At) column, the matrix a companion matrix."""
    row, column = ([arb_of(text) for text in expected[key]] for key in ("row", "column"))
    for time in TIMES:
        entries = response.transition_at(time, DIGITS)
        ours = sum(
            (
                r * e * c
                for r, line in zip(row, entries, strict=True)
                for e, c in zip(line, column, strict=True)
            ),
            arb(0),
        )
        theirs = formula(value, expected["formula"], time)
        assert theirs.overlaps(acb(ours))
        assert ours.rad() < 1e-40


def powers(value: Value, response: Any, expected: Value) -> None:
    """e^(At) as a sum of f_k(t) (A - l I)^k."""
    shift = arb_of(expected["shift"])
    rows = [[arb_of(entry) for entry in row] for row in value["matrix"]]
    n = len(rows)
    unit = acb_mat([[acb(int(i == j)) for j in range(n)] for i in range(n)])
    nilpotent = acb_mat(rows) - unit * shift
    for time in TIMES:
        total, power = unit * 0, unit
        for text in expected["coefficients"]:
            total, power = total + power * formula(value, text, time), power * nilpotent
        assert_same_balls(response.transition_at(time, DIGITS), total.tolist())


def eigenvalues(value: Value, response: Any, expected: list[tuple[str, int]]) -> None:
    """Each factor's roots are exactly the published ones of its multiplicity.

    Distinct published eigenvalues that are roots of an irreducible p number deg p, so all
    its roots are there; a value that is no root is kept away by the narrowness of its ball.
    """
    left = dict.fromkeys(range(len(expected)))
    for p, factor in factors_of(response):
        roots = [i for i in left if p(formula(value, expected[i][0])).contains(0)]
        assert len(roots) == p.degree()
        assert {expected[i][1] for i in roots} == {factor.multiplicity}
        for i in roots:
            del left[i]
    assert not left


def blocks(value: Value, response: Any, expected: list[tuple[str, int]]) -> None:
    """Each published eigenvalue has the block sizes of the factor it is a root of."""
    sizes: dict[str, list[int]] = {}
    for text, size in expected:
        sizes.setdefault(text, []).append(size)
    total = 0
    for p, factor in factors_of(response):
        roots = [text for text in sizes if p(formula(value, text)).contains(0)]
        assert len(roots) == p.degree()
        for text in roots:
            assert tuple(factor.blocks) == tuple(sorted(sizes[text], reverse=True))
        assert factor.index == max(factor.blocks)
        total += p.degree() * sum(factor.blocks)
    assert total == len(value["matrix"])


def characteristic(_: Value, response: Any, expected: list[str]) -> None:
    ours = fractions_of(response.spectrum.characteristic)
    assert ours == tuple(map(Fraction, expected))


def frequencies(_: Value, response: Any, expected: Value) -> None:
    """Every published frequency is the imaginary part of an eigenvalue, to its digits."""
    ours = [
        root.imag
        for factor in response.spectrum.factors
        for root, _ in polynomial_of(factor.polynomial).complex_roots()
        if root.imag > 0
    ]
    assert len(ours) == len(expected["values"])
    for own, text in zip(sorted(ours, key=float), expected["values"], strict=True):
        assert abs(own - arb(text)) <= arb(expected["relative"]) * own


def limit(_: Value, response: Any, expected: Value) -> None:
    """The state has settled at the published one by the time given."""
    ours = response.solution_at(Fraction(expected["time"]), DIGITS)
    for own, text in zip(ours, expected["entries"], strict=True):
        assert abs(own - arb_of(text)) < 1e-25


def first_row_series(_: Value, response: Any, __: str) -> None:
    """(e^A)_(1,j+1) is the sum over k of 10^(-10 k)/(10 k + j)!, j from 0."""
    ours = response.transition_at(Fraction(1), DIGITS)[0]
    for j, own in enumerate(ours):
        terms = (arb(10) ** (-10 * k) / arb(10 * k + j).fac() for k in range(12))
        assert abs(own - sum(terms, arb(0))) < 1e-50


CHECKS: dict[str, Callable[[Value, Any, Any], None]] = {
    check.__name__: check
    for check in (
        blocks,
        characteristic,
        eigenvalues,
        first_row_series,
        frequencies,
        limit,
        observed,
        powers,
        solution,
        solution_misprint,
        solution_numbers,
        transition,
        transition_at,
        transition_misprint,
        transition_numbers,
    )
}


def arb_of(text: str) -> arb:
    return ball(text).real


def factors_of(response: Any) -> list[tuple[Any, Any]]:
    """Return each factor's polynomial, evaluable at a ball, beside the factor."""
    return [(at_balls(polynomial_of(f.polynomial)), f) for f in response.spectrum.factors]


CASES = [
    pytest.param(identifier, kind, id=f"{identifier}: {kind}")
    for identifier, value in VALUES.items()
    for kind in value["checks"]
]


@pytest.mark.parametrize(("identifier", "kind"), CASES)
def test_agrees_with_the_published_value(identifier: str, kind: str) -> None:
    value = VALUES[identifier]
    response = response_of(identifier)
    with ctx.workprec(BITS):
        CHECKS[kind](value, response, value["checks"][kind])


@pytest.mark.parametrize("identifier", VALUES)
def test_the_response_to_a_published_system_is_proved(identifier: str) -> None:
    assert closedform.verify(response_of(identifier)).holds


def test_every_value_says_where_it_is_from_and_how_far_it_was_confirmed() -> None:
    for value in VALUES.values():
        assert value["source"]
        assert value["seen_at"]
        assert value["confirmed"] in (True, False)
        assert value["scope"]
        assert set(value["checks"]) <= set(CHECKS)
