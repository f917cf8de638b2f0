"""Values put into driven solutions with parameters: against the same model in numbers."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from fractions import Fraction
from typing import Any

import pytest
from flint import acb_mat, arb, arb_mat, ctx

from closedform.algebra.enclosure import ball_of
from closedform.algebra.surds import SurdSum
from closedform.model.driven.model import DrivenModel
from closedform.model.parametric import ValueSet
from closedform.notation.evaluation import enclose
from closedform.notation.expression import names_in
from closedform.notation.plain import plain
from closedform.notation.reader import read_formula
from closedform.response.driven.numbers import (
    DrivenNumbersAt,
    driven_numbers_at,
    driven_numbers_of,
)
from closedform.response.driven.response import respond_driven
from closedform.response.driven.sampling import sampled_rows
from closedform.response.parametric.numbers import ValuesNotCoveredError
from tests.response.driven.stated import numeric, parametric, pulse, sine
from tests.verification.driven.made import stated

Make = Callable[[Mapping[str, Fraction] | None], DrivenModel]

PUMP = {"k": "positive", "q": "real", "T": "positive", "x0": "real"}
MOUNT = {"m": "positive", "c": "nonnegative", "k": "positive", "F": "real", "w": "positive"}


def pump(values: Mapping[str, Fraction] | None) -> DrivenModel:
    """x' = -k x + u, u = q until T."""
    if values is None:
        return parametric(
            [["-k"]],
            [[1]],
            lambda e: [pulse(e, "q", None, "T")],
            initial=["x0"],
            parameters=PUMP,
            timeline=["T"],
        )
    return numeric(
        [[-values["k"]]],
        [[1]],
        lambda e: [pulse(e, values["q"], None, values["T"])],
        initial=[values["x0"]],
        timeline=[values["T"]],
    )


def mount(values: Mapping[str, Fraction] | None) -> DrivenModel:
    """m x'' + c x' + k x = F cos(w t), from rest."""
    if values is None:
        return parametric(
            [[0, 1], ["-k/m", "-c/m"]],
            [[0], ["1/m"]],
            lambda e: [sine(e, "F", "w", "cos")],
            initial=[0, 0],
            parameters=MOUNT,
        )
    m = values["m"]
    return numeric(
        [[0, 1], [-values["k"] / m, -values["c"] / m]],
        [[0], [1 / m]],
        lambda e: [sine(e, values["F"], values["w"], "cos")],
        initial=[0, 0],
    )


CASES: list[tuple[Make, dict[str, str | int]]] = [
    (pump, {"k": "1/3", "q": 2, "T": 5, "x0": 1}),
    (pump, {"k": 2, "q": "-7/2", "T": "1/2", "x0": 0}),
    (mount, {"m": 1, "c": 0, "k": 9, "F": 6, "w": 3}),
    (mount, {"m": 1, "c": 0, "k": 9, "F": 6, "w": 2}),
    (mount, {"m": 2, "c": 8, "k": 8, "F": 1, "w": 2}),
    (mount, {"m": 1, "c": 5, "k": 4, "F": 1, "w": 2}),
    (mount, {"m": 1, "c": 1, "k": 4, "F": 3, "w": 7}),
]


def numbers(make: Make, given: Mapping[str, str | int], digits: int = 10) -> DrivenNumbersAt:
    values = tuple((name, SurdSum.rational(Fraction(v))) for name, v in given.items())
    return driven_numbers_at(respond_driven(make(None)), ValueSet("", values), digits=digits)


@pytest.mark.parametrize(("make", "given"), CASES)
def test_decimals_are_those_of_the_model_in_numbers(
    make: Make, given: Mapping[str, str | int]
) -> None:
    found = numbers(make, given)
    model = make({name: Fraction(value) for name, value in given.items()})
    expected = sampled_rows(respond_driven(model).solutions[0], found.times, 10)
    assert [list(row) for row in found.rows] == expected


@pytest.mark.parametrize(("make", "given"), CASES)
def test_formulas_in_numbers_give_the_decimals(make: Make, given: Mapping[str, str | int]) -> None:
    found = numbers(make, given)
    with ctx.workprec(200):
        starts = [
            enclose(read_formula(plain(i.formula), names=frozenset()), {}) for i in found.instants
        ]
        for t, row in zip(found.times, found.rows, strict=True):
            at = ball_of(t)
            place = max(k for k, start in enumerate(starts) if not start > at)
            for written, decimal in zip(found.pieces[place], row, strict=True):
                formula = read_formula(plain(written.formula), names=frozenset({"t"}))
                assert names_in(formula) <= {"t"}
                value = enclose(formula, {"t": at})
                allowed = arb("1e-7") if written.rounded else arb("1e-9")
                assert abs(value - arb(decimal)) < allowed * (1 + abs(value))


def test_the_case_that_holds_is_found_and_its_names_are_given() -> None:
    resonant = numbers(mount, CASES[2][1])
    assert [plain(f.formula) for f in resonant.pieces[0]] == [
        "t*sin(3*t)",
        "sin(3*t) + 3*t*cos(3*t)",
    ]
    beside = numbers(mount, CASES[3][1])
    assert beside.case != resonant.case
    assert [(q.name, q.decimal) for q in beside.quantities] == [("delta", "0"), ("omega_d", "3")]


def test_instants_lie_in_each_interval_and_the_switching_is_told() -> None:
    found = numbers(pump, CASES[0][1])
    assert [plain(i.formula) for i in found.instants] == ["0", "5"]
    times = [t.as_fraction() for t in found.times]
    assert times[:3] == [0, Fraction(5, 2), 5]
    assert sum(t > 5 for t in times) >= 3
    assert found.rows[0] == ("1",)


def test_without_values_there_are_no_numbers() -> None:
    assert driven_numbers_of(respond_driven(pump(None)), digits=6) == ()
    plain_numbers = pump({name: Fraction(v) for name, v in CASES[0][1].items()})
    assert driven_numbers_of(respond_driven(plain_numbers), digits=6) == ()
    with pytest.raises(TypeError):
        driven_numbers_at(respond_driven(plain_numbers), ValueSet("", ()), digits=6)


def test_values_outside_the_domain_are_refused() -> None:
    with pytest.raises(ValuesNotCoveredError):
        numbers(pump, {"k": -1, "q": 2, "T": 5, "x0": 1})


@pytest.mark.parametrize(
    ("damping", "stiffness", "given"),
    [
        ("1", "4", {}),
        ("d", "4", {"d": "1/2"}),
        ("4", "5", {}),
        ("2", "1", {}),
        ("7", "s", {"s": 5}),
    ],
)
def test_an_oscillator_at_two_pi_has_the_values_of_an_exponential(
    damping: str, stiffness: str, given: Mapping[str, str | int]
) -> None:
    mapping: dict[str, Any] = {
        "equations": [f"x'' + {damping}*x' + {stiffness}*x = sin(2*pi*t)"],
        "initial": {"x": 0, "x'": 0},
    }
    if given:
        mapping["parameters"] = {
            name: {"assume": "positive", "value": value} for name, value in given.items()
        }
    (found,) = driven_numbers_of(respond_driven(stated(mapping)), digits=10)
    c, k = (Fraction(given.get(text, 0)) or Fraction(text) for text in (damping, stiffness))
    with ctx.workprec(200):
        w = 2 * arb.pi()
        zero, one, below = arb(0), arb(1), [-_ball(k), -_ball(c)]
        rows = [[zero, one, zero, zero], [*below, one, zero], [zero, zero, zero, one]]
        matrix = arb_mat([*rows, [zero, zero, -(w**2), zero]])
        for t, row in zip(found.times, found.rows, strict=True):
            end = acb_mat(matrix * ball_of(t)).exp() * acb_mat([[0], [0], [0], [w]])
            for place, decimal in enumerate(row):
                gap = abs(end[place, 0].real - arb(decimal))
                assert gap <= arb("0.51e-9") * abs(arb(decimal)) + arb("1e-50")


def _ball(value: Fraction) -> arb:
    return ball_of(SurdSum.rational(value))
