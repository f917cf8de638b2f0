"""The step that lists what was proved of a driven model."""

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
}


def driven_verification_step(checks: Sequence[Check], time: str, *, hats: bool) -> Step:
    """List what was proved or enclosed; in `rows` what is proved exactly stands together.

    With `hats` what is said of A, where it is the matrix that was solved for, is said of the
    stacked matrix.
    """
    rows: list[dict[str, object]] = [
        {"item": printed_item(check.item, time), "outcome": check.outcome, "how": check.how}
        for check in checks
    ]
    proved = [row for row in rows if row["outcome"] == "proved"]
    how: list[object] = []
    for row in proved:
        how += [row["item"], ", "]
    whole: dict[str, object] = {"item": "identities", "outcome": "proved", "how": how[:-1]}
    others = [row for row in rows if row["outcome"] != "proved"]
    facts = {
        "rows": [whole, *others] if proved else others,
        "full_rows": rows,
        "compact": True,
        "open": False,
    }
    return _retold(Step("verification", (), facts, depth="summary"), hats=hats)


def driven_cases_step(
    checks: Sequence[Check], records: CaseRecords, stacked: ParametricResponse, *, hats: bool
) -> Step:
    """List what was proved of a model with parameters, of all cases and of each."""
    return _retold(verification_step(checks, records, stacked), hats=hats)


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
