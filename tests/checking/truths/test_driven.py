"""Truths of models by equations and with inputs, against series in balls."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest
from flint import arb, ctx

from closedform.checking.truth import Truth
from closedform.checking.truths.errors import RepeatingInputError
from closedform.checking.truths.solved import truths_of
from closedform.model.building import model_from
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import Symbol
from tests.checking.truths.series import BITS, check, names_at, same, series

FREE = {"equations": ["x'' + 2*x' + 5*x = 0"], "initial": {"x": 1, "x'": 0}}
PIECES = {
    "equations": ["x'' + 3*x' + 2*x = F"],
    "initial": {"x": 1, "x'": 0},
    "inputs": {"F": {"pieces": [{"from": 0, "to": 1, "is": "4"}]}},
}
RESONANCE = {
    "equations": ["x'' + 9*x = sin(3*t)"],
    "initial": {"x": 0, "x'": 1},
}
COUPLED = {
    "equations": ["x'' + 2*x - y = 0", "y'' + 2*y - x = exp(-t)"],
    "initial": {"x": 1, "x'": 0, "y": 0, "y'": 0},
    "outputs": {"both": "x + y"},
}
POINTS = {"equations": ["x'' - x = 0"], "at_points": ["x(0) = 1", "x(1) = 0"]}


def truths(given: dict[str, Any]) -> tuple[Truth, ...]:
    return truths_of(model_from({"title": "A model", **given}, name="model"))


@pytest.mark.parametrize("given", [FREE, RESONANCE, COUPLED, POINTS, PIECES])
def test_the_motion_solves_the_equations_and_eigenvalues_are_of_the_states(
    given: dict[str, Any],
) -> None:
    (truth,) = truths(given)
    check(truth)
    assert truth.transition is not None
    assert sum(e.algebraic for e in truth.eigenvalues) == len(truth.states)


def test_a_free_model_by_equations() -> None:
    (truth,) = truths(FREE)
    assert truth.states == ("x", "x'")
    assert truth.jets == (("x", 0), ("x", 1))
    assert truth.drive == ()
    assert truth.inputs == truth.particular == {}
    assert plain_written(truth.characteristic) == "lambda^2 + 2*lambda + 5"
    assert set(truth.solution) == {"x", "x'", "x''"}
    assert {plain_written(tree) for tree in truth.steady.values()} == {"0"}


def test_pieces_of_an_input_and_of_the_solution() -> None:
    (truth,) = truths(PIECES)
    spans = [piece.between for piece in truth.solution["x"]]
    assert [(plain_written(a), b and plain_written(b)) for a, b in spans] == [
        ("0", "1"),
        ("1", None),
    ]
    assert [plain_written(piece.formula) for piece in truth.inputs["F"]] == ["4", "0"]
    assert [plain_written(piece.formula) for piece in truth.particular["x"]] == ["2", "0"]
    assert [[plain_written(p.formula) for p in row] for row in truth.drive] == [
        ["0", "0"],
        ["4", "0"],
    ]


def test_an_input_at_resonance_grows_and_has_no_steady_state() -> None:
    (truth,) = truths(RESONANCE)
    assert truth.steady == {}
    assert "t*cos(3*t)" in plain_written(truth.particular["x"][0].formula)
    assert [(e.algebraic, e.index) for e in truth.eigenvalues] == [(1, 1), (1, 1)]


def test_the_steady_state_is_what_is_left() -> None:
    given = {"equations": ["x'' + 2*x' + 2*x = 10*cos(t)"], "initial": {"x": 7, "x'": -1}}
    (truth,) = truths(given)
    check(truth)
    with ctx.workprec(BITS):
        names = names_at(truth, {}, arb(150))
        for name, tree in truth.steady.items():
            late = series(truth.solution[name][0].formula, names)[0]
            assert same(late, series(tree, names)[0])
    assert set(truth.steady) == {"x", "x'", "x''"}


def test_a_free_model_with_the_root_zero_tends_to_a_constant() -> None:
    (truth,) = truths({"equations": ["x'' + 2*x' = 0"], "initial": {"x": 1, "x'": 4}})
    told = {name: plain_written(tree) for name, tree in truth.steady.items()}
    assert told == {"x": "3", "x'": "0"}


def test_values_at_two_points_leave_no_initial_state() -> None:
    (truth,) = truths(POINTS)
    assert truth.initial is None
    with ctx.workprec(BITS):
        for t, wanted in ((0, 1), (1, 0)):
            names = names_at(truth, {}, arb(t))
            assert same(series(truth.solution["x"][0].formula, names)[0], arb(wanted))


def test_eliminated_unknowns_and_outputs_are_in_the_solution() -> None:
    given = {
        "equations": ["2*i_1 = 1 - v", "v' = i_1"],
        "initial": {"v": 0},
        "outputs": {"loss": "3*i_1"},
    }
    (truth,) = truths(given)
    check(truth)
    assert set(truth.solution) == {"v", "i_1", "loss", "v'"}
    assert truth.outputs == ("loss",)
    assert plain_written(truth.steady["i_1"]) == "0"


def test_parameters_at_and_away_from_resonance() -> None:
    given = {
        "equations": ["m*x'' + k*x = F0*sin(w*t)"],
        "initial": {"x": 0, "x'": 0},
        "parameters": {
            name: {"assume": "positive", "value": value}
            for name, value in (("m", 5), ("k", 2000), ("F0", 30), ("w", 20))
        },
    }
    away, at = truths(given)
    assert (away.values, [n for n, _ in at.equations]) == (None, ["k"])
    for truth in (away, at):
        check(truth)
        assert len(truth.samples) >= 3
        assert truth.particular
        assert len(truth.eigenvalues) == 2


def test_an_input_that_repeats_is_refused() -> None:
    given = {
        "equations": ["x' + x = u"],
        "initial": {"x": 0},
        "inputs": {"u": {"pieces": [{"from": 0, "to": 1, "is": "4"}], "period": 3}},
    }
    with pytest.raises(RepeatingInputError, match="the input u repeats"):
        truths(given)


@pytest.mark.parametrize("field", ["matrix", "transition", "solution", "particular"])
def test_what_is_altered_is_noticed(field: str) -> None:
    """The checks of this folder see a formula that is not true."""
    (truth,) = truths(RESONANCE)
    other = Symbol(truth.time)
    if field in ("matrix", "transition"):
        rows = getattr(truth, field)
        altered: Any = ((other, *rows[0][1:]), *rows[1:])
    else:
        functions = getattr(truth, field)
        altered = {**functions, "x": (replace(functions["x"][0], formula=other),)}
    with pytest.raises(AssertionError):
        check(replace(truth, **{field: altered}))
