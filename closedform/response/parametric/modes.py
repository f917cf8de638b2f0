"""The modes of a case: its factors in their regimes, and the names that their roots need."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property, reduce
from math import isqrt
from operator import mul

from closedform.algebra.field import Polynomial, Scalar
from closedform.algebra.known_roots import KnownRoot
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.regimes import Regime
from closedform.algebra.spectrum import Factor
from closedform.response.parametric.quantities import (
    Letters,
    Part,
    Quantity,
    ResidueDefinition,
    RootDefinition,
    SquareRoot,
    SumOfRoots,
    Value,
)

__all__ = [
    "NAMED_REAL",
    "Mode",
    "Residue",
    "modes_of",
    "perfect_root",
    "quantities_of",
    "squares_of",
    "value_at_pair",
]

NAMED_REAL = frozenset({"decaying", "real roots"})
DECAYING = ("alpha", "beta", "gamma", "delta")
"""What the trade calls the rates of a sum of decaying exponentials, fastest first."""


@dataclass(frozen=True)
class Residue:
    """A part of numerator(lambda)/p'(lambda) at a known root; the name None is for zero.

    The same number is stated as that part of above(lambda)/(p'(lambda) beside(lambda)).
    """

    which: int
    part: Part
    numerator: Polynomial
    name: str | None
    above: Polynomial
    beside: Polynomial


@dataclass(frozen=True)
class Mode:
    """A factor in one regime, and the names of what belongs to its roots.

    `frequency` is an element of K where sqrt(± D) is one, and needs no name.  Known roots
    have `residues`: the amounts with which they occur; `others` is the product of the other
    factors then.
    """

    factor: Factor
    regime: Regime
    names: tuple[str, ...] = ()
    frequency: Scalar | None = None
    residues: tuple[Residue, ...] = ()
    others: Polynomial | None = None

    @property
    def written_names(self) -> tuple[str, ...]:
        """All names that formulas use for this mode."""
        return (*self.names, *(r.name for r in self.residues if r.name is not None))

    @cached_property
    def named_residues(self) -> dict[tuple[int, Part, Polynomial], str | None]:
        """The name of each residue, by root, part and numerator."""
        return {(r.which, r.part, r.numerator): r.name for r in self.residues}

    @property
    def named_roots(self) -> tuple[tuple[KnownRoot, str | None, str | None], ...]:
        """The known roots, each with the name of its real part and that of its frequency.

        None for a real part that is the mean of all roots, and for the frequency of a real root.
        """
        left = iter(self.names)
        return tuple(
            (root, None if root.centred else next(left), None if root.is_real else next(left))
            for root in self.regime.roots
        )


def modes_of(
    field: ParameterField, factors: Sequence[Factor], regimes: Sequence[Regime], letters: Letters
) -> tuple[Mode, ...]:
    """Return one mode per factor, its names taken from `letters`."""
    pairs = list(zip(factors, regimes, strict=True))
    stems = [_stem(field, factor, regime) for factor, regime in pairs]
    modes = []
    for k, (factor, regime) in enumerate(pairs):
        number = None if stems.count(stems[k]) == 1 else stems[: k + 1].count(stems[k])
        modes.append(_mode(field, factor, regime, letters, number))
    return tuple(modes)


def _mode(
    field: ParameterField, factor: Factor, regime: Regime, letters: Letters, number: int | None
) -> Mode:
    d = factor.degree
    match regime.kind:
        case "circular" | "hyperbolic":
            frequency = perfect_root(field, _square(factor, regime))
            if frequency is not None:
                return Mode(factor, regime, (), frequency)
            return Mode(factor, regime, (letters.take(_stem(field, factor, regime), number),))
        case "decaying" if d <= len(DECAYING):
            return Mode(factor, regime, tuple(letters.take(s, number) for s in DECAYING[:d]))
        case "decaying":
            return Mode(factor, regime, tuple(letters.take("alpha", k + 1) for k in range(d)))
        case "real roots":
            return Mode(factor, regime, tuple(letters.take("lambda", k + 1) for k in range(d)))
        case "squares":
            several = len(set(regime.signs)) < len(regime.signs)
            stems = ["omega" if sign == "circular" else "kappa" for sign in regime.signs]
            names = tuple(letters.take(s, k if several else None) for k, s in enumerate(stems, 1))
            return Mode(factor, regime, names)
        case "quartet":
            return Mode(factor, regime, tuple(map(letters.take, ("rho", "sigma", "omega"))))
        case "root and pair":
            return Mode(factor, regime, tuple(map(letters.take, ("lambda", "sigma", "omega"))))
        case "known roots":
            return Mode(factor, regime, tuple(_names_of_known(regime, letters)))
        case _:
            return Mode(factor, regime)


def _stem(field: ParameterField, factor: Factor, regime: Regime) -> str:
    """What is numbered where there are several: the letter of a pair that needs one, or a kind."""
    if regime.kind not in ("circular", "hyperbolic"):
        return regime.kind
    if perfect_root(field, _square(factor, regime)) is not None:
        return ""
    if regime.kind == "hyperbolic":
        return "kappa"
    return "omega_d" if factor.roots.centre else "omega_n"


def _names_of_known(regime: Regime, letters: Letters) -> Iterator[str]:
    """Lambda for real roots, alpha ± i omega for pairs, with numbers where there are several."""
    numbers = {True: 0, False: 0}
    for root in regime.roots:
        numbers[root.is_real] += 1
        alone = sum(r.is_real == root.is_real for r in regime.roots) == 1
        number = None if alone else numbers[root.is_real]
        if root.is_real:
            yield letters.take("lambda", number)
            continue
        if not root.centred:
            yield letters.take("alpha", number)
        yield letters.take("omega", number)


def _square(factor: Factor, regime: Regime) -> Scalar:
    """The square of the frequency of a pair: D, or -D where that is positive."""
    d = factor.roots.discriminant
    return d if regime.kind == "hyperbolic" else -d


def perfect_root(field: ParameterField, square: Scalar) -> Scalar | None:
    """Return an element whose square is the given one, or None."""
    if not square:
        return square
    parts = field.factored(square)
    root = _rational_root(parts.content)
    if root is None or any(e % 2 for _, e in parts.factors):
        return None
    return reduce(
        mul, (field.of_polynomial(f) ** (e // 2) for f, e in parts.factors), field.scalar(root)
    )


def _rational_root(value: Fraction) -> Fraction | None:
    if value < 0:
        return None
    above, below = isqrt(value.numerator), isqrt(value.denominator)
    exact = above**2 == value.numerator and below**2 == value.denominator
    return Fraction(above, below) if exact else None


def quantities_of(field: ParameterField, writing: ParameterField, mode: Mode) -> list[Quantity]:
    """Return what the names of a mode stand for, in the order of definition."""
    factor = mode.factor
    d = factor.degree

    def lifted(element: Scalar) -> Scalar:
        return field.into(writing, element)

    match mode.regime.kind:
        case "circular" | "hyperbolic" if mode.names:
            return [Quantity(mode.names[0], SquareRoot(lifted(_square(factor, mode.regime))))]
        case "decaying" if d == 2:
            total, last = lifted(factor.p.nth(1)), lifted(factor.p.nth(0))
            return [
                Quantity(name, SumOfRoots(total, last, sign))
                for name, sign in zip(mode.names, (1, -1), strict=True)
            ]
        case "decaying":
            turned = tuple(c if k % 2 == 0 else -c for k, c in enumerate(factor.polynomial))
            return [
                Quantity(name, RootDefinition(turned, d - k)) for k, name in enumerate(mode.names)
            ]
        case "real roots":
            return [
                Quantity(name, RootDefinition(factor.polynomial, d - k), positive=False)
                for k, name in enumerate(mode.names)
            ]
        case "squares":
            return _frequencies(field, writing, mode)
        case "quartet":
            b, c = (lifted(x) for x in squares_of(factor).to_list()[1:])
            size, sigma, omega = mode.names
            half, quarter = writing.scalar(Fraction(1, 2)), writing.scalar(Fraction(1, 4))
            rho = writing.symbol(size)
            return [
                Quantity(size, SquareRoot(c)),
                Quantity(sigma, SquareRoot(rho * half - b * quarter)),
                Quantity(omega, SquareRoot(rho * half + b * quarter)),
            ]
        case "root and pair":
            root, sigma, omega = mode.names
            _, b, c, _ = map(lifted, factor.polynomial)
            r, s = writing.symbol(root), writing.symbol(sigma)
            # the other two roots have the sum -b - r and the product c + r (b + r)
            return [
                Quantity(
                    root, RootDefinition(factor.polynomial, mode.regime.which), positive=False
                ),
                Quantity(sigma, Value(-(b + r) / writing.scalar(2)), positive=False),
                Quantity(omega, SquareRoot(c + r * (b + r) - s**2)),
            ]
        case "known roots":
            return [*_known_roots(mode), *_known_residues(mode)]
        case _:
            return []


def _known_roots(mode: Mode) -> Iterator[Quantity]:
    polynomial = mode.factor.polynomial
    for root, rate, frequency in mode.named_roots:
        if rate is not None:
            part: Part | None = None if root.is_real else "real"
            yield Quantity(rate, RootDefinition(polynomial, root.which, part), positive=False)
        if frequency is not None:
            yield Quantity(frequency, RootDefinition(polynomial, root.which, "imaginary"))


def _known_residues(mode: Mode) -> Iterator[Quantity]:
    real = {root.which for root in mode.regime.roots if root.is_real}
    for residue in mode.residues:
        if residue.name is not None:
            weight = 1 if residue.which in real else 2 if residue.part == "real" else -2
            definition = ResidueDefinition(
                mode.factor.polynomial,
                residue.which,
                residue.part,
                tuple(residue.above.to_list()),
                weight,
                tuple(residue.beside.to_list()),
            )
            yield Quantity(residue.name, definition, positive=False)


def value_at_pair(
    field: ParameterField, coefficients: Sequence[Scalar], rate: Scalar, frequency: Scalar
) -> tuple[Scalar, Scalar]:
    """Return real and imaginary part of a polynomial at rate + i frequency.

    All are elements of one field; the coefficients stand highest first.
    """
    u = v = field.domain.zero
    for c in coefficients:
        u, v = u * rate - v * frequency + c, u * frequency + v * rate
    return u, v


def squares_of(factor: Factor) -> Polynomial:
    """Return q of an even factor, p(a + x) = q(x^2)."""
    if factor.roots.squares is None:
        raise TypeError("only even factors have squares")
    return factor.roots.squares


def _frequencies(field: ParameterField, writing: ParameterField, mode: Mode) -> list[Quantity]:
    """Omega with mu = -omega^2, kappa with mu = kappa^2, for the roots mu of the squares."""
    squares = squares_of(mode.factor)
    q = int(squares.degree())
    if q == 2:
        b, c = (field.into(writing, x) for x in squares.to_list()[1:])
        made = []
        for k, (name, sign) in enumerate(zip(mode.names, mode.regime.signs, strict=True)):
            total = b if sign == "circular" else -b
            smaller = mode.regime.signs[0] == mode.regime.signs[1] and k == 0
            made.append(Quantity(name, SumOfRoots(total, c, -1 if smaller else 1, rooted=True)))
        return made
    turned = [c if k % 2 == 0 else -c for k, c in enumerate(squares.to_list())]
    zero = field.domain.zero
    even = tuple(x for c in turned for x in (c, zero))[:-1]
    return [Quantity(name, RootDefinition(even, q + k)) for k, name in enumerate(mode.names, 1)]
