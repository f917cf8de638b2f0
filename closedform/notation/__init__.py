"""Formulas: reading them from plain text, writing them, and their values.

`plain` is here at once: it is light, and a module of the room has its name.  The rest is
imported when it is first asked for, so that a formula tree or a symbol costs no parser.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING

from closedform.notation.plain import plain

if TYPE_CHECKING:
    from closedform.notation.equation import (
        read_equation,
        read_jet_formula,
        read_signal_formula,
    )
    from closedform.notation.evaluation import enclose
    from closedform.notation.exact import exact_value
    from closedform.notation.linear import linear_combination
    from closedform.notation.rational import rational_combination, rational_value
    from closedform.notation.reader import read_formula
    from closedform.notation.terms import surd_formula

__all__ = [
    "enclose",
    "exact_value",
    "linear_combination",
    "plain",
    "rational_combination",
    "rational_value",
    "read_equation",
    "read_formula",
    "read_jet_formula",
    "read_signal_formula",
    "surd_formula",
]

_HOMES = {
    "enclose": "closedform.notation.evaluation",
    "exact_value": "closedform.notation.exact",
    "linear_combination": "closedform.notation.linear",
    "rational_combination": "closedform.notation.rational",
    "rational_value": "closedform.notation.rational",
    "read_equation": "closedform.notation.equation",
    "read_formula": "closedform.notation.reader",
    "read_jet_formula": "closedform.notation.equation",
    "read_signal_formula": "closedform.notation.equation",
    "surd_formula": "closedform.notation.terms",
}


def __getattr__(name: str) -> object:
    """Import a public name when it is first asked for."""
    if name not in _HOMES:
        raise AttributeError(f"module 'closedform.notation' has no attribute {name!r}")
    return getattr(import_module(_HOMES[name]), name)
