"""What becomes of a command: its exit status, its errors, and what it leaves behind."""

from __future__ import annotations

import pickle
import re
from pathlib import Path

import pytest
from typer.testing import CliRunner

from closedform.cli.batch import SameFileError
from closedform.cli.commands import app
from closedform.cli.screen import StreamError
from closedform.cli.starters import StarterExistsError, UnknownStarterError
from closedform.cli.status import status_of, worst
from closedform.document.engine import NoTexEngineError, available_engines
from closedform.document.files import CannotWriteError
from closedform.errors import ClosedformError, InputError
from closedform.response.response import Response
from closedform.verification.record import (
    Check,
    ResponseRefutedError,
    UnprovedError,
    VerificationRecord,
)
from closedform.verification.verify import verify
from tests.cli.commanding import everything, run

HACK = "__import__('os').system('touch hacked')"


OPEN = Check("formulas as written", "not attempted", "state m1 is not settled by 32768 bits")


def refuse(response: Response) -> VerificationRecord:
    if response.model.name == "wrong":
        return VerificationRecord((Check("x(0) = x0", "refuted", "entry 2 is 1, not 0"),))
    record = verify(response)
    return VerificationRecord((*record.checks, OPEN)) if response.model.name == "wide" else record


@pytest.fixture
def wrong(tank: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A model whose result fails its proof."""
    monkeypatch.setattr("closedform.document.writeup.verify", refuse)
    path = tank.with_name("wrong.toml")
    path.write_bytes(tank.read_bytes())
    return path


@pytest.mark.usefixtures("wrong")
def test_a_refuted_result_gives_status_1_and_writes_nothing(
    runner: CliRunner, tmp_path: Path
) -> None:
    done = runner.invoke(app, ["writeup", "wrong.toml", "--pdf"])
    assert done.exit_code == 1
    assert done.stdout == ""
    assert done.stderr.startswith("error: wrong: the result failed its own proof")
    assert "entry 2 is 1, not 0" in done.stderr
    assert everything(tmp_path) == ["tank.toml", "wrong.toml"]


@pytest.mark.usefixtures("wrong")
def test_one_model_that_fails_does_not_stop_the_others_and_the_worst_counts(
    runner: CliRunner, tmp_path: Path
) -> None:
    done = runner.invoke(app, ["writeup", "gone.toml", "wrong.toml", "tank.toml"])
    assert done.exit_code == 1
    assert done.stdout == "out/tank.tex\nout/tank.record.json\n"
    assert [line.split(":")[1].strip() for line in done.stderr.splitlines()] == [
        "gone.toml",
        "wrong",
    ]
    assert "out/tank.tex" in everything(tmp_path)


@pytest.fixture
def wide(tank: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A model whose result is not settled."""
    monkeypatch.setattr("closedform.document.writeup.verify", refuse)
    path = tank.with_name("wide.toml")
    path.write_bytes(tank.read_bytes())
    return path


@pytest.mark.usefixtures("wide")
def test_a_result_that_is_not_proved_gives_status_2_and_writes_nothing(
    runner: CliRunner, tmp_path: Path
) -> None:
    done = runner.invoke(app, ["writeup", "wide.toml", "--pdf"])
    assert done.exit_code == 2
    assert done.stdout == ""
    assert done.stderr == f"error: {UnprovedError('wide', (OPEN,))}\n"
    assert everything(tmp_path) == ["tank.toml", "wide.toml"]


@pytest.mark.usefixtures("wide")
def test_the_batch_goes_on_after_a_result_that_is_not_proved(
    runner: CliRunner, tmp_path: Path
) -> None:
    done = runner.invoke(app, ["writeup", "wide.toml", "tank.toml"])
    assert done.exit_code == 2
    assert done.stdout == "out/tank.tex\nout/tank.record.json\n"
    assert done.stderr.startswith("error: wide: the result could not be proved")
    assert everything(tmp_path / "out") == ["tank.record.json", "tank.tex"]


@pytest.mark.usefixtures("wide", "wrong")
def test_a_refuted_result_is_worse_than_one_that_is_not_proved(runner: CliRunner) -> None:
    assert runner.invoke(app, ["writeup", "wide.toml", "wrong.toml"]).exit_code == 1


@pytest.mark.usefixtures("tank")
def test_a_missing_tex_engine_gives_status_3_and_the_tex_file(tmp_path: Path) -> None:
    nowhere = tmp_path / "empty"
    nowhere.mkdir()
    done = run("writeup", "tank.toml", "--pdf", cwd=tmp_path, PATH=str(nowhere))
    assert done.returncode == 3
    assert done.stdout == "out/tank.tex\nout/tank.record.json\n"
    assert done.stderr == f"error: {NoTexEngineError()}\n"
    assert everything(tmp_path / "out") == ["tank.record.json", "tank.tex"]


def test_an_unusable_input_counts_more_than_a_missing_tool(tank: Path, tmp_path: Path) -> None:
    tank.with_name("other.toml").write_bytes(tank.read_bytes())
    words = ["writeup", "tank.toml", "gone.toml", "other.toml", "--pdf"]
    done = run(*words, cwd=tmp_path, PATH=str(tmp_path))
    assert done.returncode == 2
    assert done.stderr.count("No PDF was made") == 1  # the same for every model: said once
    assert done.stdout.splitlines() == [
        f"out/{name}"
        for stem in ("tank", "other")
        for name in (f"{stem}.tex", f"{stem}.record.json")
    ]


@pytest.mark.parametrize(
    ("statuses", "status"),
    [([], 0), ([0, 0], 0), ([0, 3], 3), ([3, 2, 0], 2), ([2, 1, 3, 0], 1), ([3, 3], 3)],
)
def test_refuted_is_worse_than_unusable_is_worse_than_missing(
    statuses: list[int], status: int
) -> None:
    assert worst(statuses) == status


def test_every_branch_of_the_errors_has_a_status() -> None:
    assert status_of(ResponseRefutedError("a", ())) == 1
    assert status_of(CannotWriteError("a", "b")) == 2
    assert status_of(UnprovedError("a", ())) == 2
    assert status_of(NoTexEngineError()) == 3
    with pytest.raises(ClosedformError, match="of no branch"):
        status_of(ClosedformError("of no branch"))


def test_a_fault_of_the_program_is_not_swallowed(
    runner: CliRunner, tank: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def fail(_model: object) -> None:
        raise ZeroDivisionError("a fault")

    monkeypatch.setattr("closedform.document.writeup.respond", fail)
    with pytest.raises(ZeroDivisionError, match="a fault"):
        runner.invoke(app, ["writeup", str(tank)], catch_exceptions=False)


MODELS = [
    ("missing", None, "there is no such file"),
    ("empty", b"", "the file is empty"),
    ("latin", 'title = "Tänk"'.encode("latin-1"), "is not UTF-8"),
    ("binary", bytes(range(256)), "UTF-8"),
    ("large", b"#" * 10_000_000, "a model file has at most"),
    ("no_toml", b"states = [", "not valid TOML"),
    ("no_states", b'title = "A"\nstates = []\nmatrix = []\ninitial = []\n', "no states"),
    (
        "hacked",
        f'title = "A"\nstates = ["x"]\nmatrix = [["{HACK}"]]\ninitial = [1]\n'.encode(),
        "line 3",
    ),
    (
        "markup",
        b'title = "A"\nstates = ["x"]\nmatrix = [["[red]1[/red]"]]\ninitial = [1]\n',
        '[["[red]1[/red]"]]',
    ),
]


@pytest.mark.parametrize(("name", "content", "said"), MODELS, ids=[name for name, _, _ in MODELS])
@pytest.mark.usefixtures("tank")
def test_a_model_that_cannot_be_used_gives_status_2_and_says_why(
    runner: CliRunner, tmp_path: Path, name: str, content: bytes | None, said: str
) -> None:
    path = tmp_path / f"{name}.toml"
    if content is not None:
        path.write_bytes(content)
    before = everything(tmp_path)
    done = runner.invoke(app, ["writeup", path.name])
    assert done.exit_code == 2
    assert done.stdout == ""
    assert done.stderr.startswith(f"error: {path.name}")
    assert said in done.stderr
    assert "Traceback" not in done.stderr
    assert everything(tmp_path) == before
    assert not (tmp_path / "out").exists()


def test_a_folder_is_no_model(runner: CliRunner, tank: Path) -> None:
    done = runner.invoke(app, ["writeup", str(tank.parent)])
    assert done.exit_code == 2
    assert "this is a directory" in done.stderr


def test_excerpt_and_caret_stand_as_the_error_gives_them(runner: CliRunner, tank: Path) -> None:
    line = 'matrix = [[1, 2], [3, "4 +"]]'
    text = tank.read_text(encoding="utf-8").replace("matrix = [[-0.2, 0], [0.2, -0.4]]", line)
    tank.write_text(text, encoding="utf-8")
    done = runner.invoke(app, ["writeup", tank.name])
    head, excerpt, caret = done.stderr.splitlines()
    assert head.startswith("error: tank.toml, matrix[2][2], line 3, column ")
    assert excerpt == f"  {line}"
    assert re.fullmatch(r" +\^", caret)


def test_a_title_full_of_tex_is_only_text(runner: CliRunner, tank: Path, tmp_path: Path) -> None:
    title = r"\input{/etc/passwd} \write18{touch hacked} $x^2$ % & # _ { } ~ ^ \end{document}"
    text = tank.read_text(encoding="utf-8").replace('"Two tanks"', f"'{title}'")
    tank.write_text(text, encoding="utf-8")
    pdf = ["--pdf"] if available_engines() else []
    done = runner.invoke(app, ["writeup", str(tank), *pdf])
    assert done.exit_code == 0, done.stderr
    tex = (tmp_path / "out" / "tank.tex").read_text(encoding="utf-8")
    assert r"\input{/etc" not in tex
    assert r"\write18{" not in tex
    assert tex.count(r"\end{document}") == 1
    assert not any("hacked" in name for name in everything(tmp_path))


ERRORS = [
    SameFileError("out/a.tex", "a.toml", "b/a.toml"),
    SameFileError("a.tex", "b.toml", "a.tex"),
    SameFileError("out/a.tex", "a.toml", "a.toml"),
    StreamError("no space left on device"),
    StarterExistsError("a.toml"),
    UnknownStarterError("tonk", "tank"),
    UnknownStarterError("zzz", None),
]


@pytest.mark.parametrize("error", ERRORS)
def test_errors_of_the_commands_are_input_errors_that_travel(error: InputError) -> None:
    assert isinstance(error, InputError)
    again = pickle.loads(pickle.dumps(error))  # noqa: S301 - our own
    assert (type(again), str(again), vars(again)) == (type(error), str(error), vars(error))
    assert str(error)[-1] in ".?"
