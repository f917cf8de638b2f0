"""Abbreviations are used where they shorten the whole, and change no value."""

from __future__ import annotations

from collections.abc import Sequence

import pytest
from flint import arb, ctx
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from closedform.algebra.field import Scalar
from closedform.notation.evaluation import enclose
from closedform.notation.expression import operations
from closedform.notation.plain import plain
from closedform.response.parametric.closed_form import Term, closed_form
from closedform.response.parametric.extent import are_long, estimate
from closedform.response.parametric.rewriting import (
    Rewriting,
    rewriting_for,
    rewritten,
    shortest,
)
from tests.rational_elements import element, field_of, points
from tests.response.parametric.functions import CIRCULAR, pair, plain_terms, sums, value_at

FIELD = field_of("m c k delta omega_n zeta omega_d x0 v0")
SMALL = field_of("a b c d")


def of(text: str) -> Scalar:
    return element(FIELD, text)


DELTA = rewriting_for(FIELD, "delta", of("c/(2*m)"))
OMEGA = rewriting_for(FIELD, "omega_n", of("k/m"), power=2)


def oscillator() -> list[list[Term]]:
    amounts = [
        ("1", "c/(2*m*omega_d)"),
        ("0", "1/omega_d"),
        ("0", "-k/(m*omega_d)"),
        ("1", "-c/(2*m*omega_d)"),
        ("x0", "(2*m*v0 + c*x0)/(2*m*omega_d)"),
        ("v0", "-(2*k*x0 + c*v0)/(2*m*omega_d)"),
    ]
    return [pair(FIELD, e, o, "-c/(2*m)", CIRCULAR, "omega_d") for e, o in amounts]


def test_an_abbreviation_gives_each_of_its_parameters() -> None:
    assert [(r.parameter, r.replacement) for r in DELTA] == [
        ("m", of("c/(2*delta)")),
        ("c", of("2*m*delta")),
    ]
    assert [(r.parameter, r.replacement) for r in OMEGA] == [
        ("m", of("k/omega_n^2")),
        ("k", of("m*omega_n^2")),
    ]


@pytest.mark.parametrize(
    ("value", "given_parameters"),
    [
        ("c*k + m", ["m", "c", "k"]),
        ("c^2 - m", ["m"]),
        ("1/(c + k)", ["c", "k"]),
        ("(c + k)/(c - k)", ["c", "k"]),
        ("c^2", []),
    ],
)
def test_parameters_that_occur_once_are_given(value: str, given_parameters: list[str]) -> None:
    found = rewriting_for(FIELD, "zeta", of(value))
    assert [r.parameter for r in found] == given_parameters
    for rewriting in found:
        back = FIELD.substituted(rewriting.replacement, {"zeta": of(value)})
        assert back == FIELD.symbol(rewriting.parameter)


def test_a_cheap_definition_is_used() -> None:
    result = shortest(FIELD, oscillator(), DELTA, {"delta": 2}, "t")
    assert result.names == ("delta",)
    assert [r.parameter for r in result.rewritings] == ["c"]
    assert plain(result.formulas[4]) == (
        "exp(-delta*t)*(x0*cos(omega_d*t) + (v0 + delta*x0)*sin(omega_d*t)/omega_d)"
    )


def test_a_dear_definition_is_not_used() -> None:
    result = shortest(FIELD, oscillator(), [*DELTA, *OMEGA], {"delta": 99, "omega_n": 99}, "t")
    assert result.names == ()
    assert result.formulas == tuple(closed_form(FIELD, terms, "t") for terms in oscillator())


def test_long_functions_are_rewritten_and_written_as_short_ones_are() -> None:
    several = oscillator() * 20
    assert are_long(several)
    assert not are_long(oscillator())
    short = shortest(FIELD, oscillator(), [*DELTA, *OMEGA], {"delta": 2, "omega_n": 2}, "t")
    long = shortest(FIELD, several, [*DELTA, *OMEGA], {"delta": 2, "omega_n": 2}, "t")
    assert set(short.names) <= set(long.names)
    assert long.functions == rewritten(FIELD, several, long.used)
    assert long.formulas == tuple(closed_form(FIELD, terms, "t") for terms in long.functions)


def test_the_estimate_counts_operations_of_factors() -> None:
    (terms,) = (plain_terms(FIELD, ("(m + c)/k^2", "-m"), ("x0", "0")),)
    assert estimate([terms]) == 6


def test_a_name_may_stand_in_rates_alone() -> None:
    field = field_of("R V k10 k12 s y0 z0")
    value = element(field, "k10 + k12")
    functions = [
        plain_terms(field, ("k12*y0", "-k10 - k12"), ("k10*z0", "-2*k10 - 2*k12")),
        plain_terms(field, ("k10*y0", "-k10 - k12"), ("k12", "-3*k10 - 3*k12")),
    ]
    result = shortest(field, functions, rewriting_for(field, "s", value), {"s": 1}, "t")
    assert result.names == ("s",)
    assert [plain(formula) for formula in result.formulas] == [
        "k12*y0*exp(-s*t) + k10*z0*exp(-2*s*t)",
        "k10*y0*exp(-s*t) + k12*exp(-3*s*t)",
    ]


def test_a_definition_brings_the_names_in_it_along() -> None:
    zeta = [r for r in rewriting_for(FIELD, "zeta", of("c/(2*m*omega_n)")) if r.parameter == "c"]
    costs = {"zeta": -99, "omega_n": 1}
    result = shortest(FIELD, oscillator(), [*zeta, *OMEGA], costs, "t")
    assert result.names == ("zeta", "omega_n")


def test_the_square_of_a_name_is_put_in() -> None:
    functions = [plain_terms(FIELD, ("k/m", "-k/m"), ("2*k/m + x0", "-2*k/m"))]
    result = shortest(FIELD, functions, OMEGA, {"omega_n": 0}, "t")
    assert operations(result.formulas[0]) <= operations(closed_form(FIELD, functions[0], "t"))
    (terms,) = shortest(FIELD, functions, OMEGA[1:], {"omega_n": -50}, "t").functions
    assert terms[0].rate == of("-omega_n^2")


def test_a_false_replacement_is_refused() -> None:
    false = Rewriting("delta", "c", of("3*m*delta"), of("c/(2*m)"))
    with pytest.raises(ArithmeticError):
        shortest(FIELD, oscillator(), [false], {"delta": 0}, "t")


VALUES = ["a*b", "a/b", "a + b", "a/(2*b)", "1/(a + b)", "(a - b)/a"]


def rewritings(value: str, power: int) -> Sequence[Rewriting]:
    return rewriting_for(SMALL, "d", element(SMALL, value), power)


@settings(max_examples=20)
@given(st.lists(sums(field_of("a b c")), max_size=2), st.sampled_from(VALUES), st.data())
def test_no_value_is_changed(functions: list[list[Term]], value: str, data: st.DataObject) -> None:
    ctx.prec = 300
    functions = [[into_small(term) for term in terms] for terms in functions]
    power = data.draw(st.sampled_from([1, 2]))
    at = data.draw(points(("a", "b", "c", "t")))
    square = SMALL.enclose_at(element(SMALL, value), {**at, "d": arb(0)})
    assume(square > 0)
    at["d"] = square if power == 1 else square.sqrt()
    candidates = rewritings(value, power)
    best = shortest(SMALL, functions, candidates, {"d": 1}, "t")
    used = shortest(SMALL, functions, candidates, {"d": -1000}, "t")
    for result in (best, used):
        for terms, formula in zip(functions, result.formulas, strict=True):
            exact = value_at(SMALL, terms, at)
            assume(exact.is_finite())
            ball = enclose(formula, at)
            assert ball.is_finite()
            assert ball.overlaps(exact)
    before = sum(operations(closed_form(SMALL, terms, "t")) for terms in functions)
    cost = sum(map(operations, best.formulas)) + len(best.names)
    assert cost <= before


def into_small(term: Term) -> Term:
    field = field_of("a b c")
    frequency = term.frequency
    return Term(
        field.into(SMALL, term.amount),
        term.power,
        field.into(SMALL, term.rate),
        term.kernel,
        None if frequency is None else field.into(SMALL, frequency),
    )
