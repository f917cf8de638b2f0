"""How names, functions and relations of a written formula are called in SymPy."""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from typing import Any

import sympy

__all__ = ["FUNCTIONS", "RELATIONS", "named"]

FUNCTIONS: Mapping[str, Callable[..., Any]] = {
    **{
        name: getattr(sympy, name)
        for name in (
            *("sin", "cos", "tan", "cot", "sec", "csc", "sinh", "cosh", "tanh", "coth"),
            *("asin", "acos", "atan", "atan2", "asinh", "acosh", "atanh", "sqrt"),
            *("re", "im", "arg", "sign", "factorial", "diag"),
        )
    },
    "ln": sympy.log,
    "log10": lambda x: sympy.log(x, 10),
    "abs": sympy.Abs,
    "conj": sympy.conjugate,
    "min": sympy.Min,
    "max": sympy.Max,
    "step": sympy.Heaviside,
    "delta": sympy.DiracDelta,
    "det": sympy.Determinant,
    "trace": sympy.Trace,
    "transpose": lambda m: getattr(m, "T", m),
    "inverse": lambda m: m**-1,
    "adj": lambda m: m.adjugate(),
    "norm": lambda m: m.norm(),
    "rank": lambda m: m.rank(),
}
"""Functions of the tree by name; `exp` is apart, since that of a matrix is not evaluated."""
RELATIONS: Mapping[str, Callable[..., Any]] = {
    "=": sympy.Eq,
    "≈": sympy.Eq,
    "≡": sympy.Eq,
    "→": sympy.Eq,
    "≠": sympy.Ne,
    "<": sympy.Lt,
    "≤": sympy.Le,
    ">": sympy.Gt,
    "≥": sympy.Ge,
}


def named(name: str) -> str:
    """Return a name as it is spelled in Python, where `lambda` is a word of the language.

    >>> named("lambda_1"), named("omega_n")
    ('lamda_1', 'omega_n')
    """
    return re.sub(r"^lambda(?![A-Za-z])", "lamda", name)
