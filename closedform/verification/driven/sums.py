"""Exponential polynomials counted from several origins: exact sums, and when they are zero.

    f(t) = sum over (c, o, p) of c · sum over the roots of p of
           e^(lambda s)/p'(lambda) ( R_0 + R_1 s + … + R_j s^j/j! ),   s = t - o,

with c a number e^growth cos(angle) or sin(angle), o an element of K, and R_j over K[lambda]/(p).
What belongs to the eigenvalue 0 is a polynomial in t and counted from 0, whatever o is.
If every coefficient is zero, so is f.  That is all that is used: the numbers c are not known to
be independent, and a sum that is not zero by its coefficients is looked at in ball arithmetic.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from math import factorial
from typing import Any

from flint import acb, acb_poly, arb, ctx

from closedform.algebra.field import BaseField, FieldMatrix, Polynomial, Scalar
from closedform.algebra.root_matrix import RootMatrix
from closedform.algebra.waves import ONE, Constant, Wave
from closedform.verification.driven.constants import enclosed_constant, settled_constant
from closedform.verification.residuals import Vanishes, first_nonzero_over_roots

__all__ = ["Enclose", "Key", "TimedSum", "wave_sum"]

Key = tuple[Constant, Scalar, Polynomial]
"""The constant, the origin and the polynomial of the roots of one part."""
Enclose = Callable[[Scalar], arb]
"""What gives a ball for an element of the field, at FLINT's current precision."""


@dataclass(frozen=True)
class TimedSum:
    """A column of functions of the time, `rows` of them, as the module's text says."""

    field: BaseField
    rows: int
    parts: Mapping[Key, tuple[RootMatrix, ...]]

    @staticmethod
    def of(
        field: BaseField, rows: int, parts: Iterable[tuple[Key, Sequence[RootMatrix]]]
    ) -> TimedSum:
        """Return a sum, those of one key added up and polynomials counted from 0."""
        settled: list[tuple[Key, Sequence[RootMatrix]]] = []
        for (constant, origin, p), residues in parts:
            if all(residue.is_zero for residue in residues):
                continue
            own = _from_zero(field, origin, residues) if _is_root_zero(p) else residues
            start = field.domain.zero if _is_root_zero(p) else origin
            for weight, one in settled_constant(field, constant):
                scaled = own if weight == 1 else [_times(field, r, weight) for r in own]
                settled.append(((one, start, p), scaled))
        return TimedSum(field, rows, _gathered(settled))

    def __add__(self, other: TimedSum) -> TimedSum:
        both = _gathered((*self.parts.items(), *other.parts.items()))
        return TimedSum(self.field, self.rows, both)

    def __sub__(self, other: TimedSum) -> TimedSum:
        return self + other.scaled(-self.field.domain.one)

    def scaled(self, weight: Scalar) -> TimedSum:
        """Return weight · f."""
        return self._mapped(self.rows, lambda r: _times(self.field, r, weight))

    def after(self, matrix: FieldMatrix) -> TimedSum:
        """Return matrix · f, for a matrix with as many columns as f has rows."""
        return self._mapped(int(matrix.shape[0]), lambda r: r.after(matrix))

    def derivative(self) -> TimedSum:
        """Return df/dt: the coefficients lambda R_j + R_(j+1)."""
        parts: dict[Key, tuple[RootMatrix, ...]] = {}
        for key, residues in self.parts.items():
            turned = [r.times_root() for r in residues]
            higher = [a + b for a, b in zip(turned[:-1], residues[1:], strict=True)]
            parts[key] = (*higher, turned[-1])
        return TimedSum(self.field, self.rows, parts)

    def fault(self, vanishes: Vanishes) -> int | None:
        """Return the row (from 1) of a coefficient that is not zero, or None if f is zero."""
        found = [
            place[0]
            for residues in self.parts.values()
            for residue in residues
            if (place := first_nonzero_over_roots(residue, vanishes)) is not None
        ]
        return min(found, default=None)

    def enclosure(
        self, enclose: Enclose, t: arb, named: Mapping[str, arb] | None = None
    ) -> list[arb]:
        """Return a ball for each row at an instant, at FLINT's current precision.

        `named` has balls for the numbers with names in constants.
        """
        total = [arb(0)] * self.rows
        for (constant, origin, p), residues in self.parts.items():
            s = t - enclose(origin)
            front = enclosed_constant(enclose, constant, named or {})
            coefficients = [enclose(c) for c in p.to_list()]
            by_power = _values(enclose, residues, s)
            for row, value in enumerate(_over_roots(coefficients, by_power, s)):
                total[row] = total[row] + front * value
        return total

    def _mapped(self, rows: int, change: Callable[[RootMatrix], RootMatrix]) -> TimedSum:
        return TimedSum(
            self.field, rows, {key: tuple(map(change, r)) for key, r in self.parts.items()}
        )


def wave_sum(
    field: BaseField, factors: Sequence[Polynomial], vanishes: Vanishes, wave: Wave
) -> TimedSum:
    """Return a wave as a sum of one row, over that of the factors which has its roots.

    With p = (x - a)^2 + w^2, the sum of e^(lambda s)/p'(lambda) (lambda - a) over its roots is
    e^(as) cos(ws), and that of w is e^(as) sin(ws).  A factor q = p g has the same functions
    with g times the coefficients, for q' = p' g at the roots of p, and g is 0 at the others.
    """
    one, zero = field.domain.one, field.domain.zero
    amount = wave.amount * field.domain.convert(factorial(wave.power))
    p = field.polynomial([one, -wave.rate])
    weights = field.polynomial([amount])
    if wave.kernel != "one" and not vanishes(wave.frequency):
        p = p**2 + field.polynomial([wave.frequency**2])
        cosine = [amount, -amount * wave.rate]
        weights = field.polynomial(cosine if wave.kernel == "cos" else [amount * wave.frequency])
    elif wave.kernel == "sin":
        return TimedSum(field, 1, {})
    for q in factors:
        if q.degree() >= p.degree() and all(vanishes(c) for c in q.rem(p).to_list()):
            weights = weights if q.degree() == p.degree() else weights * q.quo(p)
            p = q
            break
    low_first = [*reversed(weights.to_list())]
    low_first += [zero] * (p.degree() - len(low_first))
    residue = RootMatrix(field, p, tuple(field.matrix([[c]]) for c in low_first))
    nothing = RootMatrix.constant(field, p, field.zeros(1, 1))
    key = (ONE(field), wave.origin, p)
    return TimedSum.of(field, 1, [(key, [*[nothing] * wave.power, residue])])


def _is_root_zero(p: Polynomial) -> bool:
    return bool(p.degree() == 1 and not p.nth(0))


def _from_zero(
    field: BaseField, origin: Scalar, residues: Sequence[RootMatrix]
) -> list[RootMatrix]:
    """The coefficients of F(t - origin) of a polynomial F."""
    if not origin:
        return list(residues)
    found = []
    for j in range(len(residues)):
        total = residues[j]
        for i in range(1, len(residues) - j):
            weight = (-origin) ** i / field.domain.convert(factorial(i))
            total = total + _times(field, residues[j + i], weight)
        found.append(total)
    return found


def _times(field: BaseField, residue: RootMatrix, weight: Scalar) -> RootMatrix:
    return residue.scaled(field.polynomial([field.domain.convert(weight)]))


def _gathered(
    parts: Iterable[tuple[Key, Sequence[RootMatrix]]],
) -> dict[Key, tuple[RootMatrix, ...]]:
    """The parts with those of one key added up."""
    found: dict[Key, Sequence[RootMatrix]] = {}
    for key, residues in parts:
        found[key] = _added(found[key], residues) if key in found else residues
    return {key: tuple(residues) for key, residues in found.items()}


def _added(left: Sequence[RootMatrix], right: Sequence[RootMatrix]) -> list[RootMatrix]:
    longer, shorter = (left, right) if len(left) >= len(right) else (right, left)
    sums = [a + b for a, b in zip(longer, shorter, strict=False)]
    return [*sums, *longer[len(shorter) :]]


# --- numbers -------------------------------------------------------------------------------


def _values(enclose: Enclose, residues: Sequence[RootMatrix], s: arb) -> list[list[arb]]:
    """Balls for sum of R_j s^j/j!: for each row its coefficients by the power of lambda."""
    rows, degree = residues[0].shape[0], len(residues[0].coefficients)
    total = [[arb(0)] * degree for _ in range(rows)]
    scale = arb(1)
    for j, residue in enumerate(residues):
        scale = scale * s / j if j else scale
        for k, matrix in enumerate(residue.coefficients):
            for row, (element,) in enumerate(matrix.to_list()):
                if element:
                    total[row][k] = total[row][k] + enclose(element) * scale
    return total


def _over_roots(p: list[arb], by_power: list[list[arb]], s: arb) -> list[arb]:
    """The sum over the roots of p, coefficients highest first, for every row."""
    if len(p) == 2:
        return [(-p[1] * s).exp() * row[0] for row in by_power]
    if len(p) == 3:
        centre = -p[1] / 2
        root = acb(centre**2 - p[2]).sqrt()
        even = (root * s).cosh().real
        odd = (s * (acb(0, 1) * root * s).sinc()).real  # sinh(root s)/root, whatever the root
        front = (centre * s).exp()
        return [front * (b * even + (a + centre * b) * odd) for a, b in by_power]
    polynomial = acb_poly(list(reversed(p)))
    try:
        roots: Any = polynomial.roots(tol=arb(2) ** (-ctx.prec * 3 // 4))
    except ValueError:  # not told apart at this precision
        return [arb("nan")] * len(by_power)
    slope = polynomial.derivative()
    fronts = [(root * s).exp() / slope(root) for root in roots]
    return [
        sum((f * acb_poly(row)(z) for f, z in zip(fronts, roots, strict=True)), acb(0)).real
        for row in by_power
    ]
