"""Looking for the one change that mends a line."""

from __future__ import annotations

from collections.abc import Callable, Iterator

from closedform.algebra.elementary import NotElementaryError
from closedform.checking.balls import NoValueError
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.setting import Finding, Setting
from closedform.checking.slips import names
from closedform.checking.slips.aims import aimed
from closedform.checking.slips.edits import (
    angles,
    chains,
    extra_terms,
    functions,
    sine_signs,
    term_signs,
)
from closedform.checking.slips.numbers import one_number
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.verdict import Slip

__all__ = ["diagnosed"]

Source = Callable[[Trial], Iterator[Candidate]]
SOURCES: tuple[Source, ...] = (
    term_signs,
    sine_signs,
    chains,
    functions,
    angles,
    one_number,
    extra_terms,
)
"""Where candidates come from, the most specific first."""
OUTSIDE = (NotJudgedError, NotElementaryError, NoValueError, ArithmeticError)


def diagnosed(claim: Claim, finding: Finding, setting: Setting) -> tuple[Slip | None, str]:
    """Return the slip behind a failing claim, if one is found, and the reason to be told.

    One change in one member has to make the line hold: it is judged again as it would then be.
    """
    return _slip(claim, finding, setting), finding.reason


def _slip(claim: Claim, finding: Finding, setting: Setting) -> Slip | None:
    for trial in aimed(claim, finding, setting):
        for source in SOURCES:
            found = _first(trial, source)
            if found is not None:
                return found
    return None


def _first(trial: Trial, source: Source) -> Slip | None:
    try:
        for candidate in source(trial):
            if trial.mends(candidate.tree):
                return Slip(candidate.name, candidate.where, trial.back(candidate.tree))
    except OUTSIDE:
        return None
    return None
