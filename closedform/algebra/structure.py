"""What the structure of a matrix proves about its eigenvalues, for all parameters at once.

A strongly connected block that a positive diagonal makes symmetric has real eigenvalues;
one whose diagonal outweighs its columns or its rows has none with a positive real part; a
symmetric path has no repeated one.  For a bipartite block [[0, X], [Y, 0]] the same is
asked of XY, whose eigenvalues are the squares.

Sources: R. A. Horn and C. R. Johnson, Matrix Analysis, 1985 (Gershgorin's discs, Jacobi
matrices, interlacing); J. A. Jacquez and C. P. Simon, Qualitative theory of compartmental
systems, SIAM Review 35, 1993; F. P. Kelly, Reversibility and Stochastic Networks, 1979
(Kolmogorov's criterion).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import combinations
from typing import Literal

from closedform.algebra.domain import ParameterDomain
from closedform.algebra.field import FieldMatrix, Scalar
from closedform.algebra.graph import cycles_beside, edges_of, spanning_tree
from closedform.algebra.sign_argument import SignArgument

__all__ = [
    "Cycle",
    "Edge",
    "RealSpectrum",
    "SimpleSpectrum",
    "StableSpectrum",
    "real_spectrum",
    "simple_spectrum",
    "stable_spectrum",
]


@dataclass(frozen=True)
class Edge:
    """Two rows i < j with a_ij or a_ji other than 0, and the sign of a_ij · a_ji."""

    first: int
    second: int
    product: SignArgument


@dataclass(frozen=True)
class Cycle:
    """Rows i, j, …, k around which a_ij … a_ki is the same both ways: `product`."""

    places: tuple[int, ...]
    product: Scalar


@dataclass(frozen=True)
class RealSpectrum:
    """All eigenvalues are real: A is symmetric up to a positive diagonal.

    Every edge has a positive product and every cycle has equal products both ways.
    `weights` are w_i > 0 with a_ij w_j = a_ji w_i: diag(w)^(-1/2) A diag(w)^(1/2) is
    symmetric.  They are None where a product is only known to be nonnegative.  Then there
    is no cycle, and the characteristic polynomial holds the entries beside the diagonal
    in these products alone, so it is that of a symmetric matrix all the same.
    """

    edges: tuple[Edge, ...]
    cycles: tuple[Cycle, ...]
    weights: tuple[Scalar, ...] | None


@dataclass(frozen=True)
class StableSpectrum:
    """No eigenvalue has a positive real part, and 0 is the only one on the imaginary axis.

    In every column (or row) the diagonal entry and the sizes of the others add up to at
    most 0: `sums`, in the order of the columns.  `entries` are the signs beside the
    diagonal, which the sizes are taken by.
    """

    along: Literal["columns", "rows"]
    entries: tuple[SignArgument, ...]
    sums: tuple[SignArgument, ...]


@dataclass(frozen=True)
class SimpleSpectrum:
    """All eigenvalues are simple, save where all of one of `exceptions` are 0 at once.

    `graph` is that of a matrix with a real spectrum by positive products.  A path has no
    exception.  In a star an eigenvalue of multiplicity m > 1 is the diagonal entry of
    m + 1 leaves; the exceptions are differences of those of three leaves.  `centre` is
    the row of the star's centre, None for a path.
    """

    graph: Literal["path", "star"]
    centre: int | None
    exceptions: tuple[tuple[Scalar, ...], ...]


def real_spectrum(matrix: FieldMatrix, domain: ParameterDomain) -> RealSpectrum | None:
    """Return why all eigenvalues of a square matrix are real on the domain, or None.

    The matrix is over the field of the domain.  Its graph may have several components.
    """
    rows = matrix.to_list()
    edges = tuple(Edge(i, j, domain.sign_of(rows[i][j] * rows[j][i])) for i, j in edges_of(rows))
    if any(edge.product.sign not in {"positive", "nonnegative"} for edge in edges):
        return None
    if not all(rows[e.first][e.second] and rows[e.second][e.first] for e in edges):
        return None
    pairs = [(e.first, e.second) for e in edges]
    cycles = []
    for places in cycles_beside(len(rows), pairs):
        there, back = _around(rows, places), _around(rows, places[::-1])
        if there != back:
            return None
        cycles.append(Cycle(places, there))
    strict = all(edge.product.sign == "positive" for edge in edges)
    if not strict and cycles:
        return None
    weights = _weights(rows, pairs, domain) if strict else None
    return RealSpectrum(edges, tuple(cycles), weights)


def _around(rows: Sequence[Sequence[Scalar]], places: Sequence[int]) -> Scalar:
    """The product a_ij a_jk … a_zi around a closed way."""
    first, *others = (rows[i][j] for i, j in zip(places, [*places[1:], places[0]], strict=True))
    for entry in others:
        first = first * entry
    return first


def _weights(
    rows: Sequence[Sequence[Scalar]], pairs: Sequence[tuple[int, int]], domain: ParameterDomain
) -> tuple[Scalar, ...]:
    weights = [domain.field.domain.one] * len(rows)
    for parent, child in spanning_tree(len(rows), pairs):
        weights[child] = weights[parent] * rows[child][parent] / rows[parent][child]
    return tuple(weights)


def stable_spectrum(matrix: FieldMatrix, domain: ParameterDomain) -> StableSpectrum | None:
    """Return why no eigenvalue has a positive real part on the domain, or None.

    By Gershgorin's discs of the columns, then of the rows; each lies in the left half
    plane and meets the imaginary axis at most in 0.
    """
    for along, given in (("columns", matrix.transpose()), ("rows", matrix)):
        rows = given.to_list()
        found = _dominated(rows, domain)
        if found is not None:
            return StableSpectrum("columns" if along == "columns" else "rows", *found)
    return None


def _dominated(
    rows: Sequence[Sequence[Scalar]], domain: ParameterDomain
) -> tuple[tuple[SignArgument, ...], tuple[SignArgument, ...]] | None:
    entries, sums = [], []
    for i, row in enumerate(rows):
        total = row[i]
        for j, entry in enumerate(row):
            if i == j or not entry:
                continue
            argument = domain.sign_of(entry)
            entries.append(argument)
            if argument.values <= {0, 1}:
                total = total + entry
            elif argument.values <= {0, -1}:
                total = total - entry
            else:
                return None
        sums.append(domain.sign_of(total))
        if not sums[-1].values <= {0, -1}:
            return None
    return tuple(entries), tuple(sums)


def simple_spectrum(
    matrix: FieldMatrix, domain: ParameterDomain, *, equal_leaves_as_one: bool = False
) -> SimpleSpectrum | None:
    """Return where all eigenvalues of a square matrix are simple on the domain, or None.

    The graph of the matrix has to be connected, and a path or a star.  With
    `equal_leaves_as_one`, leaves of a star whose diagonal entries are the same element
    count once: what is returned is said of the eigenvalues other than these entries.
    """
    rows = matrix.to_list()
    n, pairs = len(rows), edges_of(rows)
    real = real_spectrum(matrix, domain)
    if real is None or real.weights is None or len(pairs) != n - 1:
        return None
    if len(spanning_tree(n, pairs)) != n - 1:
        return None
    degrees = [sum(i in pair for pair in pairs) for i in range(n)]
    if max(degrees) <= 2:
        return SimpleSpectrum("path", None, ())
    if max(degrees) < n - 1:
        return None
    centre = degrees.index(n - 1)
    leaves = [rows[i][i] for i in range(n) if i != centre]
    if equal_leaves_as_one:
        leaves = list(dict.fromkeys(leaves))
    exceptions = []
    for first, second, third in combinations(leaves, 3):
        differences = tuple(d for d in (first - second, first - third) if d)
        if not differences:
            return None  # three equal leaves: an eigenvalue is repeated everywhere
        if not any(domain.sign_of(d).never_zero for d in (*differences, second - third)):
            exceptions.append(differences)
    return SimpleSpectrum("star", centre, tuple(dict.fromkeys(exceptions)))
