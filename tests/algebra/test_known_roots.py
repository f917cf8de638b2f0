"""Roots of polynomials in numbers, inside of a field with parameters."""

from __future__ import annotations

import pytest
from flint import acb_poly, arb, ctx
from hypothesis import assume, given
from hypothesis import strategies as st

from closedform.algebra.known_roots import KnownRoot, has_known_roots, known_roots, over_numbers
from closedform.algebra.roots import enclosed_roots
from closedform.algebra.value_field import FieldWithPi
from tests.parametric.with_pi import element, field_with_pi

FIELD = field_with_pi("k")


def polynomial(*coefficients: object) -> object:
    return FIELD.polynomial([element(FIELD, c) for c in coefficients])


def test_parameters_make_roots_unknown() -> None:
    assert has_known_roots(FIELD, polynomial(1, "pi", 2))
    assert not has_known_roots(FIELD, polynomial(1, "pi*k", 2))
    with pytest.raises(KeyError):
        over_numbers(FIELD, polynomial(1, "k"))


@pytest.mark.parametrize(
    ("coefficients", "expected"),
    [
        ((1, 3, 2, 1), [KnownRoot(3, is_real=False), KnownRoot(1, is_real=True)]),
        ((1, 0, -4, 1), [KnownRoot(k, is_real=True) for k in (3, 2, 1)]),
        ((1, 1, 3, 1, 1), [KnownRoot(4, is_real=False), KnownRoot(2, is_real=False)]),
        (
            (1, 0, 9, 0, 21, 0, 12),
            [KnownRoot(k, is_real=False, centred=True) for k in (4, 5, 6)],
        ),
        (
            ("1", "pi", "pi^2 + 1", 1, "pi"),
            [KnownRoot(4, is_real=False), KnownRoot(2, is_real=False)],
        ),
    ],
)
def test_real_roots_and_pairs_are_told_slowest_first(
    coefficients: tuple[object, ...], expected: list[KnownRoot]
) -> None:
    assert list(known_roots(FIELD, polynomial(*coefficients))) == expected


@given(st.lists(st.integers(-5, 5), min_size=3, max_size=5), st.integers(0, 2))
def test_every_root_is_told_once(coefficients: list[int], power: int) -> None:
    texts = [1, f"({coefficients[0]})*pi^{power}", *coefficients[1:]]
    p = polynomial(*texts)
    assume(p.is_irreducible)  # type: ignore[attr-defined]
    roots = known_roots(FIELD, p)
    assert sum(1 if root.is_real else 2 for root in roots) == len(texts) - 1
    base, (own,) = over_numbers(FIELD, p)
    assert isinstance(base, FieldWithPi) == FIELD.holds_pi(element(FIELD, texts[1]))
    balls = enclosed_roots(base, own)
    with ctx.workprec(200):
        values = [FIELD.enclose_at(element(FIELD, c), {}) for c in reversed(texts)]
        for root in roots:
            ball = balls[root.which - 1]
            assert acb_poly(values)(ball).contains(0)
            assert (ball.imag == 0) == root.is_real
            assert not root.centred or ball.real.overlaps(-values[-2] / arb(len(texts) - 1))
