"""What is true of a model, as formulas that a claim can be held against."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import Literal as OneOf

from flint import arb

from closedform.notation.written.tree import Written

__all__ = ["Eigenvalue", "Interval", "Piece", "Sign", "Truth"]

Sign = OneOf[-1, 0, 1]
Rows = tuple[tuple[Written, ...], ...]
Interval = tuple[Written, Written | None]
"""From an instant on to another; None is for ever."""


@dataclass(frozen=True, slots=True)
class Eigenvalue:
    """An eigenvalue: its value, algebraic and geometric multiplicity, and its index.

    `value` is None where no closed form is written (a root of degree 3 and more); then
    `named` is the name under which the formulas of the truth know it.
    """

    value: Written | None
    algebraic: int
    geometric: int
    index: int
    named: str = ""
    ball: Callable[[], tuple[arb, arb]] | None = None
    """Real and imaginary part at flint's current precision, for values of the parameters."""


@dataclass(frozen=True, slots=True)
class Piece:
    """A function of time on one interval."""

    between: Interval
    formula: Written


@dataclass(frozen=True)
class Truth:
    """One case of a model's response, for checking.

    Names in formulas: the parameters, the time, and `quantities` (named roots, frequencies,
    abbreviations) with the formula of each in parameters and earlier quantities, or None if it
    has none (a named root).  `enclosures` gives balls for quantities without formula.

    Shapes: n states in the order of the rows of the matrix; `states` are spelled as typed,
    derivatives with primes (x, x').  `jets` says which unknown and derivative each state is.
    `matrix` n x n; `initial` n entries, None if other conditions fix the solution; `drive` the
    n entries of B u(t) on each interval, empty if the model is free.
    `characteristic` is det(lambda I - A) in Symbol("lambda"), monic; where a parameter is called
    lambda, it is in s, z or xi.
    `transition` is e^(At), n x n, None where it is not written out.
    `solution` maps states, other derivatives that follow (x''), eliminated unknowns and outputs
    to their pieces.  `particular` is the response without the free terms where the engine
    gives one, `steady` the steady state, by the same names.
    `condition` says for which parameters this case is, in plain notation, empty if all.
    `sign` gives the sign of a polynomial in the parameters on the whole case, None if it is
    not fixed: the argument is a mapping from exponent vectors (order of `parameters`) to
    rational coefficients.  `samples` are admissible rational values of the parameters, at least
    three different ones where there are parameters; `values` are the values in the model file.
    `equations` are parameters that the condition gives by the others, each with its formula.
    Balls of eigenvalues and `enclosures` are those at `values`, where the case has these, else
    at the first sample; `enclosures_at` gives the latter at any values of all parameters.
    `units` are those that the model file names, of parameters and inputs.
    """

    states: tuple[str, ...]
    jets: tuple[tuple[str, int], ...]
    time: str
    start: Written
    parameters: tuple[str, ...]
    matrix: Rows
    initial: tuple[Written, ...] | None
    characteristic: Written
    eigenvalues: tuple[Eigenvalue, ...]
    transition: Rows | None
    solution: Mapping[str, tuple[Piece, ...]]
    outputs: tuple[str, ...] = ()
    drive: tuple[tuple[Piece, ...], ...] = ()
    particular: Mapping[str, tuple[Piece, ...]] = field(default_factory=dict)
    steady: Mapping[str, Written] = field(default_factory=dict)
    quantities: tuple[tuple[str, Written | None], ...] = ()
    enclosures: Callable[[], Mapping[str, arb]] = dict
    condition: str = ""
    sign: Callable[[Mapping[tuple[int, ...], object]], Sign | None] = lambda _: None
    samples: tuple[Mapping[str, Written], ...] = ()
    values: Mapping[str, Written] | None = None
    inputs: Mapping[str, tuple[Piece, ...]] = field(default_factory=dict)
    equations: tuple[tuple[str, Written], ...] = ()
    enclosures_at: Callable[[Mapping[str, Written]], Mapping[str, arb]] = lambda _: {}
    units: Mapping[str, str] = field(default_factory=dict)
