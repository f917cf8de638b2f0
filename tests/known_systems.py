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

from dataclasses import dataclass
from fractions import Fraction
from math import isqrt

from flint import acb, acb_mat, acb_poly, arb, ctx, fmpq, fmpq_mat, fmpq_poly

Matrix = tuple[tuple[Fraction, ...], ...]
Coefficients = tuple[Fraction, ...]

BITS = 600  # of the balls in `KnownSystem.transition`: Vandermonde matrices eat some of them


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
