"""Judging amplitudes: of what persists, or of a decaying or undamped free wave."""

from __future__ import annotations

from collections.abc import Iterator

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.judging.held import held_against
from closedform.checking.standing.ground import Ground
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.values.scope import Value
from closedform.checking.values.written_back import written_back

__all__ = ["judge_amplitude"]


def judge_amplitude(claim: Claim, setting: Setting) -> Finding:
    """Judge an amplitude: the length of a wave a cos(w t) + b sin(w t), at its beginning.

    Any wave of the steady state or of the solution may be meant; of one state or output if the
    author names it.
    """
    failed: Finding | None = None
    for at in range(len(list(_amplitudes(claim, setting.ground)))):

        def true(ground: Ground, at: int = at) -> Value:
            return list(_amplitudes(claim, ground))[at]

        finding = held_against(claim, setting, true, lambda ground: written_back(true(ground)))
        if finding.passes:
            return finding
        failed = failed or finding
    if failed is None:
        raise NotJudgedError("no wave is known whose amplitude it could be")
    return failed


def _amplitudes(claim: Claim, ground: Ground) -> Iterator[Element]:
    """Yield the amplitudes of the waves of the steady state, then of the solution."""
    truth = ground.truth
    names = [claim.subject] if claim.subject in truth.solution else list(truth.solution)
    found: list[Element] = []
    for name in names:
        tree = truth.steady.get(name)
        functions = [ground.number(tree)] if tree is not None else []
        functions += [f for f in [ground.function(name, ground.stretches[-1])] if f is not None]
        for function in functions:
            found += [a for a in _of_waves(function) if a not in found]
    yield from found


def _of_waves(function: Element) -> Iterator[Element]:
    field = function.field
    try:
        for rate, offset, power, coefficient in function.terms():
            if not power and field.im(rate).sign() == 1:
                yield 2 * field.abs(coefficient * field.exp(offset))
    except NotElementaryError:
        return
