"""Elements under a relation: one normal form each, and short forms that are equal to it."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.normal_form import UnderRelation, under_relation
from closedform.algebra.parametric_spectrum import vanishes_under
from tests.rational_elements import element, field_of

FIELD = field_of("a b c")
RELATIONS = ("2*a^2 - 4*a*b + b^2*c^2", "a^2 + b^2 - c^2", "a^3 - b*c^2", "b*a^2 - c", "a*b - c")
POSITIVE = tuple(Comparison(FIELD.symbol(name), ">") for name in FIELD.parameters)


def under(relation: str) -> UnderRelation:
    held = element(FIELD, relation)
    domain = ParameterDomain(FIELD, (*POSITIVE, Comparison(held, "=")))
    return under_relation(domain, held)


def polynomials() -> st.SearchStrategy[Scalar]:
    exponents = st.tuples(*[st.integers(0, 3)] * 3)
    terms = st.lists(st.tuples(exponents, st.integers(-3, 3)), max_size=4)
    return terms.map(lambda found: sum((_term(*term) for term in found), FIELD.domain.zero))


def _term(exponents: tuple[int, ...], number: int) -> Scalar:
    product = FIELD.scalar(number)
    for name, exponent in zip(FIELD.parameters, exponents, strict=True):
        product *= FIELD.symbol(name) ** exponent
    return product


@given(st.sampled_from(RELATIONS), polynomials(), polynomials())
@settings(max_examples=60, deadline=None)
def test_forms_are_equal_where_the_relation_holds(
    relation: str, above: Scalar, below: Scalar
) -> None:
    held = element(FIELD, relation)
    if vanishes_under(below, held):
        return
    forms, quotient = under(relation), above / below
    for form in (forms.reduced(quotient), forms.shortest(quotient)):
        assert vanishes_under(form - quotient, held)


@given(st.sampled_from(RELATIONS), polynomials(), polynomials(), polynomials())
@settings(max_examples=60, deadline=None)
def test_equal_elements_have_one_normal_form(
    relation: str, above: Scalar, below: Scalar, multiple: Scalar
) -> None:
    held = element(FIELD, relation)
    if vanishes_under(below, held):
        return
    forms = under(relation)
    assert forms.reduced(above / below) == forms.reduced((above + multiple * held) / below)
    assert forms.reduced(multiple * held / below) == 0


@pytest.mark.parametrize(
    ("relation", "main"),
    [
        ("2*a^2 - 4*a*b + b^2*c^4", "a"),
        ("c^2*a^2 - 4*a*b + b^2", "b"),
        ("a^2 + b^2 - c^2", "c"),
        ("b^2*a + c^2", "a"),
    ],
)
def test_the_main_parameter_has_the_lowest_degree_and_if_possible_no_factor(
    relation: str, main: str
) -> None:
    assert under(relation).forms[0].main == main


@pytest.mark.parametrize(
    ("relation", "text", "short"),
    [
        ("a^2 + b^2 - c^2", "a^2 + b^2", "c^2"),
        ("a^2 + b^2 - c^2", "(a^4 - b^4)/(a^2 - b^2)", "c^2"),
        ("2*a^2 - 4*a*b + b^2*c^2", "(4*b - 2*a)/(b^2*c^2)", "1/a"),
        ("2*a^2 - 4*a*b + b^2*c^2", "2*a/b", "2*a/b"),
    ],
)
def test_the_shortest_form_is_taken(relation: str, text: str, short: str) -> None:
    assert under(relation).shortest(element(FIELD, text)) == element(FIELD, short)


def test_what_may_vanish_is_divided_by_in_no_form_if_that_can_be_helped() -> None:
    forms = under("a^2 + b^2 - c^2")
    quotient = element(FIELD, "(a^2 - b^2)/(c^2 - 2*b^2)")
    assert forms.shortest(quotient) == 1
    assert forms.is_defined(forms.shortest(element(FIELD, "a/(c - a)")))
