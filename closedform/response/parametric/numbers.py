"""A response with parameters in numbers: values put into the formulas of the case that holds.

Nothing is solved again.  Which case holds is decided exactly, and every decimal is settled
by ball arithmetic on the written formulas.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from flint import arb

from closedform.algebra.domain import Comparison
from closedform.algebra.enclosure import ball_of, certified_decimals
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sign_argument import relation_values
from closedform.algebra.surds import SurdSum
from closedform.errors import InputError
from closedform.model.parametric import ValueSet
from closedform.notation.evaluation import enclose
from closedform.notation.expression import Name
from closedform.notation.plain import plain
from closedform.notation.terms import surd_formula
from closedform.response.parametric.case import Case
from closedform.response.parametric.exact_at import FunctionsAt, functions_at
from closedform.response.parametric.in_numbers import InNumbers, in_numbers
from closedform.response.parametric.known import Known, known_at
from closedform.response.parametric.response import ParametricResponse
from closedform.response.sampling import suitable_times, surd_decimal

__all__ = [
    "NumbersAt",
    "QuantityAt",
    "ValuesNotCoveredError",
    "case_at",
    "numbers_at",
    "numbers_of",
]


class ValuesNotCoveredError(InputError):
    """Values of the parameters at which no case of the response holds."""

    def __init__(self, model: str, label: str, values: tuple[tuple[str, str], ...]) -> None:
        super().__init__(model, label, values)
        self.model, self.label, self.values = model, label, values

    def __str__(self) -> str:
        listed = ", ".join(f"{name} = {value}" for name, value in self.values)
        row = f" of the row {self.label!r}" if self.label else ""
        return (
            f"{self.model}: no case of the solution covers the values{row} {listed}; they break a "
            "condition of the model, or lie where its solution is not known. Give other values, "
            "or state a model with these numbers in the place of its parameters."
        )


@dataclass(frozen=True)
class QuantityAt:
    """A named quantity in numbers: its exact value where it is a surd, and its decimal."""

    name: str
    exact: SurdSum | None
    decimal: str


@dataclass(frozen=True)
class NumbersAt:
    """A response at one value for each parameter.

    `case` is the place of the case that holds, from 0.  Shapes: `rows` has one row for each
    of `times`, in it a decimal for each state and then for each output; `solution` and
    `outputs` are formulas in the time alone.
    """

    label: str
    values: tuple[tuple[str, SurdSum], ...]
    case: int
    quantities: tuple[QuantityAt, ...]
    solution: tuple[InNumbers, ...]
    outputs: tuple[InNumbers, ...]
    times: tuple[SurdSum, ...]
    rows: tuple[tuple[str, ...], ...]


def numbers_of(response: ParametricResponse, *, digits: int) -> tuple[NumbersAt, ...]:
    """Return the numbers for the values of the model, if it has any, and each row of its table.

    A model in which pi is the only name has one set of values, which is empty.
    The instants are those of the model, or six that suit the first of the value sets.

    Raises:  ValuesNotCoveredError; UnsettledError where `digits` digits cannot be settled.
    """
    model = response.model
    sets = (*(() if model.values is None else (model.values,)), *model.value_sets)
    if not model.field.free:
        sets = (ValueSet("", ()),)
    if not sets:
        return ()
    first, *others = sets
    own = numbers_at(response, first, digits=digits, times=model.times)
    return (own, *(numbers_at(response, v, digits=digits, times=own.times) for v in others))


def numbers_at(
    response: ParametricResponse, given: ValueSet, *, digits: int, times: Sequence[SurdSum] = ()
) -> NumbersAt:
    """Return the numbers at one value for each parameter; `times` as the model has them, or six.

    Raises:  ValuesNotCoveredError, UnsettledError, TooManyRootsError.
    """
    model, field = response.model, response.model.field
    values = dict(given.values)
    case = case_at(response, given)
    known = known_at(field, case, values)
    columns = (case.state, *(() if case.output is None else (case.output,)))
    functions = functions_at(field, columns, values, times)
    instants = tuple(times) or suitable_times(functions.roots)
    return NumbersAt(
        given.label,
        tuple((name, values[name]) for name in field.free),
        case.number,
        tuple(
            QuantityAt(q.name, known.exact.get(q.name), known.decimal(Name(q.name), digits))
            for q in case.quantities
        ),
        tuple(in_numbers(formula, known, model.time, digits) for formula in case.solution),
        tuple(in_numbers(formula, known, model.time, digits) for formula in case.outputs),
        instants,
        tuple(_row(response, case, known, functions, t, digits) for t in instants),
    )


def case_at(response: ParametricResponse, given: ValueSet) -> Case:
    """Return the first case that holds at the values.  Raises ValuesNotCoveredError."""
    field, values = response.model.field, dict(given.values)
    for case in response.cases:
        equations = [
            Comparison(field.symbol(name) - element, "=")
            for name, element in case.branch.values.items()
        ]
        if all(_holds(field, c, values) for c in (*case.domain.conditions, *equations)):
            return case
    told = tuple((name, plain(surd_formula(values[name]))) for name in field.free)
    raise ValuesNotCoveredError(response.model.name, given.label, told)


def _holds(field: ParameterField, comparison: Comparison, values: Mapping[str, SurdSum]) -> bool:
    """Whether a comparison holds at a point; it does not where it has no value."""
    return field.sign_at(comparison.element, values) in relation_values(comparison.relation)


def _row(
    response: ParametricResponse,
    case: Case,
    known: Known,
    functions: FunctionsAt,
    t: SurdSum,
    digits: int,
) -> tuple[str, ...]:
    """The states and outputs at one instant, those that are algebraic numbers exactly."""
    formulas = (*case.solution, *case.outputs)
    exact = [functions.exact(place, t) for place in range(len(formulas))]

    def balls() -> list[arb]:
        at = {**known.balls(), response.model.time: ball_of(t)}
        pairs = zip(formulas, exact, strict=True)
        return [enclose(formula, at) for formula, value in pairs if value is None]

    decimals = iter(certified_decimals(balls, digits))
    return tuple(next(decimals) if e is None else surd_decimal(e, digits) for e in exact)
