"""The field of a model with numbers e^b, cosh(sqrt(D) d) and sinh(sqrt(D) d)/sqrt(D) adjoined.

Values of exponential polynomials at an instant are polynomials in such numbers.  Exponents that
are whole multiples of one share its name, and so do angles of one root sqrt(D): what is kept
are bases of the Z-modules of exponents and of angles.  The names then obey no more than

    C^2 - D S^2 = 1   for C = cosh(sqrt(D) d), S = sinh(sqrt(D) d)/sqrt(D),

for D < 0 with cos and sin.  Where exponents and angles are algebraic numbers, this is all that
holds between them (the theorem of Lindemann and Weierstrass; A. Baker, Transcendental Number
Theory, 1975, chapter 1), but for what the angles of one module and of another, of unlike roots,
may have in common: a sum is zero if its form modulo the relations is zero; if it is not, a ball
says so.  Rational multiples of pi have algebraic cosines, which are adjoined as such.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property, reduce
from itertools import combinations
from math import lcm, prod
from operator import mul
from typing import Any, Literal

from flint import acb, arb

from closedform.algebra.angles import angle_of, cosine_polynomial
from closedform.algebra.field import BaseField, Scalar, rational
from closedform.algebra.integer_basis import Basis, basis_of, turned_down
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.surds import SurdSum, drawn_out

__all__ = ["Adjoined", "AdjoinedNumber", "Recorder", "adjoined", "taken_over"]

Pair = tuple[Scalar, Scalar]
"""cosh(sqrt(D) d) and sinh(sqrt(D) d)/sqrt(D)."""
_TWELFTH = 12


@dataclass(frozen=True)
class AdjoinedNumber:
    """A name and its meaning.

    exp    e^amount                                   root    sqrt(number)
    even   cosh(sqrt(core) amount)                    cosine  cos(pi/number)
    odd    sinh(sqrt(core) amount)/sqrt(core)

    `amount` and `core` are elements of the field that is extended.
    """

    name: str
    kind: Literal["exp", "even", "odd", "root", "cosine"]
    amount: Scalar = None
    core: Scalar = None
    number: int = 0

    def enclosure(self, enclose: Callable[[Scalar], arb]) -> arb:
        """Return a ball, from what encloses elements of the field that is extended."""
        match self.kind:
            case "root":
                return arb(self.number).sqrt()
            case "cosine":
                return (arb.pi() / self.number).cos()
            case "exp":
                return enclose(self.amount).exp()
        amount = enclose(self.amount)
        turned = acb(enclose(self.core)).sqrt() * amount
        if self.kind == "even":
            return turned.cosh().real
        return (amount * (acb(0, 1) * turned).sinc()).real  # sinh(x)/x is sinc(i x)


class Recorder:
    """Stands in for the adjoined numbers while it is found which of them occur."""

    def __init__(self, field: BaseField) -> None:
        self.field = field
        self.exponents: list[Scalar] = []
        self.angles: list[Pair] = []

    def lift(self, element: Scalar) -> Scalar:
        """Return the element itself."""
        return element

    def power(self, exponent: Scalar) -> Scalar:
        """Note an exponent."""
        self.exponents.append(exponent)
        return self.field.domain.one

    def turn(self, square: Scalar, amount: Scalar) -> Pair:
        """Note an angle sqrt(square) · amount."""
        self.angles.append((square, amount))
        return self.field.domain.one, self.field.domain.one


@dataclass(frozen=True)
class _Angles:
    """The angles sqrt(core) · amount of one core: a basis, and the names of C and S."""

    core: Scalar
    basis: Basis
    names: tuple[tuple[str, str], ...]


@dataclass(frozen=True)
class Adjoined:
    """A field with adjoined numbers: `field` has their names besides those of the base.

    Elements of `field` stand for numbers; `normal` gives those that are equal one form.
    """

    base: BaseField
    field: ParameterField
    numbers: tuple[AdjoinedNumber, ...]
    exponents: Basis
    exponent_names: tuple[str, ...]
    angles: tuple[_Angles, ...]
    cosine: int

    def lift(self, element: Scalar) -> Scalar:
        """Return an element of the base as one of the wider field."""
        if isinstance(self.base, ParameterField):
            return self.base.into(self.field, element)
        total = self.field.domain.zero
        for radicand, coefficient in self.base.surds(element).terms:
            total += self._root_of(radicand) * self.field.scalar(coefficient)
        return total

    def lowered(self, element: Scalar) -> Scalar | None:
        """Return an element as one of the base, None if it has more in it."""
        element = self.normal(element)
        roots = {n.name: n.number for n in self.numbers if n.kind == "root"}
        own = set() if isinstance(self.base, ParameterField) else set(roots)
        names = {n.name for n in self.numbers}
        if self.field.symbols_in(element) & names - own:
            return None
        if isinstance(self.base, ParameterField):
            return self.base.domain.convert(element, self.field.domain)

        def value(polynomial: Any) -> Scalar:
            total = self.base.domain.zero
            for monomial, coefficient in polynomial.iterterms():
                term = self.base.scalar(rational(coefficient))
                for name, exponent in zip(self.field.parameters, monomial, strict=True):
                    if exponent:
                        root = SurdSum.of({roots[name]: Fraction(1)})
                        term = term * self.base.scalar(root) ** exponent
                total = total + term
            return total

        return value(element.numer) / value(element.denom)

    def power(self, exponent: Scalar) -> Scalar:
        """Return e^exponent."""
        counts = self.exponents.counts(exponent)
        factors = [
            self.field.symbol(n) ** k for n, k in zip(self.exponent_names, counts, strict=True) if k
        ]
        return reduce(mul, factors, self.field.domain.one)

    def turn(self, square: Scalar, amount: Scalar) -> Pair:
        """Return C and S of the angle sqrt(square) · amount."""
        core, root, pi_part, rest = angle_of(self.base, square, amount)
        held = next(a for a in self.angles if a.core == core)
        lifted = self.lift(core)
        pair: Pair = (self.field.domain.one, self.field.domain.zero)
        for (even, odd), k in zip(held.names, held.basis.counts(rest), strict=True):
            own = (self.field.symbol(even), self.field.symbol(odd))
            own = own if k >= 0 else (own[0], -own[1])
            for _ in range(abs(k)):
                pair = self._joined(pair, own, lifted)
        if pi_part:
            pair = self._joined(pair, self._of_pi(pi_part), lifted)
        return pair[0], pair[1] / self.lift(root)

    def normal(self, element: Scalar) -> Scalar:
        """Return the element with the relations worked in: equal numbers are equal then."""
        if not element or not self._relations:
            return element
        above = self._reduced(element.numer)
        return above / self._reduced(element.denom) if above else above

    def vanishes(self, element: Scalar, vanishes: Callable[[Scalar], bool]) -> bool:
        """Whether an element is zero where `vanishes` tells which of the base are."""
        element = self.normal(element)
        if not element or not isinstance(self.base, ParameterField):
            return not element
        count = len(self.base.parameters)
        parts: dict[tuple[int, ...], dict[tuple[int, ...], Any]] = {}
        for monomial, coefficient in element.numer.iterterms():
            parts.setdefault(monomial[count:], {})[monomial[:count]] = coefficient
        ring = self.base.domain.field.ring
        return all(
            vanishes(self.base.of_polynomial(ring.from_dict(part))) for part in parts.values()
        )

    def balls(
        self, enclose: Callable[[Scalar], arb], known: dict[str, arb] | None = None
    ) -> dict[str, arb]:
        """Return a ball for every name, those of the base as `known` gives them."""
        return {**(known or {}), **{n.name: n.enclosure(enclose) for n in self.numbers}}

    # How it is worked out

    @cached_property
    def _relations(self) -> tuple[tuple[str, int, Scalar], ...]:
        """(name, m, element): name^m is the element; in the order of working them in."""
        one = self.field.domain.one
        found: list[tuple[str, int, Scalar]] = []
        for angles in self.angles:
            core = self.lift(angles.core)
            found += [(c, 2, one + core * self.field.symbol(s) ** 2) for c, s in angles.names]
        for number in self.numbers:
            if number.kind == "root":
                found.append((number.name, 2, self.field.scalar(number.number)))
            if number.kind == "cosine":
                symbol = self.field.symbol(number.name)
                polynomial = cosine_polynomial(number.number)
                m = len(polynomial) - 1
                lower = sum(
                    (self.field.scalar(c) * symbol**k for k, c in enumerate(polynomial[:-1])),
                    self.field.domain.zero,
                )
                found.append((number.name, m, -lower))
        return tuple(found)

    def _reduced(self, polynomial: Any) -> Scalar:
        value = self.field.of_polynomial(polynomial)
        for name, m, replacement in self._relations:
            value = self._with(value, name, m, replacement)
        return value

    def _with(self, value: Scalar, name: str, m: int, replacement: Scalar) -> Scalar:
        place, symbol = self.field.parameters.index(name), self.field.symbol(name)
        while any(monomial[place] >= m for monomial in value.numer.itermonoms()):
            ring = value.numer.ring
            total = self.field.domain.zero
            parts: dict[int, dict[tuple[int, ...], Any]] = {}
            for monomial, coefficient in value.numer.iterterms():
                bare = (*monomial[:place], 0, *monomial[place + 1 :])
                parts.setdefault(monomial[place], {})[bare] = coefficient
            for exponent, part in parts.items():
                front = self.field.of_polynomial(ring.from_dict(part))
                times, left = divmod(exponent, m)
                total += front * symbol**left * replacement**times
            value = total / self.field.of_polynomial(value.denom)
        return value

    def _joined(self, one: Pair, other: Pair, core: Scalar) -> Pair:
        """C and S of a sum of angles of one root."""
        return (
            one[0] * other[0] + core * one[1] * other[1],
            one[1] * other[0] + one[0] * other[1],
        )

    def _root_of(self, radicand: int) -> Scalar:
        """A square root by those that are adjoined."""
        roots = {n.number: n.name for n in self.numbers if n.kind == "root"}
        for size in range(len(roots) + 1):
            for chosen in combinations(roots, size):
                whole, free = drawn_out(prod(chosen))
                if free == radicand:
                    factors = [self.field.symbol(roots[d]) for d in chosen]
                    return reduce(mul, factors, self.field.scalar(Fraction(1, whole)))
        raise KeyError(radicand)

    def _of_pi(self, turns: Fraction) -> Pair:
        """The cosine and the sine of turns · pi."""
        return self._cosine(turns), self._cosine(Fraction(1, 2) - turns)

    def _cosine(self, turns: Fraction) -> Scalar:
        turns = abs(turns) % 2
        turns = 2 - turns if turns > 1 else turns
        if self.cosine:
            symbol = self.field.symbol(f"@cosine{self.cosine}")
            one, two = self.field.domain.one, symbol  # the polynomials of Chebyshev
            for _ in range(int(turns * self.cosine)):
                one, two = two, 2 * symbol * two - one
            return self.normal(one)
        sign = 1 if turns <= Fraction(1, 2) else -1
        steps = int((turns if sign > 0 else 1 - turns) * _TWELFTH)
        value = _COSINES[steps]
        total = self.field.domain.zero
        for radicand, coefficient in value.items():
            total += self._root_of(radicand) * self.field.scalar(coefficient * sign)
        return total


_COSINES: tuple[dict[int, Fraction], ...] = (
    {1: Fraction(1)},
    {6: Fraction(1, 4), 2: Fraction(1, 4)},
    {3: Fraction(1, 2)},
    {2: Fraction(1, 2)},
    {1: Fraction(1, 2)},
    {6: Fraction(1, 4), 2: Fraction(-1, 4)},
    {},
)
"""cos(k pi/12) for k = 0 … 6, by square roots."""


def adjoined(
    field: BaseField,
    exponents: Iterable[Scalar],
    angles: Iterable[Pair],
    *,
    merged: bool = True,
) -> Adjoined:
    """Return a field with e^g for the exponents g, and with C and S for the angles (D, d).

    If not `merged`, every angle has a name of its own: equal numbers may then have several
    forms, some of which are shorter.
    """
    numbers: list[AdjoinedNumber] = []
    own = [] if isinstance(field, ParameterField) else list(field.radicands)
    powers = [g for g in exponents if g]
    of_exponents = turned_down(basis_of(field, powers), powers)
    exponent_names = tuple(f"@exp{k}" for k in range(1, len(of_exponents.elements) + 1))
    for name, element in zip(exponent_names, of_exponents.elements, strict=True):
        numbers.append(AdjoinedNumber(name, "exp", element))
    by_core: dict[Scalar, list[Scalar]] = {}
    turns: list[Fraction] = []
    for square, amount in angles:
        core, _, pi_part, rest = angle_of(field, square, amount)
        by_core.setdefault(core, []).append(rest)
        turns += [pi_part] if pi_part else []
    held, count = [], 0
    for core, rests in by_core.items():
        basis = basis_of(field, [rest for rest in rests if rest], merged=merged)
        names = []
        for element in basis.elements:
            count += 1
            names.append((f"@even{count}", f"@odd{count}"))
            numbers.append(AdjoinedNumber(names[-1][0], "even", element, core))
            numbers.append(AdjoinedNumber(names[-1][1], "odd", element, core))
        held.append(_Angles(core, basis, tuple(names)))
    cosine = 0
    if any(_TWELFTH % turn.denominator for turn in turns):
        cosine = lcm(2, *(turn.denominator for turn in turns))
        numbers.append(AdjoinedNumber(f"@cosine{cosine}", "cosine", number=cosine))
    else:
        denominators = {turn.denominator for turn in turns}
        own += [2] if denominators & {4, 12} else []
        own += [3] if denominators & {3, 6, 12} else []
    numbers += [AdjoinedNumber(f"@root{d}", "root", number=d) for d in own]
    before = field.parameters if isinstance(field, ParameterField) else ()
    wider = ParameterField((), (*before, *(n.name for n in numbers)))
    return Adjoined(field, wider, tuple(numbers), of_exponents, exponent_names, tuple(held), cosine)


def taken_over(old: Adjoined, element: Scalar, numbers: Adjoined | Recorder) -> Scalar:
    """Return an element with the numbers of one field, each by what it means, in another's."""
    means = {n.name: _meaning(old, n, numbers) for n in old.numbers}
    base = old.base
    if isinstance(base, ParameterField):
        means |= {name: numbers.lift(base.symbol(name)) for name in base.parameters}
    if isinstance(numbers, Recorder):
        return numbers.lift(base.domain.one)

    def put(polynomial: Any) -> Scalar:
        total = numbers.field.domain.zero
        for monomial, coefficient in polynomial.iterterms():
            term = numbers.field.scalar(rational(coefficient))
            for name, exponent in zip(old.field.parameters, monomial, strict=True):
                if exponent:
                    term = term * means[name] ** exponent
            total = total + term
        return total

    return put(element.numer) / put(element.denom)


def _meaning(old: Adjoined, n: AdjoinedNumber, numbers: Adjoined | Recorder) -> Scalar:
    field = old.base
    match n.kind:
        case "exp":
            return numbers.power(n.amount)
        case "even":
            return numbers.turn(n.core, n.amount)[0]
        case "odd":
            return numbers.turn(n.core, n.amount)[1]
        case "root" if not isinstance(field, ParameterField):
            return numbers.lift(field.scalar(SurdSum.of({n.number: Fraction(1)})))
        case "root":  # sqrt(2) = 2 cos(pi/4), sqrt(3) = 2 cos(pi/6)
            return _cosine_of_pi(field, {2: 4, 3: 6}[n.number], numbers) * 2
        case "cosine":
            return _cosine_of_pi(field, n.number, numbers)


def _cosine_of_pi(field: BaseField, n: int, numbers: Adjoined | Recorder) -> Scalar:
    """cos(pi/n)."""
    if not isinstance(field, ParameterField):
        raise TypeError("only a field with pi has angles in turns")
    return numbers.turn(-field.domain.one, field.symbol(PI) / field.scalar(n))[0]
