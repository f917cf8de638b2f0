"""A particular response to waves: what the eigenvalues of the generator contribute.

With e^(Mt) the exponential of the stacked matrix M = [[A, B R], [0, S]] and w a start of the
generator, the terms of e^(Mt) (0, w) that belong to eigenvalues of S make a function (y, R w)
with y' = A y + B u: each spectral component of e^(Mt) solves the stacked equation by itself.
No eigenvalue has to differ from any other, so that resonance needs no rule of its own.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from math import factorial

from closedform.algebra.exponential import ExponentialMatrix, ModalTerm
from closedform.algebra.field import BaseField, FieldMatrix, Polynomial, Scalar
from closedform.algebra.parametric_spectrum import vanishes_under
from closedform.algebra.root_matrix import RootMatrix
from closedform.algebra.waves import Constant, ConstantColumns, gathered_columns
from closedform.model.driven.generator import Tone
from closedform.model.driven.model import DrivenModel

__all__ = [
    "Drive",
    "at_instant",
    "beside",
    "combined",
    "constants_of",
    "drive_of",
    "of_input",
    "rebased",
    "selected",
]


@dataclass(frozen=True)
class Drive:
    """The tones of the inputs over a field, perhaps where a relation of parameters holds."""

    field: BaseField
    tones: tuple[Tone, ...]
    relation: Scalar | None = None

    def tone_of(self, p: Polynomial) -> Tone | None:
        """Return the tone whose roots are those of an irreducible polynomial, if there is one."""
        return next((tone for tone in self.tones if self._divides(p, tone)), None)

    def _divides(self, p: Polynomial, tone: Tone) -> bool:
        one = self.field.domain.one
        factor = self.field.polynomial([one, -tone.rate])
        if tone.frequency:
            factor = factor**2 + self.field.polynomial([tone.frequency**2])
        if p.degree() > factor.degree():
            return False
        return all(vanishes_under(c, self.relation) for c in factor.rem(p).to_list())


def drive_of(
    model: DrivenModel, put: Callable[[Scalar], Scalar], relation: Scalar | None = None
) -> Drive:
    """Return the tones of a model, with the equations of a branch put in."""
    tones = model.generator.tones if model.generator is not None else ()
    return Drive(
        model.field,
        tuple(
            Tone(put(tone.rate), put(tone.frequency), tone.size)
            for of_one in tones
            for tone in of_one
        ),
        relation,
    )


def of_input(drive: Drive, function: ExponentialMatrix) -> ExponentialMatrix:
    """Return the terms of a function that belong to eigenvalues of the generator."""
    return selected(function, [drive.tone_of(term.factor.p) is not None for term in function.terms])


def selected(function: ExponentialMatrix, keep: Sequence[bool]) -> ExponentialMatrix:
    """Return a function with the terms that are not kept made zero: the factors stay in place."""
    zero = function.field.domain.zero
    gone = function.field.polynomial([zero])
    return ExponentialMatrix(
        function.field,
        tuple(
            term if kept else ModalTerm(term.factor, tuple(r.scaled(gone) for r in term.residues))
            for term, kept in zip(function.terms, keep, strict=True)
        ),
    )


def combined(parts: Iterable[tuple[int | Scalar, ExponentialMatrix]]) -> ExponentialMatrix:
    """Return a sum of weighted functions of the same factors and shape (at least one)."""
    weighted = [(weight, function) for weight, function in parts]
    field, first = weighted[0][1].field, weighted[0][1]
    terms = []
    for place, term in enumerate(first.terms):
        residues = []
        for j in range(len(term.residues)):
            total = None
            for weight, function in weighted:
                own = function.terms[place].residues[j]
                scale = field.polynomial([field.domain.convert(weight)])
                scaled = own if weight == 1 else own.scaled(scale)
                total = scaled if total is None else total + scaled
            if total is None:
                raise ValueError("a sum of no functions has no shape")
            residues.append(total)
        terms.append(ModalTerm(term.factor, tuple(residues)))
    return ExponentialMatrix(field, tuple(terms))


def beside(functions: Sequence[ExponentialMatrix]) -> ExponentialMatrix:
    """Return the matrix of the columns of functions with the same factors, side by side."""
    field, widths = functions[0].field, [f.shape[1] for f in functions]
    c, first, parts = sum(widths), 0, []
    for function, width in zip(functions, widths, strict=True):
        place = [[int(k == first + i) for k in range(c)] for i in range(width)]
        parts.append(function.times(field.matrix([list(map(field.scalar, row)) for row in place])))
        first += width
    return combined((1, part) for part in parts)


def at_instant(drive: Drive, function: ExponentialMatrix, d: Scalar) -> ConstantColumns:
    """Return the value at d of a column of functions of the generator's eigenvalues.

    At a pair of roots a ± iw of p it is e^(ad) [R_1 cos(wd) + (R_0 + a R_1) sin(wd)/w],
    with R = sum over j of R_j d^j/j! = R_0 + R_1 lambda; at one root e^(ad) R.
    """
    field = drive.field
    zero = field.domain.zero
    parts: list[tuple[Constant, FieldMatrix]] = []
    for term in function.terms:
        values = _polynomial_at(field, term, d)
        if all(m.is_zero_matrix for m in values):
            continue
        tone = drive.tone_of(term.factor.p)
        if tone is None:
            raise ValueError("only terms of the generator have values at an instant")
        growth = tone.rate * d
        if term.factor.degree == 1:
            parts.append((Constant(growth, "one", zero), values[0]))
            continue
        low, high = values
        angle = tone.frequency * d
        parts += _circular(field, growth, "cos", angle, high)
        sine = (low + high * tone.rate) * (field.domain.one / tone.frequency)
        parts += _circular(field, growth, "sin", angle, sine)
    return gathered_columns(parts)


def constants_of(function: ExponentialMatrix, *, kept: bool = True) -> ExponentialMatrix:
    """Return the terms of a function that belong to the eigenvalue 0; the others if not `kept`."""
    return selected(function, [_is_zero_root(term) == kept for term in function.terms])


def rebased(
    field: BaseField, parts: Sequence[tuple[Scalar, ExponentialMatrix]], at: Scalar
) -> list[tuple[Scalar, ExponentialMatrix]]:
    """Return the polynomials in functions of t - origin, counted from as few origins as can be.

    Constants count from `at`, as they may from anywhere.  Polynomials of one origin keep it;
    those of several are added up, counted from where they have the fewest coefficients.
    """
    own = [(origin, constants_of(function)) for origin, function in parts]
    moving = [(origin, f) for origin, f in own if _moves(f)]
    still = [f for _, f in own if not _moves(f)]
    found = [(at, combined((1, f) for f in still))] if still else []
    if len({origin for origin, _ in moving}) < 2:
        return [*found, *moving]
    bases = dict.fromkeys((field.domain.zero, *(origin for origin, _ in moving)))
    totals = [
        (base, combined((1, _shifted(f, base - origin)) for origin, f in moving)) for base in bases
    ]
    base, total = min(totals, key=lambda pair: _coefficients(pair[1]))
    return [*found, (base if _moves(total) else at, total)]


def _moves(function: ExponentialMatrix) -> bool:
    """Whether a function of the eigenvalue 0 is not constant."""
    return any(not residue.is_zero for term in function.terms for residue in term.residues[1:])


def _coefficients(function: ExponentialMatrix) -> int:
    """The number of coefficients that are not zero."""
    return sum(
        bool(element)
        for term in function.terms
        for residue in term.residues
        for matrix in residue.coefficients
        for row in matrix.to_list()
        for element in row
    )


def _is_zero_root(term: ModalTerm) -> bool:
    return term.factor.degree == 1 and not any(term.factor.p.to_list()[1:])


def _shifted(function: ExponentialMatrix, d: Scalar) -> ExponentialMatrix:
    """Return F(t + d) of a function whose terms all belong to the eigenvalue 0."""
    field = function.field
    terms = []
    for term in function.terms:
        size = len(term.residues)
        residues = []
        for j in range(size):
            total = term.residues[j]
            for i in range(1, size - j):
                weight = d**i / field.domain.convert(factorial(i))
                total = total + term.residues[j + i].scaled(field.polynomial([weight]))
            residues.append(total)
        terms.append(ModalTerm(term.factor, tuple(residues)))
    return ExponentialMatrix(field, tuple(terms))


def _circular(
    field: BaseField, growth: Scalar, kernel: str, angle: Scalar, column: FieldMatrix
) -> list[tuple[Constant, FieldMatrix]]:
    """A column times e^growth cos(angle) or sin(angle), exact where the angle is 0 or k pi/2."""
    zero = field.domain.zero
    quarters = _quarter_turns(field, angle)
    if quarters is not None:
        turn = quarters % 4
        weight = ((1, 0, -1, 0) if kernel == "cos" else (0, 1, 0, -1))[turn]
        return [(Constant(growth, "one", zero), column * field.domain.convert(weight))]
    if kernel == "cos":
        return [(Constant(growth, "cos", angle), column)]
    return [(Constant(growth, "sin", angle), column)]


def _quarter_turns(field: BaseField, angle: Scalar) -> int | None:
    """The number of right angles in an angle, if it is whole: pi is a name of the field's."""
    if not angle:
        return 0
    names: Sequence[str] = getattr(field, "parameters", ())
    if "pi" not in names:
        return None
    quarter = field.symbol("pi") / 2  # type: ignore[attr-defined]
    turns = field.constant(angle / quarter)  # type: ignore[attr-defined]
    return None if turns is None or turns.denominator != 1 else int(turns)


def _polynomial_at(field: BaseField, term: ModalTerm, d: Scalar) -> list[FieldMatrix]:
    total: RootMatrix = term.residues[0]
    for j, residue in enumerate(term.residues[1:], start=1):
        weight = d**j / field.domain.convert(factorial(j))
        total = total + residue.scaled(field.polynomial([weight]))
    return list(total.coefficients)
