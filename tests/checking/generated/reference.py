"""Whether a line is true, found in numbers of 30 digits and without the program or its algebra."""
# ruff: noqa: FBT001

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

import mpmath

from tests.checking.generated.cases import Case
from tests.checking.generated.forms import F, value
from tests.checking.generated.surds import Matrix

__all__ = ["INSTANTS", "Judge", "close", "far", "function_judge", "matrix_judge", "numeric"]

INSTANTS = tuple(mpmath.mpf(x) / 100 for x in (37, 121, 203))
DIGITS = 40
Judge = Callable[[tuple[F, ...], bool], tuple[bool, bool]]
"""From members, and whether decimals count as what they stand for, to: true; plainly untrue."""


def numeric(matrix: Matrix) -> mpmath.matrix:
    """Return a matrix in numbers."""
    return mpmath.matrix([[x.number() for x in row] for row in matrix])


def close(one: Any, other: Any, tolerance: float = 1e-20) -> bool:
    """Whether two numbers or matrices agree."""
    one, other = _single(one), _single(other)
    if isinstance(one, tuple) or isinstance(other, tuple):
        if not (isinstance(one, tuple) and isinstance(other, tuple)):
            return False
        if len(one) != len(other) or len(one[0]) != len(other[0]):
            return False
        return all(
            close(x, y, tolerance)
            for a, b in zip(one, other, strict=True)
            for x, y in zip(a, b, strict=True)
        )
    return abs(one - other) <= tolerance * (1 + abs(other))


def _single(x: Any) -> Any:
    return x[0][0] if isinstance(x, tuple) and len(x) == len(x[0]) == 1 else x


def far(one: Any, other: Any) -> bool:
    """Whether two numbers or matrices differ by more than rounding to three digits explains."""
    return not close(one, other, 2e-2)


def function_judge(truth: Callable[[mpmath.mpf], Any]) -> Judge:
    """Return the judge of formulas that ought to have the values of a function of time."""

    def judge(members: tuple[F, ...], exact: bool) -> tuple[bool, bool]:
        right, plain = True, False
        with mpmath.workdps(DIGITS):
            for t in INSTANTS:
                true = truth(t)
                for member in members:
                    try:
                        found = value(member, {"t": t}, exact=exact)
                    except ZeroDivisionError:
                        return False, True
                    right = right and close(found, true)
                    plain = plain or far(found, true)
        return right, plain

    return judge


def matrix_judge(accepts: Callable[[Any], bool]) -> Judge:
    """Return the judge of a matrix, a list or a number without time by what it has to satisfy."""

    def judge(members: tuple[F, ...], exact: bool) -> tuple[bool, bool]:
        with mpmath.workdps(DIGITS):
            found = [accepts(value(member, {}, exact=exact)) for member in members]
        return all(found), not all(found)

    return judge


def transition_at(case: Case) -> Callable[[mpmath.mpf], Any]:
    """Return e^(At) by mpmath's own exponential."""
    known: dict[mpmath.mpf, Any] = {}

    def at(t: mpmath.mpf) -> Any:
        if t not in known:
            with mpmath.workdps(DIGITS + 10):
                known[t] = _rows(mpmath.expm(numeric(case.matrix) * t))
        return known[t]

    return at


def _rows(matrix: mpmath.matrix) -> tuple[tuple[Any, ...], ...]:
    return tuple(tuple(matrix[i, j] for j in range(matrix.cols)) for i in range(matrix.rows))


def _matrix(rows: Any) -> mpmath.matrix:
    return mpmath.matrix([list(row) for row in rows])


def satisfied(left: mpmath.matrix, right: mpmath.matrix) -> bool:
    """Whether two matrices agree."""
    return close(_rows(left), _rows(right), 1e-18)


def polynomial_judge(case: Case, sign: int) -> Judge:
    """Return the judge of the characteristic polynomial in the name lambda."""
    points = tuple(mpmath.mpf(x) / 10 for x in (7, -13, 29))

    def judge(members: tuple[F, ...], exact: bool) -> tuple[bool, bool]:
        right = True
        with mpmath.workdps(DIGITS):
            a = numeric(case.matrix)
            for z in points:
                true = mpmath.det(mpmath.eye(case.size) * z - a) * sign
                for member in members:
                    found = value(member, {"lambda": z}, exact=exact)
                    right = right and close(found, true, 1e-18)
        return right, not right

    return judge


def transforms_judge(case: Case, canonical: Matrix | None) -> Judge:
    """Return the judge of P: A P = P J for the J of the derivation, P invertible."""

    def accepts(p: Any) -> bool:
        a, q = numeric(case.matrix), _matrix(p)
        if abs(mpmath.det(q)) < 1e-18:
            return False
        if canonical is not None:
            return satisfied(a * q, q * numeric(canonical))
        return _in_blocks(q**-1 * a * q)

    return matrix_judge(accepts)


def _in_blocks(form: mpmath.matrix) -> bool:
    """Whether a matrix is a Jordan form, ones above or below, or a real canonical form."""
    size = form.rows
    for i in range(size):
        for k in range(size):
            x = form[i, k]
            if i == k or abs(x) < 1e-18:
                continue
            beside = abs(i - k) == 1 and abs(form[i, i] - form[k, k]) < 1e-18
            turning = beside and abs(x + form[k, i]) < 1e-18
            in_pairs = abs(i - k) == 2 and abs(x - 1) < 1e-18
            if not (turning or in_pairs or (beside and abs(x - 1) < 1e-18)):
                return False
    return True


def similar_judge(case: Case) -> Judge:
    """Return the judge of J: ranks of (J - lambda I)^k as those of (A - lambda I)^k."""

    def accepts(j: Any) -> bool:
        a, form = numeric(case.matrix), _matrix(j)
        for chain in case.chains:
            one = a - mpmath.eye(case.size) * chain.rate.number()
            other = form - mpmath.eye(case.size) * chain.rate.number()
            for k in range(1, case.size + 1):
                if _rank(one**k) != _rank(other**k):
                    return False
        return True

    return matrix_judge(accepts)


def _rank(matrix: mpmath.matrix) -> int:
    singular = mpmath.svd_c(matrix, compute_uv=False)
    return sum(s > 1e-15 for s in singular)


def vector_judge(case: Case, rates: Sequence[Any], place: int) -> Judge:
    """Return the judge of a vector of one of some eigenvalues, at a place in its chain from 1 on.

    (A - lambda I)^k v vanishes for k = 1, for an eigenvector, or for a larger k first, for a
    generalized one: any length is allowed, and in a chain any share of the vectors before it.
    """

    def accepts(v: Any) -> bool:
        a, vector = numeric(case.matrix), _matrix(v)
        if vector.cols != 1:
            vector = vector.T
        found = [_place(a - mpmath.eye(case.size) * rate, vector) for rate in rates]
        return any(k is not None and (k == place == 1 or k > 1 < place) for k in found)

    return matrix_judge(accepts)


def _place(shifted: mpmath.matrix, vector: mpmath.matrix) -> int | None:
    for k in range(shifted.rows + 1):
        if mpmath.norm(vector) < 1e-18:
            return k
        vector = shifted * vector
    return None


def list_judge(true: Sequence[Any]) -> Judge:
    """Return the judge of a list of eigenvalues, in any order."""

    def judge(members: tuple[F, ...], exact: bool) -> tuple[bool, bool]:
        with mpmath.workdps(DIGITS):
            found = [v for member in members for v in _both(member, exact=exact)]
            left = list(true)
            for v in found:
                at = next((k for k, x in enumerate(left) if close(v, x)), None)
                if at is None:
                    return False, True
                left.pop(at)
        return not left, bool(left)

    return judge


def _both(member: F, *, exact: bool) -> list[Any]:
    if member.op != "pm":
        return [value(member, {}, exact=exact)]
    one, other = (value(part, {}, exact=exact) for part in member.args)
    return [one + other, one - other]
