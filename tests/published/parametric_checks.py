"""What published formulas for models with parameters say, held against an answer.

An answer gives e^(At), x(t) and the characteristic polynomial at given values of the
parameters: the one by ball arithmetic, from the matrix alone, to prove the published data
themselves; and the one that a record gives.
"""

from __future__ import annotations

import json
from collections.abc import Callable, Iterator, Mapping
from fractions import Fraction
from pathlib import Path
from typing import Any, Protocol

from flint import acb, acb_poly, arb

from tests.parametric.admissible import draws
from tests.parametric.plain_reader import PUBLISHED_FUNCTIONS, Number, ball_of, parse, value
from tests.parametric.record_reader import (
    Balls,
    parameter_values,
    transition_by_balls,
)

Item = dict[str, Any]
ITEMS: dict[str, Item] = {
    item["id"]: item
    for item in json.loads((Path(__file__).parent / "parametric.json").read_text(encoding="utf-8"))[
        "items"
    ]
}
TIMES = (Fraction(0), Fraction(1, 3), Fraction(9, 5))
NARROW = Fraction(1, 10**35)


class Answer(Protocol):
    """An answer at given values of the parameters."""

    def transition(self, time: Number) -> Balls: ...

    def solution(self, time: Number) -> list[arb]: ...

    def characteristic(self) -> list[Number]: ...


class BallAnswer:
    """The answer by ball arithmetic, from the matrix alone."""

    def __init__(self, item: Item, values: Mapping[str, Number]) -> None:
        self.matrix = [[evaluated(text, values) for text in row] for row in item["matrix"]]
        self.initial = [ball_of(evaluated(text, values)) for text in item["initial"]]

    def transition(self, time: Number) -> Balls:
        return transition_by_balls(self.matrix, time)

    def solution(self, time: Number) -> list[arb]:
        return [
            sum((e * x for e, x in zip(row, self.initial, strict=True)), arb(0))
            for row in self.transition(time)
        ]

    def characteristic(self) -> list[Number]:
        """By the method of Faddeev and Leverrier, exact where the values are."""
        n = len(self.matrix)
        exact = all(isinstance(entry, Fraction) for row in self.matrix for entry in row)
        one: Any = Fraction(1) if exact else arb(1)
        a = self.matrix if exact else [[ball_of(entry) for entry in row] for row in self.matrix]
        found, m = [one], [[one * 0] * n for _ in range(n)]
        for k in range(1, n + 1):
            m = [
                [
                    sum((a[i][p] * m[p][j] for p in range(n)), one * 0)
                    + (found[-1] if i == j else 0)
                    for j in range(n)
                ]
                for i in range(n)
            ]
            trace = sum((a[i][p] * m[p][i] for i in range(n) for p in range(n)), one * 0)
            found.append(-trace / k)
        return found


def evaluated(text: str, values: Mapping[str, Number]) -> Number:
    return value(parse(text, PUBLISHED_FUNCTIONS), {"pi": arb.pi(), **values})


def named(item: Item, values: Mapping[str, Any]) -> dict[str, Number]:
    """Return the parameters' values and those of the item's names, at this precision."""
    known = parameter_values(values)
    for name, text in item.get("names", {}).items():
        known[name] = evaluated(text, known)
    return known


def points(item: Item, check: Item, count: int) -> Iterator[dict[str, Any]]:
    """Yield values at which a check's formula holds: those of the item, and random ones."""
    yield from check.get("values", ())
    if " = " not in check["condition"]:
        conditions = [*item.get("conditions", ()), check["condition"]]
        conditions = [with_names(item, text) for text in conditions]
        yield from draws(item["parameters"], conditions, count)


def with_names(item: Item, text: str) -> str:
    """Return a condition with the item's names written out."""
    for name, formula in reversed(item.get("names", {}).items()):
        if name in text:
            text = text.replace(name, f"({formula})")
    return text


def same(ours: list[list[arb]], theirs: list[list[arb]]) -> None:
    """Assert that all balls meet, and are narrow beside the largest of them."""
    largest = max(max(abs(entry).upper() for row in theirs for entry in row), arb(1), key=float)
    for own_row, row in zip(ours, theirs, strict=True):
        for own, their in zip(own_row, row, strict=True):
            assert own.overlaps(their), f"{own.str(30)} is not {their.str(30)}"
            assert own.rad() <= largest * ball_of(NARROW)
            assert their.rad() <= largest * ball_of(NARROW)


def _formulas(texts: list[str], known: Mapping[str, Number]) -> list[arb]:
    return [ball_of(evaluated(text, known)) for text in texts]


def transition(_: Item, check: Item, answer: Answer, known: dict[str, Number]) -> None:
    for time in TIMES:
        theirs = [_formulas(row, {**known, "t": time}) for row in check["entries"]]
        same(answer.transition(time), theirs)


def solution(_: Item, check: Item, answer: Answer, known: dict[str, Number]) -> None:
    """Only as many states as the source gives."""
    for time in TIMES:
        theirs = _formulas(check["entries"], {**known, "t": time})
        same([answer.solution(time)[: len(theirs)]], [theirs])


def observed(_: Item, check: Item, answer: Answer, known: dict[str, Number]) -> None:
    """A Laplace pair as row e^(At) column, the matrix a companion matrix."""
    row, column = (_formulas(check[key], known) for key in ("row", "column"))
    for time in TIMES:
        entries = answer.transition(time)
        ours = sum(
            (
                r * e * c
                for r, line in zip(row, entries, strict=True)
                for e, c in zip(line, column, strict=True)
            ),
            arb(0),
        )
        same([[ours]], [_formulas([check["formula"]], {**known, "t": time})])


def characteristic(_: Item, check: Item, answer: Answer, known: dict[str, Number]) -> None:
    same([[ball_of(c) for c in answer.characteristic()]], [_formulas(check["coefficients"], known)])


def eigenvalues(_: Item, check: Item, answer: Answer, known: dict[str, Number]) -> None:
    """The product of all (lambda - root) is the characteristic polynomial."""
    product = acb_poly([1])
    for real, imaginary, times in check["roots"]:
        root = acb(*_formulas([real, imaginary], known))
        product *= acb_poly([-root, 1]) ** times
    theirs = list(reversed(product.coeffs()))
    ours = [ball_of(c) for c in answer.characteristic()]
    same([ours], [[c.real for c in theirs]])
    assert all(c.imag.contains(0) for c in theirs)


def facts(item: Item, check: Item, answer: Answer, known: dict[str, Number]) -> None:
    """Formulas in the states at an instant, which is a formula too."""
    time = evaluated(check["time"], known)
    state = dict(zip(item["states"], answer.solution(time), strict=True))
    for left, right in check["facts"]:
        same([_formulas([left], {**known, **state})], [_formulas([right], known)])


def limit(_: Item, check: Item, answer: Answer, known: dict[str, Number]) -> None:
    """The state has settled by an instant."""
    ours = answer.solution(evaluated(check["time"], known))
    for own, their in zip(ours, _formulas(check["entries"], known), strict=True):
        assert abs(own - their) < 1e-25


CHECKS: dict[str, Callable[[Item, Item, Answer, dict[str, Number]], None]] = {
    check.__name__: check
    for check in (characteristic, eigenvalues, facts, limit, observed, solution, transition)
}
CASES = [(name, i) for name, item in ITEMS.items() for i in range(len(item["checks"]))]
