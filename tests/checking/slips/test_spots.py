"""Parts of formulas: the way to each, and putting another in its place."""

from __future__ import annotations

from fractions import Fraction

import pytest

from closedform.checking.slips.spots import put, spots
from closedform.notation.written.tree import Declared, Literal, Symbol, Written, walk
from closedform.notation.written.typed_reader import read_typed

FORMULAS = (
    "exp(-3*t)*(2*cos(4*t) - sin(4*t)/2)",
    "1/3*[[exp(-t), t], [0, t^2]]",
    "sqrt(1 - zeta^2)",
)


def tree_of(text: str) -> Written:
    return read_typed(text, Declared()).statements[0].members[0]


@pytest.mark.parametrize("text", FORMULAS)
def test_every_part_is_found_in_order(text: str) -> None:
    tree = tree_of(text)
    assert [spot.node for spot in spots(tree)] == list(walk(tree))


@pytest.mark.parametrize("text", FORMULAS)
def test_a_part_put_in_its_own_place_changes_nothing(text: str) -> None:
    tree = tree_of(text)
    for spot in spots(tree):
        assert put(tree, spot.path, spot.node) == tree
        assert len(spot.above) == len(spot.path)


@pytest.mark.parametrize("text", FORMULAS)
def test_another_part_stands_where_it_was_put(text: str) -> None:
    tree, new = tree_of(text), Symbol("new")
    for spot in spots(tree):
        changed = put(tree, spot.path, new)
        (found,) = [s for s in spots(changed) if s.node == new]
        assert found.path == spot.path


def test_one_of_two_equal_parts_is_changed() -> None:
    tree = tree_of("cos(4*t) + sin(4*t)")
    fours = [s for s in spots(tree) if s.node == Literal(Fraction(4))]
    assert len(fours) == 2
    changed = put(tree, fours[1].path, Literal(Fraction(5)))
    assert changed == tree_of("cos(4*t) + sin(5*t)")
