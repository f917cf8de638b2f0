"""The JSON of a checked derivation: as its schema says, whatever is in it."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path
from typing import Any

import jsonschema
import pytest

from closedform.document.checked_record import check_record, check_text
from tests.document.checked_samples import CHECKED_SAMPLES, HOSTILE, hostile, slipped

ROOT = Path(__file__).parents[2]
SCHEMA = json.loads((ROOT / "templates" / "record" / "check.schema.json").read_text("utf-8"))
VALIDATOR = jsonschema.Draft202012Validator(SCHEMA)


def test_the_schema_is_one() -> None:
    jsonschema.Draft202012Validator.check_schema(SCHEMA)


@pytest.mark.parametrize("name", CHECKED_SAMPLES)
def test_every_record_is_as_the_schema_says(name: str) -> None:
    report = CHECKED_SAMPLES[name]()
    data = json.loads(check_text(report))
    assert list(VALIDATOR.iter_errors(data)) == []
    assert [line["line"] for line in data["lines"]] == [v.line.number for v in report.lines]


def spoiled() -> list[dict[str, Any]]:
    def changed(**keys: object) -> dict[str, Any]:
        return {**check_record(slipped()), **keys}

    line = check_record(slipped())["lines"][0]
    missing = {key: value for key, value in line.items() if key != "right"}
    return [
        changed(format="other"),
        changed(more=1),
        changed(first_wrong=0),
        changed(counts={"holds": 1}),
        changed(lines=[{**line, "verdict": "fine"}]),
        changed(lines=[{**line, "line": 0}]),
        changed(lines=[missing]),
    ]


@pytest.mark.parametrize("data", spoiled())
def test_the_schema_refuses_what_is_not_a_record(data: dict[str, Any]) -> None:
    assert list(VALIDATOR.iter_errors(data)) != []


def test_a_failing_line_has_its_right_form_its_slip_and_its_place() -> None:
    data = check_record(slipped())
    assert data["first_wrong"] == 4
    assert data["counts"]["carried"] == 3
    fourth = data["lines"][3]
    assert fourth["read"] == ["lambda = (5 ± 3)/2 = {1, -4}"]
    assert fourth["right"] == fourth["slip_mended"] == "{-1, -4}"
    assert fourth["right_latex"] == r"\left\{-1,\, -4\right\}"
    assert fourth["slip"] == "a sign was lost"
    assert fourth["slip_where"] == "before 5 in the numerator"
    assert fourth["place"] == {"file": "notes/tanks.tex", "key": None, "line": 26, "column": 3}
    assert [line["label"] for line in data["lines"][:3]] == [None, None, "eq:trace"]
    first = data["lines"][0]
    absent = ("right", "right_latex", "slip", "slip_where", "slip_mended", "carried_from")
    assert [first[key] for key in absent] == [None] * 6
    assert data["lines"][7]["read"] == []


def test_text_is_kept_as_it_is_where_utf_8_can_hold_it() -> None:
    text = check_text(hostile())
    kept = HOSTILE.replace("\udcff", "?")
    assert json.loads(text)["title"] == kept
    assert "漢 🚀" in text
    assert not any(ord(sign) < 32 and sign != "\n" for sign in text)
    text.encode("utf-8")


def test_the_same_report_gives_the_same_bytes_in_any_process() -> None:
    program = (
        "from tests.document.checked_samples import slipped\n"
        "from closedform.document.checked_record import check_text\n"
        "from closedform.document.checked_junit import junit_text\n"
        "from closedform.document.checked_render import render_check\n"
        "import sys\n"
        "r = slipped()\n"
        "text = check_text(r) + junit_text(r) + render_check(r)\n"
        "sys.stdout.buffer.write(text.encode())\n"
    )
    outputs = {
        subprocess.run(
            [sys.executable, "-c", program],
            cwd=ROOT,
            env={"PYTHONHASHSEED": seed, "PATH": "", "LANG": lang},
            capture_output=True,
            check=True,
        ).stdout
        for seed, lang in (("1", "C"), ("2", "C.UTF-8"))
    }
    assert len(outputs) == 1
    assert b"closedform check 1" in outputs.pop()
