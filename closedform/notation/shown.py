"""Results as they are handed to a user of the library: they show as mathematics."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.notation.expression import Expression
from closedform.notation.latex.formula import formula
from closedform.notation.plain import plain

__all__ = ["FormulaColumn", "FormulaMatrix", "cases_latex"]


class FormulaMatrix(tuple[tuple[Expression, ...], ...]):
    """A matrix of formulas: a tuple of rows that prints in plain notation.

    In a notebook it shows as typeset mathematics.
    """

    __slots__ = ()

    def __str__(self) -> str:
        texts = [[plain(entry) for entry in row] for row in self]
        widths = [max(map(len, column)) for column in zip(*texts, strict=True)]
        lines = (
            "  ".join(text.ljust(width) for text, width in zip(row, widths, strict=True)).rstrip()
            for row in texts
        )
        return "\n".join(f"[{line}]" for line in lines)

    def _repr_latex_(self) -> str:
        rows = [" & ".join(_in_notebook(formula(entry).latex) for entry in row) for row in self]
        columns = "c" * (len(self[0]) if self else 1)
        body = r" \\ ".join(rows)
        return rf"$\displaystyle \left[\begin{{array}}{{{columns}}} {body} \end{{array}}\right]$"


def _in_notebook(latex: str) -> str:
    r"""LaTeX without the preamble of a write-up: MathJax sets \mathrm{\pi} upright."""
    return latex.replace(r"\uppi", r"\mathrm{\pi}")


class FormulaColumn(tuple[Expression, ...]):
    """A column of formulas: a tuple that prints in plain notation, a line each.

    In a notebook it shows as typeset mathematics.
    """

    __slots__ = ()

    def __str__(self) -> str:
        return "\n".join(map(plain, self))

    def _repr_latex_(self) -> str:
        return FormulaMatrix((entry,) for entry in self)._repr_latex_()


def cases_latex(cases: Sequence[tuple[FormulaColumn, Sequence[str]]]) -> str:
    """Return columns as LaTeX for a notebook, a row for each and the conditions it is under.

    The conditions are LaTeX already; an only column without any stands by itself.
    """
    if len(cases) == 1 and not cases[0][1]:
        return cases[0][0]._repr_latex_()
    rows = [
        f"{column._repr_latex_().strip('$')} & "
        + r" \text{ and } ".join(map(_in_notebook, conditions))
        for column, conditions in cases
    ]
    body = r" \\[1ex] ".join(rows)
    return rf"$\displaystyle \left\{{\begin{{array}}{{ll}} {body} \end{{array}}\right.$"
