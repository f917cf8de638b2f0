"""Systems from public trackers of a general library: the data, and what the tests read there."""

from __future__ import annotations

import json
from fractions import Fraction
from pathlib import Path
from typing import Any

from flint import arb

from tests.parametric.record_reader import Balls

Case = dict[str, Any]
REAL_CASES: dict[str, Case] = {
    item["id"]: item
    for item in json.loads((Path(__file__).parent / "real_cases.json").read_text(encoding="utf-8"))[
        "items"
    ]
}
NUMERIC = [k for k, c in REAL_CASES.items() if not c["parameters"] and not c.get("refused")]
WITH_PARAMETERS = [
    k
    for k, c in REAL_CASES.items()
    if c["parameters"] and not c.get("refused") and not c.get("unknown")
]
UNKNOWN = [k for k, c in REAL_CASES.items() if c.get("unknown")]
REFUSED = [k for k, c in REAL_CASES.items() if c.get("refused")]


def time_of(case: Case) -> Fraction:
    return Fraction(case["reference"]["time"])


def assert_is_the_reference(ours: Balls, case: Case) -> None:
    """Each entry is the reference, which is given to 20 digits, to 18 of its own digits."""
    theirs = [[arb(text) for text in row] for row in case["reference"]["transition"]]
    largest = max(abs(entry).upper() for row in theirs for entry in row)
    for own_row, row in zip(ours, theirs, strict=True):
        for own, their in zip(own_row, row, strict=True):
            allowed = abs(their) if their != 0 else largest
            assert abs(own - their) <= allowed * arb("1e-18")
