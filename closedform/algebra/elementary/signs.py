"""Signs of real constants: of numbers by balls, of functions of names by those of polynomials."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from fractions import Fraction

from flint import ctx

from closedform.algebra.elementary.balls import Balls
from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.tower import Tower, used
from closedform.algebra.fraction_field import Whole

__all__ = ["PolynomialSign", "Signs"]

PolynomialSign = Callable[[Mapping[tuple[int, ...], Fraction]], int | None]
"""The sign -1, 0 or 1 of a polynomial in the parameters on their whole domain, None if it has
none there.  The polynomial comes as coefficients by exponents."""

MOST_BITS = 4096


class Signs:
    """Signs on the whole domain of the parameters, which are the first names of the tower."""

    def __init__(self, tower: Tower, sign: PolynomialSign, parameters: int) -> None:
        self._tower, self._sign, self._parameters = tower, sign, parameters
        self._factors: dict[tuple[object, ...], int | None] = {}

    def of(self, element: Constant) -> int | None:
        """Return -1, 0 or 1, or None if the sign is not settled; for an element without i.

        For a + b r with r^2 = d > 0, a and b of unlike signs, it is the sign of a times that
        of a^2 - b^2 d.
        """
        if not element:
            return 0
        tower = self._tower
        if tower.is_number(element):
            return self._of_number(element)
        top = element.top
        if top < 0:
            signs = self.of_polynomial(element.parts[0]), self.of_polynomial(element.below)
            return _product(*signs)
        if not tower.roots[top].positive:
            return None
        a, b = element.halves(top)
        of_a, of_b = self.of(a), self.of(b)
        if of_a is None or of_b is None:
            return None
        if of_a * of_b >= 0:
            return of_a or of_b
        return _product(of_a, self.of(a * a - b * b * tower.roots[top].radicand))

    def of_polynomial(self, polynomial: Whole) -> int | None:
        """Return the sign of a polynomial, which is not zero."""
        content, factors = polynomial.factor()
        total, unknown = (1 if content > 0 else -1), []
        for factor, exponent in factors:
            sign = self._of_factor(factor)
            if sign == 0:
                return 0
            if exponent % 2 and sign is None:
                unknown.append(factor)
            elif exponent % 2 and sign is not None:
                total *= sign
        if not unknown:
            return total
        if len(unknown) == 1:
            return None
        rest = unknown[0]
        for factor in unknown[1:]:
            rest = rest * factor
        return _product(total, self._of_factor(rest))

    def _of_factor(self, polynomial: Whole) -> int | None:
        key = tuple(polynomial.to_dict().items())
        if key not in self._factors:
            self._factors[key] = self._worked_out(polynomial)
        return self._factors[key]

    def _worked_out(self, polynomial: Whole) -> int | None:
        tower = self._tower
        element = tower.polynomial(polynomial)
        if tower.is_number(element):
            return self._of_number(element)
        if max(used(polynomial)) < self._parameters:
            terms = {
                tuple(int(e) for e in exponents[: self._parameters]): Fraction(int(c))
                for exponents, c in polynomial.to_dict().items()
            }
            found = self._sign(terms)
            if found is not None:
                return found
        if len(polynomial) == 1 and polynomial.total_degree() == 1:
            return self._of_generator(min(used(polynomial)))
        signs = {self._of_term(exponents, c) for exponents, c in polynomial.to_dict().items()}
        return signs.pop() if len(signs) == 1 else None

    def _of_term(self, exponents: tuple[int, ...], coefficient: int) -> int | None:
        total = 1 if coefficient > 0 else -1
        for k, exponent in enumerate(exponents):
            if exponent:
                sign = self._of_factor(self._tower.generator(k).parts[0])
                if sign is None and exponent % 2:
                    return None
                total *= 1 if sign is None else sign ** int(exponent)
        return total

    def _of_generator(self, index: int) -> int | None:
        generator = self._tower.generators[index]
        inside = generator.of
        if inside is None:
            return None
        return self.of(inside if generator.kind == "atan" else inside - self._tower.one)

    def _of_number(self, element: Constant) -> int | None:
        """The sign of a number without names that is not zero in the algebra."""
        fraction = element.as_fraction()
        if fraction is not None:
            return 1 if fraction > 0 else -1
        bits = 64
        while bits <= MOST_BITS:
            with ctx.workprec(bits):
                ball = Balls(self._tower, {}).of(element).real
                if not ball.contains(0):
                    return 1 if ball > 0 else -1
            bits *= 2
        return None


def _product(one: int | None, other: int | None) -> int | None:
    if one == 0 or other == 0:
        return 0
    return None if one is None or other is None else one * other
