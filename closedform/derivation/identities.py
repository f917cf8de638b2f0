"""The identities of a verification record as mathematics to print."""

from __future__ import annotations

from closedform.derivation.formulas import A
from closedform.derivation.step import Side, Statement, Symbol
from closedform.notation.expression import Name, number

__all__ = ["identity_statement"]

_T = Name("t")
_X = Symbol("vector", letter="x")
_EXP = Symbol("transition")
_P, _J = Symbol("matrix", letter="P"), Symbol("matrix", letter="J")
_ZERO = Symbol("zero")

_SIDES: dict[str, tuple[Side, ...]] = {
    "c(A) = 0": (Symbol("characteristic polynomial", argument=Name("A")), number(0)),
    "x' - A x = 0": (Symbol("derivative", letter="x"), (A, _X)),
    "x(0) = x0": (
        Symbol("vector", letter="x", argument=number(0)),
        Symbol("vector", letter="x", indices=("0",)),
    ),
    "A P = P J": ((A, _P), (_P, _J)),
    "P P^(-1) = I": ((_P, Symbol("inverse", letter="P")), Symbol("identity")),
    "P e^(Jt) P^(-1) = e^(At)": (
        (_P, Symbol("exponential", letter="J"), Symbol("inverse", letter="P")),
        _EXP,
    ),
    "x = e^(At) x0": (_X, (_EXP, Symbol("vector", letter="x", indices=("0",)))),
}


def identity_statement(item: str) -> Statement | str:
    """Return the identity as a statement, or the item's own words where it is none."""
    sides = _SIDES.get(item)
    return item if sides is None else Statement("identity", sides)
