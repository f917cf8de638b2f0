"""Rational functions reduced by FLINT are those that SymPy reduces by itself."""

from __future__ import annotations

from typing import Any

from hypothesis import given
from hypothesis import strategies as st
from sympy import symbols
from sympy.polys.domains import QQ

from closedform.algebra.fraction_field import fraction_field
from closedform.algebra.parameter_field import ParameterField

NAMES = ("a", "b", "c")
OURS, OWN = fraction_field(NAMES), QQ.frac_field(*symbols(NAMES))
TERMS = st.dictionaries(
    st.tuples(*[st.integers(0, 2)] * 3), st.fractions(-4, 4, max_denominator=6), max_size=4
)


def _polynomial(domain: Any, terms: dict[tuple[int, ...], Any]) -> Any:
    total = domain.zero
    for monomial, c in terms.items():
        term = domain.convert(QQ(c.numerator, c.denominator))
        for gen, exponent in zip(domain.gens, monomial, strict=True):
            term *= gen**exponent
        total += term
    return total


@given(first=TERMS, second=TERMS, third=TERMS)
def test_fractions_are_those_of_sympy(first: Any, second: Any, third: Any) -> None:
    made = []
    for domain in (OURS, OWN):
        x, y, z = (_polynomial(domain, terms) for terms in (first, second, third))
        y, z = y or domain.one, z or -domain.one
        made.append([x / y, x / y + y / z, x * z / (y * z), (x - y) * z / (-z), x / (y * z) * y])
    for ours, own in zip(*made, strict=True):
        assert dict(ours.numer) == dict(own.numer)
        assert dict(ours.denom) == dict(own.denom)
        assert ours == own
        assert hash(ours) == hash(own)


def test_fields_of_the_same_names_are_one() -> None:
    assert ParameterField(parameters=NAMES).domain is fraction_field(NAMES)
    assert fraction_field(NAMES) == OWN
    assert hash(fraction_field(NAMES).field.ring) == hash(OWN.field.ring)
    assert all(gen.numer.is_generator for gen in fraction_field(NAMES).gens)


@given(first=TERMS, second=TERMS)
def test_elements_keep_their_form_in_a_field_with_other_names(first: Any, second: Any) -> None:
    narrow, wide = ParameterField(parameters=NAMES), ParameterField(parameters=("c", "x", "b", "a"))
    x, y = (_polynomial(narrow.domain, terms) for terms in (first, second))
    element = x / (y or narrow.domain.one)
    assert narrow.into(wide, element) == wide.domain.convert(element, narrow.domain)
    assert narrow.into(narrow, element) == element
