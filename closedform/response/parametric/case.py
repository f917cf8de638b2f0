"""One case of a response with parameters: a branch in one regime, written out."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.algebra.branches import Branch
from closedform.algebra.domain import ParameterDomain
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.regimes import Regime
from closedform.notation.expression import Expression
from closedform.notation.shown import FormulaColumn, FormulaMatrix
from closedform.response.by_mode import ByMode
from closedform.response.parametric.conditions import WrittenComparison
from closedform.response.parametric.modes import Mode
from closedform.response.parametric.quantities import ResidueDefinition, RootDefinition
from closedform.response.parametric.rewriting import Extent

__all__ = ["Case", "Origin", "Sought", "WrittenQuantity"]

Rows = tuple[tuple[Expression, ...], ...]
Origin = Literal["roots", "user", "trade"]


@dataclass(frozen=True)
class WrittenQuantity:
    """A name in the formulas of a case: a formula in parameters and names before it, or a root.

    At roots that are known numbers `root` may be what a function has there.

    `origin` is "roots" for what the eigenvalues need, "user" for the model's abbreviations,
    "trade" for others.
    """

    name: str
    formula: Expression | None
    root: RootDefinition | ResidueDefinition | None
    origin: Origin


@dataclass(frozen=True)
class Sought:
    """The functions that are written for a case: x(t), the outputs, and what was asked for."""

    state: ExponentialMatrix
    output: ExponentialMatrix | None
    further: ExponentialMatrix | None = None
    parted: ExponentialMatrix | None = None


@dataclass(frozen=True)
class Case:
    """The closed form on one part of the domain.

    Shapes:  `transition` is n x n, `solution` n, `outputs` one per output of the model.
    `conditions` say which part it is, none where it is all of the domain; `domain` is that
    part.  `exponential`, `state` and `output` are exact, over the field of the model, with
    the equations of the branch put in.  `abbreviated` tells which abbreviations stand for
    which parameters, and to what extent.  `further` are other functions with the same
    exponentials that were asked for, `further_formulas` their entries; `parted` are
    some that `by_mode` takes apart.  `left_out` is the parameter that the equation of a double
    root takes out of the formulas, if one does.
    """

    number: int
    branch: Branch
    regimes: tuple[Regime, ...]
    conditions: tuple[WrittenComparison, ...]
    domain: ParameterDomain
    modes: tuple[Mode, ...]
    quantities: tuple[WrittenQuantity, ...]
    state: ExponentialMatrix
    output: ExponentialMatrix | None
    solution: FormulaColumn
    outputs: FormulaColumn
    transition: FormulaMatrix
    fronted: tuple[Expression | None, Rows]
    abbreviated: tuple[tuple[str, str, Extent], ...] = ()
    further: ExponentialMatrix | None = None
    further_formulas: Rows = ()
    parted: ExponentialMatrix | None = None
    by_mode: ByMode = ()
    left_out: str | None = None

    @property
    def condition(self) -> str:
        """The conditions in plain notation, joined by "and"; "true" where there is none."""
        return " and ".join(map(str, self.conditions)) or "true"
