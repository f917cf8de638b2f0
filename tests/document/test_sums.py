"""Sums of symbols and formulas: each term with one sign."""

from __future__ import annotations

import pytest

from closedform.derivation.step import Symbol
from closedform.document.breaking import pieces
from closedform.document.symbols import side_box
from closedform.notation.expression import Expression, Name, Negation, Sum

X, Y = Name("x"), Name("y")


@pytest.mark.parametrize(
    ("term", "latex"),
    [
        (X, "h + x"),
        (Negation(X), "h - x"),
        (Sum((Negation(X), Negation(Y))), "h - x - y"),
        (Sum((X, Negation(Y))), "h + x - y"),
    ],
)
def test_a_term_brings_its_own_sign(term: Expression, latex: str) -> None:
    total = Symbol("sum", parts=(Name("h"), term))
    assert side_box(total).latex == latex
    assert "".join(box.latex for box in pieces(total, 0.5)) == latex
