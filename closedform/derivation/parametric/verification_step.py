"""The step that lists what was proved: of all cases together, of each, and of single ones."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from closedform.derivation.identities import printed_item
from closedform.derivation.step import Step
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import Check

__all__ = ["verification_step"]

POINTS = re.compile(r" \([^()]*=[^()]*\)")
"""The points that a check was made at, which differ from case to case."""


def verification_step(
    whole: Sequence[Check], records: CaseRecords, response: ParametricResponse
) -> Step:
    """List what was proved; what is the same in all cases is said once.

    `full_rows` say of each check what was done; in `rows` the exact ones of all cases are
    gathered into one, and what differs from case to case is told of the first.
    """
    facts = {
        "rows": _gathered(_rows(whole, _told_of_the_first(records), response)),
        "full_rows": _rows(whole, records, response),
        "compact": True,
        "open": bool(response.model.field.free),
    }
    return Step("verification", (), facts, depth="summary")


def _told_of_the_first(records: CaseRecords) -> CaseRecords:
    """Give a check in all cases the words of the first that has it."""
    found: dict[tuple[str, str], list[Check]] = {}
    for check in (check for record in records.cases for check in record.checks):
        key = (check.item, check.outcome)
        found.setdefault(key, []).append(replace(check, how=POINTS.sub("", check.how)))

    def told(check: Check) -> Check:
        first, *others = found[check.item, check.outcome]
        if all(other == first for other in others):
            return first
        return replace(first, how=f"{first.how}; likewise in the other cases")

    cases = tuple(replace(r, checks=tuple(map(told, r.checks))) for r in records.cases)
    return replace(records, cases=cases)


def _gathered(rows: Sequence[dict[str, object]]) -> list[dict[str, object]]:
    """Put the items that are proved alike in every case into one row."""
    proved = [row for row in rows if row["common"] and row["outcome"] == "proved"]
    if len(proved) < 2:
        return list(rows)
    how: list[object] = []
    for row in proved:
        how += [row["item"], ", "]
    whole = dict(proved[0]) | {"item": "identities", "how": how[:-1]}
    first = rows.index(proved[0])
    return [*rows[:first], whole, *(row for row in rows[first:] if row not in proved)]


def _rows(
    whole: Sequence[Check], records: CaseRecords, response: ParametricResponse
) -> list[dict[str, object]]:
    """One row for each check: of the whole, in every case, and in the others in turn."""
    time, count = response.model.time, len(records.cases)

    def row(check: Check, group: str, *, common: bool = False) -> dict[str, object]:
        return {
            "common": common,
            "item": printed_item(check.item, time),
            "outcome": check.outcome,
            "how": check.how,
            "group": group if count > 1 else "",
        }

    rows = [row(check, "All cases together") for check in whole]
    where: dict[Check, list[int]] = {}
    for number, record in enumerate(records.cases, start=1):
        for check in record.checks:
            where.setdefault(check, []).append(number)
    every = [c for c, numbers in where.items() if len(numbers) == count]
    rows += [row(c, f"In each of the {count} cases", common=True) for c in every]
    some = [(numbers, c) for c, numbers in where.items() if len(numbers) < count]
    for numbers, check in sorted(some, key=lambda pair: pair[0]):
        rows.append(row(check, _in_cases(numbers)))
    return rows


def _in_cases(numbers: Sequence[int]) -> str:
    if len(numbers) == 1:
        return f"In case {numbers[0]}"
    return f"In cases {', '.join(map(str, numbers[:-1]))} and {numbers[-1]}"
