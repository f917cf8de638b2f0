"""The real modes of a spectrum, and the amounts in which they enter a function.

A mode is one family of real functions e^(rate t) · {1 | cos, sin | cosh, sinh}(frequency t).
Every exponential polynomial over the spectrum is a sum over modes and powers of t of an
amount of the even function (1, cos, cosh) and an amount of the odd one (sin, sinh).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import factorial
from typing import Literal

from closedform.algebra.exponential import ModalTerm
from closedform.algebra.field import Polynomial
from closedform.algebra.parts import vanishing_parts
from closedform.algebra.roots import enclosed_roots, roots_by_real_part
from closedform.algebra.spectrum import Factor
from closedform.algebra.surds import SurdSum
from closedform.notation.terms import radical_formula, square_root_of_surd
from closedform.response.names import NameBook, Radical, ResiduePart, RootPart

__all__ = ["Amount", "Contribution", "Mode", "contributions", "modes_of"]

Kind = Literal["real", "circular", "hyperbolic"]


@dataclass(frozen=True)
class Amount:
    """An exact factor of a mode: a surd sum, or plus or minus a named constant.

    `value` multiplies the constant `name` if there is one; `times` names a frequency that
    multiplies it, `over` one that divides it.
    """

    value: SurdSum
    name: str | None = None
    times: str | None = None
    over: str | None = None

    @property
    def is_zero(self) -> bool:
        """Whether the amount vanishes, exactly."""
        return self.value.is_zero


ZERO = Amount(SurdSum(()))


@dataclass(frozen=True)
class Mode:
    """One mode of a factor: numbers are surd sums, or names of constants.

    `which` is the place (from 1) of the mode's root with imaginary part >= 0 among the
    roots of the factor, ordered by real and then imaginary part.
    """

    factor: Factor
    kind: Kind
    rate: SurdSum | str
    frequency: SurdSum | str | None
    which: int


@dataclass(frozen=True)
class Contribution:
    """What a mode contributes: for each power of t, the even and the odd amount."""

    mode: Mode
    amounts: tuple[tuple[Amount, Amount], ...]


def modes_of(factor: Factor, book: NameBook, *, first: int, name_surds: bool) -> tuple[Mode, ...]:
    """Return the modes of a factor, slowest first; numbers without a short form get names.

    `first` is the number of the factor's first eigenvalue.  With `name_surds`, a frequency
    such as sqrt(79)/4 is named too.
    """
    roots, field = factor.roots, factor.roots.field
    centre = field.surds(roots.centre)
    if roots.form == "single":
        return (Mode(factor, "real", centre, None, 1),)
    if roots.form == "quadratic":
        return (_quadratic_mode(factor, centre, book, name_surds=name_surds),)
    if roots.form == "even":
        return _even_modes(factor, centre, book)
    return _named_modes(factor, book, first)


def contributions(
    modes: Sequence[Mode], term: ModalTerm, row: int, column: int, book: NameBook
) -> tuple[Contribution, ...]:
    """Return what one entry of a modal term contributes to each of its factor's modes."""
    entries = [residue.entry(row, column) for residue in term.residues]
    found = []
    for mode in modes:
        amounts = [
            _amounts(mode, entry, Fraction(1, factorial(power)), book)
            for power, entry in enumerate(entries)
        ]
        while amounts and all(a.is_zero for a in amounts[-1]):
            amounts.pop()
        if amounts:
            found.append(Contribution(mode, tuple(amounts)))
    return tuple(found)


def _quadratic_mode(factor: Factor, centre: SurdSum, book: NameBook, *, name_surds: bool) -> Mode:
    field, discriminant = factor.roots.field, factor.roots.discriminant
    circular = field.sign(discriminant) < 0
    square = field.surds(-discriminant if circular else discriminant)
    root = square_root_of_surd(square)
    frequency: SurdSum | str
    if root is not None and (root.is_rational or not name_surds):
        frequency = root
    else:
        stem = "omega" if circular else "kappa"
        frequency = book.name_of(stem, Radical(radical_formula(square)))
    return Mode(factor, "circular" if circular else "hyperbolic", centre, frequency, 2)


def _even_modes(factor: Factor, centre: SurdSum, book: NameBook) -> tuple[Mode, ...]:
    modes: list[Mode] = []
    for circular, which in factor.roots.square_places():
        kind: Kind = "circular" if circular else "hyperbolic"
        mode = Mode(factor, kind, centre, None, which)
        square = surd_square(mode)
        definition: Radical | RootPart
        if square is None:
            definition = RootPart(factor.roots.field, factor.p, which, "imaginary")
        else:
            definition = Radical(radical_formula(-square if circular else square))
        name = book.name_of("omega" if circular else "kappa", definition)
        modes.append(Mode(factor, kind, centre, name, which))
    return tuple(modes)


def _squares(factor: Factor) -> Polynomial:
    if factor.roots.squares is None:
        raise TypeError("only even factors have squares")
    return factor.roots.squares


def surd_square(mode: Mode) -> SurdSum | None:
    """Return mu = b ± sqrt(E) for a mode a ± sqrt(mu) of an even quartic over Q.

    None where sqrt(E) is no surd that is known; then all modes of the factor are circular.
    """
    half_gap = mode.factor.roots.half_gap
    if half_gap is None:
        return None
    _, b, c = (mode.factor.roots.field.surds(x) for x in _squares(mode.factor).to_list())
    mean = b * SurdSum.rational(Fraction(-1, 2))
    # The two mu have the product c.  Two circular modes stand at the places 3 and 4, slower
    # first, two hyperbolic ones too; of one each the hyperbolic one has the greater mu.
    same_sign = c.as_fraction() > 0
    slower = mode.which == mode.factor.degree - 1
    upper = slower if same_sign and mode.kind == "circular" else not slower
    return mean + half_gap if upper else mean - half_gap


def _named_modes(factor: Factor, book: NameBook, number: int) -> tuple[Mode, ...]:
    field, p = factor.roots.field, factor.p
    balls = enclosed_roots(field, p)
    modes = []
    for group in reversed(roots_by_real_part(field, p)):
        for which in group:
            root = balls[which - 1]
            if root.imag == 0:
                name = book.name_of("lambda", RootPart(field, p, which, "real"), number=number)
                modes.append(Mode(factor, "real", name, None, which))
                number += 1
            elif root.imag > 0:
                rate = _rate(factor, which, book)
                frequency = book.name_of("omega", RootPart(field, p, which, "imaginary"))
                modes.append(Mode(factor, "circular", rate, frequency, which))
                number += 2
    return tuple(modes)


def _rate(factor: Factor, which: int, book: NameBook) -> SurdSum | str:
    """The real part of a root: the centre a where Re(lambda - a) = 0, else a named number."""
    field, p, centre = factor.roots.field, factor.p, factor.roots.centre
    offset = field.polynomial([field.domain.one, -centre]) * p.diff()
    on_centre, _ = vanishing_parts(field, p, which, offset.rem(p))
    if on_centre:
        return field.surds(centre)
    return book.name_of("alpha", RootPart(field, p, which, "real"))


def _amounts(
    mode: Mode, entry: Polynomial, weight: Fraction, book: NameBook
) -> tuple[Amount, Amount]:
    """The even and odd amount of e^(lambda t) entry(lambda)/p'(lambda), summed over the roots."""
    if entry.is_zero:
        return ZERO, ZERO
    roots, field = mode.factor.roots, mode.factor.roots.field
    scale = SurdSum.rational(weight)
    if roots.form == "single":
        return Amount(field.surds(entry.nth(0)) * scale), ZERO
    if roots.form == "quadratic":
        even = entry.nth(1)
        odd = field.surds(entry.nth(0) + roots.centre * even) * scale
        square = field.surds(roots.discriminant)
        square = -square if mode.kind == "circular" else square
        return Amount(field.surds(even) * scale), _over(odd, mode, square)
    mu = surd_square(mode)
    if mu is not None:
        return _even_amounts(mode, mu, entry, scale)
    return _named_amounts(mode, entry, weight, book)


def _over(value: SurdSum, mode: Mode, square: SurdSum) -> Amount:
    """Return value/w for the frequency w of a mode; ± w^2/w is ± w.

    Other values stay over w: so they keep the size that the model's numbers gave them.
    """
    if value.is_zero:
        return ZERO
    if isinstance(mode.frequency, SurdSum):
        return Amount(value / mode.frequency)
    if value in (square, -square):
        return Amount(value / square, times=mode.frequency)
    return Amount(value, over=mode.frequency)


def _even_amounts(
    mode: Mode, mu: SurdSum, entry: Polynomial, scale: SurdSum
) -> tuple[Amount, Amount]:
    """With x = lambda - a and mu = x^2: R = R_e(mu) + x R_o(mu), and p' = 2 x q'(mu)."""
    roots, field = mode.factor.roots, mode.factor.roots.field
    moved = entry.shift(roots.centre)
    r = [field.surds(moved.nth(k)) for k in range(4)]
    slope = (mu + mu + field.surds(_squares(mode.factor).nth(1))).inverse() * scale
    even = (r[1] + r[3] * mu) * slope
    odd = (r[0] + r[2] * mu) * slope
    return Amount(even), _over(odd, mode, -mu if mode.kind == "circular" else mu)


def _named_amounts(
    mode: Mode, entry: Polynomial, weight: Fraction, book: NameBook
) -> tuple[Amount, Amount]:
    field, p = mode.factor.roots.field, mode.factor.p
    positive = field.sign(entry.LC()) > 0
    sign = SurdSum.rational(1 if positive else -1)
    numerator = entry if positive else -entry

    def named(part: Literal["real", "imaginary"], factor: int) -> Amount:
        definition = ResiduePart(field, p, mode.which, numerator, factor * weight, part)
        return Amount(sign, name=book.name_of("C", definition))

    if mode.kind == "real":
        return named("real", 1), ZERO
    if mode.factor.roots.form == "even":  # with x = lambda - a, p' is odd in x
        moved = entry.shift(mode.factor.roots.centre).to_list()[::-1]
        no_even, no_odd = not any(moved[1::2]), not any(moved[0::2])
    else:
        no_even, no_odd = vanishing_parts(field, p, mode.which, numerator)
    return (
        ZERO if no_even else named("real", 2),
        ZERO if no_odd else named("imaginary", -2),
    )
