"""A response with parameters that has one fault is refuted or left open: nothing is issued."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

import pytest

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.exponential import ExponentialMatrix
from closedform.notation.expression import Name, Number, Product, Quotient, Sum
from closedform.response.parametric.conditions import WrittenComparison
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.conditions import condition_check
from closedform.verification.parametric.cover import cover_check
from closedform.verification.parametric.defined import defined_check
from closedform.verification.parametric.identities import branch_checks, state_checks
from closedform.verification.parametric.verify import verify_cases
from closedform.verification.parametric.written import formula_check
from closedform.verification.record import Check
from tests.verification.parametric.spoiling import (
    KINDS,
    equal_values,
    formulas_of,
    other_conditions,
    response_to,
    with_branch,
    with_case,
    with_exceptional,
    with_formula,
    with_quantity,
)
from tests.verification.tampering import _negated, numbers_of, slips, with_number

each_kind = pytest.mark.parametrize("kind", KINDS)
IN_CASES = [kind for kind in KINDS if kind in ("pair", "rates", "depot")]
ROOTS = ["star", "cubic"]


def noticed(*checks: Check) -> bool:
    """Whether one of these checks keeps the response from being issued."""
    return any(
        check.outcome == "refuted" or (check.essential and check.outcome == "not attempted")
        for check in checks
    )


def is_refused(response: ParametricResponse) -> bool:
    records = verify_cases(response)
    assert records.holds == (not records.refuted and not records.left_open)
    return not records.holds


@each_kind
def test_the_untouched_response_of_each_kind_is_proved(kind: str) -> None:
    records = verify_cases(response_to(kind))
    assert records.refuted == records.left_open == ()
    assert records.holds


# --- functions -----------------------------------------------------------------------------


@each_kind
def test_any_changed_coefficient_of_an_exponential_is_refuted(kind: str) -> None:
    response = response_to(kind)
    one = response.model.field.domain.one
    for branch in response.branches:
        for place, element in numbers_of(branch.exponential):
            wrong = with_number(branch.exponential, place, element + one)
            spoiled = with_branch(response, branch.number, exponential=wrong)
            checks = branch_checks(spoiled, spoiled.branches[branch.number])
            found = {check.item for check in checks if check.outcome == "refuted"}
            assert found & {"d/dt e^(At) - A e^(At) = 0", "e^(A0) = I"}


@each_kind
def test_a_wrong_exponential_that_the_state_follows_from_is_refused(kind: str) -> None:
    response = response_to(kind)
    branch = response.branches[0]
    place, element = next((p, e) for p, e in numbers_of(branch.exponential) if e)
    wrong = with_number(branch.exponential, place, -element)
    spoiled = with_branch(response, 0, exponential=wrong)
    initial = response.initial
    for case in spoiled.cases:
        if case.branch.number == 0:
            spoiled = with_case(spoiled, case.number, state=wrong.times(initial))
    assert is_refused(spoiled)


@each_kind
@pytest.mark.parametrize("part", ["state", "output"])
def test_any_changed_coefficient_of_the_state_or_the_outputs_is_refuted(
    kind: str, part: str
) -> None:
    response = response_to(kind)
    one = response.model.field.domain.one
    for case in response.cases:
        function: ExponentialMatrix | None = getattr(case, part)
        for place, element in numbers_of(function) if function is not None else ():
            wrong = with_number(function, place, element + one)
            spoiled = with_case(response, case.number, **{part: wrong})
            found = [
                check.item
                for check in state_checks(spoiled, spoiled.cases[case.number])
                if check.outcome == "refuted"
            ]
            assert {"state": "x = e^(At) x0", "output": "y = C x"}[part] in found


def test_outputs_that_are_missing_are_refuted() -> None:
    response = response_to("pair")
    spoiled = with_case(response, 0, output=None)
    (fault,) = (c for c in state_checks(spoiled, spoiled.cases[0]) if c.outcome == "refuted")
    assert (fault.item, fault.how) == ("y = C x", "there are more of them, or fewer")


# --- formulas ------------------------------------------------------------------------------


@each_kind
def test_a_sign_turned_in_front_of_any_formula_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for case in response.cases:
        for where, formula in formulas_of(response, case.number):
            spoiled = with_formula(response, case.number, where, _negated(formula))
            check = formula_check(spoiled, spoiled.cases[case.number])
            assert check.outcome == "refuted", where
            assert "differs at" in check.how


@pytest.mark.parametrize(("kind", "number"), [("pair", 0), ("pair", 1), ("pair", 2), ("rates", 1)])
def test_any_slip_of_the_pen_in_the_solution_is_refuted(kind: str, number: int) -> None:
    response = response_to(kind)
    formula = response.cases[number].solution[-1]
    for kind_of_slip, wrong in slips(formula, response.model.time):
        spoiled = with_formula(response, number, ("solution", 1), wrong)
        check = formula_check(spoiled, spoiled.cases[number])
        assert check.outcome == "refuted", kind_of_slip


@each_kind
def test_an_entry_to_which_another_is_added_is_refuted(kind: str) -> None:
    response = response_to(kind)
    n = len(response.model.states)
    for case in response.cases:
        wrong = Sum((case.transition[0][0], case.transition[n - 1][n - 1]))
        spoiled = with_formula(response, case.number, ("transition", n - 1, n - 1), wrong)
        assert formula_check(spoiled, spoiled.cases[case.number]).outcome == "refuted"


@pytest.mark.parametrize(("number", "other"), [(0, 1), (0, 2), (1, 0), (1, 2), (2, 0), (2, 1)])
def test_formulas_of_another_regime_are_refuted(number: int, other: int) -> None:
    """With their names or without: then a name has no definition."""
    response = response_to("pair")
    case = response.cases[other]
    parts = ("solution", "outputs", "transition", "fronted")
    fields = {part: getattr(case, part) for part in parts}
    names = (*response.cases[number].quantities, *case.quantities)
    known = {q.name: q for q in names}
    spoiled = with_case(response, number, **fields, quantities=tuple(known.values()))
    assert formula_check(spoiled, spoiled.cases[number]).outcome == "refuted"
    spoiled = with_case(response, number, **fields, quantities=case.quantities)
    checks = verify_cases(spoiled).cases[number].refuted
    assert "formulas as written" in {check.item for check in checks}


def test_formulas_for_equal_rates_are_refuted_where_the_rates_differ() -> None:
    response = response_to("rates")
    apart, equal = response.cases
    spoiled = with_case(response, 0, solution=equal.solution, transition=equal.transition)
    assert formula_check(spoiled, spoiled.cases[0]).outcome == "refuted"
    spoiled = with_case(response, 1, solution=apart.solution, transition=apart.transition)
    assert noticed(formula_check(spoiled, spoiled.cases[1]))


def test_a_formula_that_divides_by_what_may_vanish_is_left_open() -> None:
    """m = c/(2 delta) is true, but c and delta may both be 0."""
    model = replace(response_to("pair").model)
    field = model.field
    c = field.symbol("c")
    wider = ParameterDomain(
        field,
        tuple(
            Comparison(c, ">=") if condition == Comparison(c, ">") else condition
            for condition in model.domain.conditions
        ),
    )
    assert wider != model.domain
    response = response_to("pair")
    spoiled = replace(response, model=replace(model, domain=wider), domain=wider)
    for case in spoiled.cases:
        inside = wider.narrowed(*(d for r in case.regimes for d in r.conditions))
        spoiled = with_case(spoiled, case.number, domain=inside)
    m = Quotient(Name("c"), Product((Number(Fraction(2)), Name("delta"))))
    output = spoiled.cases[0].outputs[0]
    assert defined_check(spoiled, spoiled.cases[0]).outcome == "proved"
    wrong = Quotient(Product((output, m)), Name("m"))
    spoiled = with_formula(spoiled, 0, ("outputs", 0), wrong)
    check = defined_check(spoiled, spoiled.cases[0])
    assert check.outcome == "not attempted"
    assert check.essential
    assert "delta" in check.how


@each_kind
def test_a_difference_of_equals_as_divisor_is_noticed(kind: str) -> None:
    response = response_to(kind)
    name = Name(response.model.field.parameters[0])
    one = Quotient(Sum((name, Number(Fraction(-1)))), Sum((name, Number(Fraction(-1)))))
    for case in response.cases:
        wrong = Product((case.solution[0], one))
        spoiled = with_formula(response, case.number, ("solution", 0), wrong)
        known = [c for c in case.domain.conditions if c.relation in (">", "!=")]
        minus_one = response.model.field.symbol(name.text) - 1
        if not ParameterDomain(response.model.field, tuple(known)).sign_of(minus_one).never_zero:
            assert noticed(defined_check(spoiled, spoiled.cases[case.number]))


# --- names ---------------------------------------------------------------------------------


@pytest.mark.parametrize("kind", ["pair", "exchange", "depot"])
def test_any_slip_in_the_definition_of_a_name_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for case in response.cases:
        for place, quantity in enumerate(case.quantities):
            if quantity.formula is None:
                continue
            for kind_of_slip, wrong in slips(quantity.formula, response.model.time):
                spoiled = with_quantity(response, case.number, place, formula=wrong)
                if equal_values(spoiled, response, case.number):
                    continue
                check = formula_check(spoiled, spoiled.cases[case.number])
                assert check.outcome == "refuted", (quantity.name, kind_of_slip)


@pytest.mark.parametrize("kind", ROOTS)
def test_a_root_of_another_place_is_refuted(kind: str) -> None:
    response = response_to(kind)
    (case,) = response.cases
    for place, quantity in enumerate(case.quantities):
        if quantity.root is None:
            continue
        for which in range(len(quantity.root.polynomial) + 1):
            if which != quantity.root.which:
                root = replace(quantity.root, which=which)
                spoiled = with_quantity(response, 0, place, root=root)
                assert formula_check(spoiled, spoiled.cases[0]).outcome == "refuted"


def test_a_root_of_another_polynomial_is_refuted() -> None:
    response = response_to("star")
    root = response.cases[0].quantities[0].root
    assert root is not None
    first, *others, last = root.polynomial
    spoiled = with_quantity(
        response, 0, 0, root=replace(root, polynomial=(first, *others, 2 * last))
    )
    assert formula_check(spoiled, spoiled.cases[0]).outcome == "refuted"


@pytest.mark.parametrize("kind", ["exchange", "star", "depot"])
def test_rates_in_the_wrong_order_are_refuted(kind: str) -> None:
    """The formulas are the same with alpha and beta exchanged, but alpha is the greater."""
    response = response_to(kind)
    first, second, *others = response.cases[0].quantities
    turned = (
        replace(first, formula=second.formula, root=second.root),
        replace(second, formula=first.formula, root=first.root),
    )
    spoiled = with_case(response, 0, quantities=(*turned, *others))
    check = formula_check(spoiled, spoiled.cases[0])
    assert check.outcome == "refuted"
    assert "is not positive" in check.how


@pytest.mark.parametrize("number", [0, 2])
def test_a_frequency_of_the_wrong_sign_is_refuted(number: int) -> None:
    """The formulas are even in it, but it is said to be positive."""
    response = response_to("pair")
    quantities = response.cases[number].quantities
    place = next(i for i, q in enumerate(quantities) if q.origin == "roots")
    formula = quantities[place].formula
    assert formula is not None
    spoiled = with_quantity(response, number, place, formula=_negated(formula))
    check = formula_check(spoiled, spoiled.cases[number])
    assert check.outcome == "refuted"
    assert check.how.startswith(f"{quantities[place].name} is not positive")


@pytest.mark.parametrize("kind", ["pair", "exchange", "star", "cubic"])
def test_a_name_without_a_definition_is_refuted(kind: str) -> None:
    response = response_to(kind)
    kept = tuple(q for q in response.cases[0].quantities if q.origin != "roots")
    spoiled = with_case(response, 0, quantities=kept)
    refuted = {c.item: c.how for c in verify_cases(spoiled).cases[0].refuted}
    assert refuted["formulas defined"].endswith("has no definition")
    assert refuted["formulas as written"].endswith("has no definition")


def test_a_name_that_is_defined_after_its_use_is_refuted() -> None:
    response = response_to("cubic")
    first, *others = response.cases[0].quantities
    spoiled = with_case(response, 0, quantities=(*others, first))
    check = formula_check(spoiled, spoiled.cases[0])
    assert (check.outcome, check.how) == ("refuted", f"{first.name} has no definition")


# --- cases and their conditions ------------------------------------------------------------


@each_kind
def test_a_case_left_out_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for place in range(len(response.cases)):
        cases = response.cases[:place] + response.cases[place + 1 :]
        check = cover_check(replace(response, cases=cases))
        assert check.outcome == "refuted"
        assert check.how.startswith("0 cases of branch ")


@each_kind
def test_a_case_that_stands_twice_is_refuted(kind: str) -> None:
    response = response_to(kind)
    last = replace(response.cases[0], number=len(response.cases))
    assert is_refused(replace(response, cases=(*response.cases, last)))


@pytest.mark.parametrize("kind", IN_CASES)
def test_any_other_condition_of_a_case_is_noticed(kind: str) -> None:
    response = response_to(kind)
    for case in response.cases:
        for place, written in enumerate(case.conditions):
            before, after = case.conditions[:place], case.conditions[place + 1 :]
            for other in other_conditions(written):
                conditions = (*before, other, *after)
                spoiled = with_case(response, case.number, conditions=conditions)
                check = condition_check(spoiled, spoiled.cases[case.number])
                assert noticed(check), str(other)


@pytest.mark.parametrize("kind", IN_CASES)
def test_a_missing_condition_of_a_case_is_noticed(kind: str) -> None:
    response = response_to(kind)
    for case in response.cases:
        for place in range(len(case.conditions)):
            conditions = case.conditions[:place] + case.conditions[place + 1 :]
            spoiled = with_case(response, case.number, conditions=conditions)
            assert noticed(condition_check(spoiled, spoiled.cases[case.number]))


@each_kind
def test_a_condition_too_many_is_noticed(kind: str) -> None:
    response = response_to(kind)
    name = response.model.field.parameters[0]
    more = WrittenComparison(Name(name), "!=", Number(Fraction(17)))
    for case in response.cases:
        spoiled = with_case(response, case.number, conditions=(*case.conditions, more))
        assert noticed(condition_check(spoiled, spoiled.cases[case.number]))


@pytest.mark.parametrize("kind", IN_CASES)
def test_conditions_of_another_case_are_noticed(kind: str) -> None:
    response = response_to(kind)
    for case in response.cases:
        for other in response.cases:
            if other is not case:
                spoiled = with_case(
                    response, case.number, conditions=other.conditions, domain=other.domain
                )
                assert noticed(condition_check(spoiled, spoiled.cases[case.number]))


def test_regimes_of_another_case_are_refused() -> None:
    response = response_to("pair")
    spoiled = with_case(response, 0, regimes=response.cases[1].regimes)
    assert is_refused(spoiled)


# --- branches ------------------------------------------------------------------------------


@pytest.mark.parametrize("kind", ["rates", "depot"])
def test_a_dropped_exceptional_item_is_noticed(kind: str) -> None:
    response = response_to(kind)
    for branch in response.branches:
        for place, item in enumerate(branch.exceptional):
            check = cover_check(with_exceptional(response, branch.number, place))
            assert check.outcome == "refuted", item
            assert check.how.endswith("is not listed")


@each_kind
def test_an_exclusion_without_a_reason_is_refuted(kind: str) -> None:
    response = response_to(kind)
    for branch in response.branches:
        for place, item in enumerate(branch.exceptional):
            bare = replace(item, fate="excluded", argument=None, contradicted=(), branch=None)
            check = cover_check(with_exceptional(response, branch.number, place, bare))
            assert check.outcome == "refuted"
            assert check.how.startswith("no reason excludes")


@pytest.mark.parametrize("kind", ["pair", "rates", "depot"])
def test_an_exclusion_for_a_reason_of_something_else_is_refuted(kind: str) -> None:
    response = response_to(kind)
    one = response.model.field.domain.one
    aside = response.domain.sign_of(one)
    for branch in response.branches:
        for place, item in enumerate(branch.exceptional):
            for wrong in (
                replace(item, fate="excluded", argument=aside, contradicted=()),
                replace(
                    item,
                    fate="excluded",
                    argument=None,
                    contradicted=response.domain.conditions[:1],
                ),
            ):
                check = cover_check(with_exceptional(response, branch.number, place, wrong))
                assert check.outcome == "refuted"


def test_an_exclusion_by_a_sign_that_the_element_does_not_have_is_refuted() -> None:
    response = response_to("rates")
    (item,) = response.branches[0].exceptional
    argument = response.domain.sign_of(item.polynomials[0])
    wrong = replace(item, fate="excluded", argument=replace(argument, sign="positive"))
    assert cover_check(with_exceptional(response, 0, 0, wrong)).outcome == "refuted"


def test_a_branch_on_which_the_polynomial_does_not_vanish_is_refuted() -> None:
    response = response_to("rates")
    branch = response.branches[1]
    (equation,) = branch.equations
    assert equation.value is not None
    wrong = replace(equation, value=2 * equation.value)
    check = cover_check(with_branch(response, 1, equations=(wrong,)))
    assert (check.outcome, check.how) == ("refuted", "a - b does not vanish on branch 1")


def test_an_item_that_leads_to_the_generic_branch_is_refuted() -> None:
    response = response_to("rates")
    (item,) = response.branches[0].exceptional
    check = cover_check(with_exceptional(response, 0, 0, replace(item, branch=0)))
    assert check.outcome == "refuted"


def test_a_branch_of_another_matrix_is_refuted() -> None:
    response = response_to("rates")
    spoiled = with_branch(response, 1, matrix=response.matrix)
    (check, *_) = branch_checks(spoiled, spoiled.branches[1])
    assert (check.item, check.outcome) == ("A as stated", "refuted")


def test_factors_that_are_not_those_of_the_matrix_are_refused() -> None:
    response = response_to("rates")
    apart, equal = response.branches
    spoiled = with_branch(response, 1, spectrum=apart.spectrum, exponential=apart.exponential)
    checks = branch_checks(spoiled, spoiled.branches[1])
    assert "refuted" in {check.outcome for check in checks}
    assert equal.spectrum.characteristic_polynomial != apart.spectrum.characteristic_polynomial


@pytest.mark.parametrize("kind", ["pair", "rates"])
def test_a_model_with_another_entry_refuses_the_response(kind: str) -> None:
    response = response_to(kind)
    model = response.model
    one = model.field.domain.one
    (first, *row), *rows = model.matrix
    wrong = replace(response, model=replace(model, matrix=((first - one, *row), *rows)))
    assert is_refused(wrong)
