"""What people write: formulas in LaTeX or typed, as they stand in reports and papers.

For other programs: `meaning_of` gives the SymPy object of a formula, `reading_of` what was
read with its ambiguities; `Declared` says which names have a meaning of their own.

>>> from closedform.notation.written import meaning_of
>>> meaning_of(text="2e^(-t/tau)", declared={"parameters": ["tau"]})
2*exp(-t/tau)
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from closedform.notation.written.meanings import declared_names, meaning_of, reading_of
    from closedform.notation.written.reader import read_latex
    from closedform.notation.written.sympy_form import sympy_of
    from closedform.notation.written.tree import Declared
    from closedform.notation.written.typed_reader import read_typed

__all__ = [
    "Declared",
    "declared_names",
    "meaning_of",
    "read_latex",
    "read_typed",
    "reading_of",
    "sympy_of",
]

_MODULES = {
    **dict.fromkeys(("declared_names", "meaning_of", "reading_of"), "meanings"),
    "read_latex": "reader",
    "read_typed": "typed_reader",
    "sympy_of": "sympy_form",
    "Declared": "tree",
}


def __getattr__(name: str) -> Any:
    """Return what is offered here from its module; SymPy is imported only if it is asked for."""
    if name in _MODULES:
        return getattr(import_module(f"{__name__}.{_MODULES[name]}"), name)
    raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
