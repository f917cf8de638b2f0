"""Arithmetic with numbers that are exact, or balls."""

from __future__ import annotations

from fractions import Fraction

from flint import arb

from tests.parametric.plain_reader import Number, ball_of

__all__ = ["decimal", "factorial", "order_of", "plus", "times"]


def order_of(one: Number, other: Number) -> int:
    """The sign of one - other; balls that meet closely are taken for equal."""
    if isinstance(one, Fraction) and isinstance(other, Fraction):
        return (one > other) - (one < other)
    gap = ball_of(one) - ball_of(other)
    if gap > 0 or gap < 0:
        return 1 if gap > 0 else -1
    assert abs(gap) < arb(10) ** -40
    return 0


def plus(one: Number, other: Number) -> Number:
    same = isinstance(one, Fraction) and isinstance(other, Fraction)
    return one + other if same else ball_of(one) + ball_of(other)


def times(one: Number, other: Number) -> Number:
    same = isinstance(one, Fraction) and isinstance(other, Fraction)
    return one * other if same else ball_of(one) * ball_of(other)


def decimal(number: Number) -> float:
    return float(number) if isinstance(number, Fraction) else float(number.mid())


def factorial(k: int) -> int:
    return 1 if k < 2 else k * factorial(k - 1)
