"""Elements put in the place of names and of the time; polynomials in a name."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Generic, TypeVar

from closedform.algebra.elementary import functions
from closedform.algebra.elementary.closed_form import ClosedForm
from closedform.algebra.elementary.constant import Constant, Parts
from closedform.algebra.elementary.errors import NotElementaryError
from closedform.algebra.elementary.sums import Terms
from closedform.algebra.elementary.tower import Tower, roots_in
from closedform.algebra.fraction_field import Whole

__all__ = ["at_time", "coefficients", "substituted"]

F = TypeVar("F", bound=ClosedForm)


def at_time(element: F, instant: F) -> F:
    """Return the element with another in the place of the time.

    Raises NotElementaryError if something in it is not linear then, but would have to be.
    """
    linear = functions.linear(instant)
    if linear is None:
        return _Substitution({}, instant).of(element)
    sums = element.context.sums
    below = None if element.below is None else sums.composed(element.below, *linear)
    if below is not None and not below:
        raise ZeroDivisionError("division by zero")
    return element.quotient(sums.composed(element.above, *linear), below)


def substituted(element: F, values: Mapping[str, F]) -> F:
    """Return the element with others in the place of names."""
    return _Substitution(values, element.time).of(element)


class _Substitution(Generic[F]):
    def __init__(self, values: Mapping[str, F], time: F) -> None:
        self._values, self._time, self._context = values, time, time.context
        self._moved = frozenset(
            k
            for k, generator in enumerate(self._context.tower.generators)
            if generator.kind == "name" and generator.text in values
        )
        self._generators: dict[int, F] = {}
        self._roots: dict[int, F] = {}

    def of(self, element: F) -> F:
        above = self._of_terms(element.above)
        return above if element.below is None else above / self._of_terms(element.below)

    def _of_terms(self, terms: Terms) -> F:
        total = self._time.of(0)
        for (number, k), c in terms.items():
            term = self._of_constant(c)
            if k:
                term = term * self._time**k
            if number:
                rate, offset = map(self._of_constant, self._context.sums.exponents[number])
                term = term * functions.exponential(rate * self._time + offset)
            total = total + term
        return total

    def _of_constant(self, constant: Constant) -> F:
        if not self._moved & self._context.tower.generators_in(constant):
            return self._time.of(constant)
        total = self._time.of(0)
        for mask, polynomial in constant.parts.items():
            term = self._of_polynomial(polynomial)
            for root in roots_in(mask):
                term = term * self._root(root)
            total = total + term
        return total / self._of_polynomial(constant.below)

    def _of_polynomial(self, polynomial: Whole) -> F:
        element = self._context.tower.polynomial(polynomial)
        if not self._moved & self._context.tower.generators_in(element):
            return self._time.of(element)
        total = self._time.of(0)
        for exponents, coefficient in polynomial.to_dict().items():
            term = self._time.of(int(coefficient))
            for k, exponent in enumerate(exponents):
                if exponent:
                    term = term * self._generator(k) ** int(exponent)
            total = total + term
        return total

    def _root(self, index: int) -> F:
        if index not in self._roots:
            radicand = self._of_constant(self._context.tower.roots[index].radicand)
            self._roots[index] = functions.square_root(radicand)
        return self._roots[index]

    def _generator(self, index: int) -> F:
        if index not in self._generators:
            self._generators[index] = self._value(index)
        return self._generators[index]

    def _value(self, index: int) -> F:
        tower = self._context.tower
        generator = tower.generators[index]
        if index in self._moved:
            return self._values[generator.text]
        if generator.of is None or not self._moved & tower.generators_in(generator.of):
            return self._time.of(tower.generator(index))
        inside = self._of_constant(generator.of)
        if generator.kind == "ln":
            return functions.logarithm(inside)
        return functions.arctangent(inside)


def coefficients(element: F, name: str) -> tuple[F, ...]:
    """Return the coefficients of the powers of a name, lowest first, empty for zero."""
    context = element.context
    tower, index = context.tower, context.index(name)
    if element.below is not None and name in element.quotient(element.below).free_names:
        raise NotElementaryError(f"{name} stands below a line")
    found: dict[int, F] = {}
    for key, c in element.above.items():
        hidden = [tower.roots[k].radicand for k in roots_in(c.mask()) if k]
        hidden += [tower.polynomial(c.below), *context.sums.exponents[key[0]]]
        hidden += [g.of for k in tower.generators_in(c) if (g := tower.generators[k]).of]
        if any(index in tower.generators_in(value) for value in hidden):
            raise NotElementaryError(f"it is no polynomial in {name}")
        for power, parts in _by_power(tower, c, index).items():
            value = Constant(tower, parts, tower.unit) / tower.polynomial(c.below)
            part = element.quotient({key: value}, element.below)
            found[power] = found[power] + part if power in found else part
    return tuple(found.get(k, element.of(0)) for k in range(max(found, default=-1) + 1))


def _by_power(tower: Tower, constant: Constant, index: int) -> dict[int, Parts]:
    """The numerator of a constant by the powers of a generator."""
    found: dict[int, Parts] = {}
    for mask, polynomial in constant.parts.items():
        for exponents, coefficient in polynomial.to_dict().items():
            bare = (*exponents[:index], 0, *exponents[index + 1 :])
            piece = tower.ring.from_dict({bare: coefficient})
            parts = found.setdefault(int(exponents[index]), {})
            parts[mask] = parts[mask] + piece if mask in parts else piece
    return found
