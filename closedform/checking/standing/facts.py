"""The names of a model, as far as lines about it may use them."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

from closedform.checking.truth import Truth
from closedform.notation.written.tree import Declared, Jet

__all__ = ["Facts", "facts_of"]


@dataclass(frozen=True)
class Facts:
    """Names: `states` in row order with primes, `varying` all functions of time."""

    states: tuple[str, ...]
    varying: frozenset[str]
    inputs: frozenset[str]
    outputs: frozenset[str]
    parameters: frozenset[str]
    time: str = "t"

    @cached_property
    def names(self) -> frozenset[str]:
        """Every name that the model gives a meaning."""
        return self.varying | self.parameters | {self.time}

    @cached_property
    def declared(self) -> Declared:
        """The names in the form in which a reader of formulas wants them."""
        vectors = {name for name in self.vector_names if name.endswith("vec")}
        own = (self.varying - self.inputs) | vectors
        return Declared(own, self.parameters, self.inputs, time=self.time)

    @cached_property
    def vector_names(self) -> frozenset[str]:
        """Names that stand for the column of all states: x, and their common letter."""
        bases = {state.rstrip("'").split("_")[0].rstrip("0123456789") for state in self.states}
        found = {"x", "xvec", *(bases if len(bases) == 1 else ())}
        found |= {f"{name.removesuffix('vec')}vec" for name in (*found, *bases)}
        return frozenset(found - self.names)

    def has_vector(self, name: str) -> bool:
        """Whether a name stands for the column of all states."""
        return name in self.vector_names

    def transformed(self, name: str) -> str | None:
        """Return whose Laplace transform a capital letter is: X_1 is that of x_1."""
        small = name[:1].lower() + name[1:]
        if name in self.names or small == name:
            return None
        for known in sorted(self.varying):
            if known.replace("_", "") == small.replace("_", ""):
                return known
        return "vector" if self.has_vector(small) else None

    def spelled(self, jet: Jet) -> str:
        """Return a derivative as it is typed."""
        return jet.name + "'" * jet.order


def facts_of(truth: Truth) -> Facts:
    """Return the names of a model from what is true of it."""
    unknowns = {name.rstrip("'") for name in (*truth.states, *truth.solution)}
    return Facts(
        truth.states,
        frozenset(unknowns | set(truth.inputs) | set(truth.outputs)),
        frozenset(truth.inputs),
        frozenset(truth.outputs),
        frozenset(truth.parameters),
        truth.time,
    )
