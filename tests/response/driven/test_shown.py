"""Driven responses as they are shown and asked: columns, notebooks, values at an instant."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx

import closedform
from closedform.response.driven.response import respond_driven
from closedform.response.parametric.numbers import ValuesNotCoveredError
from tests.response.driven.test_driven_response import MODELS, _by_steps
from tests.response.driven.test_numbers import CASES, mount, pump
from tests.response.driven.test_repeated_values import repeated


def test_the_solution_is_a_column_that_prints_and_shows() -> None:
    response = respond_driven(MODELS["tank and pump"])
    assert str(response.solution) == "10 - 7*exp(-t/5) + step(t - 10)*(10*exp(-(t - 10)/5) - 10)"
    latex = response._repr_latex_()
    assert latex == response.solution._repr_latex_()
    assert latex.startswith(r"$\displaystyle \left[\begin{array}{c}")
    assert r"\varepsilon(t - 10)" in latex


def test_what_inputs_that_repeat_add_is_printed_below_the_solution() -> None:
    lines = str(respond_driven(repeated(None))).splitlines()
    assert lines[0].startswith("x1(t) = ")
    assert lines[2:4] == ["added tau after (n - 1)*3:", "  0 <= tau < 1:"]
    assert len(lines) == 3 + 3 * 3


def test_several_cases_show_side_by_side_and_have_no_common_solution() -> None:
    response = respond_driven(mount(None))
    latex = response._repr_latex_()
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
