"""Eigenvalues as written, and the roots that names stand for, proved from p itself.

No list of roots is trusted.  Numbers are put into p in ball arithmetic, and discs around
them are certified to hold one root each: with z_1, …, z_d distinct and
W_k = p(z_k)/prod over i of (z_k - z_i), the discs |z - z_k| <= d |W_k| hold all roots of
the monic p, and one that meets no other holds exactly one.
Source:  B. T. Smith, Error bounds for zeros of a polynomial based upon Gerschgorin's
         theorems, Journal of the ACM 17 (1970).
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, field

from flint import acb, acb_poly, arb, ctx

from closedform.algebra.enclosure import UnsettledError, ball_of
from closedform.algebra.field import BaseField, Polynomial
from closedform.algebra.isolation import isolated_columns
from closedform.algebra.roots import enclosed_roots
from closedform.algebra.spectrum import Factor
from closedform.algebra.surds import SurdSum
from closedform.response.modes import Mode
from closedform.response.names import (
    NamedConstant,
    Radical,
    ResiduePart,
    RootPart,
    constant_values,
)
from closedform.response.response import Response
from closedform.verification.comparison import (
    AGREED,
    LIMIT_BITS,
    START_BITS,
    Finding,
    check_of,
    is_narrow,
)
from closedform.verification.real_parts import LARGEST_FOR_SUMS, sums_of_roots
from closedform.verification.record import Check

__all__ = ["NamedValues", "certified_discs", "eigenvalue_check", "name_check"]

_LIMIT_BITS_FOR_ORDER = 1 << 12
_MOST_NAMED = 4


@dataclass(frozen=True)
class NamedValues:
    """What the names of a response stand for, kept by precision."""

    constants: tuple[NamedConstant, ...]
    _kept: dict[int, dict[str, arb]] = field(default_factory=dict, repr=False)

    @property
    def of_roots(self) -> bool:
        """Whether a name is defined by a root of a polynomial."""
        return any(isinstance(c.definition, RootPart | ResiduePart) for c in self.constants)

    def balls(self) -> dict[str, arb]:
        """Return a ball for every name at FLINT's current precision."""
        if ctx.prec not in self._kept:
            self._kept[ctx.prec] = constant_values(self.constants)
        return self._kept[ctx.prec]


def eigenvalue_check(response: Response, values: NamedValues) -> Check:
    """The eigenvalues as their modes say them: all the roots of each factor, each once."""
    pairs = zip(response.spectrum.factors, response.closed_forms.modes, strict=True)
    return check_of(
        "eigenvalues as written",
        (_eigenvalues_of(factor, modes, values) for factor, modes in pairs),
        f"each lies, {AGREED} in a disc of its own that was proved to hold one root",
    )


def name_check(response: Response) -> Check:
    """Names defined by the k-th root of p: roots are proved, and counted in order."""
    by_polynomial: dict[Polynomial, list[NamedConstant]] = {}
    for constant in response.closed_forms.constants:
        if isinstance(constant.definition, RootPart | ResiduePart):
            by_polynomial.setdefault(constant.definition.polynomial, []).append(constant)
    return check_of(
        "names as defined",
        (_named_roots(response, p, names) for p, names in by_polynomial.items()),
        "each root named lies in a disc that was proved to hold no other, and all roots of its "
        "polynomial were put in order by real and then by imaginary part",
    )


def certified_discs(base: BaseField, p: Polynomial, near: Sequence[acb]) -> list[acb] | None:
    """Return squares around the midpoints of `near`, each with exactly one root of the monic p.

    None if the midpoints are not deg p in number, or the squares meet at FLINT's precision.
    """
    if len(near) != p.degree():
        return None
    value = _over_balls(base, p)
    centres = [acb(z.real.mid(), z.imag.mid()) for z in near]
    squares = []
    for k, z in enumerate(centres):
        others = acb(1)
        for other in (*centres[:k], *centres[k + 1 :]):
            others *= z - other
        radius = (value(z) / others).abs_upper() * len(centres)
        if not radius.is_finite():
            return None
        squares.append(acb(arb(z.real, radius), arb(z.imag, radius)))
    return squares if _meet_only_themselves(squares, squares) else None


def _over_balls(base: BaseField, p: Polynomial) -> Callable[[acb], acb]:
    return acb_poly([acb(base.enclose(c)) for c in reversed(p.to_list())])


def _meet_only_themselves(left: Sequence[acb], right: Sequence[acb]) -> bool:
    """Whether balls of two lists meet where, and only where, their places agree."""
    return all(
        one.overlaps(other) == (i == k)
        for i, one in enumerate(left)
        for k, other in enumerate(right)
    )


# --- eigenvalues ---------------------------------------------------------------------------


def _eigenvalues_of(factor: Factor, modes: tuple[Mode, ...], values: NamedValues) -> Finding:
    bits = START_BITS
    while True:
        with ctx.workprec(bits):
            written = list(_numbers_of(modes, values.balls()))
            finding = _told(factor, written)
        if finding is not None:
            return finding
        if bits >= LIMIT_BITS:
            break
        bits *= 2
    if not all(z.is_finite() for z in written):
        return Finding("refuted", f"an eigenvalue has no value, worked to {LIMIT_BITS} bits")
    return Finding("not attempted", f"roots are not told apart by {LIMIT_BITS} bits")


def _told(factor: Factor, written: list[acb]) -> Finding | None:
    """What one precision tells about numbers that should be the roots of a factor."""
    base, p = factor.roots.field, factor.p
    if len(written) != factor.degree:
        return Finding("refuted", "some eigenvalues are missing, or too many")
    value = _over_balls(base, p)
    for z in written:
        at_z = value(z)
        if at_z.is_finite() and not at_z.contains(0):
            return Finding("refuted", f"{z.str(10)} is no root of its factor")
    # roots that are all right, but one said twice and one missing, multiply to another p
    product = acb_poly.from_roots(written)
    for k in range(factor.degree):
        coefficient = product[k]
        if coefficient.is_finite() and not coefficient.overlaps(acb(base.enclose(p.nth(k)))):
            return Finding("refuted", "some eigenvalues are missing, or said twice")
    discs = certified_discs(base, p, written)
    if discs is None or not _meet_only_themselves(written, discs):
        return None
    narrow = all(is_narrow(part) for z in (*written, *discs) for part in (z.real, z.imag))
    return Finding("enclosed") if narrow else None


def _numbers_of(modes: tuple[Mode, ...], values: dict[str, arb]) -> Iterator[acb]:
    def ball(number: SurdSum | str | None) -> arb:
        if number is None:
            return arb(0)
        return values[number] if isinstance(number, str) else ball_of(number)

    for mode in modes:
        rate, turn = ball(mode.rate), ball(mode.frequency)
        for sign in (1,) if mode.kind == "real" else (1, -1):
            if mode.kind == "circular":
                yield acb(rate, sign * turn)
            else:
                yield acb(rate + sign * turn)


# --- roots that names stand for --------------------------------------------------------------


def _named_roots(response: Response, p: Polynomial, named: list[NamedConstant]) -> Finding:
    base, names = response.field, _listed(named)
    if all(p != factor.p for factor in response.spectrum.factors):
        return Finding("refuted", f"{names}: defined by a polynomial that is no factor")
    for constant in named:
        definition = constant.definition
        if isinstance(definition, Radical) or not 1 <= definition.which <= p.degree():
            return Finding("refuted", f"{constant.name}: there is no such root")
    line = _line_of_symmetry(base, p)
    bits = START_BITS
    while bits <= _LIMIT_BITS_FOR_ORDER:
        with ctx.workprec(bits):
            found = enclosed_roots(base, p)
            discs = certified_discs(base, p, found)
            if discs is not None and _meet_only_themselves(found, discs):
                centre = None if line is None else base.enclose(line)
                places = range(len(discs) - 1)
                order = [_in_order(discs, k, centre, []) for k in places]
                if None in order:
                    sums = _discs_of_sums(base, p)
                    order = [_in_order(discs, k, centre, sums) for k in places]
                if False in order:
                    return Finding("refuted", f"{names}: roots are counted out of order")
                if None not in order:
                    return Finding("enclosed")
        bits *= 2
    return Finding(
        "not attempted", f"{names}: roots are not put in order by {_LIMIT_BITS_FOR_ORDER} bits"
    )


def _listed(named: Sequence[NamedConstant]) -> str:
    """The first names, and how many there are: a polynomial of degree six may have fifty."""
    shown = ", ".join(c.name for c in named[:_MOST_NAMED])
    further = len(named) - _MOST_NAMED
    return f"{shown} and {further} more" if further > 0 else shown


def _line_of_symmetry(base: BaseField, p: Polynomial) -> object | None:
    """The mean a of the roots if p is even about it: p(a + s) = p(a - s), exactly."""
    d = int(p.degree())
    centre = -p.nth(d - 1) / base.domain.convert(d)
    moved = p.shift(centre)
    return None if d % 2 or any(moved.nth(k) for k in range(1, d, 2)) else centre


def _discs_of_sums(base: BaseField, p: Polynomial) -> list[acb]:
    """Squares with one sum of two roots of p each; none if they are too many, or too close."""
    if p.degree() > LARGEST_FOR_SUMS:
        return []
    q = sums_of_roots(base, p)
    try:
        columns = isolated_columns(base, q, None, ctx.prec)
    except UnsettledError:
        return []  # the order stays open, and the check says so
    return certified_discs(base, q, [z for column in columns for z in column]) or []


def _in_order(discs: list[acb], k: int, line: arb | None, sums: list[acb]) -> bool | None:
    """Whether root k comes before root k + 1; None if this precision does not tell."""
    left, right = discs[k], discs[k + 1]
    if left.real < right.real:
        return True
    if right.real < left.real:
        return False
    conjugate = _only_meeting(discs, left.conjugate()) == k + 1
    on_line = line is not None and all(
        _only_meeting(discs, _mirrored(discs[i], line)) == i for i in (k, k + 1)
    )
    double = _only_meeting(sums, acb(2 * left.real))
    same_sum = double is not None and double == _only_meeting(sums, acb(2 * right.real))
    if not (conjugate or on_line or same_sum):
        return None
    # the real parts are equal: p is real, its roots lie mirror-wise about the line, or
    # each with its conjugate adds up to the same sum
    if left.imag < right.imag:
        return True
    return False if right.imag < left.imag else None


def _mirrored(z: acb, line: arb) -> acb:
    return acb(2 * line - z.real, z.imag)


def _only_meeting(discs: list[acb], ball: acb) -> int | None:
    met = [k for k, disc in enumerate(discs) if disc.overlaps(ball)]
    return met[0] if len(met) == 1 else None
