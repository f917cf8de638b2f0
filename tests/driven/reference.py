"""Driven systems worked into state form by hand, and three ways to integrate them.

The ways have nothing in common: the exponential of states and inputs together in balls,
Taylor's method in 30 digits, and a Runge-Kutta method in machine numbers.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from fractions import Fraction
from functools import cached_property
from typing import Any

import mpmath
import numpy as np
from flint import arb, arb_mat
from scipy.integrate import solve_ivp

from tests.driven.series import LENGTH, constant, derivatives, moving, series
from tests.parametric.plain_reader import Number, Tree, ball_of, parse, value

__all__ = ["DIGITS", "Interval", "Reference"]

DIGITS = 30
"""Of Taylor's method."""
Tone = tuple[str, str, int]
"""Rate, frequency (0 for none) and how often the factor is there."""


@dataclass(frozen=True)
class Interval:
    """From an instant on: each input as a formula, after a jump of the states."""

    begin: str
    inputs: tuple[str, ...]
    jump: tuple[str, ...] = ()


@dataclass(frozen=True)
class Reference:
    """x' = A x + B u by hand; `tones` solve all formulas of an input; `rows` are in x and u."""

    states: tuple[str, ...]
    matrix: tuple[tuple[str, ...], ...]
    feed: tuple[tuple[str, ...], ...]
    initial: tuple[str, ...]
    intervals: tuple[Interval, ...]
    tones: tuple[tuple[Tone, ...], ...]
    rows: Mapping[str, str] = field(default_factory=dict)
    last: str = "1"
    """How long after the last instant to look."""

    def instants(self) -> list[Number]:
        return [_number(interval.begin) for interval in self.intervals]

    def looked_at(self) -> list[tuple[int, Number]]:
        """Two instants in each interval, with its place."""
        begun = self.instants()
        found = []
        for k, low in enumerate(begun):
            high = begun[k + 1] if k + 1 < len(begun) else low + _number(self.last)
            found += [(k, low + (high - low) * share) for share in (Fraction(2, 7), Fraction(6, 7))]
        return found

    def told(self, k: int, at: Number, states: Sequence[Any]) -> dict[str, arb]:
        """States and rows at an instant of an interval, in balls."""
        known: dict[str, Number] = dict(
            zip(
                self.states,
                (arb(mpmath.nstr(x, 40)) if isinstance(x, mpmath.mpf) else x for x in states),
                strict=True,
            )
        )
        texts = self.intervals[k].inputs
        known |= {
            f"u{i}": ball_of(value(parse(text), {"t": at})) for i, text in enumerate(texts, 1)
        }
        rows = self.rows or {name: name for name in self.states}
        return {name: ball_of(value(parse(text), known)) for name, text in rows.items()}

    # --- balls -------------------------------------------------------------------------------

    @cached_property
    def _blocks(self) -> list[list[arb]]:
        """The coefficients of what each input solves, without the leading 1, lowest first."""
        found = []
        for tones in self.tones:
            product = [arb(1)]
            for rate, frequency, times in tones:
                r, w = ball_of(_number(rate)), ball_of(_number(frequency))
                factor = [r * r + w * w, -2 * r, arb(1)] if frequency != "0" else [-r, arb(1)]
                for _ in range(times):
                    product = _convolved(product, factor)
            found.append(product[:-1])
        return found

    def by_exponential(self) -> list[dict[str, arb]]:
        n, sizes = len(self.states), [len(block) for block in self._blocks]
        size = n + sum(sizes)
        rows = [[arb(0)] * size for _ in range(size)]
        for i in range(n):
            for j, text in enumerate(self.matrix[i]):
                rows[i][j] = ball_of(_number(text))
        first = n
        for u, block in enumerate(self._blocks):
            for i in range(n):
                if block:
                    rows[i][first] = ball_of(_number(self.feed[i][u]))
            for k in range(len(block) - 1):
                rows[first + k][first + k + 1] = arb(1)
            for k, c in enumerate(block):
                rows[first + len(block) - 1][first + k] = -c
            first += len(block)

        def moved(k: int, state: list[arb], time: Number) -> list[arb]:
            begun = _number(self.intervals[k].begin)
            near = {"t": moving(begun), "pi": constant(arb.pi())}
            below = [
                d
                for text, many in zip(self.intervals[k].inputs, sizes, strict=True)
                for d in derivatives(series(parse(text), near), LENGTH)[:many]
            ]
            since = ball_of(time) - ball_of(begun)
            whole = arb_mat(size, size, [e * since for row in rows for e in row]).exp()
            column = whole * arb_mat(size, 1, [*state, *below])
            return [column[i, 0] for i in range(n)]

        state, found = [ball_of(_number(x)) for x in self.initial], []
        for k, interval in enumerate(self.intervals):
            if k:
                state = moved(k - 1, state, _number(interval.begin))
            state = self._jumped(interval, state)
            found += [self.told(k, at, moved(k, state, at)) for j, at in self.looked_at() if j == k]
        return found

    def _jumped(self, interval: Interval, state: list[Any]) -> list[Any]:
        if not interval.jump:
            return state
        return [x + _like(x, _number(j)) for x, j in zip(state, interval.jump, strict=True)]

    # --- steps in time -------------------------------------------------------------------------

    def by_taylor(self) -> list[dict[str, arb]]:
        with mpmath.workdps(DIGITS + 5):
            a = [[_mpf(_number(e)) for e in row] for row in self.matrix]
            b = [[_mpf(_number(e)) for e in row] for row in self.feed]

            def flow(k: int, begun: Any, state: list[Any]) -> Any:
                trees = [parse(text) for text in self.intervals[k].inputs]

                def slopes(t: Any, x: Any) -> list[Any]:
                    u = [_at(tree, t, mpmath) for tree in trees]
                    return [
                        mpmath.fdot(row, x) + mpmath.fdot(fed, u)
                        for row, fed in zip(a, b, strict=True)
                    ]

                return mpmath.odefun(slopes, begun, state)

            return self._stepwise(flow, _mpf)

    def by_runge_kutta(self) -> list[dict[str, arb]]:
        a = np.array([[float(_mpf(_number(e))) for e in row] for row in self.matrix])
        b = np.array([[float(_mpf(_number(e))) for e in row] for row in self.feed])
        b = b.reshape(len(self.states), -1)

        def flow(k: int, begun: Any, state: list[Any]) -> Any:
            trees = [parse(text) for text in self.intervals[k].inputs]

            def slopes(t: float, x: Any) -> Any:
                return a @ x + b @ np.array([_at(tree, t, np) for tree in trees])

            def reached(t: Any) -> list[Any]:
                done = solve_ivp(
                    slopes,
                    (float(begun), float(t)),
                    [float(x) for x in state],
                    method="DOP853",
                    rtol=1e-13,
                    atol=1e-14,
                )
                assert done.success
                return [mpmath.mpf(float(x)) for x in done.y[:, -1]]

            return reached

        return self._stepwise(flow, _mpf)

    def _stepwise(self, flow: Any, convert: Any) -> list[dict[str, arb]]:
        state, found, moved = [convert(_number(x)) for x in self.initial], [], None
        for k, interval in enumerate(self.intervals):
            begun = _number(interval.begin)
            if moved is not None:
                state = list(moved(convert(begun)))
            state = self._jumped(interval, state)
            moved = flow(k, convert(begun), state)
            for j, at in self.looked_at():
                if j == k:
                    found.append(self.told(k, at, list(moved(convert(at)))))
        return found


def _number(text: str) -> Number:
    return value(parse(text), {})


def _mpf(number: Number) -> Any:
    if isinstance(number, Fraction):
        return mpmath.mpf(number.numerator) / number.denominator
    return mpmath.mpf(number.mid().str(45, radius=False))


def _like(x: Any, number: Number) -> Any:
    return ball_of(number) if isinstance(x, arb) else _mpf(number)


def _convolved(one: Sequence[arb], other: Sequence[arb]) -> list[arb]:
    found = [arb(0)] * (len(one) + len(other) - 1)
    for i, a in enumerate(one):
        for j, b in enumerate(other):
            found[i + j] += a * b
    return found


def _at(tree: Tree, t: Any, library: Any) -> Any:
    """The value of a formula of the time in a library's numbers."""
    match tree.kind:
        case "number":
            return library.mpf(int(tree.leaf)) if library is mpmath else float(tree.leaf)
        case "name":
            return +library.pi if tree.leaf == "pi" else t
    parts = [_at(part, t, library) for part in tree.parts]
    match tree.kind:
        case "neg":
            return -parts[0]
        case "+":
            return parts[0] + parts[1]
        case "-":
            return parts[0] - parts[1]
        case "*":
            return parts[0] * parts[1]
        case "/":
            return parts[0] / parts[1]
        case "^":
            return parts[0] ** int(tree.parts[1].leaf)
    return getattr(library, tree.kind)(parts[0])
