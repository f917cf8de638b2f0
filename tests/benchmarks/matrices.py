"""The matrices that are timed, one or more of each kind, their order in the name.

An entry is a rational number, or (r, d) for r sqrt(d).
"""

from __future__ import annotations

import random
from collections.abc import Callable, Sequence
from fractions import Fraction

Entry = Fraction | tuple[Fraction, int]
Rows = list[list[Entry]]
Rational = Fraction | int


def plain(rows: Sequence[Sequence[Rational]]) -> Rows:
    return [[Fraction(entry) for entry in row] for row in rows]


def jordan(*blocks: tuple[Rational, int]) -> list[list[Fraction]]:
    """Return a block diagonal matrix of Jordan blocks (eigenvalue, size)."""
    n = sum(size for _, size in blocks)
    rows = [[Fraction(0)] * n for _ in range(n)]
    at = 0
    for value, size in blocks:
        for i in range(at, at + size):
            rows[i][i] = Fraction(value)
            if i + 1 < at + size:
                rows[i][i + 1] = Fraction(1)
        at += size
    return rows


def companion(*lower: Rational) -> list[list[Fraction]]:
    """Return the companion matrix of s^n + ... + lower[1] s + lower[0]."""
    n = len(lower)
    rows = [[Fraction(int(j == i + 1)) for j in range(n)] for i in range(n)]
    rows[-1] = [-Fraction(c) for c in lower]
    return rows


def side_by_side(*parts: list[list[Fraction]]) -> list[list[Fraction]]:
    """Return the block diagonal matrix of the parts."""
    n = sum(map(len, parts))
    rows, at = [], 0
    for part in parts:
        width = len(part)
        rows += [[Fraction(0)] * at + list(row) + [Fraction(0)] * (n - at - width) for row in part]
        at += width
    return rows


def mixed(rows: list[list[Fraction]], seed: int) -> Rows:
    """Return P B P^(-1) for a seeded product P of row operations: dense, same structure."""
    source = random.Random(seed)
    n = len(rows)
    rows = [list(row) for row in rows]
    for _ in range(2 * n):
        i, j = source.sample(range(n), 2)
        c = source.choice((-1, 1))
        rows[i] = [x + c * y for x, y in zip(rows[i], rows[j], strict=True)]
        for row in rows:
            row[j] -= c * row[i]
    return plain(rows)


def dense(n: int, seed: int) -> Rows:
    """Return an integer matrix with seeded entries from -9 to 9."""
    source = random.Random(seed)
    return [[Fraction(source.randint(-9, 9)) for _ in range(n)] for _ in range(n)]


def ladder(n: int) -> Rows:
    """Return a chain of n equal exchanges, fixed at one end and open at the other."""
    rows = [[Fraction(0)] * n for _ in range(n)]
    for i in range(n):
        rows[i][i] = Fraction(-1 if i + 1 == n else -2)
        for j in {i - 1, i + 1} & set(range(n)):
            rows[i][j] = Fraction(1)
    return plain(rows)


def damped_masses() -> Rows:
    """Return two masses with damping that is not proportional: an irreducible quartic."""
    return plain(
        [
            [0, 0, 1, 0],
            [0, 0, 0, 1],
            [-300, 100, Fraction(-2, 5), Fraction(1, 10)],
            [200, -200, Fraction(1, 5), Fraction(-1, 5)],
        ]
    )


def weighted_masses() -> Rows:
    """Return a symmetric stiffness in mass-weighted coordinates, over Q(sqrt 2)."""
    half: Entry = (Fraction(1, 2), 2)
    zero, one, minus = Fraction(0), Fraction(1), Fraction(-1)
    return [
        [zero, zero, one, zero],
        [zero, zero, zero, one],
        [minus, half, zero, zero],
        [half, minus, zero, zero],
    ]


# name: (the matrix, whether it is in the smoke run)
MATRICES: dict[str, tuple[Callable[[], Rows], bool]] = {
    "diagonal_4": (lambda: plain(jordan((-1, 1), (-2, 1), (3, 1), (Fraction(1, 2), 1))), True),
    "distinct_rational_4": (lambda: mixed(jordan((-1, 1), (-2, 1), (-3, 1), (-5, 1)), 1), True),
    "surds_4": (lambda: mixed(side_by_side(companion(-2, 2), companion(-5, 0)), 2), True),
    "conjugate_pairs_4": (lambda: mixed(side_by_side(companion(5, 2), companion(9, 0)), 3), True),
    "defective_4": (lambda: mixed(jordan((-1, 3), (-2, 1)), 4), True),
    "several_chains_6": (lambda: mixed(jordan((-1, 3), (-1, 2), (-1, 1)), 5), True),
    "defective_pairs_4": (lambda: mixed(companion(25, 20, 14, 4), 6), True),
    "nilpotent_5": (lambda: mixed(jordan((0, 3), (0, 2)), 7), True),
    "even_polynomial_4": (lambda: mixed(companion(2, 0, 4, 0), 8), True),
    "irreducible_cubic_3": (lambda: mixed(companion(1, -3, 0), 9), True),
    "irreducible_quartic_4": (lambda: mixed(companion(-1, -1, 0, 0), 10), False),
    "entries_with_roots_4": (weighted_masses, True),
    "two_masses_lightly_damped_4": (damped_masses, True),
    "dense_4": (lambda: dense(4, 11), False),
    "dense_6": (lambda: dense(6, 12), False),
    "dense_8": (lambda: dense(8, 13), False),
    "dense_10": (lambda: dense(10, 14), False),
    "dense_20": (lambda: dense(20, 15), False),
    "sparse_ladder_50": (lambda: ladder(50), False),
}
