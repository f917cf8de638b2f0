"""A checked derivation as JSON, for programs to read.

The layout is that of templates/record/check.schema.json, where every key is described.
"""

from __future__ import annotations

import json
from typing import Any

from closedform.checking.verdict import CheckReport, LineVerdict
from closedform.document.checked_words import counts
from closedform.notation.latex.names import derivatives_of
from closedform.notation.written.latex_form import latex_written
from closedform.notation.written.plain_form import plain_statement, plain_written

__all__ = ["FORMAT", "check_record", "check_text"]

FORMAT = "closedform check 1"


def check_text(report: CheckReport) -> str:
    """Return the report as JSON text: the same report always gives the same bytes.

    Half a surrogate pair, which a file name can hold but UTF-8 cannot, becomes a question mark.
    """
    text = json.dumps(check_record(report), indent=1, ensure_ascii=False)
    return text.encode("utf-8", "replace").decode("utf-8") + "\n"


def check_record(report: CheckReport) -> dict[str, Any]:
    """Return the report as plain data: texts, numbers and lists."""
    with derivatives_of(report.time):
        lines = [_line(verdict) for verdict in report.lines]
    return {
        "format": FORMAT,
        "name": report.name,
        "title": report.title,
        "source": report.source,
        "model": report.model,
        "model_title": report.model_title,
        "time": report.time,
        "case": report.case,
        "first_wrong": report.first_wrong,
        "counts": dict(counts(report)),
        "lines": lines,
    }


def _line(verdict: LineVerdict) -> dict[str, Any]:
    line, right, slip = verdict.line, verdict.right, verdict.slip
    mended = None if slip is None else slip.mended
    place = line.place
    return {
        "line": line.number,
        "says": verdict.says,
        "text": line.text,
        "typed": line.typed,
        "label": line.label or None,
        "place": {
            "file": place.file,
            "key": place.key,
            "line": place.line,
            "column": place.column,
        },
        "read": [plain_statement(statement) for statement in verdict.read],
        "verdict": verdict.verdict,
        "reason": verdict.reason,
        "right": None if right is None else plain_written(right),
        "right_latex": None if right is None else latex_written(right),
        "slip": None if slip is None else slip.name,
        "slip_where": slip.where if slip is not None and slip.where else None,
        "slip_mended": None if mended is None else plain_written(mended),
        "carried_from": verdict.carried_from,
        "notes": list(verdict.notes),
    }
