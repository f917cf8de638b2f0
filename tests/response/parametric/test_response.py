"""The response of a model with parameters has a case for every value they may take."""

from __future__ import annotations

from dataclasses import replace
from itertools import product

import pytest

import closedform
from closedform.algebra.branches import Exceptional
from closedform.algebra.domain import Comparison
from closedform.algebra.exceptional import RootsUnknownError
from closedform.algebra.regimes import regimes_of
from closedform.notation import plain
from closedform.response.parametric.response import ParametricResponse, respond_in_cases
from tests.response.parametric.solved import MODELS, model, response_to


@pytest.mark.parametrize("name", MODELS)
def test_cases_are_numbered_and_follow_their_branches(name: str) -> None:
    response = response_to(name)
    assert [case.number for case in response.cases] == list(range(len(response.cases)))
    places = [case.branch.number for case in response.cases]
    assert places == sorted(places)
    assert all(case.branch is response.branches[case.branch.number] for case in response.cases)
    assert response.not_covered == ()


@pytest.mark.parametrize("name", MODELS)
def test_regimes_of_a_case_are_among_those_of_its_factors(name: str) -> None:
    response = response_to(name)
    for branch in response.branches:
        ways = [
            regimes_of(response.model.field, factor, structure, branch.domain)
            for factor, structure in zip(branch.spectrum.factors, branch.structures, strict=True)
        ]
        found = [case.regimes for case in response.cases if case.branch is branch]
        assert set(found) <= set(product(*ways))
        assert len(set(found)) == len(found)


@pytest.mark.parametrize("name", MODELS)
def test_functions_have_the_shapes_of_the_model(name: str) -> None:
    response = response_to(name)
    n, m = len(response.model.states), len(response.model.outputs)
    assert response.matrix.shape == (n, n)
    assert response.initial.shape == (n, 1)
    for case in response.cases:
        assert case.state.shape == (n, 1)
        assert (case.output is None) == (m == 0)
        assert (len(case.solution), len(case.outputs)) == (n, m)
        assert [len(row) for row in case.transition] == [n] * n
        assert [len(row) for row in case.fronted[1]] == [n] * n


def test_points_at_which_the_model_is_not_defined_are_left_out_of_the_domain() -> None:
    made = closedform.system(
        [["-1/(a - b)"]], initial=["1/(a + 2)"], parameters={"a": "real", "b": "real"}
    )
    assert isinstance(made, closedform.ParametricModel)
    response = respond_in_cases(made)
    a, b = made.field.symbol("a"), made.field.symbol("b")
    for element in (a - b, a + 2):
        assert response.domain.implies(Comparison(element, "!="))


def two_tanks() -> ParametricResponse:
    made = closedform.system(
        [["-a", 0], ["a", "-b"]], initial=["p", 0], parameters=dict.fromkeys("abp", "positive")
    )
    assert isinstance(made, closedform.ParametricModel)
    return respond_in_cases(made)


def test_what_is_not_covered_is_told_as_conditions() -> None:
    response = two_tanks()
    generic = response.branches[0]
    (item,) = generic.exceptional
    left = replace(
        generic, exceptional=(Exceptional(item.polynomials, "not covered", reason="budget"),)
    )
    gap = replace(response, branches=(left,))
    assert [[str(c) for c in found] for found in gap.not_covered] == [["a == b"]]
    deeper = replace(response.branches[1], exceptional=left.exceptional)
    gap = replace(response, branches=(generic, deeper))
    assert [[str(c) for c in found] for found in gap.not_covered] == [["b == a", "a == b"]]


def test_the_response_as_text_has_a_line_for_each_state_and_name() -> None:
    text = str(two_tanks())
    assert text.splitlines() == [
        "if a != b:",
        "  x1(t) = p*exp(-a*t)",
        f"  x2(t) = {plain(two_tanks().cases[0].solution[1])}",
        "if b == a:",
        "  x1(t) = p*exp(-a*t)",
        "  x2(t) = a*p*t*exp(-a*t)",
    ]
    assert "alpha is root 3, by real part, of the coefficients " in str(response_to("compartments"))
    assert str(response_to("compartments")).startswith("always:\n")
    assert "  omega_d = sqrt(" in str(response_to("damped"))


def test_the_short_form_counts_states_and_cases() -> None:
    assert repr(two_tanks()).endswith("2 states, 2 cases>")


def test_latex_has_a_row_for_each_case() -> None:
    latex = two_tanks()._repr_latex_()
    assert latex.startswith("$")
    assert latex.endswith("$")
    assert latex.count(r"\\[1ex]") == 1
    assert r"a \neq b" in latex
    single = response_to("compartments")
    assert single._repr_latex_() == single.cases[0].solution._repr_latex_()


def test_a_quantity_without_a_definition_is_a_mistake() -> None:
    response = response_to("damped")
    bare = replace(response.cases[0].quantities[0], formula=None, root=None)
    with pytest.raises(TypeError, match="has no definition"):
        response._defined(bare)


def test_a_model_whose_roots_are_not_known_is_refused() -> None:
    made = closedform.system(
        [[0, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1], ["-a", "-b", 0, 0]],
        initial=[1, 0, 0, 0],
        parameters={"a": "positive", "b": "positive"},
    )
    assert isinstance(made, closedform.ParametricModel)
    with pytest.raises(RootsUnknownError, match="irreducible factor of degree 4") as caught:
        respond_in_cases(made)
    assert str(caught.value).startswith(f"{made.name}: ")


@pytest.mark.parametrize("name", ["damped", "decay"])
def test_the_same_model_gives_the_same_text(name: str) -> None:
    assert str(respond_in_cases(model(name))) == str(response_to(name))
