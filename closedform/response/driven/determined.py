"""From conditions at points to the constants of a solution, their formulas and their guards."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace
from functools import reduce
from operator import mul

from flint import arb, ctx

from closedform.algebra.adjoined import Adjoined
from closedform.algebra.domain import Comparison, ParameterDomain, SignArgument
from closedform.algebra.enclosure import MOST_BITS, UnsettledError
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.model.driven.model import DrivenModel, PointCondition
from closedform.model.driven.signal import Signal
from closedform.notation.expression import (
    ZERO,
    Expression,
    Name,
    Negation,
    Number,
    Product,
    Quotient,
    operations,
    product,
)
from closedform.notation.plain import plain
from closedform.notation.terms import sum_of
from closedform.response.driven.assembly import ParticularMotion
from closedform.response.driven.boundary import (
    InBranch,
    PointSolution,
    SingularConditionsError,
    point_solution,
)
from closedform.response.driven.boundary_errors import (
    ConditionCountError,
    ConditionRootsError,
    ManySolutionsError,
    NoSolutionError,
    RepeatingConditionsError,
)
from closedform.response.driven.composition import element_formula, scaled
from closedform.response.driven.functions import DrivenFunctions
from closedform.response.driven.point_values import HighFactorError
from closedform.response.driven.point_writing import PointWriter
from closedform.response.driven.products import multiplied
from closedform.response.parametric.case import Case

__all__ = [
    "PointConstant",
    "PointConstants",
    "determined",
    "names_of_constants",
    "stem_of_constants",
    "written",
]

LARGEST = 200
"""Exponents and angles beyond are extreme: points at which formulas are tried stay below."""
LONGEST_PUT_IN = 40
"""Constants with up to so many operations are put into the solution."""

Rows = tuple[tuple[Expression, ...], ...]
Motion = Callable[[DrivenModel], Sequence[tuple[str, Expression]]]
"""What solves a model from its initial values, and gives a formula for each row."""


@dataclass(frozen=True)
class PointConstant:
    """A constant of the solution; `put_in` says that formulas have its own in its place."""

    name: str
    element: Scalar
    formula: Expression
    put_in: bool


@dataclass(frozen=True)
class PointConstants:
    """What conditions at points determine, in one case.

    `constants` are those that have a name; `found` is how they were found.  For each block of
    its equations `arguments` tell why the determinant is not zero: a sign, or None where the
    domain leaves it open, or where it is a number, which balls show to be apart from zero.
    `provided` are formulas that must not be zero: where one is, there is no solution, or there
    is more than one.
    """

    found: PointSolution
    writer: PointWriter
    constants: tuple[PointConstant, ...]
    arguments: tuple[SignArgument | None, ...]
    provided: tuple[Expression, ...]

    def worked_in(self, columns: Rows, functions: DrivenFunctions) -> Rows:
        """Return the formulas of the columns, each times the constant that belongs to it."""
        known = {c.name: c.formula if c.put_in else Name(c.name) for c in self.constants}
        summands = [*functions.free, *(functions.steady or ()), *(functions.transient or ())]
        summands += [s for interval in functions.intervals for s in interval.summands]
        fronts = {s.place: known[s.constant.named] for s in summands if s.constant.named}
        return tuple(
            tuple(
                multiplied(fronts[place], self.writer.hyperbolic(formula))
                if place in fronts and formula != ZERO
                else formula
                for place, formula in enumerate(row)
            )
            for row in columns
        )

    def is_moderate(self, enclose: Callable[[Scalar], arb]) -> bool:
        """Whether no power or hyperbolic function is extreme, as `enclose` has the parameters."""
        for n in self.found.numbers.numbers:
            if n.kind == "exp" and not abs(enclose(n.amount)) < LARGEST:
                return False
            if n.kind == "even":
                size = abs(enclose(n.amount)) * abs(enclose(n.core)).sqrt()
                if not size < LARGEST:
                    return False
        return True

    def formula(self, element: Scalar) -> Expression:
        """Return an element of the field with the adjoined numbers as a formula."""
        return self.writer.formula(element)


def determined(
    model: DrivenModel,
    exponential: ExponentialMatrix,
    motion: Motion,
    branch: InBranch,
) -> PointSolution:
    """Return the free motion that meets the conditions of a model at points, in a branch.

    `motion` writes a free motion for an error.

    Raises:  ConditionCountError, ConditionRootsError, NoSolutionError, ManySolutionsError.
    """
    if len(model.conditions) != len(model.names):
        raise ConditionCountError(model.title, len(model.conditions), len(model.names))
    repeating = [given for given in model.inputs if given.signal.repeat is not None]
    if repeating:
        raise RepeatingConditionsError(model.title, plain(repeating[0].formula))
    particular = ParticularMotion(model, exponential, put=branch.put, relation=branch.relation)
    try:
        return point_solution(model, exponential, particular, branch)
    except HighFactorError as high:
        raise ConditionRootsError(model.title, high.degree) from high
    except SingularConditionsError as singular:
        raise _refusal(model, singular, motion, branch) from singular


def _refusal(
    model: DrivenModel, singular: SingularConditionsError, motion: Motion, branch: InBranch
) -> NoSolutionError | ManySolutionsError:
    if singular.weights is None or singular.rest is None:
        shown: tuple[tuple[str, str], ...] = ()
        if singular.motion is not None:
            origin, column = singular.motion
            start = tuple(e for (e,) in column.to_list())
            free = motion(_undriven(model, origin, start))
            rows = [pair for pair in free if pair[0] in model.unknowns]
            if len(rows) == 1:
                rows = [(name, _bare(formula)) for name, formula in rows]
            shown = tuple((name, plain(formula)) for name, formula in rows)
        return ManySolutionsError(model.title, singular.free, shown, branch.case)
    held = [k for k, w in enumerate(singular.weights) if w]
    last = held[-1]
    condition = model.conditions[last]
    numbers = singular.numbers
    value = numbers.lift(branch.put(condition.value)) - singular.rest / singular.weights[last]
    writer = PointWriter(numbers, None)
    others = tuple(model.conditions[k].text for k in held[:-1])
    told = plain(writer.formula(numbers.normal(value)))
    return NoSolutionError(
        model.title, condition.text, others, plain(_left(model, condition)), told, branch.case
    )


def _undriven(model: DrivenModel, origin: Scalar, start: tuple[Scalar, ...]) -> DrivenModel:
    """The model without inputs, from given states."""
    silent = tuple(replace(given, signal=Signal()) for given in model.inputs)
    return replace(model, inputs=silent, initial=start, conditions=(), timeline=(), start=origin)


def _left(model: DrivenModel, condition: PointCondition) -> Expression:
    """The left side of a condition: weights times x(a)."""
    at = plain(element_formula(model.field, condition.at))
    terms = []
    for jet, weight in zip(model.reduction.jets, condition.of_states, strict=True):
        if weight:
            terms.append(scaled(element_formula(model.field, weight), Name(f"{jet.text}({at})")))
    return sum_of(terms)


def names_of_constants(model: DrivenModel, found: PointSolution) -> tuple[str, ...]:
    """Return a name for each constant that is no element of the model's field, else ''."""
    stem = stem_of_constants(model)
    return tuple(
        f"{stem}_{k}" if value is None else "" for k, value in enumerate(found.in_field, start=1)
    )


def stem_of_constants(model: DrivenModel) -> str:
    """Return the letter of the constants: c, unless the model has names that begin with c_."""
    taken = {*model.rows, *model.unknowns, model.time, *(i.name for i in model.inputs)}
    taken |= set(getattr(model.field, "parameters", ()))
    return next(s for s in _stems() if not any(t.startswith(f"{s}_") for t in taken))


def _stems() -> Iterator[str]:
    yield from ("c", "gamma", "C", "q")
    count = 1
    while True:
        yield f"c_{count}"
        count += 1


def written(found: PointSolution, names: Sequence[str], case: Case | None) -> PointConstants:
    """Return the constants of a case with their formulas, and what keeps them defined.

    Raises UnsettledError where a determinant that is a number is not told from zero.
    """
    writer = PointWriter(found.numbers, case)
    constants = _constants(found, names, writer)
    second = [] if found.other is None else [(found.other, PointWriter(found.other.numbers, case))]
    ways = [(found, writer), *second]
    for own, plain_writer in ways[:]:
        ways += [(own, other) for other in plain_writer.others()]
    for own, other in ways[1:]:
        others = _constants(own, names, other)
        if _length(others) < _length(constants):
            found, writer, constants = own, other, others
    arguments: list[SignArgument | None] = []
    provided: list[Expression] = []
    domain = None if case is None else _with_numbers(found.numbers, writer, case.domain)
    for block in found.blocks:
        determinant = block.determinant
        if domain is None or not _has_parameters(found.numbers, determinant):
            sign_of_number(found.numbers, determinant)
            arguments.append(None)
            continue
        argument = domain.sign_of(determinant)
        arguments.append(argument if argument.never_zero else None)
        if not argument.never_zero:
            left = _open_part(domain, determinant)
            formula = writer.formula(found.numbers.normal(left))
            formula = _bare(formula)
            if formula not in provided:
                provided.append(formula)
    return PointConstants(found, writer, constants, tuple(arguments), tuple(provided))


def _constants(
    found: PointSolution, names: Sequence[str], writer: PointWriter
) -> tuple[PointConstant, ...]:
    constants = []
    for name, value in zip(names, found.values, strict=True):
        if name:
            formula = writer.formula(value)
            put_in = operations(formula) <= LONGEST_PUT_IN
            constants.append(PointConstant(name, value, formula, put_in))
    return tuple(constants)


def _length(constants: Sequence[PointConstant]) -> int:
    return sum(operations(c.formula) for c in constants)


def _open_part(domain: ParameterDomain, determinant: Scalar) -> Scalar:
    """The factors of which the domain does not tell that they are not zero."""
    field = domain.field
    left = [
        field.of_polynomial(factor)
        for factor, exponent in field.factored(determinant).factors
        if exponent > 0 and not domain.sign_of(field.of_polynomial(factor)).never_zero
    ]
    return reduce(mul, left, field.domain.one)


def _bare(formula: Expression) -> Expression:
    """What a formula is zero with: no sign, no number in front, no denominator."""
    match formula:
        case Negation(inside) | Quotient(inside, _):
            return _bare(inside)
        case Product((Number(), *others)):
            return product(others)
        case _:
            return formula


def _has_parameters(numbers: Adjoined, element: Scalar) -> bool:
    """Whether an element has parameters in it, or numbers that have."""
    base = numbers.base
    if not isinstance(base, ParameterField):
        return False
    names = numbers.field.names_in(element)
    own = {n.name: n for n in numbers.numbers}
    for name in names:
        n = own.get(name)
        if n is None:
            return True
        if any(x is not None and base.names_in(x) for x in (n.amount, n.core)):
            return True
    return False


def sign_of_number(numbers: Adjoined, element: Scalar) -> int:
    """Return the sign of an element without parameters that is not zero by its form.

    Raises UnsettledError if balls do not tell it from zero.
    """
    names = numbers.field.symbols_in(element)
    used = [n for n in numbers.numbers if n.name in names]
    bits = 64
    while bits <= MOST_BITS:
        with ctx.workprec(bits):
            balls = {n.name: n.enclosure(numbers.base.enclose) for n in used}
            ball = numbers.field.enclose_at(element, balls)
        if ball.is_finite() and not ball.contains(0):
            return 1 if ball > 0 else -1
        bits *= 2
    raise UnsettledError("whether the conditions have one solution", MOST_BITS)


def _with_numbers(
    numbers: Adjoined, writer: PointWriter, domain: ParameterDomain
) -> ParameterDomain:
    """The domain of a case with what is known of the adjoined numbers."""
    field, lift = numbers.field, numbers.lift
    base = domain.field
    one = field.domain.one
    conditions = [Comparison(lift(c.element), c.relation) for c in domain.conditions]
    for n in numbers.numbers:
        symbol = field.symbol(n.name)
        if n.kind == "exp":
            conditions.append(Comparison(symbol, ">"))
            sign = domain.sign_of(n.amount).values
            if sign in ({1}, {-1}):
                conditions.append(Comparison((symbol - one) * min(sign), ">"))
        elif n.kind in ("root", "cosine"):
            conditions.append(Comparison(symbol, ">"))
        elif writer.sign_of(n.core) >= 0:
            sign = domain.sign_of(n.amount).values
            if n.kind == "even":
                conditions.append(Comparison(symbol, ">"))
                if 0 not in sign and writer.sign_of(n.core) > 0:
                    conditions.append(Comparison(symbol - one, ">"))
            elif sign in ({1}, {-1}):
                conditions.append(Comparison(symbol * min(sign), ">"))
        elif not (base.names_in(n.core) | base.names_in(n.amount)):
            conditions.append(Comparison(symbol * sign_of_number(numbers, symbol), ">"))
    return ParameterDomain(field, tuple(conditions))
