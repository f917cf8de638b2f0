from __future__ import annotations

from fractions import Fraction

from closedform.notation.expression import Call, Name, Number, Quotient
from closedform.notation.shown import FormulaColumn, FormulaMatrix

HALF_SINE = Quotient(Call("sin", Name("t")), Number(Fraction(2)))
ONE = Number(Fraction(1))


def test_a_matrix_prints_in_columns() -> None:
    matrix = FormulaMatrix(((ONE, HALF_SINE), (HALF_SINE, ONE)))
    assert str(matrix) == "[1         sin(t)/2]\n[sin(t)/2  1]"


def test_a_matrix_shows_as_mathematics_in_a_notebook() -> None:
    latex = FormulaMatrix(((ONE, HALF_SINE),))._repr_latex_()
    assert latex[0] == latex[-1] == "$"
    assert r"{cc} 1 & \frac{\sin(t)}{2} \end" in latex


def test_a_column_is_a_matrix_of_one_column() -> None:
    column = FormulaColumn((ONE, HALF_SINE))
    assert str(column) == "1\nsin(t)/2"
    assert column._repr_latex_() == FormulaMatrix(((ONE,), (HALF_SINE,)))._repr_latex_()


def test_results_are_tuples() -> None:
    assert FormulaColumn((ONE,)) == (ONE,)
    assert FormulaMatrix(((ONE,),))[0][0] == ONE
