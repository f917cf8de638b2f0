"""The number pi in a field of parameters: no parameter, and its digits are exact."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import arb, ctx
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.branches import case_tree
from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.equations import Start, imposed, linear_solution
from closedform.algebra.exceptional import exceptional_elements
from closedform.algebra.parameter_field import PI
from closedform.algebra.sample import holds_at
from closedform.algebra.sign_argument import ByPi
from closedform.algebra.surds import SurdSum
from closedform.algebra.value_field import FieldWithPi, element_at, value_field
from tests.parametric.with_pi import MODELS, element, field_with_pi, response_with_pi

FIELD = field_with_pi("k", "w")
ROOT_TWO = SurdSum.of({2: Fraction(1)})
WHOLE = st.integers(-9, 9)
each_model = pytest.mark.parametrize("name", MODELS)


def of(text: str) -> object:
    return element(FIELD, text)


def domain(*comparisons: tuple[str, str]) -> ParameterDomain:
    return ParameterDomain(FIELD, tuple(Comparison(of(e), r) for e, r in comparisons))  # type: ignore[arg-type]


def test_pi_is_no_parameter_of_an_element() -> None:
    assert FIELD.free == ("k", "w")
    assert FIELD.names_in(of("k + pi")) == {"k"}
    assert FIELD.symbols_in(of("k + pi")) == {"k", PI}
    assert FIELD.holds_pi(of("pi*w"))
    assert not FIELD.holds_pi(of("w/2"))


@given(st.lists(WHOLE, min_size=1, max_size=5))
def test_a_number_in_pi_has_the_sign_of_its_digits(coefficients: list[int]) -> None:
    value = sum((c * of("pi") ** k for k, c in enumerate(coefficients)), of("0"))
    with ctx.workprec(400):
        digits = sum((c * arb.pi() ** k for k, c in enumerate(coefficients)), arb(0))
    argument = domain().sign_of(value)
    assert FIELD.number_sign(value) == (0 if not any(coefficients) else 1 if digits > 0 else -1)
    assert argument.never_zero == any(coefficients)


def test_close_approximations_of_pi_are_told_from_it() -> None:
    argument = domain().sign_of(of("355/113 - pi"))
    assert (argument.sign, argument.reason) == ("positive", ByPi())
    assert FIELD.number_sign(of("pi - 3141592653589793238462643383279/10^30")) == 1


@given(st.integers(1, 6), WHOLE, WHOLE, WHOLE)
def test_signs_at_values_with_square_roots(power: int, a: int, b: int, c: int) -> None:
    value = FIELD.sign_at(of(f"({a})*pi^{power} + ({b})*k + ({c})"), {"k": ROOT_TWO})
    with ctx.workprec(400):
        digits = a * arb.pi() ** power + b * arb(2).sqrt() + c
    assert value == (0 if a == b == c == 0 else 1 if digits > 0 else -1)


def test_a_sign_at_a_pole_is_none() -> None:
    assert FIELD.sign_at(of("1/(k^2 - 2)"), {"k": ROOT_TWO}) is None
    assert FIELD.sign_at(of("1/(k - pi)"), {"k": ROOT_TWO}) == -1


def test_values_with_pi_are_no_sums_of_square_roots() -> None:
    values = {"k": ROOT_TWO, "w": SurdSum.rational(3)}
    assert FIELD.number_at(of("k*pi"), values) is None
    assert FIELD.number_at(of("k*pi/(w*pi)"), values) == ROOT_TWO * SurdSum.rational(Fraction(1, 3))
    assert FIELD.number_at(of("(k + pi)/(k^2 + k*pi)"), values) == ROOT_TWO.inverse()
    with pytest.raises(ValueError, match="pi"):
        FIELD.exact_at(of("k*pi"), values)
    with pytest.raises(ZeroDivisionError):
        FIELD.number_at(of("pi/(k^2 - 2)"), values)


# --- signs over a domain -----------------------------------------------------------------------


@pytest.mark.parametrize(
    ("text", "sign"),
    [
        ("pi*w + k", "positive"),
        ("k - pi^2", "positive"),
        ("k^2 - 2*pi^2*k", "positive"),
        ("pi*k - pi*w", "unknown"),
        ("9 - pi^2", "negative"),
        ("w^2 + pi^2 - 2*w*pi", "nonnegative"),
    ],
)
def test_signs_with_parameters(text: str, sign: str) -> None:
    assert domain(("k - 20", ">"), ("w", ">")).sign_of(of(text)).sign == sign


def test_a_condition_times_a_number_in_pi_says_the_same() -> None:
    assert domain(("k - w", ">")).sign_of(of("pi*(w - k)")).sign == "negative"


def test_an_equation_with_pi_decides_what_is_put_in() -> None:
    inside = domain(("k - pi^2", "="))
    assert inside.sign_of(of("k - 9")).sign == "positive"
    assert inside.sign_of(of("k - 10")).sign == "negative"
    assert domain(("k - pi^2", "="), ("9 - k", ">")).contradiction() is not None
    assert domain(("k - pi^2", "="), ("10 - k", ">")).contradiction() is None


def test_nothing_is_solved_for_pi() -> None:
    assert linear_solution(FIELD, of("k - pi"), PI) is None
    step = imposed(FIELD, Start((), domain()), of("w^2 - pi"))
    assert isinstance(step, Start)
    assert step.equations[0].parameter is None  # kept, though it is linear in pi


# --- points ------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    "conditions",
    [
        [("k - 20", ">"), ("w", ">")],
        [("k - pi^2*w", "="), ("w", ">")],
        [("k - pi", "="), ("w - pi", ">"), ("22/7 - w", ">")],
    ],
)
def test_points_have_no_value_for_pi_and_satisfy_the_conditions(
    conditions: list[tuple[str, str]],
) -> None:
    where = domain(*conditions)
    points = where.sample(4, 1)
    assert points
    for point in points:
        assert tuple(point) == FIELD.free
        assert all(holds_at(c, point) for c in where.conditions)


def test_a_comparison_holds_at_a_point_where_it_is_defined() -> None:
    assert holds_at(Comparison(of("k - pi"), ">"), {"k": Fraction(22, 7), "w": Fraction(0)})
    assert not holds_at(Comparison(of("1/w"), "!="), {"k": Fraction(1), "w": Fraction(0)})
    assert holds_at(Comparison(of("k/pi - 1"), "="), {"k": of("pi"), "w": Fraction(0)})


# --- cases -------------------------------------------------------------------------------------


@each_model
def test_no_case_hangs_on_pi_alone(name: str) -> None:
    response = response_with_pi(name)
    field = response.model.field
    for branch in case_tree(field, response.matrix, response.domain):
        assert all(e.parameter != PI for e in branch.equations)
        for polynomial, *_ in exceptional_elements(
            field, branch.exponential, branch.structures, branch.domain
        ):
            assert field.names_in(polynomial)


# --- fields of values --------------------------------------------------------------------------


@given(st.lists(WHOLE, min_size=1, max_size=4))
def test_elements_at_values_are_those_of_the_balls(coefficients: list[int]) -> None:
    made = sum((c * of("pi*k + w") ** k for k, c in enumerate(coefficients)), of("1/(pi + k)"))
    values = {"k": ROOT_TWO, "w": SurdSum.rational(3)}
    into = value_field(FIELD, [made], values)
    value = element_at(FIELD, made, values, into)
    known = {"k": arb(2).sqrt(), "w": arb(3)}
    assert isinstance(into, FieldWithPi)
    assert into.enclose(value).overlaps(FIELD.enclose_at(made, known))
    assert into.sign(value) == FIELD.sign_at(made, values)
    assert into.sign(value - value) == 0


def test_values_without_pi_have_the_smaller_field() -> None:
    into = value_field(FIELD, [of("k + w")], {"k": ROOT_TWO, "w": SurdSum.rational(3)})
    assert not isinstance(into, FieldWithPi)
    assert into.radicands == (2,)


@given(st.lists(WHOLE, min_size=2, max_size=2), st.integers(1, 9))
def test_what_is_beside_pi_and_roots_has_an_inverse_modulo_a_polynomial(
    coefficients: list[int], amount: int
) -> None:
    into = FieldWithPi((15,))
    root = into.scalar(SurdSum.of({15: Fraction(amount)})) + into.pi
    p = into.polynomial([into.domain.one, root / (into.pi + 1), root**2 + into.pi])
    q = into.polynomial([root * coefficients[0] + 1, into.pi * coefficients[1] - root])
    left = (q * into.inverse_modulo(p, q) - into.polynomial([into.domain.one])).rem(p)
    assert left.is_zero
    with pytest.raises(ZeroDivisionError):
        into.inverse_modulo(p, p * q)
