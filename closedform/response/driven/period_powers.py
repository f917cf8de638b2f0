"""Sums of powers over the periods: of (theta + k T)^j, and of these times q^k, k = 0 … N-1."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction
from math import comb

from closedform.algebra.field import Scalar
from closedform.algebra.parameter_field import ParameterField
from closedform.notation.expression import ONE, ZERO, Expression, Quotient, number
from closedform.notation.rational_formula import rational_formula
from closedform.notation.terms import negated, opened, sum_of
from closedform.response.driven.composition import put_in_place
from closedform.response.driven.period_writing import joined

__all__ = ["power_sum", "power_sum_formula", "weighted_power_sum"]

_NAMES = ParameterField(parameters=("?theta", "?N", "?T", "?Q", "?u"))

Shifted = tuple[Expression, Fraction | int | None]
"""A formula, and a number that is added to it; None for no number."""


def power_sum(power: int, theta: Scalar, length: Scalar, count: Scalar) -> Scalar:
    """Return the sum of (theta + k T)^power for k < N, all elements of one field.

    Source:  J. Faulhaber, Academia Algebrae, 1631; common knowledge.
    """
    sums: list[Scalar] = []
    for m in range(power + 1):
        # N^(m+1) is the sum of (k+1)^(m+1) - k^(m+1), that is of C(m+1, i) S_i for i <= m
        rest = sum((comb(m + 1, i) * s for i, s in enumerate(sums)), start=count - count)
        sums.append((count ** (m + 1) - rest) / (m + 1))
    return _moved(power, sums, theta, length)


def power_sum_formula(power: int, theta: Shifted, length: Shifted, count: Shifted) -> Expression:
    """Return the formula of the sum of (theta + k T)^power for k < N."""
    given = {"?theta": theta, "?T": length, "?N": count}
    total = power_sum(power, *(_element(name, *own) for name, own in given.items()))
    return _written(total, {name: own for name, (own, _) in given.items()})


def weighted_power_sum(
    power: int,
    theta: Shifted,
    length: Shifted,
    inverse: Expression,
    strokes: tuple[Expression, Expression] | None,
) -> Expression:
    """Return the formula of (1 - q) times the sum of (theta + k T)^power q^k.

    `inverse` is 1/q; `strokes` are N and q^N, None where the sum goes on for ever.
    """
    if power == 0:
        return ONE if strokes is None else sum_of([ONE, negated(strokes[1])])
    if power == 1:
        since, once = (_added(*own) for own in (theta, length))
        mean = Quotient(once, opened(sum_of([inverse, negated(ONE)])))
        level = mean if since == ZERO else opened(sum_of([since, mean]))
        if strokes is None:
            return level
        count, gone = strokes
        left = joined([level, sum_of([ONE, negated(gone)])])
        return opened(sum_of([left, negated(joined([count, once, gone]))]))
    names = _NAMES
    time, period = _element("?theta", *theta), _element("?T", *length)
    n, inverse_q = names.symbol("?N"), names.symbol("?u")
    gone_by = names.domain.zero if strokes is None else names.symbol("?Q")
    sums: list[Scalar] = []
    for j in range(power + 1):
        # q S_j is the sum of (k - 1)^j q^k for k = 1 … N, and (k - 1)^j is opened
        total = (0 if j else 1) - n**j * gone_by
        for i, earlier in enumerate(sums):
            weight = comb(j, i) * (-1) ** (j - i)
            total -= weight * (earlier + n**i * gone_by - (0 if i else 1))
        sums.append(total / (1 - 1 / inverse_q))
    whole = _moved(power, [s * (1 - 1 / inverse_q) for s in sums], time, period)
    given = {"?theta": theta[0], "?T": length[0], "?u": inverse}
    if strokes is not None:
        given |= {"?N": strokes[0], "?Q": strokes[1]}
    return _written(whole, given)


def _element(name: str, formula: Expression, added: Fraction | int | None) -> Scalar:
    whole = _NAMES.domain.zero if formula == ZERO else _NAMES.symbol(name)
    return whole if added is None else whole + _NAMES.scalar(added)


def _added(formula: Expression, number_added: Fraction | int | None) -> Expression:
    terms = [formula, number(number_added or 0)]
    kept = [term for term in terms if term != ZERO]
    return opened(sum_of(kept)) if kept else ZERO


def _moved(power: int, sums: Sequence[Scalar], theta: Scalar, length: Scalar) -> Scalar:
    """The sum over m of C(power, m) theta^(power - m) T^m S_m."""

    def moved(m: int) -> Scalar:
        # elements of fields of functions refuse 0**0
        return comb(power, m) * (theta ** (power - m) if power > m else 1) * length**m

    return sum((moved(m) * own for m, own in enumerate(sums)), start=theta - theta)


def _written(element: Scalar, given: Mapping[str, Expression]) -> Expression:
    return put_in_place(rational_formula(_NAMES, element), given)
