"""Models with parameters on the command line: files, summary, statuses and errors."""

from __future__ import annotations

import json
from pathlib import Path

import jsonschema
import pytest
from typer.testing import CliRunner

import closedform
from closedform.cli.cases import case_lines, uncovered_lines
from closedform.cli.commands import app
from closedform.cli.summary import summary
from closedform.document.writeup import WriteUp
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.parametric.verify import verify_cases
from closedform.verification.record import Check, VerificationRecord
from tests.cli.commanding import Terminal, everything, run
from tests.document.test_parametric_record import VALIDATOR
from tests.response.parametric.solved import response_to

SPRING = """title = "A mass on a spring"
states = ["x", "v"]
matrix = [[0, 1], ["-k/m", "-c/m"]]
initial = ["x0", 0]
[parameters]
x0 = "real"
[parameters.m]
assume = "positive"
value = 2
[parameters.c]
assume = "nonnegative"
value = 1
[parameters.k]
assume = "positive"
value = 8
[outputs]
force = "k*x"
[[values]]
label = "heavy"
c = 20
x0 = 1
"""
OPEN_QUARTIC = """title = "Four in a row"
states = ["x1", "x2", "x3", "x4"]
matrix = [[0, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1], ["-a", "-b", "-c", "-d"]]
initial = [1, 0, 0, 0]
[parameters]
a = "positive"
b = "positive"
c = "positive"
d = "positive"
"""


@pytest.fixture
def spring(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A sound model with parameters, `spring.toml`, in the folder where the test runs."""
    monkeypatch.chdir(tmp_path)
    path = tmp_path / "spring.toml"
    path.write_text(SPRING, encoding="utf-8")
    return path


def test_a_model_with_parameters_is_written_up_with_its_record(spring: Path) -> None:
    done = run("writeup", spring.name, cwd=spring.parent)
    assert (done.returncode, done.stderr) == (0, "")
    assert done.stdout == "out/spring.tex\nout/spring.record.json\n"
    record = json.loads((spring.parent / "out" / "spring.record.json").read_text("utf-8"))
    jsonschema.validate(record, VALIDATOR.schema)
    assert len(record["cases"]) == 3
    assert [row["label"] for row in record["values"]] == ["heavy"]
    assert record["verification"][-1]["item"] == "statements of the derivation"


def test_the_values_of_the_model_are_held_against_numbers(spring: Path) -> None:
    spring.write_text(SPRING.replace('x0 = "real"', "x0 = {value = 3}"), encoding="utf-8")
    written = closedform.write_up(closedform.load(spring), into=spring.parent / "out")
    assert isinstance(written.verification, CaseRecords)
    items = [check.item for check in written.verification.whole.checks]
    assert "the solution at the values of the model" in items
    record = json.loads(written.files[1].read_text("utf-8"))
    assert [row["label"] for row in record["values"]] == ["", "heavy"]


@pytest.mark.usefixtures("spring")
def test_the_summary_tells_the_cases_within_the_terminal(tmp_path: Path) -> None:
    terminal = Terminal("writeup", "spring.toml", cwd=tmp_path)
    assert terminal.finish() == 0
    assert [line for line in terminal.lines if len(line) > 80] == []
    told = "\n".join(terminal.lines)
    assert "  states         2: x, v" in told
    assert "  parameters     4: x0, m, c, k" in told
    assert sum(" == " in line for line in terminal.lines) == 1
    assert "  proved" in told
    assert "out/spring.record.json" in told


ERRORS = [
    ("unknown", SPRING + "[dummy]\n", "dummy"),
    ("roots", OPEN_QUARTIC, "irreducible factor of degree 4"),
    ("unused", SPRING.replace('"-c/m"', '"-k/m"'), "c"),
    ("empty", SPRING.replace("[parameters]", 'conditions = ["k < 0"]\n[parameters]', 1), "k"),
    ("value", SPRING.replace("value = 8", "value = -8"), "-8"),
]


@pytest.mark.parametrize(("kind", "text", "said"), ERRORS)
def test_what_cannot_be_used_gives_status_2_and_writes_nothing(
    runner: CliRunner, spring: Path, kind: str, text: str, said: str
) -> None:
    spring.rename(spring.with_name(f"{kind}.toml")).write_text(text, encoding="utf-8")
    done = runner.invoke(app, ["writeup", f"{kind}.toml"])
    assert done.exit_code == 2
    assert done.stdout == ""
    assert done.stderr.startswith("error: ")
    assert said in done.stderr
    assert everything(spring.parent) == [f"{kind}.toml"]


def spoiled(outcome: str) -> object:
    """Return a proof in which one check of the second case has this outcome."""

    def verify(response: ParametricResponse) -> CaseRecords:
        records = verify_cases(response)
        check = Check("x(0) = x0", outcome, "entry 2 is 1, not 0")  # type: ignore[arg-type]
        second = VerificationRecord((*records.cases[1].checks, check))
        return CaseRecords(records.whole, (records.cases[0], second, *records.cases[2:]))

    return verify


@pytest.mark.parametrize(
    ("outcome", "status", "said"),
    [("refuted", 1, "failed its own proof"), ("not attempted", 2, "could not be proved")],
)
def test_what_is_refuted_or_left_open_is_not_issued(
    runner: CliRunner,
    spring: Path,
    monkeypatch: pytest.MonkeyPatch,
    outcome: str,
    status: int,
    said: str,
) -> None:
    monkeypatch.setattr("closedform.document.writeup.verify_cases", spoiled(outcome))
    done = runner.invoke(app, ["writeup", spring.name])
    assert (done.exit_code, done.stdout) == (status, "")
    assert said in done.stderr
    assert "entry 2 is 1, not 0" in done.stderr
    assert everything(spring.parent) == ["spring.toml"]


# --- the lines of the summary ------------------------------------------------------------------


def told(response: ParametricResponse, records: CaseRecords, width: int = 80) -> list[str]:
    result = WriteUp(response, records, ())
    lines = summary(result, (Path("out/x.tex"),), digits=6, width=width)
    return ["".join(text for text, _ in line) for line in lines]


def proved(response: ParametricResponse) -> CaseRecords:
    one = VerificationRecord(
        (Check("a", "proved", ""), Check("b", "enclosed", ""), Check("c", "not attempted", "why"))
    )
    return CaseRecords(one, tuple(one for _ in response.cases))


def test_checks_of_the_whole_and_of_all_cases_are_counted() -> None:
    response = response_to("damped")
    lines = told(response, proved(response))
    assert "  proved         4 identities, by exact arithmetic" in lines
    assert "  enclosed       4 comparisons, by certified numbers" in lines
    assert lines.count("  not attempted  c: why") == 4


@pytest.mark.parametrize("name", ["damped", "even quartic", "compartments", "decay"])
@pytest.mark.parametrize("width", [40, 80])
def test_no_line_is_wider_than_the_terminal(name: str, width: int) -> None:
    response = response_to(name)
    lines = told(response, proved(response), width)
    assert all(len(line) <= width for line in lines)
    assert sum(line.startswith("  cases ") for line in lines) == 1


def test_an_only_case_and_what_is_not_covered_are_told() -> None:
    assert case_lines(response_to("compartments")) == ["1, for all values"]
    decay = response_to("decay")
    assert len(case_lines(decay)) == 5
    assert uncovered_lines(decay) == []
    assert not any("not covered" in line for line in told(decay, proved(decay)))
