"""The field Q(x_1, …, x_k) of rational functions of parameters.

Elements are SymPy's `FracElement`s: a numerator and a denominator without common factor.
Equality is equality of functions; where a function is defined and which sign it has is
asked in ``closedform.algebra.domain``.

The name `PI` is no parameter but a number.  It is transcendental (F. Lindemann, Ueber die
Zahl pi, 1882): a polynomial in it with algebraic coefficients, not all of them 0, is not 0.
So the field is computed with as any other, and the sign of an element in pi alone is told by
ball arithmetic.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property, lru_cache, reduce
from operator import mul
from typing import Any

from flint import arb, ctx, fmpq
from sympy.polys.domains import QQ

from closedform.algebra.enclosure import ball_of
from closedform.algebra.field import BaseField, Scalar, rational
from closedform.algebra.fraction_field import fraction_field
from closedform.algebra.polynomial_factors import PolynomialTerms, irreducible_factors
from closedform.algebra.surds import SurdSum

__all__ = ["PI", "Factored", "ParameterField", "ParameterPolynomial"]

PI = "pi"
"""The name of the number 3.14159…, which no parameter may have."""

ParameterPolynomial = Any
"""A polynomial in the parameters with rational coefficients (SymPy's PolyElement)."""


@dataclass(frozen=True)
class Factored:
    """content · product of factor^exponent, an element taken apart over Q.

    The factors are irreducible, with whole coefficients without common factor and a
    positive leading coefficient; the exponents are integers other than 0, negative ones
    those of the denominator.
    """

    content: Fraction
    factors: tuple[tuple[ParameterPolynomial, int], ...]


@dataclass(frozen=True)
class ParameterField(BaseField):
    """Q(parameters); the parameters are given by their names, in the order of printing.

    The number `PI` may be among them; `free` are the others.
    """

    parameters: tuple[str, ...] = ()

    @cached_property
    def free(self) -> tuple[str, ...]:
        """The names that stand for parameters."""
        return tuple(name for name in self.parameters if name != PI)

    @cached_property
    def domain(self) -> Any:
        """The SymPy domain whose elements are the scalars of this field."""
        return fraction_field(self.parameters)

    @cached_property
    def _gens(self) -> dict[str, Scalar]:
        return dict(zip(self.parameters, self.domain.gens, strict=True))

    def symbol(self, name: str) -> Scalar:
        """Return a parameter as an element.  Raises KeyError for a name that is none."""
        return self._gens[name]

    def scalar(self, value: SurdSum | Fraction | int) -> Scalar:
        """Return a rational number as an element.  Raises KeyError for a square root."""
        if isinstance(value, SurdSum):
            if not value.is_rational:
                raise KeyError(value.terms[-1][0])
            value = value.as_fraction()
        value = Fraction(value)
        return self.domain.convert(QQ(value.numerator, value.denominator))

    def constant(self, element: Scalar) -> Fraction | None:
        """Return an element that is a rational number, or None."""
        if not element:
            return Fraction(0)
        if not (element.numer.is_ground and element.denom.is_ground):
            return None
        return rational(element.numer.LC) / rational(element.denom.LC)

    def surds(self, element: Scalar) -> SurdSum:
        """Return a rational element as a number.  Raises ValueError for others."""
        value = self.constant(element)
        if value is None:
            raise ValueError(f"{element} is no number")
        return SurdSum.rational(value)

    def number(self, element: Scalar) -> SurdSum | None:
        """Return a rational element as a number, or None for others."""
        value = self.constant(element)
        return None if value is None else SurdSum.rational(value)

    def sign(self, element: Scalar) -> int:
        """Return the sign of an element without parameters.  Raises ValueError for others."""
        found = self.number_sign(element)
        if found is None:
            raise ValueError(f"{element} is no number")
        return found

    def number_sign(self, element: Scalar) -> int | None:
        """Return the sign of a number: a rational one, or one in pi alone; None for others."""
        value = self.constant(element)
        if value is not None:
            return (value > 0) - (value < 0)
        return None if self.names_in(element) else self.sign_at(element, {})

    def sign_at(self, element: Scalar, values: Mapping[str, SurdSum]) -> int | None:
        """Return the sign at values of the parameters, None where the element is not defined.

        A polynomial in pi that is not zero has a sign, and balls narrow enough tell it.
        """
        above, below = (self.in_pi(q, values) for q in (element.numer, element.denom))
        return _sign_in_pi(above) * _sign_in_pi(below) if below else None

    def holds_pi(self, element: Scalar) -> bool:
        """Whether an element has the number pi in it."""
        return PI in self.symbols_in(element)

    def names_in(self, element: Scalar) -> frozenset[str]:
        """Return the parameters that occur in an element; pi is none."""
        return self.symbols_in(element) - {PI}

    def symbols_in(self, element: Scalar) -> frozenset[str]:
        """Return the names that occur in an element: parameters, and pi."""
        found = set()
        for polynomial in (element.numer, element.denom):
            for monomial in polynomial.itermonoms():
                found |= {n for n, e in zip(self.parameters, monomial, strict=True) if e}
        return frozenset(found)

    def of_polynomial(self, polynomial: ParameterPolynomial) -> Scalar:
        """Return a polynomial in the parameters as an element."""
        return self.domain.field(polynomial)

    def factored(self, element: Scalar) -> Factored:
        """Return an element that is not zero, taken apart into irreducible factors over Q.

        The factors come in the order of the parameters in them, simple ones first, which
        does not hang on how the element was found.
        """
        return _factored(element)

    def product_of(self, parts: Factored) -> Scalar:
        """Return the element that was taken apart."""
        powers = [self.of_polynomial(f) ** e for f, e in parts.factors]
        return reduce(mul, powers, self.scalar(parts.content))

    def substituted(self, element: Scalar, values: Mapping[str, Scalar]) -> Scalar:
        """Return the element with elements in the place of parameters, all at once.

        Raises ZeroDivisionError where its denominator vanishes there.
        """
        if not values or not self.symbols_in(element) & set(values):
            return element
        below = self._composed(element.denom, values)
        if not below:
            raise ZeroDivisionError(str(element))
        return self._composed(element.numer, values) / below

    def _composed(self, polynomial: ParameterPolynomial, values: Mapping[str, Scalar]) -> Scalar:
        bases = [values.get(name, self._gens[name]) for name in self.parameters]
        total = self.domain.zero
        for monomial, coefficient in polynomial.iterterms():
            term = self.domain.convert(coefficient)
            for base, exponent in zip(bases, monomial, strict=True):
                if exponent:
                    term *= base**exponent
            total += term
        return total

    def into(self, wider: ParameterField, element: Scalar) -> Scalar:
        """Return an element as one of a field that has these parameters and more."""
        if wider.parameters == self.parameters:
            return element
        places = [wider.parameters.index(name) for name in self.parameters]
        fractions = wider.domain.field
        above, below = (
            _moved(fractions.ring, polynomial, places)
            for polynomial in (element.numer, element.denom)
        )
        if below.LC < 0:  # the order of the parameters may be another
            above, below = -above, -below
        return fractions.raw_new(above, below)

    def derivative(self, element: Scalar, name: str) -> Scalar:
        """Return the partial derivative with respect to a parameter."""
        return element.diff(self._gens[name])

    @property
    def encloses_only(self) -> bool:
        """Elements are known to FLINT by balls."""
        return True

    def enclose(self, element: Scalar) -> arb:
        """Return a ball for an element without parameters.  Raises KeyError for others."""
        return self.enclose_at(element, {})

    def enclose_at(self, element: Scalar, values: Mapping[str, arb]) -> arb:
        """Return a ball for the element at values of its parameters; not finite at a pole.

        Pi needs no value.
        """
        below = self._enclosed(element.denom, values)
        return self._enclosed(element.numer, values) / below

    def _enclosed(self, polynomial: ParameterPolynomial, values: Mapping[str, arb]) -> arb:
        total = arb(0)
        for monomial, coefficient in polynomial.iterterms():
            value = rational(coefficient)
            term = arb(fmpq(value.numerator, value.denominator))
            for name, exponent in zip(self.parameters, monomial, strict=True):
                for _ in range(exponent):  # a power of a ball around 0 is not finite in FLINT
                    term *= arb.pi() if name == PI else values[name]
            total += term
        return total

    def exact_at(self, element: Scalar, values: Mapping[str, SurdSum]) -> SurdSum:
        """Return the exact value at values of the parameters, a number without pi.

        Raises ZeroDivisionError at a pole; ValueError where pi is left, see `number_at`.
        """
        value = self.number_at(element, values)
        if value is None:
            raise ValueError(f"{element} has the number pi in it")
        return value

    def number_at(self, element: Scalar, values: Mapping[str, SurdSum]) -> SurdSum | None:
        """Return the exact value at values of the parameters, or None if it has pi in it.

        Raises ZeroDivisionError at a pole.
        """
        above, below = (self.in_pi(q, values) for q in (element.numer, element.denom))
        if not below:
            raise ZeroDivisionError(str(element))
        lead = above[-1] / below[-1] if above else SurdSum(())
        shift = len(above) - len(below)
        same = not above or (
            shift == 0 and all(a == lead * b for a, b in zip(above, below, strict=True))
        )
        return lead if same else None

    def in_pi(
        self, polynomial: ParameterPolynomial, values: Mapping[str, SurdSum]
    ) -> list[SurdSum]:
        """Return the coefficients of powers of pi at values, lowest first, the last one not 0."""
        found: dict[int, SurdSum] = {}
        for monomial, coefficient in polynomial.iterterms():
            term, power = SurdSum.rational(rational(coefficient)), 0
            for name, exponent in zip(self.parameters, monomial, strict=True):
                if name == PI:
                    power = exponent
                elif exponent:
                    term = term * values[name].power(exponent)
            found[power] = found.get(power, SurdSum(())) + term
        powers = [power for power, value in found.items() if value.terms]
        return [found.get(k, SurdSum(())) for k in range(max(powers, default=-1) + 1)]

    def rational_parts(self, element: Scalar) -> list[tuple[int, int, int]]:
        """Return (numerator, denominator, radicand) for every coefficient of an element."""
        if not element:
            return []
        terms = [*element.numer.coeffs(), *(element.denom.coeffs() if element.denom != 1 else ())]
        return [(int(c.numerator), int(c.denominator), 1) for c in terms]


def _moved(
    ring: Any, polynomial: ParameterPolynomial, places: Sequence[int]
) -> ParameterPolynomial:
    """A polynomial in another ring, with the places there of its parameters."""
    terms = {}
    for monomial, coefficient in polynomial.iterterms():
        exponents = [0] * ring.ngens
        for place, exponent in zip(places, monomial, strict=True):
            exponents[place] = exponent
        terms[tuple(exponents)] = coefficient
    return ring.dtype(terms)


def _sign_in_pi(coefficients: Sequence[SurdSum]) -> int:
    """The sign of a polynomial in pi, lowest power first; 0 only for no coefficients."""
    bits = 64
    while coefficients:
        with ctx.workprec(bits):
            total = arb(0)
            for coefficient in reversed(coefficients):
                total = total * arb.pi() + ball_of(coefficient)
            if not total.contains(0):
                return 1 if total > 0 else -1
        bits *= 2
    return 0


@lru_cache(maxsize=16384)
def _factored(element: Scalar) -> Factored:
    number = Fraction(1)
    factors: list[tuple[ParameterPolynomial, int]] = []
    for polynomial, sign in ((element.numer, 1), (element.denom, -1)):
        content, found = irreducible_factors({m: rational(c) for m, c in polynomial.iterterms()})
        number *= content**sign
        factors += [(_polynomial(polynomial.ring, f), e * sign) for f, e in found]
    factors.sort(key=lambda pair: _order(pair[0]))
    return Factored(number, tuple(factors))


def _polynomial(ring: Any, terms: PolynomialTerms) -> ParameterPolynomial:
    return ring.from_dict({m: QQ(c.numerator, c.denominator) for m, c in terms.items()})


def _order(polynomial: ParameterPolynomial) -> tuple[object, ...]:
    monomials: list[tuple[int, ...]] = polynomial.monoms()
    return (
        max(map(sum, monomials)),
        len(monomials),
        [tuple(-e for e in m) for m in monomials],
        [rational(c) for c in polynomial.coeffs()],
    )
