"""Driven responses as they are shown and asked: columns, notebooks, values at an instant."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx

import closedform
from closedform.algebra.enclosure import ball_of
from closedform.algebra.surds import SurdSum
from closedform.notation.evaluation import enclose
from closedform.notation.plain import plain
from closedform.response.driven.period_formulas import MOST_PERIODS_WRITTEN
from closedform.response.driven.response import respond_driven
from closedform.response.driven.solution import UnendingSolutionError
from closedform.response.parametric.numbers import ValuesNotCoveredError
from tests.response.driven.test_driven_response import MODELS, _by_steps
from tests.response.driven.test_numbers import CASES, mount, pump
from tests.response.driven.test_repeated_values import repeated
from tests.verification.driven.made import stated


def test_the_solution_is_a_column_that_prints_and_shows() -> None:
    response = respond_driven(MODELS["tank and pump"])
    assert str(response.solution) == "10 - 7*exp(-t/5) + step(t - 10)*(10*exp(-(t - 10)/5) - 10)"
    latex = response._repr_latex_()
    assert latex is not None
    assert latex == response.solution._repr_latex_()
    assert latex.startswith(r"$\displaystyle \left[\begin{array}{c}")
    assert r"\varepsilon(t - 10)" in latex


def test_what_inputs_that_repeat_add_is_printed_below_the_rest() -> None:
    lines = str(respond_driven(repeated(None))).splitlines()
    assert [line.split(" = ")[0] for line in lines[:2]] == ["x1(t)", "x2(t)"]
    assert all(line.endswith(" + what repeats") for line in lines[:2])
    assert lines[2:4] == [
        "what repeats, tau after (n - 1)*3, for n = 1, 2, …:",
        "  0 <= tau < 1:",
    ]
    assert len(lines) == 3 + 3 * 3
    often = str(respond_driven(repeated(MOST_PERIODS_WRITTEN + 1))).splitlines()
    assert often[-3] == "  after these:"


def test_no_part_is_shown_as_the_solution_where_inputs_repeat_for_ever() -> None:
    for count in (None, MOST_PERIODS_WRITTEN + 1):
        response = respond_driven(repeated(count))
        with pytest.raises(UnendingSolutionError, match="`base`"):
            _ = response.solution
        assert response._repr_latex_() is None


def test_some_periods_are_written_in_one_formula() -> None:
    response = respond_driven(repeated(2))
    assert str(response) == "\n".join(
        f"{name}(t) = {plain(f)}" for name, f in zip(("x1", "x2"), response.solution, strict=True)
    )
    with ctx.workprec(200):
        for t in (Fraction(k, 7) for k in range(0, 70, 5)):
            values = [enclose(f, {"t": ball_of(SurdSum.rational(t))}) for f in response.solution]
            for value, expected in zip(values, response.solution_at(t, 20), strict=True):
                assert value.overlaps(expected)


def test_what_strikes_at_the_start_is_told_apart_from_initial_values() -> None:
    def jump(equation: str, u: object) -> list[str] | None:
        mapping = {"equations": [equation], "initial": {"x": 0, "x'": 0}, "inputs": {"u": u}}
        own = respond_driven(stated(mapping)).solutions[0].start_jump
        return None if own is None else list(map(plain, own))

    assert jump("x'' + 3*x' + 2*x = u' + 5*u", "step(t)") == ["0", "1"]
    assert jump("x'' + 3*x' + 2*x = u' + 5*u", "1") is None
    assert jump("2*x'' + x = u", "3*delta(t) + delta(t - 1)") == ["0", "3/2"]
    assert jump("2*x'' + x = u", "delta(t - 1)") is None
    assert jump("x'' + x = u", {"is": "5*delta(t)", "period": "2"}) == ["0", "5"]
    struck = {"equations": ["x' = a*u"], "initial": {"x": 0}, "parameters": {"a": "positive"}}
    (own,) = respond_driven(stated({**struck, "inputs": {"u": "3*delta(t)"}})).solutions
    assert str(own.start_jump) == "3*a"


def test_several_cases_show_side_by_side_and_have_no_common_solution() -> None:
    response = respond_driven(mount(None))
    latex = response._repr_latex_()
    assert latex is not None
    assert latex.startswith(r"$\displaystyle \left\{\begin{array}{ll}")
    assert latex.count(r"\\[1ex]") == 3
    assert r"c = 0" in latex
    with pytest.raises(ValueError, match="several cases"):
        _ = response.solution


@pytest.mark.parametrize("name", MODELS)
def test_values_at_an_instant_are_those_found_step_by_step(name: str) -> None:
    response = respond_driven(MODELS[name])
    with ctx.workprec(300):
        for t in (Fraction(1), Fraction(3), Fraction(10), Fraction(41, 4)):
            expected = _by_steps(MODELS[name], t)
            for ours, theirs in zip(response.solution_at(t, 20), expected, strict=True):
                assert ours.overlaps(theirs)
                assert ours.rad() < arb("1e-20") * (1 + abs(theirs))


@pytest.mark.parametrize("place", range(len(CASES)))
def test_values_of_parameters_are_put_in(place: int) -> None:
    make, given = CASES[place]
    values = {name: Fraction(value) for name, value in given.items()}
    with ctx.workprec(300):
        found = respond_driven(make(None)).solution_at(Fraction(9, 2), 25, values=values)
        expected = respond_driven(make(values)).solution_at(Fraction(9, 2), 25)
        assert all(a.overlaps(b) for a, b in zip(found, expected, strict=True))


def test_a_parameter_without_a_value_and_values_without_a_case_are_refused() -> None:
    response = respond_driven(pump(None))
    with pytest.raises(ValueError, match="no value is given for k, q"):
        response.solution_at(1, values={"T": 1, "x0": 2})
    with pytest.raises(ValuesNotCoveredError):
        response.solution_at(1, values={"k": -1, "q": 1, "T": 1, "x0": 2})


def test_the_library_takes_driven_models_as_it_takes_others() -> None:
    response = closedform.respond(MODELS["blow"])
    assert isinstance(response, closedform.DrivenResponse)
    assert isinstance(response.model, closedform.DrivenModel)
    assert closedform.verify(response).holds
    assert closedform.verify(closedform.respond(pump(None))).holds
