"""Left sides: what a formula in front of an equals sign is the name of."""

from __future__ import annotations

import re
from dataclasses import dataclass
from fractions import Fraction

from closedform.checking.standing.facts import Facts
from closedform.notation.written.tree import (
    EULER,
    INFINITY,
    Apply,
    Evaluated,
    Identity,
    Jet,
    Limit,
    Literal,
    Negation,
    Power,
    Product,
    Quotient,
    Sum,
    Symbol,
    Transform,
    Written,
    walk,
)

__all__ = ["Left", "base_and_indices", "left_of", "matrix_name", "spelled_jet"]

DIAGONALISERS = frozenset({"P", "T", "V", "S", "Q", "X", "M", "U"})
CANONICAL = frozenset({"J", "Lambda", "D"})
VECTORS = frozenset({"v", "u", "w", "xi", "phi", "q", "e", "psi", "eta", "p", "r", "x", "z"})
POLYNOMIALS = frozenset({"p", "chi", "P", "Delta", "q", "D", "f", "c", "pi", "phi", "d", "a"})
ROOTS = frozenset({"lambda", "s", "r", "mu", "theta", "p", "sigma", "nu", "alpha"})
SPECTRA = frozenset({"sigma", "spec", "eig", "lambda", "Lambda"})
"""Names of the set of eigenvalues: sigma(A) (common practice)."""
QUANTITIES = {
    ("omega", "n"): "natural frequency",
    ("omega", "0"): "natural frequency",
    ("omega", "d"): "damped frequency",
    ("f", "n"): "natural frequency",
    ("f", "0"): "natural frequency",
    ("f", "d"): "damped frequency",
    ("zeta", ""): "damping ratio",
    ("D", ""): "damping ratio",
    ("tau", ""): "time constant",
    ("T", "1_2"): "half-life",
    ("t", "1_2"): "half-life",
    ("T", "d"): "period",
    ("T", "n"): "period",
    ("T", "0"): "period",
}
"""Customary names of quantities of a second-order system, with their index (common practice)."""
ENDINGS = {
    "ss": "steady state",
    "inf": "steady state",
    "infty": "steady state",
    "oo": "steady state",
    "stat": "steady state",
    "st": "steady state",
    "eq": "steady state",
    "p": "particular solution",
    "part": "particular solution",
    "h": "homogeneous solution",
    "hom": "homogeneous solution",
    "g": "homogeneous solution",
}
"""Indices that say which part of a solution a name stands for (common practice)."""


@dataclass(frozen=True, slots=True)
class Left:
    """What a left side names: a kind of `KINDS`, whose, and where.

    `sign` is -1 for det(A - lambda I), where that differs from det(lambda I - A).
    """

    says: str
    subject: str = ""
    at: Written | None = None
    sign: int = 1


def spelled_jet(name: str, order: int) -> str:
    """Return a derivative as it is typed.

    >>> spelled_jet("x", 2)
    "x''"
    """
    return name + "'" * order


def base_and_indices(name: str) -> tuple[str, str]:
    """Return a flattened name as its letter or word and its index.

    >>> base_and_indices("omega_n_1"), base_and_indices("k12")
    (('omega', 'n_1'), ('k', '12'))
    """
    base, _, index = name.partition("_")
    if index:
        return base, index
    found = re.fullmatch(r"([A-Za-z]+?)([0-9]+)", name)
    return (found[1], found[2]) if found else (name, "")


def left_of(node: Written, facts: Facts) -> Left | None:
    """Return what a member of a chain names, or None if it names nothing that is known."""
    match node:
        case Limit(Jet() as jet, variable, point) if variable == facts.time and point == INFINITY:
            return Left("steady state", facts.spelled(jet))
        case Limit(Symbol(name), _, point) if point == INFINITY:
            return Left("steady state", name)
        case Transform(Jet(name, order), back=False):
            return Left("transform", spelled_jet(name, order))
        case Evaluated(Jet(name, order, None), variable, at) if variable == facts.time:
            return _of_jet(Jet(name, order, at), facts)
        case Jet():
            return _of_jet(node, facts)
        case Symbol():
            return _of_symbol(node, facts)
        case Product(factors):
            return _of_product(factors, facts)
        case Quotient(above, below) if _names_input(below, facts):
            whose = left_of(above, facts)
            known = whose is not None and whose.says == "transform"
            return Left("transfer function", whose.subject) if whose and known else None
        case Power() | Apply():
            return _of_function(node, facts)
    return None


def _of_function(node: Power | Apply, facts: Facts) -> Left | None:
    """Return what e^(At), A^-1, det A and their like name."""
    match node:
        case Apply("trace", (Symbol("A"),)):
            return Left("trace")
        case Apply("det", (Symbol("A"),)):
            return Left("determinant")
        case Apply("det" | "abs", (inside,)):
            sign = _characteristic_sign(inside)
            return Left("characteristic polynomial", sign=sign) if sign else None
        case Apply("inverse", (Symbol(name),)) if name in DIAGONALISERS:
            return Left("P inverse", name)
        case Power(Symbol(name), Negation(Literal(value=one))) if one == 1:
            return Left("P inverse", name) if name in DIAGONALISERS else None
        case Power(inside, Negation(Literal(value=one))) if one == 1:
            return Left("resolvent") if _characteristic_sign(inside) == 1 else None
        case Apply("inverse", (inside,)) if _characteristic_sign(inside) == 1:
            return Left("resolvent")
        case Power(base, exponent) if base == EULER:
            return _of_exponential(exponent, facts)
        case Apply("exp", (exponent,)):
            return _of_exponential(exponent, facts)
    return None


def matrix_name(name: str, facts: Facts) -> str | None:
    """Return which matrix a name customarily stands for: A, P, J, or None."""
    if name in facts.varying or name in facts.parameters:
        return None
    if name == "A":
        return "A"
    if name in CANONICAL:
        return "J"
    return "P" if name in DIAGONALISERS else None


def _characteristic_sign(inside: Written) -> int:
    """Return 1 for lambda I - A, -1 for A - lambda I, 0 for anything else."""
    if not isinstance(inside, Sum) or len(inside.terms) != 2:
        return 0
    first, second = inside.terms
    sign = 1
    if _names_identity(second) or (isinstance(second, Negation) and _names_identity(second)):
        first, second, sign = second, first, -1
    return sign if _names_identity(first) and any(n == Symbol("A") for n in walk(second)) else 0


def _names_identity(node: Written) -> bool:
    inside = list(walk(node))
    return any(isinstance(n, Identity) or n in (Symbol("I"), Symbol("E")) for n in inside) and not (
        any(n == Symbol("A") for n in inside)
    )


def _of_jet(jet: Jet, facts: Facts) -> Left | None:
    if jet.name in SPECTRA - facts.names and jet.order == 0 and jet.at == Symbol("A"):
        return Left("eigenvalues")
    name = spelled_jet(jet.name, jet.order)
    if jet.order == 0 and jet.at is not None and _is_spectral(jet.at, facts):
        return _of_spectral(jet.name, facts)
    if jet.name in facts.varying or facts.has_vector(jet.name):
        if jet.at is None or jet.at == Symbol(facts.time):
            return Left("output" if name in facts.outputs else "solution", name)
        if jet.at == INFINITY:
            return Left("steady state", name)
        return Left("value", name, jet.at)
    if jet.order == 0 and jet.at in (None, Symbol(facts.time)) and jet.name in ("Phi", "phi"):
        return Left("exp A")
    base, index = base_and_indices(jet.name)
    part = _part_of_solution(base, index, facts)
    if part:
        says, whose = part
        at = jet.at if jet.at not in (None, Symbol(facts.time)) else None
        return Left(says, spelled_jet(whose, jet.order), at)
    return None


def _of_symbol(symbol: Symbol, facts: Facts) -> Left | None:
    name = symbol.name
    if name in facts.parameters:
        return None
    base, index = base_and_indices(name)
    part = _part_of_solution(base, index, facts)
    if part:
        return Left(*part)
    which = matrix_name(name, facts)
    if which:
        return Left({"A": "matrix", "P": "P", "J": "J"}[which], name)
    if (base, index) in QUANTITIES:
        return Left(QUANTITIES[base, index], name)
    digits = index.replace("_", "")
    if base == "lambda" or (base in ROOTS and digits.isdigit()):
        return Left("eigenvalues", name)
    if facts.has_vector(name):
        return Left("solution", name)
    return None


def _of_product(factors: tuple[Written, ...], facts: Facts) -> Left | None:
    """P^-1 A P names J; Phi t is a transition matrix called with the time; sigma A a spectrum."""
    match factors:
        case (Symbol(name), Symbol(time)) if time == facts.time and name in ("Phi", "phi", "Psi"):
            return Left("exp A")
        case (Symbol(name), Symbol("A")) if name in SPECTRA:
            return Left("eigenvalues")
        case (first, Symbol("A"), Symbol(last)):
            left = left_of(first, facts)
            if left and left.says == "P inverse" and left.subject == last:
                return Left("J", last)
        case (Symbol(name), argument) if _is_spectral(argument, facts):
            return _of_spectral(name, facts)
        case (Identity(None), Symbol("s")) if facts.transformed("I"):
            return _of_spectral("I", facts)
    return None


def _of_spectral(name: str, facts: Facts) -> Left | None:
    """Return what a name stands for that depends on s or lambda."""
    whose = facts.transformed(name)
    if whose:
        return Left("transform", whose)
    if name in ("G", "H") and len(facts.inputs) == 1:
        return Left("transfer function")
    known = name in POLYNOMIALS or name.removesuffix("_A") in POLYNOMIALS
    return Left("characteristic polynomial") if known else None


def _names_input(node: Written, facts: Facts) -> bool:
    """Whether U(s) stands there, the transform of an input u."""
    match node:
        case Product((Symbol(name), argument)) if _is_spectral(argument, facts):
            return any(name.lower() == own.lower() for own in facts.inputs)
        case Jet(name, 0, at) if at is not None and _is_spectral(at, facts):
            return any(name.lower() == own.lower() for own in facts.inputs)
    return False


def _of_exponential(exponent: Written, facts: Facts) -> Left | None:
    parts = exponent.factors if isinstance(exponent, Product) else (exponent,)
    rest = tuple(part for part in parts if part != Symbol("A"))
    if len(rest) == len(parts) - 1 and all(isinstance(part, Literal) for part in rest):
        instant = rest[0] if len(rest) == 1 else Product(rest)
        return Left("exp A", at=instant if rest else Literal(Fraction(1)))
    names = [part.name for part in parts if isinstance(part, Symbol)]
    if len(names) != len(parts) or names.count(facts.time) != 1:
        return None
    others = [name for name in names if name != facts.time]
    which = matrix_name(others[0], facts) if len(others) == 1 else None
    return {"A": Left("exp A"), "J": Left("exp J", others[0])}.get(which or "")


def _is_spectral(node: Written, facts: Facts) -> bool:
    return (
        isinstance(node, Symbol)
        and node.name in ("lambda", "s", "r", "z", "p", "mu", "x")
        and node.name not in facts.names
    )


def _part_of_solution(base: str, index: str, facts: Facts) -> tuple[str, str] | None:
    """Return which part of which state's solution a name with an index stands for."""
    head, _, tail = index.rpartition("_")
    for whose, ending in ((f"{base}_{head}" if head else base, tail), (f"{base}{head}", tail)):
        known = whose in facts.varying or facts.has_vector(whose)
        if known and ending in ENDINGS and f"{base}_{index}" not in facts.names:
            return ENDINGS[ending], whose
    return None
