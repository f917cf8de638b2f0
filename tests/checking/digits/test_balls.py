"""Written formulas become balls that contain their values, and nothing else does."""

from __future__ import annotations

from fractions import Fraction

import pytest
from flint import acb, arb, ctx, fmpq
from hypothesis import given
from hypothesis import strategies as st

from closedform.checking.balls.enclosing import (
    NoValueError,
    Quantities,
    SizeMismatchError,
    UnknownNameError,
    enclose_matrix,
    enclose_written,
)
from closedform.notation.written.tree import (
    EULER,
    IMAGINARY,
    INFINITY,
    PI,
    Apply,
    Array,
    Constant,
    Evaluated,
    Identity,
    Jet,
    Limit,
    Literal,
    Negation,
    Piecewise,
    Power,
    Product,
    Quotient,
    Range,
    Sum,
    SumOver,
    Symbol,
    Written,
)

X = Symbol("x")
HALF = Quotient(Literal(Fraction(1)), Literal(Fraction(2)))


def number(value: int | str) -> Literal:
    return Literal(Fraction(value))


def matrix(*rows: tuple[int | Written, ...]) -> Array:
    return Array(tuple(tuple(number(e) if isinstance(e, int) else e for e in r) for r in rows))


def whole(grid: list[list[acb]]) -> list[list[int]]:
    return [[int(e.unique_fmpz()) for e in row] for row in grid]


def call(function: str, *arguments: Written) -> Apply:
    return Apply(function, arguments)


@pytest.mark.parametrize(
    ("tree", "square"),
    [
        (Sum((call("exp", X), Negation(Power(EULER, X)))), 0),
        (Power(call("sin", X), number(2)), None),
        (Power(Negation(number(4)), HALF), -4),
        (Product((number(2), call("sqrt", number(3)))), 12),
        (call("abs", Sum((number(3), Product((number(4), IMAGINARY))))), 25),
        (call("atan2", number(0), Negation(number(1))), None),
        (call("factorial", number(4)), 576),
        (call("min", number(3), number(2), number(7)), 4),
        (call("max", number(3), number(2)), 9),
        (call("re", Sum((number(3), IMAGINARY))), 9),
        (call("im", Sum((number(3), IMAGINARY))), 1),
        (call("ln", EULER), 1),
        (call("log10", number(100)), 4),
        (call("sign", Negation(number(3))), 1),
        (call("step", number(0)), 1),
        (call("step", Negation(number(1))), 0),
        (call("delta", number(3)), 0),
        (Evaluated(Power(X, number(2)), "x", number(3), number(1)), 64),
        (SumOver(Power(X, number(2)), "x", number(1), number(4)), 900),
    ],
)
def test_formulas_have_their_values(tree: Written, square: int | None) -> None:
    value = enclose_written(tree, {"x": acb(arb(3) / 7)})
    assert value.is_finite()
    if square is not None:
        assert (value * value).unique_fmpz() == square


def test_the_angle_of_a_point_knows_its_quadrant() -> None:
    tree = call("atan2", number(0), Negation(number(1)))
    assert enclose_written(Sum((tree, Negation(PI))), {}).contains(0)


@given(st.fractions(-9, 9, max_denominator=50), st.fractions(-9, 9, max_denominator=50))
def test_arithmetic_is_that_of_fractions(a: Fraction, b: Fraction) -> None:
    tree = Sum(
        (Product((X, X)), Negation(Quotient(X, Sum((number(1), Power(Symbol("y"), number(2)))))))
    )
    environment = {n: arb(fmpq(v.numerator, v.denominator)) for n, v in (("x", a), ("y", b))}
    exact = a * a - a / (1 + b * b)
    assert enclose_written(tree, environment).contains(
        arb(fmpq(exact.numerator, exact.denominator))
    )


def test_a_step_at_a_ball_around_its_jump_is_undetermined() -> None:
    value = enclose_written(call("step", X), {"x": arb(0, 1)})
    assert value.contains(0)
    assert value.contains(1)
    assert not value.contains(2)


def test_a_division_by_zero_is_not_finite() -> None:
    assert not enclose_written(Quotient(number(1), number(0)), {}).is_finite()


def test_pieces_apply_in_their_ranges() -> None:
    below = (Range((X, number(2)), ("<",)),)
    tree = Piecewise(((number(5), below), (number(7), None)))
    assert [int(enclose_written(tree, {"x": acb(k)}).unique_fmpz()) for k in (1, 2)] == [5, 7]
    both = enclose_written(tree, {"x": acb(arb(2, 0.5))})
    assert both.contains(5)
    assert both.contains(7)


def test_jets_and_quantities_are_looked_up() -> None:
    known = Quantities((("w", Sum((Symbol("r"), X))), ("r", None)), lambda: {"r": arb(2).sqrt()})
    environment = known.environment({"x": acb(1)})
    assert (enclose_written(Symbol("w"), environment) - 1).real.contains(arb(2).sqrt().mid())
    assert enclose_written(Jet("x", 1), {}, {Jet("x", 1): arb(4)}) == 4
    assert enclose_written(Jet("x", 1), {}, lambda jet: arb(jet.order)) == 1


@pytest.mark.parametrize("tree", [X, Jet("x", 2)])
def test_what_nothing_is_known_of_is_named(tree: Written) -> None:
    with pytest.raises(UnknownNameError, match="x"):
        enclose_written(tree, {})


@pytest.mark.parametrize(
    "tree",
    [
        INFINITY,
        Limit(X, "x", INFINITY),
        matrix((1, 2), (3, 4)),
        Identity(),
        call("step", IMAGINARY),
        call("atan2", X),
        SumOver(X, "x", number(0), Constant("pi")),
    ],
)
def test_what_is_no_number_is_refused(tree: Written) -> None:
    with pytest.raises(NoValueError, match="no value"):
        enclose_written(tree, {"x": acb(1)})


A = matrix((0, 1), (-2, -3))


@pytest.mark.parametrize(
    ("tree", "rows"),
    [
        (Product((A, matrix((1,), (1,)))), [[1], [-5]]),
        (Product((matrix((1, 1)), A)), [[-2, -2]]),
        (Product((number(2), A)), [[0, 2], [-4, -6]]),
        (Sum((A, Negation(Identity()))), [[-1, 1], [-2, -4]]),
        (Sum((Product((X, Identity(2))), A)), [[3, 1], [-2, 0]]),
        (Sum((Product((X, Identity())), A)), [[3, 1], [-2, 0]]),
        (Power(A, number(2)), [[-2, -3], [6, 7]]),
        (Power(A, number(0)), [[1, 0], [0, 1]]),
        (Product((Power(A, Negation(number(1))), A)), [[1, 0], [0, 1]]),
        (call("transpose", A), [[0, -2], [1, -3]]),
        (call("adj", A), [[-3, -1], [2, 0]]),
        (call("diag", number(7), A), [[7, 0, 0], [0, 0, 1], [0, -2, -3]]),
        (matrix((A, 0), (0, 5)), [[0, 1, 0], [-2, -3, 0], [0, 0, 5]]),
        (
            matrix((A, Identity()), (0, A)),
            [[0, 1, 1, 0], [-2, -3, 0, 1], [0, 0, 0, 1], [0, 0, -2, -3]],
        ),
        (Power(EULER, Product((number(0), A))), [[1, 0], [0, 1]]),
        (Product((matrix((1, 2)), matrix((3,), (4,)), A)), [[0, 11], [-22, -33]]),
        (Quotient(A, HALF), [[0, 2], [-4, -6]]),
    ],
)
def test_matrices_are_joined(tree: Written, rows: list[list[int]]) -> None:
    assert whole(enclose_matrix(tree, {"x": acb(3)})) == rows


@pytest.mark.parametrize(("function", "value"), [("det", 2), ("trace", -3)])
def test_numbers_of_a_matrix(function: str, value: int) -> None:
    assert enclose_written(call(function, A), {}).unique_fmpz() == value


def test_names_may_stand_for_matrices() -> None:
    grid = enclose_matrix(
        Product((Symbol("A"), Symbol("A"))), {"A": [[acb(0), acb(1)], [acb(1), acb(0)]]}
    )
    assert whole(grid) == [[1, 0], [0, 1]]


@pytest.mark.parametrize(
    ("tree", "left", "right"),
    [
        (Product((A, matrix((1, 2, 3)))), (2, 2), (1, 3)),
        (Sum((A, matrix((1,), (2,)))), (2, 2), (2, 1)),
        (Sum((A, number(3))), (2, 2), (1, 1)),
        (matrix((A, A), (0, matrix((1,), (2,)))), (2, 2), (2, 1)),
        (call("diag", matrix((1, 2))), (1, 2), (1, 1)),
        (Array(((number(1),), (number(1), number(2)))), (1, 2), (1, 1)),
    ],
)
def test_sizes_that_do_not_fit_are_named(
    tree: Written, left: tuple[int, int], right: tuple[int, int]
) -> None:
    with pytest.raises(SizeMismatchError) as caught:
        enclose_matrix(tree, {})
    assert (caught.value.left, caught.value.right) == (left, right)
    assert f"{left[0]}×{left[1]}" in str(caught.value)


def test_a_finer_precision_gives_a_smaller_ball() -> None:
    widths = []
    for bits in (64, 256):
        with ctx.workprec(bits):
            widths.append(enclose_written(call("exp", HALF), {}).rad())
    assert widths[1] < widths[0]
