"""The evaluator of published formulas is right before anything is compared with it."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import acb, arb, ctx

from tests.published.formulas import ball

HALF = Fraction(1, 2)
EQUAL = [
    ("2*sin(3*t/2)/3*(-1/2)", lambda: acb(-(arb(3) / 4).sin() / 3)),
    ("binomial(4,2)*t**2", lambda: acb(arb(3) / 2)),
    ("a**2*exp(-a*t)", lambda: acb((arb(-3) / 4).exp() * 9 / 4)),
    ("0.1", lambda: acb(arb(1) / 10)),
    ("1.5e-2", lambda: acb(arb(3) / 200)),
    ("-I*sqrt(-(-3))", lambda: acb(0, -1) * arb(3).sqrt()),
    ("E - exp(1)", lambda: acb(0)),
    ("cos(2*pi*1/11)", lambda: acb((arb.pi() * 2 / 11).cos())),
]


@pytest.mark.parametrize(("text", "value"), EQUAL, ids=[text for text, _ in EQUAL])
def test_a_formula_has_its_value(text: str, value: object) -> None:
    with ctx.workprec(200):
        found = ball(text, {"a": "3/2"}, HALF)
        assert callable(value)
        assert (found - value()).contains(0)
        assert abs(found - value()) < 1e-50


REFUSED = ["().__class__", "__import__('os')", "[1][0]", "1 if t else 2", "exp", "tan(t)"]


@pytest.mark.parametrize("text", REFUSED)
def test_what_is_no_formula_is_refused(text: str) -> None:
    with pytest.raises((KeyError, ValueError)):
        ball(text, {}, HALF)
