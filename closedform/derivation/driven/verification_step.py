"""The step that lists what was proved of a driven model.

Short documents name what was proved and what was enclosed; full ones say of each how.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from typing import Any

from closedform.derivation.driven.renaming import of_the_stacked
from closedform.derivation.driven.writing import bold
from closedform.derivation.identities import printed_item
from closedform.derivation.parametric.verification_step import verification_step
from closedform.derivation.step import Side, Statement, Step, Symbol
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import Check

__all__ = ["driven_cases_step", "driven_verification_step"]

_A, _B, _C, _D = (Symbol("matrix", letter=letter) for letter in "ABCD")
_X, _U = bold("x"), bold("u")
_FREE, _FORCED = bold("x", None, "free"), bold("x", None, "forced")
_STEADY, _TRANSIENT = bold("x", None, "steady"), bold("x", None, "transient")

_IDENTITIES: dict[str, tuple[Side, ...]] = {
    "x' = A x + B u": (
        Symbol("dotted", letter="x"),
        Symbol("sum", parts=((_A, _X), (_B, _U))),
    ),
    "z = C x + D u": (bold("z"), Symbol("sum", parts=((_C, _X), (_D, _U)))),
    "free + forced = x": (Symbol("sum", parts=(_FREE, _FORCED)), _X),
    "steady + transient = x": (Symbol("sum", parts=(_STEADY, _TRANSIENT)), _X),
}
_WORDS = {
    "x(start) = x0": "initial values",
    "jumps h": "jumps",
    "joins": "continuity at the joins",
    "A as stated": "the matrix as stated",
    "two routes": "the resolvent and the canonical form agree",
    "stacked matrix": "the matrix of states and inputs",
    "one case applies": "exactly one case applies",
    "intervals": "the intervals",
    "conditions as written": "the conditions of the cases",
    "sustained by the inputs": "what the inputs sustain",
    "resonance": "order of resonance",
    "unit steps and pieces": "unit steps and pieces agree",
}
_PERIOD = "one period: "
_FIRST = ("equations as typed", "x(start) = x0", "joins", "jumps h")
"""What is named first, for it is what counts."""


def driven_verification_step(checks: Sequence[Check], time: str, *, hats: bool) -> Step:
    """List what was proved or enclosed; in `gathered` all of one outcome stands together.

    With `hats` what is said of A, where it is the matrix that was solved for, is said of the
    stacked matrix.
    """
    rows: list[dict[str, object]] = [
        {"item": printed_item(check.item, time), "outcome": check.outcome, "how": check.how}
        for check in checks
    ]
    facts = {
        "rows": rows,
        "full_rows": rows,
        "gathered": _gathered(checks, time),
        "compact": True,
        "open": False,
    }
    return _retold(Step("verification", (), facts, depth="summary"), hats=hats)


def driven_cases_step(
    checks: Sequence[Check], records: CaseRecords, stacked: ParametricResponse, *, hats: bool
) -> Step:
    """List what was proved of a model with parameters, of all cases and of each."""
    step = verification_step(checks, records, stacked)
    every = [*checks, *(check for record in records.cases for check in record.checks)]
    gathered = _gathered(every, stacked.model.time)
    return _retold(replace(step, facts={**step.facts, "gathered": gathered}), hats=hats)


def _gathered(checks: Sequence[Check], time: str) -> dict[str, list[object]]:
    """The items of each outcome, each named once; what is open with its reason."""
    found: dict[str, list[object]] = {"proved": [], "enclosed": [], "open": []}
    first = [check for check in checks if check.item in _FIRST]
    for check in [*first, *(check for check in checks if check not in first)]:
        item: object = printed_item(check.item.removeprefix(_PERIOD), time)
        if check.outcome in found:
            told = found[check.outcome]
        else:
            told, item = found["open"], [item, ":", check.how]
        if item not in told:
            told.append(item)
    return found


def _retold(step: Step, *, hats: bool) -> Step:
    step = of_the_stacked(step) if hats else step
    return replace(step, facts={key: _put(item) for key, item in step.facts.items()})


def _put(item: Any) -> Any:
    """The identities of the driven solution, about the states alone, in the place of words."""
    if isinstance(item, str):
        sides = _IDENTITIES.get(item)
        return _WORDS.get(item, item) if sides is None else Statement("identity", sides)
    if isinstance(item, Mapping):
        return {key: _put(value) for key, value in item.items()}
    if isinstance(item, list):
        return [_put(value) for value in item]
    return item
