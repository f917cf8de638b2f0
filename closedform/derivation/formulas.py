"""Exact objects as the formulas and symbols of which statements are made."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from fractions import Fraction
from math import lcm

from closedform.algebra.field import BaseField, Polynomial
from closedform.algebra.surds import SurdSum
from closedform.derivation.step import IMAGINARY_UNIT, Matrix, OwnLetters, Side, Symbol
from closedform.notation.expression import (
    ONE,
    ZERO,
    Expression,
    Name,
    Number,
    Sum,
    operations,
    power_of,
)
from closedform.notation.jets import jet_of
from closedform.notation.latex.names import printed_key
from closedform.notation.plain import plain
from closedform.notation.terms import sum_of, surd_formula, weighted
from closedform.response.modes import Mode
from closedform.response.response import Response

__all__ = [
    "ONE",
    "ZERO",
    "A",
    "chain_vector",
    "column",
    "complex_formula",
    "eigenvalue_formula",
    "eigenvalue_symbol",
    "frequency_formula",
    "in_order",
    "letters_beside",
    "names_of",
    "number_formula",
    "polynomial_formula",
    "root_of",
    "root_variable",
    "surd_matrix",
]

A = Symbol("matrix", letter="A")
ROOTS = ("lambda", "s", "z", "xi")
"""OwnLetters for the variable of a characteristic polynomial, the usual one first."""


def letters_beside(names: Iterable[str], root: Name) -> OwnLetters:
    """Return the letters of a document of a model with these names.

    With a current i the imaginary unit is j, as electrical engineers have it, if that is free.
    """
    letters = {printed_key(jet_of(name)[0]) for name in names}
    if "i" not in letters:
        return OwnLetters(root)
    index = next((letter for letter in "mnl" if letter not in letters), "i")
    return OwnLetters(root, "i" if "j" in letters else "j", index, Name("i"))


def root_variable(names: Iterable[str]) -> Name:
    """Return the variable of the characteristic polynomial: lambda, unless a name begins so."""
    bases = {printed_key(name).split("_")[0] for name in names}
    return Name(next((letter for letter in ROOTS if letter not in bases), "xi_r"))


def root_of(response: Response) -> Name:
    """Return the variable of the characteristic polynomial in a derivation without parameters."""
    return root_variable(names_of(response))


def names_of(response: Response) -> tuple[str, ...]:
    """Return every name of a model without parameters."""
    model = response.model
    outputs = (output.name for output in model.outputs)
    return (*model.states, model.time, *outputs, *model.reserved)


def number_formula(value: SurdSum | str) -> Expression:
    """Return a number, or the name of one, as a formula."""
    return Name(value) if isinstance(value, str) else surd_formula(value)


def polynomial_formula(field: BaseField, polynomial: Polynomial, variable: Name) -> Expression:
    """Return a polynomial over the field, highest power first."""
    degree = max(int(polynomial.degree()), 0)
    terms = []
    for power, element in zip(range(degree, -1, -1), polynomial.to_list(), strict=True):
        value = field.surds(element)
        if not value.is_zero:
            terms.append(weighted(value, [power_of(variable, power)], []))
    return in_order(terms)


def in_order(terms: Sequence[Expression]) -> Expression:
    """Return the sum of terms that keep their order, whatever the signs."""
    if len(terms) > 1:
        return Sum(tuple(terms))
    return sum_of(terms)


def frequency_formula(value: SurdSum, mode: Mode, unit: Sequence[Expression] = ()) -> Expression:
    """Return value · frequency · unit as a formula, for a value that is not zero.

    A named frequency w may also divide, as value · w^2/w, where that is shorter.
    """
    if isinstance(mode.frequency, SurdSum):
        return weighted(value * mode.frequency, unit, [])
    name = Name(str(mode.frequency))
    above = weighted(value, [name, *unit], [])
    if mode.factor.roots.form != "quadratic":
        return above
    field, roots = mode.factor.roots.field, mode.factor.roots
    square = field.surds(-roots.discriminant if mode.kind == "circular" else roots.discriminant)
    below = weighted(value * square, unit, [name])
    return min((above, below), key=lambda form: (operations(form), _figures(form)))


def _figures(formula: Expression) -> int:
    return sum(character.isdigit() for character in plain(formula))


def complex_formula(real: SurdSum, turn: SurdSum, mode: Mode) -> Expression:
    """Return real + i · turn · frequency as a formula, the real part first."""
    terms = [] if real.is_zero else [surd_formula(real)]
    if not turn.is_zero:
        terms.append(frequency_formula(turn, mode, [IMAGINARY_UNIT]))
    return in_order(terms)


def eigenvalue_formula(mode: Mode, sign: int = 1) -> Expression:
    """Return the eigenvalue of a mode: a, a ± b, or a ± i w, with the sign asked for."""
    one = SurdSum.rational(sign)
    if mode.kind == "real":
        return number_formula(mode.rate)
    if isinstance(mode.rate, str):
        frequency = Name(str(mode.frequency))
        return in_order([Name(mode.rate), weighted(one, [frequency, IMAGINARY_UNIT], [])])
    if mode.kind == "circular":
        return complex_formula(mode.rate, one, mode)
    if isinstance(mode.frequency, SurdSum):
        return surd_formula(mode.rate + one * mode.frequency)
    parts = [] if mode.rate.is_zero else [surd_formula(mode.rate)]
    return in_order([*parts, frequency_formula(one, mode)])


def eigenvalue_symbol(root: Name, numbers: Sequence[int]) -> Symbol:
    """Return lambda_k, or lambda_(k,k+1) for a pair."""
    return Symbol("scalar", letter=root.text, indices=(",".join(map(str, numbers)),))


def column(entries: Sequence[Expression]) -> Matrix:
    """Return a column of formulas."""
    return Matrix(tuple((entry,) for entry in entries))


def surd_matrix(rows: Sequence[Sequence[SurdSum]]) -> Matrix:
    """Return a matrix of numbers, with a common denominator in front where that is shorter."""
    whole = _formulas(rows)
    common = lcm(*(c.denominator for row in rows for value in row for _, c in value.terms))
    if common == 1 or len(rows) == 1:
        return Matrix(whole)
    scaled = _formulas([[value * SurdSum.rational(common) for value in row] for row in rows])
    if _operations(scaled) + 2 > _operations(whole):
        return Matrix(whole)
    return Matrix(scaled, front=Number(Fraction(1, common)))


def _operations(rows: Sequence[Sequence[Expression]]) -> int:
    return sum(operations(entry) for row in rows for entry in row)


def _formulas(rows: Sequence[Sequence[SurdSum]]) -> tuple[tuple[Expression, ...], ...]:
    return tuple(tuple(map(surd_formula, row)) for row in rows)


def chain_vector(number: int | str) -> Side:
    """Return the symbol v_number."""
    return Symbol("vector", letter="v", indices=(str(number),))
