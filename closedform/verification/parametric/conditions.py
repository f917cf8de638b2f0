"""That the conditions of a case, as they are written, select the part that it was solved for."""

from __future__ import annotations

from collections.abc import Iterator
from functools import reduce
from operator import mul

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.equations import linear_solution
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.errors import Place
from closedform.notation import plain, read_formula
from closedform.notation.rational import rational_value
from closedform.response.parametric.case import Case
from closedform.response.parametric.conditions import WrittenComparison
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.cells import part_covered
from closedform.verification.record import Check

__all__ = ["condition_check", "follows", "is_empty"]

_ITEM = "conditions as written"


def condition_check(response: ParametricResponse, case: Case) -> Check:
    """What is written holds where the case was solved, and where it holds the case was solved.

    The case was solved where its branch holds and its regimes do.
    """
    field, values = response.model.field, case.branch.values
    solved = part_covered(field, case.branch).narrowed(
        *(_without_powers(field, c) for regime in case.regimes for c in regime.conditions)
    )
    written = [c for w in case.conditions for c in _read(field, w)]
    for comparison in written:
        if not follows(field, solved, _put(field, comparison, values)):
            return _open(f"{_told(comparison)} was not shown to hold in the case")
    stated = response.domain.narrowed(*written)
    for equation in case.branch.equations:
        if not follows(field, stated, Comparison(equation.polynomial, "=")):
            return _open(f"{equation.polynomial} = 0 was not shown from the conditions")
    for name, value in values.items():
        stated = stated.substituted(name, value)
    for comparison in solved.conditions:
        if not follows(field, stated, comparison):
            return _open(f"{_told(comparison)} was not shown from the conditions")
    return Check(
        _ITEM,
        "proved",
        "they were read back; they follow from the equations, inequations and signs that the "
        "case was solved for, and these follow from them",
    )


def _open(how: str) -> Check:
    return Check(_ITEM, "not attempted", how)


def _told(comparison: Comparison) -> str:
    return f"{comparison.element} {comparison.relation} 0"


def _read(field: ParameterField, comparison: WrittenComparison) -> Iterator[Comparison]:
    """The comparison as one of an element with 0, and that its sides are defined."""
    sides = []
    for side in (comparison.left, comparison.right):
        read = read_formula(plain(side), names=frozenset(field.parameters))
        sides.append(rational_value(read, field, Place()))
    left, right = sides
    match comparison.sign:
        case "<":
            yield Comparison(right - left, ">")
        case ">":
            yield Comparison(left - right, ">")
        case "<=":
            yield Comparison(right - left, ">=")
        case ">=":
            yield Comparison(left - right, ">=")
        case "!=":
            yield Comparison(left - right, "!=")
        case "==":
            yield Comparison(left - right, "=")


def _put(field: ParameterField, comparison: Comparison, values: dict[str, Scalar]) -> Comparison:
    return Comparison(field.substituted(comparison.element, values), comparison.relation)


def _without_powers(field: ParameterField, comparison: Comparison) -> Comparison:
    """An equation with each factor of its element once."""
    if comparison.relation != "=" or not comparison.element:
        return comparison
    once = [field.of_polynomial(f) for f, e in field.factored(comparison.element).factors if e > 0]
    return Comparison(reduce(mul, once, field.domain.one), "=")


def follows(field: ParameterField, domain: ParameterDomain, comparison: Comparison) -> bool:
    """Whether a comparison follows, at once or with an equation of the domain put in.

    From conditions that contradict each other everything follows.
    """
    if domain.implies(comparison) is not None or domain.contradiction() is not None:
        return True
    return any(
        follows(field, inside, _put(field, comparison, {name: value}))
        for name, value, inside in _solved(field, domain)
    )


def is_empty(field: ParameterField, domain: ParameterDomain) -> bool:
    """Whether the conditions contradict each other, at once or with their equations put in."""
    if domain.contradiction() is not None:
        return True
    return any(is_empty(field, inside) for _, _, inside in _solved(field, domain))


def _solved(
    field: ParameterField, domain: ParameterDomain
) -> Iterator[tuple[str, Scalar, ParameterDomain]]:
    """The equations of a domain solved for a parameter, and what the domain is then."""
    for condition in domain.conditions:
        if condition.relation != "=":
            continue
        for name in field.parameters:
            value = linear_solution(field, condition.element, name)
            slope = field.derivative(field.of_polynomial(condition.element.numer), name)
            if value is not None and domain.sign_of(slope).never_zero:
                try:
                    inside = domain.substituted(name, value)
                except ZeroDivisionError:  # a condition would be defined nowhere
                    continue
                yield name, value, inside
