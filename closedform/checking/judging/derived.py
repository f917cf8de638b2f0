"""Values that follow from the author's earlier lines, with the wrong line they rest on."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any, Generic, TypeVar

from closedform.checking.errors import UNDECIDED
from closedform.checking.standing.author import Entry
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Setting
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value

__all__ = ["Derived", "stated_matrices", "stated_values", "value_of_entry"]


V_co = TypeVar("V_co", bound=Value, covariant=True)
W = TypeVar("W", bound=Value)


@dataclass(frozen=True, slots=True)
class Derived(Generic[V_co]):
    """A value that follows from earlier lines; `root` is the earliest wrong one it rests on."""

    value: V_co
    root: int | None = None

    def joined(self, value: W, *others: Derived[Any]) -> Derived[W]:
        """Return a value worked out from this and others."""
        roots = [d.root for d in (self, *others) if d.root is not None]
        return Derived(value, min(roots, default=None))


def stated_values(says: str, setting: Setting, ground: Ground) -> Iterator[Derived[Value]]:
    """Yield the values of the author's lines of a kind, the latest first."""
    for entry in setting.author.all(says):
        value = value_of_entry(entry, setting, ground)
        if value is not None:
            yield Derived(value, entry.root)


def value_of_entry(entry: Entry, setting: Setting, ground: Ground) -> Value | None:
    """Return the value of an earlier line, None where it has none that is exact."""
    try:
        return setting.value(entry.value, ground)
    except UNDECIDED:
        return None


def stated_matrices(says: str, setting: Setting, ground: Ground) -> Iterator[Derived[ExactMatrix]]:
    """Yield the author's square matrices of a kind."""
    for derived in stated_values(says, setting, ground):
        if isinstance(derived.value, ExactMatrix) and derived.value.is_square:
            yield Derived(derived.value, derived.root)
