"""Values of formulas and of signals in ball arithmetic, found in two ways; and formulas to try."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from fractions import Fraction
from typing import Any

from flint import arb, fmpq
from hypothesis import strategies as st

from closedform.algebra.waves import Wave
from closedform.model.driven.signal import Burst, Signal
from closedform.notation.expression import (
    ONE,
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
    number,
)

Ball = Callable[[Any], arb]
T = Name("t")


def ball(value: Fraction | int) -> arb:
    value = Fraction(value)
    return arb(fmpq(value.numerator, value.denominator))


def tree_value(tree: Expression, values: Mapping[str, arb]) -> arb:
    """Return the value of a formula with steps; not at an instant at which one switches."""
    match tree:
        case Number(value):
            return ball(value)
        case Name(text):
            return values[text]
        case Negation(inside):
            return -tree_value(inside, values)
        case Sum(terms):
            return sum((tree_value(term, values) for term in terms), arb(0))
        case Product(factors):
            product = arb(1)
            for factor in factors:
                product *= tree_value(factor, values)
            return product
        case Quotient(above, below):
            return tree_value(above, values) / tree_value(below, values)
        case Power(base, Number(whole)):
            return tree_value(Product((ONE, *[base] * int(whole))), values)
        case Call("step", argument):
            inside = tree_value(argument, values)
            assert not inside.contains(0)
            return arb(1 if inside > 0 else 0)
        case Call(function, argument):
            return getattr(tree_value(argument, values), function)()
        case _:
            raise AssertionError(tree)


def wave_value(wave: Wave, at: arb, enclose: Ball) -> arb:
    s = at - enclose(wave.origin)
    value = enclose(wave.amount) * (enclose(wave.rate) * s).exp()
    for _ in range(wave.power):
        value *= s
    if wave.kernel == "one":
        return value
    angle = enclose(wave.frequency) * s
    return value * (angle.cos() if wave.kernel == "cos" else angle.sin())


def is_on(burst: Burst, at: arb, enclose: Ball) -> bool:
    after = burst.start is None or at > enclose(burst.start)
    return bool(after and (burst.end is None or at < enclose(burst.end)))


def signal_value(signal: Signal, at: arb, enclose: Ball) -> arb:
    """Return the value of a signal that does not repeat, between its switchings."""
    assert signal.repeat is None
    return sum(
        (
            wave_value(wave, at, enclose)
            for burst in signal.bursts
            if is_on(burst, at, enclose)
            for wave in burst.waves
        ),
        arb(0),
    )


# --- formulas ---------------------------------------------------------------------------------

SMALL = st.integers(-3, 3).map(Fraction) | st.fractions(-3, 3, max_denominator=4)
FUNCTIONS = ("exp", "sin", "cos", "sinh", "cosh")


def line(slope: Fraction, constant: Fraction) -> Expression:
    return Sum((Product((number(slope), T)), number(constant)))


def step(at: Fraction | int, *, falling: bool = False) -> Expression:
    rising = Sum((T, Negation(number(at))))
    return Call("step", Negation(rising) if falling else rising)


@st.composite
def calls(draw: st.DrawFn, shifts: st.SearchStrategy[Fraction]) -> Expression:
    """Functions of slope·(t - shift)."""
    slope = draw(SMALL)
    return Call(draw(st.sampled_from(FUNCTIONS)), line(slope, -slope * draw(shifts)))


@st.composite
def formulas(draw: st.DrawFn, shifts: st.SearchStrategy[Fraction]) -> Expression:
    """Sums of products of polynomials, functions, powers and steps; steps switch at 0, 1, 2."""
    leaf = st.one_of(
        SMALL.map(number),
        st.just(T),
        calls(shifts),
        st.builds(lambda base, k: Power(base, number(k)), calls(shifts), st.integers(0, 3)),
        st.builds(lambda at, f: step(at, falling=f), st.integers(0, 2), st.booleans()),
    )
    terms = draw(st.lists(st.lists(leaf, min_size=1, max_size=3), min_size=1, max_size=3))
    products = [Product(tuple(factors)) if factors[1:] else factors[0] for factors in terms]
    total: Expression = Sum(tuple(products)) if products[1:] else products[0]
    if draw(st.booleans()):
        return total
    return Product((Sum((total, draw(leaf))), draw(leaf)))


INSTANTS = st.sampled_from((Fraction(-7, 5), Fraction(3, 7), Fraction(11, 8), Fraction(29, 10)))
"""One in each interval between the switchings."""
