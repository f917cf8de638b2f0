"""What to test on: every canonical structure of a small order, and random larger ones.

Each system comes with its structure and its e^(At); see `tests.known_systems`.
"""

from __future__ import annotations

import random
from collections.abc import Iterator
from fractions import Fraction
from itertools import combinations_with_replacement
from math import isqrt

from flint import fmpq_poly
from hypothesis import strategies as st

from tests.known_systems import (
    Block,
    Coefficients,
    KnownSystem,
    build,
    highest_first,
    polynomial,
    rational,
)

# Irreducible over Q by Eisenstein's criterion, or as nothing smaller divides them modulo 2.
IRREDUCIBLE: dict[int, tuple[tuple[int, ...], ...]] = {
    3: ((1, 0, -1, -1), (1, 0, -3, 1), (1, 1, -2, -1), (1, 0, 0, -2), (1, 3, 1, 5)),
    4: ((1, 0, 4, 0, 2), (1, 0, -10, 0, 1), (1, 0, 0, -1, -1), (1, 0, 0, 0, 1), (1, 2, 2, 2, 2)),
    5: ((1, 0, 0, 0, -1, -1), (1, 0, 0, -4, 0, 2)),
    6: ((1, 0, 0, 0, 0, -1, -1), (1, 0, 6, 0, 9, 0, 3)),
}
NOT_SQUARE = (2, 3, 5, 6, 7, 8, 10, 12)


def shifted(p: tuple[int, ...] | Coefficients, shift: Fraction | int) -> Coefficients:
    """Return p(x - shift), which is as irreducible as p."""
    moved = polynomial(tuple(map(Fraction, p)))(fmpq_poly([rational(-Fraction(shift)), 1]))
    return highest_first(moved)


# By kind of root: polynomials to take in turn for distinct roots of that kind.
KINDS: dict[str, tuple[Coefficients, ...]] = {
    "rational": tuple(shifted((1, 0), a) for a in (-1, 2, 0, Fraction(-1, 2))),
    "rotation": tuple(shifted((1, 0, w * w), a) for a, w in ((-1, 2), (0, 1))),
    "surd frequency": tuple(shifted((1, 0, q), a) for a, q in ((-1, 3), (0, 2))),
    "surds": tuple(shifted((1, 0, -d), a) for a, d in ((-2, 2), (1, 5))),
    "cubic with a pair": ((shifted(IRREDUCIBLE[3][0], 0)),),
    "cubic of reals": ((shifted(IRREDUCIBLE[3][1], -2)),),
    "even quartic": ((shifted(IRREDUCIBLE[4][0], 0)),),
    "quartic of reals": ((shifted(IRREDUCIBLE[4][1], 0)),),
    "quartic": ((shifted(IRREDUCIBLE[4][2], 0)),),
}


def partitions(n: int, largest: int | None = None) -> Iterator[tuple[int, ...]]:
    """Yield the partitions of n, parts falling."""
    if n == 0:
        yield ()
    for part in range(min(n, largest or n), 0, -1):
        for rest in partitions(n - part, part):
            yield (part, *rest)


def structures(order: int) -> Iterator[tuple[tuple[str, tuple[int, ...]], ...]]:
    """Yield every structure of an order: (kind of root, block sizes) for each distinct root."""
    roots = [
        (kind, sizes)
        for kind, pool in KINDS.items()
        for total in range(1, order // (len(pool[0]) - 1) + 1)
        for sizes in partitions(total)
    ]
    for count in range(1, order + 1):
        for chosen in combinations_with_replacement(roots, count):
            if sum((len(KINDS[kind][0]) - 1) * sum(sizes) for kind, sizes in chosen) == order:
                yield chosen


def every_system(order: int) -> Iterator[tuple[str, KnownSystem]]:
    """Yield (name, system) for every structure, repeated pairs in both shapes of block."""
    for structure in structures(order):
        name = " + ".join(f"{kind} {','.join(map(str, sizes))}" for kind, sizes in structure)
        shapes = [False]
        if any(len(KINDS[kind][0]) > 2 and sizes[0] > 1 for kind, sizes in structure):
            shapes.append(True)
        for coupled in shapes:
            taken: dict[str, int] = {}
            blocks = []
            for kind, sizes in structure:
                p = KINDS[kind][taken.setdefault(kind, 0)]
                taken[kind] += 1
                turning = coupled and kind == "rotation"
                blocks += [Block(p, size, coupled and len(p) > 2, turning) for size in sizes]
            yield (f"{name} coupled" if coupled else name), build(tuple(blocks), mixing(order))


def mixing(order: int) -> list[tuple[int, int, int]]:
    """Return row operations that fill a matrix of this order, the same ones every time."""
    source = random.Random(order)
    return [
        (i, j, source.choice((-1, 1)))
        for i in range(order)
        for j in sorted({(i + 1) % order, source.randrange(order)} - {i})
    ]


# --- random systems ------------------------------------------------------------------------


def rationals(bound: int = 4) -> st.SearchStrategy[Fraction]:
    """Small rationals; integers first, so that examples shrink to them."""
    return st.integers(-bound, bound).map(Fraction) | st.fractions(-bound, bound, max_denominator=6)


@st.composite
def irreducibles(draw: st.DrawFn, degree: int) -> Coefficients:
    """Monic irreducible polynomials over Q of a degree."""
    shift = draw(rationals(2))
    if degree == 1:
        return shifted((1, 0), draw(rationals()))
    if degree == 2:
        w = draw(
            st.integers(1, 4).map(Fraction) | st.fractions(Fraction(1, 6), 4, max_denominator=6)
        )
        q = draw(st.sampled_from(NOT_SQUARE))
        constant = draw(st.sampled_from((w * w, Fraction(q), Fraction(-q), Fraction(-q, 9))))
        return shifted((Fraction(1), Fraction(0), constant), shift)
    if draw(st.booleans()):
        return shifted(draw(st.sampled_from(IRREDUCIBLE[degree])), draw(st.integers(-1, 1)))
    prime = draw(
        st.sampled_from((2, 3))
    )  # Eisenstein: p divides all but the first, p^2 not the last
    middle = draw(st.lists(st.integers(-2, 2), min_size=degree - 1, max_size=degree - 1))
    last = draw(st.sampled_from((-1, 1)))
    return tuple(map(Fraction, (1, *(prime * c for c in middle), prime * last)))


@st.composite
def known_systems(draw: st.DrawFn, largest: int = 6) -> KnownSystem:
    """Systems of order 1 to `largest` with any structure that fits."""
    rest = draw(st.integers(1, largest))
    n = rest
    blocks: list[Block] = []
    while rest:
        degree = draw(st.integers(1, rest))
        size = draw(st.integers(1, rest // degree))
        again = sorted({b.polynomial for b in blocks if b.degree == degree})
        fresh = irreducibles(degree)
        p = draw(st.sampled_from(again) | fresh) if again else draw(fresh)
        coupled = degree > 1 and draw(st.booleans())
        blocks.append(Block(p, size, coupled, coupled and turns(p) and draw(st.booleans())))
        rest -= degree * size
    place = st.integers(0, n - 1)
    step = st.tuples(place, place, st.sampled_from((-1, 1, 2))).filter(lambda s: s[0] != s[1])
    return build(tuple(blocks), draw(st.lists(step, max_size=n + 2)) if n > 1 else [])


def turns(p: Coefficients) -> bool:
    """Whether p has roots a +/- iw with rational w > 0."""
    if len(p) != 3:
        return False
    square = p[2] - p[1] ** 2 / 4
    return square > 0 and all(isqrt(m) ** 2 == m for m in square.as_integer_ratio())
