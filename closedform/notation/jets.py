"""Names with primes: derivatives with respect to the time, as they are typed."""

from __future__ import annotations

from closedform.notation.expression import (
    FUNCTIONS,
    SIGNALS,
    Call,
    Expression,
    Name,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
)
from closedform.notation.greek import ascii_name

__all__ = ["PRIMES", "found_jets", "jet_of", "spelled"]

PRIMES = {"'": 1, "\N{RIGHT SINGLE QUOTATION MARK}": 1, "\N{PRIME}": 1}
PRIMES |= {"\N{DOUBLE PRIME}": 2, "\N{TRIPLE PRIME}": 3}
"""The signs that people type for a derivative, and how many primes each is."""


def spelled(text: str) -> str:
    """Return a name in its ASCII spelling, with plain primes.

    >>> spelled("ω_1″")
    "omega_1''"
    """
    base = text.rstrip("".join(PRIMES))
    return ascii_name(base) + "'" * sum(PRIMES[sign] for sign in text[len(base) :])


def jet_of(text: str) -> tuple[str, int]:
    """Return what a name with primes is a derivative of, and of which order.

    >>> jet_of("x1''")
    ('x1', 2)
    """
    base = text.rstrip("'")
    return base, len(text) - len(base)


def found_jets(expression: Expression) -> tuple[tuple[str, int], ...]:
    """Return every name of a formula, with its primes as a number, in the order of reading.

    Names in front of a bracket are among them, those of the functions are not.
    """
    found: dict[tuple[str, int], None] = {}
    pending: list[Expression] = [expression]
    while pending:
        match pending.pop():
            case Name(text):
                found[jet_of(text)] = None
            case Negation(inside):
                pending.append(inside)
            case Call(function, inside):
                if function not in FUNCTIONS and function not in SIGNALS:
                    found[jet_of(function)] = None
                pending.append(inside)
            case Sum(several) | Product(several):
                pending += reversed(several)
            case Quotient(left, right) | Power(left, right):
                pending += (right, left)
            case _:
                pass
    return tuple(found)
