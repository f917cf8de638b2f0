"""Equations among parameters: solved for one of them, or kept, and put into a domain."""

from __future__ import annotations

from dataclasses import dataclass, replace

from closedform.algebra.domain import Comparison, ParameterDomain, SignArgument
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.sign_argument import BySquares, ByTerms, Combined

__all__ = ["Equation", "Start", "imposed", "linear_solution"]


@dataclass(frozen=True)
class Equation:
    """`polynomial` = 0, solved for `parameter` = `value`; kept as it is where these are None."""

    polynomial: Scalar
    parameter: str | None = None
    value: Scalar | None = None


@dataclass(frozen=True)
class Start:
    """A branch that is not solved yet."""

    equations: tuple[Equation, ...]
    domain: ParameterDomain


def imposed(field: ParameterField, start: Start, polynomial: Scalar) -> Start | SignArgument | str:
    """Return a start with one equation more; why the domain excludes it; or why it is not solved.

    An equation is solved for a parameter, or kept as it is: one of these at the most.
    """
    domain = start.domain
    values = {e.parameter: e.value for e in start.equations if e.parameter is not None}
    left = field.substituted(polynomial, values)
    if not left:
        return start
    factors = [field.of_polynomial(f) for f, e in field.factored(left).factors if e > 0]
    open_ones = [f for f in factors if not domain.sign_of(f).never_zero]
    if not open_ones:  # the domain may hold the equation itself already, which says nothing
        arguments = (domain.sign_of(left), *map(domain.sign_of, factors))
        return next(a for a in arguments if a.never_zero)
    if len(open_ones) > 1:
        return "several equations"
    together = _vanishing_together(field, open_ones[0], domain)
    if together:
        step: Start | SignArgument | str = start
        for part in together:
            if isinstance(step, Start):
                step = imposed(field, step, part)
        return step
    equation = _equation(field, open_ones[0], domain)
    if equation.parameter is None or equation.value is None:
        if any(e.parameter is None for e in start.equations):
            return "two relations"
        narrowed = domain.narrowed(Comparison(equation.polynomial, "="))
        return Start((*start.equations, equation), narrowed)
    put = {equation.parameter: equation.value}
    solved = (_put_in_equation(field, e, put) for e in start.equations if e.parameter is not None)
    made = Start((*solved, equation), domain.substituted(equation.parameter, equation.value))
    kept = next((e.polynomial for e in start.equations if e.parameter is None), None)
    # an equation that was kept is another one now, and may be solved
    return made if kept is None else imposed(field, made, kept)


def _vanishing_together(
    field: ParameterField, polynomial: Scalar, domain: ParameterDomain
) -> tuple[Scalar, ...]:
    """What is zero where a sum of terms or squares of one sign is, or nothing.

    Each term has to vanish; it does so with one parameter where no other in it may be zero.
    """
    reason = domain.sign_of(polynomial).reason
    reasons = [a.reason for a in reason.arguments] if isinstance(reason, Combined) else [reason]
    for found in reasons:
        if isinstance(found, ByTerms) and len(polynomial.numer) > 1:
            return _vanishing_terms(field, polynomial, domain)
        if isinstance(found, BySquares):
            if not all(domain.sign_of(square.weight).never_zero for square in found.squares):
                return ()
            rest = () if found.rest is None else (found.rest.element,)
            return (*(square.base for square in found.squares), *rest)
    return ()


def _vanishing_terms(
    field: ParameterField, polynomial: Scalar, domain: ParameterDomain
) -> tuple[Scalar, ...]:
    found = []
    for monomial in polynomial.numer.monoms():
        names = [n for n, e in zip(field.parameters, monomial, strict=True) if e]
        may_vanish = [n for n in names if not domain.sign_of(field.symbol(n)).never_zero]
        if len(may_vanish) != 1:
            return ()
        found.append(field.symbol(may_vanish[0]))
    return tuple(dict.fromkeys(found))


def _put_in_equation(field: ParameterField, equation: Equation, put: dict[str, Scalar]) -> Equation:
    value = None if equation.value is None else field.substituted(equation.value, put)
    return replace(equation, value=value)


def _equation(field: ParameterField, polynomial: Scalar, domain: ParameterDomain) -> Equation:
    """Solve polynomial = 0 for a parameter in which it is linear, the last one if possible.

    The coefficient of the parameter must not vanish on the domain; a number is preferred.
    """
    choices = []
    for name in reversed(field.parameters):
        solution = linear_solution(field, polynomial, name)
        if solution is None:
            continue
        slope = field.derivative(polynomial, name)
        plain = field.number_sign(slope) is not None
        if plain or domain.sign_of(slope).never_zero:
            choices.append((not plain, Equation(polynomial, name, solution)))
    return min(choices, key=lambda c: c[0])[1] if choices else Equation(polynomial)


def linear_solution(field: ParameterField, element: Scalar, name: str) -> Scalar | None:
    """Return the value of a parameter at which an element vanishes, if it is linear in it.

    Pi is no parameter: nothing is solved for it.
    """
    if name == PI:
        return None
    polynomial = field.of_polynomial(element.numer)
    slope = field.derivative(polynomial, name)
    if not slope or name in field.names_in(slope):
        return None
    return -field.substituted(polynomial, {name: field.domain.zero}) / slope
