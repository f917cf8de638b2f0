"""The driven model: equations as stated, the state form, the inputs, and both stacked."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.field import BaseField, FieldMatrix, Scalar
from closedform.algebra.surds import SurdSum
from closedform.model.driven.generator import Generator
from closedform.model.driven.signal import Signal
from closedform.model.model import Model
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import Expression

__all__ = [
    "Balance",
    "DrivenModel",
    "DrivenOutput",
    "Input",
    "Jet",
    "PointCondition",
    "Reduction",
]

Form = Literal["equations", "second order", "state form"]
"""How a model was stated: typed equations; mass, damping and stiffness; a matrix."""


@dataclass(frozen=True, slots=True)
class Jet:
    """A derivative of an unknown: `name` with `order` primes, order 0 the unknown itself."""

    name: str
    order: int = 0

    @property
    def text(self) -> str:
        """The jet as it is typed: x1''."""
        return self.name + "'" * self.order


@dataclass(frozen=True, slots=True)
class Input:
    """One column of the input matrix.

    `name` is that under which it was declared, empty for a function of time that stands in an
    equation.  `formula` is how it is written there: F, u(t - 2), F', 6*cos(3*t).  `signal` is
    what it is as a function of time, delays and derivatives worked in.
    `definition` is the formula declared under [inputs], where that is one.
    """

    name: str
    formula: Expression
    signal: Signal
    definition: Expression | None = None
    unit: str = ""
    meaning: str = ""


@dataclass(frozen=True, slots=True)
class Balance:
    """An equation `left` = `right` as typed, and the same with everything on the left.

    The sum of weight · jet over `of_unknowns` and of weight · input over `of_inputs` (by the
    place of the input in the model) is zero.  Weights are elements of the model's field.
    """

    text: str
    left: Expression
    right: Expression
    of_unknowns: tuple[tuple[Jet, Scalar], ...]
    of_inputs: tuple[tuple[int, Scalar], ...]


@dataclass(frozen=True, slots=True)
class Reduction:
    """The state form x' = A x + B u, z = C x + D u that follows from the balances.

    `jets` says which derivative of which unknown each state is; `eliminated` are the unknowns
    z that are no states.  Shapes: A n x n, B n x m, C e x n, D e x m (None where e or m is 0).
    """

    jets: tuple[Jet, ...]
    matrix: FieldMatrix
    input_matrix: FieldMatrix | None
    eliminated: tuple[str, ...] = ()
    eliminated_from_states: FieldMatrix | None = None
    eliminated_from_inputs: FieldMatrix | None = None


@dataclass(frozen=True, slots=True)
class DrivenOutput:
    """A named linear combination of states and inputs; a weight for each of both."""

    name: str
    of_states: tuple[Scalar, ...]
    of_inputs: tuple[Scalar, ...]


@dataclass(frozen=True, slots=True)
class PointCondition:
    """The sum of weight · state at `at` equals `value`; `text` is the condition as typed."""

    text: str
    at: Scalar
    of_states: tuple[Scalar, ...]
    value: Scalar


@dataclass(frozen=True, slots=True)
class DrivenModel:
    """A model that is driven, or stated by equations, or given values elsewhere than at 0.

    `stacked` is the autonomous model of the states and, below them, the generator of the
    inputs: matrix [[A, B C], [0, S]], initial values (x0, 0).  It carries name, title, time,
    times and, with parameters, all that belongs to these; `field` is Q(parameters) then, and
    `domain` that of the stacked model, None without parameters.

    `names` are the state names in the order of `reduction.jets`.  Time begins at `start`;
    `initial` are the states there, None where `conditions` at points determine them.
    `timeline` are the later instants at which something is switched on or off or strikes, in
    rising order; an impulse may also strike at `start`.  A repeating input is not in it.
    """

    form: Form
    field: BaseField
    domain: ParameterDomain | None
    unknowns: tuple[str, ...]
    names: tuple[str, ...]
    balances: tuple[Balance, ...]
    reduction: Reduction
    inputs: tuple[Input, ...]
    generator: Generator | None
    outputs: tuple[DrivenOutput, ...]
    start: Scalar
    initial: tuple[Scalar, ...] | None
    conditions: tuple[PointCondition, ...]
    timeline: tuple[Scalar, ...]
    stacked: Model | ParametricModel
    stated_initial: tuple[tuple[Jet, Scalar], ...] = ()
    times: tuple[SurdSum, ...] = ()

    @property
    def name(self) -> str:
        """The stem under which results are filed."""
        return self.stacked.name

    @property
    def title(self) -> str:
        """The title of the model."""
        return self.stacked.title

    @property
    def time(self) -> str:
        """The name of the time."""
        return self.stacked.time

    @property
    def rows(self) -> tuple[str, ...]:
        """The names of all that is solved for: states, eliminated unknowns, outputs."""
        named = tuple(output.name for output in self.outputs)
        return (*self.names, *self.reduction.eliminated, *named)
