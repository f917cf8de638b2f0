"""Driven models are built from equations, from masses and from matrices alike."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.errors import InputError
from closedform.model import DrivenModel, Model, ParametricModel, load, model_from
from closedform.model.building import system
from closedform.model.driven.initial_errors import ContradictoryInitialError
from closedform.model.driven.jet_rows import JetRows
from closedform.model.driven.model import Jet
from closedform.model.errors import TooManyStatesError
from closedform.notation.plain import plain
from tests.model.statements import written

OSCILLATOR: Mapping[str, Any] = {
    "title": "Oscillator",
    "equations": ["m*x'' + c*x' + k*x = F"],
    "initial": {"x": "0", "x'": "v0"},
    "inputs": {"F": "F0*sin(w*t)"},
    "parameters": {
        "m": "positive",
        "c": "nonnegative",
        "k": "positive",
        "F0": "real",
        "w": "positive",
        "v0": "real",
    },
}
CIRCUIT: Mapping[str, Any] = {
    "title": "Circuit",
    "equations": ["3*v' = i_1", "i_1 = (u - v)/2"],
    "initial": {"v": "1"},
    "inputs": {"u": {"is": "5*exp(-t)", "unit": "V", "meaning": "source"}},
}


def driven(mapping: Mapping[str, Any], **changes: Any) -> DrivenModel:
    model = model_from({**mapping, **changes}, name="bench")
    assert isinstance(model, DrivenModel)
    return model


def texts(matrix: Any) -> list[list[str]]:
    return [[str(entry) for entry in row] for row in matrix.to_list()]


def left_over(model: DrivenModel) -> list[dict[tuple[str, int], Any]]:
    """Return what is left of each balance when the state form is put in, over the field."""
    places = {plain(one.formula): k for k, one in enumerate(model.inputs)}
    successors = {k: places[t + "'"] for t, k in places.items() if t + "'" in places}
    rows = JetRows(model.field, model.reduction, successors)
    found = []
    for balance in model.balances:
        row = rows.combined(dict(balance.of_unknowns))
        assert row is not None
        total = {("input", k): e for k, e in row.of_inputs.items()}
        for k, weight in balance.of_inputs:
            total["input", k] = total.get(("input", k), model.field.domain.zero) + weight
        total |= {("state", k): e for k, e in row.of_states.items()}
        found.append({key: e for key, e in total.items() if e})
    return found


def test_equations_with_parameters_make_a_parametric_stacked_model() -> None:
    model = driven(OSCILLATOR)
    assert model.form == "equations"
    assert model.names == ("x", "x_dot")
    assert texts(model.reduction.matrix) == [["0", "1"], ["-k/m", "-c/m"]]
    assert texts(model.reduction.input_matrix) == [["0"], ["1/m"]]
    assert isinstance(model.stacked, ParametricModel)
    assert model.stacked.states == ("x", "x_dot", "F", "F_dot")
    assert [[str(e) for e in row] for row in model.stacked.matrix] == [
        ["0", "1", "0", "0"],
        ["-k/m", "-c/m", "1/m", "0"],
        ["0", "0", "0", "1"],
        ["0", "0", "-w**2", "0"],
    ]
    assert [str(e) for e in model.stacked.initial] == ["0", "v0", "0", "0"]
    assert model.domain is model.stacked.domain
    assert model.stacked.outputs == ()
    assert left_over(model) == [{}]


def test_an_eliminated_unknown_has_its_row_and_inputs_their_meaning() -> None:
    model = driven(CIRCUIT, outputs={"p": "u - v", "rate": "v'", "i_2": "2*i_1"})
    assert model.unknowns == ("v", "i_1")
    assert model.reduction.eliminated == ("i_1",)
    assert texts(model.reduction.eliminated_from_states) == [["-1/2"]]
    assert texts(model.reduction.eliminated_from_inputs) == [["1/2"]]
    (one,) = model.inputs
    assert (one.name, one.unit, one.meaning) == ("u", "V", "source")
    assert one.definition is not None
    assert plain(one.definition) == "5*exp(-t)"
    assert [(o.name, *map(str, (*o.of_states, *o.of_inputs))) for o in model.outputs] == [
        ("p", "-1", "1"),
        ("rate", "-1/6", "1/6"),
        ("i_2", "-1", "1"),
    ]
    assert model.rows == ("v", "i_1", "p", "rate", "i_2")
    assert isinstance(model.stacked, Model)
    assert left_over(model) == [{}, {}]


def test_masses_and_the_same_equations_agree() -> None:
    masses = driven(
        {
            "title": "Two masses",
            "states": ["x1", "x2"],
            "mass": [["m1", 0], [0, 2]],
            "damping": [["c", "-c"], ["-c", "c"]],
            "stiffness": [[3, -1], [-1, 1]],
            "input_matrix": [[1, 0], [0, "a"]],
            "inputs": {"F": "sin(t)", "G": "1"},
            "initial": {"x1": 0, "x1'": 0, "x2": 0, "x2'": 1},
            "parameters": {"m1": "positive", "c": "nonnegative", "a": "real"},
        }
    )
    assert masses.form == "second order"
    assert masses.names == ("x1", "x2", "x1_dot", "x2_dot")
    assert [balance.text for balance in masses.balances] == [
        "m1*x1'' + c*x1' - c*x2' + 3*x1 - x2 = F",
        "2*x2'' - c*x1' + c*x2' - x1 + x2 = a*G",
    ]
    typed = driven(
        {
            "title": "Two masses",
            "equations": [balance.text for balance in masses.balances],
            "inputs": {"F": "sin(t)", "G": "1"},
            "initial": {"x1": 0, "x1'": 0, "x2": 0, "x2'": 1},
            "parameters": {"m1": "positive", "c": "nonnegative", "a": "real"},
        }
    )
    assert [(b.left, b.right) for b in typed.balances] == [
        (b.left, b.right) for b in masses.balances
    ]
    places = [typed.reduction.jets.index(jet) for jet in masses.reduction.jets]
    rows = typed.reduction.matrix.to_list()
    assert [[rows[i][j] for j in places] for i in places] == masses.reduction.matrix.to_list()
    assert left_over(masses) == left_over(typed) == [{}, {}]


def test_a_matrix_with_inputs_states_equations_too() -> None:
    model = system(
        [[0, 1], [-4, "-sqrt(2)"]],
        input_matrix=[[0], [3]],
        inputs={"u": "t^2"},
        initial={"x1": 1, "x2": 0},
        start="1/2",
    )
    assert isinstance(model, DrivenModel)
    assert model.form == "state form"
    assert [b.text for b in model.balances] == ["x1' = x2", "x2' = -4*x1 - sqrt(2)*x2 + 3*u"]
    assert model.field.radicands == (2,)
    assert model.start == model.field.scalar(Fraction(1, 2))
    assert model.stacked.states == ("x1", "x2", "u", "u_dot", "u_ddot")
    assert left_over(model) == [{}, {}]


def test_a_plain_model_stays_what_it_was() -> None:
    assert isinstance(system([[0, 1], [-4, 0]], initial=[1, 0]), Model)
    assert isinstance(system([["-k"]], initial=[1], parameters={"k": "positive"}), ParametricModel)


def test_pi_in_a_formula_makes_the_field_hold_it() -> None:
    model = driven(CIRCUIT, inputs={"u": "sin(2*pi*t)"})
    assert isinstance(model.field, ParameterField)
    assert model.field.parameters == ("pi",)
    assert isinstance(model.stacked, ParametricModel)
    assert model.stacked.parameters == ()
    assert model.stacked.values is not None
    plain_one = system([["-pi"]], initial=[1])
    assert isinstance(plain_one, ParametricModel)


def test_inputs_in_equations_may_be_literal_delayed_and_differentiated() -> None:
    model = driven(
        CIRCUIT,
        equations=["3*v' = i_1", "i_1 = u(t - 2) + u' - v + 6*cos(3*t) - 2"],
        initial={"v": 0},
    )
    assert [(one.name, plain(one.formula)) for one in model.inputs] == [
        ("u", "u(t - 2)"),
        ("u", "u'"),
        ("", "6*cos(3*t) - 2"),
    ]
    assert texts(model.reduction.input_matrix) == [["1/3", "1/3", "1/3"]]
    assert model.stacked.states == ("v", "u", "u_1", "u_2", "u_2_dot", "u_2_ddot")
    assert left_over(model) == [{}, {}]


def test_names_of_the_generator_clash_with_nothing() -> None:
    equations = ["u_1' = u_2 + sin(t)", "u_2' = F"]
    outputs = {"F_dot": "2*u_1"}
    initial = {"u_1": 0, "u_2": 0}
    inputs = {"F": "cos(t)"}
    model = driven(CIRCUIT, equations=equations, initial=initial, inputs=inputs, outputs=outputs)
    assert model.names == ("u_1", "u_2")
    assert len(set(model.stacked.states)) == len(model.stacked.states)
    assert model.stacked.states[2:] == ("u_3", "u_3_dot", "u_4", "u_4_dot")


TIED: Mapping[str, Any] = {
    "title": "Tied voltages",
    "equations": ["v_1' - 2*v_2' + v_1 = 0", "v_1 + v_2 = u"],
    "inputs": {"u": "10*step(t)"},
}


def test_the_derivative_of_an_input_becomes_an_input_that_strikes() -> None:
    model = driven(TIED, initial={"v_1": 0}, inputs={"u": "10*step(t - 1)"})
    assert model.names == ("v_1",)
    assert [plain(one.formula) for one in model.inputs] == ["u", "u'"]
    assert [(i.amount, i.at) for i in model.inputs[1].signal.impulses] == [(10, 1)]
    assert model.timeline == (1,)
    assert left_over(model) == [{}, {}]


def test_the_derivative_of_a_literal_is_written_out() -> None:
    model = driven(
        TIED,
        inputs={},
        initial={"v_2": 0},
        equations=["v_1' - 2*v_2' + v_1 = 0", "v_1 + v_2 = 10*sin(3*t)*exp(-t) + 2"],
    )
    shown = [plain(one.formula) for one in model.inputs]
    assert shown[0] == "10*sin(3*t)*exp(-t) + 2"
    assert sorted(shown[1].split(" - ")) == ["10*exp(-t)*sin(3*t)", "30*exp(-t)*cos(3*t)"]


def test_what_does_not_change_adds_no_derivative() -> None:
    model = driven(TIED, inputs={"u": "10"}, initial={"v_1": 4})
    assert [plain(one.formula) for one in model.inputs] == ["u"]
    assert texts(model.reduction.input_matrix) == [["0"]]


@pytest.mark.parametrize(
    ("initial", "impulses"),
    [({"v_1": 0}, 1), ({"v_1": 0, "v_2": 0}, 1), ({"v_1": 4, "v_2": 6}, 0)],
)
def test_values_hold_before_a_jump_at_the_start_unless_they_fit_after_it_only(
    initial: Mapping[str, int], impulses: int
) -> None:
    model = driven(TIED, initial=initial)
    assert len(model.inputs[1].signal.impulses) == impulses
    assert model.initial == (initial["v_1"],)


def test_values_of_algebraic_unknowns_are_held_against_the_equations() -> None:
    model = driven(CIRCUIT, initial={"v": 1, "i_1": 2})
    assert model.initial == (1,)
    assert dict(model.stated_initial) == {Jet("v"): 1, Jet("i_1"): 2}
    model = driven(CIRCUIT, initial={"v": "1", "i_1": "2/2"}, inputs={"u": "3*cos(t)"})
    with pytest.raises(InputError, match=r"i_1 = 2 at the start contradicts .* i_1 = 1; correct"):
        driven(CIRCUIT, initial={"v": 1, "i_1": 2}, inputs={"u": "3*cos(t)"})
    with pytest.raises(InputError, match=r"it follows that i_1 = \(5/2\)\*exp\(-1\) - 1/2"):
        driven(CIRCUIT, initial={"v": 1, "i_1": 2}, start="1")


@pytest.mark.parametrize("load", ["3*cos(2*t)", "3*exp(-t) + t*sin(pi*t)", "3 - t^2"])
def test_values_of_algebraic_unknowns_are_read_with_parameters_too(load: str) -> None:
    stated = {
        "title": "Oscillator",
        "equations": ["a*x'' + x' = -x + y", "y = F"],
        "parameters": {"a": "positive"},
        "inputs": {"F": load},
    }
    right = {"x": 1, "x'": 0, "y": 3}
    assert driven({**stated, "initial": right}).initial == (1, 0)
    with pytest.raises(ContradictoryInitialError, match="it follows that y = 3"):
        driven({**stated, "initial": {**right, "y": 2}})


def test_conditions_at_points_take_the_place_of_initial_values() -> None:
    changes = {"at_points": ["x(0) = 1", "x'(T) - 2*x(T) = v0"]}
    mapping = {key: value for key, value in OSCILLATOR.items() if key != "initial"}
    parameters = {**OSCILLATOR["parameters"], "T": "positive"}
    model = driven(mapping, **changes, parameters=parameters)
    assert model.initial is None
    assert model.stated_initial == ()
    first, second = model.conditions
    assert (str(first.at), [*map(str, first.of_states)], str(first.value)) == ("0", ["1", "0"], "1")
    assert second.text == "x'(T) - 2*x(T) = v0"
    assert (str(second.at), [*map(str, second.of_states)]) == ("T", ["-2", "1"])
    assert str(second.value) == "v0"
    assert [str(e) for e in model.stacked.initial] == ["0", "0", "0", "0"]


def test_a_determinant_that_may_vanish_is_excluded_by_the_domain() -> None:
    parameters = {**OSCILLATOR["parameters"], "m": "real"}
    model = driven(OSCILLATOR, parameters=parameters)
    assert model.domain is not None
    said = [(str(c.element), c.relation) for c in model.domain.conditions]
    assert ("m", "!=") in said
    values = {"assume": "real", "value": 0}
    with pytest.raises(InputError, match="'m != 0' does not hold"):
        driven(OSCILLATOR, parameters={**parameters, "m": values})


FILE = """\
title = "Oscillator"
equations = [
  "m*x'' + k*x = F",
  "y = 2*x + d",
]
initial = { x = "0", "x'" = "v0" }
times = [0, 1]
[parameters]
m = "positive"
k = "positive"
v0 = "real"
[inputs]
F = "3"
d = [ { from = "1", to = "2", is = "t" }, { from = "2", is = "0" } ]
"""


def test_a_file_is_read(tmp_path: Path) -> None:
    model = load(written(tmp_path, FILE))
    assert isinstance(model, DrivenModel)
    assert model.name == "bench"
    assert model.title == "Oscillator"
    assert model.times == (SurdSum.rational(0), SurdSum.rational(1))
    assert model.timeline == (1, 2)
    assert left_over(model) == [{}, {}]


SPOILED: list[tuple[str, str, str]] = [
    ("k*x = F", "k*x*x = F", "equations[1], line 3, column 12: the term 'k*x*x'"),
    ("= F", "= F + q", "equations, line 2, column 1: there are 2 equations for 3 unknowns"),
    ('x = "0", ', "", "initial, line 6, column 11: 'initial' gives no value to 'x'"),
    ('x = "0"', 'x = "0", z = "0"', "there is no state 'z'"),
    ('x = "0"', 'x = "0", y = "1"', "initial.y, line 6, column 26: y = 1 at the start"),
    ('x = "0"', 'x = "0", "x\'\'" = "1"', "'x''' follows from the equations; take it away"),
    ('k = "positive"\n', "", "'k' in the term 'k*x' of the equation 'm*x'' + k*x = F' is declared"),
    ('F = "3"', 'F = "3"\nG = "1"', "inputs.G, line 14, column 1: the input 'G' is used nowhere"),
    ('F = "3"\n', "", "there are 2 equations for 3 unknowns"),
    ('"y = 2*x + d"', "\"m*x'' + k*x = d\"", "equations[2], line 4, column 3: equation 1, 'm*x"),
    ("times", "start = 'u'\ntimes", "start, line 7, column 10: the name 'u' is not declared"),
    ("times", "outputs = { x = 'x' }\ntimes", "outputs.x, line 7, column 13: 'x' cannot be used"),
    (
        "times",
        "outputs = { x_dot = 'x' }\ntimes",
        "'x_dot' cannot be used as a name: an output has",
    ),
    ("times", "outputs = { z = 'x + 1' }\ntimes", "the constant '1' is added"),
    ("times", 'outputs = { z = "y\'" }\ntimes', "'z' holds the derivative of an input"),
    ("times", "input_matrix = [[1]]\ntimes", "'input_matrix' and 'equations' do not go together"),
    ("times", "matrix = [[1]]\ntimes", "'equations' and 'matrix' state a model in two"),
    ("times", "states = ['x']\ntimes", "'y' is not declared"),
    ("times", "states = ['y', 'x', 'q']\ntimes", "the unknown 'q' stands in no equation"),
]


@pytest.mark.parametrize(("old", "new", "words"), SPOILED)
def test_a_bad_statement_is_told_where_it_stands(
    tmp_path: Path, old: str, new: str, words: str
) -> None:
    assert FILE.count(old) >= 1
    with pytest.raises(InputError) as caught:
        load(written(tmp_path, FILE.replace(old, new, 1)))
    assert words in str(caught.value)


HOSTILE: tuple[object, ...] = (
    *(None, True, 3, -1, 0.5, "", " ", "x'", "x' = ", "=", "x'' + x", "[", [], {}, [[]], [{}]),
    *([None], [1.5], {"x": None}, {"x": {}}, {"": "1"}, {1: 2}, ["x(0) = 1"], [["x"]]),
    *(
        "x" * 70,
        "pi",
        "delta(t)",
        {"F": "delta(t)^2"},
        {"F": {"is": 1, "period": 0}},
        [float("nan")],
    ),
    {"a" * 70: "1"},
)


@pytest.mark.parametrize("value", HOSTILE, ids=repr)
@pytest.mark.parametrize(
    "key",
    [
        *("equations", "states", "mass", "damping", "stiffness", "input_matrix", "inputs"),
        *("initial", "start", "at_points", "outputs", "parameters", "times", "time"),
    ],
)
@pytest.mark.parametrize("base", [OSCILLATOR, CIRCUIT, TIED], ids=["open", "plain", "tied"])
def test_whatever_stands_under_a_key_an_input_error_says_what_is_wrong(
    base: Mapping[str, Any], key: str, value: object
) -> None:
    try:
        model_from({**base, "initial": {"x": 0}, **base, key: value}, name="bench")
    except InputError as error:
        assert str(error)


def test_too_many_unknowns_are_refused() -> None:
    with pytest.raises(TooManyStatesError, match="at most 400"):
        driven(CIRCUIT, equations=["x' = 1"] * 401)
    with pytest.raises(TooManyStatesError, match="there are 401 states"):
        driven(CIRCUIT, equations=["x" + "'" * 401 + " = u"], initial={"x": 0})
    long = {
        "title": "Long",
        "states": [f"x{k}" for k in range(400)],
        "matrix": [[int(i == j) for j in range(400)] for i in range(400)],
        "input_matrix": [[1]] * 400,
        "initial": [0] * 400,
    }
    with pytest.raises(TooManyStatesError, match="there are 402 states"):
        driven(long, inputs={"F": "sin(t)"})


@given(st.integers(2, 6), st.integers(0, 2), st.data())
def test_a_chain_in_any_order_of_its_equations_is_one_model(
    n: int, first: int, data: st.DataObject
) -> None:
    """Flows are eliminated, whatever the order in which they are typed."""
    levels = [f"h{k}' = q{k} - q{k + 1}" for k in range(n)]
    flows = [f"q{k + 1} = h{k}/R{k}" for k in range(n)]
    equations = data.draw(st.permutations([*levels, *flows]))
    equations = [e.replace("q0", "(Q + 2*step(t - 1))") for e in equations]
    model = driven(
        {"title": "Tanks"},
        equations=equations,
        parameters={f"R{k}": "positive" for k in range(n)},
        inputs={"Q": "exp(-t)" if first else "5"},
        initial={f"h{k}": first for k in range(n)},
    )
    assert set(model.names) == {f"h{k}" for k in range(n)}
    assert left_over(model) == [{}] * (2 * n)
    rows = dict(zip(model.names, model.reduction.matrix.to_list(), strict=True))
    for k in range(n):
        weights = {o: str(e) for o, e in zip(model.names, rows[f"h{k}"], strict=True) if e}
        expected = {f"h{k}": f"-1/R{k}"} | ({f"h{k - 1}": f"1/R{k - 1}"} if k else {})
        assert weights == expected
