"""What the derivation of a model with parameters says, and in which order."""

from __future__ import annotations

from dataclasses import replace

import pytest

from closedform.derivation.parametric.build import derive_cases
from closedform.derivation.parametric.formulas import element_matrix
from closedform.derivation.parametric.proof.ground import said_in
from closedform.derivation.parametric.variables import variables_of
from closedform.derivation.step import Statement, Step
from closedform.notation.expression import Call, Name, names_in
from closedform.notation.plain import plain
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import Check, VerificationRecord
from tests.derivation.parametric.models import DIGITS, MODELS, derived, solved, with_a_gap


def kinds(name: str) -> list[str]:
    return [step.kind for step in derived(name).steps]


def steps(name: str, kind: str) -> list[Step]:
    return [step for step in derived(name).steps if step.kind == kind]


def written(statement: Statement) -> str:
    return f" {statement.relation} ".join(plain(side) for side in statement.sides)  # type: ignore[arg-type]


@pytest.mark.parametrize("name", MODELS)
def test_every_derivation_is_proved(name: str) -> None:
    last = derived(name).checks[-1]
    assert (last.item, last.outcome) == ("statements of the derivation", "enclosed")


@pytest.mark.parametrize("name", MODELS)
def test_the_parts_come_in_the_order_of_a_derivation(name: str) -> None:
    order = [
        "model",
        "parameters",
        "characteristic_polynomial",
        "factors",
        "cases",
        "case_solution",
        "verification",
        "cautions",
    ]
    places = [kinds(name).index(kind) for kind in order]
    assert places == sorted(places)


@pytest.mark.parametrize("name", MODELS)
def test_every_case_has_a_row_a_transition_matrix_and_a_solution(name: str) -> None:
    response, _, _ = solved(name)
    (cases,) = steps(name, "cases")
    rows = cases.facts["rows"]
    assert isinstance(rows, list)
    assert [row["number"] for row in rows] == [c.number + 1 for c in response.cases]
    for kind in ("case_solution", "case_transition"):
        assert [s.facts["cases"] for s in steps(name, kind)] == [
            (c.number,) for c in response.cases
        ]


@pytest.mark.parametrize("name", MODELS)
def test_no_function_of_time_holds_the_imaginary_unit(name: str) -> None:
    for step in derived(name).steps:
        for said in said_in(step, len(solved(name)[0].cases)):
            for side in said.statement.sides:
                if isinstance(side, Call):
                    assert "@i" not in names_in(side)


def test_regimes_of_one_pair_share_their_form() -> None:
    (shared,) = steps("oscillator", "shared_form")
    rows = shared.facts["rows"]
    assert isinstance(rows, list)
    told = [(plain(row["even"].sides[1]), plain(row["odd"].sides[1])) for row in rows]
    assert told == [
        ("cos(omega_d*t)", "sin(omega_d*t)/omega_d"),
        ("1", "t"),
        ("cosh(kappa*t)", "sinh(kappa*t)/kappa"),
    ]


def test_a_quadratic_factor_is_given_with_its_discriminant() -> None:
    (factors,) = steps("oscillator", "factors")
    rows = factors.facts["rows"]
    assert isinstance(rows, list)
    _, discriminant = rows[0]["statements"]
    assert written(discriminant) == "D = (c^2 - 4*m*k)/(4*m^2)"


def test_a_branch_that_the_domain_excludes_is_excluded_with_its_reason() -> None:
    (cases,) = steps("depot", "cases")
    found = cases.facts["found"]
    assert isinstance(found, list)
    by_fate = {row["fate"]: row for row in found}
    assert by_fate["branch"]["there"] == (1,)
    reason = by_fate["excluded"]["why"]
    assert [item for item in reason if isinstance(item, str)] == [
        "then",
        "would follow",
        ", against",
    ]


def test_every_case_of_a_chain_with_equal_rates_is_told() -> None:
    branches = steps("decay", "branch")
    assert [step.facts["numbers"] for step in branches] == [[2], [3], [4], [5]]
    assert all(step.facts["limit"] for step in branches)
    repeated = branches[-1].facts["repeated"]
    assert isinstance(repeated, list)
    assert [(row["multiplicity"], row["index"]) for row in repeated] == [(3, 3)]


def test_named_roots_come_with_what_makes_them_real_and_negative() -> None:
    (factors,) = steps("three compartments", "factors")
    rows = factors.facts["rows"]
    assert isinstance(rows, list)
    why = rows[0]["structure"]
    assert (why["real"], why["negative"], why["along"], why["graph"]) == (
        True,
        True,
        "columns",
        "path",
    )
    assert [plain(s.sides[1]) for s in why["products"]] == ["k12*k21", "k13*k31"]
    (definitions,) = steps("three compartments", "definitions")
    roots = definitions.facts["roots"]
    assert isinstance(roots, list)
    assert written(roots[0]["order"]) == "alpha > beta > gamma > 0"


def test_names_are_told_with_the_cases_that_use_them() -> None:
    (definitions,) = steps("oscillator", "definitions")
    formulas = definitions.facts["formulas"]
    assert isinstance(formulas, list)
    used = {row["name"].text: row["only"] for row in formulas}
    assert used == {"delta": (), "omega_d": (0,), "kappa": (2,)}


def test_what_is_not_covered_stands_first() -> None:
    response, records, _ = solved("two tanks")
    gap = with_a_gap(response)
    told = derive_cases(gap, CaseRecords(records.whole, records.cases[:1]))
    assert told.steps[0].kind == "not_covered"
    assert told.steps[0].depth == "summary"
    rows = told.steps[0].facts["rows"]
    assert isinstance(rows, list)
    assert [written(s) for s in rows[0]["vanishing"]] == ["a - b = 0"]


def test_checks_that_are_the_same_in_all_cases_are_said_once() -> None:
    _, records, _ = solved("decay")
    (verification,) = steps("decay", "verification")
    for key in ("rows", "full_rows"):
        rows = verification.facts[key]
        assert isinstance(rows, list)
        groups = list(dict.fromkeys(row["group"] for row in rows))
        assert groups[:2] == ["All cases together", "In each of the 5 cases"]
    full = verification.facts["full_rows"]
    assert isinstance(full, list)
    told = {check for record in records.cases for check in record.checks}
    assert len(full) == len(told) + len(records.whole.checks) + 1


def test_nothing_is_derived_from_what_does_not_hold() -> None:
    response, records, _ = solved("two tanks")
    bad = VerificationRecord((Check("x", "refuted", "y"),))
    with pytest.raises(ValueError, match="only a response that was proved"):
        derive_cases(response, replace(records, whole=bad), digits=DIGITS)


def test_letters_that_the_model_takes_are_left_to_it() -> None:
    variables = variables_of(solved("letters taken")[0])
    assert (variables.root, variables.laplace) == (Name("z"), Name("z"))
    assert variables_of(solved("square taken")[0]).square == Name("nu")
    assert variables_of(solved("decay")[0]).root == Name("lambda")


def test_a_matrix_of_zeros_has_nothing_in_front() -> None:
    response, _, _ = solved("two tanks")
    field = response.model.field
    assert element_matrix(field, field.zeros(2, 2)).front is None


def test_values_of_the_file_are_not_repeated_where_a_row_has_them() -> None:
    (numbers,) = steps("oscillator", "numbers")
    sets = numbers.facts["sets"]
    assert isinstance(sets, list)
    assert [(row["label"], row["case"]) for row in sets] == [("light", 0), ("critical", 1)]
    assert [s.sides[0] for s in sets[1]["given"]] == [Name("c")]
