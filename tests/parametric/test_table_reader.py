"""The reader of tables passes right decimals and tells wrong ones."""

from __future__ import annotations

from copy import deepcopy
from typing import Any

import pytest

from tests.parametric.record_reader import DisagreementError
from tests.parametric.table_reader import check_table

OUTPUTS = {"total": "a*x"}
RECORD: dict[str, Any] = {
    "time": "t",
    "states": ["x"],
    "matrix": [["-a"]],
    "initial": ["2"],
    "parameters": {"a": {"assume": "positive"}},
    "cases": [
        {
            "condition": "true",
            "names": {"tau": {"definition": "1/a"}},
            "transition": [["exp(-t/tau)"]],
            "solution": ["2*exp(-t/tau)"],
            "outputs": {"total": "2*a*exp(-t/tau)"},
        },
        {"condition": "a < 0"},
    ],
    "not_covered": [],
    "values": [
        {
            "label": "slow",
            "parameters": {"a": "1/3"},
            "case": 0,
            "names": {"tau": "3.000"},
            "times": ["0", "1/2", "300"],
            "solution": {"x": ["2", "1.6930", "7.440e-44"]},
            "outputs": {"total": ["0.66667", "0.56432", "2.48005e-44"]},
        }
    ],
}


def test_right_decimals_pass() -> None:
    assert check_table(RECORD, OUTPUTS) == 7
    assert check_table({**RECORD, "values": []}, OUTPUTS) == 0


@pytest.mark.parametrize(
    ("path", "new", "words"),
    [
        (("solution", "x", 1), "1.6931", "x at time 1"),
        (("solution", "x", 2), "7.441e-44", "x at time 2"),
        (("outputs", "total", 0), "0.66666", "total at time 0"),
        (("names", "tau"), "3.001", "tau"),
        (("case",), 1, "case 1 does not hold"),
        (("parameters",), {}, "not every parameter"),
        (("outputs",), {}, "the columns"),
    ],
)
def test_wrong_decimals_are_told(path: tuple[Any, ...], new: Any, words: str) -> None:
    record = deepcopy(RECORD)
    part = record["values"][0]
    for key in path[:-1]:
        part = part[key]
    part[path[-1]] = new
    with pytest.raises(DisagreementError, match=words):
        check_table(record, OUTPUTS)
