"""Solutions and their values that follow from the author's earlier lines."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.elementary import Element
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.by_matrices import transitions
from closedform.checking.judging.derived import Derived, value_of_entry
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Setting
from closedform.checking.values.exponential import matrix_exponential
from closedform.checking.values.matrices import ExactMatrix, column, diagonal
from closedform.checking.values.scope import Value

__all__ = ["solutions", "steady_values", "values_at"]


def solutions(subject: str, setting: Setting, ground: Ground) -> Iterator[Derived[Value]]:
    """Yield what the author's earlier lines give for a solution."""
    for entry in setting.author.all("solution", subject):
        value = value_of_entry(entry, setting, ground)
        if value is not None:
            yield Derived(value, entry.root)
    yield from _from_derivatives(subject, setting, ground)
    stretch = ground.stretches[-1]
    initial = ground.initial
    whole = subject == "vector" or ground.facts.has_vector(subject)
    for particular in _from_particular(setting, ground):
        yield _entry(particular, subject, ground, whole=whole)
    if initial is None:
        return
    forced = ground.column(stretch) - ground.transition @ initial
    for transition in transitions(setting, ground):
        if transition.value.shape == (ground.size, ground.size):
            found = transition.joined(transition.value @ initial + forced)
            yield _entry(found, subject, ground, whole=whole)
    limits = [entry.limit() for entry in ground.column(stretch).entries]
    known = [entry for entry in limits if entry is not None]
    if len(known) != ground.size:
        return
    rest = column(ground.field, known)
    for transition in _of_time_constant(setting, ground):
        found = transition.joined(rest + transition.value @ (initial - rest))
        yield _entry(found, subject, ground, whole=whole)


def _of_time_constant(setting: Setting, ground: Ground) -> Iterator[Derived[ExactMatrix]]:
    """Yield e^(At) of a single state, as the author's time constant gives it."""
    for entry in setting.author.all("time constant") if ground.size == 1 else ():
        value = value_of_entry(entry, setting, ground)
        if isinstance(value, Element):
            rate = diagonal(ground.field, [-(ground.field.one / value)])
            yield Derived(matrix_exponential(rate), entry.root)


def _entry(
    found: Derived[ExactMatrix], subject: str, ground: Ground, *, whole: bool
) -> Derived[Value]:
    """Return all of a column of states, or the entry of a state or of a derivative of one."""
    if whole:
        return found
    states = ground.truth.states
    if subject in states:
        return found.joined(found.value.rows[states.index(subject)][0])
    base = subject.rstrip("'")
    if base not in states:
        raise NotJudgedError("it is no state")
    value = found.value.rows[states.index(base)][0]
    for _ in range(len(subject) - len(base)):
        value = value.derivative()
    return found.joined(value)


def _from_derivatives(subject: str, setting: Setting, ground: Ground) -> Iterator[Derived[Value]]:
    """Yield the derivative of the author's x for x', and the author's row of a column."""
    base = subject.rstrip("'")
    for order in range(len(subject) - len(base)):
        for entry in setting.author.all("solution", base + "'" * order):
            value = value_of_entry(entry, setting, ground)
            if isinstance(value, Element):
                for _ in range(len(subject) - len(base) - order):
                    value = value.derivative()
                yield Derived(value, entry.root)
    for entry in setting.author.all("solution"):
        if ground.facts.has_vector(entry.claim.subject) or entry.claim.subject == "vector":
            value = value_of_entry(entry, setting, ground)
            if isinstance(value, ExactMatrix) and value.shape == (ground.size, 1):
                yield _entry(Derived(value, entry.root), subject, ground, whole=False)


def _from_particular(setting: Setting, ground: Ground) -> Iterator[Derived[ExactMatrix]]:
    """Yield the column x_p + e^(At) (x0 - x_p(0)) for the author's particular solution."""
    initial = ground.initial
    if initial is None:
        return
    found: dict[str, Derived[Element]] = {}
    for entry in (*setting.author.all("particular solution"), *setting.author.all("steady state")):
        value = value_of_entry(entry, setting, ground)
        if isinstance(value, Element):
            found.setdefault(entry.claim.subject, Derived(value, entry.root))
        elif isinstance(value, ExactMatrix) and value.shape == (ground.size, 1):
            yield _with_free(Derived(value, entry.root), ground, initial)
    entries: list[Derived[Element]] = []
    for name, order in ground.truth.jets:
        own = found.get(name)
        if own is None:
            return
        value = own.value
        for _ in range(order):
            value = value.derivative()
        entries.append(own.joined(value))
    values = [d.value for d in entries]
    yield _with_free(entries[0].joined(column(ground.field, values), *entries), ground, initial)


def _with_free(
    particular: Derived[ExactMatrix], ground: Ground, initial: ExactMatrix
) -> Derived[ExactMatrix]:
    """Return a particular solution with the free one that gives it the initial values."""
    start = ground.stretches[0].start
    rest = initial - particular.value.mapped(lambda e: e.at(start))
    moved = ground.transition.mapped(lambda e: e.shifted(-start))
    return particular.joined(particular.value + moved @ rest)


def values_at(claim: Claim, setting: Setting, ground: Ground) -> Iterator[Derived[Value]]:
    """Yield the values of the author's solutions at the instant of a claim."""
    assert claim.at is not None  # noqa: S101  asked for before
    at = setting.value(claim.at, ground)
    if isinstance(at, ExactMatrix):
        return
    for function in solutions(claim.subject, setting, ground):
        if isinstance(function.value, Element):
            yield function.joined(function.value.at(at))


def steady_values(claim: Claim, setting: Setting, ground: Ground) -> Iterator[Derived[Value]]:
    """Yield what the author's solutions tend to, and the author's particular solutions."""
    for function in solutions(claim.subject, setting, ground):
        if isinstance(function.value, Element):
            limit = function.value.limit()
            if limit is not None:
                yield function.joined(limit)
    for entry in setting.author.all("particular solution", claim.subject):
        value = value_of_entry(entry, setting, ground)
        if value is not None:
            yield Derived(value, entry.root)
