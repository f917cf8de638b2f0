"""What a line claims, from what its author says about it and from its left side."""

from __future__ import annotations

from dataclasses import replace

from closedform.checking.claim import Claim, Group, SourceLine
from closedform.checking.recognising.left_sides import QUANTITIES as NAMED_QUANTITIES
from closedform.checking.recognising.left_sides import Left, left_of
from closedform.checking.recognising.order import is_order, parted
from closedform.checking.recognising.shapes import (
    ZERO,
    by_shape,
    in_time,
    is_column,
    is_constant_column,
    is_equation,
    is_initial_column,
    is_matrix,
    is_of_coordinates,
    is_vector_name,
)
from closedform.checking.standing.facts import Facts
from closedform.checking.values.conjugates import with_conjugates, with_names
from closedform.notation.written.tree import Jet, Statement, Symbol, Written

__all__ = ["claims_of"]

MASSES = ("M", "D")
"""Letters of P and J by which the matrices of masses and dampers go, too."""
MATRICES = frozenset({"matrix", "P", "J"})
OF_STATES = frozenset({"solution", "value", "initial value", "particular solution"})
OF_STATES |= {"steady state", "homogeneous solution"}
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
    if left is not None and left.says in MATRICES and not any(map(is_matrix, rest)):
        left = None
    if left is not None and left.subject in MASSES and is_of_coordinates(rest, facts):
        left = None
    if left is not None and left.says == "eigenvalues" and in_time(rest, facts):
        left = None
    if left is not None and left.says == "solution" and is_equation(first, rest, facts):
        left = None
    if left is not None and left.says == "solution" and is_constant_column(first, rest, facts):
        return Left("eigenvector", left.subject)
    if is_initial_column(first, rest, facts):
        return Left("initial value", "vector")
    if left is None and is_vector_name(first, rest):
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
        says, names = by_shape(statement, facts)
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
    if left.says in OF_STATES and any(is_column(value, facts) for value in values):
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
