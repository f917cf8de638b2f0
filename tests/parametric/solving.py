"""From a model with parameters to its record as plain data, through the package."""

from __future__ import annotations

import json
from collections.abc import Mapping, Sequence
from typing import Any

import closedform
from closedform.document.record import record_text
from closedform.model.building import model_from
from closedform.response.parametric.numbers import numbers_of

__all__ = ["record_of_mapping", "record_of_model", "stated"]

Record = dict[str, Any]


def stated(
    states: Sequence[str],
    matrix: Sequence[Sequence[str]],
    initial: Sequence[str],
    parameters: Mapping[str, str],
    **more: Any,
) -> Any:
    """Return the model; `parameters` gives what is assumed of each."""
    return model_from(
        {
            "title": "A model with parameters",
            "states": list(states),
            "matrix": [list(row) for row in matrix],
            "initial": list(initial),
            "parameters": {name: {"assume": assume} for name, assume in parameters.items()},
            **more,
        },
        name="model",
    )


def record_of_mapping(mapping: Mapping[str, Any]) -> Record:
    return record_of_model(model_from(mapping, name="model"))


def record_of_model(model: Any) -> Record:
    """Solve, prove, and return the record.  It is an error if a proof fails."""
    response = closedform.respond(model)
    records = closedform.verify(response)
    failed = [
        check
        for record in (records.whole, *records.cases)
        for check in record.checks
        if check.outcome not in ("proved", "enclosed")
    ]
    assert not failed
    assert records.holds
    numbers = numbers_of(response, digits=12)
    record: Record = json.loads(record_text(response, records, numbers))
    return record
