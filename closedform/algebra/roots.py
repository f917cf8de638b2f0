"""How the roots of an irreducible factor are told apart, ordered, enclosed and shown.

Four forms: one root in K; a pair a ± sqrt(D); 2q roots a ± sqrt(mu) with the mu the
real roots of a polynomial q (undamped modes, where mu = -omega^2); and named roots.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property, lru_cache
from operator import itemgetter
from typing import Any, Literal

from flint import acb, acb_poly, arb, ctx, fmpz_poly

from closedform.algebra.field import BaseField, Polynomial, Scalar, rational

__all__ = ["RootForm", "RootSet", "arrangement", "enclosed_roots", "root_set", "rounded"]

RootForm = Literal["single", "quadratic", "even", "named"]

_RESOLUTION = 96
_SORTING_BITS = 2 * _RESOLUTION + 64


@dataclass(frozen=True)
class RootSet:
    """The roots of the irreducible monic polynomial `p`.

    `centre` is their mean a.  For the forms "quadratic" and "even", p(s) = q((s - a)^2)
    with `squares` = q, whose roots mu are all real, so that the roots are a ± sqrt(mu).
    "even" is said where it helps: over Q with q of degree 2, or with all mu negative.
    """

    field: BaseField
    p: Polynomial
    form: RootForm
    centre: Scalar
    squares: Polynomial | None = None

    @cached_property
    def discriminant(self) -> Scalar:
        """D with roots a ± sqrt(D); of the form "quadratic" only."""
        if self.form != "quadratic" or self.squares is None:
            raise ValueError(f"the form {self.form!r} has no single discriminant")
        return -self.squares.nth(0)

    def enclosures(self) -> tuple[acb, ...]:
        """Return balls, one for each root, ordered by real and then by imaginary part.

        Each has radius below 2^-prec relative to FLINT's current precision, or close to
        it; the imaginary part of a real root is exactly zero.
        """
        return enclosed_roots(self.field, self.p)

    def square_enclosures(self) -> tuple[arb, ...]:
        """Return balls for the mu of a ± sqrt(mu), in order of growing modulus."""
        if self.squares is None:
            raise ValueError(f"the form {self.form!r} has no squares")
        balls = [root.real for root in enclosed_roots(self.field, self.squares)]
        return tuple(sorted(balls, key=lambda mu: rounded(abs(mu))))


def root_set(field: BaseField, p: Polynomial) -> RootSet:
    """Return the roots of an irreducible monic polynomial over the field, classified."""
    d = int(p.degree())
    centre = -p.nth(d - 1) / field.domain.convert(d)
    if d == 1:
        return RootSet(field, p, "single", centre)
    moved = p.shift(centre)
    if d % 2 or any(moved.nth(k) for k in range(1, d, 2)):
        return RootSet(field, p, "named", centre)
    squares = field.polynomial([moved.nth(k) for k in range(d, -1, -2)])
    if d == 2:
        return RootSet(field, p, "quadratic", centre, squares)
    with ctx.workprec(_SORTING_BITS):
        found = enclosed_roots(field, squares)
    all_real = all(mu.imag == 0 for mu in found)
    two_surds = len(found) == 2 and not field.radicands
    if all_real and (two_surds or all(mu.real < 0 for mu in found)):
        return RootSet(field, p, "even", centre, squares)
    return RootSet(field, p, "named", centre)


def enclosed_roots(field: BaseField, p: Polynomial) -> tuple[acb, ...]:
    """Return certified balls for the roots of a squarefree polynomial over the field.

    Ordered by real part, then imaginary part; real roots have imaginary part exactly 0.
    """
    return _enclosed_roots(field, p, ctx.prec)


@lru_cache(maxsize=256)
def _enclosed_roots(field: BaseField, p: Polynomial, bits: int) -> tuple[acb, ...]:
    """The order must not hang on the precision, so it is found at a fine one.

    Real parts that agree to `resolution` bits count as equal; distinct roots that agree
    altogether ask for a finer look.
    """
    resolution = _RESOLUTION
    while True:
        fine = max(bits, 2 * resolution + 64)
        with ctx.workprec(fine):
            balls = _isolated_roots(field, p, fine)
            keys = [(rounded(z.real, resolution), rounded(z.imag, resolution)) for z in balls]
        if len(set(keys)) == len(keys):
            return tuple(z for _, z in sorted(zip(keys, balls, strict=True), key=itemgetter(0)))
        resolution *= 2


def _isolated_roots(field: BaseField, p: Polynomial, bits: int) -> list[acb]:
    if field.radicands:
        return _roots_over_surds(field, p, bits)
    _, primitive = p.clear_denoms()
    integral = [int(rational(c)) for c in reversed(primitive.to_list())]
    # The type stubs leave out that the roots come with their multiplicities.
    pairs: Any = fmpz_poly(integral).complex_roots()
    return [root for root, _ in pairs]


def arrangement(roots: RootSet) -> tuple[object, ...]:
    """Return the sorting key of a factor: slowest mode first, then lowest frequency.

    Only the order of printing depends on it; no equality is decided here.
    """
    with ctx.workprec(_SORTING_BITS):
        leading = min((-rounded(z.real), rounded(abs(z.imag))) for z in roots.enclosures())
    return (*leading, int(roots.p.degree()))


def _roots_over_surds(field: BaseField, p: Polynomial, wanted: int) -> list[acb]:
    bits = wanted + 64
    while True:
        with ctx.workprec(bits):
            balls = acb_poly([acb(field.enclose(c)) for c in reversed(p.to_list())])
            try:
                found = balls.roots(tol=arb(2) ** -wanted, maxprec=2 * bits)
            except ValueError:  # not isolated yet: the coefficients' balls are too wide
                bits *= 2
                continue
        return [acb(z.real) if _meets_only_itself(z, found) else z for z in found]


def _meets_only_itself(z: acb, all_roots: list[acb]) -> bool:
    """A root isolated from all others whose conjugate lies in its own ball is real."""
    mirrored = z.conjugate()
    return [w for w in all_roots if w.overlaps(mirrored)] == [z]


def rounded(ball: arb, resolution: int = _RESOLUTION) -> int:
    """Return the midpoint in units of 2^-resolution: small balls around one number agree."""
    # A midpoint is a dyadic rational: mantissa times a power of two.
    mantissa, exponent = ball.mid().man_exp()
    shift = int(exponent) + resolution
    return int(mantissa) << shift if shift >= 0 else (int(mantissa) >> -shift - 1) + 1 >> 1
