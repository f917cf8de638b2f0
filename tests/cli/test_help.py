"""Help and version: what they say, and that they load nothing heavy."""

from __future__ import annotations

import re
import subprocess
import tomllib

import pytest
from typer.testing import CliRunner

from closedform.cli.commands import app
from tests.cli.commanding import PROGRAM, ROOT, environment, run

HEAVY = ("sympy", "flint", "lark", "jinja2", "mpmath", "rich", "numpy", "scipy")


def test_help_names_every_command_and_the_exit_statuses() -> None:
    done = run("--help")
    assert done.returncode == 0
    assert done.stderr == ""
    assert re.search(r"(?m)^  writeup  +\S", done.stdout)
    assert re.search(r"(?m)^  starter  +\S", done.stdout)
    assert "Exit status: 0" in done.stdout
    assert run("-h").stdout == done.stdout


def test_help_of_a_command_names_every_option() -> None:
    text = run("writeup", "--help").stdout
    options = ("into", "pdf", "depth", "digits", "template", "record", "no-record", "quiet")
    assert [option for option in options if f"--{option} " not in text] == []
    assert "summary|working|full" in text
    text = run("starter", "--help").stdout
    assert "--into" in text
    assert "--replace" in text


@pytest.mark.parametrize(
    "words", [["--help"], ["writeup", "--help"], ["check", "--help"], ["starter", "--help"]]
)
def test_help_fits_eighty_columns(words: list[str]) -> None:
    done = run(*words, COLUMNS="80", TERMINAL_WIDTH="80")
    assert done.returncode == 0
    assert max(map(len, done.stdout.splitlines())) <= 80


def test_no_command_shows_the_help(runner: CliRunner) -> None:
    done = runner.invoke(app, [])
    assert "writeup" in done.output
    assert "starter" in done.output


def test_the_version_is_that_of_the_project() -> None:
    project = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))["project"]
    done = run("--version")
    assert done.returncode == 0
    assert done.stdout == f"closedform {project['version']}\n"


@pytest.mark.parametrize("words", [["writup"], ["--nonsense"], ["starter", "a", "b"]])
def test_a_command_line_that_is_none_gives_status_2(runner: CliRunner, words: list[str]) -> None:
    done = runner.invoke(app, words)
    assert done.exit_code == 2
    assert "Error" in done.stderr
    assert "Traceback" not in done.output


@pytest.mark.parametrize("words", [["--help"], ["writeup", "--help"], ["--version"]])
def test_help_and_version_load_nothing_heavy(words: list[str]) -> None:
    done = subprocess.run(
        [PROGRAM[0], "-X", "importtime", *PROGRAM[1:], *words],
        env=environment(),
        capture_output=True,
        text=True,
        check=True,
    )
    loaded = {line.rpartition("|")[2].strip() for line in done.stderr.splitlines()}
    assert "typer" in loaded
    assert sorted({name for name in loaded if name.partition(".")[0] in HEAVY}) == []
    assert not any(name.startswith("closedform.document") for name in loaded)


def test_the_starter_list_loads_no_computer_algebra_and_no_templates() -> None:
    done = subprocess.run(
        [PROGRAM[0], "-X", "importtime", *PROGRAM[1:], "starter"],
        env=environment(),
        capture_output=True,
        text=True,
        check=True,
    )
    loaded = {line.rpartition("|")[2].strip() for line in done.stderr.splitlines()}
    assert not loaded & {"sympy", "jinja2", "mpmath"}
