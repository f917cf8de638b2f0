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
    gathered into one, and the points at which formulas were tried are left out.
    """
    facts = {
        "rows": _gathered(_rows(whole, _without_points(records), response)),
        "full_rows": _rows(whole, records, response),
        "compact": True,
    }
    return Step("verification", (), facts, depth="summary")


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
    rest = [row for row in rows[first:] if row not in proved]
    return [*rows[:first], whole, *rest]


def _without_points(records: CaseRecords) -> CaseRecords:
    def bare(check: Check) -> Check:
        return replace(check, how=POINTS.sub("", check.how))

    cases = tuple(replace(r, checks=tuple(map(bare, r.checks))) for r in records.cases)
    return replace(records, cases=cases)


def _rows(
    whole: Sequence[Check], records: CaseRecords, response: ParametricResponse
) -> list[dict[str, object]]:
    time, count = response.model.time, len(records.cases)

    def row(check: Check, group: str, *, common: bool = False) -> dict[str, object]:
        return {
            "common": common,
            "item": printed_item(check.item, time),
            "outcome": check.outcome,
            "how": check.how,
            "group": group if count > 1 else "",
        }

    common = _common(records)
    rows = [row(check, "All cases together") for check in whole]
    rows += [row(check, f"In each of the {count} cases", common=True) for check in common]
    for case, record in zip(response.cases, records.cases, strict=True):
        own = [check for check in record.checks if check not in common]
        rows += [row(check, f"In case {case.number + 1}") for check in own]
    return rows


def _common(records: CaseRecords) -> list[Check]:
    """The checks that stand alike in the record of every case."""
    if not records.cases:
        return []
    first, *others = records.cases
    return [c for c in first.checks if all(c in record.checks for record in others)]
