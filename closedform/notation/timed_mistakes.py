"""What people do wrong with derivatives and functions of the time, and how it is noticed."""

from __future__ import annotations

import re
import unicodedata

from lark import Token

from closedform.notation.expression import FUNCTIONS
from closedform.notation.jets import PRIMES, jet_of, spelled
from closedform.notation.vocabulary import Vocabulary

__all__ = [
    "DIFFERENTIAL",
    "EQUALS_MISTAKES",
    "TIMED_MISTAKES",
    "instead_of",
    "why_name",
    "why_stray",
]

DERIVATIVES = frozenset({"diff", "Diff", "derivative", "Derivative", "deriv", "der", "ddt"})
INTEGRALS = frozenset({"int", "Int", "integral", "Integral", "integrate"})
DOTTED = re.compile(r"(?P<base>\w+?)_?(?P<d>d{0,3})dot(?P<order>[0-9]?)")

DIFFERENTIAL = (
    r"(?<!\w)d(?:(?:\^|\*\*)?[0-9]|[²³])?\s*(?:[^\W\d]\w*|\([^()]*\))?(?:\(%s\))?"
    r"\s*/\s*\(?\s*d%s[0-9²³]?(?!\w)"
)
"""A pattern for dx/dt, d2x/dt2, d^2x/dt^2 and d/dt, with the name of the time put in."""

WRITE_PRIMES = "write x' for the derivative of x with respect to the time, x'' for the second"

TIMED_MISTAKES: tuple[tuple[str, str, tuple[str, ...]], ...] = (
    (
        "a name stands before a bracket, and it is no function",
        (
            "write a product with *, as in k*(x + 1); the functions are exp, sin, cos, sinh, "
            "cosh, sqrt, step and delta, and what depends on the time may have it in brackets, "
            "as in u(t - 2)"
        ),
        ("k(x)", "k(t)"),
    ),
    (
        "a derivative is written as a function",
        WRITE_PRIMES,
        ("diff(x)", "derivative(x)"),
    ),
    (
        "an integral is no part of an equation here",
        (
            "name it: for the integral q of i, write q' = i as an equation of its own, use q "
            "where the integral stood, and give q its initial value"
        ),
        ("int(x)",),
    ),
    (
        "a derivative is written with dots",
        WRITE_PRIMES,
        ("x_dot", "xddot", "x_dot3", "ẋ", "ẍ"),
    ),
    (
        "a number has a prime",
        "a number does not depend on the time; write the prime behind a name, as in x'",
        ("2'",),
    ),
    (
        "a prime stands behind a bracket",
        "write it behind each name, as in m*x' + x0' or x'(t)",
        ("(x)'", "x(t)'", "sin(x)'"),
    ),
    (
        "a prime stands apart from its name",
        "write it right behind the name, as in x'",
        ("x '",),
    ),
    (
        "a prime stands behind no name",
        "write it behind a name, as in x'",
        ("'", "x+'", "sin'"),
    ),
    (
        "what has a prime here does not depend on the time",
        "only unknowns and inputs have derivatives; take the prime away, or make it an input",
        ("k'", "t'"),
    ),
    (
        "a quotation mark stands in a formula",
        "write two primes for a second derivative, as in x''",
        ('x"', '"'),
    ),
)
"""What is wrong, what to do, and the shortest wrong inputs, as in `MISTAKES`.

There, x depends on the time t, and k does not.
"""

STEPS = frozenset({"heaviside", "unitstep", "unit_step", "stepfun", "ustep"})
IMPULSES = frozenset({"dirac", "diracdelta", "dirac_delta", "impulse", "unitimpulse"})
OTHERS = frozenset(
    {
        *("abs", "sign", "sgn", "log", "ln", "lg", "tan", "cot", "tanh", "asin", "acos", "atan"),
        *("arcsin", "arccos", "arctan", "atan2", "max", "min", "floor", "ceil", "mod"),
    }
)
"""Functions of which none is a sum of waves."""

EQUALS_MISTAKES: dict[str, tuple[str, str]] = {
    "none": (
        "an equation has a sign =, and here is none",
        "write what is equal on both sides of it, as in m*x'' + k*x = F",
    ),
    "several": (
        "an equation has one sign =",
        "write an equation of its own for each",
    ),
    "double": (
        "an equation is written with one sign =",
        "write = for it",
    ),
    "assigned": (
        "an equation is written with the sign = alone",
        "write = for it",
    ),
    "compared": (
        "an equation is written with =, and here two sides are compared",
        "write =; comparisons of parameters stand under 'conditions'",
    ),
    "bracketed": (
        "the sign = stands inside brackets",
        "close the bracket before it, or take the bracket away",
    ),
    "empty": (
        "one side of the equation is empty",
        "write 0 where nothing stands",
    ),
    "differential": (
        "a derivative is written as a quotient",
        WRITE_PRIMES,
    ),
}
"""What is wrong, and what to do, where the text of an equation is no equation."""


def instead_of(word: str) -> str | None:
    """Return what to write for a usual function that is none here, None for another word."""
    plain = word.lower()
    if plain in STEPS:
        return f"{word} is not known; write step(t - a), which is 0 before a and 1 from a on"
    if plain in IMPULSES:
        return f"{word} is not known; write delta(t - a) for an impulse at a"
    if plain in OTHERS:
        return (
            f"{word} is not known; the functions are exp, sin, cos, sinh, cosh, sqrt, step and "
            "delta: put what it stands for into pieces under [inputs], or a number in its place"
        )
    return None


def why_stray(character: str, before: str, vocabulary: Vocabulary) -> tuple[str, ...]:
    """Return why a character that begins no token is refused; `before` is the token before it."""
    if vocabulary.has_jets:
        if character in PRIMES:
            return (before if before in ("NAME", "NUMBER", "CLOSE") else "NONE", "PRIME")
        if character == '"':
            return ("QUOTATION MARK",)
        if {"0307", "0308"} & set(unicodedata.decomposition(character).split()):
            return ("DOTTED",)
    return ("CHARACTER",)


def why_name(token: Token, vocabulary: Vocabulary) -> tuple[str, ...]:
    """Return why a name is refused, or nothing."""
    if token in FUNCTIONS:
        return ()
    base, primes = jet_of(spelled(token))
    if not vocabulary.has_jets:
        return ("CHARACTER",) if primes else ()
    if base in vocabulary.names:
        return ("CONSTANT", "PRIME") if primes else ()
    if vocabulary.functions is not None and base in vocabulary.functions:
        return ()
    if base in DERIVATIVES:
        return ("DERIVATIVE",)
    if base in INTEGRALS:
        return ("INTEGRAL",)
    return ("DOTTED",) if _is_dotted(base, vocabulary) else ()


def _is_dotted(name: str, vocabulary: Vocabulary) -> bool:
    """Whether a name that is not declared seems to be meant as a derivative."""
    match = DOTTED.fullmatch(name)
    if match is None:
        return False
    if vocabulary.functions is None:
        return "_" in name[len(match["base"]) :]
    return match["base"] in vocabulary.functions
