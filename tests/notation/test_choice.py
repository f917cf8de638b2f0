"""Of equally short formulas the one is chosen that a person would rather write."""

from __future__ import annotations

import pytest

from closedform.notation.choice import places_of, shortest_formula
from closedform.notation.plain import plain
from closedform.notation.reader import read_formula

NAMES = ("a", "b", "c", "x", "y")


@pytest.mark.parametrize(
    ("better", "worse"),
    [
        ("a*(b + c)", "a*b + a*c"),  # fewer operations
        ("(b - a)/(2*a)", "(b/a - 1)/2"),  # no fraction within a fraction
        ("1/a + 1/b", "(a + b)/(a*b)"),  # fewer names
        ("a*(1 + b)", "a + a*b"),
        ("a^2 - b^2", "(a - b)*(a + b)"),
        ("(a + b + c)^2 - 4*a*c", "(a + b - c)^2 + 4*b*c"),  # as many signs inside: the earlier
        ("x*(a + b)", "-x*(-a - b)"),
        ("(a - b)*x*y", "(b - a)*y*x"),  # differences in the order of the names
    ],
)
def test_the_better_of_two(better: str, worse: str) -> None:
    first, second = (read_formula(text, names=frozenset(NAMES)) for text in (better, worse))
    assert plain(shortest_formula([first, second], places_of(NAMES))) == better


@pytest.mark.parametrize(
    ("better", "worse"),
    [
        ("(b - a)/(2*a)", "(b/a - 1)/2"),
        ("1/a + 1/b", "(a + b)/(a*b)"),
        ("a^2 - b^2", "(a - b)*(a + b)"),
        ("(a - b)*x*y", "(b - a)*y*x"),
    ],
)
def test_the_order_of_the_two_does_not_matter(better: str, worse: str) -> None:
    first, second = (read_formula(text, names=frozenset(NAMES)) for text in (better, worse))
    assert plain(shortest_formula([second, first], places_of(NAMES))) == better
