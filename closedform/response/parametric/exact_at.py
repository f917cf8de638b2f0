"""Functions with parameters at exact values of these: where they are algebraic, exactly."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import factorial, isqrt

from flint import acb

from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import BaseField, Polynomial, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.roots import enclosed_roots
from closedform.algebra.surds import SurdSum
from closedform.algebra.value_field import FieldWithPi, element_at, value_field

__all__ = ["FunctionsAt", "functions_at"]

Coefficients = tuple[Scalar, ...]
"""Of a polynomial in lambda, lowest power first."""
_HALF = SurdSum.rational(Fraction(1, 2))
_COSINES = {
    Fraction(0): SurdSum.rational(1),
    Fraction(1, 6): SurdSum.of({3: Fraction(1, 2)}),
    Fraction(1, 4): SurdSum.of({2: Fraction(1, 2)}),
    Fraction(1, 3): _HALF,
    Fraction(1, 2): SurdSum(()),
}
"""cos(pi q) for q from 0 to 1/2, where it is short."""


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
    """Functions of the time at values of the parameters, over the field of these values.

    `layers` are terms over `field`, each to be multiplied by the square root of a number: of 1
    alone where the field holds all square roots.  There are none where the values do not come
    apart so.  `starts` are the values at time zero, None where they have pi in them.
    """

    field: BaseField
    polynomials: tuple[Polynomial, ...]
    layers: tuple[tuple[int, tuple[_Term, ...]], ...]
    starts: tuple[SurdSum | None, ...]

    def roots(self) -> list[acb]:
        """Return balls around all eigenvalues; one that is 0 is exactly that."""
        return [z for p in self.polynomials for z in enclosed_roots(self.field, p)]

    def exact(self, place: int, t: SurdSum) -> SurdSum | None:
        """Return a function at t as a surd sum, or None if none is found.

        Without pi, what is found at t other than 0 is all there is, by the theorem of
        Lindemann and Weierstrass, as `ExponentialMatrix.exact_entry` says; here the
        coefficients of e^(lambda t) are added up first, for different factors may share roots
        at single values.  With pi, pairs ± i q pi at rational times t give algebraic numbers.
        Raises KeyError for t with a square root that was not named when this was made.
        """
        if t.is_zero:  # Euler's formula
            return self.starts[place]
        if not self.layers or (isinstance(self.field, FieldWithPi) and not t.is_rational):
            return None
        total: dict[int, Scalar] = {}
        for radicand, terms in self.layers:
            for part, weight in self._weights(terms, place, t):
                value = self._value(part, weight, t)
                if value is None:
                    return None
                for number, amount in value:
                    for d, c in (number * SurdSum.of({radicand: Fraction(1)})).terms:
                        more = amount * self.field.scalar(c)
                        total[d] = total.get(d, self.field.domain.zero) + more
        whole = SurdSum(())
        for d, amount in total.items():
            found = self.field.number(amount)
            if found is None:
                return None
            whole += found * SurdSum.of({d: Fraction(1)})
        return whole

    def _weights(
        self, terms: Sequence[_Term], place: int, t: SurdSum
    ) -> Iterator[tuple[Polynomial, Polynomial]]:
        """What e^(lambda t) is multiplied by at the roots of each part, where that is not 0."""
        field = self.field
        found: dict[Polynomial, Polynomial] = {}
        for term in terms:
            r = _over(field, self._sum(term.entries[place], t))
            for part in term.parts:
                if term.is_square:
                    weight = (r.diff() + r * field.scalar(t)).rem(part)
                else:
                    weight = (r * field.inverse_modulo(part, term.p.diff())).rem(part)
                found[part] = found.get(part, field.polynomial([])) + weight
        return ((part, weight) for part, weight in found.items() if not weight.is_zero)

    def _value(
        self, part: Polynomial, weight: Polynomial, t: SurdSum
    ) -> list[tuple[SurdSum, Scalar]] | None:
        """The sum of weight(lambda) e^(lambda t) over the roots of a part, if it is algebraic.

        It is the sum of the products that are returned.  For a root 0 that is the weight; for
        ± i w with w t = pi q it is 2 weight_0 cos(pi q) - 2 w weight_1 sin(pi q).
        """
        field = self.field
        if part.degree() == 1 and not part.nth(0):
            return [(SurdSum.rational(1), weight.nth(0))]
        if not isinstance(field, FieldWithPi) or part.degree() != 2 or part.nth(1):
            return None
        square = field.number(part.nth(0) / field.pi**2)
        turns = None if square is None else _root(square.as_fraction())
        if turns is None:
            return None
        cosine, sine = (_cosine(turns * t.as_fraction() - k) for k in (0, Fraction(1, 2)))
        even, odd = weight.nth(0), -weight.nth(1) * field.scalar(turns) * field.pi
        found = [(value, 2 * amount) for value, amount in ((cosine, even), (sine, odd)) if amount]
        known = [(value, amount) for value, amount in found if value is not None]
        return known if len(known) == len(found) else None

    def _sum(self, entries: Sequence[Coefficients], t: SurdSum) -> Coefficients:
        """The coefficients of the sum of R_j t^j/j!."""
        weights = [
            self.field.scalar(t.power(j) * SurdSum.rational(Fraction(1, factorial(j))))
            for j in range(len(entries))
        ]
        return tuple(
            sum((c * w for c, w in zip(column, weights, strict=True)), self.field.domain.zero)
            for column in zip(*entries, strict=True)
        )


def _root(square: Fraction) -> Fraction | None:
    """The square root of a number that is the square of a fraction, else None."""
    root = Fraction(isqrt(abs(square.numerator)), isqrt(square.denominator))
    return root if root * root == square else None


def _cosine(q: Fraction) -> SurdSum | None:
    """cos(pi q) where it is short, else None."""
    turned = abs(q) % 2
    turned = min(turned, 2 - turned)
    value = _COSINES.get(min(turned, 1 - turned))
    return -value if value is not None and turned > Fraction(1, 2) else value


def functions_at(
    field: ParameterField,
    functions: Sequence[ExponentialMatrix],
    values: Mapping[str, SurdSum],
    times: Sequence[SurdSum] = (),
) -> FunctionsAt:
    """Return the entries of columns of functions, one after the other, at values.

    All columns belong to one spectrum, and the values to its branch; `times` are those at
    which the functions will be asked for, if they have square roots.
    Raises TooManyRootsError where the values and times need too large a field.
    """
    first = functions[0]
    coefficients = [c for term in first.terms for c in term.factor.polynomial]
    entries = [_entries(functions, place) for place in range(len(first.terms))]
    starts = tuple(
        field.number_at(sum((held[row][0][-1] for held in entries), field.domain.zero), values)
        for row in range(len(entries[0]))
    )
    inner = [c for held in entries for rows in held for row in rows for c in row]
    base = value_field(field, [*coefficients, *inner], values, others=times)
    if isinstance(base, FieldWithPi):
        base = value_field(field, coefficients, values)
        base = FieldWithPi(base.radicands)

    def at(element: Scalar) -> Scalar:
        return element_at(field, element, values, base)

    polynomials = tuple(
        _over(base, [at(c) for c in reversed(term.factor.polynomial)]) for term in first.terms
    )
    if not isinstance(base, FieldWithPi):
        split: dict[Scalar, dict[int, Scalar]] | None = {c: {1: at(c)} for c in inner}
    else:
        split = None if base.radicands else _in_layers(field, inner, values, base)
    if split is None:
        return FunctionsAt(base, polynomials, (), starts)
    parts = [tuple(part.monic() for part, _ in p.factor_list()[1]) for p in polynomials]
    layers = []
    for d in sorted({d for found in split.values() for d in found} | {1}):
        terms = []
        for p, factors, held in zip(polynomials, parts, entries, strict=True):
            at_values = tuple(
                tuple(tuple(split[c].get(d, base.domain.zero) for c in row) for row in rows)
                for rows in held
            )
            terms.append(_Term(p, factors, at_values))
        layers.append((d, tuple(terms)))
    once = tuple(dict.fromkeys(part for factors in parts for part in factors))
    return FunctionsAt(base, once, tuple(layers), starts)


def _entries(
    functions: Sequence[ExponentialMatrix], place: int
) -> tuple[tuple[Coefficients, ...], ...]:
    """The coefficients of R_0, R_1, … of one term, for each function, over K."""
    return tuple(
        tuple(
            tuple(entry.nth(k) for k in range(function.terms[place].factor.degree))
            for residue in function.terms[place].residues
            for entry in (residue.entry(row, 0),)
        )
        for function in functions
        for row in range(function.shape[0])
    )


def _in_layers(
    field: ParameterField,
    elements: Sequence[Scalar],
    values: Mapping[str, SurdSum],
    into: FieldWithPi,
) -> dict[Scalar, dict[int, Scalar]] | None:
    """Each element as a sum of square roots times elements of Q(pi); None where one is not."""
    found: dict[Scalar, dict[int, Scalar]] = {}
    for element in dict.fromkeys(elements):
        above, below = (field.in_pi(q, values) for q in (element.numer, element.denom))
        lead = below[-1]
        if not all((c / lead).is_rational for c in below):
            return None
        divisor = _in_powers(into, [(c / lead).as_fraction() for c in below])
        numbers = [dict((c / lead).terms) for c in above]
        found[element] = {
            d: _in_powers(into, [n.get(d, Fraction(0)) for n in numbers]) / divisor
            for d in sorted({d for n in numbers for d in n})
        }
    return found


def _in_powers(field: FieldWithPi, coefficients: Sequence[Fraction]) -> Scalar:
    terms = (field.scalar(c) * field.pi**k for k, c in enumerate(coefficients))
    return sum(terms, field.domain.zero)


def _over(field: BaseField, coefficients: Sequence[Scalar]) -> Polynomial:
    return field.polynomial(list(reversed(coefficients)))
