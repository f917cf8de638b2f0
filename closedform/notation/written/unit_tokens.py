"""Units among the tokens of a statement: which goes beside it, and which cannot be left out."""

from __future__ import annotations

from collections.abc import Sequence

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.latex_units import is_scaled
from closedform.notation.written.names import Names
from closedform.notation.written.pairs import bounds, pairs
from closedform.notation.written.tree import Symbol
from closedform.notation.written.written_errors import StopError, UnusableNotationError

__all__ = ["without_units"]


def without_units(part: Sequence[Token], names: Names) -> tuple[str, list[Token]]:
    """Return the unit at the end, or of a factor, and the tokens without units.

    A percentage is a hundredth.  Beside the time a unit with a prefix is refused: which unit
    the time has is not said.
    """
    unit, out, opened = "", [], []
    for one in part:
        if one.type != "UNIT":
            out.append(one)
            if one.type.endswith("OPEN"):
                opened.append(len(out))
            elif one.type.endswith("CLOSE") and opened:
                opened.pop()
        elif one.value == "%":
            out.append(token("POSTFIX", "percent", *bounds(one)))
        elif not opened:
            unit = str(one.value)
        elif is_scaled(str(one.value)) and _is_beside_time(part, one, names):
            raise StopError(
                UnusableNotationError,
                *bounds(one),
                str(one.value),
                "a unit with a prefix stands beside the time; write the number without it",
            )
    return unit, out


def _is_beside_time(part: Sequence[Token], unit: Token, names: Names) -> bool:
    """Tell whether the time stands in the bracket in which a unit does."""
    at = next(k for k, one in enumerate(part) if one is unit)
    partners = pairs(part, "")
    first = max((k for k, close in partners.items() if k < at < close), default=0)
    inside = part[first : partners.get(first, len(part))]
    return any(one.value == Symbol(names.time) for one in inside)
