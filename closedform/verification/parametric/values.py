"""A case in numbers: its names at a point, from their definitions alone."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from itertools import pairwise
from typing import Any

from flint import acb, acb_mat, acb_poly, arb, arb_mat, ctx

from closedform.algebra.enclosure import ball_of
from closedform.algebra.field import FieldMatrix, Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.model.parametric import ParametricModel
from closedform.notation import enclose, plain, read_formula
from closedform.notation.expression import Expression
from closedform.response.parametric.case import Case
from closedform.response.parametric.points import Point
from closedform.response.parametric.quantities import ResidueDefinition, RootDefinition

__all__ = ["NamesAt", "enclosed_matrix", "exponential_at", "read_back", "trial_times"]

_MOST_BITS = 1 << 14


def read_back(model: ParametricModel, case: Case, formula: Expression) -> Expression:
    """Return a formula of a case as it is read from its text."""
    names = {model.time, *model.field.parameters, *(q.name for q in case.quantities)}
    return read_formula(plain(formula), names=frozenset(names))


@dataclass(frozen=True)
class NamesAt:
    """The parameters and the named quantities of a case at one of its points."""

    model: ParametricModel
    case: Case
    point: Point

    def balls(self) -> dict[str, arb]:
        """Return a ball for every name, at FLINT's current precision or close to it."""
        with ctx.extraprec(64):
            known = self.point.balls()
            for quantity in self.case.quantities:
                if quantity.formula is not None:
                    formula = read_back(self.model, self.case, quantity.formula)
                    known[quantity.name] = enclose(formula, known)
                elif quantity.root is not None:
                    known[quantity.name] = self._root(quantity.root)
        return known

    def _root(self, root: RootDefinition | ResidueDefinition) -> arb:
        field = self.model.field
        if isinstance(root, ResidueDefinition) or root.part is not None:
            return _number(field, root)
        return _root(field, root, self.point)


def _number(field: ParameterField, root: RootDefinition | ResidueDefinition) -> arb:
    """A part of a root of a polynomial in numbers, or of r/p' there; `weight` times it."""
    roots = _roots_in_order(field, root.polynomial, ctx.prec)
    if roots is None or not 1 <= root.which <= len(roots):
        return arb("nan")
    value, weight = roots[root.which - 1], 1
    if isinstance(root, ResidueDefinition):
        above, p, beside = (
            _over_balls(field, c) for c in (root.numerator, root.polynomial, root.beside)
        )
        value, weight = above(value) / (p.derivative()(value) * beside(value)), root.weight
    return weight * (value.real if root.part == "real" else value.imag)


def _over_balls(field: ParameterField, coefficients: tuple[Scalar, ...]) -> acb_poly:
    return acb_poly([field.enclose_at(c, {}) for c in reversed(coefficients)])


@lru_cache(maxsize=64)
def _roots_in_order(
    field: ParameterField, polynomial: tuple[Scalar, ...], bits: int
) -> list[acb] | None:
    """The roots by real part, then imaginary part, at that precision or a finer one.

    Real parts count as equal where the finest precision does not tell them apart.
    """
    most = max(bits, _MOST_BITS)
    while bits <= most:
        with ctx.workprec(bits):
            roots = _isolated(_over_balls(field, polynomial))
            ordered = None if roots is None else _ordered(roots, last=2 * bits > most)
        if ordered is not None:
            return ordered
        bits *= 2
    return None


def _ordered(roots: list[acb], *, last: bool) -> list[acb] | None:
    """Roots in their order, None where it is not told at this precision."""
    groups: list[list[acb]] = []
    for root in sorted(roots, key=lambda z: z.real.mid()):
        if groups and any(z.real.overlaps(root.real) for z in groups[-1]):
            groups[-1].append(root)
        else:
            groups.append([root])
    found = []
    for group in groups:
        pair = len(group) == 2 and group[0].overlaps(group[1].conjugate())
        if len(group) > 1 and not pair and not last:
            return None
        group.sort(key=lambda z: z.imag.mid())
        if any(a.imag.overlaps(b.imag) for a, b in pairwise(group)):
            return None
        found += group
    return found


def _root(field: ParameterField, root: RootDefinition, point: Point) -> arb:
    """The real root with the place that is stated, by real part and then imaginary part.

    The precision grows, for the parameters too, until the roots are told apart; a root that
    is not real, or has no certain place, has no value: a ball that is not finite.
    """
    bits, most = ctx.prec, max(ctx.prec, _MOST_BITS)
    while bits <= most:
        with ctx.workprec(bits):
            known = point.balls()
            coefficients = [field.enclose_at(c, known) for c in reversed(root.polynomial)]
            roots = _isolated(acb_poly(coefficients))
            if roots is not None:
                placed = _placed(roots, root.which, last=2 * bits > most)
                if placed is not None:
                    return placed
        bits *= 2
    return arb("nan")


def _isolated(polynomial: acb_poly) -> list[acb] | None:
    try:
        roots: Any = polynomial.roots(tol=arb(2) ** (-ctx.prec * 3 // 4))
    except ValueError:  # not told apart at this precision
        return None
    return list(roots)


def _placed(roots: list[acb], which: int, *, last: bool) -> arb | None:
    """The `which`-th root, if it is real: the only one near its place on the real axis.

    Real parts count as equal where the finest precision does not tell them apart.
    """
    for root in roots:
        if not root.imag.contains(0):
            continue
        mirror = [z for z in roots if z is not root and z.overlaps(root.conjugate())]
        if mirror:  # a pair too close to the axis to tell
            return None
        below = [z for z in roots if z is not root and z.real < root.real]
        above = [z for z in roots if z is not root and z.real > root.real]
        same = [z for z in roots if z is not root and z.real.overlaps(root.real)]
        if len(below) + len(above) + len(same) != len(roots) - 1:
            return None
        # a pair that may share the real part stands around the root: one below, one above
        place = len(below) + len(same) // 2 + 1
        if place == which and (not same or (last and len(same) == 2)):
            return root.real
    return None


def enclosed_matrix(field: ParameterField, rows: FieldMatrix, known: Mapping[str, arb]) -> arb_mat:
    """Return balls for the entries of a matrix over the field."""
    height, width = rows.shape
    entries = [field.enclose_at(e, known) for row in rows.to_list() for e in row]
    return arb_mat(height, width, entries)


def exponential_at(matrix: arb_mat, t: Fraction) -> arb_mat:
    """Return balls for e^(matrix t) by the scaling and Taylor series of acb_mat."""
    value = acb_mat(matrix * ball_of(t)).exp()
    return arb_mat(value.nrows(), value.ncols(), [e.real for e in value.entries()])


def trial_times(matrix: arb_mat) -> tuple[Fraction, ...]:
    """Return two instants near 1/|A|: a third of a power of 2, and that power of 2."""
    largest = max((abs(e).mid() for e in matrix.entries()), key=float)
    mantissa, exponent = largest.man_exp()
    order = int(mantissa).bit_length() + int(exponent) if mantissa else 0
    unit = Fraction(2) ** -order
    return (unit / 3, unit)
