"""The instants of a model in their order, and its inputs from the start on."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import BaseField, base_field
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.surds import SurdSum
from closedform.errors import Place
from closedform.model.driven.signal import Burst, Impulse, Repeat, Signal
from closedform.model.driven.signal_algebra import added, mapped
from closedform.model.driven.signal_errors import UnknownOrderError
from closedform.model.driven.signal_reading import signal_of
from closedform.model.driven.timeline import timeline_of
from closedform.model.driven.wave_sums import gathered, is_polynomial
from closedform.notation.equation import read_signal_formula
from closedform.notation.exact import NUMBERS
from closedform.notation.expression import Expression
from closedform.notation.rational import _Functions
from tests.model.driven.signal_values import ball, formulas, signal_value

Q = BaseField()
INSTANTS = st.fractions(-2, 4, max_denominator=3)
LATER = tuple(Fraction(k, 2) + Fraction(1, 7) for k in range(9))


def rational_signal(text: str) -> Signal:
    tree = read_signal_formula(text, time="t", constants=frozenset())
    return mapped(signal_of(tree, "t", NUMBERS, Place()), Q.scalar)


def family(burst: Burst) -> set[object]:
    """Return what tells the waves of a burst that could be added up from others."""
    return {
        "polynomial" if is_polynomial(w) else (w.rate, abs(w.frequency), w.origin)
        for w in burst.waves
    }


def together(one: Burst, other: Burst) -> bool:
    """Whether two bursts are on at one time, or one begins where the other ends."""
    later = max((s for s in (one.start, other.start) if s is not None), default=None)
    earlier = min((e for e in (one.end, other.end) if e is not None), default=None)
    return later is None or earlier is None or later < earlier


@given(st.lists(formulas(st.just(Fraction(1))), min_size=1, max_size=3), st.integers(-1, 3))
def test_signals_keep_their_values_from_the_start_on(trees: list[Expression], start: int) -> None:
    before = [mapped(signal_of(tree, "t", NUMBERS, Place()), Q.scalar) for tree in trees]
    instants, after = timeline_of(before, Q.scalar(start), Q, None)
    assert list(instants) == sorted(set(instants))
    assert all(instant > start for instant in instants)
    for one, other in zip(before, after, strict=True):
        for later in LATER:
            at = ball(start + later)
            assert signal_value(one, at, Q.enclose).overlaps(signal_value(other, at, Q.enclose))
        for k, burst in enumerate(other.bursts):
            assert burst.start is None or burst.start in instants
            assert burst.end is None or burst.end in instants
            assert burst.waves
            for rest in other.bursts[:k]:
                assert not (family(burst) & family(rest) and together(burst, rest))


@given(st.lists(st.tuples(INSTANTS, INSTANTS, st.integers(-2, 2)), max_size=5))
def test_the_canonical_form_does_not_hang_on_how_pulses_are_stated(
    pulses: list[tuple[Fraction, Fraction, int]],
) -> None:
    texts = [f"{h}*(step(t - ({a})) - step(t - ({b})))" for a, b, h in pulses] or ["0"]
    one = added(map(rational_signal, texts))
    other = added(map(rational_signal, reversed(texts)))
    spans = [
        f"{h if a < b else -h}*step(t - ({min(a, b)}))*step({max(a, b)} - t)" for a, b, h in pulses
    ]
    windows = added(map(rational_signal, spans or ["0"]))
    forms = [timeline_of([s], Q.scalar(-3), Q, None) for s in (one, other, windows)]
    assert forms[0] == forms[1] == forms[2]


def test_steps_that_follow_one_another_are_one_burst() -> None:
    signal = rational_signal("step(t - 1) - step(t - 2) + step(t - 2) - step(t - 5)")
    instants, (found,) = timeline_of([signal], Q.scalar(0), Q, None)
    assert instants == (1, 5)
    assert [(b.start, b.end) for b in found.bursts] == [(1, 5)]


def test_a_ramp_that_levels_off_is_two_bursts() -> None:
    signal = rational_signal("t*step(t) - (t - 2)*step(t - 2)")
    instants, (found,) = timeline_of([signal], Q.scalar(0), Q, None)
    assert instants == (2,)
    assert [(b.start, b.end, len(b.waves)) for b in found.bursts] == [(None, 2, 1), (2, None, 1)]


def test_what_is_over_at_the_start_is_gone() -> None:
    signal = rational_signal("step(t)*step(1 - t) + step(t - 1) + delta(t) + 2*delta(t - 2)")
    instants, (found,) = timeline_of([signal], Q.scalar(2), Q, None)
    assert instants == ()
    assert [(b.start, b.end) for b in found.bursts] == [(None, None)]
    assert found.impulses == (Impulse(Q.scalar(2), Q.scalar(2)),)


def test_instants_with_roots_are_in_their_order() -> None:
    root = SurdSum.rational(2).sqrt()
    field = base_field([root])
    at = [field.scalar(value) for value in (root, Fraction(7, 5), Fraction(3, 2))]
    signal = Signal((), tuple(Impulse(field.scalar(1), instant) for instant in at))
    instants, _ = timeline_of([signal], field.scalar(0), field, None)
    assert instants == (at[1], at[0], at[2])


def test_a_signal_that_repeats_stays_as_it_is() -> None:
    repeat = Repeat(Q.scalar(2), Q.scalar(0))
    signal = Signal((), (Impulse(Q.scalar(1), Q.scalar(0)),), repeat)
    assert timeline_of([signal], Q.scalar(1), Q, None) == ((), (signal,))


FIELD = ParameterField(parameters=("T1", "T2", "T3", "F0"))
T1, T2, T3, F0 = FIELD.domain.gens


def parametric_signal(text: str) -> Signal:
    tree = read_signal_formula(text, time="t", constants=frozenset(FIELD.parameters))
    return signal_of(tree, "t", _Functions(FIELD, {}), Place())


def domain(*comparisons: Comparison) -> ParameterDomain:
    return ParameterDomain(FIELD, comparisons)


def test_conditions_tell_the_order() -> None:
    signal = parametric_signal("F0*step(t - T2) - F0*step(t - T1) + delta(t - 2*T2)")
    known = domain(Comparison(T1, ">"), Comparison(T2 - T1, ">"))
    instants, (found,) = timeline_of([signal], FIELD.scalar(0), FIELD, known)
    assert instants == (T1, T2, 2 * T2)
    (burst,) = found.bursts
    assert (burst.start, burst.end, burst.waves[0].amount) == (T1, T2, -F0)


def test_instants_of_which_the_order_is_open_are_named() -> None:
    signal = parametric_signal("step(t - T1) + step(t - T2)")
    known = domain(Comparison(T1, ">"), Comparison(T2, ">"))
    with pytest.raises(UnknownOrderError) as raised:
        timeline_of([signal], FIELD.scalar(0), FIELD, known)
    assert {raised.value.one, raised.value.other} == {"T1", "T2"}
    assert "'conditions'" in str(raised.value)


def test_instants_that_may_be_equal_are_no_order() -> None:
    signal = parametric_signal("step(t - T1) + step(t - T2)")
    known = domain(Comparison(T1, ">"), Comparison(T2 - T1, ">="))
    with pytest.raises(UnknownOrderError):
        timeline_of([signal], FIELD.scalar(0), FIELD, known)


def test_instants_that_the_domain_makes_equal_are_one() -> None:
    signal = parametric_signal("step(t - T1) - step(t - T2) + delta(t - T3) + delta(t - T1)")
    known = domain(Comparison(T1, ">"), Comparison(T2 - T1, "="), Comparison(T3 - T1, "="))
    instants, (found,) = timeline_of([signal], FIELD.scalar(0), FIELD, known)
    assert len(instants) == 1
    assert found.bursts == ()
    assert found.impulses == (Impulse(FIELD.scalar(2), instants[0]),)


def test_gathered_polynomials_may_be_compared() -> None:
    (one,) = rational_signal("(t - 2)^2").bursts
    (other,) = rational_signal("t^2 - 4*t + 4").bursts
    assert gathered(one.waves) == gathered(other.waves)
