"""Driven models on the command line: files, summary, statuses and errors."""

from __future__ import annotations

import json
from collections.abc import Callable
from pathlib import Path

import pytest
from typer.testing import CliRunner

import closedform
from closedform.cli.commands import app
from closedform.cli.driven import listed
from closedform.cli.summary import summary
from closedform.document.writeup import WriteUp
from closedform.model.building import model_from
from closedform.model.driven.model import DrivenModel
from closedform.response.driven.response import DrivenResponse, respond_driven
from closedform.verification.driven.verify import verify_driven
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import Check, VerificationRecord
from tests.cli.commanding import Terminal, everything, run
from tests.document.test_parametric_record import VALIDATOR
from tests.parametric.driven_record_reader import check_driven_record, check_driven_texts
from tests.response.driven.test_driven_response import MODELS
from tests.response.driven.test_numbers import mount, pump
from tests.response.driven.test_repeated_values import repeated

TANK = """title = "A tank that is filled for ten minutes"
equations = ["V' = q - V/5", "h = V/3"]
initial = { V = 3 }
[inputs]
q = [{ from = "0", to = "10", is = "2" }]
[outputs]
outflow = "V/5"
"""
MOUNT = """title = "A mount that is shaken"
equations = ["m*x'' + c*x' + k*x = F"]
initial = { x = 0, "x'" = 0 }
[inputs.F]
is = "F0*cos(w*t)"
unit = "N"
meaning = "force on the mass"
[parameters]
m = { assume = "positive", value = 1 }
c = { assume = "nonnegative", value = 0 }
k = { assume = "positive", value = 9 }
F0 = { value = 6 }
w = { assume = "positive", value = 3 }
[[values]]
label = "beside"
w = 2
"""
MAINS = """title = "A coil on the mains"
equations = ["i_L'/10 + 5*i_L = 325*sin(100*pi*t)"]
initial = { i_L = 0 }
"""
FILES = {"tank": TANK, "mount": MOUNT, "mains": MAINS}


@pytest.fixture
def here(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Let the test run in a folder that is empty."""
    monkeypatch.chdir(tmp_path)


@pytest.fixture
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A folder with a few sound models, in which the test runs."""
    monkeypatch.chdir(tmp_path)
    for name, text in FILES.items():
        (tmp_path / f"{name}.toml").write_text(text, encoding="utf-8")
    return tmp_path


def test_driven_models_are_written_up_with_their_records(folder: Path) -> None:
    done = run("writeup", *(f"{name}.toml" for name in FILES), cwd=folder)
    assert (done.returncode, done.stderr) == (0, "")
    files = [f"out/{name}{ending}" for name in FILES for ending in (".tex", ".record.json")]
    assert done.stdout.split() == files
    records = [json.loads((folder / file).read_text("utf-8")) for file in files[1::2]]
    for record in records:
        VALIDATOR.validate(record)
        check_driven_texts(record)
    tank, shaken, mains = records
    assert check_driven_record(tank) == 1
    assert tank["equations"] == ["V' = q - V/5", "h = V/3"]
    assert tank["made_of"] == {"h": "V/3", "outflow": "V/5"}
    assert [row["label"] for row in shaken["values"]] == ["", "beside"]
    for row in shaken["values"]:
        assert check_driven_record(shaken, row["parameters"]) == 1
    assert shaken["inputs"]["F"]["meaning"] == "force on the mass"
    assert check_driven_record(mains, {}) == 1
    assert mains["values"][0]["solution"]["i_L"][0] == "0"


@pytest.mark.usefixtures("folder")
def test_the_summary_tells_what_was_stated_and_found_within_the_terminal(tmp_path: Path) -> None:
    terminal = Terminal("writeup", "tank.toml", "mount.toml", cwd=tmp_path)
    assert terminal.finish() == 0
    assert [line for line in terminal.lines if len(line) > 80] == []
    for line in (
        "  equations      2, in V, h",
        "  states         1: V",
        "  eliminated     1: h",
        "  inputs         1: q",
        "  intervals      2: from 0, 10",
        "  eigenvalues    -0.2",
        "  of the inputs  0",
        "  stability      stable",
        "  resonance      none",
        "  steady state   V, h, outflow zero",
        "  equations      1, in x",
        "  parameters     5: m, c, k, F0, w",
        "  resonance      F at ± w i (factor t) in case 4",
        "2 models: 2 written up, 0 failed",
    ):
        assert line in terminal.lines, line
    assert any(line.startswith("  proved  ") for line in terminal.lines)


ERRORS = [
    ("nonlinear", TANK.replace('V/5", "h', 'V^2/5", "h'), "V^2"),
    ("early", TANK.replace("V = 3", "V = 3, h = 7"), "h"),
    ("unknown", TANK.replace("is =", "was ="), "was"),
    ("undetermined", TANK.replace("h = V/3", "V = V"), "V = V"),
]


@pytest.mark.parametrize(("kind", "text", "said"), ERRORS)
def test_what_cannot_be_used_gives_status_2_and_writes_nothing(
    runner: CliRunner,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
    kind: str,
    text: str,
    said: str,
) -> None:
    monkeypatch.chdir(tmp_path)
    (tmp_path / f"{kind}.toml").write_text(text, encoding="utf-8")
    done = runner.invoke(app, ["writeup", f"{kind}.toml"])
    assert done.exit_code == 2
    assert done.stdout == ""
    assert done.stderr.startswith(f"error: {kind}.toml")
    assert said in done.stderr
    assert everything(tmp_path) == [f"{kind}.toml"]


def spoiled(outcome: str) -> Callable[[DrivenResponse], VerificationRecord | CaseRecords]:
    """Return a proof in which one check has this outcome, that of the last case if any."""

    def verify(response: DrivenResponse) -> VerificationRecord | CaseRecords:
        found = verify_driven(response)
        check = Check("the joins", outcome, "x jumps at T by 1")  # type: ignore[arg-type]
        if isinstance(found, CaseRecords):
            last = VerificationRecord((*found.cases[-1].checks, check))
            return CaseRecords(found.whole, (*found.cases[:-1], last))
        return VerificationRecord((*found.checks, check))

    return verify


@pytest.mark.parametrize("name", ["tank", "mount"])
@pytest.mark.parametrize(
    ("outcome", "status", "said"),
    [("refuted", 1, "failed its own proof"), ("not attempted", 2, "could not be proved")],
)
def test_what_is_refuted_or_left_open_is_not_issued(
    folder: Path,
    monkeypatch: pytest.MonkeyPatch,
    name: str,
    outcome: str,
    status: int,
    said: str,
) -> None:
    runner = CliRunner()
    monkeypatch.setattr("closedform.document.writeup.verify_driven", spoiled(outcome))
    done = runner.invoke(app, ["writeup", f"{name}.toml"])
    assert (done.exit_code, done.stdout) == (status, "")
    assert said in done.stderr
    assert "x jumps at T by 1" in done.stderr
    assert everything(folder) == [f"{kind}.toml" for kind in sorted(FILES)]


def test_the_library_loads_and_writes_up_a_driven_model(folder: Path) -> None:
    model = closedform.load(folder / "tank.toml")
    assert isinstance(model, DrivenModel)
    written = closedform.write_up(model, into=folder / "out", digits=9, record=False)
    assert isinstance(written.response, DrivenResponse)
    assert [path.name for path in written.files] == ["tank.tex"]
    items = [check.item for check in written.verification.checks]  # type: ignore[union-attr]
    assert items[-1] == "statements of the derivation"


# --- the lines of the summary ------------------------------------------------------------------


def told(response: DrivenResponse, width: int = 80) -> list[str]:
    one = VerificationRecord((Check("a", "proved", ""),))
    cases = isinstance(response.model, DrivenModel) and response.model.domain is not None
    records = CaseRecords(one, tuple(one for _ in response.solutions)) if cases else one
    lines = summary(WriteUp(response, records, ()), (Path("out/x.tex"),), digits=6, width=width)
    return ["".join(text for text, _ in line) for line in lines]


@pytest.mark.parametrize("name", MODELS)
@pytest.mark.parametrize("width", [40, 80])
def test_no_line_is_wider_than_the_terminal(name: str, width: int) -> None:
    lines = told(respond_driven(MODELS[name]), width)
    assert all(len(line) <= width for line in lines)
    assert sum(line.startswith("  eigenvalues ") for line in lines) == 1


def test_eigenvalues_of_the_matrix_and_of_the_inputs_are_told_apart() -> None:
    lines = told(respond_driven(MODELS["twofold resonance"]))
    assert "  eigenvalues    ± 2 i  multiplicity 2" in lines
    assert "  of the inputs  ± 2 i" in lines
    assert "  resonance      u1 at ± 2 i (factor t^2)" in lines
    assert "  stability      not stable" in lines
    lines = told(respond_driven(MODELS["integrator"]))
    assert "  eigenvalues    0  multiplicity 2" in lines


def test_what_is_the_same_in_all_cases_is_told_once() -> None:
    lines = told(respond_driven(pump(None)))
    assert "  cases          1, for all values" in lines
    assert "  stability      stable" in lines
    lines = told(respond_driven(mount(None)))
    assert "  stability      undecided in cases 1, 2, 3" in lines
    assert "                 not stable in case 4" in lines


def test_inputs_that_repeat_are_told_and_what_they_lead_to() -> None:
    lines = told(respond_driven(repeated(None)))
    assert "  repeats        u1 every 3" in lines
    assert "  steady state   periodic" in lines
    lines = told(respond_driven(repeated(4)))
    assert "  repeats        u1 every 3, 4 times" in lines
    assert not any(line.startswith("  steady state") for line in lines)


def test_conditions_at_points_are_told() -> None:
    model = model_from(
        {"title": "Rod", "equations": ["T'' = T"], "at_points": ["T(0) = 1", "T(2) = 0"]},
        name="rod",
    )
    assert isinstance(model, DrivenModel)
    lines = told(respond_driven(model))
    assert "  conditions     T(0) = 1, T(2) = 0" in lines
    assert "  resonance      none" not in lines


def test_long_lists_are_cut() -> None:
    assert listed(["a", "b"]) == "2: a, b"
    assert listed([f"x{k}" for k in range(30)]).endswith("x23, …")
