r"""Derivatives and brackets written by packages: \dv{x}{t}, \qty( ), \vb{A}."""

from __future__ import annotations

import pytest

from closedform.notation.written.reader import read_latex
from closedform.notation.written.tree import Declared
from closedform.notation.written.written_errors import UnknownCommandError

DECLARED = Declared(states=frozenset({"x", "G"}), parameters=frozenset({"k"}))

SAME = [
    (r"\dv{G}{t} = -k G", r"\frac{dG}{dt} = -k G"),
    (r"\dv[2]{x}{t} + k x = 0", r"\frac{d^2 x}{dt^2} + k x = 0"),
    (r"\dv{t} x = -k x", r"\frac{d}{dt} x = -k x"),
    (r"\dv{t}\dv{x}{t} = 1", r"\ddot x = 1"),
    (r"\dv*{x}{t} = 2", r"\dot x = 2"),
    (r"\odv{x}{t} = 2", r"\dot x = 2"),
    (r"\pdv{x}{t} = 2", r"\dot x = 2"),
    (r"k\qty(1 + k)^2 = 3", r"k\left(1 + k\right)^2 = 3"),
    (r"k\qty[1 + k] = 3", r"k\left[1 + k\right] = 3"),
    (r"\qty|k| = 3", r"|k| = 3"),
    (r"\vb{A} = \vb*{B}", r"\mathbf{A} = \mathbf{B}"),
]


@pytest.mark.parametrize(("short", "long"), SAME)
def test_a_shorthand_is_read_as_what_it_stands_for(short: str, long: str) -> None:
    assert read_latex(short, DECLARED).statements == read_latex(long, DECLARED).statements


@pytest.mark.parametrize("text", [r"x = \qty{3}{m}", r"x = \qty[mode = text]{3}{m}"])
def test_a_quantity_stays_one(text: str) -> None:
    (statement,) = read_latex(text, DECLARED).statements
    assert statement.unit == "m"


@pytest.mark.parametrize("text", [r"\dv = 3", r"\dv x = 3", r"x = \dv[2]"])
def test_a_derivative_without_braces_is_not_read(text: str) -> None:
    with pytest.raises(UnknownCommandError):
        read_latex(text, DECLARED)
