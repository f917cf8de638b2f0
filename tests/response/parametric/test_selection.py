"""What selects a case: equations first, then what must not vanish, then signs."""

from __future__ import annotations

import pytest

from closedform.algebra.domain import Comparison
from closedform.algebra.regimes import Regime
from closedform.algebra.sample import holds_at
from closedform.response.parametric.selection import case_conditions
from tests.response.parametric.solved import MODELS, response_to


@pytest.mark.parametrize("name", MODELS)
def test_conditions_of_every_case_are_selected_once_more(name: str) -> None:
    response = response_to(name)
    for case in response.cases:
        selected = case_conditions(response.model.domain, case.branch, case.regimes)
        assert selected == (case.conditions, case.domain)


@pytest.mark.parametrize("name", MODELS)
def test_equations_come_before_inequations_before_signs(name: str) -> None:
    for case in response_to(name).cases:
        signs = [c.sign for c in case.conditions]
        ranks = [{"==": 0, "!=": 1}.get(sign, 2) for sign in signs]
        assert ranks == sorted(ranks)
        assert len(set(map(str, case.conditions))) == len(case.conditions)


@pytest.mark.parametrize("name", MODELS)
def test_points_of_the_selected_part_meet_the_regimes_and_miss_the_exceptions(name: str) -> None:
    response = response_to(name)
    field = response.model.field
    for case in response.cases:
        for point in case.domain.sample(3, 2):
            assert all(holds_at(c, point) for r in case.regimes for c in r.conditions)
            for item in case.branch.exceptional:
                put = [field.substituted(p, case.branch.values) for p in item.polynomials]
                assert any(holds_at(Comparison(p, "!="), point) for p in put)


def test_regimes_that_contradict_the_domain_select_nothing() -> None:
    response = response_to("damped")
    branch = response.branches[0]
    field = response.model.field
    never = Comparison(-field.symbol("m"), ">")
    assert case_conditions(response.model.domain, branch, [Regime("circular", (never,))]) is None


def test_a_condition_that_the_domain_implies_is_not_written() -> None:
    response = response_to("damped")
    branch = response.branches[0]
    always = Comparison(response.model.field.symbol("m"), ">")
    found = case_conditions(response.model.domain, branch, [Regime("circular", (always,))])
    assert found == ((), branch.domain)


def test_rates_that_meet_are_told_as_equations_and_inequations() -> None:
    texts = [case.condition for case in response_to("decay").cases]
    assert texts[0] == "k1 != k2 and k1 != k3 and k2 != k3"
    assert texts[1].startswith("k2 == k1")
    assert texts[-1] == "k2 == k1 and k3 == k1"
