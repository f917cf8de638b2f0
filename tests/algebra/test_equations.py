"""Equations among parameters are solved for one of them, kept, or excluded with a reason."""

from __future__ import annotations

import pytest

from closedform.algebra.domain import ParameterDomain, SignArgument
from closedform.algebra.equations import Equation, Start, imposed, linear_solution
from tests.rational_elements import element
from tests.sign_checks import field_of, positive

POSITIVE = positive("a b c")
FIELD = POSITIVE.field
START = Start((), POSITIVE)


@pytest.mark.parametrize(
    ("text", "name", "value"),
    [
        ("a - b", "a", "b"),
        ("a*b + c", "b", "-c/a"),
        ("(a - b)/c", "b", "a"),
        ("a^2 - b", "a", None),
        ("a - b", "c", None),
        ("a*b - a", "a", "0"),
    ],
)
def test_an_equation_is_solved_for_a_parameter_in_which_it_is_linear(
    text: str, name: str, value: str | None
) -> None:
    field = field_of("a b c")
    expected = None if value is None else element(field, value)
    found = linear_solution(field, element(field, text), name)
    assert found == expected
    if found is not None:
        assert not field.substituted(element(field, text), {name: found})


def test_an_equation_is_put_into_the_domain() -> None:
    made = imposed(FIELD, START, element(FIELD, "a - c"))
    assert isinstance(made, Start)
    assert made.equations == (Equation(element(FIELD, "a - c"), "c", element(FIELD, "a")),)
    assert not any("c" in FIELD.names_in(c.element) for c in made.domain.conditions)


def test_an_equation_that_holds_already_adds_nothing() -> None:
    made = imposed(FIELD, START, element(FIELD, "a - c"))
    assert isinstance(made, Start)
    assert imposed(FIELD, made, element(FIELD, "c^2 - a^2")) is made


def test_an_equation_that_the_domain_excludes_is_answered_by_the_reason() -> None:
    found = imposed(FIELD, START, element(FIELD, "a + b*c"))
    assert isinstance(found, SignArgument)
    assert found.never_zero


def test_a_product_that_may_vanish_in_two_ways_is_not_solved() -> None:
    product = element(FIELD, "(a - b)*(b - c)")
    assert imposed(FIELD, START, product) == "several equations"
    made = imposed(FIELD, START, element(FIELD, "(a - b)*(b + c)"))
    assert isinstance(made, Start)


def test_an_equation_that_is_linear_in_nothing_is_kept_and_only_one() -> None:
    free = Start((), ParameterDomain(FIELD, ()))
    kept = imposed(FIELD, free, element(FIELD, "a^2 - b^3"))
    assert isinstance(kept, Start)
    assert kept.equations == (Equation(element(FIELD, "a^2 - b^3")),)
    assert imposed(FIELD, kept, element(FIELD, "a^3 - c^2")) == "two relations"
