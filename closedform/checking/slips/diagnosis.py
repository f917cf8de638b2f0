"""Looking for the one change that mends a line."""

from __future__ import annotations

from collections.abc import Callable, Iterator

from closedform.algebra.elementary import NotElementaryError
from closedform.checking.balls import NoValueError
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.setting import Finding, Setting
from closedform.checking.slips.aims import aimed
from closedform.checking.slips.edits import (
    angles,
    chains,
    extra_terms,
    functions,
    sine_signs,
    term_signs,
)
from closedform.checking.slips.factors import factors, left_out, normalised
from closedform.checking.slips.matrix_slips import inverses, rearranged, swapped_products
from closedform.checking.slips.motion import derivatives, forced_signs, parts
from closedform.checking.slips.narrowing import narrowed
from closedform.checking.slips.numbers import one_number
from closedform.checking.slips.quantities import conversions, digits, rounded
from closedform.checking.slips.shifts import delays, other_names
from closedform.checking.slips.spectrum_slips import (
    canonical,
    eigenvectors,
    listed,
    root_numbers,
    transformations,
)
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.verdict import Slip

__all__ = ["diagnosed"]

Source = Callable[[Trial], Iterator[Candidate]]
OF_WHOLE: tuple[Source, ...] = (
    swapped_products,
    inverses,
    canonical,
    rounded,
    digits,
    normalised,
    forced_signs,
)
OF_PLACES: tuple[Source, ...] = (
    term_signs,
    sine_signs,
    chains,
    angles,
    functions,
    delays,
)
LATER: tuple[Source, ...] = (
    rearranged,
    parts,
    derivatives,
    conversions,
    eigenvectors,
    transformations,
)
LAST: tuple[Source, ...] = (other_names, root_numbers, one_number, left_out, extra_terms, factors)
"""Where candidates come from, the most specific first; of places once more in one entry only."""
OUTSIDE = (NotJudgedError, NotElementaryError, NoValueError, ArithmeticError)


def diagnosed(claim: Claim, finding: Finding, setting: Setting) -> tuple[Slip | None, str]:
    """Return the slip behind a failing claim, if one is found, and the reason to be told.

    One change in one member has to make the line hold: it is judged again as it would then be.
    """
    return _slip(claim, finding, setting), finding.reason


def _slip(claim: Claim, finding: Finding, setting: Setting) -> Slip | None:
    if claim.says == "eigenvalues":
        found = listed(claim, finding, setting)
        if found is not None:
            return found
    for trial in aimed(claim, finding, setting):
        inner = narrowed(trial)
        stages = ((trial, OF_WHOLE), (inner, OF_PLACES), (trial, LATER), (inner, LAST))
        for tried, sources in stages:
            for source in sources:
                found = _first(tried, source)
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
