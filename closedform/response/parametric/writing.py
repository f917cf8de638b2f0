"""From a branch in one regime to a case: its functions in their shortest form."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import TypeVar

from closedform.algebra.branches import Branch
from closedform.algebra.domain import ParameterDomain
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.regimes import Regime
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import Expression, names_in, operations
from closedform.notation.shown import FormulaColumn, FormulaMatrix
from closedform.response.parametric.case import Case, Sought
from closedform.response.parametric.closed_form import closed_form, fronted_matrix
from closedform.response.parametric.extent import are_long, estimate
from closedform.response.parametric.lettering import Lettering, lettering
from closedform.response.parametric.mode_parts import by_mode
from closedform.response.parametric.mode_terms import terms_of
from closedform.response.parametric.modes import Mode
from closedform.response.parametric.rewriting import (
    Extent,
    Rewriting,
    rewritten,
    shortest,
)
from closedform.response.parametric.selection import case_conditions
from closedform.response.parametric.terms import Term

__all__ = ["written_beside_case", "written_case"]

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
    sought = (functions.state, functions.output, functions.further, functions.parted)
    letters = lettering(model, branch, regimes, domain, sought)
    writing, quantities = letters.writing, letters.quantities
    terms = _functions(field, writing, letters.modes, branch.exponential, sought)
    below = _names_below(writing, (*terms.results, *terms.entries))
    rewritings = letters.rewritings(field, below)
    if like is None:
        costs = {s.name: operations(s.formula(field)) for s in letters.shortenings}
        costs |= dict.fromkeys((q.name for q in quantities), 0)
        candidates = [*rewritings, *letters.rewritings_by_root(field, below)]
        used = shortest(writing, terms.results, candidates, costs, model.time).used
    else:
        known = {(name, parameter): extent for name, parameter, extent in like.abbreviated}
        used = tuple(
            (r, known[r.name, r.parameter]) for r in rewritings if (r.name, r.parameter) in known
        )
    put, results = _shortest_under_equations(letters, domain, terms.results, used, model.time)
    entries = rewritten(writing, _put_in(writing, terms.entries, put), used)
    written_whole = len(results) - _entries(functions.parted)
    formulas = [closed_form(writing, f, model.time) for f in results[:written_whole]]
    rows = [entries[i * n : (i + 1) * n] for i in range(n)]
    transition = tuple(
        tuple(closed_form(writing, function, model.time) for function in row) for row in rows
    )
    return Case(
        number,
        branch,
        regimes,
        conditions,
        domain,
        letters.modes,
        letters.written(field, [r for r, _ in used if r in rewritings]),
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
        next(iter(put), None),
    )


def written_beside_case(
    model: ParametricModel, case: Case, function: ExponentialMatrix
) -> Table[Expression] | None:
    """Return the formulas of another function, written as those of a case are.

    None if they need names that the case does not have.
    """
    field, domain = model.field, case.domain
    sought = (case.state, case.output, function, None)
    letters = lettering(model, case.branch, case.regimes, domain, sought)
    writing = letters.writing
    terms = _terms_of(field, writing, letters.modes, function)
    below = _names_below(writing, terms)
    own = letters.rewritings(field, below)
    known = {(r.name, r.parameter): r for r in (*own, *letters.rewritings_by_root(field, below))}
    used = [
        (known[name, parameter], extent)
        for name, parameter, extent in case.abbreviated
        if (name, parameter) in known
    ]
    meant = {quantity.name: quantity for quantity in case.quantities}
    written = letters.written(field, [r for r, _ in used if r in own])
    if any(meant.get(quantity.name, quantity) != quantity for quantity in written):
        return None
    put = letters.left_out(field, domain, case.left_out)
    formulas = [
        closed_form(writing, f, model.time)
        for f in rewritten(writing, _put_in(writing, terms, put), used)
    ]
    names = frozenset().union(*map(names_in, formulas))
    if not names <= {model.time, *field.parameters, *meant}:
        return None
    return _in_rows(formulas, function)


def _in_rows(entries: Sequence[T], function: ExponentialMatrix | None) -> Table[T]:
    if function is None:
        return ()
    rows, columns = function.shape
    return tuple(tuple(entries[i * columns : (i + 1) * columns]) for i in range(rows))


def _entries(function: ExponentialMatrix | None) -> int:
    return 0 if function is None else int(function.shape[0] * function.shape[1])


def _functions(
    field: ParameterField,
    writing: ParameterField,
    modes: Sequence[Mode],
    exponential: ExponentialMatrix,
    functions: Sequence[ExponentialMatrix | None],
) -> _Functions:
    results = tuple(
        part
        for function in functions
        if function is not None
        for part in _terms_of(field, writing, modes, function)
    )
    return _Functions(results, _terms_of(field, writing, modes, exponential))


def _terms_of(
    field: ParameterField,
    writing: ParameterField,
    modes: Sequence[Mode],
    function: ExponentialMatrix,
) -> Rows:
    """The terms of every entry, row by row."""
    rows, columns = function.shape
    return tuple(
        tuple(terms_of(field, writing, modes, function, i, k))
        for i in range(rows)
        for k in range(columns)
    )


def _names_below(writing: ParameterField, terms: Rows) -> frozenset[str]:
    """The parameters in the denominators of amounts and rates."""
    denominators = {
        element.denom
        for function in terms
        for term in function
        for element in (term.amount, term.rate)
        if element
    }
    found = (writing.names_in(writing.of_polynomial(d)) for d in denominators)
    return frozenset().union(*found)


def _shortest_under_equations(
    letters: Lettering,
    domain: ParameterDomain,
    functions: Rows,
    used: Sequence[tuple[Rewriting, Extent]],
    time: str,
) -> tuple[dict[str, Scalar], Rows]:
    """What is put in the place of a parameter, and the functions with all that is used.

    For a double root the equation D = 0 may leave out a parameter, if that is shorter.
    """
    writing, nothing = letters.writing, dict[str, Scalar]()
    puts = [nothing, *letters.equations(domain.field, domain)]
    forms = [rewritten(writing, _put_in(writing, functions, put), used) for put in puts]
    if len(forms) == 1:
        return nothing, forms[0]
    lengths = [
        estimate(form)
        if are_long(functions)
        else sum(operations(closed_form(writing, f, time)) for f in form)
        for form in forms
    ]
    best = lengths.index(min(lengths))
    return puts[best], forms[best]


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
