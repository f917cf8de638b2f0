"""Text is read as ordinary typed mathematics, or refused at the right place."""

from __future__ import annotations

from fractions import Fraction
from itertools import product

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.errors import InputError, Place
from closedform.notation.builder import DEEPEST
from closedform.notation.errors import (
    AmbiguousFormulaError,
    FormulaDepthError,
    FormulaError,
    FormulaLengthError,
    FormulaSyntaxError,
    NotFiniteError,
    SizeError,
    UndeclaredNameError,
)
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
)
from closedform.notation.mistakes import MISTAKES
from closedform.notation.reader import LONGEST, read_formula
from tests.notation.formulas import NAMES, read, whole

T, X, W = Name("t"), Name("x1"), Name("omega_1")
ONE, TWO, THREE = whole(1), whole(2), whole(3)

READINGS: list[tuple[str, Expression]] = [
    ("2", TWO),
    ("0.1", Number(Fraction(1, 10))),
    (".5", Number(Fraction(1, 2))),
    ("2.", TWO),
    ("1e-3", Number(Fraction(1, 1000))),
    ("2.5E+2", whole(250)),
    ("-2^2", Negation(Power(TWO, TWO))),
    ("(-2)^2", Power(Negation(TWO), TWO)),
    ("2^3^2", Power(TWO, Power(THREE, TWO))),
    ("2**3", Power(TWO, THREE)),
    ("2^-1", Power(TWO, Negation(ONE))),
    ("t/2*3", Product((Quotient(T, TWO), THREE))),
    ("t*2/3", Quotient(Product((T, TWO)), THREE)),
    ("t/2/3", Quotient(Quotient(T, TWO), THREE)),
    ("-t*2", Negation(Product((T, TWO)))),
    ("t*-2", Product((T, Negation(TWO)))),
    ("t - 2 + 3", Sum((T, Negation(TWO), THREE))),
    ("t - (2 + 3)", Sum((T, Negation(Sum((TWO, THREE)))))),
    ("t - -2", Sum((T, Negation(Negation(TWO))))),
    ("--t", Negation(Negation(T))),
    ("+t", T),
    ("((t))", T),
    ("3t", Product((THREE, T))),
    ("2 cos(3t)", Product((TWO, Call("cos", Product((THREE, T)))))),
    ("2(t + 1)", Product((TWO, Sum((T, ONE))))),
    ("(t)(x1)", Product((T, X))),
    ("t exp(-t)", Product((T, Call("exp", Negation(T))))),
    ("2t*3", Product((TWO, T, THREE))),
    ("2t/3", Quotient(Product((TWO, T)), THREE)),
    ("1/(2t)", Quotient(ONE, Product((TWO, T)))),
    ("x1^2t", Product((Power(X, TWO), T))),
    ("x1^2 exp (t)", Product((Power(X, TWO), Call("exp", T)))),
    ("sqrt(2)", Call("sqrt", TWO)),
    ("cosh(t)^2", Power(Call("cosh", T), TWO)),
    ("omega_1*t", Product((W, T))),
    ("ω_1·t × 2", Product((W, T, TWO))),
    ("2ω_1 − t", Sum((Product((TWO, W)), Negation(T)))),
    ("λ", Name("lambda")),
    ("\tt \n +\r\n 1 ", Sum((T, ONE))),
]


@pytest.mark.parametrize(("text", "tree"), READINGS)
def test_text_is_read_as_typed_mathematics(text: str, tree: Expression) -> None:
    assert read(text) == tree


def test_a_decimal_is_exact() -> None:
    assert read("0.1000000000000000000000000000001") == Number(Fraction(10**30 + 1, 10**31))


def test_a_function_name_inside_a_longer_name_is_a_name() -> None:
    assert read("sinus + expo", "sinus", "expo") == Sum((Name("sinus"), Name("expo")))


@pytest.mark.parametrize(
    ("mistake", "text"), [(mistake, text) for mistake, _, texts in MISTAKES for text in texts]
)
def test_each_tabulated_mistake_is_told_as_such(mistake: str, text: str) -> None:
    with pytest.raises(FormulaSyntaxError) as caught:
        read(text, "x")
    assert caught.value.mistake == mistake
    assert caught.value.advice in str(caught.value)


def test_no_mistake_is_tabulated_twice() -> None:
    texts = [text for _, _, texts in MISTAKES for text in texts]
    assert len(set(texts)) == len(texts)


PIECES = ["2", "x", "sin", "+", "-", "*", "/", "^", "(", ")", "1.2.3", "$", " ", "exp(x)"]


def refusal(text: str) -> FormulaError | None:
    """Return the error with which a text is refused, if it is."""
    try:
        read(text, "x")
    except FormulaError as error:
        return error
    return None


@given(st.lists(st.sampled_from(PIECES), max_size=8).map("".join))
def test_any_row_of_pieces_is_read_or_refused_with_a_place(text: str) -> None:
    if error := refusal(text):
        assert error.place.line == 1
        assert error.place.column is not None
        assert 1 <= error.place.column <= len(text) + 1


def test_all_short_rows_of_pieces_are_read_or_refused() -> None:
    rows = [row for size in range(4) for row in product(PIECES, repeat=size)]
    refused = [row for row in rows if refusal("".join(row))]
    assert 0 < len(refused) < len(rows)


@given(st.text(max_size=30) | st.text(alphabet="2x+-*/^() ", max_size=40))
def test_any_text_is_read_or_refused(text: str) -> None:
    error = refusal(text)
    assert error is None or str(error)


PLACES = [
    ("2*(t + 1", 3),
    ("t */ 2", 4),
    ("t +", 4),
    ("t # 2", 3),
    ("t + y", 5),
    ("1.2.3*t", 1),
    ("1/2t", 2),
    ("t(2)", 2),
    ("exp(-t)) + 1", 8),
]


@pytest.mark.parametrize(("text", "column"), PLACES)
def test_the_caret_stands_below_the_slip(text: str, column: int) -> None:
    with pytest.raises(FormulaError) as caught:
        read(text)
    assert caught.value.place == Place(line=1, column=column, excerpt=text)
    assert str(caught.value).endswith(f"\n  {text}\n  {' ' * (column - 1)}^")


def test_lines_are_counted() -> None:
    with pytest.raises(UndeclaredNameError) as caught:
        read("t +\n  2*y\n + 1")
    assert caught.value.place == Place(line=2, column=5, excerpt="  2*y")


def test_a_place_in_a_file_is_carried_on() -> None:
    start = Place("bench.toml", "outputs.drift", 7, 10, 'drift = "t + y"')
    with pytest.raises(UndeclaredNameError) as caught:
        read_formula("t + y", names=NAMES, place=start)
    assert caught.value.place == Place("bench.toml", "outputs.drift", 7, 14, 'drift = "t + y"')
    assert str(caught.value).startswith("bench.toml, outputs.drift, line 7, column 14: the name")


def test_a_second_line_of_a_formula_in_a_file_is_the_next_line_of_the_file() -> None:
    start = Place("bench.toml", "outputs.drift", 7, 10, "drift = '''t +")
    with pytest.raises(UndeclaredNameError) as caught:
        read_formula("t +\n y", names=NAMES, place=start)
    assert caught.value.place.line == 8
    assert caught.value.place.column == 2


@pytest.mark.parametrize("text", ["1/2t", "1/-2t", "t/2(t+1)", "t*t/3cos(t)", "2*t/3t^2"])
def test_division_by_adjoining_factors_is_refused(text: str) -> None:
    with pytest.raises(AmbiguousFormulaError) as caught:
        read(text)
    first, second = (read(way) for way in caught.value.ways)
    assert first != second


def test_the_two_ways_out_of_a_division_are_spelled_out() -> None:
    with pytest.raises(AmbiguousFormulaError) as caught:
        read("x1/2t")
    assert caught.value.ways == ("x1/(2*t)", "(x1/2)*t")


def test_a_number_that_ends_in_a_declared_name_is_refused() -> None:
    assert read("2e1", "x") == whole(20)
    with pytest.raises(AmbiguousFormulaError) as caught:
        read("2e1", "e1")
    assert caught.value.ways == ("2*e1", "2e+1")


@pytest.mark.parametrize("text", ["nan", "-inf", "Infinity", "NaN", "∞", "2*oo"])
def test_what_is_not_finite_is_no_value(text: str) -> None:
    with pytest.raises(NotFiniteError, match="finite exact numbers"):
        read(text)


def test_an_undeclared_name_is_told_with_its_neighbour() -> None:
    with pytest.raises(UndeclaredNameError, match="did you mean 'omega_1'") as caught:
        read("omega1")
    assert caught.value.nearest == "omega_1"


def test_an_undeclared_name_without_a_neighbour_is_told_with_all_names() -> None:
    with pytest.raises(UndeclaredNameError, match="declared here: lambda, omega_1, t, x1"):
        read("quite_another")


def test_a_name_among_numbers_is_told_as_such() -> None:
    with pytest.raises(UndeclaredNameError, match="only numbers may stand here"):
        read_formula("k", names=frozenset())


@pytest.mark.parametrize("name", ["pi", "e", "i"])
def test_well_known_constants_are_explained_unless_declared(name: str) -> None:
    with pytest.raises(UndeclaredNameError) as caught:
        read(f"2*{name}")
    assert "did you mean" not in str(caught.value)
    assert read(name, name) == Name(name)


def test_syntax_is_told_before_names() -> None:
    with pytest.raises(FormulaSyntaxError):
        read("y + * 2")


def test_python_is_no_formula() -> None:
    with pytest.raises(FormulaSyntaxError, match="character does not belong"):
        read("__import__('os').system('true')")


@pytest.mark.parametrize("opening", ["(", "-", "2^", "2/", "exp(", "2^-", "(-("])
def test_deep_nesting_is_refused(opening: str) -> None:
    with pytest.raises(FormulaDepthError) as caught:
        read((opening * LONGEST)[: LONGEST - 1] + "t")
    assert caught.value.limit == DEEPEST


@pytest.mark.parametrize("opening", ["(", "-", "2^", "2/", "exp("])
def test_nesting_up_to_the_limit_is_read(opening: str) -> None:
    text = opening * (DEEPEST // 2 - 1) + "t" + ")" * (DEEPEST // 2 - 1) * ("(" in opening)
    assert isinstance(read(text), (Name, Negation, Power, Quotient, Call))


def depth(expression: Expression) -> int:
    match expression:
        case Number() | Name():
            return 1
        case Negation(operand) | Call(_, operand):
            return 1 + depth(operand)
        case Sum(terms) | Product(terms):
            return 1 + max(map(depth, terms))
        case Quotient(left, right) | Power(left, right):
            return 1 + max(depth(left), depth(right))


@given(st.lists(st.sampled_from(["2/", "-", "2^", "(2-", "2*", "2 exp(", "2+"]), max_size=110))
def test_no_tree_is_deeper_than_the_limit(openings: list[str]) -> None:
    text = "".join(openings) + "t"
    try:
        tree = read(text + ")" * text.count("("))
    except (FormulaDepthError, AmbiguousFormulaError):
        return
    assert depth(tree) <= DEEPEST


def test_long_flat_formulas_are_read() -> None:
    terms = read("+".join(["t"] * 20_000))
    assert isinstance(terms, Sum)
    assert len(terms.terms) == 20_000
    factors = read("*".join(["t"] * 20_000))
    assert isinstance(factors, Product)
    assert len(factors.factors) == 20_000


def test_a_formula_beyond_the_limit_is_refused() -> None:
    with pytest.raises(FormulaLengthError) as caught:
        read("1" + " " * LONGEST)
    assert (caught.value.length, caught.value.limit) == (LONGEST + 1, LONGEST)


@pytest.mark.parametrize("text", ["1e999999999", "1e-1001", "9" * 1001, "1e" + "9" * 500])
def test_numbers_beyond_the_limits_are_refused(text: str) -> None:
    with pytest.raises(SizeError):
        read(text)


def test_every_refusal_is_an_input_error() -> None:
    assert issubclass(FormulaError, InputError)
