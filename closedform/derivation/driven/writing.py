"""Elements, rows and names of a driven model as the formulas and symbols of its steps."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from closedform.algebra.field import FieldMatrix, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.derivation.formulas import root_variable, surd_matrix
from closedform.derivation.parametric.formulas import as_given
from closedform.derivation.step import Matrix, Side, Symbol
from closedform.model.driven.model import DrivenModel, Input
from closedform.model.parametric import ParametricModel
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
)
from closedform.notation.latex.names import printed_key
from closedform.notation.rational_formula import weighted_rational
from closedform.notation.terms import opened, sum_of, weighted
from closedform.response.driven.composition import element_formula

__all__ = ["A_HAT", "X_HAT", "Writing", "bold", "calls_in", "interval", "unboxed"]

A_HAT = Symbol("matrix", letter="A_hat")
X_HAT = Symbol("vector", letter="x_hat")
LETTERS = {
    "h": ("h", "j", "r", "eta"),
    "b": ("b", "d", "p", "beta"),
    "g": ("g", "f", "r", "gamma"),
    "D": ("D", "H", "Delta"),
    "varphi": ("varphi", "psi", "theta"),
}
"""Letters of a derivation's own, each with others in case the model has it."""


def bold(letter: str, argument: Expression | None = None, *indices: str) -> Symbol:
    """Return a vector by its letter: x(t), h_1."""
    return Symbol("vector", indices, argument, letter)


def calls_in(formula: Expression) -> frozenset[str]:
    """Return the functions that are called in a formula."""
    match formula:
        case Call(function, argument):
            return calls_in(argument) | {function}
        case Negation(inside):
            return calls_in(inside)
        case Sum(parts) | Product(parts):
            return frozenset().union(*map(calls_in, parts))
        case Quotient(left, right) | Power(left, right):
            return calls_in(left) | calls_in(right)
    return frozenset()


def interval(t: Name, start: Expression | None, end: Expression | None) -> Symbol:
    """Return start <= t < end; None where there is no bound on a side."""
    parts = tuple(part for part in (start, end) if part is not None)
    kind = "both" if len(parts) == 2 else "from" if start is not None else "until"
    return Symbol("interval", (kind,), t, parts=parts)


@dataclass(frozen=True)
class Writing:
    """The words of one driven model: how its elements, rows and inputs are written."""

    model: DrivenModel

    @property
    def t(self) -> Name:
        """The time."""
        return Name(self.model.time)

    def element(self, element: Scalar) -> Expression:
        """Return an element of the field as a formula."""
        return element_formula(self.model.field, element)

    def term(self, element: Scalar, factors: Sequence[Expression]) -> Expression:
        """Return element · factors; the element is not zero."""
        field = self.model.field
        if isinstance(field, ParameterField):
            return weighted_rational(field, element, factors, [])
        return weighted(field.surds(element), factors, [])

    def matrix(self, matrix: FieldMatrix) -> Side:
        """Return a matrix over the field; one of one row and one column is a formula."""
        field, rows = self.model.field, matrix.to_list()
        if isinstance(field, ParameterField):
            return unboxed(as_given(field, rows))
        return unboxed(surd_matrix([[field.surds(e) for e in row] for row in rows]))

    def combination(self, *parts: tuple[Iterable[Scalar], Iterable[Expression]]) -> Expression:
        """Return the sum of element · formula over pairs that are not zero."""
        terms = [
            self.term(element, [formula])
            for elements, formulas in parts
            for element, formula in zip(elements, formulas, strict=True)
            if element
        ]
        if not terms:
            return ZERO
        return opened(sum_of(terms))

    @property
    def states(self) -> tuple[Name, ...]:
        """The names of the states."""
        return tuple(map(Name, self.model.names))

    @property
    def inputs(self) -> tuple[Name, ...]:
        """What the columns of the input matrix are called: F, F', or u_2 for a formula."""
        model = self.model
        others = {*model.rows, *model.unknowns, model.time, *(i.name for i in model.inputs)}
        others |= set(getattr(model.field, "parameters", ()))
        taken = {printed_key(name) for name in others}
        return tuple(_label(given, k, taken) for k, given in enumerate(model.inputs, start=1))

    @property
    def names(self) -> set[str]:
        """All names of the model, and those of the columns of its inputs."""
        model = self.model
        names = {*model.rows, *model.unknowns, model.time, *(i.name for i in model.inputs)}
        if isinstance(model.stacked, ParametricModel):
            definitions = (*model.stacked.abbreviations, *model.stacked.restated)
            names |= {*model.stacked.field.parameters, *(d.name for d in definitions)}
        return names | {label.text for label in self.inputs}

    @property
    def _bases(self) -> set[str]:
        """The letters of all names of the model, without indices."""
        return {printed_key(name).split("_")[0] for name in self.names}

    @property
    def root(self) -> Name:
        """The variable of characteristic polynomials: lambda, unless the model uses it."""
        return root_variable(self.names)

    def letter(self, letter: str) -> str:
        """Return a letter, or another in its place that no name of the model begins with."""
        taken = self._bases
        return next((free for free in LETTERS[letter] if free not in taken), f"{letter}_d")

    @property
    def is_scalar(self) -> bool:
        """Whether there is one state: then its vectors are numbers."""
        return len(self.model.names) == 1

    def response(self, *indices: str) -> Symbol:
        """Return x(t), or x_p(t): the vector of the states, or the one state."""
        if self.is_scalar:
            return Symbol("scalar", indices, self.t, self.model.names[0])
        return bold("x", self.t, *indices)

    def jump(self, letter: str, place: int) -> Symbol:
        """Return h_j, or b_j for what impulses add."""
        own = self.letter(letter)
        if self.is_scalar:
            return Symbol("scalar", (str(place),), None, own)
        return bold(own, None, str(place))

    def exponential(self, later: Expression) -> Side:
        """Return e^(A later); with one state its exponential."""
        if not self.is_scalar:
            return Symbol("transition", argument=later, letter="A")
        rate = self.model.reduction.matrix.to_list()[0][0]
        return Call("exp", self.term(rate, [later])) if rate else ONE

    def function(self, name: str, order: int = 0) -> Symbol:
        """Return name(t)."""
        return Symbol("scalar", letter=name, argument=self.t, order=order)

    def instants(self) -> tuple[Expression, ...]:
        """Return the start and the timeline."""
        model = self.model
        return tuple(self.element(at) for at in (model.start, *model.timeline))

    def within(self, place: int) -> Symbol:
        """Return the interval that begins at an instant, by its place."""
        instants = self.instants()
        end = instants[place + 1] if place + 1 < len(instants) else None
        return interval(self.t, instants[place], end)

    def column(self, entries: Iterable[Expression]) -> Side:
        """Return a column of formulas; one formula stands by itself."""
        return unboxed(Matrix(tuple((entry,) for entry in entries)))


def unboxed(matrix: Matrix) -> Side:
    """Return the entry of a matrix of one row and one column, any other matrix as it is."""
    if len(matrix.rows) == 1 == len(matrix.rows[0]) and matrix.front is None:
        return matrix.rows[0][0]
    return matrix


def _label(given: Input, number: int, taken: set[str]) -> Name:
    if isinstance(given.formula, Name):
        return given.formula
    for stem in ("u", "q", "f", "r"):
        name = f"{stem}_{number}"
        if printed_key(name) not in taken:
            return Name(name)
    return Name(f"u_in_{number}")
