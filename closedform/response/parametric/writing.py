"""From a branch in one regime to a case: its functions in their shortest form."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import TypeVar

from closedform.algebra.branches import Branch
from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.equations import linear_solution
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.regimes import Regime
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import operations
from closedform.notation.shown import FormulaColumn, FormulaMatrix
from closedform.response.parametric.case import Case, Sought, WrittenQuantity
from closedform.response.parametric.closed_form import closed_form, fronted_matrix
from closedform.response.parametric.definitions import definition_formula
from closedform.response.parametric.mode_parts import by_mode
from closedform.response.parametric.mode_terms import terms_of
from closedform.response.parametric.modes import Mode, modes_of, quantities_of
from closedform.response.parametric.quantities import (
    Definition,
    Letters,
    Quantity,
    ResidueDefinition,
    RootDefinition,
    SquareRoot,
    SumOfRoots,
    Value,
)
from closedform.response.parametric.residues import with_residues
from closedform.response.parametric.rewriting import (
    Extent,
    Rewriting,
    rewriting_for,
    rewritten,
    shortest,
)
from closedform.response.parametric.selection import case_conditions
from closedform.response.parametric.shortenings import (
    Shortening,
    rewritings_by_root,
    sound_rewritings,
    trade_shortenings,
    user_shortenings,
)
from closedform.response.parametric.terms import Term

__all__ = ["written_case"]

T = TypeVar("T")
Table = tuple[tuple[T, ...], ...]
Rows = tuple[tuple[Term, ...], ...]
"""The terms of many functions."""


@dataclass(frozen=True)
class _Functions:
    """The functions of a case as terms: solution and outputs, then e^(At) row by row."""

    results: Rows
    entries: Rows


def written_case(
    model: ParametricModel,
    branch: Branch,
    regimes: tuple[Regime, ...],
    functions: Sought,
    number: int,
    like: Case | None = None,
) -> Case | None:
    """Return a branch in one regime, with its formulas in their shortest form.

    `like` is a case of the same branch whose
    abbreviations are taken over, so that the regimes can be read side by side.  None if the
    conditions of the case contradict each other.
    """
    field, n, m = model.field, len(model.states), len(model.outputs)
    selected = case_conditions(model.domain, branch, regimes)
    if selected is None:
        return None
    conditions, domain = selected
    letters = Letters(_taken(model))
    modes = modes_of(field, branch.spectrum.factors, regimes, letters)
    sought = (functions.state, functions.output, functions.further, functions.parted)
    modes = with_residues(field, modes, sought, letters)
    shortenings = (*user_shortenings(model, branch), *trade_shortenings(domain, modes, letters))
    writing = _writing_field(model, modes, shortenings)
    quantities = [q for mode in modes for q in quantities_of(field, writing, mode)]
    lifted = _lifted(field, writing, domain, quantities, shortenings)
    terms = _functions(field, writing, modes, branch.exponential, sought)
    below = _names_below(writing, terms)
    rewritings = sound_rewritings(
        lifted,
        (
            r
            for s in shortenings
            for r in rewriting_for(writing, s.name, field.into(writing, s.value), s.power)
        ),
        below,
    )
    if like is None:
        own = (r for q in quantities for r in rewritings_by_root(field, writing, q))
        costs = {s.name: operations(s.formula(field)) for s in shortenings}
        costs |= dict.fromkeys((q.name for q in quantities), 0)
        candidates = [*rewritings, *sound_rewritings(lifted, own, below)]
        used = shortest(writing, terms.results, candidates, costs, model.time).used
    else:
        known = {(name, parameter): extent for name, parameter, extent in like.abbreviated}
        used = tuple(
            (r, known[r.name, r.parameter]) for r in rewritings if (r.name, r.parameter) in known
        )
    results, entries = _shortest_under_equations(writing, domain, modes, terms, used, model.time)
    written_whole = len(results) - _entries(functions.parted)
    formulas = [closed_form(writing, f, model.time) for f in results[:written_whole]]
    rows = [entries[i * n : (i + 1) * n] for i in range(n)]
    transition = tuple(
        tuple(closed_form(writing, function, model.time) for function in row) for row in rows
    )
    put = [r for r, _ in used if r in rewritings]
    abbreviations = [s for s in shortenings if s.name in {r.name for r in put}]
    written = [WrittenQuantity(s.name, s.formula(field), None, s.origin) for s in abbreviations]
    written += [_written_quantity(lifted, q, put) for q in quantities]
    return Case(
        number,
        branch,
        regimes,
        conditions,
        domain,
        modes,
        tuple(written),
        functions.state,
        functions.output,
        FormulaColumn(formulas[:n]),
        FormulaColumn(formulas[n : n + m]),
        FormulaMatrix(transition),
        fronted_matrix(writing, rows, transition, model.time),
        tuple((r.name, r.parameter, extent) for r, extent in used),
        functions.further,
        _in_rows(formulas[n + m : written_whole], functions.further),
        functions.parted,
        _in_rows([by_mode(writing, f) for f in results[written_whole:]], functions.parted),
    )


def _in_rows(entries: Sequence[T], function: ExponentialMatrix | None) -> Table[T]:
    if function is None:
        return ()
    rows, columns = function.shape
    return tuple(tuple(entries[i * columns : (i + 1) * columns]) for i in range(rows))


def _entries(function: ExponentialMatrix | None) -> int:
    return 0 if function is None else int(function.shape[0] * function.shape[1])


def _writing_field(
    model: ParametricModel, modes: Sequence[Mode], shortenings: Sequence[Shortening]
) -> ParameterField:
    """The parameters of A, then the names, then other parameters: the order of printing."""
    field = model.field
    entries = {n for row in model.matrix for e in row for n in field.names_in(e)}
    return ParameterField(
        parameters=(
            *(n for n in field.parameters if n in entries),
            *(name for mode in modes for name in mode.written_names),
            *(s.name for s in shortenings),
            *(n for n in field.parameters if n not in entries),
        )
    )


def _functions(
    field: ParameterField,
    writing: ParameterField,
    modes: Sequence[Mode],
    exponential: ExponentialMatrix,
    functions: Sequence[ExponentialMatrix | None],
) -> _Functions:
    def terms(function: ExponentialMatrix | None) -> tuple[tuple[Term, ...], ...]:
        if function is None:
            return ()
        rows, columns = function.shape
        return tuple(
            tuple(terms_of(field, writing, modes, function, i, k))
            for i in range(rows)
            for k in range(columns)
        )

    results = tuple(part for function in functions for part in terms(function))
    return _Functions(results, terms(exponential))


def _names_below(writing: ParameterField, terms: _Functions) -> frozenset[str]:
    """The parameters in the denominators of amounts and rates."""
    denominators = {
        element.denom
        for function in (*terms.results, *terms.entries)
        for term in function
        for element in (term.amount, term.rate)
        if element
    }
    found = (writing.names_in(writing.of_polynomial(d)) for d in denominators)
    return frozenset().union(*found)


def _shortest_under_equations(
    writing: ParameterField,
    domain: ParameterDomain,
    modes: Sequence[Mode],
    terms: _Functions,
    used: Sequence[tuple[Rewriting, Extent]],
    time: str,
) -> tuple[Rows, Rows]:
    """Results and entries with the abbreviations that are used.

    For a double root the equation D = 0 may leave out a parameter, if that is shorter.
    """
    field = domain.field
    puts: list[dict[str, Scalar]] = [{}]
    if any(mode.regime.kind == "double" for mode in modes):
        for condition in domain.conditions:
            if condition.relation == "=":
                puts += [
                    {name: field.into(writing, solved)}
                    for name in field.parameters
                    if (solved := linear_solution(field, condition.element, name)) is not None
                    and domain.sign_of(_slope(field, condition.element, name)).never_zero
                ]
    forms = []
    for put in puts:
        results = rewritten(writing, _put_in(writing, terms.results, put), used)
        length = sum(operations(closed_form(writing, f, time)) for f in results)
        forms.append((length, put, results))
    _, put, results = min(forms, key=lambda form: form[0])
    return results, rewritten(writing, _put_in(writing, terms.entries, put), used)


def _slope(field: ParameterField, element: Scalar, name: str) -> Scalar:
    """What a parameter is multiplied by where the element is zero."""
    return field.derivative(field.of_polynomial(element.numer), name)


def _put_in(writing: ParameterField, functions: Rows, put: dict[str, Scalar]) -> Rows:
    if not put:
        return functions
    return tuple(
        tuple(
            replace(
                term,
                amount=writing.substituted(term.amount, put),
                rate=writing.substituted(term.rate, put),
            )
            for term in function
        )
        for function in functions
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


def _lifted(
    field: ParameterField,
    writing: ParameterField,
    domain: ParameterDomain,
    quantities: Sequence[Quantity],
    shortenings: Sequence[Shortening],
) -> ParameterDomain:
    """The domain over the writing field, with the names that are known to be positive."""
    conditions = [Comparison(field.into(writing, c.element), c.relation) for c in domain.conditions]
    conditions += [Comparison(writing.symbol(q.name), ">") for q in quantities if q.positive]
    for shortening in shortenings:
        symbol, sign = writing.symbol(shortening.name), domain.sign_of(shortening.value).sign
        if sign == "positive":
            conditions.append(Comparison(symbol, ">"))
        elif sign in ("negative", "nonzero"):
            conditions.append(Comparison(symbol, "!="))
    return ParameterDomain(writing, tuple(conditions))


def _written_quantity(
    domain: ParameterDomain, quantity: Quantity, chosen: Sequence[Rewriting]
) -> WrittenQuantity:
    """Return a quantity with its definition in the shortest form that the abbreviations allow."""
    if isinstance(quantity.definition, RootDefinition | ResidueDefinition):
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
