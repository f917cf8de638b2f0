"""What a claim is judged in: the ground, and what its author stated before."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field, replace
from functools import partial

from closedform.checking.claim import Claim
from closedform.checking.standing.author import Author
from closedform.checking.standing.customary import customary
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.standing.motion import MotionOn
from closedform.checking.values.exact import exact
from closedform.checking.values.exponential import matrix_exponential
from closedform.checking.values.scope import Scope, Value
from closedform.checking.verdict import Word
from closedform.notation.written.tree import Symbol, Written, changed, walk

__all__ = ["Finding", "Setting"]


@dataclass(frozen=True, slots=True)
class Finding:
    """What was found of a claim.  `right` is the right form of its value where it fails."""

    word: Word
    reason: str = ""
    right: Written | None = None
    notes: tuple[str, ...] = ()
    entries: tuple[tuple[int, int], ...] = ()
    """Where a matrix is wrong, counted from 1."""
    pairs: tuple[tuple[Written, Value], ...] = ()
    """Members that are wrong, with the values that they ought to have."""

    @property
    def passes(self) -> bool:
        """Whether the claim may stand."""
        return self.word not in ("fails", "carried", "not read")


@dataclass(frozen=True)
class Setting:
    """The ground, the author so far, and the claims of the line and those still to come."""

    ground: Ground
    author: Author = field(default_factory=Author)
    later: tuple[Claim, ...] = ()
    general: bool = False
    """Whether names that nobody stated have their customary meaning."""

    def opened(self, tree: Written) -> Written:
        """Return a formula with the author's own names replaced by what they stand for."""
        return self.author.put_in(tree)

    def renamed(self, tree: Written, names: Iterable[str]) -> Written:
        """Return a formula with other names for the spectral variable replaced by that."""
        given = frozenset(names)

        def change(node: Written) -> Written | None:
            named = isinstance(node, Symbol) and node.name in given
            return Symbol(SPECTRAL) if named else None

        return changed(tree, change)

    def ground_for(self, *trees: Written) -> Ground:
        """Return the ground in which parameters that do not occur have their values."""
        names = {n.name for tree in trees for n in walk(tree) if isinstance(n, Symbol)}
        return self.ground.put_for(frozenset(self.ground.truth.parameters) - names)

    def scope_of(self, ground: Ground) -> Scope:
        """Return the meaning of names in the author's formulas."""
        facts = ground.facts
        symbols: dict[str, Value] = {
            name: ground.scope.symbols[name]
            for name in (*ground.truth.parameters, *sorted(ground.put_in))
        }
        symbols[SPECTRAL] = ground.field.name(SPECTRAL)
        if "A" not in facts.names:
            symbols["A"] = ground.matrix
        jets = MotionOn(ground)
        if self.general:
            symbols = {**customary(ground), **symbols}
        return replace(
            ground.scope,
            symbols=symbols,
            jets=jets,
            moment=jets.at,
            in_pieces=len(ground.stretches) > 1,
            exponential=partial(matrix_exponential, candidates=ground.eigenvalues),
        )

    def stated(self, says: str) -> Written | None:
        """Return the value that the author states last for something, or else states later."""
        entry = self.author.last(says)
        if entry is not None:
            return entry.value
        return next((c.values[-1] for c in self.later if c.says == says and c.values), None)

    def value(self, tree: Written, ground: Ground | None = None) -> Value:
        """Return the exact value of an author's formula."""
        return exact(self.opened(tree), self.scope_of(ground or self.ground))
