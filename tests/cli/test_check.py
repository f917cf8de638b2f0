"""``closedform check``: its options, its exit status, its files and what it refuses."""

from __future__ import annotations

import errno
import json
import os
from pathlib import Path
from xml.etree import ElementTree as ET

import pytest
from typer.testing import CliRunner

from closedform.cli.commands import app
from closedform.document.engine import NoTexEngineError
from tests.cli.checking import given_reports
from tests.cli.commanding import everything


@pytest.fixture(autouse=True)
def reports(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    given_reports(monkeypatch)


STATUSES = [
    (["sound.tex"], 0),
    (["slipped.tex"], 1),
    (["slipped.tex", "--allow-unread"], 1),
    (["unread.tex"], 2),
    (["unread.tex", "--allow-unread"], 0),
    (["nothing.tex"], 2),
    (["nothing.tex", "--allow-unread"], 2),
    (["gone.tex"], 2),
    (["sound.tex", "unread.tex"], 2),
    (["sound.tex", "gone.tex", "slipped.tex", "unread.tex"], 1),
    (["hostile.tex"], 1),
]


@pytest.mark.parametrize(("words", "status"), STATUSES)
def test_the_status_says_what_was_found(runner: CliRunner, words: list[str], status: int) -> None:
    done = runner.invoke(app, ["check", *words], catch_exceptions=False)
    assert done.exit_code == status
    quiet = runner.invoke(app, ["check", *words, "--quiet"], catch_exceptions=False)
    assert quiet.exit_code == status
    assert quiet.stdout == ""


def test_the_reports_are_written_and_what_they_say_agrees(
    runner: CliRunner, tmp_path: Path
) -> None:
    done = runner.invoke(app, ["check", "slipped.tex", "--junit", "--into", "here/there"])
    assert done.exit_code == 1
    assert everything(tmp_path) == [
        f"here/there/slipped.check.{ending}" for ending in ("json", "tex", "xml")
    ]
    data = json.loads((tmp_path / "here/there/slipped.check.json").read_text("utf-8"))
    assert data["first_wrong"] == 4
    suite = ET.parse(tmp_path / "here/there/slipped.check.xml").getroot()  # noqa: S314
    assert suite.get("failures") == "4"
    assert suite.get("errors") == "1"
    assert "Line 4 fails" in (tmp_path / "here/there/slipped.check.tex").read_text("utf-8")


def test_unread_lines_that_are_allowed_are_skipped_in_the_xml(
    runner: CliRunner, tmp_path: Path
) -> None:
    words = ["check", "unread.tex", "--junit", "--allow-unread", "--no-record"]
    assert runner.invoke(app, words).exit_code == 0
    assert everything(tmp_path) == ["out/unread.check.tex", "out/unread.check.xml"]
    suite = ET.parse(tmp_path / "out/unread.check.xml").getroot()  # noqa: S314
    assert suite.get("skipped") == "1"
    assert suite.get("errors") == "0"


def test_a_pipe_gets_the_table_as_plain_text(runner: CliRunner) -> None:
    lines = runner.invoke(app, ["check", "slipped.tex"]).stdout.splitlines()
    assert max(map(len, lines)) <= 80
    assert lines[:4] == [
        "Two tanks, worked by hand",
        "  derivation     slipped.tex",
        "  model          tanks.toml",
        "  case           c^2 < 4*k*m",
    ]
    assert "line  what it says          verdict         reason" in lines
    row = lines.index(
        "   4  eigenvalues           fails           The first eigenvalue is -1, not 1."
    )
    assert lines[row + 1] == " " * 44 + "The sum of the eigenvalues has to be"
    text = "\n".join(lines)
    assert "  verdicts       8 lines: 3 hold, 1 fails, 3 are carried and 1 was not read" in text
    assert "  outcome        line 4 fails; lines 5 to 7 are carried from it;" in text
    assert "  place of 4     line 26" in text
    assert "  right in 4     {-1, -4}" in text
    assert "  slip in 4      a sign was lost, before 5 in the numerator" in text
    assert "  written        out/slipped.check.tex" in text
    assert "\x1b" not in text


SLIPPED = (
    "slipped.tex: line 4 fails; lines 5 to 7 are carried from it; line 8 was not read; "
    "the other 3 hold"
)


def test_several_derivations_have_a_line_each(runner: CliRunner) -> None:
    done = runner.invoke(app, ["check", "sound.tex", "slipped.tex", "gone.tex"])
    assert done.stdout.splitlines() == [
        "sound.tex: all 4 lines hold",
        SLIPPED,
        "3 derivations: 1 without fault, 2 not",
    ]
    assert done.stderr == "error: gone.tex: there is no such file.\n"


def test_text_of_the_author_s_cannot_move_the_cursor(runner: CliRunner) -> None:
    done = runner.invoke(app, ["check", "hostile.tex"], catch_exceptions=False)
    assert not any(ord(sign) < 32 and sign != "\n" for sign in done.stdout)
    assert "\x9b" not in done.stdout


def test_a_model_that_is_not_there_is_told_as_by_the_other_commands(
    runner: CliRunner, tmp_path: Path
) -> None:
    done = runner.invoke(app, ["check", "sound.tex", "--model", "nowhere.toml"])
    assert done.exit_code == 2
    assert done.stderr == "error: nowhere.toml: there is no such file.\n"
    assert everything(tmp_path) == []


CLASHES = [
    (["a/sound.tex", "b/sound.toml"], "a/sound.tex and b/sound.toml would both write out/sound"),
    (["sound.tex", "sound.tex"], "sound.tex: this file is named twice"),
    (["sound.tex", "sound.check.tex", "--into", "."], "its report would replace sound.check.tex"),
    (["sound.tex", "--model", "out/sound.check.json"], "replace out/sound.check.json"),
]


@pytest.mark.parametrize(("words", "said"), CLASHES)
def test_clashes_are_refused_before_anything_is_done(
    runner: CliRunner, tmp_path: Path, words: list[str], said: str
) -> None:
    done = runner.invoke(app, ["check", *words])
    assert done.exit_code == 2
    assert said in done.stderr
    assert everything(tmp_path) == []


def test_the_folder_and_the_template_are_looked_at_first(runner: CliRunner, tmp_path: Path) -> None:
    (tmp_path / "file").touch()
    done = runner.invoke(app, ["check", "slow.tex", "--into", "file/below"])
    assert done.exit_code == 2
    assert "file/below: cannot be written: file is a file, not a folder" in done.stderr
    done = runner.invoke(app, ["check", "slow.tex", "--template", "nowhere"])
    assert done.exit_code == 2
    assert "no template and no folder has this name" in done.stderr


def test_a_full_disc_leaves_nothing_half_written(
    runner: CliRunner, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def full(_handle: int) -> None:
        raise OSError(errno.ENOSPC, os.strerror(errno.ENOSPC))

    monkeypatch.setattr("os.fsync", full)
    done = runner.invoke(app, ["check", "sound.tex", "--junit"])
    assert done.exit_code == 2
    assert "out/sound.check.tex: cannot be written: no space left on device" in done.stderr
    assert everything(tmp_path) == []


def test_without_tex_the_report_stands_and_the_status_is_3(
    runner: CliRunner, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def missing(_path: Path) -> Path:
        raise NoTexEngineError

    monkeypatch.setattr("closedform.document.engine.compile_pdf", missing)
    done = runner.invoke(app, ["check", "sound.tex", "--pdf"])
    assert done.exit_code == 3
    assert "No PDF was made" in done.stderr
    assert everything(tmp_path) == ["out/sound.check.json", "out/sound.check.tex"]
    assert runner.invoke(app, ["check", "slipped.tex", "--pdf"]).exit_code == 1


def test_the_pdf_stands_beside_its_text(
    runner: CliRunner, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def made(path: Path) -> Path:
        pdf = path.with_suffix(".pdf")
        pdf.write_bytes(b"%PDF")
        return pdf

    monkeypatch.setattr("closedform.document.engine.compile_pdf", made)
    done = runner.invoke(app, ["check", "sound.tex", "--pdf", "--no-record"])
    assert done.exit_code == 0
    assert everything(tmp_path) == ["out/sound.check.pdf", "out/sound.check.tex"]
    assert "out/sound.check.pdf" in done.stdout
