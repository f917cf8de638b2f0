"""What conditions leave to an element in one parameter alone, or in one after an equation."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property

from closedform.algebra.conditions import Conditions
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import PI, ParameterField
from closedform.algebra.sign_argument import (
    RELATIONS,
    ByExpansion,
    ByPi,
    Comparison,
    Constant,
    Reason,
    SignArgument,
    Values,
    named,
    negated,
    relation_values,
)
from closedform.algebra.squares import coefficients_in
from closedform.algebra.univariate import needed_for_none, sign_by_cells

__all__ = ["InOneParameter", "Solved"]


@dataclass(frozen=True)
class Solved:
    """An equation among the conditions, and what it gives for the parameter `name`."""

    comparison: Comparison
    name: str
    value: Scalar


@dataclass(frozen=True)
class InOneParameter:
    """The conditions of a domain, asked about one parameter at a time."""

    conditions: Conditions

    @property
    def _field(self) -> ParameterField:
        return self.conditions.field

    def signs(self, element: Scalar) -> Iterator[tuple[Values, Reason]]:
        """Yield the signs of an element that is no number, as far as one parameter tells them.

        Elements with the number pi in them are none in one parameter alone.
        """
        names = self._field.symbols_in(element)
        if len(names) == 1:
            (name,) = names
            found = sign_by_cells(self._field, name, element, self.about(name))
            if found is not None:
                yield found
        for solved in self.solved:
            for name in self._beside(solved):
                if self._leaves(solved, element, name):
                    yield from self._signs_after(solved, element, name)

    def _signs_after(
        self, solved: Solved, element: Scalar, name: str
    ) -> Iterator[tuple[Values, Reason]]:
        put = self._put(solved, element)
        if put is None:
            return
        sign = self._field.number_sign(put)
        if sign is not None:
            reason = ByPi() if self._field.holds_pi(put) else Constant()
            argument = SignArgument(put, named(frozenset({sign})), reason)
        else:
            turned = [c for _, c in self._turned(solved, name)]
            known = [c for c in turned if self._field.number_sign(c.element) is None]
            facts = dict.fromkeys([*self.about(name), *known])
            found = sign_by_cells(self._field, name, put, tuple(facts))
            if found is None:
                return
            argument = SignArgument(put, named(found[0]), found[1])
        if put == element:
            yield argument.values, argument.reason
        else:
            yield argument.values, ByExpansion(solved.comparison, solved.name, (argument,))

    def contradiction(self) -> tuple[Comparison, ...] | None:
        """Return conditions that contradict each other in one parameter alone, or None.

        One of them may be an equation that turns the others into such; none of them can be
        left out.
        """
        for name in self._field.free:
            alone = [(c, c) for c in self._stated(name)]
            turned = [(s, self._turned(s, name)) for s in self.solved if name in self._beside(s)]
            for solved, pairs in ((None, alone), *turned):
                wrong = self._wrong([c for _, c in pairs])
                if wrong is not None:
                    wanted = [pairs[k][0] for k in wrong]
                    wanted += [solved.comparison] if solved else []
                    asked = dict.fromkeys(self.conditions.comparisons)
                    return tuple(c for c in asked if c in wanted)
        return None

    def _beside(self, solved: Solved) -> tuple[str, ...]:
        """The other parameters; where there are none, what is left is a number."""
        return tuple(n for n in self._field.free if n != solved.name) or (solved.name,)

    def _wrong(self, comparisons: list[Comparison]) -> tuple[int, ...] | None:
        """The places of comparisons that hold nowhere together; some may be of numbers."""
        places = []
        for place, comparison in enumerate(comparisons):
            sign = self._field.number_sign(comparison.element)
            if sign is None:
                places.append(place)
            elif sign not in relation_values(comparison.relation):
                return (place,)
        wrong = needed_for_none(self._field, [comparisons[k] for k in places])
        return None if wrong is None else tuple(places[k] for k in wrong)

    def about(self, name: str) -> tuple[Comparison, ...]:
        """Return what the conditions say about one parameter alone, the plain things first."""
        made = [*self._stated(name), *self.conditions.cores]
        for condition in self.conditions.apart:
            if self._field.symbols_in(condition.comparison.element) != {name}:
                for factor, exponent in condition.exponents.items():
                    if exponent < 0 or 0 not in condition.values:
                        made.append(Comparison(self._field.of_polynomial(factor), "!="))
        values = self.conditions.parameters[self._field.parameters.index(name)]
        made += _compared(self._field.symbol(name), values)
        return tuple(dict.fromkeys(c for c in made if self._field.symbols_in(c.element) == {name}))

    def _stated(self, name: str) -> list[Comparison]:
        stated = [c.comparison for c in self.conditions.apart]
        return [c for c in stated if self._field.symbols_in(c.element) == {name}]

    @cached_property
    def solved(self) -> tuple[Solved, ...]:
        """The equations that give a parameter by the others, wherever they hold."""
        found = []
        for condition in self.conditions.apart:
            powers = condition.exponents.items()
            open_ones = [f for f, e in powers if e > 0 and 0 in self.conditions.terms(f)]
            if condition.comparison.relation != "=" or len(open_ones) != 1:
                continue
            (factor,) = open_ones
            names = self._field.names_in(self._field.of_polynomial(factor))
            for place, name in enumerate(self._field.parameters):
                if name != PI and factor.degree(factor.ring.gens[place]) == 1:
                    free, slope = map(self._field.of_polynomial, coefficients_in(factor, place))
                    # In two parameters both hold one, and have no zero in it in common.
                    if len(names) <= 2 or self._field.number_sign(slope) is not None:
                        found.append(Solved(condition.comparison, name, -free / slope))
        return tuple(found)

    def _turned(self, solved: Solved, name: str) -> list[tuple[Comparison, Comparison]]:
        """Each condition that an equation turns into one on `name` or on numbers, and that one."""
        made = []
        for condition in self.conditions.apart:
            comparison = condition.comparison
            if comparison is solved.comparison:
                continue
            if self._leaves(solved, comparison.element, name):
                put = self._put(solved, comparison.element)
                if put is not None:
                    made.append((comparison, Comparison(put, comparison.relation)))
        return made

    def _leaves(self, solved: Solved, element: Scalar, name: str) -> bool:
        """Whether an element with the value put in is a number, or holds `name` alone."""
        names = self._field.symbols_in(element)
        if solved.name in names:
            names = (names - {solved.name}) | self._field.symbols_in(solved.value)
        return names <= {name} or names == {PI}

    def _put(self, solved: Solved, element: Scalar) -> Scalar | None:
        """The element with the value put in, or None where it is defined nowhere then."""
        values = {solved.name: solved.value}
        below = self._field.substituted(self._field.of_polynomial(element.denom), values)
        return self._field.substituted(element, values) if below else None


def _compared(element: Scalar, values: Values) -> list[Comparison]:
    """The comparison that an element has one of these signs; none where it may have any."""
    for relation in RELATIONS:
        if values == relation_values(relation):
            return [Comparison(element, relation)]
        if values == negated(relation_values(relation)):
            return [Comparison(-element, relation)]
    return []
