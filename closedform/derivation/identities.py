"""The items of a verification record as they are printed."""

from __future__ import annotations

from closedform.derivation.formulas import A
from closedform.derivation.step import Side, Statement, Symbol
from closedform.notation.expression import Name, number

__all__ = ["printed_item"]

_X = Symbol("vector", letter="x")
_X0 = Symbol("vector", letter="x", indices=("0",))
_P, _J = Symbol("matrix", letter="P"), Symbol("matrix", letter="J")
_INVERSE = Symbol("inverse", letter="P")

_WORDS = {
    "A and x0 as stated": "the model's numbers",
    "y = C x": "outputs",
    "det e^(At) = e^(tr(A) t)": "determinant of the transition matrix",
    "e^(At), numbers": "transition matrix, in numbers",
    "det e^(At), numbers": "determinant, in numbers",
    "e^(At), second opinion": "transition matrix, second opinion",
}


def printed_item(item: str, time: str) -> Statement | str:
    """Return an item as the identity it is, for a time of that name, or in words."""
    sides = _identities(Name(time)).get(item)
    return _WORDS.get(item, item) if sides is None else Statement("identity", sides)


def _identities(t: Name) -> dict[str, tuple[Side, ...]]:
    transition = Symbol("transition", argument=t)
    form = Symbol("exponential", letter="J", argument=t)
    return {
        "p(A) = 0": (Symbol("characteristic polynomial", parts=(A,)), Symbol("zero")),
        "d/dt e^(At) - A e^(At) = 0": (
            (Symbol("time derivative", argument=t), transition),
            (A, transition),
        ),
        "e^(A0) = I": (Symbol("transition", argument=number(0)), Symbol("identity")),
        "x' - A x = 0": (Symbol("derivative", letter="x"), (A, _X)),
        "x(0) = x0": (Symbol("vector", letter="x", argument=number(0)), _X0),
        "x = e^(At) x0": (_X, (transition, _X0)),
        "A P = P J": ((A, _P), (_P, _J)),
        "P P^(-1) = I": ((_P, _INVERSE), Symbol("identity")),
        "P e^(Jt) P^(-1) = e^(At)": ((_P, form, _INVERSE), transition),
    }
