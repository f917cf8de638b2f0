"""A formula is defined where no divisor in its text vanishes; this is proved, not sampled."""

from __future__ import annotations

import pytest

from closedform.algebra.domain import ParameterDomain
from closedform.notation import read_formula
from closedform.response.parametric.case import Case
from closedform.verification.parametric.defined import (
    defined_check,
    facts_of_names,
    undefined_name,
)
from closedform.verification.record import Check
from tests.rational_elements import field_of
from tests.response.parametric import solved
from tests.verification.parametric.spoiling import KINDS, response_to, with_case, with_formula


def checked(kind: str, number: int, text: str) -> Check:
    """The check with a formula in the place of a solution, which need not be true."""
    response = response_to(kind)
    case = response.cases[number]
    names = {"t", *response.model.field.parameters, *(q.name for q in case.quantities)}
    formula = read_formula(text, names=frozenset(names))
    spoiled = with_formula(response, number, ("solution", 0), formula)
    return defined_check(spoiled, spoiled.cases[number])


@pytest.mark.parametrize("kind", KINDS)
def test_all_formulas_of_a_right_response_are_defined(kind: str) -> None:
    response = response_to(kind)
    for case in response.cases:
        check = defined_check(response, case)
        assert check.outcome == "proved"
        assert undefined_name(response, case) is None


@pytest.mark.parametrize(
    ("kind", "number", "text"),
    [
        ("pair", 0, "1/omega_d"),
        ("pair", 0, "x0/(4*m*k - c^2)"),
        ("pair", 0, "1/(omega_d - k/m - 1)"),
        ("pair", 2, "exp(-t/kappa)"),
        ("pair", 0, "c/(m*delta)"),
        ("pair", 1, "1/(2*m*k - c^2)"),
        ("rates", 0, "1/(b - a)"),
        ("rates", 0, "p/(a^2 - b^2)"),
        ("exchange", 0, "1/(beta - alpha)^2"),
        ("exchange", 0, "1/(alpha*beta)"),
        ("star", 0, "1/((alpha - gamma)*(gamma - beta))"),
        ("cubic", 0, "1/omega + 1/(1 + sigma^2)"),
        ("depot", 0, "1/((ka - alpha)*(ka - beta))"),
        ("rates", 1, "a^(-2)"),
    ],
)
def test_what_cannot_vanish_may_be_divided_by(kind: str, number: int, text: str) -> None:
    assert checked(kind, number, text).outcome == "proved"


@pytest.mark.parametrize(
    ("kind", "number", "text", "divisor"),
    [
        ("pair", 0, "1/x0", "x0"),
        ("pair", 1, "1/(4*m*k - c^2)", "4*m*k - c**2"),
        ("pair", 0, "sin(t/(c - k))", "c - k"),
        ("rates", 1, "1/(a - 1)", "a - 1"),
        ("rates", 0, "1/(a - 2*b)", "a - 2*b"),
        ("exchange", 0, "1/(alpha - k12)", "k12 - alpha"),
        ("exchange", 0, "(alpha - 1)^(-1)", "alpha - 1"),
        ("cubic", 0, "1/sigma", "sigma"),
        ("rates", 0, "1/(1/(a - 2) + 1)", "a - 2"),
    ],
)
def test_what_may_vanish_may_not_be_divided_by(
    kind: str, number: int, text: str, divisor: str
) -> None:
    check = checked(kind, number, text)
    assert check.outcome == "not attempted"
    assert check.essential
    assert check.how in (
        f"it was not decided whether {divisor} may vanish",
        f"it was not decided whether {turned(divisor)} may vanish",
    )


def turned(difference: str) -> str:
    first, _, second = difference.partition(" - ")
    return f"{second} - {first}" if second else first


@pytest.mark.parametrize(
    ("kind", "facts"),
    [
        ("pair", ["omega_d"]),
        ("exchange", ["alpha", "beta", "alpha - beta"]),
        ("star", ["alpha", "beta", "gamma", "alpha - beta", "alpha - gamma", "beta - gamma"]),
        ("cubic", ["omega"]),
        ("rates", []),
    ],
)
def test_names_have_the_signs_and_the_order_of_their_regime(kind: str, facts: list[str]) -> None:
    case: Case = response_to(kind).cases[0]
    field = field_of(" ".join(name for mode in case.modes for name in mode.names))
    found = [fact for mode in case.modes for fact in facts_of_names(field, mode)]
    assert [str(fact.element) for fact in found] == facts
    assert all(fact.relation == ">" for fact in found)
    assert ParameterDomain(field, tuple(found)).contradiction() is None


def test_a_name_in_a_formula_needs_a_definition() -> None:
    response = response_to("exchange")
    spoiled = with_case(response, 0, quantities=response.cases[0].quantities[:1])
    assert undefined_name(spoiled, spoiled.cases[0]) == "beta"
    other = with_formula(response, 0, ("solution", 0), read_formula("q*t", names=frozenset("qt")))
    assert undefined_name(other, other.cases[0]) == "q"
    assert defined_check(other, other.cases[0]).how == "q has no definition"


def test_roots_under_a_root_and_under_a_sign_are_no_rational_squares() -> None:
    response = solved.response_to("masses")
    (case,) = response.cases
    assert defined_check(response, case).outcome == "proved"
