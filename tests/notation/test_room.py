"""The room's face gives every public name, and costs only what is asked for."""

from __future__ import annotations

import subprocess
import sys

import pytest

import closedform.notation

LIGHT = ("expression", "plain", "greek", "errors", "latex.names", "latex.formula", "shown")


def run(program: str) -> str:
    return subprocess.run(
        [sys.executable, "-c", program], check=True, capture_output=True, text=True
    ).stdout


@pytest.mark.parametrize("first", ["plain", "reader", "exact"])
def test_every_public_name_is_a_function_whatever_was_imported_first(first: str) -> None:
    program = (
        f"import closedform.notation.{first}, closedform.notation as room\n"
        "print([n for n in room.__all__ if type(getattr(room, n)).__name__ != 'function'])"
    )
    assert run(program) == "[]\n"


def test_a_name_that_is_not_there_is_told_as_python_does() -> None:
    with pytest.raises(AttributeError, match=r"'closedform\.notation' has no attribute 'nothing'"):
        closedform.notation.nothing  # noqa: B018


def test_formula_trees_and_symbols_cost_no_parser_and_no_arithmetic() -> None:
    modules = ", ".join(f"closedform.notation.{module}" for module in LIGHT)
    heavy = "[name for name in ('lark', 'flint', 'sympy') if name in sys.modules]"
    assert run(f"import sys, {modules}; print({heavy})") == "[]\n"
