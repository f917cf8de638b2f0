"""What follows from a model: spectrum, canonical form, e^(At), the solution and the outputs."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from itertools import accumulate

from flint import arb, arb_mat

from closedform.algebra.canonical import JordanForm, jordan_form
from closedform.algebra.enclosure import ball_of, enclosed_to
from closedform.algebra.exponential import (
    ExponentialMatrix,
    ModalTerm,
    exponential_by_resolvent,
)
from closedform.algebra.field import BaseField, FieldMatrix, base_field
from closedform.algebra.root_matrix import RootMatrix
from closedform.algebra.spectrum import Factor, Spectrum, spectrum_of
from closedform.algebra.surds import SurdSum
from closedform.model.model import Model
from closedform.notation.expression import Expression, Name, operations
from closedform.notation.plain import plain
from closedform.notation.shown import FormulaColumn, FormulaMatrix
from closedform.notation.terms import surd_formula
from closedform.response.by_mode import ByMode, ModePart
from closedform.response.closed_form import closed_form, fronted_matrix
from closedform.response.modes import Contribution, Mode, contributions, modes_of
from closedform.response.names import NameBook, NamedConstant, Radical, ResiduePart

__all__ = ["LARGEST_WRITTEN_OUT", "ClosedForms", "Response", "respond", "written_beside"]

LARGEST_WRITTEN_OUT = 8
"""Up to this many states e^(At) is written entry by entry; beyond, by its spectral form."""


@dataclass(frozen=True)
class ClosedForms:
    """The formulas of a response, and the constants that they name.

    `modes` and `impulses` follow the factors of the spectrum; an impulse is
    g(t) = sum over the roots of e^(lambda t)/p'(lambda), given when a factor has degree 3 or more.
    `transition` has n rows of n formulas, or is empty beyond `LARGEST_WRITTEN_OUT` states;
    `fronted_transition` is the same with what all entries share in front.  `further` are the
    entries of the response's further functions, row by row, `by_mode` those that are to be
    taken apart by modes.
    """

    modes: tuple[tuple[Mode, ...], ...]
    solution: tuple[Expression, ...]
    outputs: tuple[Expression, ...]
    transition: tuple[tuple[Expression, ...], ...]
    fronted_transition: tuple[Expression | None, tuple[tuple[Expression, ...], ...]]
    impulses: tuple[Expression | None, ...]
    constants: tuple[NamedConstant, ...]
    further: tuple[tuple[Expression, ...], ...] = ()
    by_mode: ByMode = ()

    @property
    def names_amounts(self) -> bool:
        """Whether e^(At) needs names for amounts: then it is printed through its residues."""
        return any(isinstance(c.definition, ResiduePart) for c in self.constants)

    @property
    def operations(self) -> int:
        """What there is to read: the operations in all formulas and written definitions."""
        definitions = (c.definition for c in self.constants)
        written = [d.formula for d in definitions if isinstance(d, Radical)]
        rows = (*self.transition, self.solution, self.outputs, *self.further, written)
        return sum(operations(formula) for row in rows for formula in row)


@dataclass(frozen=True, repr=False)
class Response:
    """The exact response of a model.

    `transition`, `solution` and `outputs` are its formulas; `transition_at` and
    `solution_at` give certified numbers.

    Shapes:  `exponential` is e^(At), n x n; `state` is x(t), n x 1; `output` is y(t), or
    None when the model asks for no outputs.  `further` are other functions with the same
    exponentials that were asked for, `parted` those to be written mode by mode.
    """

    model: Model
    field: BaseField
    matrix: FieldMatrix
    initial: FieldMatrix
    spectrum: Spectrum
    jordan: JordanForm
    exponential: ExponentialMatrix
    state: ExponentialMatrix
    output: ExponentialMatrix | None
    further: ExponentialMatrix | None = None
    parted: ExponentialMatrix | None = None

    @cached_property
    def closed_forms(self) -> ClosedForms:
        """Every formula of the response, written out the short way."""
        return written_out(self)

    @property
    def has_chains_in_print(self) -> bool:
        """Whether eigenvectors, P, J and P^(-1) are printed: small, with eigenvalues in surds."""
        small = len(self.model.states) <= LARGEST_WRITTEN_OUT
        return small and all(factor.has_short_roots for factor in self.spectrum.factors)

    @property
    def transition(self) -> FormulaMatrix:
        """The entries of e^(At) as formulas; empty beyond `LARGEST_WRITTEN_OUT` states."""
        return FormulaMatrix(self.closed_forms.transition)

    @property
    def solution(self) -> FormulaColumn:
        """x(t) as one formula per state."""
        return FormulaColumn(self.closed_forms.solution)

    @property
    def outputs(self) -> FormulaColumn:
        """One formula per output."""
        return FormulaColumn(self.closed_forms.outputs)

    def __repr__(self) -> str:
        return f"<Response of {self.model.title!r}, {len(self.model.states)} states>"

    def __str__(self) -> str:
        """Return the solution, a line for each state."""
        t = self.model.time
        pairs = zip(self.model.states, self.solution, strict=True)
        return "\n".join(f"{state}({t}) = {plain(formula)}" for state, formula in pairs)

    def _repr_latex_(self) -> str:
        return self.solution._repr_latex_()

    def transition_at(self, t: Fraction, digits: int = 30) -> list[list[arb]]:
        """Return balls for the entries of e^(At) at an instant, settled to `digits` digits."""
        return _rows(enclosed_to(lambda: self.exponential.enclosure(ball_of(t)), digits))

    def solution_at(self, t: Fraction, digits: int = 30) -> list[arb]:
        """Return balls for x(t) at an instant, settled to `digits` digits."""
        balls = enclosed_to(lambda: self.state.enclosure(ball_of(t)), digits)
        return [row[0] for row in _rows(balls)]


def respond(
    model: Model,
    *,
    further: Callable[[ExponentialMatrix], ExponentialMatrix] | None = None,
    parted: Callable[[ExponentialMatrix], ExponentialMatrix | None] | None = None,
    field: BaseField | None = None,
) -> Response:
    """Return the exact response of a model: e^(At), x(t) and the outputs.

    `further` makes other functions of e^(At), to be written with the same names, `parted`
    some to be written mode by mode.  `field` is one that holds all numbers of the model, the
    smallest such if it is not given.

    Shapes:  n states give an n x n transition matrix and n formulas of the solution.
    Units:   those of the model; time in the unit of the rates' inverse.
    Exact:   no floating-point number takes part.  Nothing is proved yet: see `verify`.

    >>> from closedform.model.building import system
    >>> response = respond(system([[0, 1], [-4, 0]], initial=[1, 0]))
    >>> print(response)
    x1(t) = cos(2*t)
    x2(t) = -2*sin(2*t)
    """
    if field is None:
        field = base_field(
            number
            for row in (*model.matrix, model.initial, *(o.weights for o in model.outputs))
            for number in row
        )
    matrix = field.matrix([[field.scalar(entry) for entry in row] for row in model.matrix])
    initial = field.matrix([[field.scalar(entry)] for entry in model.initial])
    spectrum = spectrum_of(field, matrix)
    exponential = exponential_by_resolvent(field, matrix, spectrum)
    state = exponential.times(initial)
    output = None
    if model.outputs:
        weights = [[field.scalar(w) for w in output.weights] for output in model.outputs]
        output = state.after(field.matrix(weights))
    jordan = jordan_form(field, matrix, spectrum)
    others = further(exponential) if further is not None else None
    apart = parted(exponential) if parted is not None else None
    return Response(
        model, field, matrix, initial, spectrum, jordan, exponential, state, output, others, apart
    )


def written_out(response: Response) -> ClosedForms:
    """Return the formulas of a response, surd frequencies named where that is shorter."""
    unnamed = _written(response, name_surds=False)
    if not any(
        mode.kind != "real"
        and isinstance(mode.frequency, SurdSum)
        and not mode.frequency.is_rational
        for modes in unnamed.modes
        for mode in modes
    ):
        return unnamed
    return min(unnamed, _written(response, name_surds=True), key=lambda forms: forms.operations)


def _written(response: Response, *, name_surds: bool) -> ClosedForms:
    """Names are given in the order of printing: roots, solution, outputs, g, e^(At)."""
    model, factors = response.model, response.spectrum.factors
    book = NameBook(_taken(model))
    first = accumulate((f.degree for f in factors), initial=1)
    modes = tuple(
        modes_of(f, book, first=number, name_surds=name_surds)
        for f, number in zip(factors, first, strict=False)
    )

    def parts(function: ExponentialMatrix, row: int, column: int) -> list[Contribution]:
        return _parts(modes, function, row, column, book)

    def column(function: ExponentialMatrix | None) -> tuple[Expression, ...]:
        if function is None:
            return ()
        rows = range(function.shape[0])
        return tuple(closed_form(parts(function, i, 0), model.time) for i in rows)

    n = len(model.states)
    if n > LARGEST_WRITTEN_OUT:  # then the outputs are printed, and named first
        outputs = column(response.output)
        solution = column(response.state)
    else:
        solution = column(response.state)
        outputs = column(response.output)
    further: tuple[tuple[Expression, ...], ...] = ()
    if response.further is not None:
        rows, columns = map(range, response.further.shape)
        further = tuple(
            tuple(closed_form(parts(response.further, i, k), model.time) for k in columns)
            for i in rows
        )
    by_mode: ByMode = ()
    if response.parted is not None:
        rows, columns = map(range, response.parted.shape)
        by_mode = tuple(
            tuple(_by_mode(parts(response.parted, i, k)) for k in columns) for i in rows
        )
    needs_impulses = not all(factor.has_short_roots for factor in factors)
    impulses = tuple(
        _impulse(response.field, factor, modes_of_factor, book, model.time)
        if needs_impulses
        else None
        for factor, modes_of_factor in zip(factors, modes, strict=True)
    )
    transition: tuple[tuple[Expression, ...], ...] = ()
    fronted: tuple[Expression | None, tuple[tuple[Expression, ...], ...]] = (None, ())
    if n <= LARGEST_WRITTEN_OUT:
        entries = [[parts(response.exponential, i, k) for k in range(n)] for i in range(n)]
        transition = tuple(tuple(closed_form(e, model.time) for e in row) for row in entries)
        fronted = fronted_matrix(entries, transition, model.time)
    return ClosedForms(
        modes, solution, outputs, transition, fronted, impulses, book.constants(), further, by_mode
    )


def written_beside(
    response: Response, function: ExponentialMatrix
) -> tuple[tuple[Expression, ...], ...] | None:
    """Return the formulas of another function, with the names that a response has for its own.

    None if they need more.
    """
    model, forms = response.model, response.closed_forms
    book = NameBook.of(_taken(model), forms.constants)
    rows, columns = map(range, function.shape)
    found = tuple(
        tuple(closed_form(_parts(forms.modes, function, i, k, book), model.time) for k in columns)
        for i in rows
    )
    return found if book.constants() == forms.constants else None


def _taken(model: Model) -> frozenset[str]:
    outputs = (output.name for output in model.outputs)
    return frozenset({*model.states, *outputs, model.time, *model.reserved})


def _parts(
    modes: Sequence[tuple[Mode, ...]],
    function: ExponentialMatrix,
    row: int,
    column: int,
    book: NameBook,
) -> list[Contribution]:
    return [
        contribution
        for modes_of_factor, term in zip(modes, function.terms, strict=True)
        for contribution in contributions(modes_of_factor, term, row, column, book)
    ]


def _by_mode(contributions: Sequence[Contribution]) -> tuple[ModePart, ...]:
    return tuple(
        ModePart(
            _number_formula(c.mode.rate),
            c.mode.kind,
            None if c.mode.frequency is None else _number_formula(c.mode.frequency),
            len(c.amounts) - 1,
            c,
        )
        for c in contributions
    )


def _number_formula(value: SurdSum | str) -> Expression:
    return Name(value) if isinstance(value, str) else surd_formula(value)


def _impulse(
    field: BaseField, factor: Factor, modes: tuple[Mode, ...], book: NameBook, time: str
) -> Expression:
    one = RootMatrix.constant(field, factor.p, field.identity(1))
    term = ModalTerm(factor, (one,))
    return closed_form(contributions(modes, term, 0, 0, book), time)


def _rows(balls: arb_mat) -> list[list[arb]]:
    return [[balls[i, k] for k in range(balls.ncols())] for i in range(balls.nrows())]
