"""One case of a response with parameters: a branch in one regime, written out."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Literal

from closedform.algebra.branches import Branch
from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.regimes import Regime
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import Call, Expression, operations
from closedform.notation.rational_formula import rational_formula
from closedform.notation.shown import FormulaColumn, FormulaMatrix
from closedform.response.parametric.closed_form import fronted_matrix
from closedform.response.parametric.conditions import (
    WrittenComparison,
    written_comparison,
    written_equation,
)
from closedform.response.parametric.definitions import definition_formula
from closedform.response.parametric.mode_terms import terms_of
from closedform.response.parametric.modes import (
    Mode,
    modes_of,
    perfect_root,
    quantities_of,
)
from closedform.response.parametric.quantities import (
    Definition,
    Letters,
    Quantity,
    RootDefinition,
    SquareRoot,
    SumOfRoots,
    Value,
)
from closedform.response.parametric.rewriting import Rewriting, rewriting_for, shortest
from closedform.response.parametric.terms import Term

__all__ = ["Case", "WrittenQuantity", "written_case"]

Rows = tuple[tuple[Expression, ...], ...]
Origin = Literal["roots", "user", "trade"]


@dataclass(frozen=True)
class WrittenQuantity:
    """A name in the formulas of a case: a formula in parameters and names before it, or a root.

    `origin` is "roots" for what the eigenvalues need, "user" for the model's abbreviations,
    "trade" for others.
    """

    name: str
    formula: Expression | None
    root: RootDefinition | None
    origin: Origin


@dataclass(frozen=True)
class Case:
    """The closed form on one part of the domain.

    Shapes:  `transition` is n x n, `solution` n, `outputs` one per output of the model.
    `conditions` say which part it is, none where it is all of the domain; `domain` is that
    part.  `exponential`, `state` and `output` are exact, over the field of the model, with
    the equations of the branch put in.
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

    @property
    def condition(self) -> str:
        """The conditions in plain notation, joined by "and"; "true" where there is none."""
        return " and ".join(map(str, self.conditions)) or "true"


def case_conditions(
    domain: ParameterDomain, branch: Branch, regimes: Sequence[Regime]
) -> tuple[tuple[WrittenComparison, ...], ParameterDomain]:
    """Return what selects a case, as printed, and the part of the domain that it selects.

    First the equations of the branch, then what must not vanish, then the regimes.
    """
    field = domain.field
    written: list[WrittenComparison] = []
    inside = branch.domain
    for equation in branch.equations:
        if equation.parameter is None or equation.value is None:
            written.append(written_comparison(domain, Comparison(equation.polynomial, "=")))
        else:
            written.append(written_equation(field, equation.parameter, equation.value))
    apart = [
        Comparison(_together(field, e.polynomials), "!=")
        for e in branch.exceptional
        if e.fate != "excluded"
    ]
    of_regimes = [c for regime in regimes for c in regime.conditions]
    whole = inside.narrowed(*of_regimes)
    for comparison in (*apart, *of_regimes):
        if (whole if comparison in apart else inside).implies(comparison):
            continue
        written.append(written_comparison(inside, comparison))
        inside = inside.narrowed(comparison)
    return tuple(dict.fromkeys(written)), inside


def _together(field: ParameterField, polynomials: Sequence[Scalar]) -> Scalar:
    """An element that vanishes where all the polynomials do: one of them, or a sum of squares."""
    if len(polynomials) == 1:
        return polynomials[0]
    return sum((p**2 for p in polynomials), field.domain.zero)


def written_case(
    model: ParametricModel,
    branch: Branch,
    regimes: tuple[Regime, ...],
    state: ExponentialMatrix,
    output: ExponentialMatrix | None,
    number: int,
) -> Case:
    """Return a branch in one regime, with its formulas in their shortest form."""
    field, n = model.field, len(model.states)
    conditions, domain = case_conditions(model.domain, branch, regimes)
    letters = Letters(_taken(model))
    modes = modes_of(field, branch.spectrum.factors, regimes, letters)
    own = [name for mode in modes for name in mode.names]
    shortenings = (*_user_shortenings(model, branch), *_trade_shortenings(field, modes, letters))
    writing = ParameterField(parameters=(*field.parameters, *own, *(s.name for s in shortenings)))
    quantities = [q for mode in modes for q in quantities_of(field, writing, mode)]
    rewritings = [
        r
        for s in shortenings
        for r in rewriting_for(writing, s.name, field.into(writing, s.value), s.power)
    ]
    by_roots = [r for q in quantities for r in _rewritings_by_root(field, writing, q)]

    def terms(function: ExponentialMatrix, row: int, column: int) -> list[Term]:
        return terms_of(field, writing, modes, function, row, column)

    m = len(model.outputs)
    functions = [terms(state, i, 0) for i in range(n)]
    functions += [] if output is None else [terms(output, i, 0) for i in range(m)]
    functions += [terms(branch.exponential, i, k) for i in range(n) for k in range(n)]
    costs = {s.name: operations(s.formula(field)) for s in shortenings} | dict.fromkeys(own, 0)
    best = shortest(writing, functions, [*rewritings, *by_roots], costs, model.time)
    transition = tuple(tuple(best.formulas[n + m + i * n : n + m + (i + 1) * n]) for i in range(n))
    rows = [best.functions[n + m + i * n : n + m + (i + 1) * n] for i in range(n)]
    used = [s for s in shortenings if s.name in best.names]
    chosen = [r for r in rewritings if r.name in best.names]
    lifted = _lifted(field, writing, domain, quantities)
    written = [WrittenQuantity(s.name, s.formula(field), None, s.origin) for s in used]
    written += [_written_quantity(lifted, q, chosen) for q in quantities]
    return Case(
        number,
        branch,
        regimes,
        conditions,
        domain,
        modes,
        tuple(written),
        state,
        output,
        FormulaColumn(best.formulas[:n]),
        FormulaColumn(best.formulas[n : n + m]),
        FormulaMatrix(transition),
        fronted_matrix(writing, rows, transition, model.time),
    )


def _taken(model: ParametricModel) -> set[str]:
    """Every name of the model: nothing else is given one that prints like it."""
    return {
        *model.states,
        model.time,
        *(output.name for output in model.outputs),
        *(parameter.name for parameter in model.parameters),
        *(definition.name for definition in (*model.abbreviations, *model.restated)),
    }


@dataclass(frozen=True)
class _Shortening:
    """An abbreviation that may be used: name^power = value, an element of K."""

    name: str
    value: Scalar
    power: int
    origin: Origin

    def formula(self, field: ParameterField) -> Expression:
        """Return the formula that defines the name."""
        value = rational_formula(field, self.value)
        return Call("sqrt", value) if self.power == 2 else value


def _user_shortenings(model: ParametricModel, branch: Branch) -> Iterator[_Shortening]:
    for definition in model.abbreviations:
        value = model.field.substituted(definition.value, branch.values)
        if model.field.constant(value) is None:
            yield _Shortening(definition.name, value, 1, "user")


def _trade_shortenings(
    field: ParameterField, modes: Sequence[Mode], letters: Letters
) -> Iterator[_Shortening]:
    """The decay rate and the undamped frequency of a pair, and time constants."""
    pairs = [m for m in modes if m.regime.kind in {"circular", "double", "hyperbolic"}]
    damped = [m for m in pairs if m.factor.roots.centre]
    for k, mode in enumerate(damped, start=1):
        number = None if len(damped) == 1 else k
        rate = -mode.factor.roots.centre
        if len(field.names_in(rate)) > 1:
            yield _Shortening(letters.take("delta", number), rate, 1, "trade")
        square = mode.factor.p.nth(0)
        if len(field.names_in(square)) > 1 and perfect_root(field, square) is None:
            yield _Shortening(letters.take("omega_n", number), square, 2, "trade")
    single = [m.factor.roots.centre for m in modes if m.regime.kind == "single"]
    constants = [1 / -rate for rate in single if rate and rate.numer.is_ground]
    constants = [c for c in constants if len(field.names_in(c)) > 1]
    for k, value in enumerate(constants, start=1):
        number = None if len(constants) == 1 else k
        yield _Shortening(letters.take("tau", number), value, 1, "trade")


def _rewritings_by_root(
    field: ParameterField, writing: ParameterField, quantity: Quantity
) -> Iterator[Rewriting]:
    """A frequency that is a square root may stand for a parameter: k = m omega_n^2."""
    if isinstance(quantity.definition, SquareRoot):
        square = quantity.definition.square
        if writing.names_in(square) <= set(field.parameters):
            yield from rewriting_for(writing, quantity.name, square, 2)


def _lifted(
    field: ParameterField,
    writing: ParameterField,
    domain: ParameterDomain,
    quantities: Sequence[Quantity],
) -> ParameterDomain:
    """The domain over the writing field, with the names that are known to be positive."""
    conditions = [Comparison(field.into(writing, c.element), c.relation) for c in domain.conditions]
    conditions += [Comparison(writing.symbol(q.name), ">") for q in quantities if q.positive]
    return ParameterDomain(writing, tuple(conditions))


def _written_quantity(
    domain: ParameterDomain, quantity: Quantity, chosen: Sequence[Rewriting]
) -> WrittenQuantity:
    """Return a quantity with its definition in the shortest form that the abbreviations allow."""
    if isinstance(quantity.definition, RootDefinition):
        return WrittenQuantity(quantity.name, None, quantity.definition, "roots")
    forms = [definition_formula(domain, quantity.definition)]
    forms += [
        definition_formula(domain, _rewritten(domain.field, quantity.definition, put))
        for put in (*([r] for r in chosen), chosen)
        if put
    ]
    formula = min((f for f in forms if f is not None), key=operations)
    return WrittenQuantity(quantity.name, formula, None, "roots")


def _rewritten(
    field: ParameterField, definition: Definition, rewritings: Sequence[Rewriting]
) -> Definition:
    def put(element: Scalar) -> Scalar:
        for r in rewritings:
            element = field.substituted(element, {r.parameter: r.replacement})
        return element

    match definition:
        case Value(value):
            return Value(put(value))
        case SquareRoot(square):
            return SquareRoot(put(square))
        case SumOfRoots(total, last, sign, rooted):
            return SumOfRoots(put(total), put(last), sign, rooted)
        case _:
            return definition
