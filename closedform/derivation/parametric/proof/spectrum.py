"""Characteristic polynomial, eigenvalues, and what is said of the structure of A."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import Any

from flint import acb, acb_mat, acb_poly

from closedform.derivation.parametric.proof.ground import (
    Ground,
    Said,
    coefficients_at,
    unknown_in,
    variable_of,
)
from closedform.derivation.parametric.proof.model import comparison, formula_of, matrix_side
from closedform.derivation.proof.evaluation import ball_at, unit
from closedform.derivation.proof.finding import (
    Comparison,
    Fault,
    Finding,
    agreeing,
    decimal_of,
    number_in,
    undecided,
    whether,
)
from closedform.derivation.step import Side, Symbol
from closedform.notation.expression import ZERO, Name

__all__ = [
    "amount",
    "block_of_square",
    "case_row",
    "definition",
    "divisor",
    "eigenvalue",
    "factor_row",
    "known_zeros",
    "named_zeros",
    "polynomial",
    "product_of_entries",
    "repeated_row",
    "square",
    "sum_of_sizes",
    "zero",
]

_ELSEWHERE = (acb(11, 2) / 32, acb(-5, 13) / 16)
"""Two numbers that no eigenvalue equals by design."""


def polynomial(ground: Ground, said: Said) -> Iterator[Finding]:
    """p(lambda), in each of the forms that are printed."""
    first = said.statement.sides[0]
    yield from whether(
        isinstance(first, Symbol) and first.kind == "characteristic polynomial",
        said.statement.says,
        "it is of something else",
    )
    for side in said.statement.sides[1:]:
        if isinstance(side, Symbol):
            yield from whether(side.kind == "determinant", said.statement.says, "no determinant")
            continue
        for z in _ELSEWHERE:
            printed = ball_at(formula_of(side), ground.names | {variable_of(said).text: z})
            expected = (z * unit(ground.matrix.nrows()) - ground.matrix).det()
            yield Comparison(said.statement.says, printed, expected)


def eigenvalue(ground: Ground, said: Said) -> Iterator[Finding]:
    """lambda_k = value, or a pair of values: zeros of det(lambda I - A)."""
    yield from _are_zeros(ground, said.statement.says, said.statement.sides[1])


def zero(ground: Ground, said: Said) -> Iterator[Finding]:
    """A value or a pair of values alone: zeros of det(lambda I - A)."""
    yield from _are_zeros(ground, "eigenvalue", said.statement.sides[0])


def _are_zeros(ground: Ground, place: str, side: Side) -> Iterator[Finding]:
    for z in ground.values(side):
        yield ground.vanishing(place, ground.characteristic(z))


def divisor(ground: Ground, said: Said) -> Iterator[Finding]:
    """A polynomial = 0 in lambda that divides the characteristic polynomial."""
    yield from _equals_zero(said)
    formula = formula_of(said.statement.sides[0])
    variable = unknown_in(formula, ground.names)
    factor = coefficients_at(formula, variable, ground.names)
    yield from _divides(ground, factor, said.statement.says)


def _equals_zero(said: Said) -> Iterator[Finding]:
    yield from whether(said.statement.sides[1:] == (ZERO,), said.statement.says, "it is not zero")


def _divides(ground: Ground, factor: acb_poly, place: str) -> Iterator[Finding]:
    rest = [ground.characteristic[k] for k in range(ground.characteristic.length())]
    degree = factor.length() - 1
    while len(rest) > degree:
        lead = rest[-1] / factor[degree]
        for k in range(degree + 1):
            rest[len(rest) - 1 - degree + k] -= lead * factor[k]
        rest.pop()
    for value in rest:
        yield ground.vanishing(place, value)


def definition(ground: Ground, said: Said) -> Iterator[Finding]:
    """A name for a real number; which one is proved where the name is used."""
    name = said.statement.sides[0]
    if not isinstance(name, Name):
        raise TypeError(f"{name} is no name")
    value = acb(ground.names[name.text])
    yield from whether(bool(value.imag.contains(0)), name.text, "it is not real")


def named_zeros(ground: Ground, said: Said) -> Iterator[Finding]:
    """A polynomial whose zeros go by names: these exist, and are told apart."""
    yield from _equals_zero(said)
    for name in said.row["names"]:
        if not ground.names[name.text].is_finite():
            yield undecided(f"{name.text} of case {ground.case.number + 1}")
    names = [n.text for n in said.row["names"]]
    values = [ground.names[name] for name in names]
    for k, value in enumerate(values):
        if any(value.overlaps(other) for other in values[:k]):
            yield undecided(f"{names[k]} of case {ground.case.number + 1}")


def known_zeros(ground: Ground, said: Said) -> Iterator[Finding]:
    """A polynomial in numbers, the parts of its zeros by name, with intervals and decimals."""
    yield from _equals_zero(said)
    for line in said.row["table"]:
        value, place = acb(ground.names[line["name"].text]), line["name"].text
        if not value.is_finite():
            yield undecided(f"{place} of case {ground.case.number + 1}")
            return
        low, high = map(number_in, line["interval"])
        inside = bool(low <= value.real) and bool(value.real <= high)
        yield from whether(inside, place, "it is not in its interval")
        yield decimal_of(place, line["decimal"], value, said.row["digits"])


def amount(ground: Ground, said: Said) -> Iterator[Finding]:
    """Constants that are parts of r/p' at a zero of p: their decimals."""
    for line in said.row["constants"]:
        value, place = acb(ground.names[line["name"].text]), line["name"].text
        yield decimal_of(place, line["decimal"], value, said.row["digits"])


def square(ground: Ground, said: Said) -> Iterator[Finding]:
    """q(mu) with mu as substituted is the factor that is printed with it."""
    row = said.row
    yield from _equals_zero(said)
    for z in _ELSEWHERE:
        square, base = row["substitution"].sides
        whole = formula_of(row["polynomial"].sides[0])
        names = ground.names | {unknown_in(whole, ground.names): z}
        mu = ball_at(formula_of(base), names)
        printed = ball_at(formula_of(said.statement.sides[0]), ground.names | {square.text: mu})
        expected = ball_at(whole, names)
        yield Comparison(said.statement.says, printed, expected)


def product_of_entries(ground: Ground, said: Said) -> Iterator[Finding]:
    """a_ij a_ji = a formula that is nowhere negative, positive where that is said."""
    pair, formula = said.statement.sides
    row = said.row
    matrix = _block(ground, row) if row["squared"] else ground.matrix
    if not isinstance(pair, tuple):
        raise TypeError(f"{pair} is no product")
    product = acb(1)
    for entry in pair:
        if not isinstance(entry, Symbol):
            raise TypeError(f"{entry} is no entry")
        i, k = _place(entry.indices[0])
        product = product * matrix[i, k]
    printed = acb(ball_at(formula_of(formula), ground.names))
    yield ground.vanishing(said.statement.says, printed - product)
    if row["strict"] and printed.real.contains(0):
        yield undecided(said.statement.says)
    yield from whether(not printed.real < 0, said.statement.says, "it is negative")


def _place(index: str) -> tuple[int, int]:
    parts = index.split(",") if "," in index else (index[0], index[1:])
    row, column = (int(part) - 1 for part in parts)
    return row, column


def _block(ground: Ground, row: Mapping[str, Any]) -> acb_mat:
    whole = ground.matrix * ground.matrix
    places = row["places"]
    return acb_mat([[whole[i, k] for k in places] for i in places])


def block_of_square(ground: Ground, said: Said) -> Iterator[Finding]:
    """B, the block of A^2 on the rows that are said."""
    printed = ground.matrix_of(matrix_side(said.statement.sides[-1]))
    yield from agreeing(said.statement.says, printed, _block(ground, said.row))


def sum_of_sizes(ground: Ground, said: Said) -> Iterator[Finding]:
    """A diagonal entry and the sizes of the others of its column or row, and its sign."""
    yield from comparison(ground, said)
    rows: Any = said.step.facts["rows"]
    outer = next((r["structure"] for r in rows if _holds(r["structure"], said.row)), None)
    if outer is None:
        yield Fault(said.statement.says, "it belongs to no block")
        return
    places = outer["places"] if outer["squared"] else outer["rows"]
    whole = ground.matrix * ground.matrix if outer["squared"] else ground.matrix
    k = places[said.row["place"]]
    total = acb(whole[k, k])
    for i in places:
        if i != k:
            entry = whole[i, k] if outer["along"] == "columns" else whole[k, i]
            total += abs(entry)
    printed = ball_at(formula_of(said.statement.sides[0]), ground.names)
    yield ground.vanishing(said.statement.says, printed - total)


def _holds(structure: object, row: Mapping[str, Any]) -> bool:
    return isinstance(structure, Mapping) and any(r is row for r in structure["sums"])


def case_row(ground: Ground, row: Mapping[str, Any]) -> Iterator[Finding]:
    """The eigenvalues of a case, with their multiplicities, are all zeros of p(lambda)."""
    expected = list(_valued(ground, row["eigenvalues"]))
    for z in _ELSEWHERE:
        printed = acb(1)
        for value, multiplicity, _ in expected:
            printed = printed * (z - value) ** multiplicity
        yield Comparison("eigenvalues of a case", printed, ground.characteristic(z))
    if all(index is not None for _, _, index in expected):
        yield from _indices(ground, expected)


def repeated_row(ground: Ground, row: Mapping[str, Any]) -> Iterator[Finding]:
    """A repeated eigenvalue, with its multiplicity and its index."""
    for value, multiplicity, index in _valued(ground, [row]):
        yield from _multiplicity(ground, value, multiplicity)
        if index is not None:
            yield from _index(ground, value, multiplicity, index)


def factor_row(ground: Ground, row: Mapping[str, Any], kind: str) -> Iterator[Finding]:
    """The multiplicity and the index of the eigenvalues of a factor, in its regime here."""
    for statement in row["statements"]:
        if statement.says == "eigenvalue" and kind != "double":
            for value in ground.values(statement.sides[1]):
                yield from _multiplicity(ground, value, row["multiplicity"])
                if row["index"] is not None:
                    yield from _index(ground, value, row["multiplicity"], row["index"])


def _multiplicity(ground: Ground, value: acb, multiplicity: int) -> Iterator[Finding]:
    """As many derivatives of p vanish, and the next does not."""
    derivative = ground.characteristic
    for _ in range(multiplicity):
        yield ground.vanishing("multiplicity", derivative(value))
        derivative = derivative.derivative()
    if derivative(value).contains(0):
        yield undecided("multiplicity")


def _index(ground: Ground, value: acb, multiplicity: int, index: int) -> Iterator[Finding]:
    """q(A) (A - lambda)^index is zero, and with one power less it is not; p = q (x - lambda)^m."""
    n = ground.matrix.nrows()
    rest = [ground.characteristic[k] for k in range(ground.characteristic.length() - 1, -1, -1)]
    for _ in range(multiplicity):
        for k in range(1, len(rest)):
            rest[k] += rest[k - 1] * value
        rest.pop()
    shifted = ground.matrix - value * unit(n)
    total = acb_mat(n, n)
    for coefficient in rest:
        total = total * ground.matrix + coefficient * unit(n)
    for _ in range(index - 1):
        total = total * shifted
    if all(entry.contains(0) for entry in total.entries()):
        yield undecided("index of an eigenvalue")
    for entry in (total * shifted).entries():
        yield ground.vanishing("index of an eigenvalue", entry)


def _valued(
    ground: Ground, rows: Sequence[Mapping[str, Any]]
) -> Iterator[tuple[acb, int, int | None]]:
    for row in rows:
        for value in ground.values(row["value"].sides[0]):
            yield value, row["multiplicity"], row["index"]


def _indices(ground: Ground, expected: Sequence[tuple[acb, int, int | None]]) -> Iterator[Finding]:
    """The product of (A - lambda)^index is zero, and no index can be one less."""
    n = ground.matrix.nrows()
    shifted = [(ground.matrix - value * unit(n), index or 1) for value, _, index in expected]
    for lowered in (None, *range(len(shifted))):
        total = unit(n)
        for k, (matrix, index) in enumerate(shifted):
            for _ in range(index - (k == lowered)):
                total = total * matrix
        entries = list(total.entries())
        if lowered is None:
            for entry in entries:
                yield ground.vanishing("minimal polynomial", entry)
        elif all(entry.contains(0) for entry in entries):
            yield undecided("index of an eigenvalue")
