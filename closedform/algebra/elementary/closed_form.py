"""Functions of time in closed form: quotients of sums of c t^k exp(lambda t + alpha)."""

from __future__ import annotations

from abc import ABC, abstractmethod
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Self

from flint import acb, arb

from closedform.algebra.elementary import certainty
from closedform.algebra.elementary.constant import LARGEST_EXPONENT, Constant
from closedform.algebra.elementary.context import Context
from closedform.algebra.elementary.errors import NotElementaryError
from closedform.algebra.elementary.powers import power
from closedform.algebra.elementary.sums import Terms

__all__ = ["ClosedForm", "Number"]

Number = int | Fraction


@dataclass(frozen=True, eq=False, slots=True)
class ClosedForm(ABC):
    """above/below in a context; `below` is None for 1.

    Operations with integers and fractions are allowed.  Division raises ZeroDivisionError;
    what leaves the field raises NotElementaryError.  Equality is that of functions, and exact;
    it raises NotElementaryError where two numbers are too close to be told apart and no theorem
    says that they differ.  Elements of two fields do not go together: ValueError.
    """

    context: Context
    above: Terms
    below: Terms | None

    @abstractmethod
    def like(self, above: Terms, below: Terms | None) -> Self:
        """Return another element of the same field."""

    def quotient(self, above: Terms, below: Terms | None = None) -> Self:
        """Return a quotient of sums of the same field, divided by what divides it."""
        return self.like(*self.context.lowest(above, below))

    def of(self, value: Constant | Number) -> Self:
        """Return a constant of the tower, or a rational number, as an element."""
        if not isinstance(value, Constant):
            value = self.context.tower.number(value)
        return self.like(self.context.sums.constant(value), None)

    def exponential_of(self, rate: Constant, offset: Constant) -> Self:
        """Return exp(rate t + offset)."""
        number, factor = self.context.sums.exponent(rate, offset)
        return self.like({(number, 0): factor}, None)

    @property
    def time(self) -> Self:
        """The time as an element."""
        return self.like({(0, 1): self.context.tower.one}, None)

    def _other(self, value: Self | Number) -> Self:
        if not isinstance(value, ClosedForm):
            return self.of(value)
        if value.context is not self.context:
            raise ValueError("elements of two fields do not go together")
        return value

    # Arithmetic

    def __neg__(self) -> Self:
        return self.like(self.context.sums.negated(self.above), self.below)

    def __add__(self, other: Self | Number) -> Self:
        sums, other = self.context.sums, self._other(other)
        one, two = self.below, other.below
        if one is two or one == two:
            return self.quotient(sums.added(self.above, other.above), one)
        left = self.above if two is None else sums.multiplied(self.above, two)
        right = other.above if one is None else sums.multiplied(other.above, one)
        return self.quotient(sums.added(left, right), self._common(other))

    def __radd__(self, other: Number) -> Self:
        return self + other

    def __sub__(self, other: Self | Number) -> Self:
        return self + -self._other(other)

    def __rsub__(self, other: Number) -> Self:
        return -self + other

    def __mul__(self, other: Self | Number) -> Self:
        other = self._other(other)
        above = self.context.sums.multiplied(self.above, other.above)
        return self.quotient(above, self._common(other))

    def __rmul__(self, other: Number) -> Self:
        return self * other

    def __truediv__(self, other: Self | Number) -> Self:
        return self * self._other(other).inverse()

    def __rtruediv__(self, other: Number) -> Self:
        return self.inverse() * other

    def __pow__(self, exponent: int) -> Self:
        if abs(exponent) > LARGEST_EXPONENT:
            raise NotElementaryError(f"a power to the exponent {exponent}")
        return power(self if exponent >= 0 else self.inverse(), abs(exponent), self.of(1))

    def inverse(self) -> Self:
        """Return 1/x.  Raises ZeroDivisionError for zero."""
        if not self.above:
            raise ZeroDivisionError("division by zero")
        below = self.below or self.of(1).above
        return self.quotient(below, self.above)

    def _common(self, other: Self) -> Terms | None:
        if self.below is None or other.below is None:
            return self.below or other.below
        return self.context.sums.multiplied(self.below, other.below)

    # What it is

    @property
    def is_zero(self) -> bool:
        """Whether it is the zero function."""
        if self.above:
            certainty.demand_nonzero(self.context, self.above)
        return not self.above

    def __eq__(self, other: object) -> bool:
        if not isinstance(other, ClosedForm | int | Fraction):
            return NotImplemented
        return self is other or (self - other).is_zero

    def __hash__(self) -> int:
        constant = self.constant
        return hash(constant) if constant is not None else 1

    @property
    def constant(self) -> Constant | None:
        """The element as one of the field of constants, None if it has exponentials or t."""
        if self.below is not None or self.above.keys() - {(0, 0)}:
            return None
        return self.above.get((0, 0), self.context.tower.zero)

    @property
    def is_constant(self) -> bool:
        """Whether it does not depend on the time."""
        exponents = self.context.sums.exponents
        return all(
            not k and not exponents[number][0]
            for terms in (self.above, self.below or {})
            for number, k in terms
        )

    def as_fraction(self) -> Fraction | None:
        """Return the rational number that it is, None if it is none."""
        constant = self.constant
        return None if constant is None else constant.as_fraction()

    def terms(self) -> tuple[tuple[Self, Self, int, Self], ...]:
        """Return (lambda, alpha, k, c) of each term c t^k exp(lambda t + alpha).

        Raises NotElementaryError for a quotient of sums.
        """
        if self.below is not None:
            raise NotElementaryError("a quotient of functions of time has no terms")
        of = self.of
        exponents = self.context.sums.exponents
        return tuple(
            (of(exponents[number][0]), of(exponents[number][1]), k, of(c))
            for (number, k), c in sorted(self.above.items(), key=lambda term: term[0])
        )

    def sign(self) -> int | None:
        """Return -1, 0 or 1 for a real constant, None if the parameters do not settle it."""
        return certainty.sign(self.context, self.above, self.below)

    # Functions of it

    def derivative(self) -> Self:
        """Return the derivative with respect to the time."""
        sums = self.context.sums
        above = sums.derivative(self.above)
        if self.below is None:
            return self.quotient(above, None)
        turned = sums.multiplied(self.above, sums.derivative(self.below))
        upper = sums.added(sums.multiplied(above, self.below), sums.negated(turned))
        return self.quotient(upper, sums.multiplied(self.below, self.below))

    def integral(self) -> Self:
        """Return an antiderivative with respect to the time.

        Raises NotElementaryError for a quotient of sums that depends on the time.
        """
        if self.below is not None and not self.is_constant:
            raise NotElementaryError("the integral of a quotient of functions of time")
        if self.below is not None:
            return self * self.time
        return self.like(self.context.sums.integral(self.above), None)

    def limit(self) -> Self | None:
        """Return the limit as the time goes on for ever, None if none is settled.

        Of a quotient, both must have a limit, not zero below.
        """
        above = certainty.limit(self.context, self.above)
        if self.below is None or above is None:
            return None if above is None else self.quotient(above)
        below = certainty.limit(self.context, self.below)
        return None if not below else self.quotient(above, below)

    def conjugate(self) -> Self:
        """Return the complex conjugate.  Raises NotElementaryError if roots may be complex."""
        sums = self.context.sums
        for terms in (self.above, self.below or {}):
            for (number, _), c in terms.items():
                for value in (c, *sums.exponents[number]):
                    self.context.radicals.demand_settled(value)
        below = None if self.below is None else sums.conjugate(self.below)
        return self.quotient(sums.conjugate(self.above), below)

    @property
    def free_names(self) -> frozenset[str]:
        """The names in it, the time not among them."""
        tower = self.context.tower
        found: set[int] = set()
        for terms in (self.above, self.below or {}):
            for value in self.context.constants_in(terms):
                found |= tower.generators_in(value)
        generators = (tower.generators[k] for k in found)
        return frozenset(g.text for g in generators if g.kind == "name")

    def enclosure(self, time: acb | arb, names: Mapping[str, arb]) -> acb:
        """Return a ball for the value at an instant, at flint's current precision.

        Raises KeyError for a name without value.
        """
        above = certainty.enclosure(self.context, self.above, names, acb(time))
        if self.below is None:
            return above
        return above / certainty.enclosure(self.context, self.below, names, acb(time))
