"""Values put into solutions: the case, exact numbers, certified decimals, formulas in numbers."""

from __future__ import annotations

from fractions import Fraction
from functools import cache

import pytest
from flint import arb, ctx
from hypothesis import given
from hypothesis import strategies as st

import closedform
from closedform.algebra.enclosure import UnsettledError, ball_of, exact_decimal
from closedform.algebra.surds import SurdSum
from closedform.model.evaluation import at_values
from closedform.model.parametric import ValueSet
from closedform.notation import enclose, read_formula
from closedform.notation.expression import names_in
from closedform.notation.plain import plain
from closedform.response.parametric.in_numbers import decimal_formula
from closedform.response.parametric.numbers import (
    NumbersAt,
    ValuesNotCoveredError,
    case_at,
    numbers_at,
    numbers_of,
)
from closedform.response.response import respond
from closedform.response.sampling import default_times, sampled, surd_decimal
from closedform.verification.parametric.numbers import numbers_check
from tests.response.parametric.solved import MODELS, VALUES, model, response_to

DIGITS = 6
each_model = pytest.mark.parametrize("name", MODELS)


@cache
def numbers(name: str) -> tuple[NumbersAt, ...]:
    return numbers_of(response_to(name), digits=DIGITS)


def row_of(name: str, label: int) -> NumbersAt:
    return numbers(name)[label - 1]


def texts(row: NumbersAt) -> list[str]:
    return [plain(written.formula) for written in (*row.solution, *row.outputs)]


def whole(number: int | str) -> SurdSum:
    return SurdSum.rational(Fraction(number))


# --- decimals ---------------------------------------------------------------------------------


@each_model
def test_every_row_has_the_decimals_of_the_model_solved_in_numbers(name: str) -> None:
    response = response_to(name)
    assert len(numbers(name)) == len(VALUES[name])
    for row in numbers(name):
        solved = respond(at_values(response.model, dict(row.values)))
        states = sampled(solved.state, row.times, DIGITS)
        outputs = [[]] * len(states)
        if solved.output is not None:
            outputs = sampled(solved.output, row.times, DIGITS)
        assert [list(decimals) for decimals in row.rows] == [
            own + more for own, more in zip(states, outputs, strict=True)
        ]
        check = numbers_check(response, row, digits=DIGITS)
        assert check.outcome == "enclosed", check.how


def test_a_decimal_that_is_wrong_is_refuted() -> None:
    row = row_of("damped", 1)
    spoiled = (*row.rows[:1], ("0.923622", *row.rows[1][1:]), *row.rows[2:])
    wrong = NumbersAt(
        row.label,
        row.values,
        row.case,
        row.quantities,
        row.solution,
        row.outputs,
        row.times,
        spoiled,
    )
    check = numbers_check(response_to("damped"), wrong, digits=DIGITS)
    assert check.outcome == "refuted"
    assert "x at t = 1/5" in check.how


@each_model
def test_the_initial_values_are_exact(name: str) -> None:
    response = response_to(name)
    for row in numbers(name):
        assert row.times[0].is_zero
        initial = at_values(response.model, dict(row.values)).initial
        for decimal, value in zip(row.rows[0], initial, strict=False):
            assert decimal == surd_decimal(value, DIGITS)


def test_functions_that_vanish_or_stand_still_are_exact() -> None:
    """x1 - x2 is 0 where both decay alike; x3 does not move, and is 1/3 to all digits."""
    equal = row_of("apart", 1)
    assert {row[3] for row in equal.rows} == {"0"}
    assert {row[2] for row in equal.rows} == {"0.333333"}
    assert texts(equal)[3] == "0"
    other = row_of("apart", 2)
    assert {row[2] for row in other.rows} == {"1.41421"}
    assert texts(other)[3] == "-exp(-t)"


def test_a_function_that_vanishes_at_one_instant_alone_is_exact_there() -> None:
    """x = (1 - t) e^(-t) with the velocity -2."""
    response = response_to("damped")
    given_values = {"m": 1, "c": 2, "k": 1, "x0": 1, "v0": -2}
    row = numbers_at(
        response,
        ValueSet("", tuple((n, whole(v)) for n, v in given_values.items())),
        digits=DIGITS,
        times=(whole(1), whole(2)),
    )
    assert row.rows[0][0] == "0"
    assert row.rows[1][0] == "-0.135335"
    assert texts(row)[0] == "exp(-t)*(1 - t)"


def test_instants_are_those_of_the_model_or_suit_the_first_row() -> None:
    stated = model("damped", values=VALUES["damped"], times=[1, "sqrt(2)"])
    found = numbers_of(closedform.respond(stated), digits=DIGITS)
    assert {row.times for row in found} == {(whole(1), SurdSum.of({2: Fraction(1)}))}
    own = numbers("damped")
    solved = respond(at_values(response_to("damped").model, dict(own[0].values)))
    assert {row.times for row in own} == {default_times(solved)}


def test_the_values_of_the_parameters_come_first_and_a_row_may_use_them() -> None:
    parameters = {n: {"value": 1} for n in ("x0", "v0")} | {
        "m": {"assume": "positive", "value": 2},
        "k": {"assume": "positive", "value": 8},
        "c": {"assume": "nonnegative", "value": 1},
    }
    stated = model("damped", parameters=parameters, values=[{"label": "undamped", "c": 0}])
    own, undamped = numbers_of(closedform.respond(stated), digits=DIGITS)
    assert (own.label, undamped.label) == ("", "undamped")
    assert dict(own.values)["c"] == whole(1)
    assert texts(undamped)[0] == "cos(2*t) + 0.5*sin(2*t)"
    assert numbers_of(closedform.respond(model("damped")), digits=DIGITS) == ()


# --- the case ---------------------------------------------------------------------------------


CASES = {
    "damped": [0, 1, 2, 0, 2, 0, 0, 1],
    "restated": [0, 0, 1, 2, 0],
    "depot": [1, 0, 1, 1, 0],
    "decay": [0, 1, 2, 3, 4, 0, 3, 0],
    "circuit": [0, 0, 1, 2],
}


@pytest.mark.parametrize(("name", "kinds"), CASES.items())
def test_the_case_is_found_exactly_however_near_a_border(name: str, kinds: list[int]) -> None:
    """Cases are known by their numbers of equations and the regime, whatever their order."""
    found = [row.case for row in numbers(name)]
    equal = {(a, b) for a, x in enumerate(kinds) for b, y in enumerate(kinds) if x == y}
    assert {(a, b) for a, x in enumerate(found) for b, y in enumerate(found) if x == y} == equal


def test_values_outside_of_the_domain_are_refused() -> None:
    response = response_to("damped")
    outside = ValueSet("heavy", tuple((n, whole(-1)) for n in response.model.field.parameters))
    with pytest.raises(ValuesNotCoveredError) as caught:
        case_at(response, outside)
    assert caught.value.label == "heavy"
    assert "damped: no case of the solution covers the values of the row 'heavy'" in str(
        caught.value
    )
    assert "m = -1" in str(caught.value)


@pytest.mark.parametrize("name", ["m", "k"])
def test_values_at_a_pole_are_refused_and_not_divided_by(name: str) -> None:
    response = response_to("damped")
    values = {n: whole(int(n != name)) for n in response.model.field.parameters}
    with pytest.raises(ValuesNotCoveredError):
        numbers_at(response, ValueSet("", tuple(values.items())), digits=DIGITS)


def test_digits_that_no_precision_settles_are_an_error() -> None:
    """The slow rate has no part in this motion, and the instants are those of slow ones."""
    response = response_to("damped")
    root = SurdSum.of({249999: Fraction(1)})
    values = {"m": whole(1), "c": whole(1000), "k": whole(1), "x0": whole(1)}
    given_values = ValueSet("", (*values.items(), ("v0", whole(-500) - root)))
    with pytest.raises(UnsettledError):
        numbers_at(response, given_values, digits=DIGITS)
    early = numbers_at(response, given_values, digits=DIGITS, times=(whole("1/1000"),))
    assert early.rows[0][0] == "0.367880"
    assert texts(early)[0] == "exp(-999.999*t)"


@given(st.permutations(["m", "c", "k", "x0", "v0"]))
def test_the_order_in_which_values_are_given_does_not_matter(order: list[str]) -> None:
    first = response_to("damped").model.value_sets[0]
    values = dict(first.values)
    shuffled = ValueSet(first.label, tuple((name, values[name]) for name in order))
    found = numbers_at(response_to("damped"), shuffled, digits=DIGITS)
    assert found == row_of("damped", 1)


# --- names and formulas -------------------------------------------------------------------------


def test_names_are_exact_where_they_are_surds() -> None:
    light, critical, *_ = numbers("damped")
    assert {q.name: (q.decimal, q.exact) for q in light.quantities} == {
        "delta": ("0.25", whole("1/4")),
        "omega_d": ("1.98431", SurdSum.of({7: Fraction(3, 4)})),
    }
    assert [(q.name, q.decimal) for q in critical.quantities] == [("delta", "2")]
    equal = {q.name: q.exact for q in row_of("compartments", 2).quantities}
    assert equal["beta"] == whole(1)  # a root of a cubic that comes apart at these values
    assert equal["alpha"] == SurdSum.of({1: Fraction(2), 3: Fraction(1)})
    assert {q.exact for q in row_of("compartments", 1).quantities} == {None}


WRITTEN = [
    ("damped", 1, "exp(-0.25*t)*(cos(1.98431*t) + 1.13389*sin(1.98431*t))", True),
    ("damped", 2, "exp(-2*t)*(1 + 4*t)", False),
    ("damped", 3, "2*exp(-t) - exp(-4*t)", False),
    ("damped", 4, "cos(2*t)", False),
    ("decay", 2, "5*exp(-t)", False),
    ("masses", 3, "cos(t)", False),
    (
        "free masses",
        1,
        "1.66667 + 0.333333*t - 0.666667*cos(1.22474*t) + 2.17732*sin(1.22474*t)",
        True,
    ),
    ("compartments", 2, "1.57735*exp(-3.73205*t) + 0.422650*exp(-0.267949*t)", True),
]


@pytest.mark.parametrize(("name", "label", "formula", "rounded"), WRITTEN)
def test_formulas_have_their_numbers_in_place(
    name: str, label: int, formula: str, *, rounded: bool
) -> None:
    first = row_of(name, label).solution[0]
    assert (plain(first.formula), first.rounded) == (formula, rounded)


def test_fast_and_slow_rates_keep_their_digits_and_near_ones_their_form() -> None:
    """-500 + 499.999 would have one digit; rates of 2 ± 10^-6 would read alike."""
    response = response_to("damped")

    def written(m: int, c: str, k: int) -> str:
        values = {"m": m, "c": c, "k": k, "x0": 1, "v0": 0}
        given_values = ValueSet("", tuple((n, whole(v)) for n, v in values.items()))
        return texts(numbers_at(response, given_values, digits=DIGITS))[1]

    assert written(1, "1000", 1) == ("0.00100000*exp(-999.999*t) - 0.00100000*exp(-0.00100000*t)")
    assert "exp(-2*t)*sinh(1.41421*10^(-6)*t)" in written(1, "4.000000000001", 4)


@each_model
def test_formulas_in_numbers_have_the_values_of_the_rows(name: str) -> None:
    """To 20 digits, far more than lost by rounding to 30 even where terms cancel a little."""
    response = response_to(name)
    for given_values in response.model.value_sets:
        if any(d > 1 for _, value in given_values.values for d, _ in value.terms):
            continue
        row = numbers_at(response, given_values, digits=60)
        for t, decimals in zip(row.times, row.rows, strict=True):
            for written, decimal in zip((*row.solution, *row.outputs), decimals, strict=True):
                assert close_at(plain(written.formula), response.model.time, t, decimal)


def close_at(formula: str, time: str, t: SurdSum, decimal: str) -> bool:
    with ctx.workprec(400):
        read = read_formula(formula, names=frozenset({time}))
        assert names_in(read) <= {time}
        gap = abs(enclose(read, {time: ball_of(t)}) - arb(decimal))
        return bool(gap < arb(10) ** -20 * (1 + abs(arb(decimal))))


@given(st.fractions(), st.integers(1, 12))
def test_a_decimal_reads_back_as_itself(value: Fraction, digits: int) -> None:
    text = exact_decimal(value, digits)
    read = enclose(read_formula(plain(decimal_formula(text)), names=frozenset()), {})
    assert abs(read - ball_of(Fraction(text))) < arb(10) ** -9 * (1 + abs(ball_of(Fraction(text))))


@given(st.integers(1, 9), st.integers(0, 12), st.integers(1, 9), st.fractions(-3, 3))
def test_any_oscillator_agrees_with_its_numeric_solution(
    m: int, c: int, k: int, x0: Fraction
) -> None:
    response = response_to("damped")
    values = {"m": m, "c": c, "k": k, "x0": x0.limit_denominator(50), "v0": 1}
    row = numbers_at(
        response,
        ValueSet("", tuple((n, SurdSum.rational(Fraction(v))) for n, v in values.items())),
        digits=12,
    )
    gap = 4 * m * k - c * c
    sign = "!=" if not gap else "<" if gap < 0 else ">"
    condition = response.cases[row.case].condition
    assert ("==" in condition) == (gap == 0)
    if gap:
        assert sign in condition
    assert numbers_check(response, row, digits=12).outcome == "enclosed"
