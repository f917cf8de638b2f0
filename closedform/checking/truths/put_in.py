"""A truth with numbers in the place of some of its parameters."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import replace
from fractions import Fraction
from typing import TypeVar

from closedform.checking.truth import Eigenvalue, Interval, Piece, Truth
from closedform.checking.truths.errors import NoValueError
from closedform.checking.truths.formulas import element_written
from closedform.checking.truths.in_case import CaseTruth
from closedform.checking.truths.numbers import number_of
from closedform.notation.written.tree import Symbol, Written, changed

__all__ = ["substituted"]

Key = TypeVar("Key")
Put = Callable[[Written], Written]


def substituted(truth: Truth, names: frozenset[str]) -> Truth:
    """Return a truth with the values of the model file put in for the named parameters.

    The others stay as they are; names that are no parameters count for nothing.  Signs and
    samples are those of what is left; with a square root among the values signs are not told,
    and the only sample is that of the model file, if it is rational.

    Raises:  NoValueError if the case has no values of the model file.
    """
    asked = [name for name in truth.parameters if name in names]
    if not asked:
        return truth
    if truth.values is None:
        raise NoValueError(tuple(asked), truth.condition)
    values, left = truth.values, tuple(n for n in truth.parameters if n not in names)

    def put(tree: Written) -> Written:
        def change(node: Written) -> Written | None:
            return values[node.name] if isinstance(node, Symbol) and node.name in asked else None

        return changed(tree, change)

    whole = _narrowed(_put_everywhere(truth, put), asked, left)
    found = whole.enclosures_at
    given = {name: values[name] for name in asked}
    return replace(
        whole,
        parameters=left,
        values={name: values[name] for name in left},
        enclosures_at=lambda others: found({**given, **others}),
    )


def _put_everywhere(truth: Truth, put: Put) -> Truth:
    return replace(
        truth,
        start=put(truth.start),
        matrix=_rows(truth.matrix, put),
        initial=None if truth.initial is None else tuple(map(put, truth.initial)),
        characteristic=put(truth.characteristic),
        eigenvalues=tuple(_eigenvalue(e, put) for e in truth.eigenvalues),
        transition=None if truth.transition is None else _rows(truth.transition, put),
        solution=_pieces(truth.solution, put),
        drive=tuple(tuple(_piece(piece, put) for piece in row) for row in truth.drive),
        particular=_pieces(truth.particular, put),
        steady={name: put(tree) for name, tree in truth.steady.items()},
        quantities=tuple((n, None if f is None else put(f)) for n, f in truth.quantities),
        inputs=_pieces(truth.inputs, put),
    )


def _rows(rows: tuple[tuple[Written, ...], ...], put: Put) -> tuple[tuple[Written, ...], ...]:
    return tuple(tuple(map(put, row)) for row in rows)


def _eigenvalue(eigenvalue: Eigenvalue, put: Put) -> Eigenvalue:
    value = eigenvalue.value
    return eigenvalue if value is None else replace(eigenvalue, value=put(value))


def _piece(piece: Piece, put: Put) -> Piece:
    start, end = piece.between
    between: Interval = (put(start), None if end is None else put(end))
    return Piece(between, put(piece.formula))


def _pieces(functions: Mapping[Key, tuple[Piece, ...]], put: Put) -> dict[Key, tuple[Piece, ...]]:
    return {name: tuple(_piece(p, put) for p in pieces) for name, pieces in functions.items()}


def _narrowed(truth: Truth, asked: list[str], left: tuple[str, ...]) -> Truth:
    """The truth with the signs, equations and samples of what is left of its region."""
    values = {name: number_of(value) for name, value in (truth.values or {}).items()}
    region = truth.region if isinstance(truth, CaseTruth) else None
    rational = all(values[name].is_rational for name in asked)
    if not isinstance(truth, CaseTruth) or region is None or not rational:
        kept = {name: (truth.values or {})[name] for name in left}
        usable = kept and all(values[name].is_rational for name in left)
        samples = (kept,) if usable else ()
        return replace(truth, sign=lambda _: None, samples=samples, equations=())
    numbers: dict[str, Fraction] = {name: values[name].as_fraction() for name in asked}
    narrow, field = region.at(numbers), region.field
    return replace(
        truth,
        region=narrow,
        sign=narrow.sign_among(left),
        samples=tuple(
            {name: element_written(field, value) for name, value in point.items()}
            for point in narrow.points(left)
        ),
        equations=narrow.equations,
    )
