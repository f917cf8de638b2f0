"""Run so many derivations: `python -m tests.checking.generated [count] [first seed]`."""
# ruff: noqa: T201

from __future__ import annotations

import sys

from tests.checking.generated.build import derivation_of
from tests.checking.generated.measure import measured

count = int(sys.argv[1]) if len(sys.argv) > 1 else 200
first = int(sys.argv[2]) if len(sys.argv) > 2 else 0
tally = measured(map(derivation_of, range(first, first + count)))
for fault in (*tally.faults, *(tally.weak if "weak" in sys.argv else ())):
    print(fault)
for crash in tally.crashes:
    print("[crashed]", crash)
for what, number in sorted(tally.counts.items()):
    print(f"{number:7d}  {what}")
print(f"{tally.seconds / max(count, 1):.3f} s for each derivation")
