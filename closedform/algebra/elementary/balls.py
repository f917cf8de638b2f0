"""Balls around constants, at values of the names."""

from __future__ import annotations

from collections.abc import Mapping

from flint import acb, arb

from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.tower import Tower
from closedform.algebra.fraction_field import Whole

__all__ = ["Balls"]


class Balls:
    """Encloses constants of a tower at flint's precision when it was made.

    `names` gives balls for the names that occur; KeyError for one that is missing.
    """

    def __init__(self, tower: Tower, names: Mapping[str, arb]) -> None:
        self._tower, self._names = tower, names
        self._generators: dict[int, acb] = {}
        self._roots: dict[int, acb] = {0: acb(0, 1)}

    def of(self, element: Constant) -> acb:
        """Return a ball that holds the element."""
        total = acb(0)
        for mask, polynomial in element.parts.items():
            term = self._polynomial(polynomial)
            for root in range(mask.bit_length()):
                if mask >> root & 1:
                    term *= self._root(root)
            total += term
        return total if element.below.is_one() else total / self._polynomial(element.below)

    def _polynomial(self, polynomial: Whole) -> acb:
        total = acb(0)
        for exponents, coefficient in polynomial.to_dict().items():
            term = acb(coefficient)
            for k, exponent in enumerate(exponents):
                if exponent:
                    term *= self._generator(k) ** int(exponent)
            total += term
        return total

    def _root(self, index: int) -> acb:
        if index not in self._roots:
            self._roots[index] = self.of(self._tower.roots[index].radicand).sqrt()
        return self._roots[index]

    def _generator(self, index: int) -> acb:
        if index not in self._generators:
            self._generators[index] = self._value(index)
        return self._generators[index]

    def _value(self, index: int) -> acb:
        generator = self._tower.generators[index]
        if generator.kind == "name":
            return acb(self._names[generator.text])
        if generator.of is None:
            return acb(arb.pi())
        inside = self.of(generator.of)
        return inside.log() if generator.kind == "ln" else inside.atan()
