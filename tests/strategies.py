"""Matrices whose canonical structure is known before anybody asks for it.

A = P B P^(-1) is built from blocks B of known minimal polynomial and a unimodular P, so
spectrum, block sizes and e^(At) are known by construction and owe nothing to the package.

A block of size k at an irreducible p of degree d is (kd x kd) with minimal polynomial p^k:

- linked (hypercompanion): multiplication by x in Q[x]/(p^k) on the basis p^i x^j.  For
  d = 1 this is the Jordan block.
- coupled: cells on the diagonal and identities right of them, the shape of a real Jordan
  form; the cell is the companion matrix of p, or [[a, -w], [w, a]] for roots a +/- iw.

Source:  R. A. Horn and C. R. Johnson, Matrix Analysis (Cambridge, 2nd ed. 2013), 3.3-3.4;
         N. Jacobson, Lectures in Abstract Algebra II (1953), chapter III, for linked blocks.
"""

from __future__ import annotations

import random
from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from itertools import combinations_with_replacement
from math import isqrt

from flint import acb, acb_mat, acb_poly, arb, ctx, fmpq, fmpq_mat, fmpq_poly
from hypothesis import strategies as st

Matrix = tuple[tuple[Fraction, ...], ...]
Coefficients = tuple[Fraction, ...]

BITS = 600  # of the balls in `KnownSystem.transition`: Vandermonde matrices eat some of them

# Irreducible over Q by Eisenstein's criterion, or as nothing smaller divides them modulo 2.
IRREDUCIBLE: dict[int, tuple[tuple[int, ...], ...]] = {
    3: ((1, 0, -1, -1), (1, 0, -3, 1), (1, 1, -2, -1), (1, 0, 0, -2), (1, 3, 1, 5)),
    4: ((1, 0, 4, 0, 2), (1, 0, -10, 0, 1), (1, 0, 0, -1, -1), (1, 0, 0, 0, 1), (1, 2, 2, 2, 2)),
    5: ((1, 0, 0, 0, -1, -1), (1, 0, 0, -4, 0, 2)),
    6: ((1, 0, 0, 0, 0, -1, -1), (1, 0, 6, 0, 9, 0, 3)),
}
NOT_SQUARE = (2, 3, 5, 6, 7, 8, 10, 12)


@dataclass(frozen=True, slots=True)
class Block:
    """One block: `polynomial` is monic and irreducible, highest power first."""

    polynomial: Coefficients
    size: int
    coupled: bool = False
    rotation: bool = False

    @property
    def degree(self) -> int:
        return len(self.polynomial) - 1

    @property
    def order(self) -> int:
        return self.degree * self.size


@dataclass(frozen=True, slots=True)
class KnownSystem:
    """A matrix with its structure: A = P B P^(-1), B block diagonal with `blocks`."""

    matrix: Matrix
    blocks: tuple[Block, ...]
    similarity: Matrix

    @property
    def order(self) -> int:
        return len(self.matrix)

    @property
    def sizes(self) -> dict[Coefficients, tuple[int, ...]]:
        """The block sizes per root, largest first, by irreducible polynomial."""
        found: dict[Coefficients, tuple[int, ...]] = {}
        for block in self.blocks:
            sizes = (*found.get(block.polynomial, ()), block.size)
            found[block.polynomial] = tuple(sorted(sizes, reverse=True))
        return found

    @property
    def characteristic(self) -> Coefficients:
        product = fmpq_poly([1])
        for block in self.blocks:
            product *= polynomial(block.polynomial) ** block.size
        return highest_first(product)

    def transition(self, time: Fraction) -> list[list[arb]]:
        """Return balls around e^(At), from P and the blocks alone."""
        with ctx.workprec(BITS):
            p = fmpq_matrix(self.similarity)
            inner = block_diagonal([block_exponential(block, time) for block in self.blocks])
            outer = acb_mat(p) * acb_mat(inner) * acb_mat(p.inv())
            return [[entry.real for entry in row] for row in outer.tolist()]


def rational(value: Fraction | int) -> fmpq:
    value = Fraction(value)
    return fmpq(value.numerator, value.denominator)


def fraction(value: fmpq) -> Fraction:
    return Fraction(int(value.p), int(value.q))


def polynomial(coefficients: Coefficients) -> fmpq_poly:
    return fmpq_poly([rational(c) for c in reversed(coefficients)])


def highest_first(p: fmpq_poly) -> Coefficients:
    return tuple(fraction(c) for c in reversed(p.coeffs()))


def fmpq_matrix(rows: Matrix) -> fmpq_mat:
    return fmpq_mat([[rational(entry) for entry in row] for row in rows])


def fractions(matrix: fmpq_mat) -> Matrix:
    return tuple(tuple(fraction(entry) for entry in row) for row in matrix.tolist())


def polynomial_at(p: fmpq_poly, matrix: fmpq_mat) -> fmpq_mat:
    """Return p(A) by Horner's rule."""
    n = matrix.nrows()
    unit = fmpq_mat([[int(i == j) for j in range(n)] for i in range(n)])
    total = unit * 0
    for c in reversed(p.coeffs()):
        total = total * matrix + unit * c
    return total


def block_matrix(block: Block) -> fmpq_mat:
    """Return the block itself, exactly."""
    if not block.coupled:
        basis = linked_basis(block)
        modulus = polynomial(block.polynomial) ** block.size
        return multiplication_by_x(basis, modulus)
    d = block.degree
    cell = cell_matrix(block).tolist()
    rows = [[fmpq(0)] * block.order for _ in range(block.order)]
    for k in range(block.size):
        for i in range(d):
            rows[k * d + i][k * d : k * d + d] = cell[i]
            if k + 1 < block.size:
                rows[k * d + i][k * d + d + i] = fmpq(1)
    return fmpq_mat(rows)


def cell_matrix(block: Block) -> fmpq_mat:
    """Return the d x d cell of a coupled block."""
    if block.rotation:
        shift, frequency = rotation(block.polynomial)
        return fmpq_mat([[shift, -frequency], [frequency, shift]])
    return multiplication_by_x(powers(block.degree), polynomial(block.polynomial))


def powers(count: int) -> list[fmpq_poly]:
    """Return 1, x, ..., x^(count - 1)."""
    return [fmpq_poly([0] * j + [1]) for j in range(count)]


def rotation(p: Coefficients) -> tuple[fmpq, fmpq]:
    """Return (a, w) of the roots a +/- iw of a quadratic with rational w > 0."""
    shift = -p[1] / 2
    square = p[2] - shift * shift
    root = Fraction(isqrt(square.numerator), isqrt(square.denominator))
    assert root * root == square, "the frequency is not rational"
    return rational(shift), rational(root)


def linked_basis(block: Block) -> list[fmpq_poly]:
    p, x = polynomial(block.polynomial), fmpq_poly([0, 1])
    return [p**i * x**j for i in range(block.size) for j in range(block.degree)]


def multiplication_by_x(basis: list[fmpq_poly], modulus: fmpq_poly) -> fmpq_mat:
    """Return M with M b = x b modulo the modulus, b the column of basis polynomials.

    The basis has one polynomial of each degree 0, 1, ..., so coordinates are read off
    from the top.
    """
    rows = []
    for element in basis:
        rest = (element * fmpq_poly([0, 1])) % modulus
        row = [fmpq(0)] * len(basis)
        for k in reversed(range(len(basis))):
            if rest.degree() == k:
                row[k] = rest[k] / basis[k][k]
                rest -= basis[k] * row[k]
        assert rest.degree() < 0
        rows.append(row)
    return fmpq_mat(rows)


def block_exponential(block: Block, time: Fraction) -> acb_mat:
    """Return balls around e^(Bt) of one block."""
    if not block.coupled:
        return by_vandermonde(linked_basis(block), block, time)
    d, n = block.degree, block.order
    cell = cell_exponential(block, time)
    rows = [[acb(0)] * n for _ in range(n)]
    for k in range(block.size):
        for m in range(k, block.size):
            weight = arb(rational(time)) ** (m - k) / arb(m - k).fac()
            for i in range(d):
                for j in range(d):
                    rows[k * d + i][m * d + j] = cell[i, j] * weight
    return acb_mat(rows)


def cell_exponential(block: Block, time: Fraction) -> acb_mat:
    """Return balls around e^(Ct) of the cell of a coupled block."""
    if not block.rotation:
        return by_vandermonde(powers(block.degree), Block(block.polynomial, 1), time)
    a, w = (arb(x * rational(time)) for x in rotation(block.polynomial))
    return acb_mat(
        [[a.exp() * w.cos(), -a.exp() * w.sin()], [a.exp() * w.sin(), a.exp() * w.cos()]]
    )


def by_vandermonde(basis: list[fmpq_poly], block: Block, time: Fraction) -> acb_mat:
    """Return e^(Mt) of M b(x) = x b(x) mod p^k, through confluent Vandermonde columns.

    At a root r of p, the columns b(r), b'(r), b''(r)/2, ... are a Jordan chain of M.
    """
    n, t = len(basis), arb(rational(time))
    columns: list[list[acb]] = []
    jordan = [[acb(0)] * n for _ in range(n)]
    for root, _ in polynomial(block.polynomial).complex_roots():
        start = len(columns)
        for j in range(block.size):
            columns.append([acb_poly(derivative(b, j))(root) / arb(j).fac() for b in basis])
            for i in range(j + 1):
                weight = t ** (j - i) / arb(j - i).fac()
                jordan[start + i][start + j] = (root * t).exp() * weight
    v = acb_mat(columns).transpose()
    return v * acb_mat(jordan) * v.inv()


def derivative(p: fmpq_poly, times: int) -> fmpq_poly:
    for _ in range(times):
        p = p.derivative()
    return p


def block_diagonal(parts: list[fmpq_mat] | list[acb_mat]) -> list[list[object]]:
    """Return the rows of the block diagonal matrix with these blocks."""
    n = sum(part.nrows() for part in parts)
    rows: list[list[object]] = [[0] * n for _ in range(n)]
    at = 0
    for part in parts:
        for i, row in enumerate(part.tolist()):
            rows[at + i][at : at + len(row)] = row
        at += part.nrows()
    return rows


def build(blocks: tuple[Block, ...], steps: list[tuple[int, int, int]]) -> KnownSystem:
    """Return P B P^(-1); P is a product of row operations (i, j, c): row i += c row j."""
    inner = fmpq_mat(block_diagonal([block_matrix(block) for block in blocks]))
    n = inner.nrows()
    rows = [[Fraction(int(i == j)) for j in range(n)] for i in range(n)]
    for i, j, c in steps:
        rows[i] = [x + c * y for x, y in zip(rows[i], rows[j], strict=True)]
    similarity = tuple(map(tuple, rows))
    p = fmpq_matrix(similarity)
    return KnownSystem(fractions(p * inner * p.inv()), blocks, similarity)


# --- every structure of one order --------------------------------------------------------


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
    source = random.Random(order)  # noqa: S311 - a seeded choice of test data, no secret
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
