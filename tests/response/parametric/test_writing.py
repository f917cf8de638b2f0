"""A branch in one regime is written with short formulas and names that are used."""

from __future__ import annotations

import pytest

from closedform.algebra.domain import Comparison
from closedform.algebra.regimes import Regime
from closedform.notation import plain
from closedform.notation.expression import Expression, names_in
from closedform.response.parametric.case import Case, Sought
from closedform.response.parametric.response import respond_in_cases
from closedform.response.parametric.writing import written_case
from tests.response.parametric.solved import MODELS, model, response_to


def formulas_of(case: Case) -> list[Expression]:
    front = [] if case.fronted[0] is None else [case.fronted[0]]
    entries = [f for rows in (case.transition, case.fronted[1]) for row in rows for f in row]
    return [*case.solution, *case.outputs, *entries, *front]


@pytest.mark.parametrize("name", MODELS)
def test_every_name_in_a_formula_is_a_parameter_or_defined_before(name: str) -> None:
    response = response_to(name)
    for case in response.cases:
        known = set(response.model.field.parameters)
        for quantity in case.quantities:
            if quantity.formula is not None:
                assert names_in(quantity.formula) <= known
            known.add(quantity.name)
        known.add(response.model.time)
        assert set().union(*map(names_in, formulas_of(case))) <= known


@pytest.mark.parametrize("name", MODELS)
def test_a_parameter_that_an_equation_gives_is_put_in(name: str) -> None:
    for case in response_to(name).cases:
        used = set().union(*map(names_in, formulas_of(case)))
        assert not used & set(case.branch.values)


@pytest.mark.parametrize("name", MODELS)
def test_abbreviations_that_are_defined_are_used(name: str) -> None:
    for case in response_to(name).cases:
        later = [q.formula for q in case.quantities if q.formula is not None]
        used = set().union(*map(names_in, [*formulas_of(case), *later]))
        assert {q.name for q in case.quantities if q.origin != "roots"} <= used


@pytest.mark.parametrize("name", MODELS)
def test_the_names_of_modes_come_last_with_their_definitions(name: str) -> None:
    for case in response_to(name).cases:
        names = [n for mode in case.modes for n in mode.names]
        assert [q.name for q in case.quantities if q.origin == "roots"] == names
        assert all((q.formula is None) != (q.root is None) for q in case.quantities)


def test_a_damped_oscillator_is_written_as_in_the_trade() -> None:
    cases = response_to("damped").cases
    defined = [
        [(q.name, plain(q.formula)) for q in case.quantities if q.formula is not None]
        for case in cases
    ]
    assert [name for name, _ in defined[0]][-1] == "omega_d"
    assert [name for name, _ in defined[2]][-1] == "kappa"
    assert "cos(omega_d*t)" in plain(cases[0].solution[0])
    assert "cosh(kappa*t)" in plain(cases[2].solution[0])
    assert not {"sin", "cos", "sinh", "cosh"} & set(plain(cases[1].solution[0]).split("("))


def test_abbreviations_of_the_user_are_taken_where_they_shorten() -> None:
    mine = respond_in_cases(model("damped", abbreviations={"beta": "c/(2*m)"}))
    case = mine.cases[0]
    (own,) = (q for q in case.quantities if q.origin == "user")
    assert (own.name, plain(own.formula)) == ("beta", "c/(2*m)")
    assert "exp(-beta*t)" in plain(case.solution[0])


def test_regimes_of_a_branch_share_their_abbreviations() -> None:
    first, *others = response_to("damped").cases
    for case in others:
        assert set(case.abbreviated) <= set(first.abbreviated)


def test_a_regime_that_contradicts_the_domain_has_no_case() -> None:
    response = response_to("damped")
    branch = response.branches[0]
    never = Regime("circular", (Comparison(-response.model.field.symbol("m"), ">"),))
    functions = Sought(response.cases[0].state, response.cases[0].output)
    assert written_case(response.model, branch, (never,), functions, 0) is None


@pytest.mark.parametrize("name", ["damped", "depot"])
def test_a_case_is_written_the_same_each_time(name: str) -> None:
    response = response_to(name)
    first = response.cases[0]
    again = written_case(
        response.model, first.branch, first.regimes, Sought(first.state, first.output), 0
    )
    assert again == first
