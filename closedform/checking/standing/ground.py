"""The ground on which claims are judged: a case of the model in exact values."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property
from itertools import pairwise

from flint import acb, arb

from closedform.algebra.elementary import Element, ElementaryField
from closedform.checking.balls.enclosing import Quantities
from closedform.checking.errors import NotJudgedError
from closedform.checking.standing.facts import Facts, facts_of
from closedform.checking.standing.points import points_of, sign_of
from closedform.checking.standing.stretch import Stretch, stretches_between
from closedform.checking.truth import Piece, Truth
from closedform.checking.truths.put_in import substituted
from closedform.checking.values.blocks import jordan_matrix
from closedform.checking.values.exact import exact
from closedform.checking.values.exponential import matrix_exponential
from closedform.checking.values.matrices import (
    ExactMatrix,
    characteristic_coefficients,
    column,
    identity,
)
from closedform.checking.values.scope import Scope, Value
from closedform.notation.written.tree import Array, Declared, Written
from closedform.notation.written.typed_reader import read_typed

__all__ = ["SPECTRAL", "Ground", "ground_of"]

SPECTRAL = "spectral variable"
"""The name of the variable of polynomials: no name of a model has a space in it."""


@dataclass(frozen=True)
class Ground:
    """A truth with its exact values, each worked out when it is first asked for.

    Formulas of the truth are evaluated in `scope`: parameters, the time and the truth's own
    quantities.  `stretches` are the intervals between switching instants, one if there are none.
    """

    truth: Truth
    facts: Facts
    field: ElementaryField
    scope: Scope
    put_in: frozenset[str] = frozenset()
    """The parameters for which values stand."""
    cuts: tuple[Written, ...] = ()
    """Instants, besides those of the model, at which intervals are to end."""

    @property
    def size(self) -> int:
        """The number of states."""
        return len(self.truth.states)

    @cached_property
    def matrix(self) -> ExactMatrix:
        """The matrix A."""
        return self._matrix(self.truth.matrix)

    @cached_property
    def initial(self) -> ExactMatrix | None:
        """The initial values as a column, None if other conditions fix the solution."""
        if self.truth.initial is None:
            return None
        return column(self.field, (self.number(entry) for entry in self.truth.initial))

    @cached_property
    def characteristic(self) -> Element:
        """The polynomial det(z I - A) in the name `SPECTRAL`, whatever a line calls it."""
        variable = self.field.name(SPECTRAL)
        total, power = self.field.zero, self.field.one
        for coefficient in characteristic_coefficients(self.matrix):
            total, power = total + coefficient * power, power * variable
        return total

    @cached_property
    def eigenvalues(self) -> tuple[Element, ...]:
        """The different eigenvalues; one without a closed form by the names that it goes by."""
        return tuple(
            self.number(root.value) if root.value is not None else self._named(root.named)
            for root in self.truth.eigenvalues
        )

    def _named(self, text: str) -> Element:
        """Return what the truth calls an eigenvalue, such as alpha_1 + omega_1*i."""
        reading = read_typed(text, Declared(parameters=self.enclosed))
        return self.number(reading.statements[0].members[0])

    @cached_property
    def transition(self) -> ExactMatrix:
        """The matrix e^(At).  Raises NotJudgedError where it is not written out."""
        if self.truth.transition is None:
            raise NotJudgedError("e^(At) of a model of this size is not written out")
        return self._matrix(self.truth.transition)

    @cached_property
    def stretches(self) -> tuple[Stretch, ...]:
        """The intervals between which anything is switched."""
        found = [piece.between for pieces in self.truth.solution.values() for piece in pieces]
        starts: list[Element] = []
        ends: list[Element | None] = []
        longest = max(self.truth.solution.values(), key=len, default=())
        for piece in longest:
            start, end = piece.between
            starts.append(self.number(start))
            ends.append(None if end is None else self.number(end))
        if not found:
            starts, ends = [self.number(self.truth.start)], [None]
        return stretches_between(starts, ends, list(map(self.number, self.cuts)), self.field)

    @cached_property
    def exponential(self) -> ExactMatrix:
        """The same as `transition`, worked out from A where the truth does not have it."""
        return matrix_exponential(self.matrix, self.eigenvalues)

    @cached_property
    def jordan(self) -> ExactMatrix | None:
        """A Jordan form of A, eigenvalues in the order of the truth; None without closed forms."""
        blocks: list[tuple[Element, int]] = []
        for value, root in zip(self.eigenvalues, self.truth.eigenvalues, strict=True):
            if root.value is None:
                return None
            shifted = self.matrix - identity(self.field, self.size).scaled(value)
            ranks = [self.size, *(shifted.power(k).rank() for k in range(1, root.algebraic + 2))]
            longer = [one - other for one, other in pairwise(ranks)]
            for length in range(root.algebraic, 0, -1):
                blocks += [(value, length)] * (longer[length - 1] - longer[length])
        return jordan_matrix(self.field, blocks)

    def sampled(self) -> dict[str, arb]:
        """Return balls for the names of the field at one admissible choice of the parameters."""
        truth = self.truth
        if truth.parameters and not (truth.values or truth.samples):
            raise NotJudgedError("no values are known for which this case holds")
        chosen = truth.values or (truth.samples[0] if truth.samples else {})
        balls = {}
        for name, tree in chosen.items():
            value = exact(tree, Scope(self.field, self.truth.time))
            if not isinstance(value, ExactMatrix):
                balls[name] = value.enclosure(acb(0), {}).real
        return balls | dict(truth.enclosures())

    def number(self, tree: Written) -> Element:
        """Return the exact value of a formula of the truth, a number or a function."""
        return exact_number(tree, self.scope)

    def function(self, name: str, stretch: Stretch) -> Element | None:
        """Return a solution of the model on an interval, None if nothing has this name."""
        pieces = self.truth.solution.get(name)
        return None if pieces is None else self._on(pieces, stretch)

    def column(self, stretch: Stretch) -> ExactMatrix:
        """Return the solution for all states on an interval."""
        entries = [self.function(state, stretch) for state in self.truth.states]
        if any(entry is None for entry in entries):
            raise NotJudgedError("the solution of the model is not known for every state")
        return column(self.field, [entry for entry in entries if entry is not None])

    def piece_tree(self, name: str, stretch: Stretch) -> Written | None:
        """Return the formula of a solution on an interval."""
        pieces = self.truth.solution.get(name, ())
        return next((p.formula for p in pieces if self._covers(p, stretch)), None)

    @property
    def quantities(self) -> Quantities:
        """The names of the truth that have no formula, with their balls."""
        return Quantities((), lambda: dict(self.truth.enclosures()))

    @property
    def enclosed(self) -> frozenset[str]:
        """The names of the truth that have no formula."""
        return frozenset(name for name, tree in self.truth.quantities if tree is None)

    @property
    def between(self) -> dict[str, tuple[Fraction, Fraction | None]]:
        """The interval of time on which the ground is, as far as its ends are numbers."""
        instant = self.scope.instant
        for stretch in self.stretches if instant is not None else ():
            if stretch.inside == instant:
                start = stretch.start.as_fraction()
                end = stretch.end.as_fraction() if stretch.end is not None else None
                if start is not None:
                    return {self.truth.time: (start, end)}
        return {}

    def within(self, stretch: Stretch) -> Ground:
        """Return the ground on which steps and pieces have their values on an interval."""
        own = self.stretches[stretch.index]
        return replace(self, scope=replace(self.scope, instant=own.inside))

    def drive(self, stretch: Stretch) -> list[Element]:
        """Return the entries of B u(t) on an interval; empty for a free model."""
        found = [self._on(pieces, stretch) for pieces in self.truth.drive]
        return [self.field.zero if entry is None else entry for entry in found]

    def input(self, name: str, stretch: Stretch) -> Element | None:
        """Return an input on an interval."""
        return self._on(self.truth.inputs.get(name, ()), stretch)

    def _on(self, pieces: tuple[Piece, ...], stretch: Stretch) -> Element | None:
        own = self.stretches[stretch.index]
        for piece in pieces:
            if self._covers(piece, own):
                return exact_number(piece.formula, replace(self.scope, instant=own.inside))
        return None

    def _covers(self, piece: Piece, stretch: Stretch) -> bool:
        start, end = piece.between
        if (stretch.inside - self.number(start)).sign() == -1:
            return False
        return end is None or (stretch.inside - self.number(end)).sign() != 1

    def _matrix(self, rows: Iterable[Iterable[Written]]) -> ExactMatrix:
        value = exact(Array(tuple(tuple(row) for row in rows)), self.scope)
        if not isinstance(value, ExactMatrix):
            raise TypeError(value)
        return value

    def put_for(self, names: frozenset[str]) -> Ground:
        """Return the ground with the values of the model put in for some parameters."""
        values = self.truth.values
        if values is None or not names:
            return self
        known = {name: values[name] for name in sorted(names) if name in values}
        if not known:
            return self
        key = frozenset(known)
        if key not in self._put:
            whole = len(known) == len(self.truth.parameters)
            self._put[key] = _put(self, known) if whole else _put_partly(self, key)
        return self._put[key]

    @cached_property
    def _put(self) -> dict[frozenset[str], Ground]:
        return {}


def exact_number(tree: Written, scope: Scope) -> Element:
    """Return the value of a formula that is no matrix."""
    value = exact(tree, scope)
    if isinstance(value, ExactMatrix):
        raise NotJudgedError("a matrix stands where a number is wanted")
    return value


def ground_of(truth: Truth) -> Ground:
    """Return the ground of one case of a model."""
    opened = tuple(name for name, formula in truth.quantities if formula is None)
    names = (*truth.parameters, *opened)
    field = ElementaryField(names, sign_of(truth), () if opened else points_of(truth))
    scope = Scope(
        field, truth.time, {name: field.name(name) for name in names}, size=len(truth.states)
    )
    for name, tree in truth.equations:
        scope = scope.with_symbols({name: exact(tree, scope)})
    for name, formula in truth.quantities:
        if formula is not None:
            scope = scope.with_symbols({name: exact(formula, scope)})
    return Ground(truth, facts_of(truth), field, scope)


def _put(ground: Ground, known: Mapping[str, Written]) -> Ground:
    """Return a ground with values for parameters, by putting them into every formula."""
    symbols: dict[str, Value] = dict(ground.scope.symbols)
    scope = ground.scope
    for name, tree in known.items():
        symbols[name] = exact(tree, scope)
    scope = replace(scope, symbols={k: v for k, v in symbols.items() if k in _base(ground)})
    for name, formula in ground.truth.quantities:
        if formula is not None:
            scope = scope.with_symbols({name: exact(formula, scope)})
    put_in = frozenset(known)
    return Ground(ground.truth, ground.facts, ground.field, scope, put_in, ground.cuts)


def _put_partly(ground: Ground, names: frozenset[str]) -> Ground:
    """Return a ground of its own for what is left of the parameters: their signs are others."""
    left = ground_of(substituted(ground.truth, names))
    own = next((s for s in ground.stretches if s.inside == ground.scope.instant), None)
    values = ground.truth.values or {}
    known = {name: exact(values[name], left.scope) for name in sorted(names)}
    scope = left.scope.with_symbols(known)
    left = replace(left, put_in=names, facts=ground.facts, scope=scope, cuts=ground.cuts)
    return left if own is None else left.within(own)


def _base(ground: Ground) -> frozenset[str]:
    named = {name for name, formula in ground.truth.quantities if formula is not None}
    return frozenset(ground.scope.symbols) - named
