"""Equations are read side by side, or refused at the right place."""

from __future__ import annotations

import pickle
from collections.abc import Callable
from itertools import product

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.errors import Place
from closedform.notation.equation import read_equation, read_jet_formula, read_signal_formula
from closedform.notation.errors import (
    FormulaError,
    FormulaLengthError,
    FormulaSyntaxError,
    NotFiniteError,
    UndeclaredNameError,
)
from closedform.notation.expression import FUNCTIONS, SIGNALS, Call, Expression, Name, operations
from closedform.notation.jets import found_jets, jet_of, spelled
from closedform.notation.plain import plain
from closedform.notation.reader import LONGEST, read_formula
from closedform.notation.timed_mistakes import EQUALS_MISTAKES, TIMED_MISTAKES
from tests.notation.formulas import formulas

CONSTANTS = frozenset({"m", "c", "k", "F0", "tau", "delta"})
VARYING = frozenset({"x", "x1", "omega_1", "u", "F"})


def read(text: str, place: Place | None = None) -> tuple[Expression, Expression]:
    """Return the sides of an equation in `CONSTANTS` and `VARYING`."""
    return read_equation(
        text, time="t", constants=CONSTANTS, functions=VARYING, place=place or Place()
    )


def read_open(text: str) -> tuple[Expression, Expression]:
    """Return the sides of an equation whose unknowns are yet to be found."""
    return read_equation(text, time="t", constants=CONSTANTS, functions=None)


READINGS = [
    ("m*x'' + c*x' + k*x = F", "m*x'' + c*x' + k*x", "F"),
    ("m x’’ + c x′ = 0", "m*x'' + c*x'", "0"),
    ("x″ = x‴(t)", "x''", "x'''"),
    ("x''(t) = x ( t )", "x''", "x"),
    ("x1' = u(t - 2) + u'(t - tau)", "x1'", "u(t - 2) + u'(t - tau)"),
    ("ω_1″ = 2x'(t)", "omega_1''", "2*x'"),
    ("x'^2 = (x)", "x'^2", "x"),
    ("x = step(t - 2)*F0 + delta(t)", "x", "step(t - 2)*F0 + delta(t)"),
    ("delta*x = delta(t - 1)", "delta*x", "delta(t - 1)"),
    ("x(0) = 1", "x(0)", "1"),
    ("x(tau) = x(t - 1)", "x(tau)", "x(t - 1)"),
    ("x(t^2) = cos(t)", "x(t^2)", "cos(t)"),
    ("x(2*(t + 1)) = 1", "x(2*(t + 1))", "1"),
]


@pytest.mark.parametrize(("text", "left", "right"), READINGS)
def test_both_sides_are_read(text: str, left: str, right: str) -> None:
    assert tuple(map(plain, read(text))) == (left, right)


def test_jets_and_calls_are_nodes_of_the_tree() -> None:
    left, right = read("x1″ = u'(t - 2)")
    assert left == Name("x1''")
    assert right == Call("u'", read_formula("t - 2", names=frozenset("t")))
    assert read("delta = delta(t)") == (Name("delta"), Call("delta", Name("t")))


def test_unknowns_yet_to_be_found_may_have_any_other_name() -> None:
    left, right = read_open("q'(t) + v_1(t - 2) = z + k")
    assert found_jets(left) == (("q", 1), ("v_1", 0), ("t", 0))
    assert plain(right) == "z + k"


@pytest.mark.parametrize("text", ["q(x) = 1", "k(q - x) = 1", "q(0) = 1", "tan(t) = q"])
def test_only_what_has_the_time_in_brackets_is_taken_for_an_unknown(text: str) -> None:
    with pytest.raises(FormulaSyntaxError, match="a name stands before a bracket"):
        read_open(text)


@pytest.mark.parametrize("text", ["e^(-t) = x", "x = 2*pi"])
def test_no_number_is_taken_for_an_unknown(text: str) -> None:
    with pytest.raises(UndeclaredNameError, match="numbers here are rational"):
        read_open(text)


def test_what_is_not_finite_is_no_unknown() -> None:
    with pytest.raises(NotFiniteError):
        read_open("x = inf")


@pytest.mark.parametrize(
    ("mistake", "text"), [(mistake, text) for mistake, _, texts in TIMED_MISTAKES for text in texts]
)
def test_each_tabulated_mistake_is_told_as_such(mistake: str, text: str) -> None:
    with pytest.raises(FormulaSyntaxError) as caught:
        read(f"{text} = 0")
    assert caught.value.mistake == mistake
    assert caught.value.advice in str(caught.value)


@pytest.mark.parametrize(
    ("text", "advice"),
    [
        ("x = heaviside(t - 1)", "heaviside is not known; write step(t - a)"),
        ("x = 2*Heaviside (t - 1)", "Heaviside is not known; write step(t - a)"),
        ("x = dirac(t)", "dirac is not known; write delta(t - a)"),
        ("x = abs(t)", "abs is not known; the functions are exp, sin"),
    ],
)
def test_usual_functions_that_are_none_here_are_named(text: str, advice: str) -> None:
    with pytest.raises(FormulaSyntaxError) as caught:
        read_open(text)
    assert caught.value.advice.startswith(advice)


WRONG = [
    ("none", "x - 1", 6),
    ("none", "", 1),
    ("several", "x = u = 1", 7),
    ("double", "x == u", 3),
    ("assigned", "x := 1", 3),
    ("compared", "x <= 1", 3),
    ("bracketed", "(x = 1)", 4),
    ("empty", "= 1", 1),
    ("empty", "x' = ", 4),
    ("differential", "u = dx/dt", 5),
    ("differential", "d2x/dt2 = u", 1),
    ("differential", "m*d^2x/dt^2 = u", 3),
    ("differential", "d/dt(x) = u", 1),
    ("differential", "d(x)/dt = u", 1),
    ("differential", "dx(t)/dt = u", 1),
    ("differential", "dx1 / dt = u", 1),
    ("differential", "dω_1/dt = u", 1),
    ("differential", "d²x/dt² = u", 1),
]


@pytest.mark.parametrize(("kind", "text", "column"), WRONG)
@pytest.mark.parametrize("reading", [read, read_open])
def test_what_is_no_equation_is_told_with_its_place(
    reading: Callable[[str], object], kind: str, text: str, column: int
) -> None:
    with pytest.raises(FormulaSyntaxError) as caught:
        reading(text)
    assert (caught.value.mistake, caught.value.advice) == EQUALS_MISTAKES[kind]
    assert caught.value.place == Place(line=1, column=column, excerpt=text)
    assert str(pickle.loads(pickle.dumps(caught.value))) == str(caught.value)  # noqa: S301


def test_every_mistake_of_an_equation_is_tested() -> None:
    assert {kind for kind, _, _ in WRONG} == set(EQUALS_MISTAKES)


def test_a_quotient_of_declared_names_is_no_derivative() -> None:
    names = frozenset({"dx", "dt"})
    left, _ = read_equation("dx/dt = q", time="t", constants=names, functions=None)
    assert plain(left) == "dx/dt"


def test_dots_in_words_are_told_only_where_they_are_sure_to_be_meant() -> None:
    assert plain(read_open("mdot = x'")[0]) == "mdot"
    with pytest.raises(FormulaSyntaxError, match="written with dots"):
        read_open("m_dot = x'")
    with pytest.raises(UndeclaredNameError):
        read("mdot = x'")


def test_a_place_in_a_file_is_carried_on() -> None:
    line = """equations = ["m*x'' = y"]"""
    with pytest.raises(UndeclaredNameError) as caught:
        read("m*x'' = y", Place("bench.toml", "equations[1]", 3, 15, line))
    assert caught.value.place == Place("bench.toml", "equations[1]", 3, 23, line)


def test_an_undeclared_name_is_told_without_its_primes() -> None:
    with pytest.raises(UndeclaredNameError, match="the name 'omega1' is not declared; did you"):
        read("omega1' = 1")


def test_a_formula_in_jets_has_no_equals_sign() -> None:
    def reading(text: str) -> Expression:
        return read_jet_formula(text, time="t", constants=CONSTANTS, functions=VARYING)

    assert plain(reading("c*x'(t) - u(t - 1)")) == "c*x' - u(t - 1)"
    with pytest.raises(FormulaSyntaxError, match="character does not belong"):
        reading("x = 1")


def signal(text: str) -> Expression:
    return read_signal_formula(text, time="t", constants=frozenset({"F0", "delta"}))


def test_a_signal_has_steps_and_impulses() -> None:
    text = "F0*sin(2*t) + step(t - 2) + delta*delta(t - 1)"
    assert plain(signal(text)) == text
    assert signal("delta(t)") == Call("delta", Name("t"))


REFUSED = [
    ("x'", "character does not belong"),
    ("F0(t)", "before a bracket"),
    ("step", "without a bracket"),
    ("step t", "without a bracket"),
]


@pytest.mark.parametrize(("text", "words"), REFUSED)
def test_a_signal_has_no_jets(text: str, words: str) -> None:
    with pytest.raises(FormulaSyntaxError, match=words):
        signal(text)


def test_an_impulse_without_an_instant_is_refused() -> None:
    with pytest.raises(FormulaSyntaxError, match="without a bracket"):
        read_signal_formula("2*delta", time="t", constants=frozenset())


@pytest.mark.parametrize("text", ["x'", "x = 2", "x″", "x(t)", "step(x)", "delta(x)", "u(x - 2)"])
def test_an_ordinary_formula_has_nothing_of_it(text: str) -> None:
    with pytest.raises(FormulaSyntaxError):
        read_formula(text, names=frozenset({"x", "u", "t", "delta"}))


def test_signals_are_functions_where_names_are_checked() -> None:
    assert "step" in FUNCTIONS
    assert "delta" not in FUNCTIONS
    assert SIGNALS == ("step", "delta")


PIECES = ["2", "x", "k", "'", "u(t - 2)", "=", "+", "*", "/", "^", "(", ")", "sin", "delta", "$"]


def refusal(text: str) -> FormulaError | None:
    """Return the error with which an equation is refused, if it is."""
    try:
        read(text)
    except FormulaError as error:
        return error
    return None


@given(st.lists(st.sampled_from([*PIECES, " ", '"', "step", "(t)", "dx/dt"]), max_size=10))
def test_any_row_of_pieces_is_read_or_refused_with_a_place(pieces: list[str]) -> None:
    text = "".join(pieces)
    if error := refusal(text):
        assert error.place.line == 1
        assert error.place.column is not None
        assert 1 <= error.place.column <= len(text) + 1


def test_all_short_rows_of_pieces_are_read_or_refused() -> None:
    rows = [row for size in range(4) for row in product(PIECES, repeat=size)]
    texts = [f"{''.join(row)} = k" for row in rows]
    refused = [text for text in texts if refusal(text)]
    assert 0 < len(refused) < len(texts)


@given(st.text(max_size=30) | st.text(alphabet="2xt'=+-*/^() ", max_size=40))
def test_any_text_is_read_or_refused(text: str) -> None:
    error = refusal(text)
    assert error is None or str(error)


@given(formulas(), formulas())
def test_what_ordinary_formulas_say_is_said_on_both_sides(
    left: Expression, right: Expression
) -> None:
    names = frozenset({"t", "x1", "omega_1", "lambda"})
    sides = read_equation(
        f"{plain(left)} = {plain(right)}", time="t", constants=names, functions=frozenset("q")
    )
    assert sides == tuple(read_formula(plain(side), names=names) for side in (left, right))


@given(
    st.sampled_from(["x", "x1", "ω_1"]),
    st.lists(st.sampled_from("'’′″‴"), max_size=4).map("".join),
    st.sampled_from(["", "(t)"]),
)
def test_primes_are_counted(name: str, primes: str, at: str) -> None:
    left, _ = read(f"2*{name}{primes}{at} = 0")
    order = sum({"″": 2, "‴": 3}.get(sign, 1) for sign in primes)
    assert found_jets(left) == ((spelled(name), order),)
    assert jet_of(spelled(name + primes)) == (spelled(name), order)


def test_jets_are_found_in_the_order_of_reading() -> None:
    left, _ = read("x1'' + (u(t - 2) - x^k)/F + sin(x)*step(t) = 0")
    assert found_jets(left) == (*(("x1", 2), ("u", 0), ("t", 0), ("x", 0), ("k", 0), ("F", 0)),)


def test_a_long_equation_is_refused() -> None:
    with pytest.raises(FormulaLengthError):
        read("x = " + "1" * (LONGEST + 1))


@pytest.mark.parametrize("piece", ["x(", "d(", "q(t + ", "x(1 + "])
def test_repeated_openings_are_soon_refused(piece: str) -> None:
    text = piece * (LONGEST // 10) + " = 0"
    with pytest.raises(FormulaError):
        read_open(text)


COUNTED = [
    ("m*x'' + c*x'", 3),
    ("u(t - 2)", 2),
    ("3*step(t)", 2),
    ("-x'", 1),
]


@pytest.mark.parametrize(("text", "count"), COUNTED)
def test_a_jet_costs_no_operation_and_a_call_one(text: str, count: int) -> None:
    formula, _ = read(f"{text} = 0")
    assert operations(formula) == count
    assert plain(formula) == text
