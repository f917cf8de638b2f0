"""What follows from a model with parameters: every case of its closed form."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from itertools import product

from closedform.algebra.branches import Branch, case_tree, put_in, uncovered
from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import FieldMatrix
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.regimes import RootsUnknownError, regimes_of
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import names_in
from closedform.notation.plain import plain
from closedform.notation.rational_formula import rational_formula
from closedform.notation.shown import cases_latex
from closedform.response.parametric.case import Case, Sought, WrittenQuantity
from closedform.response.parametric.conditions import (
    WrittenComparison,
    written_comparison,
    written_equation,
)
from closedform.response.parametric.quantities import RootDefinition
from closedform.response.parametric.writing import written_case

__all__ = ["ParametricResponse", "respond_in_cases"]


@dataclass(frozen=True, repr=False)
class ParametricResponse:
    """The exact response of a model with parameters, case by case.

    Shapes:  `matrix` is n x n, `initial` n x 1, over the model's field.  `domain` is the
    model's, without the points at which A is not defined.  `cases` follow `branches`, with
    one case for each way in which the regimes of a branch's factors combine; ways that
    contradict the domain are left out, and so a branch may have no case.
    """

    model: ParametricModel
    domain: ParameterDomain
    matrix: FieldMatrix
    initial: FieldMatrix
    branches: tuple[Branch, ...]
    cases: tuple[Case, ...]

    @property
    def not_covered(self) -> tuple[tuple[WrittenComparison, ...], ...]:
        """The parts of the domain without a solution; the comparisons of one hold together."""
        domain, field = self.model.domain, self.model.field
        found = []
        for branch, exceptional in uncovered(self.branches):
            equations = [
                written_comparison(domain, Comparison(e.polynomial, "="))
                if e.parameter is None or e.value is None
                else written_equation(field, e.parameter, e.value)
                for e in branch.equations
            ]
            left = [written_comparison(domain, Comparison(p, "=")) for p in exceptional.polynomials]
            found.append((*equations, *left))
        return tuple(dict.fromkeys(found))

    def __repr__(self) -> str:
        states, cases = len(self.model.states), len(self.cases)
        return f"<Response of {self.model.title!r}, {states} states, {cases} cases>"

    def __str__(self) -> str:
        """Return the solution, case by case, a line for each state."""
        t = self.model.time
        lines = []
        for case in self.cases:
            lines.append(f"if {case.condition}:" if case.conditions else "always:")
            for state, written in zip(self.model.states, case.solution, strict=True):
                lines.append(f"  {state}({t}) = {plain(written)}")
            needed = _needed(case)
            lines += [f"  {self._defined(q)}" for q in case.quantities if q.name in needed]
        return "\n".join(lines)

    def _defined(self, quantity: WrittenQuantity) -> str:
        if quantity.formula is not None:
            return f"{quantity.name} = {plain(quantity.formula)}"
        if quantity.root is None:
            raise TypeError(f"{quantity.name} has no definition")
        field = self.model.field
        root = quantity.root
        texts = [plain(rational_formula(field, c)) for c in root.polynomial]
        place = f"root {root.which}, by real part, of the coefficients {', '.join(texts)}"
        if isinstance(root, RootDefinition):
            of = "" if root.part is None else f"the {root.part} part of "
            return f"{quantity.name} is {of}{place}"
        above, beside = (
            ", ".join(plain(rational_formula(field, c)) for c in row)
            for row in (root.numerator, root.beside)
        )
        over, also = ("p'", "") if beside == "1" else ("(p' g)", f" and {beside} of g")
        return (
            f"{quantity.name} is {root.weight} times the {root.part} part of r/{over} at {place} "
            f"of p, {above} of r{also}"
        )

    def _repr_latex_(self) -> str:
        """Return the solution as LaTeX for a notebook, a row for each case."""
        return cases_latex([(c.solution, [k.latex for k in c.conditions]) for c in self.cases])


def _needed(case: Case) -> frozenset[str]:
    """The names in the solution of a case, and in the definitions of these."""
    needed = frozenset().union(*map(names_in, (*case.solution, *case.outputs)))
    for quantity in reversed(case.quantities):
        if quantity.name in needed and quantity.formula is not None:
            needed |= names_in(quantity.formula)
    return needed


def respond_in_cases(
    model: ParametricModel,
    *,
    further: Callable[[Branch], ExponentialMatrix] | None = None,
    parted: Callable[[Branch], ExponentialMatrix | None] | None = None,
) -> ParametricResponse:
    """Return the exact response of a model with parameters, in every case.

    `further` makes other functions of the exponential of a branch, to be written with the
    same names, `parted` some to be written mode by mode.

    Exact:   no floating-point number takes part.  Nothing is proved yet: see `verify`.
    Raises:  RootsUnknownError where it is not known how the roots of a factor lie.
    """
    try:
        return _in_cases(model, further, parted)
    except RootsUnknownError as error:
        raise error.of(model.name) from None


def _in_cases(
    model: ParametricModel,
    further: Callable[[Branch], ExponentialMatrix] | None,
    parted: Callable[[Branch], ExponentialMatrix | None] | None,
) -> ParametricResponse:
    field = model.field
    matrix = field.matrix([list(row) for row in model.matrix])
    initial = field.matrix([[entry] for entry in model.initial])
    domain = _where_defined(model.domain, field, matrix, initial)
    branches = case_tree(field, matrix, domain)
    cases: list[Case] = []
    for branch in branches:
        values = branch.values
        state = branch.exponential.times(put_in(field, initial, values))
        output = None
        if model.outputs:
            weights = field.matrix([list(o.weights) for o in model.outputs])
            output = state.after(put_in(field, weights, values))
        ways = [
            regimes_of(field, factor, structure, branch.domain)
            for factor, structure in zip(branch.spectrum.factors, branch.structures, strict=True)
        ]
        others = further(branch) if further is not None else None
        apart = parted(branch) if parted is not None else None
        if branch.under is not None:
            short = branch.under.exponential
            state, output, others, apart = (
                short(state),
                *(None if part is None else short(part) for part in (output, others, apart)),
            )
        sought = Sought(state, output, others, apart)
        first: Case | None = None
        for regimes in product(*ways):
            case = written_case(model, branch, regimes, sought, len(cases), first)
            if case is not None:
                first = first or case
                cases.append(case)
    return ParametricResponse(model, domain, matrix, initial, branches, tuple(cases))


def _where_defined(
    domain: ParameterDomain, field: ParameterField, *matrices: FieldMatrix
) -> ParameterDomain:
    """Leave out where a denominator of the model itself vanishes."""
    for matrix in matrices:
        for row in matrix.to_list():
            for element in row:
                if element and not element.denom.is_ground:
                    below = field.of_polynomial(element.denom)
                    domain = domain.narrowed(Comparison(below, "!="))
    return domain
