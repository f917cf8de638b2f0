"""The spectrum of a matrix over Q(parameters), and over it with one relation among them.

Nothing is ordered or enclosed: where the roots lie hangs on the parameters.
"""

from __future__ import annotations

from functools import reduce
from operator import mul

from closedform.algebra.field import FieldMatrix, Polynomial, Scalar
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
    field: ParameterField, spectrum: Spectrum, relation: Scalar
) -> Spectrum:
    """Return the spectrum where the irreducible polynomial `relation` vanishes.

    There the characteristic polynomial has roots in common that it has not elsewhere.  It is
    taken apart by greatest common divisors (D. Y. Y. Yun, On square-free decomposition
    algorithms, 1976), with numerators that `relation` divides counted as zero.  Every root
    is given one block of the size of its multiplicity: the exponential is then right
    whatever the true sizes are.
    """
    c = spectrum.characteristic_polynomial
    factors = []
    for p, multiplicity in _squarefree_parts(field, c, relation):
        known = [f.p for f in spectrum.factors if f.p == p]
        parts = known or _rational_parts(field, p, spectrum, relation)
        factors += [Factor(q, (multiplicity,), _root_set(field, q)) for q in parts]
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


def _squarefree_parts(
    field: ParameterField, polynomial: Polynomial, relation: Scalar
) -> list[tuple[Polynomial, int]]:
    """Return (p, m) with the product of p^m the polynomial, p squarefree, where g vanishes."""
    common = _gcd(field, polynomial, polynomial.diff(), relation)
    rest = polynomial.quo(common)
    parts, multiplicity = [], 1
    while rest.degree() > 0:
        shared = _gcd(field, rest, common, relation)
        part = rest.quo(shared).monic()
        if part.degree() > 0:
            parts.append((part, multiplicity))
        rest, common = shared, common.quo(shared)
        multiplicity += 1
    return parts


def _gcd(field: ParameterField, a: Polynomial, b: Polynomial, relation: Scalar) -> Polynomial:
    """Euclid's algorithm; leading coefficients that vanish under the relation are dropped."""
    a, b = _trimmed(field, a, relation), _trimmed(field, b, relation)
    while not b.is_zero:
        a, b = b, _trimmed(field, a.rem(b), relation)
    return a.monic()


def _trimmed(field: ParameterField, polynomial: Polynomial, relation: Scalar) -> Polynomial:
    coefficients = polynomial.to_list()
    kept = [field.domain.zero if vanishes_under(c, relation) else c for c in coefficients]
    return field.polynomial(kept)


def _rational_parts(
    field: ParameterField, p: Polynomial, spectrum: Spectrum, relation: Scalar
) -> list[Polynomial]:
    """Split off what p shares with the factors that the spectrum has elsewhere."""
    parts, rest = [], p
    for factor in spectrum.factors:
        shared = _gcd(field, rest, factor.p, relation)
        if 0 < shared.degree() < rest.degree():
            parts.append(shared)
            rest = rest.quo(shared).monic()
    return [*parts, rest]
