"""Conditions at several instants: textbook problems, problems without one solution, and any."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from fractions import Fraction
from typing import Any

import pytest
from flint import arb, arb_mat
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from closedform.model.building import model_from
from closedform.model.driven.model import DrivenModel
from closedform.model.driven.signal_errors import UnknownOrderError
from closedform.notation.plain import plain
from closedform.response.driven.boundary_errors import (
    ConditionCountError,
    ConditionRootsError,
    ManySolutionsError,
    NoSolutionError,
    RepeatingConditionsError,
)
from closedform.response.driven.determined import PointConstants
from closedform.response.driven.response import DrivenResponse, respond_driven
from closedform.response.driven.sampling import enclosed_at


def model_of(**keys: Any) -> DrivenModel:
    model = model_from({"title": "A line", **keys}, name="line")
    assert isinstance(model, DrivenModel)
    return model


def solved(**keys: Any) -> DrivenResponse:
    return respond_driven(model_of(**keys))


def first_row(**keys: Any) -> list[str]:
    return [plain(solution.solution[0]) for solution in solved(**keys).solutions]


def points_of(response: DrivenResponse) -> list[PointConstants]:
    found = [solution.points for solution in response.solutions]
    assert all(points is not None for points in found)
    return [points for points in found if points is not None]


def named(*names: str, **other: str) -> dict[str, str]:
    return {**dict.fromkeys(names, "positive"), **other}


# Textbook problems


def test_a_fin_between_two_temperatures() -> None:
    keys = {
        "equations": ["y'' = m^2*y"],
        "time": "z",
        "parameters": named("m", "L", y1="real", y2="real"),
    }
    rows = first_row(**keys, at_points=["y(0) = y1", "y(L) = y2"])
    assert rows == ["(y2*sinh(m*z) - y1*sinh(m*(z - L)))/sinh(m*L)"]
    rows = first_row(**keys, at_points=["y(0) = y1", "y'(L) = y2*m"])
    assert rows == ["(y2*sinh(m*z) + y1*cosh(m*(z - L)))/cosh(m*L)"]


def test_a_harmonic_motion_between_two_places() -> None:
    rows = first_row(equations=["x'' + 9*x = 0"], at_points=["x(0) = 0", "x(pi/6) = 1"])
    assert rows == ["sin(3*t)"]


def test_a_beam_under_its_load() -> None:
    """Clamped at one end, hinged at the other: w z^2 (3 L^2 - 5 L z + 2 z^2)/(48 EI)."""
    rows = first_row(
        equations=["EI*v'''' = q"],
        time="z",
        parameters=named("EI", "L", q="real"),
        at_points=["v(0) = 0", "v'(0) = 0", "v(L) = 0", "v''(L) = 0"],
    )
    assert rows == ["q*z^2*(3*L^2 - 5*L*z + 2*z^2)/(48*EI)"]


def test_every_regime_of_a_damped_motion_has_its_form() -> None:
    response = solved(
        equations=["x'' + k*x = 0"],
        parameters={"k": "real", "T": "positive", "d": "real"},
        at_points=["x(0) = 0", "x(T) = d"],
    )
    rows = [plain(solution.solution[0]) for solution in response.solutions]
    conditions = [solution.condition for solution in response.solutions]
    assert dict(zip(conditions, rows, strict=True)) == {
        "k > 0": "d*sin(omega_n*t)/sin(omega_n*T)",
        "k == 0": "d*t/T",
        "k < 0": "d*sinh(kappa*t)/sinh(kappa*T)",
    }
    provided = [list(map(plain, points.provided)) for points in points_of(response)]
    assert dict(zip(conditions, provided, strict=True)) == {
        "k > 0": ["sin(omega_n*T)"],
        "k == 0": [],
        "k < 0": [],
    }


def test_a_convective_tip_needs_no_proviso() -> None:
    response = solved(
        equations=["T'' = m^2*T"],
        time="z",
        parameters=named("m", "L", "k", "h", "T_b"),
        at_points=["T(0) = T_b", "k*T'(L) + h*T(L) = 0"],
    )
    assert plain(response.solutions[0].solution[0]) == (
        "T_b*(m*k*cosh(m*(z - L)) - h*sinh(m*(z - L)))/(h*sinh(m*L) + m*k*cosh(m*L))"
    )
    (points,) = points_of(response)
    assert not points.provided
    assert all(argument is not None for argument in points.arguments)


def test_a_column_clamped_at_both_ends_buckles_somewhere() -> None:
    response = solved(
        equations=["EI*v'''' + P*v'' = q"],
        time="z",
        parameters=named("EI", "P", "L", q="real"),
        at_points=["v(0) = 0", "v'(0) = 0", "v(L) = 0", "v'(L) = 0"],
    )
    (points,) = points_of(response)
    assert list(map(plain, points.provided)) == ["2*cos(omega_n*L) - 2 + omega_n*L*sin(omega_n*L)"]
    assert "provided that 2*cos(omega_n*L) - 2" in str(response)


def test_the_order_of_conditions_and_switchings_has_to_be_known() -> None:
    keys = {
        "equations": ["x'' + x = F"],
        "inputs": {"F": [{"from": "0", "to": "T1", "is": "1"}]},
        "parameters": named("T", "T1"),
        "at_points": ["x(0) = 0", "x(T) = 1"],
    }
    with pytest.raises(UnknownOrderError):
        solved(**keys)
    assert len(solved(**keys, conditions=["T1 < T"]).solutions) == 1


def test_resonance_between_two_points() -> None:
    rows = first_row(
        equations=["x'' + w^2*x = sin(w*t)"],
        parameters=named("w"),
        at_points=["x(0) = 0", "x(pi/(2*w)) = 1"],
    )
    assert rows == ["sin(w*t) - t*cos(w*t)/(2*w)"]


def test_three_points() -> None:
    rows = first_row(equations=["x''' + x' = 1"], at_points=["x(0) = 0", "x(1) = 1", "x(2) = 0"])
    assert rows == ["t + sin(t)/sin(1) + (1 - cos(t))/(cos(1) - 1)"]


def test_all_conditions_at_one_later_instant() -> None:
    rows = first_row(equations=["x'' + x' = 0"], at_points=["x(2) = 3", "x'(2) = 1"])
    assert rows == ["4 - exp(-(t - 2))"]
    response = solved(equations=["x'' + x' = 0"], at_points=["x(2) = 3", "x'(2) = 1"])
    assert meets(response, 2, [1, 0], 3)
    assert meets(response, 2, [0, 1], 1)


def test_a_start_before_the_first_condition() -> None:
    response = solved(
        equations=["x' = -x + F"],
        start="1",
        inputs={"F": [{"from": "1", "to": "2", "is": "2*t"}]},
        at_points=["x(3) = 1"],
    )
    assert meets(response, 3, [1], 1)
    assert len(response.solutions[0].functions.intervals) == 2


def test_conditions_on_eliminated_unknowns() -> None:
    """The current of a capacitor that discharges, at one instant."""
    response = solved(equations=["i_R = v/2", "3*v' = -i_R"], at_points=["i_R(1) = 1"])
    assert plain(response.solutions[0].solution[1]).startswith("exp(")
    assert meets(response, 1, [0, 1], 1)


def test_an_impulse_at_the_instant_of_a_condition_comes_after_it() -> None:
    for at in (0, 1):
        response = solved(
            equations=["x' = -x + u"],
            inputs={"u": f"2*delta(t - {at})"},
            at_points=[f"x({at}) = 3"],
        )
        after = enclosed_at(response.solutions[0], Fraction(at), 20)[0]
        assert after.contains(5)


# Without one solution


def test_conditions_that_contradict_each_other() -> None:
    with pytest.raises(NoSolutionError) as error:
        solved(equations=["x'' + 9*x = 0"], at_points=["x(0) = 1", "x(pi/3) = 1"])
    assert error.value.condition == "x(pi/3) = 1"
    assert error.value.others == ("x(0) = 1",)
    assert (error.value.left, error.value.value) == ("x(pi/3)", "-1")
    assert "x(pi/3) = -1, so x(pi/3) = 1 cannot hold" in str(error.value)


def test_conditions_that_leave_a_motion_free() -> None:
    with pytest.raises(ManySolutionsError) as error:
        solved(equations=["x'' + 9*x = 0"], at_points=["x(0) = 0", "x(pi/3) = 0"])
    assert error.value.free == 1
    ((name, motion),) = error.value.motion
    assert (name, motion) == ("x", "sin(3*t)")


def test_forces_that_do_not_balance() -> None:
    keys = {"equations": ["x'' = 6"]}
    with pytest.raises(NoSolutionError):
        solved(**keys, at_points=["x'(0) = 0", "x'(1) = 0"])
    with pytest.raises(ManySolutionsError):
        solved(**keys, at_points=["x'(0) = 0", "x'(1) = 6"])


def test_the_same_condition_twice() -> None:
    with pytest.raises(ManySolutionsError):
        solved(equations=["x'' + x = 0"], at_points=["x(0) = 1", "2*x(0) = 2"])
    with pytest.raises(NoSolutionError):
        solved(equations=["x'' + x = 0"], at_points=["x(0) = 1", "2*x(0) = 3"])


def test_a_case_without_a_solution_is_told() -> None:
    """A shaft free at both ends: without a spring to the ground it may turn."""
    keys = {
        "equations": ["J*x'' + k*x = 0"],
        "parameters": {"J": "positive", "k": "nonnegative", "T": "positive"},
        "at_points": ["x'(0) = 1", "x'(T) = 1"],
    }
    with pytest.raises(ManySolutionsError) as error:
        solved(**keys)
    assert error.value.case == "k = 0"
    assert "in the case k = 0" in str(error.value)
    assert "'conditions'" in str(error.value)


def test_inputs_that_repeat_and_roots_of_high_degree_are_refused() -> None:
    with pytest.raises(RepeatingConditionsError):
        solved(
            equations=["x' = -x + u"],
            inputs={"u": {"pieces": [{"from": "0", "to": "1", "is": "1"}], "period": "2"}},
            at_points=["x(1) = 0"],
        )
    with pytest.raises(ConditionRootsError):
        solved(
            equations=["x''' + x' + x = 0"],
            at_points=["x(0) = 0", "x'(0) = 0", "x(1) = 1"],
        )


def test_another_number_of_conditions() -> None:
    model = model_of(equations=["x'' + x = 0"], at_points=["x(0) = 1", "x(1) = 2"])
    with pytest.raises(ConditionCountError):
        respond_driven(replace(model, conditions=model.conditions[:1]))


# Any


def meets(response: DrivenResponse, at: Fraction | int, weights: Sequence[int], value: int) -> bool:
    balls = enclosed_at(response.solutions[0], Fraction(at), 20)
    total = sum((w * ball for w, ball in zip(weights, balls, strict=False)), arb(0))
    return bool(total.contains(value)) and bool(total.rad() < arb("1e-12"))


SMALL = st.integers(-2, 2)
INSTANTS = st.sampled_from([Fraction(0), Fraction(1, 2), Fraction(1), Fraction(2)])


@st.composite
def problems(draw: st.DrawFn) -> dict[str, Any]:
    """Two or three states, numbers, conditions anywhere, perhaps a step between them."""
    n = draw(st.integers(1, 3))
    names = [f"x{k}" for k in range(1, n + 1)]
    rows = [[draw(SMALL) for _ in names] for _ in names]
    conditions = []
    for _ in names:
        weights = [draw(SMALL) for _ in names]
        assume(any(weights))
        at = draw(INSTANTS)
        left = " + ".join(f"({w})*{x}({at})" for w, x in zip(weights, names, strict=True) if w)
        conditions.append((weights, at, draw(SMALL), left))
    driven = draw(st.booleans())
    keys: dict[str, Any] = {
        "states": names,
        "matrix": [[str(e) for e in row] for row in rows],
        "at_points": [f"{left} = {value}" for *_, value, left in conditions],
    }
    if driven:
        keys["input_matrix"] = [["1"], *[["0"]] * (n - 1)]
        keys["inputs"] = {"u": "step(t - 1)"}
    return {"keys": keys, "rows": rows, "conditions": conditions, "driven": driven}


@given(problems())
@settings(max_examples=25)
def test_any_solution_meets_its_conditions_and_its_equations(problem: dict[str, Any]) -> None:
    try:
        response = solved(**problem["keys"])
    except (NoSolutionError, ManySolutionsError, ConditionRootsError):
        return
    for weights, at, value, _ in problem["conditions"]:
        assert meets(response, at, weights, value)
    solution = response.solutions[0]
    n = len(problem["rows"])
    first = enclosed_at(solution, Fraction(0), 25)
    later = enclosed_at(solution, Fraction(1, 3), 25)
    moved = (arb_mat(problem["rows"]) * (arb(1) / 3)).exp() * arb_mat([[x] for x in first])
    for k in range(n):
        assert moved[k, 0].overlaps(later[k])


@given(st.integers(-3, 3), st.integers(-3, 3), st.integers(1, 4), st.integers(1, 3))
@settings(max_examples=20)
def test_conditions_taken_from_a_known_motion_give_it_back(a: int, b: int, w: int, m: int) -> None:
    """x = a cos(w t) + b sin(w t), from its values at 0 and at a quarter of m turns."""
    assume(m % 2 == 1 or b == 0)
    quarter = {1: b, 2: -a, 3: -b}[m]
    keys = {
        "equations": [f"x'' + {w * w}*x = 0"],
        "at_points": [f"x(0) = {a}", f"x({m}*pi/{2 * w}) = {quarter}"],
    }
    if m == 2:
        with pytest.raises(ManySolutionsError):
            solved(**keys)
        return
    (solution,) = solved(**keys).solutions
    assert solution.points is not None
    found = solution.points.found.initial_in_field
    assert found == (solution.model.field.scalar(a), solution.model.field.scalar(b * w))
