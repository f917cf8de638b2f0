"""What a line claims, from what its author says about it and from its left side."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace
from fractions import Fraction

from closedform.checking.claim import Claim, Group, SourceLine
from closedform.checking.recognising.left_sides import QUANTITIES as NAMED_QUANTITIES
from closedform.checking.recognising.left_sides import Left, base_and_indices, left_of
from closedform.checking.recognising.order import is_order, parted
from closedform.checking.standing.facts import Facts
from closedform.checking.values.conjugates import with_conjugates, with_names
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

__all__ = ["claims_of"]

ZERO = Literal(Fraction(0))
VECTORS = ("v", "u", "w", "xi", "phi", "q", "e", "psi", "eta", "r", "x", "z", "p", "g", "h")
MASSES = ("M", "D")
"""Letters of P and J by which the matrices of masses and dampers go, too."""
MATRICES = frozenset({"matrix", "P", "J"})
OF_STATES = frozenset({"solution", "value", "initial value", "particular solution"})
OF_STATES |= {"steady state", "homogeneous solution"}
SPECTRAL = ("lambda", "s", "r", "mu", "z")
QUANTITIES = frozenset(NAMED_QUANTITIES.values())


def claims_of(
    line: SourceLine,
    statements: tuple[Statement, ...],
    facts: Facts,
    *,
    of: Written | None = None,
    at: Written | None = None,
) -> tuple[Claim, ...]:
    """Return what a line claims: one claim for each thing it says.

    `of` and `at` are what the author states beside the line, read.
    """
    statements = parted(tuple(map(with_conjugates, statements)), facts)
    if line.says:
        return _stated(line, statements, facts, of, at)
    found: list[Claim] = []
    roots: list[Statement] = []
    for statement in statements:
        if is_order(statement):
            found.append(_order(line, statement))
            continue
        left = _left(statement, facts)
        if (left is not None and left.says == "eigenvalues") or (
            roots and left is None and len(statement.members) == 1 and not found
        ):
            roots.append(statement)
        else:
            found.append(_claim(line, statement, left, facts, of, at))
    if roots:
        found.insert(0, _eigenvalues(line, tuple(roots), facts))
    return tuple(found)


def _stated(
    line: SourceLine,
    statements: tuple[Statement, ...],
    facts: Facts,
    of: Written | None,
    at: Written | None,
) -> tuple[Claim, ...]:
    says = line.says
    if says == "eigenvalues":
        claim = _eigenvalues(line, statements, facts)
        return (replace(claim, stated=True),)
    claims = []
    for statement in statements:
        if is_order(statement):
            claims.append(_order(line, statement))
            continue
        left = _left(statement, facts)
        subject = line.of if says not in ("eigenvector", "generalized eigenvector") else ""
        if says == "value" and (left is None or left.says in QUANTITIES):
            told = left.says if left is not None else _quantity_of(line.of)
            if told and len(statement.members) > 1:
                left = left or Left(told)
                claims.append(replace(_claim(line, statement, left, facts, of, at), stated=True))
                continue
        named = left if left is not None and left.says == says else None
        if named is None and left is not None and says in ("value", "initial value"):
            named = left if left.says in ("value", "solution", "steady state") else None
        known = _known_subject(subject, facts)
        if named is not None and not known:
            known = named.subject
        if not known and left is not None and left.says in ("solution", "output", "value"):
            known = left.subject
        known = known or _called(statement, subject)
        instant = at if at is not None else (left.at if left is not None else None)
        sign = left.sign if left is not None else 1
        claim = _claim(line, statement, Left(says, known, instant, sign), facts, of, instant)
        claims.append(replace(claim, stated=True))
    return tuple(claims)


def _quantity_of(text: str) -> str:
    """Return the quantity that an author says a value is, of any customary name; or nothing."""
    found = [kind for kind in sorted(QUANTITIES) if kind in text.lower()]
    return found[0] if len(found) == 1 else ""


def _called(statement: Statement, subject: str) -> str:
    """Return the name of something that the model does not have, for it to be told so."""
    first = statement.members[0]
    return first.name if isinstance(first, Jet) and len(statement.members) > 1 else subject


def _order(line: SourceLine, statement: Statement) -> Claim:
    """Return the claim of a chain with inequalities in it."""
    group = Group((), statement.members, statement.unit, statement.note)
    return Claim(line, (statement,), "identity", groups=(group,))


def _known_subject(subject: str, facts: Facts) -> str:
    """Return a subject as the author states it, if it is the name of something of the model."""
    name = subject.strip()
    base = name.rstrip("'")
    if name in facts.states or base in facts.varying or facts.has_vector(base):
        return name
    return "vector" if name.lower() in ("vector", "state", "states", "all") else ""


def _left(statement: Statement, facts: Facts) -> Left | None:
    """Return what the left side of a statement names."""
    first, rest = statement.members[0], statement.members[1:]
    left = left_of(first, facts) if rest else None
    if left is not None and left.says in MATRICES and not any(map(_is_matrix, rest)):
        left = None
    if left is not None and left.subject in MASSES and _is_of_coordinates(rest, facts):
        left = None
    if left is not None and left.says == "eigenvalues" and _in_time(rest, facts):
        left = None
    if left is not None and left.says == "solution" and _is_equation(first, rest, facts):
        left = None
    if left is not None and left.says == "solution" and _is_constant_column(first, rest, facts):
        return Left("eigenvector", left.subject)
    if left is None and _is_vector_name(first, rest):
        return Left("eigenvector", first.name if isinstance(first, Symbol) else "")
    return left


def _claim(
    line: SourceLine,
    statement: Statement,
    left: Left | None,
    facts: Facts,
    of: Written | None,
    at: Written | None,
) -> Claim:
    members = statement.members
    ends_in_zero = len(members) > 1 and members[-1] == ZERO
    approximate = "≈" in statement.relations
    if left is None:
        says, names = _by_shape(statement, facts)
        equated = says == "characteristic polynomial" and ends_in_zero
        values = members[len(names) : -1] if equated else members[len(names) :]
        return Claim(
            line,
            (statement,),
            says,
            groups=(Group(names, values, statement.unit, statement.note),),
            of=of,
            at=at,
            approximate=approximate,
            equation=ends_in_zero,
        )
    names = () if left.says == "equation" else _names(members, left, facts)
    values = members[len(names) :]
    if left.says in OF_STATES and any(_is_column(value, facts) for value in values):
        left = replace(left, subject="vector")
    polynomial = left.says == "characteristic polynomial"
    if polynomial and ends_in_zero:
        values = values[:-1]
    return Claim(
        line,
        (statement,),
        left.says,
        left.subject,
        (Group(names, values, statement.unit, statement.note),),
        of,
        left.at if left.at is not None else at,
        approximate=approximate,
        equation=polynomial and ends_in_zero,
        sign=left.sign,
    )


def _names(members: tuple[Written, ...], left: Left, facts: Facts) -> tuple[Written, ...]:
    """Return the leading members that are names of the same thing, never all of them."""
    count = 0
    for member in members[:-1]:
        own = left_of(member, facts)
        same = own is not None and own.says == left.says
        if not same and not (count == 0 and _is_name(member)):
            break
        count += 1
    return members[:count]


def _is_name(node: Written) -> bool:
    return isinstance(node, Symbol | Jet)


def _by_shape(statement: Statement, facts: Facts) -> tuple[str, tuple[Written, ...]]:
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


def _is_column(value: Written, facts: Facts) -> bool:
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


def _in_time(members: Sequence[Written], facts: Facts) -> bool:
    """Whether the time stands in formulas, as in those of Putzer's method, of no eigenvalue."""
    return any(Symbol(facts.time) in walk(member) for member in members)


def _is_equation(first: Written, rest: Sequence[Written], facts: Facts) -> bool:
    """Whether what begins with a function of the model's goes on with such functions.

    A column of states stands bare in x' = A x.
    """
    if _has_jets(rest[-1:], facts):
        return True
    names = {n.name for member in rest for n in walk(member) if isinstance(n, Symbol)}
    derived = isinstance(first, Jet) and first.order > 0
    return derived and any(facts.has_vector(name) for name in names)


def _is_of_coordinates(rest: Sequence[Written], facts: Facts) -> bool:
    """Whether a matrix is that of the masses or springs, of half as many rows as A has."""
    shapes = {(len(m.rows), len(m.rows[0])) for m in rest if isinstance(m, Array)}
    half, odd = divmod(len(facts.states), 2)
    return not odd and shapes == {(half, half)}


def _is_matrix(node: Written) -> bool:
    """Whether something in a formula is a matrix; a name that goes by A may be a number."""
    return any(
        isinstance(part, Array | Identity)
        or (isinstance(part, Apply) and part.function in ("diag", "inverse", "transpose"))
        or (isinstance(part, Symbol) and part.name in ("A", "P", "J", "T", "V"))
        for part in walk(node)
    )


def _is_vector_name(first: Written, rest: Sequence[Written]) -> bool:
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


def _is_constant_column(first: Written, rest: Sequence[Written], facts: Facts) -> bool:
    """Whether a letter of a state, as v_1, has a column of constants: a vector is meant."""
    if not isinstance(first, Jet) or first.order or first.at is not None:
        return False
    base, index = base_and_indices(first.name)
    inside = [node for member in rest for node in walk(member)]
    return (
        base in VECTORS
        and index.isdigit()
        and any(_is_column(member, facts) for member in rest)
        and not any(isinstance(node, Jet) or node == Symbol(facts.time) for node in inside)
    )


def _eigenvalues(line: SourceLine, statements: tuple[Statement, ...], facts: Facts) -> Claim:
    """Return the claim of a line that lists eigenvalues, a group for each statement."""
    groups, known = [], dict[Symbol, Written]()
    for statement in statements:
        count = 0
        for member in statement.members[:-1]:
            if not _names_root(member, facts):
                break
            count += 1
        names = statement.members[:count]
        values = tuple(with_names(known, member) for member in statement.members[count:])
        known |= {name: values[0] for name in names if isinstance(name, Symbol)}
        groups.append(Group(names, values, statement.unit, statement.note))
    approximate = any("≈" in statement.relations for statement in statements)
    return Claim(line, statements, "eigenvalues", groups=tuple(groups), approximate=approximate)


def _names_root(node: Written, facts: Facts) -> bool:
    left = left_of(node, facts)
    if left is not None and left.says == "eigenvalues":
        return True
    return isinstance(node, Symbol) and node.name not in facts.parameters
