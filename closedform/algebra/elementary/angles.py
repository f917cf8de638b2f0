"""Logarithms and angles: transcendental generators, and what exp makes of them.

ln of a positive rational number is a sum over its primes; atan of a rational number one over
the primes of the Gaussian integers, so that relations such as atan(1/2) + atan(1/3) = pi/4
show.  Other logarithms and angles are compared with those already there.
"""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from flint import ctx, fmpz

from closedform.algebra.elementary.balls import Balls
from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.errors import NotElementaryError
from closedform.algebra.elementary.radicals import Radicals
from closedform.algebra.elementary.signs import Signs
from closedform.algebra.elementary.tower import Generator, Tower
from closedform.algebra.elementary.turns import parted, turned
from closedform.algebra.fraction_field import Whole

__all__ = ["Angles"]

COMBINATIONS = ((1, 1), (1, -1), (1, 2), (1, -2), (2, 1), (2, -1))


class Angles:
    """The logarithms and angles of a tower."""

    def __init__(self, tower: Tower, signs: Signs, radicals: Radicals) -> None:
        self._tower, self._signs, self._radicals = tower, signs, radicals
        self._logarithms: dict[Constant, int] = {}
        self._angles: dict[Constant, int] = {}
        self._directions: dict[int, Constant] = {}

    def logarithm(self, element: Constant) -> Constant:
        """Return the principal logarithm of a constant.

        Raises ZeroDivisionError for 0, NotElementaryError where a sign is not known.
        """
        tower = self._tower
        if not element:
            raise ZeroDivisionError("the logarithm of zero")
        if element.imaginary:
            length = self._radicals.modulus(element)
            angle = self.direction(element.real, element.imaginary)
            return self.logarithm(length) + tower.i * angle
        sign = self._signs.of(element)
        if not sign:
            raise NotElementaryError("a logarithm of something whose sign is not known")
        if sign < 0:
            return self.logarithm(-element) + tower.i * tower.pi
        if len(element.parts) == 1 and not element.is_flat:  # one root, or a product of such
            return self.logarithm(element * element) * tower.number(Fraction(1, 2))
        return self._of_flat(element) if element.is_flat else self._of_sum(element)

    def _of_flat(self, element: Constant) -> Constant:
        tower, total = self._tower, self._tower.zero
        for polynomial, sign in ((element.parts[0], 1), (element.below, -1)):
            content, factors = polynomial.factor()
            for prime, exponent in fmpz(int(abs(content))).factor():
                generator = self._ln(tower.number(int(prime)))
                total = total + generator * tower.number(sign * int(exponent))
            rest = tower.unit
            for factor, exponent in factors:
                known = self._signs.of_polynomial(factor)
                if known is None:
                    rest = rest * factor ** int(exponent)
                    continue
                generator = self._ln(tower.polynomial(factor if known > 0 else -factor))
                total = total + generator * tower.number(sign * int(exponent))
            if not rest.is_one():
                of_rest = self._signs.of_polynomial(rest)
                if not of_rest:
                    raise NotElementaryError("a logarithm of something whose sign is not known")
                generator = self._ln(tower.polynomial(rest if of_rest > 0 else -rest))
                total = total + generator * tower.number(sign)
        return total

    def _of_sum(self, element: Constant) -> Constant:
        """The logarithm of a sum with roots, by another of which it is a power if there is one."""
        tower = self._tower
        if element in self._logarithms:
            return self._ln(element)
        for known in tuple(self._logarithms):
            if known.is_flat:
                continue
            for m, n in COMBINATIONS:
                power = element**m * known**n
                if power.is_flat:  # ln(element) = (ln(power) - n ln(known)) / m
                    rest = self.logarithm(power) - self._ln(known) * tower.number(n)
                    return rest * tower.number(Fraction(1, m))
        return self._ln(element)

    def _ln(self, element: Constant) -> Constant:
        if element not in self._logarithms:
            generator = Generator("ln", f"ln {len(self._logarithms)}", element)
            self._logarithms[element] = self._tower.with_generator(generator)
        return self._tower.generator(self._logarithms[element])

    def direction(self, x: Constant, y: Constant) -> Constant:
        """Return the angle of the point (x, y), real, between -pi and pi.

        Raises NotElementaryError where signs that it takes are not known.
        """
        tower = self._tower
        self._radicals.demand_settled(x + y)
        of_x, of_y = self._signs.of(x), self._signs.of(y)
        half = tower.pi * tower.number(Fraction(1, 2))
        if of_x == 0 and of_y == 0:
            return tower.zero
        if of_x is not None and of_x > 0:
            return self.arctangent(y / x)
        if of_y is not None and of_y != 0:
            right = half if of_y > 0 else -half
            return right - self.arctangent(x / y)
        if of_x is not None and of_y == 0:
            return tower.pi
        raise NotElementaryError("an angle of a point whose quadrant is not known")

    def arctangent(self, u: Constant) -> Constant:
        """Return atan(u) for a real constant."""
        self._radicals.demand_settled(u)
        if not u:
            return u
        sign = self._signs.of(u)
        if (-u in self._angles) if sign is None else sign < 0:
            return -self.arctangent(-u)
        fraction = u.as_fraction()
        if fraction is not None:
            return self._of_fraction(fraction)
        if sign is None or u in self._angles:
            return self._atan(u)
        return self._known_angle(u) or self._related(u) or self._atan(u)

    def _of_fraction(self, value: Fraction) -> Constant:
        """The angle of a point with whole coordinates, from those of Gaussian primes."""
        x, y = value.denominator, value.numerator
        total = self._tower.zero
        for prime, exponent in fmpz(x * x + y * y).factor():
            p, e = int(prime), int(exponent)
            if p == 2:
                continue
            a, b = _two_squares(p)
            one = self._atan(self._tower.number(Fraction(b, a)))
            # x + i y is primitive: it holds one of a + i b and a - i b, to the power e.
            sign = 1 if (x * a + y * b) % p == 0 and (y * a - x * b) % p == 0 else -1
            total = total + one * self._tower.number(sign * e)
        quarter = self._tower.pi * self._tower.number(Fraction(1, 4))
        with ctx.workprec(64):
            balls = Balls(self._tower, {})
            angle = balls.of(self._tower.number(value)).atan()
            turns = ((angle - balls.of(total)) / balls.of(quarter)).real.unique_fmpz()
        if turns is None:
            raise NotElementaryError("the arctangent of an extreme number")
        return total + quarter * self._tower.number(int(turns))

    def _known_angle(self, u: Constant) -> Constant | None:
        """A multiple of pi/24 or pi/20 whose tangent is u, if there is one."""
        tower = self._tower
        if not tower.is_number(u):
            return None
        with ctx.workprec(64):
            share = (Balls(tower, {}).of(u).atan() / Balls(tower, {}).of(tower.pi)).real
        for denominator in (24, 20):
            k = (share * denominator).unique_fmpz()
            if k is not None:
                turn = turned(self._radicals, Fraction(int(k), denominator))
                if turn.imaginary == u * turn.real:
                    return tower.pi * tower.number(Fraction(int(k), denominator))
        return None

    def _related(self, u: Constant) -> Constant | None:
        """atan(u), u > 0, by another angle between 0 and pi/2, and a multiple of pi/2.

        With m A + n B a multiple of pi/2 the bounds of both leave one multiple.
        """
        tower, half = self._tower, self._tower.pi * self._tower.number(Fraction(1, 2))
        point = tower.one + tower.i * u
        for known, index in self._angles.items():
            if self._signs.of(known) != 1:
                continue
            other = tower.one + tower.i * known
            for m, n in COMBINATIONS:
                turned = point**m * (other if n > 0 else other.mirrored(0)) ** abs(n)
                if turned.real and turned.imaginary:
                    continue
                odd = not turned.real
                quarters = {(1, 1): 1, (1, -1): 0, (1, 2): 2, (1, -2): 0, (2, 1): 2, (2, -1): 0}
                k = quarters[m, n]
                if odd != (k % 2 == 1):
                    k = {(1, 2): 1, (2, 1): 1, (1, -2): -1, (2, -1): 1}[m, n]
                rest = half * tower.number(k) - tower.generator(index) * tower.number(n)
                return rest * tower.number(Fraction(1, m))
        return None

    def _atan(self, u: Constant) -> Constant:
        if u not in self._angles:
            generator = Generator("atan", f"atan {len(self._angles)}", u)
            self._angles[u] = self._tower.with_generator(generator)
        return self._tower.generator(self._angles[u])

    def normal_exponent(self, exponent: Constant) -> tuple[Constant, Constant]:
        """Return (rest, factor): exp(exponent) is factor · exp(rest), with all taken out that is
        algebraic: rational multiples of i pi and of i atan(u), and of ln(a) but for roots of
        odd degree.

        Raises NotElementaryError for multiples of i pi that are no angles in square roots.
        """
        factor = self._tower.one
        for index, i_times, coefficient in tuple(self._linear(exponent)):
            generator = self._tower.generators[index]
            taken, power = self._power(generator, index, coefficient, i_times=i_times)
            if taken:
                amount = self._tower.generator(index) * self._tower.number(taken)
                exponent = exponent - (amount * self._tower.i if i_times else amount)
                factor = factor * power
        return exponent, factor

    def _power(
        self, generator: Generator, index: int, coefficient: Fraction, *, i_times: bool
    ) -> tuple[Fraction, Constant]:
        """The part of a coefficient that can be taken out, and exp of the generator times it."""
        if generator.of is None:
            return coefficient, turned(self._radicals, coefficient)
        dyadic, _ = parted(coefficient)
        if dyadic.denominator > 16:
            raise NotElementaryError(f"a root of degree {dyadic.denominator}")
        base = self._direction_of(index, generator.of) if i_times else generator.of
        result, depth = base, dyadic.denominator
        while depth > 1:
            result, depth = self._radicals.root(result), depth // 2
        return dyadic, result**dyadic.numerator

    def _direction_of(self, index: int, u: Constant) -> Constant:
        """exp(i atan(u)) = (1 + i u) / sqrt(1 + u^2)."""
        if index not in self._directions:
            point = self._tower.one + self._tower.i * u
            self._directions[index] = point / self._radicals.modulus(point)
        return self._directions[index]

    def _linear(self, exponent: Constant) -> Iterator[tuple[int, bool, Fraction]]:
        """Yield (generator, whether times i, coefficient): the rational multiples in a sum."""
        tower = self._tower
        for k, generator in enumerate(tower.generators):
            i_times = generator.kind in ("pi", "atan")
            part = exponent.parts.get(1 if i_times else 0)
            if generator.kind == "name" or part is None:
                continue
            collected: Whole = 0
            for exponents, c in part.to_dict().items():
                others = (e for j, e in enumerate(exponents) if j != k and self._is_number(j))
                if exponents[k] == 1 and not any(others):
                    bare = (*exponents[:k], 0, *exponents[k + 1 :])
                    collected += tower.ring.from_dict({bare: c})
            if collected:
                value = (
                    tower.polynomial(collected) / tower.polynomial(exponent.below)
                ).as_fraction()
                if value is not None:
                    yield k, i_times, value

    def _is_number(self, index: int) -> bool:
        generators = self._tower.generators
        return index < len(generators) and generators[index].kind != "name"


def _two_squares(prime: int) -> tuple[int, int]:
    """Whole a > b > 0 with a^2 + b^2 = p, for a prime p = 4 k + 1 (Cornacchia's algorithm)."""
    root = next(pow(c, (prime - 1) // 4, prime) for c in range(2, prime) if _is_no_square(c, prime))
    one, other = prime, root
    while other * other > prime:
        one, other = other, one % other
    return max(other, one % other), min(other, one % other)


def _is_no_square(c: int, prime: int) -> bool:
    return pow(c, (prime - 1) // 2, prime) == prime - 1
