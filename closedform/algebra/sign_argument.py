"""What is said about the sign of an element, and why: arguments a reader can follow.

A sign is kept as the set of values that it may have, a part of {-1, 0, 1}.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from closedform.algebra.field import Scalar

__all__ = [
    "ANY",
    "RELATIONS",
    "SIGN_VALUES",
    "ByCells",
    "ByCondition",
    "ByExpansion",
    "ByFactors",
    "ByPi",
    "BySquares",
    "ByTerms",
    "Combined",
    "Comparison",
    "Constant",
    "Reason",
    "Relation",
    "Sign",
    "SignArgument",
    "Square",
    "Undecided",
    "Values",
    "Whereabouts",
    "named",
    "negated",
    "power",
    "product",
    "relation_values",
    "total",
]

Relation = Literal[">", ">=", "!=", "="]
RELATIONS: tuple[Relation, ...] = (">", ">=", "!=", "=")
Sign = Literal["positive", "negative", "nonnegative", "nonpositive", "nonzero", "zero", "unknown"]
Values = frozenset[int]
Whereabouts = Literal["no zeros", "zeros", "below", "between", "above", "several"]

SIGN_VALUES: dict[Sign, Values] = {
    "positive": frozenset({1}),
    "negative": frozenset({-1}),
    "nonnegative": frozenset({0, 1}),
    "nonpositive": frozenset({-1, 0}),
    "nonzero": frozenset({-1, 1}),
    "zero": frozenset({0}),
    "unknown": frozenset({-1, 0, 1}),
}
ANY = SIGN_VALUES["unknown"]
_NAMES: dict[Values, Sign] = {values: sign for sign, values in SIGN_VALUES.items()}
_HOLDING: dict[Relation, Values] = {
    ">": SIGN_VALUES["positive"],
    ">=": SIGN_VALUES["nonnegative"],
    "!=": SIGN_VALUES["nonzero"],
    "=": SIGN_VALUES["zero"],
}


@dataclass(frozen=True)
class Comparison:
    """`element` compared with 0 by `relation`; x < 0 is stated as -x > 0."""

    element: Scalar
    relation: Relation


@dataclass(frozen=True)
class Square:
    """weight · base², where the weight is nowhere of the wrong sign."""

    weight: Scalar
    base: Scalar


@dataclass(frozen=True)
class Constant:
    """The element is a rational number."""


@dataclass(frozen=True)
class ByPi:
    """The element is a number in pi alone, not 0 as pi is transcendental; digits tell its sign."""


@dataclass(frozen=True)
class ByCondition:
    """element = multiple · comparison.element + rest; `rest` is None where it is 0.

    Where the sign of `multiple` is unknown, the condition says only that the element,
    one of its factors, is not 0.
    """

    comparison: Comparison
    multiple: SignArgument
    rest: SignArgument | None = None


@dataclass(frozen=True)
class ByTerms:
    """Every term of the numerator has one sign, and every term of the denominator."""


@dataclass(frozen=True)
class BySquares:
    """element = sum of the squares + rest, all of one sign; `rest` is None where it is 0."""

    squares: tuple[Square, ...]
    rest: SignArgument | None = None


@dataclass(frozen=True)
class ByFactors:
    """element = content · product of factor^exponent."""

    content: Fraction
    factors: tuple[tuple[SignArgument, int], ...]


@dataclass(frozen=True)
class ByExpansion:
    """element = sum over j of coefficients[j] · comparison.element^j.

    The condition is linear in the parameter `name`, and no coefficient holds this one: it
    is replaced by its bound and the distance from it.  For an equation only the first
    coefficient counts; its parameter may then have a coefficient that holds others.
    """

    comparison: Comparison
    name: str
    coefficients: tuple[SignArgument, ...]


@dataclass(frozen=True)
class ByCells:
    """The element holds one parameter; its sign is known between and at its zeros in this.

    The comparisons follow from the conditions and hold this parameter only; `where` says
    where they leave it, seen from the element's zeros and poles.
    """

    name: str
    comparisons: tuple[Comparison, ...]
    where: Whereabouts


@dataclass(frozen=True)
class Combined:
    """Several arguments about the same element; the sign is what all of them leave."""

    arguments: tuple[SignArgument, ...]


@dataclass(frozen=True)
class Undecided:
    """No argument was found: this says nothing about the element."""


Reason = (
    Constant
    | ByPi
    | ByCondition
    | ByTerms
    | BySquares
    | ByFactors
    | ByExpansion
    | ByCells
    | Combined
    | Undecided
)


@dataclass(frozen=True)
class SignArgument:
    """The sign of an element wherever it is defined on a domain, and the reason."""

    element: Scalar
    sign: Sign
    reason: Reason

    @property
    def values(self) -> Values:
        """The signs, of -1, 0 and 1, that the element may have."""
        return SIGN_VALUES[self.sign]

    @property
    def never_zero(self) -> bool:
        """Whether the element vanishes nowhere."""
        return 0 not in self.values


def named(values: Values) -> Sign:
    """Return the name of a set of signs that is not empty."""
    return _NAMES[values]


def relation_values(relation: Relation) -> Values:
    """Return the signs with which a comparison holds."""
    return _HOLDING[relation]


def negated(values: Values) -> Values:
    """Return the signs of -x."""
    return frozenset(-v for v in values)


def product(first: Values, second: Values) -> Values:
    """Return the signs of x y."""
    return frozenset(a * b for a in first for b in second)


def power(values: Values, exponent: int) -> Values:
    """Return the signs of x^exponent where it is defined."""
    if exponent == 0:
        return frozenset({1})
    if exponent < 0:
        values = values - {0} or values
    return values if exponent % 2 else frozenset(v * v for v in values)


def total(parts: Iterable[Values]) -> Values:
    """Return the signs that a sum of numbers with these signs may have."""
    some = [p for p in parts if p != {0}]
    if len(some) <= 1:
        return some[0] if some else frozenset({0})
    for sign in (1, -1):
        if all(p <= {0, sign} for p in some):
            strict = any(0 not in p for p in some)
            return frozenset({sign}) if strict else frozenset({0, sign})
    return ANY
