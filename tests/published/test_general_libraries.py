"""The main job against general numerical libraries, run beside it on the same matrices.

Floating-point routines are weak witnesses, so their tolerances are theirs, not ours.
"""

from __future__ import annotations

import random
from fractions import Fraction
from typing import Any

import mpmath
import numpy as np
import pytest
import scipy.integrate
import scipy.linalg
from flint import acb_mat, arb, arb_mat, ctx, fmpq, fmpq_mat

import closedform

Rows = list[list[Fraction]]


def _dense(n: int, bound: int, seed: int) -> Rows:
    source = random.Random(seed)
    return [[Fraction(source.randint(-bound, bound), 4) for _ in range(n)] for _ in range(n)]


def _ladder(n: int) -> Rows:
    """Return a chain of equal exchanges, open at one end."""
    rows = [[Fraction(0)] * n for _ in range(n)]
    for i in range(n):
        rows[i][i] = Fraction(-2 if i + 1 < n else -1)
        for j in {i - 1, i + 1} & set(range(n)):
            rows[i][j] = Fraction(1)
    return rows


def _numbers(text: str) -> Rows:
    return [[Fraction(entry) for entry in row.split()] for row in text.split(";")]


MATRICES = {
    "one-state": _numbers("-3/7"),
    "conjugate-pair": _numbers("-1/10 -2; 2 -1/10"),
    "defective-3x3": _numbers("4 2 0; 1 4 1; 1 1 4"),
    "nilpotent-4x4": _numbers("0 1 0 2; 0 0 3 0; 0 0 0 -1; 0 0 0 0"),
    "two-masses-lightly-damped": _numbers("0 0 1 0; 0 0 0 1; -3 1 -1/10 1/20; 2 -2 1/10 -1/10"),
    "defective-pairs": _numbers("0 1 1 0; -1 0 0 1; 0 0 0 1; 0 0 -1 0"),
    "irreducible-cubic": _numbers("0 1 0; 0 0 1; -1 1 0"),
    "dense-3x3-seed-1": _dense(3, 6, 1),
    "dense-4x4-seed-2": _dense(4, 6, 2),
    "dense-6x6-seed-3": _dense(6, 4, 3),
    "dense-8x8-seed-4": _dense(8, 3, 4),
    "ladder-12": _ladder(12),
}
TIME = Fraction(3, 4)


def respond_to(matrix: Rows, initial: list[Fraction] | None = None) -> Any:
    n = len(matrix)
    return closedform.respond(
        closedform.system(
            title="beside a general library",
            states=[f"x{i + 1}" for i in range(n)],
            matrix=matrix,
            initial=initial or [Fraction(1)] * n,
        )
    )


def floats(matrix: Rows) -> np.ndarray[Any, np.dtype[np.float64]]:
    return np.array([[float(entry) for entry in row] for row in matrix])


named = pytest.mark.parametrize(
    "matrix", [pytest.param(m, id=name) for name, m in MATRICES.items()]
)


@named
def test_scipy_linalg_expm(matrix: Rows) -> None:
    theirs = scipy.linalg.expm(floats(matrix) * float(TIME))
    ours = respond_to(matrix).transition_at(TIME, 30)
    close = np.array([[float(entry.mid()) for entry in row] for row in ours])
    assert np.max(np.abs(theirs - close)) <= 1e-12 * np.max(np.abs(close))


@named
def test_mpmath_expm(matrix: Rows) -> None:
    context = mpmath.mp.clone()
    context.dps = 50
    entries = [[context.mpf(x.numerator) / x.denominator for x in row] for row in matrix]
    theirs = context.expm(context.matrix(entries) * TIME.numerator / TIME.denominator)
    ours = respond_to(matrix).transition_at(TIME, 45)
    with ctx.workprec(200):
        largest = max(abs(entry).upper() for row in ours for entry in row)
        for i, row in enumerate(ours):
            for j, entry in enumerate(row):
                their = arb(context.nstr(theirs[i, j], 50))
                assert abs(entry - their) <= largest * arb(10) ** -42


@named
def test_flint_acb_mat_exp(matrix: Rows) -> None:
    exact = fmpq_mat([[fmpq(x.numerator, x.denominator) for x in row] for row in matrix])
    ours = respond_to(matrix).transition_at(TIME, 60)
    with ctx.workprec(500):
        theirs = acb_mat(arb_mat(exact * fmpq(TIME.numerator, TIME.denominator))).exp()
        for i, row in enumerate(ours):
            for j, entry in enumerate(row):
                assert theirs[i, j].real.overlaps(entry)
                assert theirs[i, j].real.rad() < 1e-100


def test_scipy_integrate_solve_ivp_follows_the_trajectory() -> None:
    matrix = MATRICES["two-masses-lightly-damped"]
    start = [Fraction(0), Fraction(1, 50), Fraction(0), Fraction(0)]
    response = respond_to(matrix, start)
    times = [Fraction(k, 2) for k in range(1, 21)]
    system = floats(matrix)
    path = scipy.integrate.solve_ivp(
        lambda _, x: system @ x,
        (0.0, 10.0),
        [float(x) for x in start],
        method="DOP853",
        t_eval=[float(t) for t in times],
        rtol=1e-11,
        atol=1e-13,
    )
    assert path.success
    for k, time in enumerate(times):
        state = response.solution_at(time, 20)
        for own, their in zip(state, path.y[:, k], strict=True):
            assert abs(float(own.mid()) - their) < 1e-10
