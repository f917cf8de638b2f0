"""Which member of a failing line is wrong, and what it is held against."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from fractions import Fraction

from flint import acb, arb, ctx

from closedform.checking.claim import Claim
from closedform.checking.errors import UNDECIDED
from closedform.checking.judging.judge import judge
from closedform.checking.judging.true_solutions import solution_value
from closedform.checking.slips.measuring import real, size
from closedform.checking.slips.trial import BITS, SPECTRAL_SAMPLE, Point, Trial
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.standing.stretch import Stretch
from closedform.checking.values.exact import applies
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Value
from closedform.notation.written.tree import Jet, Symbol, Written, walk

__all__ = ["aimed", "opened_stretches", "true_value"]

CHAINS = frozenset({"identity", "definition", "trace", "determinant", "amplitude", "phase"})
"""Kinds whose members are held against one another, not against a value of the model."""
PROPERTIES = frozenset(
    {
        *("eigenvector", "generalized eigenvector", "P", "J", "real form", "equation"),
        "homogeneous solution",
    }
)
"""Kinds that are judged by a property, which balls do not tell beforehand."""


def aimed(claim: Claim, finding: Finding, setting: Setting) -> Iterator[Trial]:
    """Yield a trial for each member that may be the wrong one: the last one first."""
    for group, member in _wrong_members(claim, setting):
        values = claim.groups[group].values
        tree = values[member]
        ground = setting.ground_for(setting.opened(tree))
        kept, leads = _kept(claim, setting, group, member)
        trial = Trial(claim, setting, ground, group, tree, kept, leads, right=finding.right)
        if claim.says == "eigenvalues":
            yield replace(trial, roots=_roots(ground))
        elif claim.says in ("J", "real form"):
            yield replace(trial, invariant=_characteristic(ground))
        elif claim.says in PROPERTIES:
            yield trial
        else:
            yield _held(trial, finding)


def _wrong_members(claim: Claim, setting: Setting) -> list[tuple[int, int]]:
    """Return the places of members that do not hold alone, the last first."""
    if _is_chain(claim):
        count = len(claim.groups[0].values)
        if claim.names:
            return [(0, k) for k in reversed(range(count)) if not _holds(claim, setting, 0, (k,))]
        wrong = [k for k in range(1, count) if not _holds(claim, setting, 0, (0, k))]
        return [(0, k) for k in reversed(wrong)] + [(0, 0)]
    return [
        (g, k)
        for g in reversed(range(len(claim.groups)))
        for k in reversed(range(len(claim.groups[g].values)))
        if not _holds(claim, setting, g, (k,))
    ]


def _is_chain(claim: Claim) -> bool:
    at_instant = claim.at is not None and claim.subject
    if claim.says in ("value", "initial value"):
        return not at_instant
    return claim.says in CHAINS and len(claim.groups) == 1


def _holds(claim: Claim, setting: Setting, group: int, members: tuple[int, ...]) -> bool:
    own = claim.groups[group]
    one = replace(own, values=tuple(own.values[k] for k in members))
    return judge(replace(claim, groups=(one,)), setting).passes


def _kept(
    claim: Claim, setting: Setting, group: int, member: int
) -> tuple[tuple[Written, ...], bool]:
    """Return the members beside a wrong one that stay, and whether it stands before them."""
    values = claim.groups[group].values
    if _is_chain(claim):
        if member == 0 and not claim.names:
            return values[1:], True
        return (() if claim.names else values[:1]), False
    if claim.says in PROPERTIES:
        return (), False
    others = [k for k in range(len(values)) if k != member]
    right = tuple(values[k] for k in others if _holds(claim, setting, group, (k,)))
    return right, False


def _roots(ground: Ground) -> tuple[acb, ...]:
    with ctx.workprec(BITS):
        names = ground.sampled()
        return tuple(value.enclosure(acb(0), names) for value in ground.eigenvalues)


def _characteristic(ground: Ground) -> acb:
    """Return det(z I - A) at the sample z."""
    with ctx.workprec(BITS):
        names = ground.sampled() | {SPECTRAL: real(SPECTRAL_SAMPLE)}
        return ground.characteristic.enclosure(acb(0), names)


def _held(trial: Trial, finding: Finding) -> Trial:
    """Return a trial with the points at which its value is known; without, if it is not."""
    try:
        known = list(_known(trial, finding))
    except UNDECIDED:
        return trial
    if not known:
        return trial
    with ctx.workprec(BITS):
        points = tuple(_points(trial, known))
    if not points or any(not v.is_finite() for p in points for v in p.true):
        return trial
    true = known[0][1] if len(known) == 1 else None
    return replace(trial, points=points, true=true)


def _known(trial: Trial, finding: Finding) -> Iterator[tuple[Stretch | None, Value]]:
    claim, setting, ground = trial.claim, trial.setting, trial.ground
    if claim.says in ("solution", "output"):
        for stretch in opened_stretches(claim, setting):
            yield stretch, solution_value(claim.subject, ground.within(stretch), stretch)
        return
    value = true_value(trial, finding)
    if value is not None:
        yield None, value


def true_value(trial: Trial, finding: Finding) -> Value | None:
    """Return what the member ought to be, on the ground of the trial; None if not one value."""
    if trial.claim.says == "eigenvalues" or trial.claim.says in PROPERTIES:
        return None
    if _is_chain(trial.claim) and trial.leads:
        return trial.setting.value(trial.kept[0], trial.ground)
    if trial.claim.says == "particular solution":
        return None if finding.right is None else trial.setting.value(finding.right, trial.ground)
    alone = judge(trial.with_member(trial.tree), trial.setting)
    pairs = alone.pairs or finding.pairs
    return pairs[0][1] if pairs and pairs[0][1].field is trial.ground.field else None


def opened_stretches(claim: Claim, setting: Setting) -> list[Stretch]:
    """Return the intervals to which a line applies."""
    ground = setting.ground
    ranges = [r for statement in claim.statements for r in statement.conditions]
    timed = [r for r in ranges if Symbol(ground.facts.time) in r.members and "→" not in r.signs]
    scope = setting.scope_of(ground)
    return [
        stretch
        for stretch in ground.stretches
        if all(applies(r, replace(scope, instant=stretch.inside)) for r in timed)
    ]


def _points(trial: Trial, known: list[tuple[Stretch | None, Value]]) -> Iterator[Point]:
    ground = trial.ground
    base: dict[str, arb] = trial.setting.ground.sampled() | ground.sampled()
    base[SPECTRAL] = real(SPECTRAL_SAMPLE)
    names: dict[str, acb] = {name: acb(ball) for name, ball in base.items()}
    for name in _strange(trial, frozenset(names)):
        names[name] = names[SPECTRAL]
    for stretch, value in known:
        entries = value.entries if isinstance(value, ExactMatrix) else (value,)
        timed = not all(entry.is_constant for entry in entries)
        for instant in _instants(trial, stretch, base) if timed else (acb(0),):
            true = tuple(entry.enclosure(instant, base) for entry in entries)
            yield Point({**names, ground.truth.time: instant}, true)


def _strange(trial: Trial, known: frozenset[str]) -> list[str]:
    """Return the names for the variable of a polynomial or transform."""
    if trial.claim.says not in ("characteristic polynomial", "transform"):
        return []
    opened = trial.setting.opened(trial.tree)
    found = {n.name for n in walk(opened) if isinstance(n, Symbol | Jet)}
    return sorted(found - known - {trial.ground.truth.time})


def _instants(trial: Trial, stretch: Stretch | None, base: dict[str, arb]) -> list[acb]:
    """Return instants on an interval, of the order of the time constants of the model."""
    rates = [size(v.enclosure(acb(0), base)) for v in trial.ground.eigenvalues]
    rates = [rate for rate in rates if rate > arb(1) / 10**9]
    slowest = min(rates, default=arb(1), key=lambda rate: rate)
    fastest = max(rates, default=arb(1), key=lambda rate: rate)
    steps = [real(Fraction(5, 13)) / fastest, 1 / fastest, real(Fraction(17, 11)) / slowest]
    if stretch is None:
        return [acb(step) for step in steps]
    start = stretch.start.enclosure(acb(0), base)
    if stretch.end is None:
        return [start + step for step in steps]
    width = stretch.end.enclosure(acb(0), base) - start
    return [start + width * real(Fraction(k, 11)) for k in (2, 5, 9)]
