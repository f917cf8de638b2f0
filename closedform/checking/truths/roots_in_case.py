"""The roots of a factor in one case of the parameters, from the mode that it is."""

from __future__ import annotations

from closedform.algebra.parameter_field import ParameterField
from closedform.checking.truths.eigenvalues import Root, pair
from closedform.notation.expression import ZERO, Call, Expression, Name
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import negated, opened, sum_of
from closedform.response.parametric.modes import Mode

__all__ = ["roots_in_case"]


def roots_in_case(field: ParameterField, mode: Mode) -> tuple[Root, ...]:
    """Return the different roots of a mode, in parameters and in the names of quantities."""
    factor, names = mode.factor, tuple(map(Name, mode.names))
    centre = rational_formula(field, factor.roots.centre)
    match mode.regime.kind:
        case "single" | "double":
            return (Root(centre),)
        case "circular" | "hyperbolic":
            return pair(centre, _half(field, mode), circular=mode.regime.kind == "circular")
        case "decaying" if factor.degree == 2:
            return pair(centre, _half(field, mode), circular=False)
        case "decaying":
            return tuple(Root(negated(name)) for name in reversed(names))
        case "real roots":
            return tuple(map(Root, names))
        case "squares":
            return tuple(
                root
                for name, sign in zip(names, mode.regime.signs, strict=True)
                for root in pair(centre, name, circular=sign == "circular")
            )
        case "quartet":
            _, sigma, omega = names
            return tuple(
                root
                for part in (sigma, negated(sigma))
                for root in pair(_sum(centre, part), omega, circular=True)
            )
        case "root and pair":
            root, sigma, omega = names
            return (Root(root), *pair(sigma, omega, circular=True))
        case "known roots":
            return tuple(
                root
                for _, rate, frequency in mode.named_roots
                for root in _known(centre, rate, frequency)
            )


def _known(centre: Expression, rate: str | None, frequency: str | None) -> tuple[Root, ...]:
    real = centre if rate is None else Name(rate)
    return (Root(real),) if frequency is None else pair(real, Name(frequency), circular=True)


def _half(field: ParameterField, mode: Mode) -> Expression:
    """Half the distance of the two roots of a quadratic factor."""
    if mode.frequency is not None:
        return rational_formula(field, mode.frequency)
    square = mode.factor.roots.discriminant
    square = -square if mode.regime.kind == "circular" else square
    return Call("sqrt", rational_formula(field, square))


def _sum(one: Expression, other: Expression) -> Expression:
    return other if one == ZERO else opened(sum_of([one, other]))
