"""Whether two roots of p have the same real part, proved by the polynomial of their sums.

Numbers in balls are never proved equal.  But for a real p twice the real part of a root z
is z + conj(z), a root of the polynomial whose roots are the sums of two roots of p; and two
of its roots in a disc that holds only one are the same.  It is found from power sums by
Newton's identities, in the field, without any root.
Source:  I. G. Macdonald, Symmetric Functions and Hall Polynomials, 1979, chapter I (Newton's
         identities).
"""

from __future__ import annotations

from functools import lru_cache
from math import comb

from closedform.algebra.field import BaseField, Polynomial, Scalar

__all__ = ["LARGEST_FOR_SUMS", "sums_of_roots"]

LARGEST_FOR_SUMS = 12
"""The degree of p up to which sums are formed: there are d (d + 1)/2 of them."""


@lru_cache(maxsize=16)
def sums_of_roots(base: BaseField, p: Polynomial) -> Polynomial:
    """Return the monic squarefree polynomial with the roots r_i + r_j, i <= j, of a monic p."""
    d = int(p.degree())
    count = d * (d + 1) // 2
    convert = base.domain.convert
    powers = _power_sums(base, p, count)
    sums = [convert(count)]
    for k in range(1, count + 1):
        ordered = sum(
            (convert(comb(k, m)) * powers[m] * powers[k - m] for m in range(k + 1)),
            base.domain.zero,
        )
        # pairs in both orders, and each root with itself once
        sums.append((ordered + convert(2**k) * powers[k]) / convert(2))
    q = base.polynomial(_coefficients(base, sums))
    return q.quo(q.gcd(q.diff())).monic()


def _power_sums(base: BaseField, p: Polynomial, last: int) -> list[Scalar]:
    """The sums of the k-th powers of the roots for k = 0, …, last."""
    d = int(p.degree())
    a = [p.nth(d - i) for i in range(d + 1)]
    sums = [base.domain.convert(d)]
    for k in range(1, last + 1):
        known = sum((a[i] * sums[k - i] for i in range(1, min(k - 1, d) + 1)), base.domain.zero)
        own = base.domain.convert(k) * a[k] if k <= d else base.domain.zero
        sums.append(-known - own)
    return sums


def _coefficients(base: BaseField, sums: list[Scalar]) -> list[Scalar]:
    """The coefficients, highest first, of the monic polynomial with these power sums."""
    found = [base.domain.one]
    for k in range(1, len(sums)):
        total = sum((found[i] * sums[k - i] for i in range(k)), base.domain.zero)
        found.append(-total / base.domain.convert(k))
    return found
