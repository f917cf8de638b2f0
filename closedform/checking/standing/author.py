"""What the author of a derivation has stated so far, right or wrong."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field, replace
from itertools import islice, pairwise

from closedform.checking.claim import Claim
from closedform.notation.written.tree import (
    INFINITY,
    Derivative,
    Evaluated,
    Jet,
    Limit,
    Negation,
    Product,
    Sum,
    Symbol,
    Written,
    changed,
    walk,
)

__all__ = ["Author", "Entry"]


MOST_PUT_IN = 3_000
"""Parts of what is put in for names: definitions may double at every line."""


@dataclass(frozen=True, slots=True)
class Entry:
    """A claim that was made: its value as written, definitions put in.

    `values` has the last member of each group.  `root` is the number of the line on which its
    being wrong rests, itself or an earlier one, None if it is right.
    """

    claim: Claim
    values: tuple[Written, ...]
    root: int | None = None

    @property
    def says(self) -> str:
        """What it claims."""
        return self.claim.says

    @property
    def value(self) -> Written:
        """Its value, where there is one."""
        return self.values[-1]


@dataclass(frozen=True)
class Author:
    """The claims of a derivation in order, as far as they were judged.

    `definitions` are names that lines gave to numbers or matrices, with what they stand for;
    `definition_roots` are the lines on which those rest that are wrong, `right_values` what
    these ought to be.  Names in `kept` have the meaning that the model gives them.  A name may
    stand for a function of `time`.
    """

    entries: tuple[Entry, ...] = ()
    definitions: Mapping[str, Written] = field(default_factory=dict)
    definition_roots: Mapping[str, int] = field(default_factory=dict)
    right_values: Mapping[str, Written] = field(default_factory=dict)
    kept: frozenset[str] = frozenset()
    time: str = "t"
    alternatives: Mapping[str, Written] = field(default_factory=dict)
    """Other values of names that a line fixes up to a choice: an angle by its tangent."""

    def after(
        self, entry: Entry, names: Mapping[str, Written], right: Mapping[str, Written]
    ) -> Author:
        """Return the author after a further claim, with the names that it defines.

        Names of a wrong claim rest on the line of its root.
        """
        roots = {name: root for name, root in self.definition_roots.items() if name not in names}
        if entry.root is not None:
            roots |= dict.fromkeys(names, entry.root)
        return replace(
            self,
            entries=(*self.entries, entry),
            definitions={**self.definitions, **names},
            definition_roots=roots,
            right_values={**self.right_values, **right},
        )

    def mended(self, names: Iterable[str]) -> Author:
        """Return the author with the right values of names that wrong lines gave."""
        right = {name: self.right_values[name] for name in names}
        return replace(self, definitions={**self.definitions, **right})

    def otherwise(self) -> Author:
        """Return the author with the other choice for every name that leaves one."""
        return replace(self, definitions={**self.definitions, **self.alternatives})

    def all(self, says: str, subject: str | None = None) -> tuple[Entry, ...]:
        """Return the claims of a kind, the latest first; about one subject if that is given."""
        return tuple(
            entry
            for entry in reversed(self.entries)
            if entry.says == says
            and entry.values
            and (subject is None or entry.claim.subject == subject)
        )

    def last(self, says: str, subject: str | None = None) -> Entry | None:
        """Return the latest claim of a kind."""
        return next(iter(self.all(says, subject)), None)

    def solution_in(self, tree: Written) -> tuple[Written, int | None]:
        """Return a formula with the author's own solutions for the functions that stand in it.

        With it comes the earliest wrong line on which these rest, None if none is wrong.
        """
        roots: list[int] = []

        def change(node: Written) -> Written | None:
            if not isinstance(node, Jet) or node.at is not None:
                return None
            name = node.name + "'" * node.order
            entry = self.last("solution", name) or self.last("output", name)
            if entry is None:
                return None
            if entry.root is not None:
                roots.append(entry.root)
            return entry.value

        return changed(tree, change), min(roots, default=None)

    def put_in(self, tree: Written) -> Written:
        """Return a formula with the author's names replaced by what they stand for.

        Names among `kept` stay: those that the model itself gives a meaning.  A name that was
        defined by another before that was itself defined is followed to the end.  Names stay, too,
        where all that is put in would have more than `MOST_PUT_IN` parts.
        """
        known = {n: v for n, v in self.definitions.items() if n not in self.kept}
        return self._put(tree, known, Counter(left=MOST_PUT_IN)) if known else tree

    def _put(self, tree: Written, known: Mapping[str, Written], parts: Counter[str]) -> Written:
        def change(node: Written) -> Written | None:
            if isinstance(node, Symbol) and node.name in known:
                value = known[node.name]
                if not _may_have(value, parts):
                    return None
                others = {n: v for n, v in known.items() if n != node.name}
                return self._put(value, others, parts)
            if isinstance(node, Jet) and node.name in known:
                value = known[node.name]
                at = None if node.at is None else self._put(node.at, known, parts)
                return self._function(node, value, at) if _may_have(value, parts) else None
            return self._called(node, known) if isinstance(node, Product) else None

        return changed(tree, change)

    def _called(self, product: Product, known: Mapping[str, Written]) -> Written | None:
        """Return a product in which a function of the author's stands before -t or t - a.

        That is its value there, as in Phi(-t), and not a product.
        """
        factors, time = list(product.factors), Symbol(self.time)
        for k, (one, other) in enumerate(pairwise(factors)):
            if not isinstance(one, Symbol) or not isinstance(other, Negation | Sum):
                continue
            value = known.get(one.name)
            if value is not None and time in walk(value) and time in walk(other):
                factors[k : k + 2] = [Jet(one.name, 0, other)]
                rest = factors[0] if len(factors) == 1 else Product(tuple(factors))
                return self.put_in(rest)
        return None

    def _function(self, jet: Jet, value: Written, at: Written | None) -> Written:
        """Return a function of the author's, its derivative, or its value at an instant."""
        if jet.order:
            value = Derivative(value, self.time, jet.order)
        if jet.at is None or jet.at == Symbol(self.time):
            return value
        if jet.at == INFINITY:
            return Limit(value, self.time, INFINITY)
        return Evaluated(value, self.time, jet.at if at is None else at)


def _may_have(value: Written, parts: Counter[str]) -> bool:
    """Take the parts of a value from what may still be put in; false where that is used up."""
    if parts["left"] > 0:
        parts["left"] -= sum(1 for _ in islice(walk(value), MOST_PUT_IN))
    return parts["left"] > 0
