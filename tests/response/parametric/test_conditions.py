"""Comparisons are printed short, each side with positive terms, and say the same."""

from __future__ import annotations

import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.sample import holds_at
from closedform.errors import Place
from closedform.notation import plain, read_formula
from closedform.notation.rational import rational_value
from closedform.response.parametric.conditions import (
    WrittenComparison,
    written_comparison,
    written_equation,
)
from tests.rational_elements import element, polynomials
from tests.sign_checks import field_of, grid, positive

FIELD = field_of("a b c")
POSITIVE = positive("a b c")
FREE = ParameterDomain(FIELD, ())
RELATIONS = st.sampled_from((">", ">=", "!=", "="))


def read(written: WrittenComparison) -> Comparison:
    """The comparison from its text, of left - right with 0."""
    left, right = (
        rational_value(read_formula(plain(s), names=frozenset("abc")), FIELD, Place())
        for s in (written.left, written.right)
    )
    match written.sign:
        case "<":
            return Comparison(right - left, ">")
        case "<=":
            return Comparison(right - left, ">=")
        case "==":
            return Comparison(left - right, "=")
        case sign:
            return Comparison(left - right, sign)


@pytest.mark.parametrize("domain", [POSITIVE, FREE], ids=["positive", "any"])
@settings(max_examples=50)
@given(polynomials(FIELD).filter(bool), polynomials(FIELD, 2).filter(bool), RELATIONS)
def test_what_is_written_holds_where_the_comparison_does(
    domain: ParameterDomain, above: object, below: object, relation: str
) -> None:
    comparison = Comparison(above / below, relation)
    inside = domain.narrowed(Comparison(below, "!="))
    assume(not inside.implies(comparison) and not inside.excludes(comparison))
    points = grid(inside)[:200]
    back = read(written_comparison(inside, comparison))
    assert [holds_at(back, p) for p in points] == [holds_at(comparison, p) for p in points]


@pytest.mark.parametrize(
    ("names", "text", "relation", "written"),
    [
        ("m c k", "4*k*m - c^2", ">", "4*m*k > c^2"),
        ("m c k", "c^2/(4*m^2) - k/m", ">", "4*m*k < c^2"),
        ("k1 k2", "k2 - k1", "!=", "k1 != k2"),
        ("zeta w", "w^2*(1 - zeta^2)", ">", "zeta < 1"),
        ("zeta w", "w*(1 - zeta)", ">", "zeta < 1"),
        ("a b", "3*a - 6", ">=", "a >= 2"),
        ("a b", "2 - 4*a", "=", "a == 1/2"),
        ("a b", "a^2*b - a*b^2", "!=", "a != b"),
        ("a b", "(a - b)^2", ">", "a != b"),
    ],
)
def test_comparisons_read_as_a_person_would_write_them(
    names: str, text: str, relation: str, written: str
) -> None:
    domain = positive(names)
    comparison = Comparison(element(domain.field, text), relation)
    assert str(written_comparison(domain, comparison)) == written


def test_an_equation_says_what_a_parameter_is() -> None:
    found = written_equation(FIELD, "c", element(FIELD, "a^2/(4*b)"))
    assert str(found) == "c == a^2/(4*b)"
