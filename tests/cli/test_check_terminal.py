"""``check`` in a process of its own: on a terminal, in a pipe, interrupted, and its help."""

from __future__ import annotations

import re
import signal
import subprocess
from pathlib import Path

import pytest

from tests.cli.checking import python_path
from tests.cli.commanding import PROGRAM, Terminal, environment, everything, run
from tests.cli.test_help import HEAVY
from tests.cli.test_interrupt import STOPPED

RED = "\x1b[1;31m"


def test_a_terminal_shows_the_table_with_what_is_wrong_in_colour(tmp_path: Path) -> None:
    terminal = Terminal("check", "slipped.tex", cwd=tmp_path, PYTHONPATH=python_path(tmp_path))
    assert terminal.finish() == 1
    shown = [line for line in terminal.lines if line]
    assert shown[0] == "Two tanks, worked by hand"
    assert any(line.startswith("   1  matrix                holds") for line in shown)
    assert any("carried from 4  It belongs" in line for line in shown)
    assert shown[-1] == "                 out/slipped.check.json"
    assert RED in terminal.raw
    assert max(map(len, shown)) <= 80


def test_without_colour_the_words_are_the_same(tmp_path: Path) -> None:
    path = python_path(tmp_path)
    coloured = Terminal("check", "slipped.tex", cwd=tmp_path, PYTHONPATH=path)
    plain = Terminal("check", "slipped.tex", cwd=tmp_path, PYTHONPATH=path, NO_COLOR="1")
    assert coloured.finish() == plain.finish() == 1
    assert "\x1b[1;31m" not in plain.raw
    assert coloured.lines == plain.lines


@pytest.mark.parametrize("columns", [40, 80, 132])
@pytest.mark.parametrize("name", ["slipped", "hostile", "wide"])
def test_no_line_is_longer_than_the_terminal_is_wide(
    tmp_path: Path, name: str, columns: int
) -> None:
    terminal = Terminal(
        "check", f"{name}.tex", cwd=tmp_path, columns=columns, PYTHONPATH=python_path(tmp_path)
    )
    assert terminal.finish() == 1
    paths = ("  derivation ", "  model ")  # a path is never broken
    broken = [line for line in terminal.lines if not line.startswith(paths)]
    assert [line for line in broken if len(line) > columns] == []


def test_quiet_leaves_a_terminal_empty(tmp_path: Path) -> None:
    terminal = Terminal(
        "check", "slipped.tex", "--quiet", cwd=tmp_path, PYTHONPATH=python_path(tmp_path)
    )
    assert terminal.finish() == 1
    assert terminal.raw == ""


def test_a_check_in_progress_stops(tmp_path: Path) -> None:
    terminal = Terminal(
        "check", "sound.tex", "slow.tex", cwd=tmp_path, PYTHONPATH=python_path(tmp_path)
    )
    terminal.read_until("slow: solving and checking")
    terminal.process.send_signal(signal.SIGINT)
    assert terminal.finish() == 130
    assert [line for line in terminal.lines if line][-1] == STOPPED
    assert "Traceback" not in terminal.raw
    assert everything(tmp_path / "out") == ["sound.check.json", "sound.check.tex"]


def test_a_pipe_that_nobody_reads_is_no_fault(tmp_path: Path) -> None:
    words = " ".join([*PROGRAM, "check", "slipped.tex"])
    done = subprocess.run(
        ["/bin/bash", "-c", f"{words} | true; echo ${{PIPESTATUS[0]}}"],
        cwd=tmp_path,
        env=environment(PYTHONPATH=python_path(tmp_path)),
        capture_output=True,
        text=True,
        check=True,
    )
    assert done.stdout == "1\n"
    assert done.stderr == ""


def test_help_names_every_option_within_eighty_columns() -> None:
    done = run("check", "--help", COLUMNS="80", TERMINAL_WIDTH="80")
    assert done.returncode == 0
    options = ("model", "into", "pdf", "template", "record", "no-record", "junit", "quiet")
    assert [o for o in (*options, "allow-unread") if f"--{o} " not in done.stdout] == []
    assert max(map(len, done.stdout.splitlines())) <= 80
    assert re.search(r"(?m)^  check  +\S", run("--help").stdout)


def test_help_loads_nothing_heavy() -> None:
    done = subprocess.run(
        [PROGRAM[0], "-X", "importtime", *PROGRAM[1:], "check", "--help"],
        env=environment(),
        capture_output=True,
        text=True,
        check=True,
    )
    loaded = {line.rpartition("|")[2].strip() for line in done.stderr.splitlines()}
    assert sorted({name for name in loaded if name.partition(".")[0] in HEAVY}) == []
    assert not any(
        name.startswith(("closedform.document", "closedform.checking")) for name in loaded
    )
