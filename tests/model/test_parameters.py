"""What is wrong with parameters, conditions or values is told where it stands."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path

import pytest

from closedform.algebra.surds import SurdSum
from closedform.errors import InputError
from closedform.model import errors, load
from closedform.model import parameter_errors as wrong
from closedform.model.building import system
from closedform.model.parametric import ParametricModel
from closedform.notation import errors as formula_errors
from closedform.notation import parametric_errors
from tests.model.oscillator import spoiled
from tests.model.statements import written

Change = tuple[str, str]
RESTATED = (
    ("value = 8\n", ""),
    ("[outputs]", '[substitute]\nk = "m*w^2"\n[parameters.w]\n[outputs]'),
)
ABOVE = "conditions = ["

BAD: list[tuple[list[Change], type[InputError], str]] = [
    # names
    *[
        ([("[parameters.c]", f"[parameters.{name}]")], errors.UnusableNameError, words)
        for name, words in [
            ("t", "parameters.t, line 14, column 13: 't' cannot be used as a name: it is the name"),
            ("pi", "for the number 3.14159"),
            ("e", "the base of exp"),
            ("sin", "it is the name of a function"),
            ("class", "Python, which may read the results, keeps this word; write 'class_1'"),
            ("label", "the label of a row"),
            ("x", "parameters.x, line 14, column 13: 'x' cannot be used as a name: a state has"),
            ("2c", "a name begins with"),
            ('"ω"', "write 'omega'"),
        ]
    ],
    (
        [('x0 = "real"', 'x_0 = "real"\nx0 = "real"')],
        errors.LookalikeNamesError,
        "parameters.x0, line 22, column 1: the names 'x_0' and 'x0' would be printed alike",
    ),
    (
        [("force =", "k =")],
        errors.UnusableNameError,
        "outputs.k, line 23, column 1: 'k' cannot be used as a name: a parameter has that name",
    ),
    ([("force =", "delta =")], errors.UnusableNameError, "an abbreviation has that name"),
    ([("delta =", "m =")], errors.UnusableNameError, "abbreviations.m, line 25, column 1"),
    ([("delta =", "v =")], errors.UnusableNameError, "a state has that name"),
    ([("delta =", "x_0 =")], errors.LookalikeNamesError, "abbreviations.x_0, line 25"),
    ([("[outputs]", "[substitute]\nv = 'm'\n[outputs]")], errors.UnusableNameError, "a state has"),
    # kinds of values
    ([('x0 = "real"', "x0 = 3")], errors.WrongKindError, "parameters.x0, line 21, column 6: here"),
    ([('x0 = "real"', "x0 = 3")], errors.WrongKindError, 'an assumption such as "positive", or'),
    ([('"nonnegative"', "true")], errors.WrongKindError, "parameters.c.assume, line 15, column 10"),
    ([('"kg"', "1")], errors.WrongKindError, "parameters.m.unit, line 12, column 8: here stands a"),
    ([('["c^2 < 4*k*m"]', '"c^2 < 4*k*m"')], errors.WrongKindError, "an array of comparisons"),
    ([('["c^2 < 4*k*m"]', "[1]")], errors.WrongKindError, "conditions[1], line 8, column 15"),
    ([('"c/(2*m)"', "[1]")], errors.WrongKindError, "abbreviations.delta, line 25, column 9"),
    ([(ABOVE, "substitute = 3\n" + ABOVE)], errors.WrongKindError, "substitute, line 8, column 14"),
    ([("value = 8", "value = 'k'")], formula_errors.UndeclaredNameError, "only numbers may stand"),
    ([("c = 0", "c = 'm'")], formula_errors.UndeclaredNameError, "values[1].c, line 28, column 6"),
    ([("c = 0", "c = true")], errors.WrongKindError, "values[1].c, line 28, column 5"),
    (
        [('label = "light"', "label = 1")],
        errors.WrongKindError,
        "values[1].label, line 27, column 9",
    ),
    # keys
    (
        [("unit =", "units =")],
        errors.UnknownKeyError,
        "parameters.m.units, line 12, column 1: there is no key 'units'; did you mean 'unit'?",
    ),
    ([("unit =", "symbol =")], errors.UnknownKeyError, "the keys are assume, value, unit, meaning"),
    (
        [("value = 8", "value = 8\ntimes = [1]")],
        errors.MisplacedKeyError,
        "'times' is a key of the model, but it stands below the heading [parameters.k]",
    ),
    ([('x0 = "real"', 'x0 = "real"\ntimes = [1]')], errors.MisplacedKeyError, "[parameters]"),
    # assumptions
    (
        [('"nonnegative"', '"positiv"')],
        wrong.UnknownAssumptionError,
        "parameters.c.assume, line 15, column 10: 'positiv' is no assumption; did you mean 'pos",
    ),
    ([('"nonnegative"', '"> 0"')], wrong.UnknownAssumptionError, "did you mean 'positive'?"),
    (
        [('"nonnegative"', '"k > 3"')],
        wrong.UnknownAssumptionError,
        "a parameter is one of positive, nonnegative, negative, nonzero, real, and anything else",
    ),
    # formulas
    (
        [('"-c/m"', '"-d/m"')],
        formula_errors.UndeclaredNameError,
        "matrix[2][2], line 5, column 14: the name 'd' is not declared; declared here: c, k, m, x0",
    ),
    (
        [('"-c/m"', '"-c/t"')],
        wrong.NameHereError,
        "matrix[2][2], line 5, column 16: 't' is the time",
    ),
    ([('"-c/m"', '"c/(m-m)"')], formula_errors.DivisionByZeroError, "line 5, column 13: 'c/(m"),
    ([('"-c/m"', '"sqrt(c)"')], parametric_errors.ParameterRootError, "matrix[2][2], line 5"),
    ([('"x0", 0', '"x0", "sqrt(2)"')], parametric_errors.IrrationalNumberError, "initial[2]"),
    (
        [('"k*x"', '"k*x*v"')],
        formula_errors.NonlinearTermError,
        "outputs.force, line 23, column 10",
    ),
    ([('"k*x"', '"k*x + c"')], formula_errors.ConstantTermError, "the constant 'c'"),
    ([('"k*x"', '"q*x"')], formula_errors.UndeclaredNameError, "outputs.force, line 23, column 10"),
    ([('"c/(2*m)"', '"c/(2*x)"')], wrong.NameHereError, "abbreviations.delta, line 25, column 15"),
    (
        [('"-c/m"', '"2*delta"')],
        wrong.NameHereError,
        "'delta' is an abbreviation, which is for the",
    ),
    (
        [("c^2 < 4*k*m", "c < delta")],
        wrong.NameHereError,
        "conditions[1], line 8, column 20: 'delta'",
    ),
    (
        [('"x0", 0', '"x0", "x"')],
        wrong.NameHereError,
        "initial[2], line 7, column 19: 'x' is a state",
    ),
    (
        [('"x0", 0', "0, 0"), ("c = 0\nx0 = 1", "c = 0"), ('x0 = "1/3"\n', "")],
        wrong.UnusedParameterError,
        "parameters.x0, line 21, column 1: the parameter 'x0' is used nowhere",
    ),
    (
        [("[outputs]", "[parameters.q]\n[outputs]")],
        wrong.UnusedParameterError,
        "line 22, column 13",
    ),
    # conditions
    (
        [("c^2 < 4*k*m", "c^2")],
        parametric_errors.ComparisonCountError,
        "conditions[1], line 8, col",
    ),
    ([("c^2 < 4*k*m", "0 < c < m")], parametric_errors.ComparisonCountError, "line 8, column 22"),
    ([("c^2 < 4*k*m", "c =< m")], parametric_errors.ComparisonSignError, "line 8, column 18"),
    ([("c^2 < 4*k*m", "c < 4*q")], formula_errors.UndeclaredNameError, "line 8, column 22"),
    (
        [("c^2 < 4*k*m", "1 < 2")],
        wrong.SettledConditionError,
        "conditions[1], line 8, column 16: '1 < 2' holds whatever the parameters are; take it away",
    ),
    ([("c^2 < 4*k*m", "c + 1 <= c")], wrong.SettledConditionError, "'c + 1 <= c' holds for no"),
    ([("c^2 < 4*k*m", "m = m")], wrong.SettledConditionError, "whatever the parameters are"),
    (
        [("c^2 < 4*k*m", "c < 0")],
        wrong.ContradictionError,
        "conditions[1], line 8, column 15: no values satisfy 'c >= 0' and 'c < 0'; correct",
    ),
    ([("c^2 < 4*k*m", 'c < k", "c > k')], wrong.ContradictionError, "'c < k' and 'c > k'"),
    ([("c^2 < 4*k*m", 'c < k", "c = k')], wrong.ContradictionError, "'c < k' and 'c = k'"),
    ([("c^2 < 4*k*m", 'x0 != 0", "x0 = 0')], wrong.ContradictionError, "'x0 != 0' and 'x0 = 0'"),
    ([("c^2 < 4*k*m", 'x0 > 3", "x0 < 2')], wrong.ContradictionError, "'x0 > 3' and 'x0 < 2'"),
    ([("c^2 < 4*k*m", "k*m < 0")], wrong.ContradictionError, "'m > 0', 'k > 0' and 'k*m < 0'"),
    ([("c^2 < 4*k*m", "c^2 + k^2 < 0")], wrong.ContradictionError, "c^2 + k^2 < 0"),
    (
        [('"-c/m"', '"-c/m - 1/x0"'), ("c^2 < 4*k*m", "x0 = 0")],
        wrong.ContradictionError,
        "no values satisfy 'x0 = 0' and 'x0 != 0'",
    ),
    # values
    (
        [("value = 8", "value = -8")],
        wrong.ValueOutsideError,
        "parameters.k.value, line 19, column 9: the value -8 of 'k' is not positive, as",
    ),
    ([("c = 0", "c = '1 - sqrt(2)'")], wrong.ValueOutsideError, "the value 1 - sqrt(2) of 'c' is"),
    (
        [("c = 0", "c = 9")],
        wrong.BrokenConditionError,
        "line 28, column 5: 'c^2 < 4*k*m' does not hold for the values m = 2, c = 9, k = 8; corr",
    ),
    ([("value = 1\n", "value = 10\n")], wrong.BrokenConditionError, "for the values m = 2, c = 10"),
    (
        [('"-c/m"', '"-c/m/(c - 1)"')],
        wrong.BrokenConditionError,
        "parameters.c.value, line 16, column 9: 'c - 1 != 0' does not hold for the values c = 1",
    ),
    (
        [("c = 0", "d = 0")],
        wrong.UnknownParameterError,
        "values[1].d, line 28, column 1: there is no parameter 'd'; the parameters are m, c, k, x0",
    ),
    ([("c = 0", "x_0 = 0")], wrong.UnknownParameterError, "did you mean 'x0'?"),
    (
        [("x0 = 1\n", "")],
        wrong.MissingValueError,
        "values[1], line 26, column 3: this row has no value for 'x0'",
    ),
    # substitution
    (
        [RESTATED[1]],
        wrong.RestatedValueError,
        "line 19, column 9: 'k' is re-stated by [substitute], so it takes no value; give values",
    ),
    (
        [*RESTATED, ("c = 0", "c = 0\nw = 1\nk = 1")],
        wrong.RestatedValueError,
        "values[1].k, line 32, column 1: 'k' is re-stated",
    ),
    ([*RESTATED, ("[parameters.w]\n", "")], formula_errors.UndeclaredNameError, "'w' is not"),
    (
        [("value = 8\n", ""), ("[outputs]", "[substitute]\nk = 'm*k'\n[outputs]")],
        wrong.SubstitutionCycleError,
        "substitute.k, line 22, column 5: 'k' is re-stated by itself",
    ),
    (
        [
            ("value = 8\n", ""),
            ("[outputs]", "[substitute]\nk = 'm*w'\nw = 'q'\nq='1/k'\n[outputs]"),
        ],
        wrong.SubstitutionCycleError,
        "the substitutions go round in a circle, k -> w -> q -> k",
    ),
    (
        [("[outputs]", "[substitute]\nw = 'm*k'\n[outputs]")],
        wrong.UnusedParameterError,
        "substitute.w, line 23, column 1: 'w' is re-stated, but it is neither a parameter nor used",
    ),
    (
        [("value = 8\n", ""), ("[outputs]", "[substitute]\nk = '-2'\n[outputs]")],
        wrong.SettledConditionError,
        "substitute.k, line 22, column 5: 'k > 0' holds for no values",
    ),
    (
        [("value = 8\n", ""), ("[outputs]", "[substitute]\nk = '-m'\n[outputs]")],
        wrong.ContradictionError,
        "no values satisfy 'm > 0' and 'k > 0'",
    ),
]


@pytest.mark.parametrize(
    ("changes", "error", "words"), BAD, ids=[f"{e.__name__}-{k}" for k, (_, e, _) in enumerate(BAD)]
)
def test_a_bad_statement_is_told_where_it_stands(
    tmp_path: Path, changes: list[Change], error: type[InputError], words: str
) -> None:
    path = written(tmp_path, spoiled(*changes))
    with pytest.raises(error) as caught:
        load(path)
    assert words in str(caught.value)
    assert str(caught.value).startswith(str(path))


HEAD = 'title = "a"\nstates = ["x"]\nmatrix = [["-k"]]\ninitial = [1]\n'
WHOLE: list[tuple[str, type[InputError], str]] = [
    (
        "parameters = {}",
        wrong.NoParametersError,
        "parameters, line 5, column 1: there are no param",
    ),
    ("[parameters]", wrong.NoParametersError, "parameters, line 5, column 2: there are no param"),
    (
        "parameters = 3",
        errors.WrongKindError,
        "line 5, column 14: here stands a number, and a table",
    ),
    ("parameters = ['k']", errors.WrongKindError, "a table for each parameter, as [parameters.k],"),
    ("conditions = ['k > 0']", errors.MissingKeyError, "such as '[parameters.k]'"),
    ("[substitute]\nk = '2'", errors.MissingKeyError, "substitute, line 5, column 2: the key 'par"),
    (
        "[parameters]\nk = 'real'\n[substitute]\nk = 2",
        wrong.NoParametersError,
        "substitute, line 7, column 2: [substitute] re-states every parameter",
    ),
    (
        "[parameters]\nk = 'real'\n" + "".join(f"k{n} = 'real'\n" for n in range(1, 41)),
        wrong.TooManyParametersError,
        "there are 41 parameters, and at most 40 are read",
    ),
    ("[parameters]\nk = 'real'\n[values]\nk = 1", errors.WrongKindError, "each below [[values]],"),
    ("params = 1", errors.UnknownKeyError, "did you mean 'parameters'?"),
    ("constraints = 1", errors.UnknownKeyError, "did you mean 'conditions'?"),
]


@pytest.mark.parametrize(("tail", "error", "words"), WHOLE)
def test_a_bad_set_of_parameters_is_told(
    tmp_path: Path, tail: str, error: type[InputError], words: str
) -> None:
    with pytest.raises(error) as caught:
        load(written(tmp_path, HEAD + tail + "\n"))
    assert words in str(caught.value)


def test_values_may_be_rows_of_an_array(tmp_path: Path) -> None:
    text = HEAD + "values = [{k = 1}, \n{label = 'b', k = 0}]\n[parameters]\nk = 'positive'\n"
    with pytest.raises(
        wrong.ValueOutsideError, match=r"values\[2\]\.k, line 6, column 19: the val"
    ):
        load(written(tmp_path, text))


def test_a_parameter_that_substitution_cancels_needs_no_value() -> None:
    model = system(
        [[0, 1], ["-k/m", "-c/m"]],
        initial=[1, 0],
        parameters={"m": "positive", "omega_n": "positive", "zeta": "positive"},
        substitute={"k": "m*omega_n^2", "c": "2*zeta*omega_n*m"},
        values=[{"omega_n": 10, "zeta": "1/5"}],
    )
    assert isinstance(model, ParametricModel)
    (row,) = model.value_sets
    assert dict(row.values)["zeta"] == SurdSum.rational(Fraction(1, 5))
    assert model.occurring == {"omega_n", "zeta"}
