"""The tree of what a person wrote: formulas, matrices, chains of equalities.

It is wider than the formula tree of `notation.expression`, which is what this program writes
itself: here are printed decimals with their last place, plus-or-minus, matrices and their
products, integrals, units behind numbers.  Like that tree it says how something is *written*;
whether two of them are equal is decided elsewhere, by arithmetic in fields.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field, fields, replace
from fractions import Fraction
from typing import Any
from typing import Literal as OneOf

__all__ = [
    "EULER",
    "FUNCTIONS",
    "IMAGINARY",
    "INFINITY",
    "MATRIX_FUNCTIONS",
    "PI",
    "RELATIONS",
    "Ambiguity",
    "Apply",
    "Array",
    "Constant",
    "Declared",
    "Derivative",
    "Evaluated",
    "Identity",
    "Integral",
    "Jet",
    "Limit",
    "Listing",
    "Literal",
    "Negation",
    "Piecewise",
    "PlusMinus",
    "Power",
    "Product",
    "Quotient",
    "Range",
    "Reading",
    "Statement",
    "Sum",
    "SumOver",
    "Symbol",
    "Transform",
    "Written",
    "changed",
    "children",
    "walk",
    "with_parts",
]

FUNCTIONS = (
    *("exp", "sin", "cos", "tan", "cot", "sec", "csc", "sinh", "cosh", "tanh", "coth"),
    *("asin", "acos", "atan", "atan2", "asinh", "acosh", "atanh", "ln", "log10", "sqrt", "abs"),
    *("re", "im", "arg", "conj", "sign", "min", "max", "factorial", "step", "delta"),
)
"""Functions of numbers."""
MATRIX_FUNCTIONS = ("det", "trace", "transpose", "inverse", "adj", "diag", "norm", "rank", "exp")
"""Functions of matrices; `diag` takes numbers and blocks, several arguments."""
RELATIONS = ("=", "≈", "≠", "<", "≤", ">", "≥", "→", "≡", "∝")


@dataclass(frozen=True, slots=True)
class Literal:
    """A number as printed, without sign: `last_place` is the worth of a unit of its last digit.

    `is_decimal` says that it has a decimal sign or a power of ten: 0.040 has last place 1/1000,
    1.2e-3 has 1/10000, and 12 000 has 1.  `start` and `end` bound it in the text read.
    """

    value: Fraction
    last_place: Fraction = Fraction(1)
    is_decimal: bool = False
    start: int = field(default=-1, compare=False)
    end: int = field(default=-1, compare=False)


@dataclass(frozen=True, slots=True)
class Constant:
    """A number with a name that everybody knows."""

    name: OneOf["e", "i", "pi", "oo"]


@dataclass(frozen=True, slots=True)
class Symbol:
    """A name for a number or a matrix, flattened: k_12, omega_n_1, Fhat, lambda_star, t.

    A declared name is spelled as it was declared.  `bold` says that it was set as a vector
    or matrix.
    """

    name: str
    bold: bool = field(default=False, compare=False)


@dataclass(frozen=True, slots=True)
class Jet:
    """A function of time or a derivative of it: x is Jet("x"), x'(0) is Jet("x", 1, 0).

    `at` is the instant; None is the time itself.  A state or input is one wherever it stands.
    """

    name: str
    order: int = 0
    at: Written | None = None


@dataclass(frozen=True, slots=True)
class Negation:
    """The operand with the opposite sign."""

    operand: Written


@dataclass(frozen=True, slots=True)
class PlusMinus:
    """Both signs of the operand: `upper` is the sign in the first of the two readings."""

    operand: Written
    upper: OneOf[1, -1] = 1


@dataclass(frozen=True, slots=True)
class Sum:
    """Two or more terms; a subtracted term is a `Negation`, one after ± a `PlusMinus`."""

    terms: tuple[Written, ...]


@dataclass(frozen=True, slots=True)
class Product:
    """Two or more factors in order, numbers or matrices."""

    factors: tuple[Written, ...]


@dataclass(frozen=True, slots=True)
class Quotient:
    """Numerator over denominator."""

    numerator: Written
    denominator: Written


@dataclass(frozen=True, slots=True)
class Power:
    """Base to an exponent; e^x is Power(EULER, x), a matrix to -1 its inverse."""

    base: Written
    exponent: Written


@dataclass(frozen=True, slots=True)
class Apply:
    """A function of `FUNCTIONS` or `MATRIX_FUNCTIONS` and its arguments."""

    function: str
    arguments: tuple[Written, ...]


@dataclass(frozen=True, slots=True)
class Array:
    """A matrix by rows; an entry may be a matrix, a block.  A column has rows of one entry."""

    rows: tuple[tuple[Written, ...], ...]


@dataclass(frozen=True, slots=True)
class Identity:
    """The unit matrix; `size` is None where the context fixes it."""

    size: int | None = None


@dataclass(frozen=True, slots=True)
class Listing:
    """Several values set as a list or a set: {-1, -2}."""

    items: tuple[Written, ...]


@dataclass(frozen=True, slots=True)
class Range:
    """A chain of comparisons: 0 <= t < 2 has members (0, t, 2) and signs ("≤", "<")."""

    members: tuple[Written, ...]
    signs: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Piecewise:
    """Values with the ranges in which they apply; None is otherwise."""

    pieces: tuple[tuple[Written, tuple[Range, ...] | None], ...]


@dataclass(frozen=True, slots=True)
class Integral:
    """The integral of a body over a variable, definite or, without bounds, not."""

    body: Written
    variable: str
    lower: Written | None = None
    upper: Written | None = None


@dataclass(frozen=True, slots=True)
class SumOver:
    """The sum of a body over an integer variable between two bounds."""

    body: Written
    variable: str
    lower: Written
    upper: Written


@dataclass(frozen=True, slots=True)
class Limit:
    """The limit of a body as a variable tends to a point."""

    body: Written
    variable: str
    point: Written


@dataclass(frozen=True, slots=True)
class Transform:
    """The Laplace transform of a function of time, or of one of s back into time."""

    body: Written
    back: bool = False


@dataclass(frozen=True, slots=True)
class Evaluated:
    """A body taken at a value of a variable, as with a bar; with `lower`, the difference."""

    body: Written
    variable: str
    at: Written
    lower: Written | None = None


@dataclass(frozen=True, slots=True)
class Derivative:
    """The derivative of a body that is no single function of time, d/dt(...)."""

    body: Written
    variable: str
    order: int = 1


Written = (
    Literal
    | Constant
    | Symbol
    | Jet
    | Negation
    | PlusMinus
    | Sum
    | Product
    | Quotient
    | Power
    | Apply
    | Array
    | Identity
    | Listing
    | Range
    | Piecewise
    | Integral
    | SumOver
    | Limit
    | Transform
    | Evaluated
    | Derivative
)

EULER, IMAGINARY, PI = Constant("e"), Constant("i"), Constant("pi")
INFINITY = Constant("oo")


@dataclass(frozen=True, slots=True)
class Statement:
    """A chain of members with a relation of `RELATIONS` between neighbours.

    A formula that stands alone is a chain of one member.  `unit` is a printed unit, as text;
    the number is as printed.  `conditions` are ranges beside it ("for t >= 2", "t -> oo" is a
    range with the sign →).  `note` is text beside it.  `start` and `end` bound it in the text.
    """

    members: tuple[Written, ...]
    relations: tuple[str, ...] = ()
    unit: str = ""
    conditions: tuple[Range, ...] = ()
    note: str = ""
    start: int = field(default=-1, compare=False)
    end: int = field(default=-1, compare=False)


@dataclass(frozen=True, slots=True)
class Ambiguity:
    """A place that careful readers read in two ways.

    `text` is it, `chosen` and `other` say in plain notation how it may be read.
    `decided_by` names the declared name that decides it, empty if nothing does.
    """

    text: str
    chosen: str
    other: str
    decided_by: str = ""


@dataclass(frozen=True, slots=True)
class Reading:
    """The statements of a text in order; `others` are those of its other readings, if any."""

    statements: tuple[Statement, ...]
    ambiguities: tuple[Ambiguity, ...] = ()
    others: tuple[tuple[Statement, ...], ...] = ()


@dataclass(frozen=True, slots=True)
class Declared:
    """The names that a text may use with a meaning of their own; all others are found.

    `states` and `inputs` are functions of time, `parameters` numbers, `functions` other
    functions of time, `matrices` names of matrices.  A declared name wins over e, i, j, the
    unit step and every other customary meaning.  Any iterable of names is taken.

    Raises TypeError for one string in the place of several names.
    """

    states: frozenset[str] = frozenset()
    parameters: frozenset[str] = frozenset()
    inputs: frozenset[str] = frozenset()
    functions: frozenset[str] = frozenset()
    matrices: frozenset[str] = frozenset()
    time: str = "t"

    def __post_init__(self) -> None:
        for slot in ("states", "parameters", "inputs", "functions", "matrices"):
            given: object = getattr(self, slot)
            if isinstance(given, str):
                raise TypeError(f"{slot} are several names; put {given!r} in a list")
            object.__setattr__(self, slot, frozenset(getattr(self, slot)))

    @property
    def varying(self) -> frozenset[str]:
        """Every declared function of time."""
        return self.states | self.inputs | self.functions

    @property
    def names(self) -> frozenset[str]:
        """Every declared name, the time among them."""
        return self.varying | self.parameters | self.matrices | {self.time}


def children(node: Written) -> Iterator[Written]:
    """Yield the parts of a node that are formulas themselves, from left to right."""
    for slot in fields(node):
        yield from _formulas(getattr(node, slot.name))


def walk(node: Written) -> Iterator[Written]:
    """Yield a formula and everything inside it, the outer before the inner."""
    pending = [node]
    while pending:
        found = pending.pop()
        yield found
        pending += reversed(list(children(found)))


def changed(node: Written, change: Callable[[Written], Written | None]) -> Written:
    """Return a formula with what `change` gives in the place of nodes, from the outside in.

    A node for which it gives None stays, and its parts are changed in their turn.
    """
    new = change(node)
    if new is not None:
        return new
    return with_parts(node, lambda part: changed(part, change))


def with_parts(node: Written, change: Callable[[Written], Written]) -> Written:
    """Return a node with `change` of each formula that it is directly made of."""
    parts: dict[str, Any] = {}
    for slot in fields(node):
        before = getattr(node, slot.name)
        after = _changed(before, change)
        if after is not before:
            parts[slot.name] = after
    return replace(node, **parts) if parts else node


def _formulas(value: object) -> Iterator[Written]:
    if isinstance(value, Written):
        yield value
    elif isinstance(value, tuple):
        for item in value:
            yield from _formulas(item)


def _changed(value: object, change: Callable[[Written], Written]) -> object:
    if isinstance(value, Written):
        return change(value)
    if isinstance(value, tuple):
        new = tuple(_changed(item, change) for item in value)
        return value if all(a is b for a, b in zip(new, value, strict=True)) else new
    return value
