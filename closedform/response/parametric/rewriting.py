"""Abbreviations: formulas of the parameters with a name, used where they shorten the results.

An abbreviation name = f, or name^2 = f, is used by eliminating a parameter: from
delta = c/(2*m) follows c = 2*m*delta, and this is put in the place of c.  Every choice of
abbreviations is written out, as far as there are few, and the shortest is kept.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from dataclasses import field as dataclass_field
from functools import lru_cache
from itertools import product
from math import prod
from typing import Literal

from closedform.algebra.field import Scalar
from closedform.algebra.lowest_terms import equal_under, put_in
from closedform.algebra.parameter_field import ParameterField, ParameterPolynomial
from closedform.notation.expression import Expression, operations
from closedform.response.parametric.closed_form import Term, closed_form
from closedform.response.parametric.extent import are_long, estimate

__all__ = ["Extent", "Rewriting", "Shortest", "rewriting_for", "rewritten", "shortest"]

TRIED = 16
"""Up to this number of combinations all are tried; else they are improved one by one."""


@dataclass(frozen=True)
class Rewriting:
    """`name`^`power` = `value`, used by putting `replacement` in the place of `parameter`."""

    name: str
    parameter: str
    replacement: Scalar
    value: Scalar
    power: int = 1


Extent = Literal["everywhere", "rates"]
"""Where a rewriting is applied: everywhere, or in rates and frequencies only."""


@dataclass(frozen=True)
class Shortest:
    """Functions as terms after rewriting, their formulas, and the abbreviations in them.

    `rewritings` are those that were applied, in this order, each to the extent in `extents`.
    """

    functions: tuple[tuple[Term, ...], ...]
    formulas: tuple[Expression, ...]
    names: tuple[str, ...]
    rewritings: tuple[Rewriting, ...] = ()
    extents: tuple[Extent, ...] = ()

    @property
    def used(self) -> tuple[tuple[Rewriting, Extent], ...]:
        """The rewritings with their extents."""
        return tuple(zip(self.rewritings, self.extents, strict=True))


def rewriting_for(
    field: ParameterField, name: str, value: Scalar, power: int = 1
) -> tuple[Rewriting, ...]:
    """Return the ways to use name^power = value, one for each parameter that it gives.

    A parameter is given where numerator and denominator of `value` hold it at most once:
    from y = (a x + b)/(c x + d) follows x = (d y - b)/(a - c y).  `name` is a parameter of
    `field` that does not occur in `value`.
    """
    found = []
    left = field.symbol(name) ** power
    for parameter in field.parameters:
        if parameter not in field.names_in(value):
            continue
        upper = _linear(field, value.numer, parameter)
        lower = _linear(field, value.denom, parameter)
        if upper is None or lower is None:
            continue
        (a, b), (c, d) = upper, lower
        replacement = (d * left - b) / (a - c * left)
        made = Rewriting(name, parameter, replacement, value, power)
        if _restored(field, replacement, made) == field.symbol(parameter):
            found.append(made)
    return tuple(found)


def _linear(
    field: ParameterField, polynomial: ParameterPolynomial, parameter: str
) -> tuple[Scalar, Scalar] | None:
    """Return a and b of a polynomial a x + b; None if the degree is higher."""
    place = field.parameters.index(parameter)
    if any(m[place] > 1 for m in polynomial.itermonoms()):
        return None
    element = field.of_polynomial(polynomial)
    rest = field.substituted(element, {parameter: field.scalar(0)})
    return (element - rest) / field.symbol(parameter), rest


def _restored(field: ParameterField, element: Scalar, rewriting: Rewriting) -> Scalar:
    """Return the element with the value in place of name^power; lower powers stay."""
    place = field.parameters.index(rewriting.name)
    symbol = field.symbol(rewriting.name)
    halves = []
    for polynomial in (element.numer, element.denom):
        total = field.scalar(0)
        for monomial, coefficient in polynomial.iterterms():
            whole, left = divmod(monomial[place], rewriting.power)
            bare = tuple(0 if i == place else e for i, e in enumerate(monomial))
            term = field.of_polynomial(polynomial.ring.term_new(bare, coefficient))
            total += term * rewriting.value**whole * symbol**left
        halves.append(total)
    return halves[0] / halves[1]


def rewritten(
    field: ParameterField,
    functions: Sequence[Sequence[Term]],
    used: Sequence[tuple[Rewriting, Extent]],
) -> tuple[tuple[Term, ...], ...]:
    """Return functions with rewritings applied, one after the other, and nothing chosen.

    Raises ArithmeticError if one of them changed a function.
    """
    return tuple(tuple(_rewritten(field, term, used) for term in terms) for terms in functions)


Choice = tuple[Rewriting, Extent] | None
"""How one abbreviation is used: everywhere, in rates and frequencies only, or not at all."""


def shortest(
    field: ParameterField,
    functions: Sequence[Sequence[Term]],
    rewritings: Sequence[Rewriting],
    definitions_cost: Mapping[str, int],
    time: str,
) -> Shortest:
    """Return the functions with those abbreviations that make the whole shortest.

    The whole is the operations of all formulas and, from `definitions_cost`, those of the
    definitions of the abbreviations in them.  Rewritings of one name exclude each other.
    Long functions are compared by an estimate, and written once.
    """
    names = tuple(dict.fromkeys(r.name for r in rewritings))
    options: list[list[Choice]] = [[None] for _ in names]
    for name, choices in zip(names, options, strict=True):
        for rewriting in rewritings:
            if rewriting.name == name:
                choices += [(rewriting, "everywhere"), (rewriting, "rates")]
    values = {r.name: r.value for r in rewritings}
    estimated = are_long(functions)
    search = _Search(field, functions, names, values, definitions_cost, time, estimated)
    if prod(map(len, options)) <= TRIED:
        best = min(product(*options), key=search.cost)
    else:
        best = _improved(options, search)
    return search.result(best)


def _improved(options: Sequence[Sequence[Choice]], search: _Search) -> tuple[Choice, ...]:
    """Change the use of one abbreviation at a time, as long as that shortens the whole."""
    best: tuple[Choice, ...] = tuple(None for _ in options)
    improving = True
    while improving:
        near = (
            (*best[:i], choice, *best[i + 1 :])
            for i, choices in enumerate(options)
            for choice in choices
        )
        next_best = min(near, key=search.cost)
        improving = search.cost(next_best) < search.cost(best)
        best = next_best if improving else best
    return best


@dataclass
class _Search:
    """What the choices are tried on; `results` keeps what was written, `least` its cost.

    Where costs are `estimated`, nothing is written before the choice is made.
    """

    field: ParameterField
    functions: Sequence[Sequence[Term]]
    names: tuple[str, ...]
    values: Mapping[str, Scalar]
    definitions_cost: Mapping[str, int]
    time: str
    estimated: bool = False
    costs: dict[tuple[Choice, ...], int] = dataclass_field(default_factory=dict)
    results: dict[tuple[Choice, ...], Shortest] = dataclass_field(default_factory=dict)
    least: int | None = None

    def cost(self, choices: tuple[Choice, ...]) -> int:
        """Return the operations of formulas and definitions; more than the least, if it is more.

        Formulas are not written any more once the least is passed.
        """
        if choices not in self.costs:
            self.costs[choices] = self._tried(choices)
        return self.costs[choices]

    def result(self, choices: tuple[Choice, ...]) -> Shortest:
        """Return what was written for choices."""
        if choices not in self.results:
            functions = self._rewritten(choices)
            formulas = tuple(closed_form(self.field, terms, self.time) for terms in functions)
            self._keep(choices, functions, formulas)
        return self.results[choices]

    def _tried(self, choices: tuple[Choice, ...]) -> int:
        functions = self._rewritten(choices)
        cost = sum(self.definitions_cost[name] for name in self._names_in(functions))
        if self.estimated:
            return cost + estimate(functions)
        formulas: list[Expression] = []
        for terms in functions:
            formulas.append(closed_form(self.field, terms, self.time))
            cost += operations(formulas[-1])
            if self.least is not None and cost > self.least:
                return cost
        self._keep(choices, functions, formulas)
        self.least = cost
        return cost

    def _rewritten(self, choices: tuple[Choice, ...]) -> tuple[tuple[Term, ...], ...]:
        return rewritten(self.field, self.functions, [c for c in choices if c is not None])

    def _keep(
        self,
        choices: tuple[Choice, ...],
        functions: tuple[tuple[Term, ...], ...],
        formulas: Sequence[Expression],
    ) -> None:
        used = [choice for choice in choices if choice is not None]
        self.results[choices] = Shortest(
            functions,
            tuple(formulas),
            self._names_in(functions),
            tuple(rewriting for rewriting, _ in used),
            tuple(extent for _, extent in used),
        )

    def _names_in(self, functions: Sequence[Sequence[Term]]) -> tuple[str, ...]:
        """Return the abbreviations in the functions, and those in their definitions."""
        waiting = [e for terms in functions for term in terms for e in _elements(term)]
        found: set[str] = set()
        while waiting:
            new = self.field.names_in(waiting.pop()).intersection(self.values) - found
            found |= new
            waiting += [self.values[name] for name in sorted(new)]
        return tuple(name for name in self.names if name in found)


def _elements(term: Term) -> Iterator[Scalar]:
    yield from (term.amount, term.rate)
    if term.frequency is not None:
        yield term.frequency


def _rewritten(
    field: ParameterField,
    term: Term,
    used: Sequence[tuple[Rewriting, Extent]],
) -> Term:
    for rewriting, extent in used:
        amount, rate, frequency = term.amount, term.rate, term.frequency
        if extent == "everywhere":
            amount = _substituted(field, amount, rewriting)
        rate = _substituted(field, rate, rewriting)
        if frequency is not None:
            frequency = _substituted(field, frequency, rewriting)
        term = replace(term, amount=amount, rate=rate, frequency=frequency)
    return term


@lru_cache(maxsize=16384)
def _substituted(field: ParameterField, element: Scalar, rewriting: Rewriting) -> Scalar:
    """Return the element without the parameter.  Raises ArithmeticError if it became another."""
    if rewriting.parameter not in field.names_in(element):
        return element
    changed = put_in(field, element, rewriting.parameter, rewriting.replacement)
    if not equal_under(field, changed, element, rewriting.name, rewriting.power, rewriting.value):
        raise ArithmeticError(f"{rewriting} changes {element}")
    return changed
