"""The true solution as what the model's functions of time stand for in a formula."""

from __future__ import annotations

from collections.abc import Iterator, Mapping

from closedform.algebra.elementary import Element
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.stretch import Stretch
from closedform.checking.values.matrices import column
from closedform.checking.values.scope import Value

__all__ = ["MotionOn"]


TRANSITIONS = ("Phi", "Psi")
"""Letters that the matrix e^(At) goes by as a function of time (common practice)."""


class MotionOn(Mapping[tuple[str, int], Value]):
    """The states, outputs and inputs of a ground, by name and order of the derivative.

    Each is worked out when it is asked for, on the interval of the ground's instant, the first
    one if it has none.
    """

    def __init__(self, ground: Ground) -> None:
        self._ground = ground
        self._found: dict[tuple[str, int], Value] = {}

    def __getitem__(self, key: tuple[str, int]) -> Value:
        if key not in self._found:
            value = self._value(*key)
            if value is None:
                raise KeyError(key)
            self._found[key] = value
        return self._found[key]

    def at(self, name: str, order: int, instant: Element | None) -> Value | None:
        """Return a value at an instant, on the interval that begins there or holds it.

        At infinity, None, it is the limit.  None is returned where the instant is not found on
        the axis, or there is no limit.
        """
        stretches = self._ground.stretches
        if instant is None:
            value = MotionOn(self._ground.within(stretches[-1]))[name, order]
            limits = [e.limit() for e in _entries(value)]
            if any(limit is None for limit in limits):
                return None
            found = [limit for limit in limits if limit is not None]
            return found[0] if isinstance(value, Element) else column(self._ground.field, found)
        for stretch in reversed(stretches):
            if len(stretches) == 1 or (instant - stretch.start).sign() in (0, 1):
                value = MotionOn(self._ground.within(stretch))[name, order]
                if isinstance(value, Element):
                    return value.at(instant)
                return value.mapped(lambda entry: entry.at(instant))
        return None

    def __iter__(self) -> Iterator[tuple[str, int]]:
        truth = self._ground.truth
        names = [(n.rstrip("'"), len(n) - len(n.rstrip("'"))) for n in truth.solution]
        names += [(name, 0) for name in (*truth.inputs, *sorted(self._ground.facts.vector_names))]
        names += [(name, 0) for name in TRANSITIONS if name not in self._ground.facts.names]
        return iter(names)

    def __len__(self) -> int:
        return sum(1 for _ in self)

    def _value(self, name: str, order: int) -> Value | None:
        ground, stretch = self._ground, self._stretch()
        if name in TRANSITIONS and order == 0 and name not in ground.facts.names:
            return ground.transition
        if order == 0 and ground.facts.has_vector(name):
            return ground.column(stretch)
        if name in ground.truth.inputs:
            value: Element | None = ground.input(name, stretch)
        else:
            value = ground.function(name + "'" * order, stretch)
            order = 0 if value is not None else order
            value = value if value is not None else ground.function(name, stretch)
        for _ in range(order):
            value = value.derivative() if value is not None else None
        return value

    def _stretch(self) -> Stretch:
        stretches, instant = self._ground.stretches, self._ground.scope.instant
        return next((s for s in stretches if s.inside == instant), stretches[0])


def _entries(value: Value) -> tuple[Element, ...]:
    return (value,) if isinstance(value, Element) else value.entries
