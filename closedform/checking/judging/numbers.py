"""Judging single numbers: values at an instant, frequencies and other quantities, identities."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from fractions import Fraction
from functools import partial

from flint import acb

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError, UnknownNameError
from closedform.checking.judging.compare import compare, has_decimals
from closedform.checking.judging.constants import constant_values, is_constant_of_integration
from closedform.checking.judging.held import held_against
from closedform.checking.judging.open_constants import CONSTANTS
from closedform.checking.judging.true_solutions import solution_value, stretches_meant
from closedform.checking.recognising.definitions import quantities_meant, require_definition
from closedform.checking.recognising.left_sides import base_and_indices
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.exact import exact
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Jet, Literal, Negation, Symbol, Written, walk

__all__ = ["QUANTITIES", "judge_definition", "judge_identity", "judge_quantity", "judge_value"]


def judge_value(claim: Claim, setting: Setting) -> Finding:
    """Judge the value of a state, a derivative or an output at an instant."""
    at_start = setting.ground.truth.start if claim.says == "initial value" else None
    instant = claim.at if claim.at is not None else at_start
    if instant is None or not claim.subject:
        return judge_identity(claim, setting)

    def true(ground: Ground, after: tuple[int, ...] = (0, 1)) -> Value:
        at = setting.value(instant, ground)
        if isinstance(at, ExactMatrix) or not at.is_constant:
            raise NotJudgedError("the instant of a value is a number")
        for stretch in reversed(ground.stretches):
            if len(ground.stretches) == 1 or (at - stretch.start).sign() in after:
                value = solution_value(claim.subject, ground.within(stretch), stretch)
                return (
                    value.at(at) if isinstance(value, Element) else value.mapped(lambda e: e.at(at))
                )
        raise NotJudgedError("it is not decided where the instant lies on the time axis")

    found = held_against(claim, setting, true, lambda ground: written_back(true(ground)))
    starts = (stretch.start for stretch in setting.ground.stretches[1:])
    if found.word == "fails" and any(setting.value(instant) == start for start in starts):
        before = held_against(claim, setting, partial(true, after=(1,)))
        if before.passes:
            raise NotJudgedError("it is the value just before a jump, and another follows at once")
    return found


def judge_quantity(claim: Claim, setting: Setting) -> Finding:
    """Judge a quantity that belongs to the eigenvalues: any mode of the model may be meant.

    If none is, the one is told that is nearest.
    """
    failed: list[Finding] = []
    for at in range(len(list(_quantities(claim, setting.ground)))):

        def true(ground: Ground, at: int = at) -> Value:
            return list(_quantities(claim, ground))[at]

        finding = held_against(claim, setting, true, lambda g: written_back(true(g)))
        if finding.passes:
            return finding
        failed.append(finding)
    if not failed:
        if claim.stated:
            raise NotJudgedError(f"the model has no {claim.says}")
        return judge_definition(claim, setting)
    return failed[_nearest(failed, setting.ground)]


def _nearest(failed: list[Finding], ground: Ground) -> int:
    """Return which finding is about the value nearest to what stands there; 0 if none is."""
    best, least = 0, None
    for k, finding in enumerate(failed):
        if len(finding.pairs) != 1:
            return 0
        claimed, true = finding.pairs[0]
        try:
            value = exact(claimed, ground.scope)
        except (NotJudgedError, NotElementaryError):
            return 0
        if not isinstance(value, Element) or not isinstance(true, Element):
            return 0
        names = ground.sampled()
        off = abs(value.enclosure(acb(0), names) - true.enclosure(acb(0), names))
        if least is None or off < least:
            best, least = k, off
    return best


def _quantities(claim: Claim, ground: Ground) -> Iterator[Element]:
    """Yield the values that a quantity of this name has, one for each mode of the model."""
    field = ground.field
    in_hertz = any(group.unit.strip() in ("Hz", "1/s") for group in claim.groups)
    turn = (field.number(Fraction(2)) * field.pi) if in_hertz else field.one
    for half, square in _pairs(ground):
        yield from _of_pair(claim.says, half, square, turn, damped=_names_damped(claim))
    if claim.says in ("time constant", "half-life"):
        for value in ground.eigenvalues:
            if not value.is_zero and field.im(value).is_zero:
                rate = -(field.one / value)
                yield (
                    rate
                    if claim.says == "time constant"
                    else rate * field.ln(field.number(Fraction(2)))
                )


def _names_damped(claim: Claim) -> bool:
    """Whether a name says that the damped motion is meant: T_d."""
    names = (name.name for name in claim.names if isinstance(name, Symbol))
    return any(base_and_indices(name)[1].startswith("d") for name in names)


def _of_pair(
    says: str, half: Element, square: Element, turn: Element, *, damped: bool
) -> Iterator[Element]:
    """Yield a quantity of s^2 + 2 half s + square, for roots that are a pair or real."""
    field = half.field
    natural = field.sqrt(square)
    match says:
        case "natural frequency":
            yield natural / turn
        case "damping ratio":
            yield half / natural
        case "damped frequency":
            yield field.sqrt(square - half * half) / turn
        case "period":
            two_pi = field.number(Fraction(2)) * field.pi
            yield two_pi / field.sqrt(square - half * half)
            if not half.is_zero and not damped:
                yield two_pi / natural
        case "time constant":
            if not half.is_zero:
                yield field.one / half


def _pairs(ground: Ground) -> Iterator[tuple[Element, Element]]:
    """Yield a and b of the factors s^2 + 2 a s + b that belong to one mode."""
    two = ground.field.number(Fraction(2))
    if ground.size == 2:
        yield -(ground.matrix.trace() / two), ground.matrix.determinant()
        return
    field, seen = ground.field, []
    for value in ground.eigenvalues:
        try:
            real, imaginary = field.re(value), field.im(value)
        except NotElementaryError:
            continue
        square = real * real + imaginary * imaginary
        if not imaginary.is_zero and (real, square) not in seen:
            seen.append((real, square))
            yield -real, square


QUANTITIES = frozenset(
    {
        "natural frequency",
        "damped frequency",
        "damping ratio",
        "time constant",
        "half-life",
        "period",
    }
)


def judge_identity(claim: Claim, setting: Setting) -> Finding:
    """Judge a chain by itself: all its members have to be equal, on every interval of time.

    The names in it stand for what the model and earlier lines say.
    """
    ground = setting.ground
    moving = any(
        isinstance(node, Jet) or node == Symbol(ground.facts.time)
        for value in claim.values
        for node in walk(setting.opened(value))
    )
    if len(ground.stretches) == 1 or not moving:
        return _identity(claim, setting)
    findings = [
        _identity(claim, replace(setting, ground=ground.within(stretch)))
        for stretch in stretches_meant(claim, setting)
    ]
    return next((found for found in findings if not found.passes), findings[0])


def _identity(claim: Claim, setting: Setting) -> Finding:
    names = list(claim.names)
    known = [name for name in names if _is_known(name, claim, setting)]
    members = (*known, *claim.values)
    if len(members) < 2:
        if (claim.stated and claim.says != "definition") or not claim.names:
            raise NotJudgedError("it does not tell what it is a value of")
        return Finding("holds", "a definition; nothing is claimed")
    members = _exact_first(members, setting)
    first = setting.opened(members[0])
    worst: Finding | None = None
    for member in members[1:]:
        opened = setting.opened(member)
        ground = setting.ground_for(opened)
        scope = setting.scope_of(ground)
        value = _first_value(first, setting, ground)
        about = claim.is_approximate(member)
        found = compare(opened, value, scope, ground, approximate=about)
        if not found.passes:
            return Finding(
                "fails",
                found.reason or "the members are not equal",
                written_back(value),
                entries=found.wrong,
                pairs=((opened, value),),
            )
        if found.how == "digits":
            worst = Finding("holds to the digits shown", found.reason)
    return worst or Finding("holds")


def _exact_first(members: tuple[Written, ...], setting: Setting) -> tuple[Written, ...]:
    """Return members with one that is exact in front, where the first is a rounded number."""
    opened = setting.opened(members[0])
    number = opened.operand if isinstance(opened, Negation) else opened
    if not isinstance(number, Literal) or not number.is_decimal:
        return members
    for k, member in enumerate(members):
        if not has_decimals(setting.opened(member)):
            return (member, *members[:k], *members[k + 1 :])
    return members


def _first_value(tree: Written, setting: Setting, ground: Ground) -> Value:
    return setting.value(tree, ground)


def _is_known(name: Written, claim: Claim, setting: Setting) -> bool:
    """Whether a name on the left has a value already; A may be a number, not the matrix."""
    if isinstance(name, Symbol) and name.name.rstrip("0123456789_") in CONSTANTS:
        return False
    try:
        value = setting.value(name)
        first = setting.value(claim.values[0])
    except (UnknownNameError, NotJudgedError, NotElementaryError):
        return False
    return isinstance(value, ExactMatrix) == isinstance(first, ExactMatrix)


def judge_definition(claim: Claim, setting: Setting) -> Finding:
    """Judge a line that gives a name to something: its members have to agree with one another.

    A constant of integration has to be what the author's general solution asks for.
    """
    names = [name.name for name in claim.names if isinstance(name, Symbol)]
    for name in names:
        if is_constant_of_integration(name, setting) and not _is_new(name, claim, setting):
            return _constant(name, claim, setting)
    found = judge_identity(claim, setting)
    if claim.stated or not found.passes:
        return found
    require_definition(claim, setting)
    meant = quantities_meant(claim, setting)
    known = [own for own in meant if any(True for _ in _quantities(own, setting.ground))]
    if known and not any(judge_quantity(own, setting).passes for own in known):
        kinds = " or ".join(own.says for own in known)
        raise NotJudgedError(
            f"the model has no such {kinds}; if it is meant to be one, let says tell which, and "
            "else let it say definition"
        )
    return found


def _is_new(name: str, claim: Claim, setting: Setting) -> bool:
    """Whether the line itself has a solution in which a name stands, with a meaning of its own."""
    return any(
        Symbol(name) in walk(value)
        for other in setting.later
        if other.line.number == claim.line.number and other.says in ("solution", "output")
        for value in other.values
    )


def _constant(name: str, claim: Claim, setting: Setting) -> Finding:
    """Judge the value of a constant of integration; any general solution may be meant."""
    failed: Finding | None = None
    count = len(constant_values(name, setting, setting.ground))
    for at in range(count):

        def true(ground: Ground, at: int = at) -> Value:
            return constant_values(name, setting, ground)[at]

        finding = held_against(claim, setting, true, lambda g: written_back(true(g)))
        if finding.passes:
            return finding
        failed = failed or finding
    return failed or judge_identity(claim, setting)
