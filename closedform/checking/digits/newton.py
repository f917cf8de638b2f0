"""Solving for the exact numbers behind printed ones, and proving that they are there."""

from __future__ import annotations

from collections.abc import Sequence

from flint import arb, arb_mat, ctx

from closedform.checking.digits.equations import Equations, System

__all__ = ["CERTAIN_BITS", "certified", "determined", "refined"]

_MOST_STEPS = 40
_SOLVED_BITS = 110
_RIDGE_BITS = 160
_IDLE_STEPS = 5
CERTAIN_BITS = 100
_SMALL_BITS = 90
_PARALLEL_BITS = 70


def refined(
    equations: Equations, start: Sequence[arb], scale: Sequence[arb], free: Sequence[int]
) -> list[arb] | None:
    """Return unknowns that solve all equations nearly exactly, or None if none are found.

    Only the unknowns in `free` move, from `start` on, by as little as does it, in units of
    their `scale`.
    Source:  D. Marquardt, An algorithm for least-squares estimation of nonlinear parameters,
             Journal of the Society for Industrial and Applied Mathematics 11 (1963).
    """
    u = list(start)
    system = equations.at(u)
    if not system.is_finite:
        return None
    damping, idle = arb(0), 0
    slopes, rests = equations.scaled(system, scale)
    cost = _square(rests)
    for _ in range(_MOST_STEPS):
        if _is_solved(system, rests):
            return _moved(u, scale, free, _step(slopes, rests, free, arb(0)))
        trial = _moved(u, scale, free, _step(slopes, rests, free, damping))
        found = equations.at(trial)
        if found.is_finite and len(found.residuals) == len(system.residuals):
            new_slopes, new_rests = equations.scaled(found, scale)
            new_cost = _compared(system, found, slopes, scale)
            if new_cost < cost:
                idle = idle + 1 if new_cost > cost * arb(0.8) else 0
                if idle > _IDLE_STEPS:
                    return None
                u, system, slopes, rests = trial, found, new_slopes, new_rests
                cost = _square(rests)
                damping = damping / 100 if damping > arb(2) ** -40 else arb(0)
                continue
        damping = (damping * 16).max(arb(2) ** -12)
        if damping > arb(2) ** 60:
            return None
    return None


def _is_solved(system: System, rests: arb_mat) -> bool:
    tiny = arb(2) ** -_SOLVED_BITS
    return all(
        abs(rest.mid()) <= tiny * size
        for rest, size in zip(system.residuals, system.sizes, strict=True)
    ) and all(abs(rest) <= arb(2) ** (-_SOLVED_BITS // 2) for rest in rests.entries())


def _square(rests: arb_mat) -> arb:
    return sum((rest * rest for rest in rests.entries()), arb(0)).mid()


def _compared(before: System, after: System, slopes: arb_mat, scale: Sequence[arb]) -> arb:
    """The sum of squares after a step, weighted as it was before it."""
    total = arb(0)
    for i, (row, rest) in enumerate(zip(before.slopes, after.residuals, strict=True)):
        largest = max(
            (abs((slope * s).mid()) for slope, s in zip(row, scale, strict=True)), default=arb(0)
        )
        if any(slopes[i, j] != 0 for j in range(slopes.ncols())):
            total += (rest.mid() / largest) ** 2
    return total.mid()


def _step(slopes: arb_mat, rests: arb_mat, free: Sequence[int], damping: arb) -> list[arb]:
    """The step of least squares, in units of the scale; a ridge keeps undetermined ones still."""
    columns = _columns(slopes, free)
    across = columns.transpose()
    normal = across * columns
    ridge = damping + arb(2) ** -_RIDGE_BITS
    for i in range(len(free)):
        normal[i, i] = normal[i, i] * (1 + damping) + ridge
    solved = _middle(normal).solve(_middle(across * rests), nonstop=True, algorithm="approx")
    return [-solved[i, 0].mid() for i in range(len(free))]


def _moved(
    u: Sequence[arb], scale: Sequence[arb], free: Sequence[int], step: Sequence[arb]
) -> list[arb]:
    moved = list(u)
    for i, change in zip(free, step, strict=True):
        moved[i] = (u[i] + scale[i] * change).mid()
    return moved


def determined(
    equations: Equations, solution: Sequence[arb], scale: Sequence[arb], order: Sequence[int]
) -> tuple[list[int], list[int]]:
    """Return the unknowns that the equations determine, the first in `order` preferred.

    The second list are those that do not matter at all; what is in none of the two depends on
    others.
    """
    slopes, _ = equations.scaled(equations.at(solution), scale)
    small = arb(2) ** -_SMALL_BITS
    idle: list[int] = []
    basis: list[list[arb]] = []
    chosen: list[int] = []
    for i in order:
        column = [slopes[j, i].mid() for j in range(slopes.nrows())]
        length = _length(column)
        if not length > small:
            idle.append(i)
            continue
        column = [(entry / length).mid() for entry in column]
        for other in basis * 2:  # twice is enough for orthogonality
            share = sum((a * b for a, b in zip(column, other, strict=True)), arb(0)).mid()
            column = [(a - share * b).mid() for a, b in zip(column, other, strict=True)]
        length = _length(column)
        if length > arb(2) ** -_PARALLEL_BITS:
            basis.append([(entry / length).mid() for entry in column])
            chosen.append(i)
    return chosen, idle


def certified(
    equations: Equations, solution: Sequence[arb], free: Sequence[int]
) -> list[arb] | None:
    """Return balls that hold the exact unknowns, proved to exist uniquely, or None.

    The equations, combined into as many as there are free unknowns, have one solution in the
    balls, and all of them hold there to `CERTAIN_BITS`.
    Source:  R. Krawczyk, Newton-Algorithmen zur Bestimmung von Nullstellen mit
             Fehlerschranken, Computing 4 (1969).
    """
    if not free:
        return list(solution) if equations.at(solution).holds(CERTAIN_BITS) else None
    system = equations.at(solution)
    if not system.is_finite:
        return None
    ones = [arb(1)] * equations.count
    slopes, _ = equations.scaled(system, ones)
    columns = _columns(slopes, free)
    across = columns.transpose()
    weights = [
        max((abs(row[i].mid()) for i in range(equations.count)), default=arb(0))
        for row in system.slopes
    ]
    combine = _middle(across * columns).solve(across, nonstop=True, algorithm="approx")
    for j, weight in enumerate(weights):
        is_noise = all(slopes[j, i] == 0 for i in range(equations.count))
        for i in range(len(free)):
            combine[i, j] = arb(0) if is_noise else (combine[i, j] / weight).mid()
    shift = combine * arb_mat([[rest] for rest in system.residuals])
    widths = [4 * shift[i, 0].abs_upper() + _floor(solution[k]) for i, k in enumerate(free)]
    box = list(solution)
    for k, width in zip(free, widths, strict=True):
        box[k] = arb(solution[k], width)
    around = equations.at(box)
    if not around.is_finite:
        return None
    spread = combine * _columns(arb_mat(around.slopes), free)
    proved = list(solution)
    for i, k in enumerate(free):
        rest = sum(
            ((arb(i == j) - spread[i, j]) * arb(0, width) for j, width in enumerate(widths)),
            arb(0),
        )
        proved[k] = solution[k] - shift[i, 0] + rest
        if not box[k].contains_interior(proved[k]):
            return None
    return proved if equations.at(proved).holds(CERTAIN_BITS) else None


def _floor(value: arb) -> arb:
    return (abs(value).max(arb(1)) * arb(2) ** -(ctx.prec - 30)).mid()


def _length(column: Sequence[arb]) -> arb:
    return sum((entry * entry for entry in column), arb(0)).sqrt().mid()


def _columns(matrix: arb_mat, chosen: Sequence[int]) -> arb_mat:
    return arb_mat([[matrix[i, j] for j in chosen] for i in range(matrix.nrows())])


def _middle(matrix: arb_mat) -> arb_mat:
    middle: arb_mat = matrix.mid()
    return middle
