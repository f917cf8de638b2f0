"""Angles that a line gives by their tangent, sine or cosine."""

from __future__ import annotations

from closedform.checking.claim import Group
from closedform.checking.standing.author import Author
from closedform.notation.written.tree import PI, Apply, Negation, Sum, Symbol, Written

__all__ = ["angles_of"]


def angles_of(group: Group, author: Author) -> dict[str, tuple[Written, Written]]:
    """Return the names whose tangent, sine or cosine is on the left, with two values of each.

    The first is the principal one, the other has the same tangent, sine or cosine.
    """
    found: dict[str, tuple[Written, Written]] = {}
    for name in group.names:
        match name:
            case Apply(("tan" | "sin" | "cos") as function, (Symbol(angle),)) if group.values:
                value = author.put_in(group.values[0])
                principal = Apply(f"a{function}", (value,))
                found[angle] = principal, _other(function, principal)
    return found


def _other(function: str, angle: Written) -> Written:
    """Return another angle with the same tangent, sine or cosine."""
    if function == "tan":
        return Sum((angle, PI))
    return Negation(angle) if function == "cos" else Sum((PI, Negation(angle)))
