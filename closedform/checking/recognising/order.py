"""Chains with inequalities in them: what is equated there, and what is compared."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.compare import compare
from closedform.checking.standing.facts import Facts
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.exact import exact
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Scope
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import Jet, Range, Statement, Symbol, Written, walk

__all__ = ["ORDERS", "holds_in", "is_order", "judge_order", "parted"]

ORDERS = frozenset({"≠", "<", "≤", ">", "≥"})


def is_order(statement: Statement) -> bool:
    """Whether an inequality stands in a statement."""
    return any(relation in ORDERS for relation in statement.relations)


def parted(statements: Sequence[Statement], facts: Facts) -> tuple[Statement, ...]:
    """Return statements of which each equates, or compares; conditions on the rest are with it.

    Of ``zeta = 0.05 < 1`` become ``zeta = 0.05`` and the whole chain.  Where a comparison of
    parameters, or of the time with numbers, stands beside other statements, these are said
    under that condition: ``a != b: x = ...``.
    """
    conditions = [
        s
        for place, s in enumerate(statements)
        if _is_condition(s, facts) and (place == 0 or s.relations != ("=",))
    ]
    rest = [s for s in statements if s not in conditions]
    if not rest:
        conditions, rest = [], list(statements)
    ranges = tuple(Range(s.members, s.relations) for s in conditions)
    found: list[Statement] = []
    for statement in rest:
        own = replace(statement, conditions=(*statement.conditions, *ranges))
        if is_order(own):
            end = next(k for k, r in enumerate(own.relations) if r in ORDERS) + 1
            if end > 1:
                head = replace(own, members=own.members[:end], relations=own.relations[: end - 1])
                found.append(replace(head, unit=""))
        found.append(own)
    return tuple(found)


def _is_condition(statement: Statement, facts: Facts) -> bool:
    """Whether a statement only says for which parameters or times others are meant."""
    names = {
        node.name
        for member in statement.members
        for node in walk(member)
        if isinstance(node, Symbol | Jet)
    }
    if not names or not names <= facts.parameters | {facts.time}:
        return False
    if all(relation in ORDERS for relation in statement.relations):
        return bool(statement.relations)
    sides = [any(isinstance(n, Symbol) for n in walk(member)) for member in statement.members]
    return statement.relations == ("=",) and all(sides) and facts.time not in names


def judge_order(claim: Claim, setting: Setting) -> Finding:
    """Judge a chain with inequalities: each neighbour against the next, for all parameters.

    Raises:  NotJudgedError if the parameters do not decide it, and for functions of time.
    """
    statement = claim.statements[0]
    opened = [setting.opened(member) for member in statement.members]
    ground = setting.ground_for()
    scope = setting.scope_of(ground)
    for left, relation, right in zip(opened, statement.relations, opened[1:], strict=False):
        if relation not in ORDERS:
            value = exact(left, scope)
            found = compare(right, value, scope, ground, approximate=relation == "≈")
            if not found.passes:
                return Finding("fails", found.reason or "the members are not equal")
            continue
        holds = _decided(_difference(left, right, scope), relation, ground)
        if holds is None:
            raise NotJudgedError("the parameters do not decide this inequality")
        if not holds:
            return Finding("fails", f"it is not so that {_told(left, relation, right)}")
    return Finding("holds")


def holds_in(range_: Range, setting: Setting) -> bool | None:
    """Whether a comparison of parameters holds in the case at hand, None if that is open."""
    opened = [setting.opened(member) for member in range_.members]
    ground, held = setting.ground, True
    for left, relation, right in zip(opened, range_.signs, opened[1:], strict=False):
        difference = _difference(left, right, setting.scope_of(ground))
        one = _decided(difference, relation, ground)
        if one is None:
            return None
        held = held and one
    return held


def _told(left: Written, relation: str, right: Written) -> str:
    return f"{plain_written(left)} {relation} {plain_written(right)}"


def _difference(left: Written, right: Written, scope: Scope) -> Element:
    sides = exact(left, scope), exact(right, scope)
    if isinstance(sides[0], ExactMatrix) or isinstance(sides[1], ExactMatrix):
        raise NotJudgedError("matrices are compared")
    difference = sides[0] - sides[1]
    if not difference.is_constant:
        raise NotJudgedError("functions of time are compared")
    return difference


def _decided(difference: Element, relation: str, ground: Ground) -> bool | None:
    """Return whether a difference stands so to 0, None where the parameters leave it open.

    Without a sign on the whole case, that it differs from 0 is told from the samples, as is
    every comparison where values of the model file are all that there is.
    """
    if difference.is_zero:
        return relation in ("≤", "≥", "=")
    sign = difference.sign()
    if sign is not None:
        return _so(sign, relation)
    found = {_so(sign, relation) for sign in _signs(difference, ground)}
    if len(found) != 1 or (True in found and relation != "≠"):
        return None
    return found.pop()


def _so(sign: int, relation: str) -> bool:
    """Whether something of this sign stands so to 0."""
    return {"=": sign == 0, "≠": sign != 0, "<": sign < 0, "≤": sign <= 0}.get(
        relation, sign > 0 if relation == ">" else sign >= 0
    )


def _signs(difference: Element, ground: Ground) -> Iterator[int]:
    """Yield the signs at the samples of the case, where they are known."""
    for sample in ground.truth.samples:
        values = {n: exact(tree, Scope(ground.field, "t")) for n, tree in sample.items()}
        numbers = {n: v for n, v in values.items() if isinstance(v, Element)}
        sign = difference.substituted(numbers).sign()
        if sign is not None:
            yield sign
