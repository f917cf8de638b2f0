"""What published solutions of driven models say, held against an answer.

An answer gives the series of all rows at an instant at given values of the parameters: the
published formulas themselves, which the equations as typed must bear out; and a record.
"""

from __future__ import annotations

import json
from collections.abc import Callable, Iterator, Mapping
from fractions import Fraction
from pathlib import Path
from typing import Any, Protocol

from flint import arb, arb_series

from tests.driven.series import constant, moving, series
from tests.driven.typed import DECIMAL
from tests.parametric.admissible import draws
from tests.parametric.plain_reader import PUBLISHED_FUNCTIONS, Number, ball_of, parse, value
from tests.parametric.record_reader import parameter_values

Item = dict[str, Any]
Check = dict[str, Any]
Rows = Mapping[str, arb_series]
ITEMS: dict[str, Item] = {
    item["id"]: item
    for item in json.loads((Path(__file__).parent / "driven.json").read_text(encoding="utf-8"))[
        "items"
    ]
}
CASES = [(name, i) for name, item in ITEMS.items() for i in range(len(item["checks"]))]
LATER = (Fraction(1, 3), Fraction(9, 5))
NARROW = "1e-30"


class Answer(Protocol):
    """An answer at given values of the parameters."""

    def functions(self, at: Number, *, before: bool = False) -> Rows: ...


class WholeAnswer(Answer, Protocol):
    """One that tells a steady state, too."""

    def steady(self, at: Number) -> Rows: ...

    def amplitude(self, name: str) -> arb: ...


def exact_decimals(text: str) -> str:
    return DECIMAL.sub(lambda found: f"({int(found[1] + found[2])}/{10 ** len(found[2])})", text)


def evaluated(text: str, known: Mapping[str, Number]) -> Number:
    return value(parse(exact_decimals(text), PUBLISHED_FUNCTIONS), known)


def rows_at(formulas: Mapping[str, str], known: Mapping[str, Number], at: Number) -> Rows:
    """The series of formulas of the time."""
    near = {**{name: constant(number) for name, number in known.items()}, "t": moving(at)}
    return {
        name: series(parse(exact_decimals(text), PUBLISHED_FUNCTIONS), near)
        for name, text in formulas.items()
    }


def named(item: Item, values: Mapping[str, Any]) -> dict[str, Number]:
    """The parameters' values and those of the item's names, at this precision."""
    known = parameter_values(values)
    for name, text in item.get("names", {}).items():
        known[name] = evaluated(text, known)
    return known


def points(item: Item, check: Check, count: int) -> Iterator[dict[str, Any]]:
    """Yield values at which a check's formulas hold: those of the item, and random ones."""
    yield from check.get("values", ())
    parameters = item["model"].get("parameters", {})
    if not parameters:
        yield {}
    elif " = " not in check["condition"]:
        yield from draws(parameters, [check["condition"]], count)


def instants(check: Check, known: Mapping[str, Number]) -> list[Number]:
    """The instants at which a check looks: the first it holds at, and later ones."""
    if "time" in check:
        return [evaluated(check["time"], known)]
    if "times" in check:
        return [evaluated(text, known) for text in check["times"]]
    begun = evaluated(check.get("from", "0"), known)
    return [begun, *(begun + later for later in LATER)]


def same(found: arb, expected: arb, relative: str, what: str) -> None:
    allowed = arb(relative) * (1 + abs(expected)).upper()
    assert abs(found - expected) < allowed, f"{what}: {found.str(20)} is not {expected.str(20)}"


def solution(check: Check, answer: Answer, known: dict[str, Number]) -> None:
    for at in instants(check, known):
        ours = answer.functions(at)
        for name, theirs in rows_at(check["formulas"], known, at).items():
            for k in range(3):
                same(ours[name][k], theirs[k], NARROW, f"{name}, term {k} at {at}")


def digits(check: Check, answer: Answer, known: dict[str, Number]) -> None:
    """To as many digits as are given."""
    for at in instants(check, known):
        ours = answer.functions(at)
        for name, theirs in rows_at(check["formulas"], known, at).items():
            same(ours[name][0], theirs[0], check["relative"], name)


def facts(check: Check, answer: Answer, known: dict[str, Number]) -> None:
    (at,) = instants(check, known)
    ours = answer.functions(at)
    for name, text in check["facts"].items():
        same(ours[name][0], ball_of(evaluated(text, known)), NARROW, name)


def steady(check: Check, answer: WholeAnswer, known: dict[str, Number]) -> None:
    for at in LATER:
        ours = answer.steady(at)
        for name, theirs in rows_at(check["formulas"], known, at).items():
            for k in range(3):
                same(ours[name][k], theirs[k], NARROW, f"{name}, term {k}")


def amplitude(check: Check, answer: WholeAnswer, known: dict[str, Number]) -> None:
    theirs = ball_of(evaluated(check["amplitude"], known))
    same(answer.amplitude(check["name"]), theirs, NARROW, check["name"])
    steady({**check, "formulas": check["steady"]}, answer, known)


def decimals(check: Check, _: Answer, known: dict[str, Number]) -> None:
    """Formulas of the other checks, in digits."""
    for text, told, relative in check["numbers"]:
        same(ball_of(evaluated(text, known)), arb(told), relative, text)


CHECKS: dict[str, Callable[[Check, Any, dict[str, Number]], None]] = {
    check.__name__: check for check in (amplitude, decimals, digits, facts, solution, steady)
}
