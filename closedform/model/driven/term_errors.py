"""Which error a term is that a linear equation does not have, and where it stands."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass

from closedform.errors import Place
from closedform.model.driven.balance_errors import (
    BalanceError,
    InputTimesUnknownError,
    NonlinearBalanceError,
    NonlinearInputError,
    TimeVaryingError,
)
from closedform.model.driven.roles import Roles
from closedform.notation.expression import Call, Expression, Power, Product, Quotient
from closedform.notation.plain import plain
from closedform.notation.reader import place_of

__all__ = ["TermErrors"]


@dataclass(frozen=True, slots=True)
class TermErrors:
    """The errors of one equation, whose text as typed begins at `place`.

    `equation` is how it is quoted; `text` is empty where it is not known how it was typed.
    """

    roles: Roles
    place: Place
    text: str
    equation: str

    def error(
        self, kind: Callable[[Place, str, str], BalanceError], term: Expression
    ) -> BalanceError:
        """Return an error of a kind about a term."""
        return kind(self._place_of(term), self.equation, plain(term))

    def nonlinear(self, term: Expression) -> BalanceError:
        """Return the error for a term that is not linear; what concerns unknowns comes first."""
        parts, reason = self._parts(term)
        kinds = [self.roles.within(part) for part in parts]
        unknown, given = (sum(kind in found for found in kinds) for kind in ("unknown", "input"))
        if unknown and reason:
            return self._because(NonlinearBalanceError, term, f"has an unknown {reason}")
        if unknown > 1:
            return self._because(NonlinearBalanceError, term, "is a product of unknowns")
        if unknown:
            within = next(found for found in kinds if "unknown" in found)
            mixed = given > ("input" in within)
            return self.error(InputTimesUnknownError if mixed else TimeVaryingError, term)
        if reason:
            return self._because(NonlinearInputError, term, f"has an input {reason}")
        what = "is a product of inputs" if given > 1 else "has an input times a function of time"
        return self._because(NonlinearInputError, term, what)

    def _parts(self, term: Expression) -> tuple[tuple[Expression, ...], str]:
        """Return the parts that make a term nonlinear, and where they stand; "" in a product."""
        match term:
            case Product(factors):
                return factors, ""
            case Quotient(above, below):
                over, under = self.roles.within(above), self.roles.within(below)
                if "unknown" in under or ("input" in under and "unknown" not in over):
                    return (below,), "in its denominator"
                return (above, below), ""
            case Power(base, exponent):
                return (base, exponent), "in a power"
            case Call(function, argument):
                return (argument,), f"inside of {function}"
        raise AssertionError(term)

    def _because(
        self, kind: Callable[[Place, str, str, str], BalanceError], term: Expression, reason: str
    ) -> BalanceError:
        return kind(self._place_of(term), self.equation, plain(term), reason)

    def _place_of(self, term: Expression) -> Place:
        """Return the place of a term in the text of the equation, or the equation's.

        The tree holds no places: the term's spelling is searched for, spaces left aside.
        """
        offsets = [k for k, character in enumerate(self.text) if not character.isspace()]
        compact = "".join(self.text[k] for k in offsets)
        pieces = map(self._pattern, re.findall(r"\w+'*|\S", plain(term)))
        found = re.search(rf"(?<!\w){''.join(pieces)}(?![\w'])", compact)
        if found is None or not found[0]:
            return self.place
        return place_of(self.text, offsets[found.start()], self.place)

    def _pattern(self, piece: str) -> str:
        """Return a pattern for a piece of plain notation in the spellings that are read."""
        if piece == "*":
            return "[*·⋅×]?"
        if piece == "^":
            return r"(?:\^|\*\*)"
        if piece[0].isalpha():
            name = re.escape(piece).replace("'", "['’′]")
            return rf"{name}(?:\({re.escape(self.roles.time)}\))?"
        return re.escape(piece)
