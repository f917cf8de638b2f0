"""What a formula is by its shape: a column, a polynomial, an equation, a new name."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fractions import Fraction

from closedform.checking.recognising.left_sides import base_and_indices
from closedform.checking.standing.facts import Facts
from closedform.notation.written.tree import (
    Apply,
    Array,
    Identity,
    Integral,
    Jet,
    Limit,
    Literal,
    Statement,
    Symbol,
    Written,
    children,
    walk,
)

__all__ = [
    "ZERO",
    "by_shape",
    "in_time",
    "is_column",
    "is_constant_column",
    "is_equation",
    "is_initial_column",
    "is_matrix",
    "is_of_coordinates",
    "is_vector_name",
]

ZERO = Literal(Fraction(0))
VECTORS = ("v", "u", "w", "xi", "phi", "q", "e", "psi", "eta", "r", "x", "z", "p", "g", "h")
SPECTRAL = ("lambda", "s", "r", "mu", "z")


def by_shape(statement: Statement, facts: Facts) -> tuple[str, tuple[Written, ...]]:
    """Return what a statement without a telling left side claims, and its names."""
    members = statement.members
    if _is_new_name(members[0], facts) and len(members) > 1 and members[-1] != ZERO:
        return "definition", members[:1]
    if _has_jets(members, facts):
        return ("equation" if len(members) > 1 else "identity"), ()
    polynomials = members[:-1] if members[-1] == ZERO else members
    if polynomials and all(_is_polynomial(member, facts) for member in polynomials):
        return "characteristic polynomial", ()
    first = members[0]
    if _is_angle(first, facts) and len(members) > 1:
        return "definition", members[:1]
    if isinstance(first, Symbol) and len(members) > 1 and first.name not in facts.names:
        return "definition", members[:1]
    if isinstance(first, Jet) and len(members) > 1 and first.name not in facts.varying:
        return "definition", members[:1]
    return "identity", ()


def _is_new_name(node: Written, facts: Facts) -> bool:
    """Whether a member is a name of the author's, of a number or a function of time."""
    match node:
        case Symbol(name):
            return name not in facts.names and not facts.has_vector(name)
        case Jet(name, 0, at):
            known = name in facts.names or facts.has_vector(name)
            return not known and at in (None, Symbol(facts.time))
    return False


def is_column(value: Written, facts: Facts) -> bool:
    """Whether a column with an entry for every state stands in a formula.

    A bold letter may be that of a state: the vector is meant.
    """
    size = len(facts.states)
    shapes = [(len(n.rows), len(n.rows[0])) for n in walk(value) if isinstance(n, Array)]
    return size > 1 and ((size, 1) in shapes or (1, size) in shapes)


def _is_angle(node: Written, facts: Facts) -> bool:
    """Whether a formula is the tangent, sine or cosine of a name, which it so defines."""
    match node:
        case Apply("tan" | "sin" | "cos", (Symbol(name),)):
            return name not in facts.names
    return False


def _is_polynomial(member: Written, facts: Facts) -> bool:
    """Whether a formula has a spectral variable in it and not the time."""
    names = {node.name for node in walk(member) if isinstance(node, Symbol)}
    spectral = names & (set(SPECTRAL) - facts.names)
    matrices = any(isinstance(node, Array | Identity) for node in walk(member))
    lone = isinstance(member, Symbol) or matrices or "A" in names - facts.names
    return bool(spectral) and facts.time not in names and not lone


def _has_jets(members: Sequence[Written], facts: Facts) -> bool:
    """Whether a function of time of the model stands in a formula, at no fixed instant."""
    return any(
        isinstance(node, Jet)
        and node.at is None
        and (node.name in facts.varying or facts.has_vector(node.name))
        for member in members
        for node in _moving_parts(member)
    )


def _moving_parts(member: Written) -> Iterator[Written]:
    """Yield the parts of a formula, but of definite integrals and limits none."""
    yield member
    fixed = isinstance(member, Limit) or (isinstance(member, Integral) and member.lower is not None)
    for part in () if fixed else children(member):
        yield from _moving_parts(part)


def in_time(members: Sequence[Written], facts: Facts) -> bool:
    """Whether the time stands in formulas, as in those of Putzer's method, of no eigenvalue."""
    return any(Symbol(facts.time) in walk(member) for member in members)


def is_equation(first: Written, rest: Sequence[Written], facts: Facts) -> bool:
    """Whether what begins with a function of the model's goes on with such functions.

    A column of states stands bare in x' = A x.
    """
    if _has_jets(rest[-1:], facts):
        return True
    names = {n.name for member in rest for n in walk(member) if isinstance(n, Symbol)}
    derived = isinstance(first, Jet) and first.order > 0
    return derived and any(facts.has_vector(name) for name in names)


def is_of_coordinates(rest: Sequence[Written], facts: Facts) -> bool:
    """Whether a matrix is that of the masses or springs, of half as many rows as A has."""
    shapes = {(len(m.rows), len(m.rows[0])) for m in rest if isinstance(m, Array)}
    half, odd = divmod(len(facts.states), 2)
    return not odd and shapes == {(half, half)}


def is_matrix(node: Written) -> bool:
    """Whether something in a formula is a matrix; a name that goes by A may be a number."""
    return any(
        isinstance(part, Array | Identity)
        or (isinstance(part, Apply) and part.function in ("diag", "inverse", "transpose"))
        or (isinstance(part, Symbol) and part.name in ("A", "P", "J", "T", "V"))
        for part in walk(node)
    )


def is_vector_name(first: Written, rest: Sequence[Written]) -> bool:
    """Whether a name such as v_1 stands for a column of numbers."""
    if not isinstance(first, Symbol) or not rest:
        return False
    base, _ = base_and_indices(first.name)
    columns = any(
        isinstance(node, Array) and (len(node.rows[0]) == 1 or len(node.rows) == 1)
        for member in rest
        for node in walk(member)
    )
    return base in VECTORS and columns


def is_initial_column(first: Written, rest: Sequence[Written], facts: Facts) -> bool:
    """Whether x_0 stands for the column of the initial values."""
    if not isinstance(first, Symbol) or first.name in facts.names:
        return False
    base, index = base_and_indices(first.name)
    states = base in ("x", "xvec") or facts.has_vector(base)
    return states and index == "0" and is_vector_name(first, rest)


def is_constant_column(first: Written, rest: Sequence[Written], facts: Facts) -> bool:
    """Whether a letter of a state, as v_1, has a column of constants: a vector is meant."""
    if not isinstance(first, Jet) or first.order or first.at is not None:
        return False
    base, index = base_and_indices(first.name)
    inside = [node for member in rest for node in walk(member)]
    return (
        base in VECTORS
        and index.isdigit()
        and any(is_column(member, facts) for member in rest)
        and not any(isinstance(node, Jet) or node == Symbol(facts.time) for node in inside)
    )
