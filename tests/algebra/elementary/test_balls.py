"""What is computed exactly agrees with ball arithmetic, whatever was built from what."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from fractions import Fraction

from flint import acb, arb, ctx, fmpq
from hypothesis import assume, given
from hypothesis import strategies as st

from closedform.algebra.elementary import Element, ElementaryField, NotElementaryError


@dataclass(frozen=True)
class Recipe:
    """A formula: how it is built in a field, and a ball for its value, computed without one."""

    text: str
    element: Callable[[ElementaryField], Element] = field(repr=False)
    ball: Callable[[acb], acb] = field(repr=False)

    def __add__(self, other: Recipe) -> Recipe:
        return Recipe(
            f"({self.text} + {other.text})",
            lambda f: self.element(f) + other.element(f),
            lambda t: self.ball(t) + other.ball(t),
        )

    def __mul__(self, other: Recipe) -> Recipe:
        return Recipe(
            f"{self.text}·{other.text}",
            lambda f: self.element(f) * other.element(f),
            lambda t: self.ball(t) * other.ball(t),
        )

    def exponential(self) -> Recipe:
        return Recipe(
            f"exp({self.text}·t)",
            lambda f: f.exp(self.element(f) * f.t),
            lambda t: (self.ball(t) * t).exp(),
        )


NAMES = {"a": Fraction(355, 1009), "b": Fraction(2718, 1013)}
INSTANTS = tuple(Fraction(n, 9) for n in (-4, 5, 13))
TIME = Recipe("t", lambda f: f.t, lambda t: t)

fractions = st.fractions(min_value=-3, max_value=3, max_denominator=4)


def fresh() -> ElementaryField:
    """A field with two positive names."""
    return ElementaryField(("a", "b"), lambda p: 1 if all(c > 0 for c in p.values()) else None)


def around(value: Fraction) -> acb:
    return acb(arb(fmpq(value.numerator, value.denominator)))


def named() -> dict[str, arb]:
    return {name: around(value).real for name, value in NAMES.items()}


def _number(value: Fraction) -> Recipe:
    return Recipe(str(value), lambda f: f.number(value), lambda _: around(value))


def _name(name: str) -> Recipe:
    return Recipe(name, lambda f: f.name(name), lambda _: around(NAMES[name]))


def _root(value: int) -> Recipe:
    return Recipe(f"sqrt({value})", lambda f: f.sqrt(value), lambda _: acb(value).sqrt())


def _combined(leaves: st.SearchStrategy[Recipe], most: int) -> st.SearchStrategy[Recipe]:
    return st.recursive(
        leaves,
        lambda inner: st.one_of(
            st.tuples(inner, inner).map(lambda pair: pair[0] + pair[1]),
            st.tuples(inner, inner).map(lambda pair: pair[0] * pair[1]),
        ),
        max_leaves=most,
    )


constants = _combined(
    st.one_of(
        fractions.map(_number),
        st.sampled_from(["a", "b"]).map(_name),
        st.sampled_from([-1, 2, 3, 6]).map(_root),
    ),
    4,
)
sums = _combined(st.one_of(constants, constants.map(Recipe.exponential), st.just(TIME)), 4)


@given(sums)
def test_the_value_is_that_of_the_formula(recipe: Recipe) -> None:
    element = recipe.element(fresh())
    for time in INSTANTS:
        assert element.enclosure(around(time), named()).overlaps(recipe.ball(around(time)))


@given(sums, sums)
def test_what_is_zero_has_balls_around_zero_and_what_is_not_has_one_away(
    one: Recipe, other: Recipe
) -> None:
    own = fresh()
    with ctx.workprec(256):
        balls = [one.ball(around(time)) - other.ball(around(time)) for time in INSTANTS]
    is_zero = (one.element(own) - other.element(own)).is_zero
    assert is_zero == all(ball.contains(0) for ball in balls)


@given(sums, sums)
def test_quotients_are_undone(one: Recipe, other: Recipe) -> None:
    own = fresh()
    above, below = one.element(own), other.element(own)
    assume(not below.is_zero)
    quotient = above / below
    assert quotient * below == above
    assert (quotient + 1) * below == above + below
    assert quotient.derivative() * below + quotient * below.derivative() == above.derivative()


@given(sums, sums)
def test_two_orders_of_computing_give_one_result(one: Recipe, other: Recipe) -> None:
    own = fresh()
    x, y = one.element(own), other.element(own)
    assert ((x + y) * (x - y) - x * x + y * y).is_zero
    assert (x * y).derivative() == x.derivative() * y + y.derivative() * x


@given(sums, fractions)
def test_a_shift_is_one_of_the_value(recipe: Recipe, delay: Fraction) -> None:
    element = recipe.element(fresh())
    for time in INSTANTS:
        shifted = element.shifted(delay).enclosure(around(time), named())
        assert shifted.overlaps(recipe.ball(around(time + delay)))
    assert element.at(delay).enclosure(acb(0), named()).overlaps(recipe.ball(around(delay)))


@given(sums)
def test_integrals_are_undone_by_derivatives(recipe: Recipe) -> None:
    element = recipe.element(fresh())
    assert element.integral().derivative() == element


@given(constants)
def test_roots_are_principal(recipe: Recipe) -> None:
    own = fresh()
    element = recipe.element(own)
    try:
        root = own.sqrt(element)
    except NotElementaryError as error:
        assert "sign" in error.reason or "parameters" in error.reason
        return
    assert root * root == element
    if element.conjugate() != element:
        assert own.sqrt(element.conjugate()) == root.conjugate()
    with ctx.workprec(128):
        found = root.enclosure(acb(0), named())
        assert not found.real < 0
        assert found.real > 0 or not found.imag < 0


@given(constants)
def test_other_values_of_names_take_their_place(recipe: Recipe) -> None:
    own = fresh()
    element = recipe.element(own)
    values = {name: own.number(value) for name, value in NAMES.items()}
    moved = element.substituted(values)
    assert not moved.free_names
    assert moved.enclosure(acb(0), {}).overlaps(recipe.ball(acb(0)))
