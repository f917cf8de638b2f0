"""The spectrum of a matrix over Q(parameters), and over it with one relation among them.

Nothing is ordered or enclosed: where the roots lie hangs on the parameters.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from functools import reduce
from operator import mul

from closedform.algebra.field import FieldMatrix, Polynomial, Scalar
from closedform.algebra.normal_form import UnderRelation
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.roots import RootForm, RootSet
from closedform.algebra.spectrum import Factor, Spectrum, block_sizes

__all__ = ["parametric_spectrum", "spectrum_under_relation", "vanishes_under"]


def parametric_spectrum(field: ParameterField, matrix: FieldMatrix) -> Spectrum:
    """Return the spectrum over Q(parameters), factors of low degree first.

    The characteristic polynomial is taken block by block (strongly connected blocks of A)
    and factored over the field; block sizes of a repeated factor follow from ranks.
    """
    found: dict[Polynomial, int] = {}
    for coefficients, multiplicity in matrix.charpoly_factor_list():
        p = field.polynomial(coefficients).monic()
        found[p] = found.get(p, 0) + multiplicity
    factors = []
    for p, multiplicity in found.items():
        blocks = (1,) if multiplicity == 1 else block_sizes(field, matrix, p, multiplicity)
        factors.append(Factor(p, blocks, _root_set(field, p)))
    diagonal = [matrix[i, i].element for i in range(matrix.shape[0])]
    return _spectrum(field, sorted(factors, key=lambda f: _place(f, diagonal)))


def spectrum_under_relation(
    field: ParameterField, spectrum: Spectrum, relation: UnderRelation
) -> Spectrum:
    """Return the spectrum where an irreducible polynomial vanishes, its coefficients short.

    There the characteristic polynomial has roots in common that it has not elsewhere.  It is
    taken apart by greatest common divisors (D. Y. Y. Yun, On square-free decomposition
    algorithms, 1976), with coefficients in their normal form.  Every root
    is given one block of the size of its multiplicity: the exponential is then right
    whatever the true sizes are.
    """
    normal = relation.forms[0].of_polynomial
    elsewhere = [normal(f.p) for f in spectrum.factors]
    known = {q: relation.polynomial(f.p) for f, q in zip(spectrum.factors, elsewhere, strict=True)}
    found = [
        (part, multiplicity)
        for p, multiplicity in _squarefree_parts(spectrum.characteristic_polynomial, normal)
        for part in ([p] if p in known else _rational_parts(p, elsewhere, normal))
    ]
    product = reduce(mul, (known[p].nth(0) ** m for p, m in found if p in known), field.domain.one)
    last = spectrum.characteristic_polynomial.nth(0) / product if product else product
    new = [(p, m) for p, m in found if p not in known]
    factors = []
    for p, multiplicity in found:
        # a single factor that is new has the rest of the product of all roots
        rest = (last,) if last and new == [(p, 1)] else ()
        short = known.get(p) or relation.polynomial(p, *rest)
        factors.append(Factor(short, (multiplicity,), _root_set(field, short)))
    return _spectrum(field, sorted(factors, key=lambda f: (f.degree, str(f.p))))


def vanishes_under(element: Scalar, relation: Scalar | None) -> bool:
    """Whether an element is zero, or zero wherever the relation is."""
    if not element or relation is None:
        return not element
    return not element.numer.rem(relation.numer)


def _spectrum(field: ParameterField, factors: list[Factor]) -> Spectrum:
    one = field.polynomial([field.domain.one])
    whole = reduce(mul, (f.p**f.multiplicity for f in factors), one)
    return Spectrum(field, whole, tuple(factors))


def _place(factor: Factor, diagonal: list[Scalar]) -> tuple[object, ...]:
    """Sort by degree; single roots in the order in which they stand on the diagonal of A."""
    root = factor.roots.centre
    where = diagonal.index(root) if factor.degree == 1 and root in diagonal else len(diagonal)
    return factor.degree, where, str(factor.p)


def _root_set(field: ParameterField, p: Polynomial) -> RootSet:
    d = int(p.degree())
    centre = -p.nth(d - 1) / field.scalar(d)
    if d == 1:
        return RootSet(field, p, "single", centre)
    moved = p.shift(centre)
    if d % 2 or any(moved.nth(k) for k in range(1, d, 2)):
        return RootSet(field, p, "named", centre)
    squares = field.polynomial([moved.nth(k) for k in range(d, -1, -2)])
    form: RootForm = "quadratic" if d == 2 else "even"
    return RootSet(field, p, form, centre, squares)


Normal = Callable[[Polynomial], Polynomial]
"""Brings the coefficients of a polynomial into their normal form: those that vanish become 0."""


def _squarefree_parts(polynomial: Polynomial, normal: Normal) -> list[tuple[Polynomial, int]]:
    """Return (p, m) with the product of p^m the polynomial, p squarefree."""
    common = _gcd(polynomial, polynomial.diff(), normal)
    rest = normal(normal(polynomial).quo(common))
    parts, multiplicity = [], 1
    while rest.degree() > 0:
        shared = _gcd(rest, common, normal)
        part = normal(rest.quo(shared).monic())
        if part.degree() > 0:
            parts.append((part, multiplicity))
        rest, common = shared, normal(common.quo(shared))
        multiplicity += 1
    return parts


def _gcd(a: Polynomial, b: Polynomial, normal: Normal) -> Polynomial:
    """Euclid's algorithm."""
    a, b = normal(a), normal(b)
    while not b.is_zero:
        a, b = b, normal(a.rem(b))
    return normal(a.monic())


def _rational_parts(
    p: Polynomial, elsewhere: Sequence[Polynomial], normal: Normal
) -> list[Polynomial]:
    """Split off what p shares with the factors that the spectrum has elsewhere."""
    parts, rest = [], p
    for factor in elsewhere:
        shared = _gcd(rest, factor, normal)
        if 0 < shared.degree() < rest.degree():
            parts.append(shared)
            rest = normal(rest.quo(shared).monic())
    return [*parts, rest]
