"""The checker on generated derivations: right lines pass, wrong ones do not, nothing is unread."""

from __future__ import annotations

from collections import Counter
from functools import cache

import pytest

from tests.checking.generated.build import derivation_of
from tests.checking.generated.lines import Derivation
from tests.checking.generated.measure import Tally, measured

BATCHES = [range(first, first + 20) for first in range(0, 120, 20)]


@cache
def made(seed: int) -> Derivation:
    """A derivation, written once for all tests."""
    return derivation_of(seed)


@cache
def tally_of(seeds: range) -> Tally:
    """What the checker makes of a batch, judged once for all tests."""
    return measured(map(made, seeds))


@pytest.mark.parametrize("seeds", BATCHES, ids=lambda seeds: f"from {seeds.start}")
def test_right_lines_pass_and_wrong_ones_do_not(seeds: range) -> None:
    tally = tally_of(seeds)
    assert tally.crashes == []
    assert [str(fault) for fault in tally.faults] == []
    assert tally.counts["derivations"] == len(seeds)
    _first_wrong_is_found(tally)


def _first_wrong_is_found(tally: Tally) -> None:
    assert tally.counts["first wrong not found"] == 0
    assert tally.counts["first wrong found"] == tally.counts["with a slip"]


def test_derivations_are_of_all_kinds_and_wrong_in_many_ways() -> None:
    derivations = [made(seed) for seeds in BATCHES for seed in seeds]
    assert len({d.kind for d in derivations}) > 15
    assert len({d.slip for d in derivations}) > 20
    assert 0.25 < sum(not d.slip for d in derivations) / len(derivations) < 0.5


def test_the_same_seed_gives_the_same_lines() -> None:
    one, other = derivation_of(7), derivation_of(7)
    assert [line.latex for line in one.lines] == [line.latex for line in other.lines]
    assert one.model == other.model


def test_consequences_are_mostly_recognised() -> None:
    counts = sum((tally_of(seeds).counts for seeds in BATCHES[:2]), Counter[str]())
    assert counts["carried recognised"] > 10
    assert counts["carried recognised"] > 5 * counts["carried not recognised"]
