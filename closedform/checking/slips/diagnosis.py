"""Looking for the one change that mends a line."""

from __future__ import annotations

from collections.abc import Callable, Iterator

from closedform.algebra.elementary import NotElementaryError
from closedform.checking.balls.enclosing import NoValueError
from closedform.checking.claim import Claim
from closedform.checking.errors import NotJudgedError
from closedform.checking.slips.aims import aimed
from closedform.checking.slips.differentiating import derivatives, forced_signs
from closedform.checking.slips.edits import (
    angles,
    chains,
    extra_terms,
    functions,
    sine_signs,
    term_signs,
)
from closedform.checking.slips.factors import constants, factors, left_out, normalised
from closedform.checking.slips.frequencies import other_frequencies
from closedform.checking.slips.lost_factors import (
    extra_names,
    inverted,
    missing_names,
    missing_times,
    missing_waves,
    other_arguments,
)
from closedform.checking.slips.matrix_slips import (
    inverses,
    rearranged,
    rearranged_first,
    swapped_products,
)
from closedform.checking.slips.motion import parts
from closedform.checking.slips.narrowing import narrowed
from closedform.checking.slips.numbers import one_number, same_number
from closedform.checking.slips.quantities import conversions, digits, rounded
from closedform.checking.slips.residual import residual_text
from closedform.checking.slips.root_lists import listed, root_numbers
from closedform.checking.slips.shifts import delays, other_names
from closedform.checking.slips.spectrum_slips import (
    canonical,
    conjugates,
    eigenvectors,
    transformations,
)
from closedform.checking.slips.trial import Candidate, Trial
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.verdict import Slip
from closedform.notation.written.tree import Array

__all__ = ["diagnosed"]

Source = Callable[[Trial], Iterator[Candidate]]
OF_WHOLE: tuple[Source, ...] = (
    swapped_products,
    inverses,
    canonical,
    conjugates,
    conversions,
    rounded,
    digits,
    normalised,
    forced_signs,
    rearranged_first,
)
OF_PLACES: tuple[Source, ...] = (
    term_signs,
    sine_signs,
    other_frequencies,
    chains,
    missing_times,
    angles,
    functions,
    delays,
)
LATER: tuple[Source, ...] = (
    rearranged,
    parts,
    derivatives,
    constants,
    missing_waves,
    eigenvectors,
    transformations,
)
LAST: tuple[Source, ...] = (
    inverted,
    other_names,
    root_numbers,
    one_number,
    other_arguments,
    extra_names,
    missing_names,
    left_out,
    extra_terms,
    factors,
    same_number,
)
"""Where candidates come from, the most specific first; of places once more in one entry only."""
OUTSIDE = (NotJudgedError, NotElementaryError, NoValueError, ArithmeticError)


def diagnosed(claim: Claim, finding: Finding, setting: Setting) -> tuple[Slip | None, str]:
    """Return the slip behind a failing claim, if one is found, and the reason to be told.

    One change in one member has to make the line hold: it is judged again as it would then be.
    """
    if claim.says == "eigenvalues":
        listing = listed(claim, finding, setting)
        if listing is not None:
            return listing, finding.reason
    trials = [trial for trial in aimed(claim, finding, setting) if _has_its_size(trial)]
    slip = next((found for trial in trials if (found := _slip(trial)) is not None), None)
    return slip, _reason(claim, finding, trials)


def _has_its_size(trial: Trial) -> bool:
    """Whether a member has as many entries as its true value: else no one change mends it."""
    if trial.claim.says in ("P", "P inverse", "J") and isinstance(trial.tree, Array):
        return len(trial.tree.rows) == trial.ground.size
    values = trial.values(trial.tree) or ()
    return all(
        len(own) == len(point.true) for own, point in zip(values, trial.points, strict=False)
    )


def _slip(trial: Trial) -> Slip | None:
    inner = narrowed(trial)
    stages = ((trial, OF_WHOLE), (inner, OF_PLACES), (trial, LATER), (inner, LAST))
    for tried, sources in stages:
        for source in sources:
            found = _first(tried, source)
            if found is not None:
                return found
    return None


def _reason(claim: Claim, finding: Finding, trials: list[Trial]) -> str:
    """Return why a line fails: what its judge says, and how far it is from the truth."""
    if not trials or "→" in finding.reason:
        return finding.reason
    last = trials[0]
    told = residual_text(last)
    member = ""
    if len(claim.values) > len(claim.groups):
        places = [k for k, value in enumerate(claim.values) if value == last.tree]
        member = f"member {places[-1] + 1} of {len(claim.values)}: " if places else ""
    if told.startswith("entry") and finding.reason.startswith(("entry", "entries")):
        several = len(finding.entries) > 1
        return f"{member}{finding.reason}, {told}" if several else f"{member}{told}"
    return member + "; ".join(part for part in (finding.reason, told) if part)


def _first(trial: Trial, source: Source) -> Slip | None:
    try:
        for candidate in source(trial):
            if trial.mends(candidate):
                return Slip(candidate.name, candidate.where, trial.back(candidate.tree))
    except OUTSIDE:
        return None
    return None
