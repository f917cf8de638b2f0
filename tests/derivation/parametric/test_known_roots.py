"""Derivations with known roots: names with intervals and decimals, all of them proved."""

from __future__ import annotations

from dataclasses import replace
from functools import cache
from typing import Any

import pytest

from closedform.derivation.parametric.build import derive_cases
from closedform.derivation.parametric.proof.statements import prove_case_statements
from closedform.derivation.proof.finding import StatementRefutedError
from closedform.derivation.step import Derivation, Step
from closedform.response.parametric.numbers import numbers_of
from closedform.verification.parametric.verify import verify_cases
from tests.parametric.with_known_roots import MODELS, response_at_known_roots


@cache
def derived(name: str) -> Derivation:
    response = response_at_known_roots(name)
    numbers = numbers_of(response, digits=6)
    return derive_cases(response, verify_cases(response), numbers=numbers)


def definitions(name: str) -> Step:
    return next(step for step in derived(name).steps if step.kind == "definitions")


@pytest.mark.parametrize("name", MODELS)
def test_every_statement_is_proved(name: str) -> None:
    assert derived(name).checks[-1].item == "statements of the derivation"


def test_roots_have_intervals_and_certified_decimals() -> None:
    (row,) = definitions("two masses").facts["known"]  # type: ignore[misc]
    told = [
        (line["name"].text, line["place"], line["part"], line["decimal"]) for line in row["table"]
    ]
    assert told == [
        ("alpha_1", 4, "real", "-0.109835"),
        ("omega_1", 4, "imaginary", "2.41915"),
        ("alpha_2", 2, "real", "-0.640165"),
        ("omega_2", 2, "imaginary", "5.80470"),
    ]


def test_constants_of_the_solution_are_shown_and_those_beside_it_are_not() -> None:
    rows: Any = definitions("two masses").facts["amounts"]
    shown = [c["name"].text for row in rows if row["shown"] for c in row["constants"]]
    assert shown == [f"C_{k}" for k in range(1, 17)]
    assert len(rows) == 2 * (4 + 4)


def test_numbers_are_not_told_once_more_with_the_values() -> None:
    (step,) = (s for s in derived("symbolic input").steps if s.kind == "numbers")
    (row,) = step.facts["sets"]  # type: ignore[misc]
    assert row["quantities"] == []


@pytest.mark.parametrize(
    ("part", "key", "wrong"),
    [
        ("known", "decimal", "2.41916"),
        ("known", "interval", ("3.41", "3.42")),
        ("amounts", "decimal", "0.0000140912"),
        ("amounts", "weight", 1),
        ("amounts", "part", "imaginary"),
    ],
)
def test_a_wrong_number_is_refuted(part: str, key: str, wrong: object) -> None:
    name = "two masses"
    step, response = definitions(name), response_at_known_roots(name)
    rows: Any = step.facts[part]
    table = "table" if part == "known" else "constants"
    place = 1 if part == "known" else 0
    lines = [dict(line) for line in rows[0][table]]
    lines[place][key] = wrong
    spoiled = replace(step, facts={**step.facts, part: [{**rows[0], table: lines}, *rows[1:]]})
    steps = [spoiled if s is step else s for s in derived(name).steps]
    steps = [s for s in steps if s.kind not in ("verification", "cautions")]
    with pytest.raises(StatementRefutedError):
        prove_case_statements(response, steps)
