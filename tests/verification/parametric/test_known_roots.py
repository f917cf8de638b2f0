"""Solutions at known roots are proved; a wrong root, part or amount is found."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest

from closedform.response.parametric.numbers import numbers_of
from closedform.response.parametric.quantities import ResidueDefinition, RootDefinition
from closedform.verification.parametric.numbers import numbers_check
from closedform.verification.parametric.verify import verify_cases
from closedform.verification.parametric.written import formula_check
from tests.parametric.with_known_roots import MODELS, response_at_known_roots
from tests.verification.parametric.spoiling import with_case

each_model = pytest.mark.parametrize("name", MODELS)


@each_model
def test_every_check_holds(name: str) -> None:
    records = verify_cases(response_at_known_roots(name))
    found = {c.outcome for r in (records.whole, *records.cases) for c in r.checks}
    assert found <= {"proved", "enclosed"}


@pytest.mark.parametrize("name", ["two masses", "symbolic input", "cubic", "tuned to pi"])
def test_decimals_agree_with_another_way(name: str) -> None:
    response = response_at_known_roots(name)
    for numbers in numbers_of(response, digits=6):
        assert numbers_check(response, numbers, digits=6).outcome == "enclosed"


@pytest.mark.parametrize(
    ("kind", "change"),
    [
        (RootDefinition, {"which": 1}),
        (RootDefinition, {"which": 9}),
        (RootDefinition, {"part": "imaginary"}),
        (ResidueDefinition, {"which": 2}),
        (ResidueDefinition, {"part": "imaginary"}),
        (ResidueDefinition, {"weight": 1}),
    ],
)
def test_another_definition_is_refuted(kind: type, change: dict[str, Any]) -> None:
    response = response_at_known_roots("two masses")
    case = response.cases[0]
    place = next(k for k, q in enumerate(case.quantities) if isinstance(q.root, kind))
    quantities = list(case.quantities)
    root = quantities[place].root
    assert root is not None
    quantities[place] = replace(quantities[place], root=replace(root, **change))
    spoiled = with_case(response, 0, quantities=tuple(quantities))
    assert formula_check(spoiled, spoiled.cases[0]).outcome in ("refuted", "not attempted")
    if change.get("which") != 9:
        assert formula_check(spoiled, spoiled.cases[0]).outcome == "refuted"
