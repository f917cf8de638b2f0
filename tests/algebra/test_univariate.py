"""Signs in one parameter are those at its points, and nothing that may be taken is left out."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.sample import holds_at
from closedform.algebra.sign_argument import ByCells, ByExpansion
from closedform.algebra.univariate import (
    admissible_cells,
    needed_for_none,
    sign_by_cells,
    simplest_between,
)
from tests.sign_checks import field_of, is_never_wrong, sign_at

FIELD = field_of("h k")
H, K = (FIELD.symbol(n) for n in FIELD.parameters)
ZERO = FIELD.domain.zero
GRID = [Fraction(n, d) for d in (1, 2, 3, 7) for n in range(-4 * d, 4 * d + 1)]

POLYNOMIALS = st.lists(st.integers(-3, 3), min_size=2, max_size=5).map(
    lambda c: sum((n * H**k for k, n in enumerate(c)), ZERO)
)
LINEAR = st.builds(lambda n, d: d * H - n, st.integers(-4, 4), st.integers(1, 3))
ELEMENTS = st.one_of(
    POLYNOMIALS,
    st.builds(lambda p, q: p * q, POLYNOMIALS, LINEAR),
    st.builds(lambda p, q: p / q, POLYNOMIALS, st.one_of(LINEAR, POLYNOMIALS.filter(bool))),
).filter(lambda e: FIELD.constant(e) is None)
RELATIONS = st.sampled_from((">", ">=", "!=", "="))
COMPARISONS = st.builds(Comparison, ELEMENTS, RELATIONS)


def domain_of(*comparisons: tuple[Scalar, str]) -> ParameterDomain:
    return ParameterDomain(FIELD, tuple(Comparison(e, r) for e, r in comparisons))


def at(value: Fraction) -> dict[str, Fraction]:
    return {"h": value, "k": Fraction(1)}


@given(ELEMENTS, st.lists(COMPARISONS, max_size=3))
def test_the_signs_are_all_that_an_element_takes_and_no_more(
    element: Scalar, comparisons: list[Comparison]
) -> None:
    found = sign_by_cells(FIELD, "h", element, comparisons)
    points = [at(v) for v in GRID if all(holds_at(c, at(v)) for c in comparisons)]
    taken = {sign_at(element, p) for p in points} - {None}
    if found is None:
        assert not taken
        return
    values, reason = found
    assert taken <= values
    assert set(reason.comparisons) <= set(comparisons)
    for sign in {-1, 0, 1} - values:  # a sign that is left out contradicts the reason
        wanted = Comparison(element if sign >= 0 else -element, ">" if sign else "=")
        assert admissible_cells(FIELD, [*reason.comparisons, wanted]) == ()
    for sign in values:
        wanted = Comparison(element if sign >= 0 else -element, ">" if sign else "=")
        assert admissible_cells(FIELD, [*comparisons, wanted])


@given(st.lists(COMPARISONS, max_size=3))
def test_the_cells_hold_every_admissible_point_and_only_such(
    comparisons: list[Comparison],
) -> None:
    cells = admissible_cells(FIELD, comparisons)
    for value in GRID:
        if all(holds_at(c, at(value)) for c in comparisons):
            assert any(
                (cell.low is None or cell.low <= value)
                and (cell.high is None or value <= cell.high)
                for cell in cells
            )
    for cell in cells:
        if cell.kind == "interval":
            low = (
                cell.low
                if cell.low is not None
                else Fraction(-99)
                if cell.high is None
                else cell.high - 1
            )
            high = cell.high if cell.high is not None else low + 1
            value = simplest_between(low, high)
        elif cell.low == cell.high:
            value = cell.low
        else:
            continue  # an irrational root
        assert all(holds_at(c, at(value)) for c in comparisons)


@given(st.lists(COMPARISONS, max_size=4))
def test_what_is_needed_for_none_is_empty_and_no_part_of_it_is(
    comparisons: list[Comparison],
) -> None:
    needed = needed_for_none(FIELD, comparisons)
    if needed is None:
        assert admissible_cells(FIELD, comparisons)
        return
    chosen = [comparisons[k] for k in needed]
    assert not any(all(holds_at(c, at(v)) for c in chosen) for v in GRID)
    for place in range(len(chosen)):
        assert admissible_cells(FIELD, chosen[:place] + chosen[place + 1 :])


@given(st.lists(COMPARISONS, max_size=3), COMPARISONS)
def test_a_domain_in_one_parameter_is_empty_exactly_if_a_contradiction_is_found(
    comparisons: list[Comparison], other: Comparison
) -> None:
    domain = ParameterDomain(FIELD, tuple(comparisons))
    empty = not admissible_cells(FIELD, comparisons)
    assert (domain.contradiction() is not None) == empty
    joined = not admissible_cells(FIELD, [*comparisons, other])
    assert (domain.excludes(other) is not None) == joined


JOINT = st.sampled_from(
    (H * K - 1, 108 * H * K - 1, (H - 1) * K - H**2, H * (H * K + K - 2), K - H**2 + 2, 2 * H - 3)
)
IN_BOTH = st.lists(
    st.tuples(st.integers(-2, 2), st.integers(0, 2), st.integers(0, 2)), min_size=1, max_size=3
).map(lambda terms: sum((c * H**i * K**j for c, i, j in terms), ZERO))
IN_K = st.lists(st.integers(-3, 3), min_size=2, max_size=4).map(
    lambda c: sum((n * K**j for j, n in enumerate(c)), ZERO)
)


@given(
    JOINT,
    st.lists(st.builds(Comparison, st.one_of(IN_BOTH, IN_K, ELEMENTS), RELATIONS), max_size=2),
    st.one_of(IN_BOTH, IN_K, st.builds(lambda p, q: p / q, IN_BOTH, IN_BOTH.filter(bool))),
)
def test_no_sign_is_wrong_after_an_equation(
    equation: Scalar, comparisons: list[Comparison], element: Scalar
) -> None:
    domain = ParameterDomain(FIELD, (Comparison(equation, "="), *comparisons))
    points = []
    for value in GRID:
        put = FIELD.substituted(equation, {"h": FIELD.scalar(value)})
        slope = FIELD.constant(FIELD.derivative(put, "k"))
        free = FIELD.constant(FIELD.substituted(put, {"k": ZERO}))
        points += [{"h": value, "k": k} for k in ([-free / slope] if slope else GRID[:9])]
    held = [p for p in points if all(holds_at(c, p) for c in domain.conditions)]
    assert is_never_wrong(domain.sign_of(element), held)
    if held:
        assert domain.contradiction() is None


@given(st.fractions(max_denominator=50), st.fractions(max_denominator=50))
def test_the_simplest_fraction_lies_between_and_no_simpler_one_does(
    first: Fraction, second: Fraction
) -> None:
    low, high = sorted((first, second))
    if low == high:
        return
    found = simplest_between(low, high)
    assert low < found < high
    for below in range(1, found.denominator):
        assert low * below // 1 + 1 >= high * below


@pytest.mark.parametrize(
    ("conditions", "element", "sign"),
    [
        ([(108 * H - 1, "=")], 432 * H**2 - 8 * H, "negative"),
        ([(108 * H * K - 1, "="), (K - 3, ">")], 432 * H**2 - 8 * H, "negative"),
        ([(2 * H - H**2, ">")], H**4 - 8 * H, "negative"),
        ([(H - 54 * H**2, ">")], H, "positive"),
        ([(H - 54 * H**2, ">")], 1 - 54 * H, "positive"),
        ([(K**2 - 4 * K, ">="), (K, ">")], K - 4, "nonnegative"),
        ([(K**2 - 4 * K, ">=")], K**2 - 2 * K, "nonnegative"),
        ([(K**2 - 4 * K, ">=")], K - 2, "nonzero"),
        ([(H**2 - 2, "="), (H, ">")], H**3 - 2 * H, "zero"),
        ([(H**2 - 2, "="), (H, ">")], 7 - 5 * H, "negative"),
        ([(H**2 - 2, "="), (H, ">")], 17 - 12 * H, "positive"),
        ([(H**2 - 2, ">="), (3 - H**2, ">=")], H**5 + H, "nonzero"),
        ([(K, ">"), (K * (H**2 - H), ">"), (H, ">")], H**3 - 1, "positive"),
        ([(K * (H - 2), "!="), (H - 2, ">=")], H**2 - 4, "positive"),
        ([(H * K - 1, "="), (K - 2, ">")], 1 - 2 * H, "positive"),
        ([(H * K - 1, "="), (K**3 - 3, ">"), (K, ">")], 10 - 14 * H, "positive"),
        ([], H**4 + H + 1, "positive"),
        ([], H**4 + H - 1, "unknown"),
        ([(H**2 - 3 * H + 1, ">")], K, "unknown"),
    ],
)
def test_signs_in_one_parameter(
    conditions: list[tuple[Scalar, str]], element: Scalar, sign: str
) -> None:
    assert domain_of(*conditions).sign_of(element).sign == sign


def test_a_sign_is_told_from_the_conditions_that_it_needs() -> None:
    domain = domain_of((3 - H, ">"), (H - 1, ">"), (H + 50, "!="))
    argument = domain.sign_of(H**3 - 4 * H**2 + 3 * H - 1)
    assert argument.sign == "negative"
    assert argument.reason == ByCells("h", (Comparison(3 - H, ">"),), "below")
    between = sign_by_cells(FIELD, "h", H**2 - 4 * H + 2, domain.conditions)
    assert between == ({-1}, ByCells("h", domain.conditions[:2], "between"))


def test_an_equation_is_put_in_once() -> None:
    domain = domain_of((108 * H * K - 1, "="), (K**3 - 3, ">"), (K, ">"))
    reason = domain.sign_of(1 - 108 * H).reason
    assert isinstance(reason, ByExpansion)
    (put,) = reason.coefficients
    assert put.element == (K - 1) / K
    assert isinstance(put.reason, ByCells)


@pytest.mark.parametrize(
    ("conditions", "places"),
    [
        ([(H**4 - 8 * H, ">"), (2 * H - H**2, ">")], (0, 1)),
        ([(H - 1, "="), (2 * H - 2, ">=")], None),
        ([(H - 1, "="), (2 * H - 2, ">")], (0, 1)),
        ([(K, ">"), (H**2 - 2, "="), (H - 1, ">"), (7 - 5 * H, ">")], (1, 2, 3)),
        ([(H, ">"), (-H, ">"), (K, ">"), (-K, ">")], (0, 1)),
        ([(H * K - 1, "="), (K, ">"), (K**2 - 3, ">"), (H**2 - 1, ">")], (0, 2, 3)),
        ([(H**2 + 1, "=")], (0,)),
    ],
)
def test_contradictions_in_one_parameter(
    conditions: list[tuple[Scalar, str]], places: tuple[int, ...] | None
) -> None:
    domain = domain_of(*conditions)
    found = domain.contradiction()
    assert found == (None if places is None else tuple(domain.conditions[k] for k in places))
    assert (domain.excludes(Comparison(K - 17, "!=")) is None) == (places is None)


def test_a_condition_that_is_said_twice_contradicts_once() -> None:
    never = (H**4 + 2 * H**3 + 2, "=")
    domain = domain_of((H, ">"), never, never)
    assert domain.contradiction() == domain.conditions[1:2]
    assert domain.excludes(Comparison(H, ">"))


def test_what_is_defined_nowhere_is_excluded() -> None:
    domain = domain_of((H - 1, "="))
    argument = domain.excludes(Comparison(H / (H - 1), ">="))
    assert argument is not None
    assert (argument.element, argument.sign) == (H - 1, "zero")


def test_too_high_a_degree_is_left_alone() -> None:
    assert sign_by_cells(FIELD, "h", H**41 - 2, []) is None
    assert sign_by_cells(FIELD, "h", H**40 - 2, []) is not None
