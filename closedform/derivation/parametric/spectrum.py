"""The eigenvalues of a case as they are printed, and the functions that belong to them."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from closedform.algebra.parameter_field import ParameterField
from closedform.derivation.parametric.formulas import exponential, named_or_written, plus_minus
from closedform.derivation.step import Side, Symbol
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    is_expression,
    power_of,
    product,
)
from closedform.notation.rational_formula import rational_formula, weighted_rational
from closedform.response.parametric.case import Case
from closedform.response.parametric.modes import Mode

__all__ = [
    "Eigenvalue",
    "eigenvalues_of",
    "functions_of",
    "kernels_of",
    "real_eigenvalues",
    "values_of",
]


@dataclass(frozen=True)
class Eigenvalue:
    """One eigenvalue or a pair, as it is printed; `index` is None where it is not known."""

    value: Side
    multiplicity: int
    index: int | None


def eigenvalues_of(field: ParameterField, case: Case) -> list[Eigenvalue]:
    """Return the eigenvalues of a case, each or each pair with its multiplicity."""
    found = []
    for mode in case.modes:
        double = mode.regime.kind == "double"
        multiplicity = mode.factor.multiplicity * (2 if double else 1)
        known = case.branch.relation is None and not double
        for value in values_of(field, case, mode):
            found.append(Eigenvalue(value, multiplicity, mode.factor.index if known else None))
    return found


def values_of(field: ParameterField, case: Case, mode: Mode) -> Iterator[Side]:
    """Yield the roots of a mode as they are printed, each or each pair once."""
    centre = named_or_written(field, case, mode.factor.roots.centre)
    names = [Name(name) for name in mode.names]
    match mode.regime.kind:
        case "single" | "double":
            yield centre
        case "circular":
            yield Symbol("pair", parts=(centre, _frequency(field, mode)))
        case "hyperbolic":
            yield Symbol("real pair", parts=(centre, _frequency(field, mode)))
        case "decaying":
            yield from map(Negation, names)
        case "real roots":
            yield from names
        case "squares":
            for name, sign in zip(names, mode.regime.signs, strict=True):
                kind = "pair" if sign == "circular" else "real pair"
                yield Symbol(kind, parts=(centre, name))
        case "quartet":
            _, sigma, omega = names
            for sign in (1, -1):
                yield Symbol("pair", parts=(plus_minus(centre, sigma, sign), omega))
        case "root and pair":
            root, sigma, omega = names
            yield root
            yield Symbol("pair", parts=(sigma, omega))


def _frequency(field: ParameterField, mode: Mode) -> Expression:
    return Name(mode.names[0]) if mode.names else rational_formula(field, mode.frequency)


def real_eigenvalues(field: ParameterField, case: Case, mode: Mode) -> list[Expression]:
    """Return the roots of a mode that are printed one by one; none of a pair."""
    if mode.regime.kind not in {"single", "decaying", "real roots"}:
        return []
    return [v for v in values_of(field, case, mode) if is_expression(v)]


def kernels_of(
    field: ParameterField, mode: Mode, time: str
) -> tuple[Expression, Expression] | None:
    """Return the even and the odd function of a pair: cos and sin/omega, 1 and t, …"""
    t = Name(time)
    if mode.regime.kind == "double":
        return power_of(t, 0), t
    if mode.regime.kind not in {"circular", "hyperbolic"}:
        return None
    even, odd = ("cos", "sin") if mode.regime.kind == "circular" else ("cosh", "sinh")
    if mode.names:
        name = Name(mode.names[0])
        argument = product([name, t])
        return Call(even, argument), weighted_rational(
            field, field.domain.one, [Call(odd, argument)], [name]
        )
    argument = weighted_rational(field, mode.frequency, [t], [])
    return Call(even, argument), weighted_rational(
        field, 1 / mode.frequency, [Call(odd, argument)], []
    )


def functions_of(field: ParameterField, case: Case, time: str) -> list[Expression]:
    """Return the functions of which the entries of e^(At) are combinations in a case."""
    found: list[Expression] = []
    for mode in case.modes:
        for bare in _functions(field, case, mode, time):
            for power in range(mode.factor.index):
                found.append(product([power_of(Name(time), power), bare]))
    return list(dict.fromkeys(found))


def _functions(field: ParameterField, case: Case, mode: Mode, time: str) -> Iterator[Expression]:
    t = Name(time)
    front = exponential(field, case, mode.factor.roots.centre, time)
    names = [Name(name) for name in mode.names]
    match mode.regime.kind:
        case "single":
            yield front
        case "circular" | "hyperbolic":
            even, odd = ("cos", "sin") if mode.regime.kind == "circular" else ("cosh", "sinh")
            argument = (
                product([names[0], t])
                if names
                else weighted_rational(field, mode.frequency, [t], [])
            )
            yield product([front, Call(even, argument)])
            yield product([front, Call(odd, argument)])
        case "double":
            powers = 2 * mode.factor.index
            for power in range(0, powers, mode.factor.index):
                yield product([power_of(t, power), front])
        case "decaying":
            for name in names:
                yield Call("exp", Negation(product([name, t])))
        case "real roots":
            for name in names:
                yield Call("exp", product([name, t]))
        case "squares":
            for name, sign in zip(names, mode.regime.signs, strict=True):
                even, odd = ("cos", "sin") if sign == "circular" else ("cosh", "sinh")
                yield product([front, Call(even, product([name, t]))])
                yield product([front, Call(odd, product([name, t]))])
        case "quartet":
            _, sigma, omega = names
            for rate in (product([sigma, t]), Negation(product([sigma, t]))):
                for kernel in ("cos", "sin"):
                    yield product([front, Call("exp", rate), Call(kernel, product([omega, t]))])
        case "root and pair":
            root, sigma, omega = names
            yield Call("exp", product([root, t]))
            for kernel in ("cos", "sin"):
                yield product([Call("exp", product([sigma, t])), Call(kernel, product([omega, t]))])
