"""Systems built from a known canonical structure get that structure and that e^(At)."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest
from flint import arb, ctx, fmpq
from hypothesis import given, settings

import closedform
from tests.exact import fractions_of, value_of
from tests.known_systems import KnownSystem
from tests.strategies import every_system, known_systems

SMALL = [pytest.param(s, id=f"{n}: {name}") for n in range(1, 5) for name, s in every_system(n)]
TIMES = (Fraction(0), Fraction(1, 3), Fraction(-5, 7))


def respond_to(system: KnownSystem) -> Any:
    return closedform.respond(
        closedform.system(
            title="known",
            states=[f"x{i + 1}" for i in range(system.order)],
            matrix=system.matrix,
            initial=[Fraction(i + 1, 2) for i in range(system.order)],
        )
    )


def assert_spectrum_is_the_known_one(response: Any, system: KnownSystem) -> None:
    spectrum = response.spectrum
    assert fractions_of(spectrum.characteristic) == system.characteristic
    found = {fractions_of(f.polynomial): tuple(f.blocks) for f in spectrum.factors}
    assert found == system.sizes
    for factor in spectrum.factors:
        assert factor.multiplicity == sum(factor.blocks)
        assert factor.index == factor.blocks[0]


def assert_transition_is_the_known_one(response: Any, system: KnownSystem) -> None:
    start = [Fraction(i + 1, 2) for i in range(system.order)]
    for time in TIMES:
        known = system.transition(time)
        ours = response.transition_at(time, 40)
        state = response.solution_at(time, 40)
        with ctx.workprec(400):
            largest = max(abs(entry).upper() for row in known for entry in row)
            for own_row, row, own_state in zip(ours, known, state, strict=True):
                for own, entry in zip(own_row, row, strict=True):
                    assert own.overlaps(entry)
                    assert own.rad() <= largest * 1e-35
                expected = sum(
                    e * s.numerator / s.denominator for e, s in zip(row, start, strict=True)
                )
                assert own_state.overlaps(expected)


def assert_formulas_say_the_known_transition(response: Any, system: KnownSystem) -> None:
    """What is written, read literally, is e^(At): no term lost between proof and formula."""
    time = Fraction(4, 7)
    known = system.transition(time)
    with ctx.workprec(400):
        constants = response.closed_forms.constants
        names = {constant.name: constant.definition.enclosure() for constant in constants}
        names[response.model.time] = arb(fmpq(time.numerator, time.denominator))
        largest = max(abs(entry).upper() for row in known for entry in row)
        for written, row in zip(response.transition, known, strict=True):
            for formula, entry in zip(written, row, strict=True):
                value = value_of(formula, names)
                assert value.overlaps(entry)
                assert value.rad() <= largest * 1e-80


@pytest.mark.parametrize("system", SMALL)
def test_every_structure_of_order_up_to_4_is_found_and_proved(system: KnownSystem) -> None:
    response = respond_to(system)
    assert_spectrum_is_the_known_one(response, system)
    assert_transition_is_the_known_one(response, system)
    assert_formulas_say_the_known_transition(response, system)
    assert closedform.verify(response).holds


@given(known_systems())
@settings(max_examples=60)
def test_random_structures_of_order_up_to_6_are_found_and_proved(system: KnownSystem) -> None:
    response = respond_to(system)
    assert_spectrum_is_the_known_one(response, system)
    assert_transition_is_the_known_one(response, system)
    assert_formulas_say_the_known_transition(response, system)
    record = closedform.verify(response)
    assert record.holds
    assert {check.outcome for check in record.checks} <= {"proved", "enclosed", "not attempted"}


@given(known_systems(largest=4))
@settings(max_examples=15)
def test_two_runs_write_the_same_formulas(system: KnownSystem) -> None:
    first, second = respond_to(system), respond_to(system)
    assert first.transition == second.transition
    assert first.solution == second.solution
