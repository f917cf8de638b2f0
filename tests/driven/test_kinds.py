"""Each kind of input, from the typed equations to the record, against three ways to integrate."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import cache
from typing import Any

import pytest
from flint import arb, ctx

from tests.driven.held import check
from tests.driven.kinds import KINDS
from tests.driven.reference import Reference
from tests.driven.told import Told, record_of_driven
from tests.driven.typed import Stated
from tests.parametric.driven_record_reader import check_driven_record

BITS = 400
each = pytest.mark.parametrize("kind", KINDS)


@cache
def record_of(kind: str) -> Mapping[str, Any]:
    return record_of_driven(KINDS[kind][0])


def told_of(kind: str) -> list[dict[str, arb]]:
    (told,) = Told.cases(record_of(kind), {})
    return [told.values(at) for _, at in KINDS[kind][1].looked_at()]


def assert_same(
    found: Sequence[Mapping[str, arb]], expected: Sequence[Mapping[str, arb]], within: str
) -> None:
    assert len(found) == len(expected)
    for ours, theirs in zip(found, expected, strict=True):
        scale = max((abs(v).upper() for v in theirs.values()), default=arb(1), key=float)
        for name, number in theirs.items():
            gap = abs(ours[name] - number)
            assert gap < arb(within) * (1 + scale), (
                f"{name}: {ours[name].str(20)}, {number.str(20)}"
            )


@each
def test_it_is_what_the_exponential_of_states_and_inputs_says(kind: str) -> None:
    with ctx.workprec(BITS):
        assert_same(told_of(kind), KINDS[kind][1].by_exponential(), "1e-35")


@each
def test_it_is_what_taylors_method_says_to_thirty_digits(kind: str) -> None:
    with ctx.workprec(BITS):
        assert_same(told_of(kind), KINDS[kind][1].by_taylor(), "1e-28")


@each
def test_it_is_what_a_runge_kutta_method_says(kind: str) -> None:
    with ctx.workprec(BITS):
        assert_same(told_of(kind), KINDS[kind][1].by_runge_kutta(), "1e-10")


@each
def test_it_solves_the_equations_as_typed(kind: str) -> None:
    mapping, reference = KINDS[kind]
    with ctx.workprec(BITS):
        stated = Stated(mapping, {})
        (told,) = Told.cases(record_of(kind), {})
        looked_at = [at for _, at in reference.looked_at()]
        assert [at for at in stated.instants if at < looked_at[-1]] == reference.instants()
        instants = [*reference.instants(), *looked_at]
        check(stated, told.functions, instants)


@each
def test_the_record_solves_what_it_says_itself(kind: str) -> None:
    assert check_driven_record(record_of(kind), {}) == 1


def test_a_number_of_the_hand_work_that_is_another_is_noticed() -> None:
    good = KINDS["resonance"][1]
    spoilt = Reference(
        good.states,
        (("0", "1"), ("-4", "-1/1000000")),
        good.feed,
        good.initial,
        good.intervals,
        good.tones,
        good.rows,
        good.last,
    )
    with ctx.workprec(BITS), pytest.raises(AssertionError):
        assert_same(told_of("resonance"), spoilt.by_exponential(), "1e-28")
