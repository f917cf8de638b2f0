"""How it is said why an element in one parameter has a sign; and that this is proved."""

from __future__ import annotations

from typing import Any

import pytest

from closedform.algebra.domain import Comparison, ParameterDomain
from closedform.algebra.field import Scalar
from closedform.derivation.parametric.build import derive_cases
from closedform.derivation.parametric.reasons import Sentence, reason_of
from closedform.derivation.step import Statement, Step
from closedform.model.building import model_from
from closedform.notation.plain import plain
from closedform.response.parametric.response import respond_in_cases
from closedform.verification.parametric.verify import verify_cases
from tests.sign_checks import field_of

FIELD = field_of("a h k")
A, H, K = (FIELD.symbol(n) for n in FIELD.parameters)


def words(sentence: Sentence) -> str:
    parts = []
    for part in sentence:
        if isinstance(part, str):
            parts.append(part)
        elif isinstance(part, Statement):
            parts.append(f" {part.relation} ".join(map(plain, part.sides)))
        else:
            parts.append(plain(part))
    return " ".join(parts).replace(" ,", ",")


@pytest.mark.parametrize(
    ("conditions", "element", "said"),
    [
        ([(A**3 - 2, ">")], 5 * A**2 - 4, "> 0, as a lies above every zero, by a^3 - 2 > 0"),
        ([(-(A**3) - 2, ">")], 5 * A**2 - 4, "> 0, as a lies below every zero, by -2 - a^3 > 0"),
        ([(2 - A**2, ">")], A**2 - A - 4, "< 0, as a lies between two zeros, by 2 - a^2 > 0"),
        ([(A**2 - 6, ">")], A**2 - 2 * A - 1, "> 0, by its signs between its zeros in a, by"),
        ([], A**4 + A + 1, "> 0, as it has no real zero in a"),
        ([(A**2 - 2, ">")], A, "a != 0, by a^2 - 2 > 0"),
        (
            [((A**2 - 2) * (A**2 - 7), "="), (4 - A**2, ">")],
            A**2 - 2,
            "a^2 - 2 = 0, as a is one of its zeros, by",
        ),
        ([(H * K - 1, "="), (K - 2, ">")], 1 - 2 * H, "where h*k - 1 = 0"),
        ([(H * K - 1, "="), (K - 2, ">")], 1 - 2 * H, "zero or pole, by k - 2 > 0"),
    ],
)
def test_the_reason_says_where_the_parameter_lies(
    conditions: list[tuple[Scalar, str]], element: Scalar, said: str
) -> None:
    domain = ParameterDomain(FIELD, tuple(Comparison(e, r) for e, r in conditions))
    assert said in words(reason_of(FIELD, domain.sign_of(element), deep=True))


MODELS: dict[str, dict[str, Any]] = {
    "as a lies above every zero, by a^3 - 2 > 0": {
        "matrix": [[0, 1], ["-(a^2 + 1)", "-3*a"]],
        "parameters": {"a": "positive"},
        "conditions": ["a^3 > 2"],
    },
    "as h lies below every zero, by 1/h^2 - 3 > 0": {
        "matrix": [[0, 1], ["-h", "-k"]],
        "parameters": {"h": "positive", "k": "positive"},
        "conditions": ["h*k = 1", "k^2 > 3"],
    },
    "a - 1 != 0, by a^2 - 2 > 0": {
        "matrix": [["-a", 0], [1, "-a^2"]],
        "parameters": {"a": "real"},
        "conditions": ["a^2 > 2"],
    },
}


@pytest.mark.parametrize("said", MODELS)
def test_a_derivation_with_such_a_reason_is_proved(said: str) -> None:
    model = {"title": "Release", "states": ["x", "y"], "initial": [1, 0], **MODELS[said]}
    response = respond_in_cases(model_from(model, name="release"))
    assert len(response.cases) == 1
    derivation = derive_cases(response, verify_cases(response), digits=6, numbers=())
    last = derivation.checks[-1]
    assert (last.item, last.outcome) == ("statements of the derivation", "enclosed")
    rows: list[Any] = [row for s in derivation.steps for key in s.facts for row in _rows(s, key)]
    assert any(said in words(row["fully"]) for row in rows if row.get("fully"))


def _rows(step: Step, key: str) -> list[Any]:
    rows = step.facts[key]
    return [r for r in rows if isinstance(r, dict)] if isinstance(rows, list) else []
