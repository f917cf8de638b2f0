"""What printed statements are held against, at one precision, and what they name."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property
from typing import Any

from flint import acb, acb_mat

from closedform.algebra.enclosure import ball_of
from closedform.algebra.spectrum import Factor
from closedform.algebra.surds import SurdSum
from closedform.derivation.formulas import root_of
from closedform.derivation.proof.evaluation import matrix_at
from closedform.derivation.proof.finding import Fault, Finding
from closedform.derivation.spectrum_steps import Eigenvalue, eigenvalues_of
from closedform.derivation.step import IMAGINARY_UNIT, Matrix, Side, Step, Symbol
from closedform.notation.expression import Name
from closedform.response.names import constant_values
from closedform.response.response import Response

__all__ = ["Ground", "Instant", "Letter", "letter_of", "letters_in", "rows_of", "vanishing_at"]

Letter = tuple[str, str, tuple[str, ...]]
"""The kind, letter and indices of a symbol, without its argument."""


@dataclass(frozen=True)
class Instant:
    """A time, the values of all names then, and e^(At) by the Taylor series of acb_mat."""

    time: acb
    names: dict[str, acb]
    transition: acb_mat


@dataclass(frozen=True)
class Ground:
    """A response, its steps, and exact objects as balls at FLINT's current precision.

    `letters` are the matrices that the steps state, by the symbol they are stated for.
    Nothing here may outlive the precision at which it was made.
    """

    response: Response
    steps: Sequence[Step]
    digits: int
    times: tuple[Fraction, ...]

    def afresh(self) -> Ground:
        """Return the same at another precision: nothing is worked out yet."""
        return replace(self)

    @cached_property
    def names(self) -> dict[str, acb]:
        """The constants of the response and the imaginary unit."""
        values = constant_values(self.response.closed_forms.constants)
        return {IMAGINARY_UNIT.text: acb(0, 1)} | {n: acb(v) for n, v in values.items()}

    @cached_property
    def root(self) -> Name:
        """The variable of the characteristic polynomial."""
        return root_of(self.response)

    @cached_property
    def matrix(self) -> acb_mat:
        """A, from the model's own numbers."""
        return acb_mat([[acb(ball_of(x)) for x in row] for row in self.response.model.matrix])

    @cached_property
    def initial(self) -> acb_mat:
        """x0, from the model's own numbers."""
        return acb_mat([[acb(ball_of(x))] for x in self.response.model.initial])

    @cached_property
    def weights(self) -> list[acb_mat]:
        """One row of weights for each output of the model."""
        outputs = self.response.model.outputs
        return [acb_mat([[acb(ball_of(w)) for w in output.weights]]) for output in outputs]

    @cached_property
    def instants(self) -> tuple[Instant, ...]:
        """The instants at which functions of time are compared.

        Times are rational and not zero, so that by the theorem of Lindemann and Weierstrass
        no two different exponentials of eigenvalues agree there by chance.
        """
        return tuple(self.instant(acb(ball_of(t))) for t in self.times)

    def instant(self, time: acb) -> Instant:
        """Return an instant with the matrix exponential then."""
        names = self.names | {self.response.model.time: time}
        return Instant(time, names, (self.matrix * time).exp())

    @cached_property
    def letters(self) -> dict[Letter, Matrix]:
        """Every matrix in print, by its symbol."""
        return dict(letters_in(self.steps))

    def printed(self, kind: str, letter: str, indices: tuple[str, ...] = ()) -> acb_mat | None:
        """Return a constant matrix in print by its symbol, as balls; None if there is none."""
        key = (kind, letter, indices)
        if key not in self._printed:
            matrix = self.letters.get(key)
            self._printed[key] = None if matrix is None else matrix_at(matrix, self.names)
        return self._printed[key]

    @cached_property
    def _printed(self) -> dict[Letter, acb_mat | None]:
        return {}

    @cached_property
    def numbered(self) -> dict[tuple[int, ...], Eigenvalue]:
        """The eigenvalues by the numbers under which they are printed."""
        return {e.numbers: e for e in eigenvalues_of(self.response)}

    @cached_property
    def _roots_met(self) -> dict[int, list[acb]]:
        """The isolated roots that each eigenvalue may be, by its number; a pair has + first."""
        found: dict[int, list[acb]] = {}
        for numbers, eigenvalue in self.numbered.items():
            roots = eigenvalue.factor.roots.enclosures()
            mode = eigenvalue.mode
            rate, turn = self._ball(mode.rate), self._ball(mode.frequency)
            if mode.kind == "circular":
                turn = turn * acb(0, 1)
            for number, written in zip(numbers, (rate + turn, rate - turn), strict=False):
                found[number] = [root for root in roots if root.overlaps(written)]
        return found

    @property
    def is_coarse(self) -> bool:
        """Whether an eigenvalue cannot be told from its neighbours at this precision."""
        balls = list(self.eigenvalues.values())
        return any(len(roots) > 1 for roots in self._roots_met.values()) or any(
            z.overlaps(w) for i, z in enumerate(balls) for w in balls[:i]
        )

    @cached_property
    def eigenvalues(self) -> dict[int, acb]:
        """The isolated root that goes by each number in print."""
        return {number: roots[0] for number, roots in self._roots_met.items() if len(roots) == 1}

    def unplaced(self) -> Iterator[Finding]:
        """Yield a fault for every eigenvalue that is no isolated root, or not the only one."""
        for numbers in self.numbered:
            for number in numbers:
                if number not in self.eigenvalues:
                    yield Fault(f"eigenvalue {number}", "it is no zero of its factor")
        balls = list(self.eigenvalues.values())
        if any(z.overlaps(w) for i, z in enumerate(balls) for w in balls[:i]):
            yield Fault("eigenvalues", "one is given twice")
        if len(balls) != sum(factor.degree for factor in self.response.spectrum.factors):
            yield Fault("eigenvalues", "some are missing")

    def _ball(self, value: SurdSum | str | None) -> acb:
        if value is None:
            return acb(0)
        return self.names[value] if isinstance(value, str) else acb(ball_of(value))


def vanishing_at(factor: Factor, s: acb) -> acb:
    """Return the value of a factor at s as a product over its isolated roots."""
    value = acb(1)
    for root in factor.roots.enclosures():
        value = value * (s - root)
    return value


def letters_in(steps: Sequence[Step]) -> Iterator[tuple[Letter, Matrix]]:
    """Return the symbol and the matrix of every statement that gives a symbol a matrix."""
    for step in steps:
        for statement in step.statements:
            first, last = statement.sides[0], statement.sides[-1]
            if isinstance(first, Symbol) and isinstance(last, Matrix):
                yield letter_of(first), last


def letter_of(side: Side) -> Letter:
    """Return what a symbol is called.  Raises TypeError for what is no symbol."""
    if not isinstance(side, Symbol):
        raise TypeError(f"{side} is no symbol")
    return side.kind, side.letter, side.indices


def rows_of(step: Step) -> list[Mapping[str, Any]]:
    """Return the rows of a step's table.  Raises TypeError if it has none."""
    rows = step.facts["rows"]
    if not isinstance(rows, list):
        raise TypeError(f"the step {step.kind!r} has no table")
    return rows
