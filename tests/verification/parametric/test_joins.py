"""Where cases join, the formulas of the neighbour tend to those of the case on the border."""

from __future__ import annotations

import pytest

from closedform.notation.expression import Negation, Number, Product
from closedform.verification.parametric.joins import join_check
from tests.verification.parametric.spoiling import (
    KINDS,
    response_to,
    with_case,
    with_formula,
    with_quantity,
)


@pytest.mark.parametrize(("kind", "number"), [("pair", 1), ("rates", 1), ("depot", 1)])
def test_a_case_on_a_border_is_the_limit_of_its_neighbour(kind: str, number: int) -> None:
    response = response_to(kind)
    (check,) = join_check(response, response.cases[number])
    assert (check.item, check.outcome) == ("limit of the neighbouring case", "enclosed")
    assert "differ in proportion" in check.how


@pytest.mark.parametrize("kind", KINDS)
def test_a_case_without_an_equation_has_no_border_in_it(kind: str) -> None:
    response = response_to(kind)
    assert list(join_check(response, response.cases[0])) == []


def test_a_neighbour_that_tends_to_something_else_is_refuted() -> None:
    response = response_to("rates")
    entry = response.cases[0].transition[1][0]
    spoiled = with_formula(response, 0, ("transition", 1, 0), Product((Number(2), entry)))
    (check,) = join_check(spoiled, spoiled.cases[1])
    assert check.outcome == "refuted"
    assert check.how.startswith("case 1 does not tend to it as b tends to ")


def test_a_case_that_its_neighbours_do_not_tend_to_is_refuted() -> None:
    response = response_to("pair")
    entry = response.cases[1].transition[0][1]
    spoiled = with_formula(response, 1, ("transition", 0, 1), Negation(entry))
    (check,) = join_check(spoiled, spoiled.cases[1])
    assert check.outcome == "refuted"


def test_where_no_case_is_beside_there_is_nothing_to_join() -> None:
    response = response_to("rates")
    never = with_case(response, 0, conditions=response.cases[1].conditions)
    assert list(join_check(never, never.cases[1])) == []


def test_names_without_a_definition_are_left_to_their_own_check() -> None:
    response = response_to("pair")
    for number in (0, 2):
        spoiled = with_quantity(response, number, 0, name="q")
        spoiled = with_quantity(spoiled, 2 - number, 0, name="q")
        assert list(join_check(spoiled, spoiled.cases[1])) == []
