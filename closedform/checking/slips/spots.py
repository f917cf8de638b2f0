"""Places in a formula: where a part stands, what is around it, and putting another in."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, fields, replace
from typing import Any

from closedform.notation.written.tree import Written

__all__ = ["Spot", "put", "spots"]

Step = tuple[str, tuple[int, ...]]
"""A slot of a node, and the place in it if it holds several."""


@dataclass(frozen=True, slots=True)
class Spot:
    """A part of a formula: the way to it, and what it is inside of, the outermost first."""

    node: Written
    path: tuple[Step, ...] = ()
    above: tuple[Written, ...] = ()

    @property
    def outer(self) -> Written | None:
        """What it stands in directly."""
        return self.above[-1] if self.above else None


def spots(tree: Written) -> Iterator[Spot]:
    """Yield every part of a formula, the outer before the inner, from left to right."""
    pending = [Spot(tree)]
    while pending:
        spot = pending.pop()
        yield spot
        pending += reversed(list(inside(spot)))


def inside(spot: Spot) -> Iterator[Spot]:
    """Yield the parts of a part."""
    above = (*spot.above, spot.node)
    for slot in fields(spot.node):
        for indices, part in _parts(getattr(spot.node, slot.name), ()):
            yield Spot(part, (*spot.path, (slot.name, indices)), above)


def put(tree: Written, path: tuple[Step, ...], new: Written) -> Written:
    """Return a formula with another part at a place."""
    if not path:
        return new
    (name, indices), rest = path[0], path[1:]
    changes: dict[str, Any] = {name: _put(getattr(tree, name), indices, rest, new)}
    return replace(tree, **changes)


def _put(value: Any, indices: tuple[int, ...], rest: tuple[Step, ...], new: Written) -> Any:
    if not indices:
        return put(value, rest, new)
    at, deeper = indices[0], indices[1:]
    return (*value[:at], _put(value[at], deeper, rest, new), *value[at + 1 :])


def _parts(value: object, indices: tuple[int, ...]) -> Iterator[tuple[tuple[int, ...], Written]]:
    if isinstance(value, Written):
        yield indices, value
    elif isinstance(value, tuple):
        for k, item in enumerate(value):
            yield from _parts(item, (*indices, k))
