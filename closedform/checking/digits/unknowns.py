"""Which printed numbers of a formula may stand for others: its unknowns."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import Any

from closedform.notation.written.tree import (
    EULER,
    Apply,
    Constant,
    Literal,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    Symbol,
    Written,
    walk,
)

__all__ = ["Unknown", "apart", "index_of", "numbered", "significant_digits", "tied"]

_MARK = "#"
"""No name that is read contains it."""
_KINDS = {
    **dict.fromkeys(("exp", "sinh", "cosh", "tanh"), "exp"),
    **dict.fromkeys(("sin", "cos", "tan"), "angle"),
}
_OF_MATRICES = frozenset({"det", "trace", "transpose", "inverse", "adj", "diag", "norm", "rank"})


@dataclass(frozen=True, slots=True)
class Unknown:
    """A printed number; `role` says what it is in an exponent or angle, empty if in none."""

    literal: Literal
    role: tuple[str, ...] = ()


def numbered(tree: Written, *, integers: bool) -> tuple[Written, tuple[Unknown, ...]]:
    """Return a formula with names for its printed numbers, and the numbers in their order.

    These are the decimals and, with `integers`, the integers that may be rounded: not the
    exponents of powers, what stands under a root, a fraction of short numbers as 7/5, and the
    denominators outside exponents and angles.
    Beside decimals only long integers may be rounded: 5 is no rounding of 4.991 beside 0.0601.
    Numbers inside matrices, integrals and the like keep their printed values.
    """
    found: list[Unknown] = []
    decimals = [n for n in walk(tree) if isinstance(n, Literal) and n.is_decimal]
    kept = frozenset(
        node for node in walk(tree) if decimals and isinstance(node, Literal) and _is_short(node)
    )
    return _numbered(tree, found, (), integers=integers, kept=kept), tuple(found)


def _is_short(literal: Literal) -> bool:
    return not literal.is_decimal and significant_digits(literal) < LONG


def tied(unknowns: Sequence[Unknown], within: Fraction | None) -> tuple[tuple[int, ...], ...]:
    """Return groups of unknowns that may stand for one number: those of one role close together.

    Close is what rounding to the digits shown leaves open, or else a share of the values.
    e^(-0.5t) cos(2.18t) + e^(-0.5t) sin(2.18t) needs it: each number by itself is not
    determined, as to first order a change of one is made up for by the others.
    """
    groups: list[list[int]] = []
    for i in sorted(range(len(unknowns)), key=lambda k: (unknowns[k].role, _value(unknowns[k]))):
        if groups and _are_close(unknowns[groups[-1][-1]], unknowns[i], within):
            groups[-1].append(i)
        else:
            groups.append([i])
    return tuple(sorted(tuple(sorted(group)) for group in groups))


def apart(unknowns: Sequence[Unknown]) -> tuple[tuple[int, ...], ...]:
    """Return each unknown by itself."""
    return tuple((i,) for i in range(len(unknowns)))


def _value(unknown: Unknown) -> Fraction:
    return unknown.literal.value


def _are_close(one: Unknown, other: Unknown, within: Fraction | None) -> bool:
    if not one.role or one.role != other.role:
        return False
    if within is None:
        allowed = (one.literal.last_place + other.literal.last_place) / 2
    else:
        allowed = within * max(_value(one), _value(other))
    return abs(_value(one) - _value(other)) <= allowed


def index_of(node: Written) -> int | None:
    """Return the index of the unknown that a node is, or None."""
    if isinstance(node, Symbol) and node.name.startswith(_MARK):
        return int(node.name[1:])
    return None


def significant_digits(literal: Literal) -> int:
    """Return how many digits of a number are printed, leading zeros not counted."""
    return len(str(int(literal.value / literal.last_place)))


def _numbered(
    node: Written,
    found: list[Unknown],
    role: tuple[str, ...],
    *,
    integers: bool,
    kept: frozenset[Literal],
) -> Written:
    if isinstance(node, Literal):
        if not (node.is_decimal or integers) or node in kept:
            return node
        found.append(Unknown(node, role))
        return Symbol(f"{_MARK}{len(found) - 1}")
    if not _is_open(node):
        return node

    integers = integers and not _is_exact(node)

    def inner(part: Written, role: tuple[str, ...] = role) -> Written:
        return _numbered(part, found, role, integers=integers, kept=kept)

    parts: dict[str, Any]
    match node:
        case Sum(terms):
            parts = {"terms": tuple(map(inner, terms))}
        case Product(factors):
            within = _beside(role, node)
            parts = {"factors": tuple(inner(factor, within) for factor in factors)}
        case Negation(operand):
            parts = {"operand": inner(operand)}
        case Quotient(above, below):
            within = _beside(role, node)
            rounded = integers and bool(role)
            parts = {
                "numerator": inner(above, within),
                "denominator": _numbered(below, found, within, integers=rounded, kept=kept),
            }
        case Power(base, exponent) if base == EULER:
            parts = {"exponent": inner(exponent, ("exp",))}
        case Power(base, exponent):
            of_ten = isinstance(base, Literal) and base.value == 10
            parts = {
                "base": base if of_ten else inner(base),
                "exponent": _numbered(exponent, found, role, integers=False, kept=kept),
            }
        case Apply(function, arguments):
            within = (_KINDS[function],) if function in _KINDS else role
            parts = {"arguments": tuple(inner(argument, within) for argument in arguments)}
        case _:
            return node
    return replace(node, **parts)


def _is_exact(node: Written) -> bool:
    """Whether the integers in a node are meant as they stand: a root, a fraction as 7/5."""
    if isinstance(node, Apply) and node.function == "sqrt":
        return True
    if not isinstance(node, Quotient) or any(isinstance(n, Symbol) for n in walk(node)):
        return False
    printed = [n for n in walk(node.numerator) if isinstance(n, Literal)]
    return all(significant_digits(literal) < LONG for literal in printed)


LONG = 3
"""Integers with so many digits may be rounded even above a fraction line."""


def _beside(role: tuple[str, ...], node: Written) -> tuple[str, ...]:
    """The role of what is multiplied by names, such as the time, in an exponent or angle."""
    if len(role) != 1:
        return role
    parts = {part for part in walk(node) if isinstance(part, Symbol | Constant)}
    return (*role, *sorted(part.name for part in parts))


def _is_open(node: Written) -> bool:
    """Whether a node is worked out from numbers by operations with a derivative."""
    if isinstance(node, Sum):
        return True
    if isinstance(node, Apply) and node.function in _OF_MATRICES:
        return False
    kinds = (Apply, Constant, Literal, Negation, Power, Product, Quotient, Sum, Symbol)
    return all(isinstance(part, kinds) for part in walk(node))
