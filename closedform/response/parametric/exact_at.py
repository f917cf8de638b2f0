"""Functions with parameters at exact values of these: where they are algebraic, exactly."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import factorial

from flint import acb

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import BaseField, Polynomial, base_field
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.roots import root_set
from closedform.algebra.surds import SurdSum

__all__ = ["FunctionsAt", "functions_at"]

Coefficients = tuple[SurdSum, ...]
"""Of a polynomial in lambda, lowest power first."""


@dataclass(frozen=True)
class _Term:
    """What the roots of a polynomial p contribute, as an `ExponentialMatrix` has it.

    `parts` are the irreducible factors of p at the values: at these p may come apart.
    `entries` has for each function the coefficients of R_0, R_1, …
    """

    p: Polynomial
    parts: tuple[Polynomial, ...]
    entries: tuple[tuple[Coefficients, ...], ...]

    @property
    def is_square(self) -> bool:
        """Whether p = (x - a)^2, as for a pair whose discriminant vanishes."""
        return sum(int(part.degree()) for part in self.parts) < int(self.p.degree())


@dataclass(frozen=True)
class FunctionsAt:
    """Functions of the time at values of the parameters, over the field of these values."""

    field: BaseField
    terms: tuple[_Term, ...]

    def roots(self) -> list[acb]:
        """Return balls around all eigenvalues; one that is 0 is exactly that."""
        parts = dict.fromkeys(part for term in self.terms for part in term.parts)
        return [z for part in parts for z in root_set(self.field, part).enclosures()]

    def exact(self, place: int, t: SurdSum) -> SurdSum | None:
        """Return a function at t as a surd sum, or None if it is transcendental.

        At t other than 0 that is the theorem of Lindemann and Weierstrass, as
        `ExponentialMatrix.exact_entry` says; here the coefficients of e^(lambda t) are added
        up first, for different factors may share roots at single values.
        Raises TooManyRootsError for t with a square root that makes the field too large.
        """
        held = [self._sum(term.entries[place], t) for term in self.terms]
        if t.is_zero:  # Euler's formula
            return sum((coefficients[-1] for coefficients in held), SurdSum(()))
        numbers = [c for coefficients in held for c in coefficients]
        field = base_field([*numbers, *self._numbers, t])
        found: dict[Polynomial, Polynomial] = {}
        for term, coefficients in zip(self.terms, held, strict=True):
            r = _over(field, coefficients)
            p = _lifted(self.field, field, term.p)
            for part in (_lifted(self.field, field, q) for q in term.parts):
                if term.is_square:
                    weight = (r.diff() + r * field.scalar(t)).rem(part)
                else:
                    weight = (r * p.diff().rem(part).invert(part)).rem(part)
                found[part] = found.get(part, field.polynomial([])) + weight
        zero_root = _over(field, (SurdSum(()), SurdSum.rational(1)))
        if any(not weight.is_zero for part, weight in found.items() if part != zero_root):
            return None
        constant = found.get(zero_root)
        return SurdSum(()) if constant is None else field.surds(constant.nth(0))

    @property
    def _numbers(self) -> list[SurdSum]:
        return [self.field.surds(c) for term in self.terms for c in term.p.to_list()]

    def _sum(self, entries: Sequence[Coefficients], t: SurdSum) -> Coefficients:
        """The coefficients of the sum of R_j t^j/j!."""
        weights = [
            t.power(j) * SurdSum.rational(Fraction(1, factorial(j))) for j in range(len(entries))
        ]
        return tuple(
            sum((c * w for c, w in zip(column, weights, strict=True)), SurdSum(()))
            for column in zip(*entries, strict=True)
        )


def functions_at(
    field: ParameterField, functions: Sequence[ExponentialMatrix], values: Mapping[str, SurdSum]
) -> FunctionsAt:
    """Return the entries of columns of functions, one after the other, at values.

    All columns belong to one spectrum, and the values to its branch.
    Raises TooManyRootsError where the values need too large a field.
    """
    first = functions[0]
    whole = [
        tuple(field.exact_at(c, values) for c in reversed(term.factor.polynomial))
        for term in first.terms
    ]
    base = base_field([c for coefficients in whole for c in coefficients])
    terms = []
    for place, (term, coefficients) in enumerate(zip(first.terms, whole, strict=True)):
        p = _over(base, coefficients)
        degree = term.factor.degree
        entries = tuple(
            tuple(
                tuple(field.exact_at(entry.nth(k), values) for k in range(degree))
                for residue in function.terms[place].residues
                for entry in (residue.entry(row, 0),)
            )
            for function in functions
            for row in range(function.shape[0])
        )
        parts = tuple(part.monic() for part, _ in p.factor_list()[1])
        terms.append(_Term(p, parts, entries))
    return FunctionsAt(base, tuple(terms))


def _over(field: BaseField, coefficients: Coefficients) -> Polynomial:
    return field.polynomial([field.scalar(c) for c in reversed(coefficients)])


def _lifted(field: BaseField, wider: BaseField, polynomial: Polynomial) -> Polynomial:
    return _over(wider, tuple(field.surds(c) for c in reversed(polynomial.to_list())))
