"""Plus-or-minus: one formula that stands for two."""

from __future__ import annotations

from collections.abc import Callable

from closedform.notation.written.tree import Negation, PlusMinus, Written, changed

__all__ = ["both_signs"]


def both_signs(node: Written) -> tuple[Written, ...]:
    """Return the two readings of a formula with plus-or-minus, the upper one first; else itself."""
    found = False

    def put(*, upper: bool) -> Callable[[Written], Written | None]:
        def change(part: Written) -> Written | None:
            nonlocal found
            if not isinstance(part, PlusMinus):
                return None
            found = True
            inside = changed(part.operand, change)
            return inside if (part.upper == 1) == upper else Negation(inside)

        return change

    first = changed(node, put(upper=True))
    return (first, changed(node, put(upper=False))) if found else (node,)
