"""The record: a write-up's results as JSON that anyone can check without this program.

The layout is that of templates/record/record.schema.json, where every key is described.
"""

from __future__ import annotations

import json
from collections.abc import Sequence
from typing import Any

from closedform.document.driven_record import driven_record
from closedform.document.numeric_record import numeric_record
from closedform.document.parametric_record import parametric_record
from closedform.response.driven.numbers import DrivenNumbersAt
from closedform.response.driven.response import DrivenResponse
from closedform.response.parametric.numbers import NumbersAt
from closedform.response.parametric.response import ParametricResponse
from closedform.response.response import Response
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import VerificationRecord

__all__ = ["DIGITS", "LAYOUT", "record_of", "record_text"]

LAYOUT = "closedform record 1"
DIGITS = 40

AnyResponse = Response | ParametricResponse | DrivenResponse


def record_text(
    response: AnyResponse,
    record: VerificationRecord | CaseRecords,
    numbers: Sequence[NumbersAt] | Sequence[DrivenNumbersAt] = (),
) -> str:
    """Return the record as JSON text: the same response always gives the same bytes."""
    data = record_of(response, record, numbers)
    return json.dumps(data, indent=1, ensure_ascii=False) + "\n"


def record_of(
    response: AnyResponse,
    record: VerificationRecord | CaseRecords,
    numbers: Sequence[NumbersAt] | Sequence[DrivenNumbersAt] = (),
) -> dict[str, Any]:
    """Return the record as plain data: texts, lists and tables.

    `record` is of the kind of the response; `numbers` belong to a model with parameters.
    Raises TypeError for a record of the other kind.
    """
    match response, record:
        case Response(), VerificationRecord():
            return {"layout": LAYOUT, **numeric_record(response, record, DIGITS)}
        case ParametricResponse(), CaseRecords():
            own = [row for row in numbers if isinstance(row, NumbersAt)]
            return {"layout": LAYOUT, **parametric_record(response, record, own)}
        case DrivenResponse(), _:
            rows = [row for row in numbers if isinstance(row, DrivenNumbersAt)]
            return {"layout": LAYOUT, **driven_record(response, record, rows, DIGITS)}
    raise TypeError(f"{type(record).__name__} is no record of {response!r}")
