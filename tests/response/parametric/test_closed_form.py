"""Functions with parameters are written the short way, and keep their value."""

from __future__ import annotations

import pytest
from flint import arb, ctx
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from closedform.notation.evaluation import enclose
from closedform.notation.expression import Expression, Name, operations
from closedform.notation.plain import plain
from closedform.notation.reader import read_formula
from closedform.response.parametric.closed_form import Term, closed_form, fronted_matrix
from tests.rational_elements import element, field_of, points
from tests.response.parametric.functions import (
    CIRCULAR,
    CLASSICS,
    OSCILLATOR,
    osc,
    plain_terms,
    powers,
    sums,
    value_at,
)

SMALL = field_of("a b c")
POINTS = points((*SMALL.parameters, "t"))


def read(field_names: tuple[str, ...], text: str) -> Expression:
    return read_formula(text, names=frozenset({*field_names, "t"}))


@pytest.mark.parametrize("name", CLASSICS)
def test_a_classic_is_as_short_as_by_hand(name: str) -> None:
    field, terms, by_hand = CLASSICS[name]
    formula = closed_form(field, terms, "t")
    assert operations(formula) <= operations(read(field.parameters, by_hand)), plain(formula)


@pytest.mark.parametrize("name", CLASSICS)
@given(st.data())
def test_a_classic_keeps_its_value(name: str, data: st.DataObject) -> None:
    ctx.prec = 200
    field, terms, by_hand = CLASSICS[name]
    at = data.draw(points((*field.parameters, "t")))
    exact = value_at(field, terms, at)
    assume(exact.is_finite())
    formula = closed_form(field, terms, "t")
    for written in (formula, read(field.parameters, by_hand)):
        ball = enclose(written, at)
        assert ball.is_finite()
        assert ball.overlaps(exact)


@pytest.mark.parametrize(
    "name",
    [
        "light damping, named",
        "light damping",
        "heavy damping",
        "critical damping",
        "critical damping from rest",
        "no damping",
        "bolus",
        "bolus, tissue",
        "loss to two sides",
        "infusion",
        "series circuit, current",
        "series circuit, charge",
        "one tank, filled",
        "one tank, time constant",
        "two tanks",
        "two equal tanks",
        "two equal tanks, the upper full",
    ],
)
def test_the_form_a_person_would_write(name: str) -> None:
    field, terms, by_hand = CLASSICS[name]
    assert plain(closed_form(field, terms, "t")) == by_hand


@given(sums(SMALL), POINTS)
def test_the_value_is_kept_and_the_text_reads_back(terms: list[Term], at: dict[str, arb]) -> None:
    ctx.prec = 300
    exact = value_at(SMALL, terms, at)
    assume(exact.is_finite())
    formula = closed_form(SMALL, terms, "t")
    back = read(SMALL.parameters, plain(formula))
    assert plain(back) == plain(formula)
    for written in (formula, back):
        ball = enclose(written, at)
        assert ball.is_finite()
        assert ball.overlaps(exact)


@given(sums(SMALL))
def test_terms_that_cancel_leave_nothing(terms: list[Term]) -> None:
    opposite = [Term(-t.amount, t.power, t.rate, t.kernel, t.frequency) for t in terms]
    assert plain(closed_form(SMALL, [*terms, *opposite], "t")) == "0"


def test_another_letter_for_the_time() -> None:
    terms = plain_terms(SMALL, ("a", "-b"))
    assert plain(closed_form(SMALL, terms, "tau")) == "a*exp(-b*tau)"


def transition() -> list[list[list[Term]]]:
    entries = [
        [("1", "delta/omega_d"), ("0", "1/omega_d")],
        [("0", "-omega_n^2/omega_d"), ("1", "-delta/omega_d")],
    ]
    return [[osc(even, odd, "-delta", CIRCULAR, "omega_d") for even, odd in row] for row in entries]


def test_what_all_entries_share_stands_in_front() -> None:
    entries = transition()
    written = tuple(tuple(closed_form(OSCILLATOR, terms, "t") for terms in row) for row in entries)
    front, rows = fronted_matrix(OSCILLATOR, entries, written, "t")
    assert front is not None
    assert plain(front) == "exp(-delta*t)/omega_d"
    assert [[plain(entry) for entry in row] for row in rows] == [
        ["omega_d*cos(omega_d*t) + delta*sin(omega_d*t)", "sin(omega_d*t)"],
        ["-omega_n^2*sin(omega_d*t)", "omega_d*cos(omega_d*t) - delta*sin(omega_d*t)"],
    ]


def test_a_denominator_that_all_entries_share_stands_in_front() -> None:
    field = field_of("k21 k12 alpha beta")
    over = "/(alpha - beta)"
    slow, fast = f"(alpha - k21){over}", f"(k21 - beta){over}"
    entries = [
        [
            plain_terms(field, (slow, "-alpha"), (fast, "-beta")),
            plain_terms(field, (f"-k21{over}", "-alpha"), (f"k21{over}", "-beta")),
        ],
        [
            plain_terms(field, (f"-k12{over}", "-alpha"), (f"k12{over}", "-beta")),
            plain_terms(field, (fast, "-alpha"), (slow, "-beta")),
        ],
    ]
    written = tuple(tuple(closed_form(field, terms, "t") for terms in row) for row in entries)
    front, rows = fronted_matrix(field, entries, written, "t")
    assert front is not None
    assert plain(front) in {"1/(alpha - beta)", "1/(beta - alpha)"}
    before = sum(operations(entry) for row in written for entry in row)
    assert sum(operations(entry) for row in rows for entry in row) < before - 3


@settings(max_examples=15)
@given(st.lists(sums(SMALL), min_size=2, max_size=2), POINTS)
def test_the_front_times_the_entries_is_the_matrix(
    pair: list[list[Term]], at: dict[str, arb]
) -> None:
    ctx.prec = 300
    written = (tuple(closed_form(SMALL, terms, "t") for terms in pair),)
    front, rows = fronted_matrix(SMALL, [pair], written, "t")
    for terms, entry in zip(pair, rows[0], strict=True):
        exact = value_at(SMALL, terms, at)
        assume(exact.is_finite())
        ball = enclose(entry, at) * (1 if front is None else enclose(front, at))
        assert ball.is_finite()
        assert ball.overlaps(exact)


def test_nothing_in_front_where_nothing_is_shared() -> None:
    entries = [[powers(SMALL, "-a", "1"), powers(SMALL, "-b", "1")]]
    written = ((Name("x"), Name("y")),)
    assert fronted_matrix(SMALL, entries, written, "t") == (None, written)


def test_repeated_terms_are_added_up() -> None:
    terms = [Term(element(SMALL, a), 0, element(SMALL, "-c")) for a in ("a", "b", "-a")]
    assert plain(closed_form(SMALL, terms, "t")) == "b*exp(-c*t)"
