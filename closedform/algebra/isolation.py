"""The roots of a squarefree polynomial in balls that hold one root each.

What is exact about them is made exact: real roots have no imaginary part, conjugate ones
share their real part, and so do those on the axis of a symmetric polynomial.
"""

from __future__ import annotations

from typing import Any

from flint import acb, acb_poly, arb, ctx, fmpz_poly

from closedform.algebra.enclosure import MOST_BITS, UnsettledError
from closedform.algebra.field import BaseField, Polynomial, Scalar, rational

__all__ = ["isolated_columns"]


def isolated_columns(
    field: BaseField, p: Polynomial, axis: Scalar | None, bits: int
) -> list[list[acb]]:
    """Return balls for the roots, those gathered whose real parts are known to be equal.

    `axis` is a if p(a + x) is even or odd in x.  The radii are about 2^-bits of the roots'
    moduli or less.  Raises UnsettledError if the roots are not isolated with `MOST_BITS`.
    """
    working = bits
    while working <= max(MOST_BITS, bits):
        balls = _isolated(field, p, working)
        with ctx.workprec(working):
            columns = _columns(balls, None if axis is None else field.enclose(axis))
        if columns is not None:
            return columns
        working *= 2
    raise UnsettledError(f"the roots of a polynomial of degree {p.degree()}", working)


def _columns(balls: list[acb], axis: arb | None) -> list[list[acb]] | None:
    """Return the columns, or None where the balls are too wide to tell.

    The conjugate of a root is a root.  If its ball meets one ball only, it lies there; a
    root whose conjugate lies in its own ball is real.  The same holds for the mirror image
    in the axis.
    """
    central: list[acb] = []
    columns: list[list[acb]] = []
    for place, z in enumerate(balls):
        partner = _only_one(z.conjugate(), balls)
        if partner is None:
            return None
        if partner < place:
            continue
        column = [acb(z.real)] if partner == place else [z, z.conjugate()]
        image = place if axis is None else _only_one(2 * axis - z.conjugate(), balls)
        if image is None:
            return None
        if axis is not None and image == place:
            central += [acb(axis, w.imag) for w in column]
        else:
            columns.append(column)
    return [*columns, central] if central else columns


def _only_one(z: acb, balls: list[acb]) -> int | None:
    places = [k for k, ball in enumerate(balls) if ball.overlaps(z)]
    return places[0] if len(places) == 1 else None


def _isolated(field: BaseField, p: Polynomial, bits: int) -> list[acb]:
    if not p.nth(0):  # 0 is a root: the others are found to a relative accuracy
        rest = field.polynomial(p.to_list()[:-1])
        return [acb(0), *(_isolated(field, rest, bits) if rest.degree() else [])]
    if field.encloses_only:
        return _roots_from_balls(field, p, bits)
    _, primitive = p.clear_denoms()
    integral = [int(rational(c)) for c in reversed(primitive.to_list())]
    with ctx.workprec(bits):
        # The type stubs leave out that the roots come with their multiplicities.
        pairs: Any = fmpz_poly(integral).complex_roots()
    return [root for root, _ in pairs]


def _roots_from_balls(field: BaseField, p: Polynomial, wanted: int) -> list[acb]:
    """Return roots each to `wanted` bits of its modulus, from enclosed coefficients."""
    bits = wanted + 64
    finer = 8
    while bits <= max(MOST_BITS, 4 * wanted):
        with ctx.workprec(bits):
            scale, balls = _scaled([field.enclose(c) for c in reversed(p.to_list())])
            try:
                found = balls.roots(tol=arb(2) ** -(wanted + finer), maxprec=2 * bits)
            except ValueError:  # not isolated yet: the coefficients' balls are too wide
                bits *= 2
                continue
            missing = wanted - min(int(z.rel_accuracy_bits()) for z in found)
            if missing <= 0:
                return [z * scale for z in found]
        finer, bits = finer + missing, bits + 2 * missing
    raise UnsettledError(f"the roots of a polynomial of degree {p.degree()}", bits)


def _scaled(coefficients: list[arb]) -> tuple[arb, acb_poly]:
    """Return 2^s and the polynomial with its roots divided by 2^s, the largest of size 1.

    The coefficients stand lowest first, the leading one is 1.  Source:  M. Fujiwara, Über
    die obere Schranke des absoluten Betrages der Wurzeln einer algebraischen Gleichung, 1916.
    """
    degree = len(coefficients) - 1
    sizes = []
    for k, c in enumerate(coefficients[:-1]):
        mantissa, exponent = map(int, c.mid().man_exp())
        if mantissa:
            sizes.append((mantissa.bit_length() + exponent) // (degree - k))
    scale = arb(2) ** max(sizes)
    scaled = [acb(c * scale ** (k - degree)) for k, c in enumerate(coefficients)]
    return scale, acb_poly(scaled)
