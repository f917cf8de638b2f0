"""The undirected graph of a matrix: its edges, a spanning forest, the cycles beside it."""

from __future__ import annotations

from collections.abc import Sequence

from closedform.algebra.field import Scalar

__all__ = ["cycles_beside", "edges_of", "sides_of", "spanning_tree"]

Pair = tuple[int, int]


def edges_of(rows: Sequence[Sequence[Scalar]]) -> list[Pair]:
    """Return the pairs i < j for which entry (i, j) or (j, i) is not 0."""
    n = len(rows)
    return [(i, j) for i in range(n) for j in range(i + 1, n) if rows[i][j] or rows[j][i]]


def spanning_tree(n: int, edges: Sequence[Pair]) -> list[Pair]:
    """Return (parent, child) edges of a spanning forest of the vertices 0 … n - 1.

    Breadth first from the lowest vertex of each component, so that cycles come out short.
    """
    near = _neighbours(n, edges)
    tree: list[Pair] = []
    seen: set[int] = set()
    for root in range(n):
        queue = [] if root in seen else [root]
        seen.add(root)
        for parent in queue:  # it grows on the way
            for child in near[parent]:
                if child not in seen:
                    seen.add(child)
                    tree.append((parent, child))
                    queue.append(child)
    return tree


def cycles_beside(n: int, edges: Sequence[Pair]) -> list[tuple[int, ...]]:
    """Return a basis of the cycles: one for each edge that is not in the spanning forest."""
    tree = spanning_tree(n, edges)
    parents = {child: parent for parent, child in tree}
    used = {frozenset(pair) for pair in tree}
    cycles = []
    for first, second in edges:
        if frozenset((first, second)) in used:
            continue
        up, down = _ancestry(first, parents), _ancestry(second, parents)
        meeting = next(v for v in up if v in down)
        there = up[: up.index(meeting) + 1]
        back = down[: down.index(meeting)]
        cycles.append((*there, *reversed(back)))
    return cycles


def sides_of(n: int, edges: Sequence[Pair]) -> tuple[tuple[int, ...], tuple[int, ...]] | None:
    """Return the two sides of a bipartite graph, the lowest vertex of each component in the
    first; None if an odd cycle joins vertices of one side."""
    side = dict.fromkeys(range(n), 0)
    for parent, child in spanning_tree(n, edges):
        side[child] = 1 - side[parent]
    if any(side[i] == side[j] for i, j in edges):
        return None
    first, second = (tuple(v for v in range(n) if side[v] == s) for s in (0, 1))
    return first, second


def _neighbours(n: int, edges: Sequence[Pair]) -> list[list[int]]:
    near: list[list[int]] = [[] for _ in range(n)]
    for i, j in edges:
        near[i].append(j)
        near[j].append(i)
    return [sorted(v) for v in near]


def _ancestry(vertex: int, parents: dict[int, int]) -> list[int]:
    line = [vertex]
    while line[-1] in parents:
        line.append(parents[line[-1]])
    return line
