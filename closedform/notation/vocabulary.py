"""Which names a formula may use, and which of them are functions of the time."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from lark import Token

from closedform.notation.builder import DEEPEST
from closedform.notation.expression import FUNCTIONS, SIGNALS
from closedform.notation.jets import jet_of, spelled

__all__ = ["Vocabulary"]

NEVER_UNKNOWN = frozenset({"e", "pi", "nan", "inf", "infinity", "infty", "oo"})
NEVER_UNKNOWN |= {"tan", "cot", "tanh", "coth", "asin", "acos", "atan", "atan2", "arctan"}
NEVER_UNKNOWN |= {"log", "ln", "lg", "log10", "abs", "sign", "sgn", "min", "max"}
NEVER_UNKNOWN |= {"heaviside", "dirac"}
"""Numbers and functions that people mean by these names: none is taken for an unknown."""


@dataclass(frozen=True, slots=True)
class Vocabulary:
    """What the names in a formula may be.

    `names` stand for numbers: parameters, states, the time.  `functions` depend on the time,
    and so may have primes and an instant in brackets; None means every name that is not among
    `names`, because the unknowns are yet to be found.  With `signals`, step and delta are
    functions: step always, delta where a bracket follows or no name is spelled so.
    """

    names: frozenset[str]
    functions: frozenset[str] | None = frozenset()
    time: str = ""
    signals: bool = False

    @property
    def has_jets(self) -> bool:
        """Whether a name may have primes."""
        return self.functions is None or bool(self.functions)

    def varies(self, name: str) -> bool:
        """Whether a name without primes depends on the time."""
        if self.functions is None:
            word = name if len(name) == 1 else name.lower()  # E is a voltage, e a number
            return not (name in self.names or name in FUNCTIONS or word in NEVER_UNKNOWN)
        return name in self.functions

    def knows(self, name: str) -> bool:
        """Whether a name without primes may occur."""
        return name in self.names or self.varies(name)

    def applied(self, tokens: Sequence[Token]) -> list[Token]:
        """Return the tokens with those names marked as functions that are applied to something.

        What is applied to the time alone, x(t), is the name itself.
        """
        found = []
        rest = 0
        for place, token in enumerate(tokens):
            if place < rest:
                continue
            if token.type == "NAME" and self._is_applied(tokens, place):
                if self._is_at_time(tokens, place):
                    rest = place + 4
                else:
                    found.append(Token.new_borrow_pos("FUNCTION", token.value, token))
                    continue
            found.append(token)
        return found

    def _is_applied(self, tokens: Sequence[Token], place: int) -> bool:
        name = spelled(tokens[place])
        bracket = place + 1 < len(tokens) and tokens[place + 1].type == "OPEN"
        if self.signals and name in SIGNALS:
            return bracket or name not in self.names
        base, _ = jet_of(name)
        if not bracket or base in SIGNALS or not self.varies(base):
            return False
        return self.functions is not None or self._depends_on_time(tokens, place + 1)

    def _is_at_time(self, tokens: Sequence[Token], place: int) -> bool:
        within = tokens[place + 2 : place + 4]
        return (
            spelled(tokens[place]) not in SIGNALS
            and [token.type for token in within] == ["NAME", "CLOSE"]
            and spelled(within[0]) == self.time
        )

    def _depends_on_time(self, tokens: Sequence[Token], opening: int) -> bool:
        """Whether the time stands between a bracket and the one that closes it."""
        depth = 0
        for token in tokens[opening:]:
            depth += (token.type == "OPEN") - (token.type == "CLOSE")
            if depth == 0 or depth > DEEPEST:
                return False
            if token.type == "NAME" and spelled(token) == self.time:
                return True
        return False
