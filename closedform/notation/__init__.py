"""Formulas: reading them from plain text, writing them, and their values."""

from closedform.notation.evaluation import enclose
from closedform.notation.exact import exact_value
from closedform.notation.linear import linear_combination
from closedform.notation.plain import plain
from closedform.notation.reader import read_formula
from closedform.notation.surd_formula import surd_expression

__all__ = [
    "enclose",
    "exact_value",
    "linear_combination",
    "plain",
    "read_formula",
    "surd_expression",
]
