"""What the elements of one field have in common: its constants, their signs, its exponents."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction

from closedform.algebra.elementary.angles import Angles
from closedform.algebra.elementary.constant import Constant
from closedform.algebra.elementary.radicals import Radicals
from closedform.algebra.elementary.signs import PolynomialSign, Signs
from closedform.algebra.elementary.sums import Sums, Terms
from closedform.algebra.elementary.tower import Generator, Tower

__all__ = ["Context"]


class Context:
    """The tower of constants, and what is known of them; it grows as they are met."""

    def __init__(
        self,
        names: Sequence[str],
        sign: PolynomialSign,
        samples: Sequence[Mapping[str, Fraction]],
    ) -> None:
        self.samples = tuple(samples)
        self.tower = Tower(names)
        self.signs = Signs(self.tower, sign, len(names))
        self.radicals = Radicals(self.tower, self.signs)
        self.angles = Angles(self.tower, self.signs, self.radicals)
        self.sums = Sums(self.tower, self.angles)
        self._names = {name: k for k, name in enumerate(names)}

    def index(self, name: str) -> int:
        """Return the number of a name in the tower, to which it comes if it is new."""
        if name not in self._names:
            self._names[name] = self.tower.with_generator(Generator("name", name))
        return self._names[name]

    def constants_in(self, terms: Terms) -> set[Constant]:
        """Return the coefficients of a sum, and the lambda and alpha of its exponents."""
        found = set(terms.values())
        for number, _ in terms:
            found |= set(self.sums.exponents[number])
        return found

    def lowest(self, above: Terms, below: Terms | None) -> tuple[Terms, Terms | None]:
        """Return a quotient with one divisor for all that differ by a single term, None for 1."""
        if below is None or not above:
            return above, None
        number, power = min(below)
        lead, sums = below[number, power], self.sums
        if number or lead != self.tower.one:
            factor = sums.scaled(sums.reciprocal(number), lead.inverse())
            above, below = sums.multiplied(above, factor), sums.multiplied(below, factor)
        if len(below) == 1 and (0, 0) in below:
            return above, None
        shared = min(k for terms in (above, below) for _, k in terms)
        if shared:
            lower = ({(n, k - shared): c for (n, k), c in q.items()} for q in (above, below))
            return self.lowest(*lower)
        ratio = sums.ratio(above, below)
        return (above, below) if ratio is None else (sums.constant(ratio), None)
