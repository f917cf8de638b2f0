"""Elements where one relation among the parameters holds, in a normal form.

Let g be irreducible over Q, of degree n >= 1 in a parameter v.  Where g vanishes, elements are
those of the field Q(others)[v]/(g), others being the parameters other than v: g is irreducible
over Q(others) too (C. F. Gauss, Disquisitiones arithmeticae, 1801, article 42).  So each has
one form c_0 + c_1 v + … + c_(n-1) v^(n-1) with c_k in Q(others), and is zero if all c_k are;
a denominator is inverted by Euclid's algorithm.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from functools import cached_property, lru_cache

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.exponential import ExponentialMatrix
from closedform.algebra.field import FieldMatrix, Polynomial, Scalar
from closedform.algebra.lowest_terms import put_in, sum_at
from closedform.algebra.parameter_field import PI, ParameterField, ParameterPolynomial

__all__ = ["NormalForm", "UnderRelation", "under_relation"]

SHIFTS = (-1, 1, -2, 2)
"""Powers of v that are tried in front of a form: 1/v is shorter than a polynomial in v."""


@dataclass(frozen=True)
class NormalForm:
    """Elements as polynomials in the parameter `main`, where the irreducible `relation` vanishes.

    It has a positive degree in `main`.
    """

    field: ParameterField
    relation: Scalar
    main: str

    @cached_property
    def _place(self) -> int:
        return self.field.parameters.index(self.main)

    @cached_property
    def _others(self) -> ParameterField:
        return ParameterField(
            parameters=tuple(name for name in self.field.parameters if name != self.main)
        )

    @property
    def degree(self) -> int:
        """The degree of the relation in `main`."""
        return int(self.relation.numer.degree(self._place))

    @cached_property
    def _value(self) -> Scalar:
        """What a linear relation puts in the place of `main`."""
        lead, rest = self._modulus.to_list()
        return self._others.into(self.field, -rest / lead)

    @cached_property
    def _modulus(self) -> Polynomial:
        return self._polynomial(self.relation.numer).monic()

    def reduced(self, element: Scalar) -> Scalar:
        """Return the one form of an element.

        Raises ZeroDivisionError if its denominator vanishes where the relation does.
        """
        return _reduced(self, element)

    def of_polynomial(self, p: Polynomial) -> Polynomial:
        """Return a polynomial over the field with its coefficients in this form."""
        return self.field.polynomial([self.reduced(c) for c in p.to_list()])

    def worked_out(self, element: Scalar) -> Scalar:
        """Return the same as `reduced`, worked out anew."""
        if self.degree == 1:
            return put_in(self.field, element, self.main, self._value)
        above = self._polynomial(element.numer).rem(self._modulus)
        if above.is_zero:
            return self.field.domain.zero
        below = self._polynomial(element.denom)
        return self._element((above * self._inverse(below)).rem(self._modulus))

    def _inverse(self, below: Polynomial) -> Polynomial:
        return self._others.inverse_modulo(self._modulus, below)

    def _polynomial(self, polynomial: ParameterPolynomial) -> Polynomial:
        """A polynomial in the parameters as one in `main`, over Q(others)."""
        others, ring = self._others, self._others.domain.field.ring
        found = _coefficients_in(polynomial, self._place)
        zero: dict[tuple[int, ...], Scalar] = {}
        return others.polynomial(
            [
                others.of_polynomial(ring.from_dict(found.get(degree, zero)))
                for degree in range(max(found, default=0), -1, -1)
            ]
        )

    def _element(self, p: Polynomial) -> Scalar:
        """A polynomial in `main` over Q(others) as an element."""
        coefficients = [self._others.into(self.field, c) for c in reversed(p.to_list())]
        return sum_at(self.field, coefficients, self.field.symbol(self.main))


@dataclass(frozen=True)
class UnderRelation:
    """A relation that holds on a domain, and the forms that elements have there.

    The first form is the one that zero is told by.
    """

    domain: ParameterDomain
    forms: tuple[NormalForm, ...]

    def reduced(self, element: Scalar) -> Scalar:
        """Return the normal form of an element.

        Raises ZeroDivisionError if its denominator vanishes where the relation does.
        """
        return self.forms[0].reduced(element)

    def shortest(self, element: Scalar) -> Scalar:
        """Return the shortest of an element and its forms, with a power of `main` in front or not.

        Those count that divide by nothing that may vanish, or else the element as it is; of
        equals the first.
        """
        return _shortest(self, element)

    def polynomial(self, p: Polynomial, *last: Scalar) -> Polynomial:
        """Return a polynomial over the field with coefficients in their shortest form.

        Forms of which a sign is known come first: where the roots lie is asked of them.  Others
        that are known of the last coefficient may be given.
        """
        *others, own = p.to_list()
        return self.domain.field.polynomial(
            [*(self._signed([c]) for c in others), self._signed([own, *last])]
        )

    def _signed(self, equal: Sequence[Scalar]) -> Scalar:
        """The shortest form of which a sign is known, of elements that are equal."""
        forms = (f for element in equal for f in _forms(self, element))
        signed = (f for f in forms if self.domain.sign_of(f).never_zero)
        return next(signed, self.shortest(equal[0]))

    def matrix(self, matrix: FieldMatrix) -> FieldMatrix:
        """Return a matrix with entries in their shortest form."""
        rows = matrix.to_list()
        return self.domain.field.matrix([[self.shortest(e) for e in row] for row in rows])

    def exponential(self, function: ExponentialMatrix) -> ExponentialMatrix:
        """Return a matrix of functions with coefficients in their shortest form."""
        terms = []
        for term in function.terms:
            residues = [
                replace(r, coefficients=tuple(map(self.matrix, r.coefficients)))
                for r in term.residues
            ]
            terms.append(replace(term, residues=tuple(residues)))
        return replace(function, terms=tuple(terms))

    def candidates(self, element: Scalar) -> Iterator[Scalar]:
        """Yield an element and other forms of it."""
        yield element
        for form in self.forms:
            yield form.reduced(element)
            v = form.field.symbol(form.main)
            for power in SHIFTS if form.degree > 1 else ():
                yield form.reduced(element * v**power) / v**power

    def is_defined(self, element: Scalar) -> bool:
        """Whether the denominator of an element is known not to vanish on the domain."""
        if element.denom.is_ground:
            return True
        field = self.domain.field
        factors = field.factored(field.of_polynomial(element.denom)).factors
        return all(self.domain.sign_of(field.of_polynomial(f)).never_zero for f, _ in factors)


def under_relation(domain: ParameterDomain, relation: Scalar) -> UnderRelation:
    """Return the forms of elements on a domain on which an irreducible polynomial vanishes.

    They are made in each parameter in which it has the lowest degree, where elements have the
    fewest terms; in those alone whose highest power has a number before it, if there are any,
    or else what is known not to vanish: this comes into denominators.  Without any of these one
    form is made, by which zero is told.  The last parameter is the first of them.
    """
    field, polynomial = domain.field, relation.numer
    found = []
    for place, name in enumerate(field.parameters):
        degree = polynomial.degree(place)
        if degree > 0 and name != PI:
            found.append((degree, _doubt(domain, polynomial, place), name))
    least = min(key[:2] for key in found)
    names = [name for *key, name in reversed(found) if tuple(key) == least]
    if least[1] == DOUBTFUL:
        names = names[:1]
    return UnderRelation(domain, tuple(NormalForm(field, relation, name) for name in names))


DOUBTFUL = 2


def _doubt(domain: ParameterDomain, polynomial: ParameterPolynomial, place: int) -> int:
    """Whether the highest power of a parameter has a number before it (0), or what may vanish."""
    field = domain.field
    terms = _coefficients_in(polynomial, place)[polynomial.degree(place)]
    if not any(map(any, terms)):
        return 0
    whole = {(*m[:place], 0, *m[place:]): c for m, c in terms.items()}
    lead = field.of_polynomial(polynomial.ring.from_dict(whole))
    return 1 if domain.sign_of(lead).never_zero else DOUBTFUL


def _coefficients_in(
    polynomial: ParameterPolynomial, place: int
) -> dict[int, dict[tuple[int, ...], Scalar]]:
    """The terms before each power of one parameter, that parameter left out."""
    found: dict[int, dict[tuple[int, ...], Scalar]] = {}
    for monomial, c in polynomial.iterterms():
        bare = (*monomial[:place], *monomial[place + 1 :])
        found.setdefault(monomial[place], {})[bare] = c
    return found


@lru_cache(maxsize=16384)
def _reduced(form: NormalForm, element: Scalar) -> Scalar:
    return form.worked_out(element)


@lru_cache(maxsize=16384)
def _shortest(under: UnderRelation, element: Scalar) -> Scalar:
    return next(iter(_forms(under, element)), under.domain.field.domain.zero)


@lru_cache(maxsize=16384)
def _forms(under: UnderRelation, element: Scalar) -> tuple[Scalar, ...]:
    """The sound forms of an element, short ones first; none of zero."""
    if not under.reduced(element):
        return ()
    field = under.domain.field
    forms = sorted(dict.fromkeys(under.candidates(element)), key=lambda e: _length(field, e))
    # what the element itself divides by is known to who made it, and nothing else is
    return tuple(filter(under.is_defined, forms)) or (element,)


def _length(field: ParameterField, element: Scalar) -> tuple[int, int]:
    """The terms in the factors of an element that is not zero, and its degree."""
    parts = field.factored(element).factors
    terms = sum(len(f) for f, _ in parts)
    return terms, sum(abs(e) * max(map(sum, f.itermonoms())) for f, e in parts)
