"""Derivatives of printed formulas, and their values at an instant."""

from __future__ import annotations

import pytest
from flint import acb, acb_series, ctx

from closedform.derivation.driven.differentiation import derivative_of, times
from closedform.derivation.driven.join_steps import value_at
from closedform.derivation.proof.evaluation import ball_at
from closedform.notation import read_formula
from closedform.notation.expression import ONE, Name, Quotient, number
from closedform.notation.plain import plain

NAMES = frozenset({"t", "a", "w", "C_1", "C_2", "T"})
FORMULAS = (
    "3 - 5*exp(-t/10)/2",
    "exp(a*t)*(C_1*cos(w*t) + C_2*sin(w*t))/(2*w)",
    "-t^2*exp(-w*(t - T)/a)",
    "cosh(w*t) - t*sinh(a*(t - T))/3 + C_1/w",
    "(t^3 - 2*t)*cos(3*t - T)",
)


@pytest.mark.parametrize("text", FORMULAS)
def test_the_derivative_is_that_of_the_power_series(text: str) -> None:
    formula = read_formula(text, names=NAMES)
    with ctx.workprec(200):
        names = {"a": acb(2) / 3, "w": acb(5) / 7, "C_1": acb(3), "C_2": acb(-2), "T": acb(1)}
        t = acb(11) / 13
        series = ball_at(formula, {**names, "t": acb_series([t, acb(1)], 3)})
        found = ball_at(derivative_of(formula, "t"), {**names, "t": t})
        assert (acb_series(series)[1] - found).contains(0)


@pytest.mark.parametrize(
    ("text", "derived"),
    [
        ("3 - 5*exp(-t/10)/2", "exp(-t/10)/4"),
        ("a/w", "0"),
        ("a*cos(w*t)", "-a*w*sin(w*t)"),
    ],
)
def test_numbers_are_multiplied_and_signs_stand_outside(text: str, derived: str) -> None:
    assert plain(derivative_of(read_formula(text, names=NAMES), "t")) == derived


def test_what_is_no_solution_is_not_derived() -> None:
    with pytest.raises(TypeError):
        derivative_of(Quotient(ONE, Name("t")), "t")


def test_a_factor_above_and_below_cancels() -> None:
    half = read_formula("a/(2*w)", names=NAMES)
    assert plain(times([half, Name("w"), number(4)])) == "2*a"


@pytest.mark.parametrize(
    ("text", "at", "value"),
    [
        ("1 - exp(-(t - T)/a)", "T", "0"),
        ("3 - 5*exp(-t/10)/2", "10", "3 - 5*exp(-1)/2"),
        ("w*t^2 + sin(a*(t - 2))", "2", "4*w"),
        ("t - T", "2*T", "2*T - T"),
    ],
)
def test_an_instant_is_put_in_and_what_is_zero_left_out(text: str, at: str, value: str) -> None:
    found = value_at(read_formula(text, names=NAMES), "t", read_formula(at, names=NAMES))
    assert plain(found) == value
