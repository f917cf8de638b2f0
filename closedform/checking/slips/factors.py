"""Slips that are a factor of all of it, or a term of the sum that is left out."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from fractions import Fraction

from flint import acb, arb, ctx

from closedform.algebra.elementary import Element
from closedform.checking.slips import names
from closedform.checking.slips.making import ONE, negated, over, terms_of, times
from closedform.checking.slips.measuring import real, size
from closedform.checking.slips.narrowing import part_at
from closedform.checking.slips.numbers import one_number
from closedform.checking.slips.solving import simplest
from closedform.checking.slips.spots import put
from closedform.checking.slips.trial import BITS, Candidate, Trial
from closedform.checking.slips.wording import part_text
from closedform.checking.standing.ground import SPECTRAL
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.written_back import written_back
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import Literal, Sum, Written

__all__ = ["constants", "factors", "left_out", "normalised"]


def normalised(trial: Trial) -> Iterator[Candidate]:
    """Yield a column of probabilities divided by its sum, where the line has a multiple of it."""
    true, own = trial.true, trial.own()
    if trial.claim.says not in ("steady state", "eigenvector", "value"):
        return
    if not isinstance(true, ExactMatrix) or not isinstance(own, ExactMatrix):
        return
    field = trial.ground.field
    if own.shape != true.shape or sum(true.entries, field.zero) != field.one:
        return
    total = sum(own.entries, field.zero)
    if total.is_zero or not (own - true.scaled(total)).is_zero:
        return
    for candidate in one_number(trial):
        yield replace(candidate, name=names.NOT_NORMALISED)
    by_sum = times(written_back(field.one / total), trial.tree)
    yield Candidate(
        names.NOT_NORMALISED, f"the sum is {plain_written(written_back(total))}", by_sum
    )


def factors(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula times a plain number, where that is all that is missing."""
    if not trial.points or len(trial.points) * len(trial.points[0].true) < 2 or trial.loose:
        return
    values = trial.values(trial.tree)
    if values is None:
        return
    with ctx.workprec(BITS):
        ratio: acb | None = None
        for own, point in zip(values, trial.points, strict=True):
            for one, two in zip(own, point.true, strict=True):
                if size(one) < arb(1) / 10**20:
                    continue
                ratio = ratio if ratio is not None else two / one
                if size(two - ratio * one) > size(two) * real(Fraction(1, 10**12)):
                    return
        written = None if ratio is None else simplest(ratio.mid())
    if written is not None:
        where = f"the factor {plain_written(written)} is missing"
        yield Candidate(names.FACTOR, where, times(written, trial.tree))


def left_out(trial: Trial) -> Iterator[Candidate]:
    """Yield the formula with one of the terms of the true one added."""
    true = trial.true
    polynomial = trial.claim.says == "characteristic polynomial"
    if not isinstance(true, Element):
        return
    if true.is_constant and not polynomial:
        return
    strange = set(trial.names) - set(trial.setting.ground.sampled())
    variable = next(iter(sorted(strange - {SPECTRAL, trial.ground.truth.time})), "lambda")
    terms = terms_of(written_back(true, {SPECTRAL: variable}))
    for term in terms if len(terms) > 1 else ():
        where = part_text(term)
        where += f" of entry {trial.entry}" if trial.entry else ""
        yield Candidate(names.TERM_LEFT_OUT, where, _with_term(trial, term))


def _with_term(trial: Trial, term: Written) -> Written:
    """Return the member, or its wrong entry, with a term more, whatever factor is in front."""
    front = put(trial.tree, trial.start, ONE)
    own = part_at(trial.tree, trial.start)
    return put(trial.tree, trial.start, _added(own, term if front == ONE else over(term, front)))


def constants(trial: Trial) -> Iterator[Candidate]:
    """Yield a function of time with a constant added, where the true one has none."""
    true = trial.true
    if trial.claim.says not in ("solution", "output") or not isinstance(true, Element):
        return
    own = trial.own()
    if isinstance(own, Element) and not _has_constant(true):
        rest = true - own
        if rest.is_constant and not rest.is_zero:
            missing = written_back(rest)
            where = f"the constant {plain_written(written_back(-rest))}"
            yield Candidate(names.CONSTANT, where, _without(trial.tree, missing))


def _has_constant(value: Element) -> bool:
    if value.below is not None:
        return False
    return any(rate.is_zero and not power for rate, _, power, _ in value.terms())


def _without(tree: Written, missing: Written) -> Written:
    """Return a sum with a term added, or without the opposite of it."""
    terms = terms_of(tree)
    rest = tuple(term for term in terms if term != negated(missing))
    if len(rest) == len(terms):
        return _added(tree, missing)
    if not rest:
        return Literal(Fraction(0))
    return rest[0] if len(rest) == 1 else Sum(rest)


def _added(tree: Written, term: Written) -> Written:
    return Sum((*terms_of(tree), term))
