"""The published solutions of driven models are right, by the equations as typed alone."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from math import factorial
from typing import Any

import pytest
from flint import arb, arb_series, ctx

from tests.driven.held import check as hold
from tests.driven.integrating import reached
from tests.driven.series import LENGTH, derivatives
from tests.driven.typed import Stated
from tests.parametric.plain_reader import Number, ball_of
from tests.parametric.record_reader import holds, parameter_values
from tests.published.driven_checks import (
    CASES,
    CHECKS,
    ITEMS,
    LATER,
    Check,
    Item,
    Rows,
    evaluated,
    instants,
    named,
    points,
    rows_at,
    same,
)

BITS = 500
HELD = [(name, i) for name, i in CASES if ITEMS[name]["checks"][i]["kind"] == "solution"]
OTHERS = [case for case in CASES if case not in HELD]
Known = dict[str, Number]


@dataclass(frozen=True)
class Published:
    """The answer that formulas give; before the instant `since` those of `earlier`."""

    formulas: Mapping[str, str]
    known: Known
    earlier: Mapping[str, str] | None = None
    since: Number = 0

    def functions(self, at: Number, *, before: bool = False) -> Rows:
        own = self.earlier if self.earlier and before and at == self.since else self.formulas
        rows = rows_at(own, self.known, at)
        slopes = {f"{name}_dot": of.derivative() for name, of in rows.items()}
        return {**rows, **{name: of for name, of in slopes.items() if name not in rows}}


@dataclass(frozen=True)
class Integrated:
    """The answer of Taylor's method; impulses may strike at no instant."""

    stated: Stated

    def functions(self, at: Number, *, before: bool = False) -> Rows:
        assert not before
        stated, begun = self.stated, self.stated.start
        now = _series({jet: ball_of(number) for jet, number in stated.initial.items()})
        later = [end for end in stated.instants[1:] if ball_of(end) < ball_of(at)]
        for end in (*later, at):
            now, begun = _series(reached(stated, begun, now, end)), end
        slopes = {f"{name}_dot": of.derivative() for name, of in now.items()}
        return {**now, **{name: of for name, of in slopes.items() if name not in now}}


def _series(jets: Mapping[tuple[str, int], arb]) -> dict[str, arb_series]:
    """As many terms of each unknown as are known."""
    found: dict[str, list[arb]] = {}
    for (name, k), number in sorted(jets.items(), key=lambda item: item[0]):
        found.setdefault(name, []).append(number / factorial(k))
    return {name: arb_series(terms, LENGTH) for name, terms in found.items()}


@pytest.mark.parametrize(("identifier", "number"), HELD)
def test_a_published_solution_solves_its_equations(identifier: str, number: int) -> None:
    item = ITEMS[identifier]
    check = item["checks"][number]
    with ctx.workprec(BITS):
        tried = list(points(item, check, 4))
        assert tried
        for values in tried:
            known = named(item, values)
            assert holds(check["condition"], known)
            stated = Stated(item["model"], parameter_values(values))
            told = Published(check["formulas"], known)
            if "from" in check:
                earlier = item["checks"][number - 1]["formulas"]
                told = Published(check["formulas"], known, earlier, evaluated(check["from"], known))
            assert set(stated.orders) == set(check["formulas"])
            hold(stated, told.functions, instants(check, known))


@pytest.mark.parametrize(("identifier", "number"), OTHERS)
def test_what_else_is_published_follows_from_the_equations(identifier: str, number: int) -> None:
    item = ITEMS[identifier]
    check = item["checks"][number]
    with ctx.workprec(BITS):
        tried = list(points(item, check, 2))
        assert tried
        for values in tried:
            known = named(item, values)
            assert holds(check["condition"], known)
            FOLLOWS[check["kind"]](item, check, known)


def by_solution(item: Item, check: Check, known: Known) -> None:
    """Another check of the item gives the formula; if none does, Taylor's method the values."""
    for other in item["checks"]:
        if other["kind"] == "solution" and holds(other["condition"], known):
            CHECKS[check["kind"]](check, Published(other["formulas"], known), known)
            return
    parameters = item["model"].get("parameters", {})
    stated = Stated(item["model"], {name: known[name] for name in parameters})
    told = check["formulas"] if "formulas" in check else check["facts"]
    loose = {"relative": "1e-26", **check, "formulas": told}
    CHECKS["digits"](loose, Integrated(stated), known)


def by_equations(item: Item, check: Check, known: Known) -> None:
    """A steady state solves the equations, whatever came before."""
    told = Published(check["steady"] if "steady" in check else check["formulas"], known)
    parameters = item["model"].get("parameters", {})
    hold(Stated(item["model"], {name: known[name] for name in parameters}), told.functions, LATER)
    if check["kind"] == "amplitude":
        for at in LATER:
            x, slope = derivatives(told.functions(at)[check["name"]], 2)
            size = (x**2 + (slope / ball_of(known[check["frequency"]])) ** 2).sqrt()
            same(size, ball_of(evaluated(check["amplitude"], known)), "1e-40", "amplitude")


def by_arithmetic(_: Item, check: Check, known: Known) -> None:
    CHECKS["decimals"](check, Published({}, known), known)


FOLLOWS: dict[str, Callable[[Item, Check, Known], None]] = {
    "digits": by_solution,
    "facts": by_solution,
    "steady": by_equations,
    "amplitude": by_equations,
    "decimals": by_arithmetic,
}


@pytest.mark.parametrize("identifier", ITEMS)
def test_an_item_says_where_it_is_from(identifier: str) -> None:
    item: dict[str, Any] = ITEMS[identifier]
    assert item["source"]
    assert item["seen_at"]
    assert item["confirmed"] in (True, False)
    assert item["scope"]
    assert item["checks"]
    for values in item.get("exceptional", ()):
        assert set(values) == set(item["model"]["parameters"])
