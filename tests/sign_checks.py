"""Domains and elements to ask for signs, and checks of the arguments: at points of the domain,
and by recombination."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from fractions import Fraction
from functools import reduce
from itertools import chain, product
from operator import mul

from hypothesis import strategies as st

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.algebra.sample import holds_at, value_at
from closedform.algebra.sign_argument import (
    ByCondition,
    ByExpansion,
    ByFactors,
    BySquares,
    Combined,
    SignArgument,
)

Point = Mapping[str, Fraction]


def field_of(names: str) -> ParameterField:
    return ParameterField((), tuple(names.split()))


def positive(names: str) -> ParameterDomain:
    """Return the domain on which every parameter is positive."""
    field = field_of(names)
    return ParameterDomain(field, tuple(Comparison(field.symbol(n), ">") for n in field.parameters))


FIELD = field_of("a b c")
A, B, C = (FIELD.symbol(n) for n in FIELD.parameters)


def term(coefficient: int, exponents: tuple[int, int, int]) -> Scalar:
    a, b, c = exponents
    return coefficient * A**a * B**b * C**c


POLYNOMIALS = st.lists(
    st.builds(
        term,
        st.sampled_from((-4, -2, -1, 1, 2, 3)),
        st.tuples(*[st.sampled_from((0, 0, 1, 2))] * 3),
    ),
    min_size=1,
    max_size=4,
).map(lambda terms: sum(terms, FIELD.domain.zero))
NOT_ZERO = POLYNOMIALS.filter(bool)
ELEMENTS = st.one_of(
    POLYNOMIALS,
    st.builds(lambda p, q: p * q, POLYNOMIALS, POLYNOMIALS),
    st.builds(lambda p, q: p / q, POLYNOMIALS, NOT_ZERO),
    st.builds(lambda p, q: p**2 + q, POLYNOMIALS, POLYNOMIALS),
    st.builds(lambda p, q: p - q**2, POLYNOMIALS, POLYNOMIALS),
)
ASSUMED = st.sampled_from(
    (
        lambda x: [Comparison(x, ">")],
        lambda x: [Comparison(x, ">=")],
        lambda x: [Comparison(-x, ">")],
        lambda x: [Comparison(x, "!=")],
        lambda _: [],
    )
)
RELATIONS = st.sampled_from((">", ">=", "!=", "="))
STATED = st.builds(
    Comparison,
    st.one_of(st.sampled_from((A - B, 2 * B - C + 1, A * B - C**2)), ELEMENTS),
    RELATIONS,
)


@st.composite
def domains(draw: st.DrawFn) -> ParameterDomain:
    assumed = chain.from_iterable(draw(ASSUMED)(x) for x in (A, B, C))
    return ParameterDomain(FIELD, (*assumed, *draw(st.lists(STATED, max_size=2))))


def recombined(field: ParameterField, argument: SignArgument) -> Scalar:
    """Return the element that the parts of an argument make."""
    match argument.reason:
        case ByCondition(comparison, multiple, rest):
            added = rest.element if rest else field.domain.zero
            return multiple.element * comparison.element + added
        case BySquares(squares, rest):
            added = rest.element if rest else field.domain.zero
            return sum((s.weight * s.base**2 for s in squares), added)
        case ByFactors(content, factors):
            return reduce(mul, (a.element**e for a, e in factors), field.scalar(content))
        case ByExpansion(comparison, _, coefficients):
            return sum(
                (a.element * comparison.element**j for j, a in enumerate(coefficients)),
                field.domain.zero,
            )
    return argument.element


def parts_of(argument: SignArgument) -> Iterator[SignArgument]:
    """Yield an argument and all that stand inside it."""
    yield argument
    inside: Sequence[SignArgument | None] = ()
    match argument.reason:
        case ByCondition(_, multiple, rest):
            inside = (multiple, rest)
        case BySquares(_, rest):
            inside = (rest,)
        case ByFactors(_, factors):
            inside = [a for a, _ in factors]
        case ByExpansion(_, _, coefficients):
            inside = coefficients
        case Combined(arguments):
            inside = arguments
    for part in inside:
        if part is not None:
            yield from parts_of(part)


def sign_at(element: Scalar, point: Mapping[str, Fraction]) -> int | None:
    value = value_at(element, point)
    return None if value is None else (value > 0) - (value < 0)


def grid(domain: ParameterDomain, values: Sequence[int] = (-2, 0, 1, 3)) -> list[Point]:
    """Return the points of the domain on a grid, those on its borders too."""
    names = domain.field.parameters
    points = [
        {n: Fraction(v) for n, v in zip(names, p, strict=True)}
        for p in product(values, repeat=len(names))
    ]
    return [p for p in points if all(holds_at(c, p) for c in domain.conditions)]


def is_never_wrong(argument: SignArgument, points: Sequence[Point]) -> bool:
    """Whether an argument and all its parts hold at the points."""
    return all(
        sign_at(part.element, point) in {None, *part.values}
        for part in parts_of(argument)
        for point in points
    )
