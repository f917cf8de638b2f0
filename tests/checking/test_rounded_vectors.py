"""Printed decimals that stand for a direction: held against linear programming in floats."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import acb
from hypothesis import assume, given
from hypothesis import strategies as st
from scipy.optimize import linprog

from closedform.algebra.elementary import Element, ElementaryField
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.rounded_vectors import rounded_direction
from closedform.checking.values.exact import exact
from closedform.checking.values.matrices import ExactMatrix, column
from closedform.checking.values.scope import Scope
from closedform.notation.written.tree import (
    Constant,
    Declared,
    Literal,
    Negation,
    Product,
    Sum,
    Written,
)
from closedform.notation.written.typed_reader import read_typed

FIELD = ElementaryField()
Complex = tuple[Fraction, Fraction]


def printed(number: Fraction, digits: int) -> Written:
    value = Fraction(round(number * 10**digits), 10**digits)
    literal = Literal(abs(value), Fraction(1, 10**digits), is_decimal=True)
    return Negation(literal) if value < 0 else literal


def entry(number: Complex, digits: int, *, real: bool) -> Written:
    if real:
        return printed(number[0], digits)
    return Sum((printed(number[0], digits), Product((printed(number[1], digits), Constant("i")))))


def ball(tree: Written) -> acb:
    value = exact(tree, Scope(FIELD, "t"))
    assert not isinstance(value, ExactMatrix)
    return value.enclosure(acb(0), {})


def told(rows: list[Written], kernel: list[list[Complex]]) -> bool:
    def number(value: Complex) -> Element:
        return FIELD.number(value[0]) + FIELD.number(value[1]) * FIELD.sqrt(-1)

    columns: list[ExactMatrix] = [column(FIELD, map(number, vector)) for vector in kernel]
    return rounded_direction(rows, columns, dict, ball) is not None


def least_excess(rows: list[Complex], kernel: list[list[Complex]], half: float) -> float:
    """The least amount by which the digits have to be missed, in floats."""
    unknowns = [(v, way) for v in kernel for way in ((1, 0), (0, 1))]
    above, bounds = [], []
    for k, (real, imaginary) in enumerate(rows):
        parts = [
            (
                float(v[k][0] * w[0] - v[k][1] * w[1]),
                float(v[k][0] * w[1] + v[k][1] * w[0]),
            )
            for v, w in unknowns
        ]
        for part, target in enumerate((real, imaginary)):
            row = [own[part] for own in parts]
            above += [[*row, -1.0], [*(-a for a in row), -1.0]]
            bounds += [float(target) + half, half - float(target)]
    width = len(unknowns)
    found = linprog([0.0] * width + [1.0], above, bounds, bounds=[(None, None)] * (width + 1))
    return float(found.x[-1])


small = st.integers(-9, 9)
complex_numbers = st.tuples(
    st.fractions(-3, 3, max_denominator=12), st.fractions(-3, 3, max_denominator=12)
)
vectors = st.lists(complex_numbers, min_size=2, max_size=4)


@given(vectors, complex_numbers, st.integers(1, 3))
def test_every_multiple_of_a_vector_holds_when_it_is_rounded(
    vector: list[Complex], scale: Complex, digits: int
) -> None:
    assume(any(any(part) for part in vector))
    a, b = scale
    scaled = [(x * a - y * b, x * b + y * a) for x, y in vector]
    assert told([entry(value, digits, real=False) for value in scaled], [vector])


@given(vectors, st.data())
def test_what_holds_is_what_linear_programming_finds(
    vector: list[Complex], data: st.DataObject
) -> None:
    assume(any(any(part) for part in vector))
    claimed = [(Fraction(data.draw(small), 10), Fraction(data.draw(small), 10)) for _ in vector]
    excess = least_excess(claimed, [vector], 0.05)
    assume(abs(excess) > 1e-9)
    rows = [entry(value, 1, real=False) for value in claimed]
    assert told(rows, [vector]) == (excess < 0)


@given(st.data())
def test_a_plane_of_eigenvectors_is_told_by_linear_programming_too(data: st.DataObject) -> None:
    real = st.fractions(-3, 3, max_denominator=8)
    kernel = [[(data.draw(real), Fraction(0)) for _ in range(4)] for _ in range(2)]
    claimed = [(Fraction(data.draw(small), 10), Fraction(0)) for _ in range(4)]
    excess = least_excess(claimed, kernel, 0.05)
    assume(abs(excess) > 1e-9)
    rows = [entry(value, 1, real=True) for value in claimed]
    assert told(rows, kernel) == (excess < 0)


@pytest.mark.parametrize(
    ("text", "holds"),
    [
        ("[1, 1.414]", True),
        ("[1, 1.415]", False),
        ("[1.0, sqrt(2)]", True),
        ("[1.1, sqrt(2)]", False),
        ("[-0.707, -1.0]", True),
        ("[-0.707, 1.0]", False),
        ("[0.5, 0.707]", True),
        ("[1.414/2, 1.000]", True),
        ("[1.41*i, 2.00*i]", True),
        ("[1.41*i, 2.00]", False),
    ],
)
def test_a_vector_with_a_root_in_it(text: str, *, holds: bool) -> None:
    rows = [read_typed(part, Declared()).statements[0].members[0] for part in text[1:-1].split(",")]
    true = column(FIELD, [FIELD.one, FIELD.sqrt(2)])
    assert (rounded_direction(rows, [true], dict, ball) is not None) == holds


def test_what_is_no_column_of_numbers_is_not_judged() -> None:
    true = column(FIELD, [FIELD.one, FIELD.one])
    for rows in ([Literal(Fraction(1))], [Literal(Fraction(1))] * 3):
        with pytest.raises(NotJudgedError):
            rounded_direction(rows, [true], dict, ball)
