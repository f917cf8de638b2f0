"""A model with parameters is read exactly, from a file or from Python values."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.domain import Comparison
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.model import Model, ParametricModel, load, model_from
from closedform.model.building import system
from closedform.model.parameter_errors import ContradictionError
from closedform.model.parametric import Parameter, ParametricOutput, ValueSet
from closedform.notation.plain import plain
from closedform.notation.rational import rational_value
from closedform.notation.reader import read_formula
from tests.model.oscillator import OSCILLATOR, spoiled
from tests.model.statements import written

NUMBER = SurdSum.rational
FIELD = ParameterField(parameters=("m", "c", "k", "x0"))
M, C, K, X0 = map(FIELD.symbol, FIELD.parameters)
ZERO, ONE = FIELD.scalar(0), FIELD.scalar(1)


def read(folder: Path, text: str) -> ParametricModel:
    model = load(written(folder, text))
    assert isinstance(model, ParametricModel)
    return model


def stated(matrix: object, **keys: object) -> ParametricModel:
    model = system(matrix, initial=[1] * len(matrix), **keys)  # type: ignore[arg-type]
    assert isinstance(model, ParametricModel)
    return model


def test_a_model_with_parameters_is_read(tmp_path: Path) -> None:
    model = read(tmp_path, OSCILLATOR)
    assert (model.name, model.title, model.time) == ("bench", "Oscillator", "t")
    assert model.field == FIELD
    assert model.parameters == (
        Parameter("m", "positive", NUMBER(2), "kg", "mass"),
        Parameter("c", "nonnegative", NUMBER(1)),
        Parameter("k", "positive", NUMBER(8)),
        Parameter("x0", "real"),
    )
    assert model.matrix == ((ZERO, ONE), (-K / M, -C / M))
    assert model.initial == (X0, ZERO)
    assert model.outputs == (ParametricOutput("force", (K, ZERO)),)
    assert model.domain.conditions == (
        Comparison(M, ">"),
        Comparison(C, ">="),
        Comparison(K, ">"),
        Comparison(4 * K * M - C**2, ">"),
    )
    (delta,) = model.abbreviations
    assert (delta.name, plain(delta.formula), delta.value) == ("delta", "c/(2*m)", C / (2 * M))
    assert model.restated == ()


def test_a_row_takes_what_it_leaves_out_from_the_parameters(tmp_path: Path) -> None:
    model = read(tmp_path, OSCILLATOR)
    assert model.values is None
    assert model.value_sets == (
        ValueSet("light", tuple(zip(FIELD.parameters, map(NUMBER, (2, 0, 8, 1)), strict=True))),
        ValueSet(
            "2",
            (
                ("m", SurdSum.of({2: Fraction(1)})),
                ("c", NUMBER(1)),
                ("k", NUMBER(8)),
                ("x0", NUMBER(Fraction(1, 3))),
            ),
        ),
    )


def test_where_every_parameter_has_a_value_there_is_a_set_of_them(tmp_path: Path) -> None:
    model = read(tmp_path, spoiled(('x0 = "real"', "x0 = {value = 0.5}")))
    assert model.values is not None
    assert dict(model.values.values)["x0"] == NUMBER(Fraction(1, 2))


def test_python_values_state_the_same_model(tmp_path: Path) -> None:
    model = system(
        [[0, 1], ["-k/m", "-c/m"]],
        initial=["x0", 0],
        states=["x", "v"],
        title="Oscillator",
        outputs={"force": "k*x"},
        parameters={
            "m": {"assume": "positive", "value": 2, "unit": "kg", "meaning": "mass"},
            "c": {"assume": "nonnegative", "value": 1},
            "k": {"assume": "positive", "value": Fraction(8)},
            "x0": "real",
        },
        conditions=["c^2 < 4*k*m"],
        abbreviations={"delta": "c/(2*m)"},
        values=[{"label": "light", "c": 0, "x0": 1}, {"m": "sqrt(2)", "x0": "1/3"}],
        name="bench",
    )
    assert model == read(tmp_path, OSCILLATOR)


def test_without_parameters_a_model_is_numeric() -> None:
    assert isinstance(system([[1]], initial=[1]), Model)
    mapping = {"title": "a", "states": ["x"], "matrix": [["-k"]], "initial": [1]}
    model = model_from({**mapping, "parameters": {"k": {}}}, name="a")
    assert isinstance(model, ParametricModel)
    assert model.parameters == (Parameter("k", "real"),)
    assert model.domain.conditions == ()


def test_reading_twice_gives_equal_models(tmp_path: Path) -> None:
    assert read(tmp_path, OSCILLATOR) == read(tmp_path, OSCILLATOR)


def test_re_stated_parameters_are_put_in_everywhere_at_once() -> None:
    model = stated(
        [[0, "1"], ["-k/m", "-c/m"]],
        states=["x", "v"],
        parameters={
            "m": "positive",
            "k": {"assume": "positive", "unit": "N/m", "meaning": "stiffness"},
            "zeta": "nonnegative",
            "omega_n": "positive",
        },
        substitute={"c": "2*zeta*w*m", "k": "m*w^2", "w": "omega_n"},
        conditions=["c^2 < 4*k*m"],
        outputs={"force": "k*x"},
        abbreviations={"delta": "c/(2*m)", "tau": "1/delta"},
    )
    field = ParameterField(parameters=("m", "zeta", "omega_n"))
    m, z, w = map(field.symbol, field.parameters)
    assert model.field == field
    assert [p.name for p in model.parameters] == ["m", "zeta", "omega_n"]
    assert model.matrix[1] == (-(w**2), -2 * z * w)
    assert model.outputs[0].weights[0] == m * w**2
    assert [(d.name, plain(d.formula), d.value) for d in model.restated] == [
        ("c", "2*zeta*w*m", 2 * z * w * m),
        ("k", "m*w^2", m * w**2),
        ("w", "omega_n", w),
    ]
    assert (model.restated[1].unit, model.restated[1].meaning) == ("N/m", "stiffness")
    assert [d.value for d in model.abbreviations] == [z * w, 1 / (z * w)]
    assert model.domain.conditions == (
        Comparison(m, ">"),
        Comparison(m * w**2, ">"),
        Comparison(z, ">="),
        Comparison(w, ">"),
        Comparison(4 * m**2 * w**2 - 4 * z**2 * w**2 * m**2, ">"),
        Comparison(z, "!="),  # since tau is defined
    )


def test_a_parameter_may_be_re_stated_by_a_number() -> None:
    model = stated([["-k*r"]], parameters={"k": "positive", "r": "positive"}, substitute={"r": "2"})
    assert model.matrix[0][0] == -2 * model.field.symbol("k")
    assert [c.relation for c in model.domain.conditions] == [">"]


RELATIONS = [
    ("a < b", "b - a", ">"),
    ("a <= b", "b - a", ">="),
    ("a > b", "a - b", ">"),
    ("a >= b", "a - b", ">="),
    ("a != b", "a - b", "!="),
    ("a = 2*b", "a - 2*b", "="),
    ("a == 2*b", "a - 2*b", "="),
    ("a/b < 1/2", "1/2 - a/b", ">"),
]


@pytest.mark.parametrize(("text", "element", "relation"), RELATIONS)
def test_a_condition_is_kept_as_written_and_against_zero(
    text: str, element: str, relation: str
) -> None:
    parameters = {"a": "real", "b": "positive"}
    model = stated([["a", "b"], [element, 1]], parameters=parameters, conditions=[text])
    (condition,) = model.conditions
    spelled = text.replace("==", "=")
    assert f"{plain(condition.left)} {condition.relation} {plain(condition.right)}" == spelled
    assert condition.comparison == Comparison(model.matrix[1][0], relation)
    assert model.domain.conditions[-1] == condition.comparison


@given(st.fractions(max_denominator=99), st.fractions(max_denominator=99))
def test_conditions_on_numbers_say_on_which_side_a_value_lies(a: Fraction, b: Fraction) -> None:
    """A value of k satisfies exactly those conditions that hold for the number."""
    for sign, holds in (("<", a < b), (">=", a >= b), ("!=", a != b), ("=", a == b)):
        keys = {
            "parameters": {"k": {"value": a}},
            "conditions": [f"k {sign} {b}"],
        }
        if holds:
            assert stated([["k"]], **keys).values is not None
            continue
        with pytest.raises(ValueError, match="does not hold for the values k = "):
            stated([["k"]], **keys)


def test_denominators_are_kept_from_zero_where_that_does_not_follow() -> None:
    model = stated(
        [["1/(a*b)", "1/(a - b)"], ["1/a^2", "1/(a^2 + 1)"]],
        parameters={"a": "real", "b": "positive"},
    )
    a, b = map(model.field.symbol, "ab")
    assert model.domain.conditions[0] == Comparison(b, ">")
    assert set(model.domain.conditions[1:]) == {Comparison(a, "!="), Comparison(a - b, "!=")}


def test_greek_letters_in_formulas_are_their_names() -> None:
    model = stated([["-ω_n"]], parameters={"omega_n": "positive"})
    assert model.matrix[0][0] == -model.field.symbol("omega_n")


SIDES = ["a", "b", "c", "a + b", "a*b", "b*c", "a - c", "c^2", "1", "2", "a*b*c"]
COMPARED = st.lists(st.tuples(*[st.sampled_from(SIDES)] * 2), min_size=1, max_size=4)
HOLDING = {-1: ("<", "<=", "!="), 0: ("=", "<=", ">="), 1: (">", ">=", "!=")}


@given(COMPARED, st.tuples(*[st.fractions(-3, 3, max_denominator=3)] * 3), st.integers(0, 2))
def test_conditions_that_hold_at_a_point_are_no_contradiction(
    pairs: list[tuple[str, str]], point: tuple[Fraction, ...], choice: int
) -> None:
    """Whatever holds at some point is read, and the point is accepted as values."""
    values = {name: NUMBER(value) for name, value in zip("abc", point, strict=True)}
    field = ParameterField(parameters=("a", "b", "c"))
    conditions = []
    for pair in pairs:
        left, right = (
            rational_value(read_formula(text, names=frozenset("abc")), field, Place())
            for text in pair
        )
        if field.constant(left - right) is None:
            value = field.exact_at(left - right, values).as_fraction()
            relation = HOLDING[(value > 0) - (value < 0)][choice]
            conditions.append(f"{pair[0]} {relation} {pair[1]}")
    model = stated(
        [["a*b*c"]],
        parameters={name: {"value": value} for name, value in values.items()},
        conditions=conditions,
    )
    assert model.values == ValueSet("", tuple(values.items()))
    assert len(model.domain.conditions) == len(conditions)


def test_among_many_conditions_two_that_contradict_each_other_are_found() -> None:
    parameters = dict.fromkeys(["a", "b", "c"], "real")
    chain = [f"{k + 1}*a + b - c > {k * k}" for k in range(9)]
    with pytest.raises(ContradictionError) as caught:
        stated([["a*b*c"]], parameters=parameters, conditions=[*chain, "9*a + b - c < 60"])
    assert caught.value.conditions == ("9*a + b - c > 64", "9*a + b - c < 60")
