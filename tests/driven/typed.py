"""Equations as they are typed and inputs as they are declared, read once more.

The equations are linear, so that their coefficients are found by putting in 0 and 1 for each
term.  Nothing of the package is used.
"""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from typing import Any

from flint import arb, arb_series

from tests.driven.amounts import decimal, order_of, plus, times
from tests.driven.series import constant, moving, series
from tests.driven.trees import moved, seen, steps_in, with_zeros, without_impulses, zero_of
from tests.parametric.plain_reader import (
    DRIVEN_FUNCTIONS,
    Number,
    Tree,
    ball_of,
    parse,
    value,
)

__all__ = ["Given", "Line", "Stated", "Struck"]

JET = re.compile(r"([A-Za-z_]\w*)('+)")
DECIMAL = re.compile(r"(\d+)\.(\d+)")


@dataclass(frozen=True)
class Struck:
    """amount · delta(t - at)."""

    amount: Number
    at: Number


@dataclass(frozen=True)
class Given:
    """A declared input: formulas, each from an instant to another, and impulses."""

    pieces: tuple[tuple[Number | None, Number | None, Tree], ...]
    impulses: tuple[Struck, ...]


@dataclass(frozen=True)
class Line:
    """An equation, all on the left: weights of jets and of inputs, and a function of the time."""

    text: str
    of_unknowns: Mapping[tuple[str, int], Number]
    of_inputs: Mapping[tuple[str, int, Number], Number]
    rest: Tree
    rest_impulses: tuple[Struck, ...]


class Stated:
    """A model as a mapping, at values of its parameters."""

    def __init__(self, mapping: Mapping[str, Any], values: Mapping[str, Number]) -> None:
        self.mapping, self.values = mapping, dict(values)
        self.time = mapping.get("time", "t")
        self.start = self.number(mapping.get("start", "0"))
        self.inputs = {name: self._given(told) for name, told in mapping.get("inputs", {}).items()}
        self.texts = list(mapping["equations"]) if "equations" in mapping else _equations(mapping)
        outputs = mapping.get("outputs", {})
        self.texts += [f"{name} = {text}" for name, text in outputs.items()]
        self.lines = [self._line(text) for text in self.texts]

    def number(self, text: object) -> Number:
        return value(self.tree(str(text)), self.values)

    def tree(self, text: str) -> Tree:
        text = re.sub(rf"\b(\w+'*)\({self.time}\)", self._plainly, text)
        text = DECIMAL.sub(
            lambda found: f"({int(found[1] + found[2])}/{10 ** len(found[2])})", text
        )
        text = JET.sub(lambda found: f"{found[1]}__{len(found[2])}", text)
        return parse(text, (*DRIVEN_FUNCTIONS, *getattr(self, "inputs", ())))

    @staticmethod
    def _plainly(found: re.Match[str]) -> str:
        """x(t) and u(t) are x and u."""
        return found[0] if found[1] in DRIVEN_FUNCTIONS else found[1]

    # --- inputs --------------------------------------------------------------------------

    def _given(self, told: Any) -> Given:
        if isinstance(told, str):
            told = {"is": told}
        if isinstance(told, list | tuple):
            told = {"pieces": list(told)}
        parts = told["pieces"] if "pieces" in told else [{"is": told["is"]}]
        pieces: list[tuple[Number | None, Number | None, Tree]] = []
        impulses: list[Struck] = []
        for part in parts:
            tree = self.tree(str(part["is"]))
            ends = [self.number(part[key]) if key in part else None for key in ("from", "to")]
            pieces.append((ends[0], ends[1], tree))
            impulses += self._impulses(tree)
        if "period" in told:
            return self._repeated(told, pieces, impulses)
        return Given(tuple(pieces), tuple(impulses))

    def _repeated(
        self, told: Mapping[str, Any], pieces: Sequence[Any], impulses: Sequence[Struck]
    ) -> Given:
        """Periods written out: all, or as many as any test looks at."""
        period, many = self.number(told["period"]), int(told.get("count", 12))
        all_pieces: list[Any] = []
        blows: list[Struck] = []
        for k in range(many):
            later = period * k
            for begun, ended, tree in pieces:
                low = self.start if begun is None else begun
                high = self.start + period if ended is None else ended
                all_pieces.append((low + later, high + later, moved(tree, self.time, later)))
            blows += [Struck(blow.amount, blow.at + later) for blow in impulses]
        return Given(tuple(all_pieces), tuple(blows))

    def _impulses(self, tree: Tree) -> list[Struck]:
        """Impulses in a formula: amount · delta(t - at), as terms of a sum."""
        if tree.kind == "delta":
            zero, one = (
                value(tree.parts[0], {**self.values, self.time: Fraction(k)}) for k in (0, 1)
            )
            slope = ball_of(one) - ball_of(zero)
            assert slope.overlaps(arb(1)), "delta(t - a) only"
            return [Struck(Fraction(1), -zero)]
        if tree.kind in {"+", "-"}:
            first, second = (self._impulses(part) for part in tree.parts)
            sign = 1 if tree.kind == "+" else -1
            return [*first, *(Struck(sign * blow.amount, blow.at) for blow in second)]
        if tree.kind == "neg":
            return [Struck(-blow.amount, blow.at) for blow in self._impulses(tree.parts[0])]
        if tree.kind == "*":
            left, right = tree.parts
            if self._impulses(left):
                left, right = right, left
            blows = self._impulses(right)
            return [
                Struck(
                    times(value(left, {**self.values, self.time: blow.at}), blow.amount), blow.at
                )
                for blow in blows
            ]
        return []

    def input_series(self, name: str, at: Number, *, before: bool = False) -> arb_series:
        """The series of an input at an instant, seen from before it or from after it."""
        total = constant(0)
        near = {**self.constants, self.time: moving(at)}
        for low, high, tree in self.inputs[name].pieces:
            on = low is None or order_of(at, low) > 0 or (order_of(at, low) == 0 and not before)
            off = high is not None and (
                order_of(at, high) > 0 or (order_of(at, high) == 0 and not before)
            )
            if on and not off:
                total = total + series(seen(tree, self.time, self.values, at, before=before), near)
        return total

    def switched(self, name: str) -> list[Number]:
        """The instants at which an input may jump."""
        given = self.inputs[name]
        found = [end for low, high, _ in given.pieces for end in (low, high) if end is not None]
        found += [blow.at for blow in given.impulses]
        for _, _, tree in given.pieces:
            found += [zero_of(inner, self.time, self.values) for inner in steps_in(tree)]
        return found

    # --- equations -----------------------------------------------------------------------

    def _line(self, text: str) -> Line:
        left, right = (self.tree(side) for side in text.split("="))
        whole = Tree("-", (left, right))
        places: dict[str, Any] = {}
        marked = self._marked(whole, places)
        nothing = {name: Fraction(0) for name in places}
        at = {**self.values, self.time: Fraction(1, 7)}
        unstruck = without_impulses(marked)

        def weight(name: str) -> Number:
            one, zero = (value(unstruck, {**at, **nothing, name: Fraction(k)}) for k in (1, 0))
            same = isinstance(one, Fraction) and isinstance(zero, Fraction)
            return one - zero if same else ball_of(one) - ball_of(zero)

        found = {place: weight(name) for name, place in places.items()}
        return Line(
            text,
            {place: w for place, w in found.items() if len(place) == 2},
            {place: w for place, w in found.items() if len(place) == 3},
            with_zeros(marked, frozenset(places)),
            tuple(self._impulses(with_zeros(marked, frozenset(places)))),
        )

    def _marked(self, tree: Tree, places: dict[str, Any]) -> Tree:
        """Names in the place of jets and inputs; `places` tells what each is."""
        if tree.kind == "name":
            name, _, order = tree.leaf.partition("__")
            if tree.leaf in self.values or name in {self.time, "pi"}:
                return tree
            key: Any = (name, int(order or 0))
            if name in self.inputs:
                key = (*key, Fraction(0))
            mark = f"{name}__{order or 0}"
            places[mark] = key
            return Tree("name", leaf=mark)
        if tree.kind in self.inputs:
            (inner,) = tree.parts
            delay = -value(inner, {**self.values, self.time: Fraction(0)})
            mark = f"{tree.kind}__late{len(places)}"
            places[mark] = (tree.kind, 0, delay)
            return Tree("name", leaf=mark)
        return Tree(tree.kind, tuple(self._marked(part, places) for part in tree.parts), tree.leaf)

    @cached_property
    def constants(self) -> dict[str, arb_series]:
        return {name: constant(number) for name, number in self.values.items()}

    @property
    def orders(self) -> dict[str, int]:
        """The unknowns, each with the highest order of its derivatives."""
        found: dict[str, int] = {}
        for line in self.lines:
            for name, order in line.of_unknowns:
                found[name] = max(order, found.get(name, 0))
        return found

    @property
    def initial(self) -> dict[tuple[str, int], Number]:
        told = self.mapping["initial"]
        if isinstance(told, Mapping):
            return {(key.rstrip("'"), key.count("'")): self.number(v) for key, v in told.items()}
        return {
            (name, 0): self.number(v) for name, v in zip(self.mapping["states"], told, strict=True)
        }

    @property
    def instants(self) -> list[Number]:
        """The start and the later instants at which something is switched or strikes, in order."""
        late = [self.start]
        for line in self.lines:
            for name, _, delay in line.of_inputs:
                late += [plus(at, delay) for at in self.switched(name)]
            late += [zero_of(inner, self.time, self.values) for inner in steps_in(line.rest)]
            late += [blow.at for blow in line.rest_impulses]
        later = sorted((at for at in late if order_of(at, self.start) > 0), key=decimal)
        found = [self.start]
        for at in later:
            if order_of(at, found[-1]) > 0:
                found.append(at)
        return found


def _equations(mapping: Mapping[str, Any]) -> list[str]:
    """The equations that matrices stand for."""
    states, inputs = mapping["states"], list(mapping.get("inputs", ()))
    fed = mapping.get("input_matrix", [[] for _ in states])
    if "mass" in mapping:
        sides = [("mass", "''"), ("damping", "'"), ("stiffness", "")]
        left = [
            " + ".join(
                f"({w})*{x}{primes}"
                for key, primes in sides
                if key in mapping
                for w, x in zip(mapping[key][i], states, strict=True)
            )
            for i in range(len(states))
        ]
        right = ["0"] * len(states)
    else:
        left = [f"{x}'" for x in states]
        right = [
            " + ".join(f"({w})*{x}" for w, x in zip(row, states, strict=True))
            for row in mapping["matrix"]
        ]
    return [
        f"{first} = {second}" + "".join(f" + ({w})*{u}" for w, u in zip(row, inputs, strict=True))
        for first, second, row in zip(left, right, fed, strict=True)
    ]
