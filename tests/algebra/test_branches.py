"""The tree of branches: every point of the domain belongs to a branch that solves it."""

from __future__ import annotations

from fractions import Fraction
from functools import cache

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.branches import (
    Branch,
    case_tree,
    put_in,
    uncovered,
)
from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.equations import Equation
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.parametric_spectrum import vanishes_under
from closedform.algebra.sample import holds_at, value_at
from tests.rational_elements import element
from tests.sign_checks import field_of, positive

CHAIN = [["-a", "0", "0"], ["a", "-b", "0"], ["0", "b", "-c"]]


def tree(domain: ParameterDomain, rows: list[list[str]], **limits: int) -> tuple[Branch, ...]:
    field = domain.field
    matrix = field.matrix([[element(field, e) for e in row] for row in rows])
    return case_tree(field, matrix, domain, **limits)


@cache
def chain() -> tuple[Branch, ...]:
    return tree(positive("a b c"), CHAIN)


def applying(field: ParameterField, branches: tuple[Branch, ...], point: object) -> list[int]:
    """The branches whose equations hold at a point and whose exceptions do not."""
    found = []
    for branch in branches:
        equations = all(value_at(e.polynomial, point) == 0 for e in branch.equations)
        exceptions = any(
            all(value_at(field.substituted(p, branch.values), point) == 0 for p in e.polynomials)
            for e in branch.exceptional
        )
        if equations and not exceptions:
            found.append(branch.number)
    return found


@given(st.tuples(*[st.integers(1, 3)] * 3))
def test_every_point_of_a_chain_belongs_to_one_branch(values: tuple[int, int, int]) -> None:
    point = dict(zip("abc", map(Fraction, values), strict=True))
    assert len(applying(positive("a b c").field, chain(), point)) == 1


def test_the_generic_branch_comes_first_and_has_no_equations() -> None:
    generic = chain()[0]
    assert (generic.number, generic.equations) == (0, ())
    assert [b.number for b in chain()] == list(range(5))


def test_rates_that_meet_lead_to_branches_and_these_to_one_where_all_are_equal() -> None:
    field = positive("a b c").field
    equations = [
        sorted((e.parameter, str(e.value)) for e in branch.equations) for branch in chain()
    ]
    assert equations[0] == []
    assert sorted(equations[1:4]) == [[("b", "a")], [("c", "a")], [("c", "b")]]
    assert equations[4] == [("b", "a"), ("c", "a")]
    assert not chain()[4].exceptional
    assert all(not field.names_in(v) & {"b", "c"} for v in chain()[4].values.values())


def test_a_branch_solves_the_matrix_with_its_equations_put_in() -> None:
    field = positive("a b c").field
    matrix = field.matrix([[element(field, e) for e in row] for row in CHAIN])
    for branch in chain():
        assert branch.matrix == put_in(field, matrix, branch.values)
        assert branch.relation is None


def test_each_polynomial_vanishes_on_the_branch_that_it_leads_to() -> None:
    field = positive("a b c").field
    for branch in chain():
        for item in branch.exceptional:
            assert item.fate == "branch"
            target = chain()[item.branch or 0]
            assert not any(field.substituted(p, target.values) for p in item.polynomials)


def test_what_the_domain_excludes_has_an_argument() -> None:
    domain = positive("a b")
    apart = domain.narrowed(Comparison(element(domain.field, "a - b"), ">"))
    (branch,) = tree(apart, [["-a", "0"], ["a", "-b"]])
    (item,) = branch.exceptional
    assert item.fate == "excluded"
    assert item.argument is not None
    assert item.argument.never_zero
    assert item.argument.element == element(domain.field, "a - b")


def test_an_equation_of_the_domain_is_put_in_first() -> None:
    domain = positive("a b")
    equal = domain.narrowed(Comparison(element(domain.field, "a - b"), "="))
    (branch,) = tree(equal, [["-a", "0"], ["a", "-b"]])
    assert [(e.parameter, str(e.value)) for e in branch.equations] == [("b", "a")]
    (factor,) = branch.spectrum.factors
    assert factor.blocks == (2,)


def test_branches_beyond_the_limit_are_listed_as_not_covered() -> None:
    branches = tree(positive("a b c"), CHAIN, most=2)
    assert len(branches) == 2
    left = list(uncovered(branches))
    assert left
    assert all(item.fate == "not covered" and item.reason == "budget" for _, item in left)
    assert list(uncovered(chain())) == []


def test_an_equation_that_no_parameter_solves_is_kept() -> None:
    domain = ParameterDomain(field_of("a b"), ())
    field = domain.field
    branches = tree(domain, [["0", "1", "0"], ["0", "0", "1"], ["-b", "-a", "0"]])
    kept = [b for b in branches if b.relation is not None]
    assert len(kept) == 1
    (branch,) = kept
    relation = branch.relation
    assert relation == element(field, "4*a^3 + 27*b^2")
    assert branch.equations == (Equation(relation),)
    assert branch.values == {}
    given_polynomial = field.polynomial(branch.matrix.charpoly())
    difference = given_polynomial - branch.spectrum.characteristic_polynomial
    assert all(vanishes_under(c, relation) for c in difference.to_list())


def test_nothing_is_put_in_where_there_are_no_values() -> None:
    field = field_of("a")
    matrix = field.matrix([[field.symbol("a")]])
    assert put_in(field, matrix, {}) is matrix
    assert put_in(field, matrix, {"a": field.scalar(3)}) == field.matrix([[field.scalar(3)]])


@given(st.tuples(*[st.integers(1, 4)] * 4))
def test_points_of_a_depot_belong_to_one_branch_and_its_domain(
    values: tuple[int, int, int, int],
) -> None:
    domain = positive("ka k10 k12 k21")
    point = dict(zip(domain.field.parameters, map(Fraction, values), strict=True))
    (number,) = applying(domain.field, depot(), point)
    assert all(holds_at(c, point) for c in depot()[number].domain.conditions)


@cache
def depot() -> tuple[Branch, ...]:
    rows = [["-ka", "0", "0"], ["ka", "-(k10 + k12)", "k21"], ["0", "k12", "-k21"]]
    return tree(positive("ka k10 k12 k21"), rows)


def masses(number: int) -> list[list[str]]:
    """Equal masses between walls, the first one driven by a wave, as one matrix."""
    n = number
    rows = [["0"] * (2 * n + 2) for _ in range(2 * n + 2)]
    for i in range(n):
        rows[i][n + i] = "1"
        for k, entry in ((i - 1, "a"), (i, "-2*a"), (i + 1, "a")):
            if 0 <= k < n:
                rows[n + i][k] = entry
    rows[n][2 * n] = "1"
    rows[2 * n][2 * n + 1], rows[2 * n + 1][2 * n] = "1", "-w^2"
    return rows


@pytest.mark.parametrize("number", [2, 3, 4])
def test_resonances_are_short_and_covered_whether_they_are_solved_or_kept(number: int) -> None:
    branches = tree(positive("a w"), masses(number))
    assert not list(uncovered(branches))
    for branch in branches[1:]:
        assert not [e for e in branch.exceptional if e.fate != "excluded"]
        assert [f.multiplicity for f in branch.spectrum.factors if f.index > 1] == [2]
        elements = [
            element
            for term in branch.exponential.terms
            for residue in term.residues
            for matrix in residue.coefficients
            for element in matrix.iter_values()
        ]
        assert max(len(e.numer) + len(e.denom) for e in elements) <= 4


def test_coefficients_under_a_relation_are_zero_or_do_not_vanish() -> None:
    (kept,) = (b for b in tree(positive("a w"), masses(3)) if b.relation is not None)
    for term in kept.exponential.terms:
        for residue in term.residues:
            for matrix in residue.coefficients:
                assert not any(vanishes_under(e, kept.relation) for e in matrix.iter_values())
