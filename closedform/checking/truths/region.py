"""The values of parameters for which a case holds: signs, equations and points."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.equations import Start, imposed
from closedform.algebra.field import FieldMatrix, Polynomial, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.parametric_spectrum import vanishes_under
from closedform.checking.truth import Sign
from closedform.checking.truths.formulas import element_written
from closedform.notation.written.tree import Written
from closedform.response.parametric.case import Case

__all__ = ["Region", "region_of"]

SAMPLES = 4
SEED = 7


@dataclass(frozen=True)
class Region:
    """All points of a domain; equations are among its conditions."""

    field: ParameterField
    domain: ParameterDomain

    @cached_property
    def solved(self) -> Start:
        """The equations, solved for parameters, and the domain of the others.

        An equation that is not solved stays among the conditions of the domain.
        """
        field = self.field
        others = [c for c in self.domain.conditions if c.relation != "="]
        start = Start((), ParameterDomain(field, tuple(others)))
        for condition in self.domain.conditions:
            if condition.relation == "=":
                step = imposed(field, start, condition.element)
                kept = start.domain.narrowed(condition)
                start = step if isinstance(step, Start) else Start(start.equations, kept)
        return start

    @cached_property
    def given(self) -> dict[str, Scalar]:
        """The parameters that equations give by the others."""
        pairs = ((e.parameter, e.value) for e in self.solved.equations)
        return {name: value for name, value in pairs if name is not None and value is not None}

    @property
    def equations(self) -> tuple[tuple[str, Written], ...]:
        """The same as written trees."""
        return tuple((n, element_written(self.field, e)) for n, e in self.given.items())

    def put(self, element: Scalar) -> Scalar:
        """Return an element with the solved equations put in."""
        return self.field.substituted(element, self.given)

    def vanishes(self, element: Scalar) -> bool:
        """Whether an element is zero at all points, as the equations say."""
        relation = next((e.polynomial for e in self.solved.equations if e.parameter is None), None)
        return vanishes_under(self.put(element), relation)

    def sign_among(
        self, names: Sequence[str]
    ) -> Callable[[Mapping[tuple[int, ...], object]], Sign | None]:
        """Return what tells the sign of a polynomial in parameters, its exponents in this order."""
        symbols = [self.field.symbol(name) for name in names]

        def sign(polynomial: Mapping[tuple[int, ...], object]) -> Sign | None:
            total = self.field.domain.zero
            for exponents, coefficient in polynomial.items():
                term = self.field.scalar(_rational(coefficient))
                for symbol, exponent in zip(symbols, exponents, strict=True):
                    term *= symbol**exponent
                total += term
            if self.vanishes(total):
                return 0
            values = self.solved.domain.sign_of(self.put(total)).values
            return next(s for s in SIGNS if s in values) if len(values) == 1 else None

        return sign

    def points(self, names: Sequence[str]) -> tuple[dict[str, Scalar], ...]:
        """Return some points, each a number of the field for every one of the names.

        Where the search for them finds none, the equations are solved first.
        """
        found = self.domain.sample(SAMPLES, SEED) if names else []
        field = self.field
        points = [
            {n: field.scalar(v) if isinstance(v, Fraction) else v for n, v in whole.items()}
            for whole in found or (self.solved.domain.sample(SAMPLES, SEED) if names else [])
        ]
        if not found:
            points = [
                p | {n: field.substituted(value, p) for n, value in self.given.items()}
                for p in points
            ]
        return tuple({n: point[n] for n in names} for point in points)

    def at(self, values: Mapping[str, Fraction]) -> Region:
        """Return the region of the other parameters, with numbers for some of them."""
        domain = self.domain
        for name, value in values.items():
            domain = domain.substituted(name, self.field.scalar(value))
        return Region(self.field, domain)

    def blocks(self, matrix: FieldMatrix, p: Polynomial, multiplicity: int) -> tuple[int, int]:
        """Return how many Jordan blocks a root of p has, and the size of the largest.

        `multiplicity` is that of p in the characteristic polynomial, at the points of the region.
        The number of blocks of size >= k follows from ranks of powers of p(A), as ranks are
        where no equation holds but those of the region.
        """
        n, degree = int(matrix.shape[0]), int(p.degree())
        rows = [[self.put(e) for e in row] for row in matrix.to_list()]
        base = _at_matrix([self.put(c) for c in p.to_list()], rows, self.field.domain.zero)
        power, first, size = base, 0, 0
        while True:
            size += 1
            nullity = n - self._rank(power)
            first = first or nullity // degree
            if nullity >= multiplicity * degree:
                return first, size
            power = _times(power, base, self.field.domain.zero)

    def _rank(self, rows: list[list[Scalar]]) -> int:
        left, rank = [list(row) for row in rows], 0
        for column in range(len(rows)):
            pivot = next((r for r in left if not self.vanishes(r[column])), None)
            if pivot is None:
                continue
            rank += 1
            left = [
                [e - row[column] / pivot[column] * p for e, p in zip(row, pivot, strict=True)]
                for row in left
                if row is not pivot
            ]
        return rank


SIGNS: tuple[Sign, ...] = (-1, 0, 1)


def region_of(field: ParameterField, case: Case) -> Region:
    """Return where a case holds: its domain, with the equations that it has put in."""
    equations = [
        Comparison(field.symbol(name) - value, "=") for name, value in case.branch.values.items()
    ]
    return Region(field, ParameterDomain(field, (*case.domain.conditions, *equations)))


def _rational(number: object) -> Fraction:
    """A rational number of any type that has a numerator and a denominator."""
    above, below = (getattr(number, side) for side in ("numerator", "denominator"))
    return Fraction(int(above), int(below))


def _at_matrix(
    coefficients: Sequence[Scalar], rows: list[list[Scalar]], zero: Scalar
) -> list[list[Scalar]]:
    """A polynomial of a matrix, by Horner's rule."""
    places = range(len(rows))
    total = [[zero for _ in places] for _ in places]
    for c in coefficients:
        total = _times(total, rows, zero)
        total = [[e + c if i == k else e for k, e in enumerate(r)] for i, r in enumerate(total)]
    return total


def _times(one: list[list[Scalar]], other: list[list[Scalar]], zero: Scalar) -> list[list[Scalar]]:
    columns = list(zip(*other, strict=True))
    return [
        [
            sum((a * b for a, b in zip(row, column, strict=True) if a and b), zero)
            for column in columns
        ]
        for row in one
    ]
