"""The eigenvalues of a case as they are printed, and the functions that belong to them."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from closedform.algebra.parameter_field import ParameterField
from closedform.derivation.parametric.formulas import exponential, named_or_written, plus_minus
from closedform.derivation.step import Side, Symbol
from closedform.notation.expression import (
    ONE,
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
    "certain_index",
    "eigenvalues_of",
    "functions_of",
    "kernels_of",
    "known_value",
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
    found: list[Eigenvalue] = []
    for mode in case.modes:
        double = mode.regime.kind == "double"
        multiplicity = mode.factor.multiplicity * (2 if double else 1)
        index = certain_index(case, case.modes.index(mode))
        found += [Eigenvalue(v, multiplicity, index) for v in values_of(field, case, mode)]
    return found


def certain_index(case: Case, place: int) -> int | None:
    """Return the index of a factor's eigenvalues where it is the same everywhere in a case.

    At single points the index may be less than that over the field: where the matrix beside
    the highest power of t vanishes.  None where it is not known that it does not.
    """
    factor = case.branch.spectrum.factors[place]
    if case.branch.relation is not None or case.regimes[place].kind == "double":
        return None
    if factor.index == 1:
        return 1
    if factor.degree > 1 and case.regimes[place].kind != "circular":
        return None
    highest = case.branch.exponential.terms[place].residues[-1]
    entries = (e for m in highest.coefficients for row in m.to_list() for e in row if e)
    sure = any(case.domain.sign_of(e).never_zero for e in entries)
    return factor.index if sure else None


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
            for name, way in zip(names, mode.regime.signs, strict=True):
                kind = "pair" if way == "circular" else "real pair"
                yield Symbol(kind, parts=(centre, name))
        case "quartet":
            _, sigma, omega = names
            for sign in (1, -1):
                yield Symbol("pair", parts=(plus_minus(centre, sigma, sign), omega))
        case "root and pair":
            root, sigma, omega = names
            yield root
            yield Symbol("pair", parts=(sigma, omega))
        case "known roots":
            yield from (known_value(centre, *named[1:]) for named in mode.named_roots)


def known_value(centre: Expression, rate: str | None, frequency: str | None) -> Side:
    """Return a root that is a number by its names: one without a rate has that of the centre."""
    middle = centre if rate is None else Name(rate)
    return middle if frequency is None else Symbol("pair", parts=(middle, Name(frequency)))


def _frequency(field: ParameterField, mode: Mode) -> Expression:
    return Name(mode.names[0]) if mode.names else rational_formula(field, mode.frequency)


def real_eigenvalues(field: ParameterField, case: Case, mode: Mode) -> list[Expression]:
    """Return the roots of a mode that are printed one by one; none of a pair."""
    if mode.regime.kind not in {"single", "decaying", "real roots"}:
        return []
    return [v for v in values_of(field, case, mode) if is_expression(v)]


KERNELS = {"circular": ("cos", "sin"), "hyperbolic": ("cosh", "sinh")}
"""The even and the odd function of a pair of eigenvalues."""


def kernels_of(
    field: ParameterField, mode: Mode, time: str
) -> tuple[Expression, Expression] | None:
    """Return the even and the odd function of a pair: cos and sin/omega, 1 and t, …"""
    t = Name(time)
    if mode.regime.kind == "double":
        return ONE, t
    if mode.regime.kind not in KERNELS:
        return None
    even, odd = KERNELS[mode.regime.kind]
    argument = _angle(field, mode, time)
    if mode.names:
        below = [Name(mode.names[0])]
        return Call(even, argument), weighted_rational(
            field, field.domain.one, [Call(odd, argument)], below
        )
    weight = field.domain.one / mode.frequency
    return Call(even, argument), weighted_rational(field, weight, [Call(odd, argument)], [])


def _angle(field: ParameterField, mode: Mode, time: str) -> Expression:
    """The frequency of a pair times t."""
    if mode.names:
        return product([Name(mode.names[0]), Name(time)])
    return weighted_rational(field, mode.frequency, [Name(time)], [])


def functions_of(field: ParameterField, case: Case, time: str) -> list[Expression]:
    """Return the functions of which the entries of e^(At) are combinations in a case."""
    found = [
        product([power_of(Name(time), power), bare])
        for mode in case.modes
        for bare in _functions(field, case, mode, time)
        for power in range(mode.factor.index)
    ]
    return list(dict.fromkeys(found))


def _functions(field: ParameterField, case: Case, mode: Mode, time: str) -> Iterator[Expression]:
    t, kind = Name(time), mode.regime.kind
    front = exponential(field, case, mode.factor.roots.centre, time)
    match kind:
        case "single":
            yield front
        case "double":
            yield front
            yield product([power_of(t, mode.factor.index), front])
        case "known roots":
            for _, rate, frequency in mode.named_roots:
                growth = front if rate is None else Call("exp", product([Name(rate), t]))
                if frequency is None:
                    yield growth
                    continue
                for kernel in KERNELS["circular"]:
                    yield product([growth, Call(kernel, product([Name(frequency), t]))])
        case "decaying" | "real roots":
            for name in mode.names:
                exponent = product([Name(name), t])
                yield Call("exp", Negation(exponent) if kind == "decaying" else exponent)
        case _:
            if kind == "root and pair":
                yield Call("exp", product([Name(mode.names[0]), t]))
            for factors, (even, odd), angle in _oscillations(field, mode, front, time):
                yield product([*factors, Call(even, angle)])
                yield product([*factors, Call(odd, angle)])


def _oscillations(
    field: ParameterField, mode: Mode, front: Expression, time: str
) -> Iterator[tuple[list[Expression], tuple[str, str], Expression]]:
    """The exponentials, the kernels and the angle of every pair of a mode."""
    t, names = Name(time), [Name(name) for name in mode.names]
    match mode.regime.kind:
        case "circular" | "hyperbolic":
            yield [front], KERNELS[mode.regime.kind], _angle(field, mode, time)
        case "squares":
            for name, sign in zip(names, mode.regime.signs, strict=True):
                yield [front], KERNELS[sign], product([name, t])
        case "quartet":
            _, sigma, omega = names
            growth = product([sigma, t])
            for rate in (growth, Negation(growth)):
                yield [front, Call("exp", rate)], KERNELS["circular"], product([omega, t])
        case "root and pair":
            _, sigma, omega = names
            rate = Call("exp", product([sigma, t]))
            yield [rate], KERNELS["circular"], product([omega, t])
