"""Generated models have the spectrum and the exceptional sets that they are said to have."""

from __future__ import annotations

from fractions import Fraction

from flint import fmpq, fmpq_mat, fmpq_poly
from hypothesis import given

from tests.parametric.generated import (
    GeneratedModel,
    build,
    chain,
    companion,
    generated_models,
    points,
    rotation,
)
from tests.parametric.plain_reader import exact_value, names_in, parse


def characteristic(model: GeneratedModel, values: dict[str, Fraction]) -> fmpq_poly:
    rows = [[rational(x) for x in row] for row in model.matrix_at(values)]
    return fmpq_mat(rows).charpoly()


def rational(number: Fraction) -> fmpq:
    return fmpq(number.numerator, number.denominator)


def stated(model: GeneratedModel, values: dict[str, Fraction]) -> fmpq_poly:
    """The product of the factors that the blocks are made from."""

    def at(text: str) -> fmpq:
        return rational(exact_value(parse(text), values))

    found = fmpq_poly([1])
    for block in model.blocks:
        for text in block.linear:
            found *= fmpq_poly([-at(text), 1])
        if block.quadratic:
            found *= fmpq_poly([at(block.quadratic[1]), at(block.quadratic[0]), 1])
    return found


def distinct(p: fmpq_poly) -> int:
    """Return the number of distinct roots."""
    return int(p.degree() - p.gcd(p.derivative()).degree())


def assert_is_as_stated(model: GeneratedModel) -> None:
    generic = None
    for met, values in points(model, each=2):
        found = characteristic(model, values)
        assert found == stated(model, values)
        if not met:
            generic = generic or distinct(found)
            assert distinct(found) == generic
    for met, values in points(model):
        if met and generic is not None:
            assert distinct(characteristic(model, values)) < generic


@given(generated_models())
def test_roots_meet_where_it_is_said_and_nowhere_else(model: GeneratedModel) -> None:
    assert_is_as_stated(model)
    assert model.parameters
    used = frozenset().union(*(names_in(parse(text)) for row in model.matrix for text in row))
    assert used <= {name for name, _ in model.parameters}


def test_the_sets_of_small_models_are_the_expected_ones() -> None:
    positive = dict.fromkeys("abcw", "positive")
    three = build((chain(("-a", "-b", "-c"), ("1", "1")),), (), positive)
    assert [met for met, _ in points(three)] == [
        ("(-a) - (-b)", "(-a) - (-c)", "(-b) - (-c)"),
        ("(-a) - (-b)",),
        ("(-a) - (-c)",),
        ("(-b) - (-c)",),
        (),
    ]
    oscillator = build((companion((), ("2*b", "w")),), (), positive)
    assert oscillator.meetings == ("(2*b)^2 - 4*(w)",)
    assert oscillator.matrix == (("0", "1"), ("-(w)", "-(2*b)"))
    turning = build((rotation("-a", "w"), chain(("-1",), ())), ((0, 2, 1),), positive)
    assert turning.parameters == (("a", "positive"), ("w", "positive"))
    assert [met for met, _ in points(turning)] == [()]
    assert_is_as_stated(three)
    assert_is_as_stated(turning)
