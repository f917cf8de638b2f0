"""Matrices whose entries are exact functions of time."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction

from flint import fmpq, fmpq_mat

from closedform.algebra.elementary import Element, ElementaryField
from closedform.checking.errors import NotJudgedError, SizeError

__all__ = ["ExactMatrix", "characteristic_coefficients", "column", "diagonal", "identity"]

LARGEST_EXPANDED = 5
LARGEST_WITHOUT_NUMBERS = 12
LARGEST_POWER = 60


@dataclass(frozen=True, slots=True)
class ExactMatrix:
    """A matrix over an `ElementaryField`, by rows; at least 1 x 1.

    Operations raise SizeError where sizes do not fit, ZeroDivisionError for the inverse of a
    singular matrix.
    """

    field: ElementaryField
    rows: tuple[tuple[Element, ...], ...]

    @property
    def shape(self) -> tuple[int, int]:
        """The numbers of rows and columns."""
        return len(self.rows), len(self.rows[0])

    @property
    def is_square(self) -> bool:
        """Whether it has as many rows as columns."""
        return self.shape[0] == self.shape[1]

    @property
    def entries(self) -> tuple[Element, ...]:
        """Every entry, row by row."""
        return tuple(entry for row in self.rows for entry in row)

    @property
    def columns(self) -> tuple[ExactMatrix, ...]:
        """Its columns, as n x 1 matrices."""
        return tuple(column(self.field, entries) for entries in zip(*self.rows, strict=True))

    @property
    def is_zero(self) -> bool:
        """Whether every entry is zero."""
        return all(entry.is_zero for entry in self.entries)

    @property
    def is_constant(self) -> bool:
        """Whether no entry depends on the time."""
        return all(entry.is_constant for entry in self.entries)

    def mapped(self, change: Callable[[Element], Element]) -> ExactMatrix:
        """Return the matrix of what `change` makes of each entry."""
        return ExactMatrix(self.field, tuple(tuple(map(change, row)) for row in self.rows))

    def __add__(self, other: ExactMatrix) -> ExactMatrix:
        if self.shape != other.shape:
            raise SizeError("a sum", self.shape, other.shape)
        pairs = zip(self.rows, other.rows, strict=True)
        rows = tuple(tuple(a + b for a, b in zip(one, two, strict=True)) for one, two in pairs)
        return ExactMatrix(self.field, rows)

    def __neg__(self) -> ExactMatrix:
        return self.mapped(lambda entry: -entry)

    def __sub__(self, other: ExactMatrix) -> ExactMatrix:
        return self + -other

    def __matmul__(self, other: ExactMatrix) -> ExactMatrix:
        if self.shape[1] != other.shape[0]:
            raise SizeError("a product", self.shape, other.shape)
        if min(*self.shape, *other.shape) > LARGEST_EXPANDED:
            numbers = _rational(self), _rational(other)
            if numbers[0] is not None and numbers[1] is not None:
                return _of_rational(numbers[0] * numbers[1], self.field)
        zero = self.field.zero
        columns = list(zip(*other.rows, strict=True))
        return ExactMatrix(
            self.field,
            tuple(tuple(_dot(row, entries, zero) for entries in columns) for row in self.rows),
        )

    def scaled(self, factor: Element) -> ExactMatrix:
        """Return the matrix times a number or function."""
        return self.mapped(lambda entry: factor * entry)

    @property
    def transposed(self) -> ExactMatrix:
        """Its transpose."""
        return ExactMatrix(self.field, tuple(zip(*self.rows, strict=True)))

    def power(self, exponent: int) -> ExactMatrix:
        """Return an integer power; a negative one is that of the inverse.

        Raises NotJudgedError beyond the exponent `LARGEST_POWER`.
        """
        self.demand_square("a power")
        if abs(exponent) > LARGEST_POWER:
            raise NotJudgedError(f"a matrix to the power {exponent}")
        base = self.inverse() if exponent < 0 else self
        result, left = identity(self.field, self.shape[0]), abs(exponent)
        while left:
            if left & 1:
                result = result @ base
            left >>= 1
            base = base @ base if left else base
        return result

    def inverse(self) -> ExactMatrix:
        """Return the inverse, by elimination; pivots are entries that are not zero."""
        self.demand_square("an inverse")
        size = self.shape[0]
        numbers = _rational(self)
        if numbers is not None:
            return _of_rational(numbers.inv(), self.field)
        unit = identity(self.field, size)
        rows = [[*row, *more] for row, more in zip(self.rows, unit.rows, strict=True)]
        if _reduced(rows, size)[0] < size:
            raise ZeroDivisionError("the matrix is singular")
        return ExactMatrix(self.field, tuple(tuple(row[size:]) for row in rows))

    def determinant(self) -> Element:
        """Return the determinant, by expansion along the sparsest row.

        That of a larger matrix is (-1)^n c_0, with the constant coefficient c_0 of the
        characteristic polynomial.  Raises NotJudgedError beyond `LARGEST_WITHOUT_NUMBERS`
        rows unless all entries are rational numbers.
        """
        self.demand_square("a determinant")
        if self.shape[0] > LARGEST_WITHOUT_NUMBERS and _rational(self) is None:
            raise NotJudgedError(f"a determinant of {self.shape[0]} rows that are no numbers")
        if self.shape[0] > LARGEST_EXPANDED:
            constant = characteristic_coefficients(self)[0]
            return -constant if self.shape[0] % 2 else constant
        return _determinant(self.field, [list(row) for row in self.rows])

    def trace(self) -> Element:
        """Return the sum of the diagonal."""
        self.demand_square("a trace")
        return sum((self.rows[k][k] for k in range(self.shape[0])), self.field.zero)

    def rank(self) -> int:
        """Return the rank over the field of its entries."""
        numbers = _rational(self)
        if numbers is not None:
            return numbers.rank()
        rows = [list(row) for row in self.rows]
        return _reduced(rows, self.shape[1])[0]

    def kernel(self) -> list[ExactMatrix]:
        """Return a basis of the columns that it sends to zero."""
        field, width = self.field, self.shape[1]
        rows = [list(row) for row in self.rows]
        _, pivots = _reduced(rows, width)
        basis = []
        for free in (k for k in range(width) if k not in pivots):
            entries = [field.zero] * width
            entries[free] = field.one
            for row, pivot in zip(rows, pivots, strict=False):
                entries[pivot] = -row[free]
            basis.append(column(field, entries))
        return basis

    def demand_square(self, what: str) -> None:
        """Raise SizeError unless it is square."""
        if not self.is_square:
            raise SizeError(what, self.shape, None)


def identity(field: ElementaryField, size: int) -> ExactMatrix:
    """Return the unit matrix."""
    return diagonal(field, [field.one] * size)


def diagonal(field: ElementaryField, entries: Sequence[Element]) -> ExactMatrix:
    """Return the diagonal matrix with given entries."""
    size = range(len(entries))
    return ExactMatrix(
        field, tuple(tuple(entries[i] if i == j else field.zero for j in size) for i in size)
    )


def column(field: ElementaryField, entries: Iterable[Element]) -> ExactMatrix:
    """Return entries as a column."""
    return ExactMatrix(field, tuple((entry,) for entry in entries))


def characteristic_coefficients(matrix: ExactMatrix) -> list[Element]:
    """Return the coefficients of det(z I - M), the constant one first, the last one 1.

    Source:  V. N. Faddeeva, Computational Methods of Linear Algebra (1959), section 24.
    """
    field, size = matrix.field, matrix.shape[0]
    numbers = _rational(matrix)
    if numbers is not None:
        return [_number(field, c) for c in numbers.charpoly().coeffs()]
    coefficients, product = [field.one], identity(field, size)
    for k in range(1, size + 1):
        product = matrix @ product
        value = -(product.trace() / field.number(Fraction(k)))
        coefficients.append(value)
        product = product + identity(field, size).scaled(value)
    return coefficients[::-1]


def _rational(matrix: ExactMatrix) -> fmpq_mat | None:
    """Return a matrix all of whose entries are rational numbers, None if one is not."""
    numbers = [entry.as_fraction() for entry in matrix.entries]
    known = [fmpq(x.numerator, x.denominator) for x in numbers if x is not None]
    return fmpq_mat(*matrix.shape, known) if len(known) == len(numbers) else None


def _of_rational(numbers: fmpq_mat, field: ElementaryField) -> ExactMatrix:
    rows = numbers.tolist()
    return ExactMatrix(field, tuple(tuple(_number(field, x) for x in row) for row in rows))


def _number(field: ElementaryField, value: fmpq) -> Element:
    return field.number(Fraction(int(value.p), int(value.q)))


def _dot(row: Sequence[Element], entries: Sequence[Element], zero: Element) -> Element:
    total = zero
    for one, other in zip(row, entries, strict=True):
        if not (one.is_zero or other.is_zero):
            total = total + one * other
    return total


def _reduced(rows: list[list[Element]], columns: int) -> tuple[int, list[int]]:
    """Bring rows to reduced echelon form in place; return the rank and the pivots' columns."""
    rank, pivots = 0, []
    for k in range(columns):
        pivot = next((i for i in range(rank, len(rows)) if not rows[i][k].is_zero), None)
        if pivot is None:
            continue
        rows[rank], rows[pivot] = rows[pivot], rows[rank]
        lead = rows[rank][k]
        rows[rank] = [entry / lead for entry in rows[rank]]
        for i, row in enumerate(rows):
            if i != rank and not row[k].is_zero:
                factor = row[k]
                rows[i] = [a - factor * b for a, b in zip(row, rows[rank], strict=True)]
        pivots.append(k)
        rank += 1
    return rank, pivots


def _determinant(field: ElementaryField, rows: list[list[Element]]) -> Element:
    if len(rows) == 1:
        return rows[0][0]
    at = max(range(len(rows)), key=lambda i: sum(entry.is_zero for entry in rows[i]))
    total = field.zero
    for j, entry in enumerate(rows[at]):
        if not entry.is_zero:
            minor = [row[:j] + row[j + 1 :] for i, row in enumerate(rows) if i != at]
            term = entry * _determinant(field, minor)
            total = total - term if (at + j) % 2 else total + term
    return total
