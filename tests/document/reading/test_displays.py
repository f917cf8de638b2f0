"""What is displayed is read back as what it was, however it is broken; slips are not."""

from __future__ import annotations

import re

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.derivation.step import Matrix, Symbol
from closedform.notation.expression import ZERO, Expression, Name, Product
from tests.document.making import add, column, exp, matrix, neg, prod, q
from tests.document.reading.wide import LEAVES, formulas, read_again, rows, set_alone

FACTORS = (add("beta", neg("gamma")), add(*(prod(f"k_{n}", f"k_{n + 1}") for n in range(14))))


@given(formulas())
def test_a_formula_is_read_back_however_it_is_broken(formula: Expression) -> None:
    assert read_again(*set_alone(Name("q_9"), formula)) is None


@given(
    rows(),
    st.none() | LEAVES.filter(lambda leaf: leaf != ZERO),
    st.sampled_from(("auto", "entries")),
)
def test_a_matrix_is_read_back_whole_and_taken_apart(
    found: tuple[tuple[Expression, ...], ...], front: Expression | None, by: str
) -> None:
    assert read_again(*set_alone(Symbol("transition"), Matrix(found, front), by=by)) is None


def test_a_sum_beside_a_broken_bracket_keeps_its_own_bracket() -> None:
    statement, display = set_alone(Name("y"), prod(*FACTORS))
    assert r"(\beta - \gamma)\bigl(" in display.latex
    assert read_again(statement, display) is None
    spoiled = display.latex.replace(r"(\beta - \gamma)", r"\beta - \gamma")
    wrong = read_again(statement, display, spoiled)
    assert wrong is not None
    assert wrong.what == "it is not what was proved"


SHOWN = {
    "whole": set_alone(Name("y"), add(*(prod(n, f"k_{n}", exp(f"a_{n}")) for n in range(2, 14)))),
    "a fraction": set_alone(Name("y"), prod("1/2", add("a", "b"), exp(-3))),
    "columns": set_alone(
        Symbol("transition"),
        matrix(
            *(
                tuple(prod(exp(f"a_{i}"), add(f"b_{j}", f"c_{i}", f"d_{j}")) for j in range(2, 6))
                for i in range(2, 5)
            )
        ),
    ),
    "entries": set_alone(
        Symbol("transition"), matrix(("a", 0, "c"), (0, "e", "f"), (7, 0, "k")), by="entries"
    ),
    "a column": set_alone(Symbol("vector"), column("3/4", neg("v"), 12)),
}
SLIPS = {
    "a sign": (r"(?<=[a-z}\d]) \+ ", " - "),
    "a digit": (r"\b[2-9]\b", "1"),
    "a term": (r" \+ [^+&\\]*(?:\\[a-z]+[^+&\\]*)*?(?= \+ )", ""),
    "an index": (r"_\{\d\}", "_{9}"),
    "a row": (r"(?<=matrix\} )[^\\]*?(\\frac\{3\}\{4\})? \\\\\[3pt\] ", ""),
    "two letters": (r"\ba\b", "b"),
}


@pytest.mark.parametrize("name", SHOWN)
@pytest.mark.parametrize("slip", SLIPS)
def test_a_slip_of_the_printer_is_found(name: str, slip: str) -> None:
    statement, display = SHOWN[name]
    assert read_again(statement, display) is None
    spoiled = re.sub(*SLIPS[slip], display.latex, count=1)
    if spoiled != display.latex:
        assert read_again(statement, display, spoiled) is not None, spoiled


def test_every_slip_was_made_somewhere() -> None:
    made = {
        slip
        for slip, change in SLIPS.items()
        for _, display in SHOWN.values()
        if re.sub(*change, display.latex, count=1) != display.latex
    }
    assert made == set(SLIPS)


def test_rows_that_change_places_are_found() -> None:
    statement, display = SHOWN["a column"]
    assert r"\frac{3}{4} \\[3pt] -v" in display.latex
    assert read_again(
        statement,
        display,
        display.latex.replace(r"\frac{3}{4} \\[3pt] -v", r"-v \\[3pt] \frac{3}{4}"),
    )


def test_matrices_that_change_places_are_found() -> None:
    p, j = Symbol("matrix", letter="P"), Symbol("matrix", letter="J")
    statement, display = set_alone((Symbol("matrix"), p), (p, j))
    assert read_again(statement, display) is None
    assert read_again(
        statement,
        display,
        display.latex.replace(r"\boldsymbol{P}\boldsymbol{J}", r"\boldsymbol{J}\boldsymbol{P}"),
    )


def test_a_matrix_and_a_parameter_of_one_letter_are_two_things() -> None:
    statement, display = set_alone(Symbol("matrix"), Matrix(((Product((q("A"), q("k"))),),)))
    assert read_again(statement, display) is None
    assert read_again(statement, display, display.latex.replace(r"\boldsymbol{A} =", "A ="))
