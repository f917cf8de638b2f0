"""Values of signals at instants, and signals written out."""

from __future__ import annotations

from fractions import Fraction

import pytest

from closedform.algebra.field import BaseField
from closedform.algebra.parameter_field import ParameterField
from closedform.errors import Place
from closedform.model.driven.instants import order_in
from closedform.model.driven.numerals import PlainNumerals
from closedform.model.driven.signal import Repeat, Signal
from closedform.model.driven.signal_algebra import mapped
from closedform.model.driven.signal_formula import signal_formula
from closedform.model.driven.signal_reading import signal_of
from closedform.model.driven.values_at import ConstantSum, value_at
from closedform.model.naming import Names
from closedform.model.source import Source
from closedform.notation.equation import read_signal_formula
from closedform.notation.exact import NUMBERS
from closedform.notation.plain import plain
from closedform.notation.rational import arithmetic_in

Q = BaseField()
HERE = Place()


def signal(text: str) -> Signal:
    formula = read_signal_formula(text, time="t", constants=frozenset())
    return mapped(signal_of(formula, "t", NUMBERS, HERE), Q.scalar)


def value(given: Signal, at: Fraction | int, *, before: bool = False) -> str:
    order = order_in(Q, None, HERE)
    return plain(value_at(Q, given, Q.scalar(at), order, before=before).formula)


VALUES: list[tuple[str, int, str, str]] = [
    ("3", 0, "3", "3"),
    ("step(t)", 0, "0", "1"),
    ("step(2 - t)", 2, "1", "0"),
    ("5*exp(-2*t)", 1, "5*exp(-2)", "5*exp(-2)"),
    ("t^2*sin(3*t)", 2, "4*sin(6)", "4*sin(6)"),
    ("cos(t)", 0, "1", "1"),
    ("sin(t)", 0, "0", "0"),
    ("delta(t) + t", 0, "0", "0"),
    ("exp(-t)*cos(2*t) - 1", 1, "exp(-1)*cos(2) - 1", "exp(-1)*cos(2) - 1"),
]


@pytest.mark.parametrize(("text", "at", "before", "after"), VALUES)
def test_values_are_sums_of_constants(text: str, at: int, before: str, after: str) -> None:
    assert value(signal(text), at, before=True) == before
    assert value(signal(text), at) == after


@pytest.mark.parametrize(
    ("at", "before", "after"),
    [(0, "0", "1"), (1, "1", "0"), (3, "0", "1"), (7, "1", "0"), (9, "0", "0")],
)
def test_a_signal_that_repeats_is_what_its_period_says(at: int, before: str, after: str) -> None:
    once = signal("step(t) - step(t - 1)")
    repeated = Signal(once.bursts, (), Repeat(Q.scalar(3), Q.scalar(0), 3))
    assert value(repeated, at, before=True) == before
    assert value(repeated, at) == after


def test_opposite_angles_and_equal_constants_cancel() -> None:
    total = ConstantSum(Q)
    for text in ("cos(t - 3)", "-cos(3 - t)", "sin(t - 3)", "sin(3 - t)"):
        for burst in signal(text).bursts:
            for wave in burst.waves:
                total.add_wave(wave, Q.scalar(5))
    assert total.is_zero


def test_multiples_of_right_angles_are_numbers() -> None:
    field = ParameterField(parameters=("A", "pi"))
    formula = read_signal_formula("A*cos(pi*t)", time="t", constants=frozenset({"A", "pi"}))
    given = signal_of(formula, "t", arithmetic_in(field), HERE)
    for at, expected in ((1, "-A"), (Fraction(1, 2), "0"), (Fraction(1, 3), "A*cos(pi/3)")):
        total = ConstantSum(field)
        for wave in given.bursts[0].waves:
            total.add_wave(wave, field.scalar(at))
        assert plain(total.formula) == expected


FORMULAS = [
    "3",
    "t^2*exp(-t)",
    "10*exp(-t)*sin(3*t)",
    "-cos(2*t) + step(t - 1)*(t - 1)",
    "step(t - 1) - step(t - 3)",
    "4*delta(t - 2) - delta(t)",
    "(1 - step(t - 2))*sin(t)",
]


def parts(given: Signal) -> tuple[frozenset[object], frozenset[object]]:
    return frozenset(given.bursts), frozenset(given.impulses)


@pytest.mark.parametrize("text", FORMULAS)
def test_a_signal_as_written_is_that_signal(text: str) -> None:
    numerals = PlainNumerals(Names("t", {}), Source(HERE))
    formula = read_signal_formula(text, time="t", constants=frozenset())
    given = signal_of(formula, "t", NUMBERS, HERE)
    written = signal_formula(given, numerals, "t")
    assert parts(signal_of(written, "t", NUMBERS, HERE)) == parts(given)
    again = read_signal_formula(plain(written), time="t", constants=frozenset())
    assert parts(signal_of(again, "t", NUMBERS, HERE)) == parts(given)
