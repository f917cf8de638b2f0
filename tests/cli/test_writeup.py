"""``closedform writeup``: the options, one by one, and what is written."""

from __future__ import annotations

import json
import os
import re
import subprocess
from pathlib import Path

import pytest
from typer.testing import CliRunner

from closedform.cli.commands import app
from closedform.document.engine import available_engines
from tests.cli.commanding import PROGRAM, ROOT, environment, run


def written(folder: Path) -> list[str]:
    return sorted(path.name for path in folder.iterdir()) if folder.exists() else []


def test_a_pipe_gets_the_paths_of_the_files_and_nothing_else(tank: Path, tmp_path: Path) -> None:
    done = run("writeup", tank.name, cwd=tmp_path)
    assert done.returncode == 0
    assert done.stdout == "out/tank.tex\nout/tank.record.json\n"
    assert done.stderr == ""
    assert written(tmp_path / "out") == ["tank.record.json", "tank.tex"]
    assert "Two tanks" in (tmp_path / "out" / "tank.tex").read_text(encoding="utf-8")
    assert json.loads((tmp_path / "out" / "tank.record.json").read_bytes())["title"] == "Two tanks"


def test_into_names_the_folder_and_makes_it(runner: CliRunner, tank: Path, tmp_path: Path) -> None:
    done = runner.invoke(app, ["writeup", str(tank), "--into", "a/b c/ü"])
    assert done.exit_code == 0
    assert done.stdout.splitlines() == ["a/b c/ü/tank.tex", "a/b c/ü/tank.record.json"]
    assert written(tmp_path / "a" / "b c" / "ü") == ["tank.record.json", "tank.tex"]


def test_no_record_leaves_the_record_out(runner: CliRunner, tank: Path, tmp_path: Path) -> None:
    done = runner.invoke(app, ["writeup", str(tank), "--no-record"])
    assert done.exit_code == 0
    assert written(tmp_path / "out") == ["tank.tex"]
    assert runner.invoke(app, ["writeup", str(tank), "--record"]).exit_code == 0
    assert written(tmp_path / "out") == ["tank.record.json", "tank.tex"]


def test_quiet_prints_nothing_but_errors(runner: CliRunner, tank: Path, tmp_path: Path) -> None:
    done = runner.invoke(app, ["writeup", str(tank), "missing.toml", "--quiet"])
    assert done.exit_code == 2
    assert done.stdout == ""
    assert done.stderr.startswith("error: missing.toml:")
    assert written(tmp_path / "out") == ["tank.record.json", "tank.tex"]


def test_each_depth_shows_more(runner: CliRunner, tank: Path, tmp_path: Path) -> None:
    sizes = []
    for depth in ("summary", "working", "full"):
        done = runner.invoke(app, ["writeup", str(tank), "--into", depth, "--depth", depth])
        assert done.exit_code == 0
        sizes.append((tmp_path / depth / "tank.tex").stat().st_size)
    assert sizes == sorted(set(sizes))


def test_working_is_the_depth_when_none_is_named(
    runner: CliRunner, tank: Path, tmp_path: Path
) -> None:
    assert runner.invoke(app, ["writeup", str(tank), "--into", "a"]).exit_code == 0
    working = ["writeup", str(tank), "--into", "b", "--depth", "working", "--digits", "6"]
    assert runner.invoke(app, working).exit_code == 0
    texts = [(tmp_path / folder / "tank.tex").read_bytes() for folder in "ab"]
    assert texts[0] == texts[1]


def test_digits_are_those_of_the_tables(runner: CliRunner, tank: Path, tmp_path: Path) -> None:
    # 12 e^(-1/5) at t = 1: 9.824769036935782…
    texts = {}
    for digits in ("1", "4", "40"):
        done = runner.invoke(app, ["writeup", str(tank), "--into", digits, "--digits", digits])
        assert done.exit_code == 0
        text = (tmp_path / digits / "tank.tex").read_text(encoding="utf-8")
        texts[digits] = re.sub(r"\\,|[ $&]", "", text)  # a table splits a number at its point
    assert "9.825" in texts["4"]
    assert "9.8247" not in texts["4"]
    assert "9.824769036935" in texts["40"]


@pytest.mark.parametrize(
    "options",
    [
        ["--digits", "0"],
        ["--digits", "41"],
        ["--digits", "-3"],
        ["--digits", "six"],
        ["--digits", "6.5"],
        ["--depth", "tall"],
        ["--depth", ""],
        ["--colour"],
        ["--into"],
    ],
)
def test_options_that_are_none_are_refused(
    runner: CliRunner, tank: Path, tmp_path: Path, options: list[str]
) -> None:
    done = runner.invoke(app, ["writeup", str(tank), *options])
    assert done.exit_code == 2
    assert options[0] in done.stderr
    assert written(tmp_path / "out") == []


def test_a_model_is_needed(runner: CliRunner) -> None:
    done = runner.invoke(app, ["writeup"])
    assert done.exit_code == 2
    assert "MODEL.toml" in done.stderr


def test_the_shipped_template_can_be_named(runner: CliRunner, tank: Path, tmp_path: Path) -> None:
    done = runner.invoke(app, ["writeup", str(tank), "--template", "latex"])
    assert done.exit_code == 0
    assert written(tmp_path / "out") == ["tank.record.json", "tank.tex"]


def test_a_template_of_ones_own_is_used(runner: CliRunner, tank: Path, tmp_path: Path) -> None:
    own = tmp_path / "own"
    own.mkdir()
    (own / "writeup.tex.j2").write_text("All about << title >>.\n", encoding="utf-8")
    done = runner.invoke(app, ["writeup", str(tank), "--template", str(own)])
    assert done.exit_code == 0
    top, *rest = (tmp_path / "out" / "tank.tex").read_text(encoding="utf-8").splitlines()
    assert top.startswith("% closedform: write-up of tank.toml, ")
    assert rest == ["All about Two tanks."]


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("<< nonsense >>", "nonsense"),
        ("<% if %>", "line 1"),
        ("<% include 'gone.j2' %>", "gone.j2"),
        ("<< ''.__class__.__mro__ >>", "__class__"),
    ],
)
def test_a_template_that_fails_is_named(
    runner: CliRunner, tank: Path, tmp_path: Path, text: str, said: str
) -> None:
    own = tmp_path / "own"
    own.mkdir()
    (own / "writeup.tex.j2").write_text(text, encoding="utf-8")
    done = runner.invoke(app, ["writeup", str(tank), "--template", str(own)])
    assert done.exit_code == 2
    assert said in done.stderr
    assert done.stdout == ""
    assert written(tmp_path / "out") == []


def test_a_template_that_is_not_there_is_named_once_for_all_models(
    runner: CliRunner, tank: Path, tmp_path: Path
) -> None:
    other = tmp_path / "other.toml"
    other.write_bytes(tank.read_bytes())
    done = runner.invoke(app, ["writeup", str(tank), str(other), "--template", "gone"])
    assert done.exit_code == 2
    assert done.stderr.count("gone") == 1


@pytest.mark.skipif(not available_engines(), reason="no TeX engine is installed")
def test_pdf_is_written_beside_the_tex_file(runner: CliRunner, tank: Path, tmp_path: Path) -> None:
    done = runner.invoke(app, ["writeup", str(tank), "--pdf"])
    assert done.exit_code == 0, done.stderr
    assert done.stdout.splitlines() == [
        "out/tank.tex",
        "out/tank.record.json",
        "out/tank.pdf",
    ]
    assert (tmp_path / "out" / "tank.pdf").read_bytes().startswith(b"%PDF-")
    assert written(tmp_path / "out") == ["tank.pdf", "tank.record.json", "tank.tex"]


def test_a_second_run_takes_the_place_of_the_first(
    runner: CliRunner, tank: Path, tmp_path: Path
) -> None:
    out = tmp_path / "out"
    out.mkdir()
    (out / "tank.tex").write_text("old", encoding="utf-8")
    assert runner.invoke(app, ["writeup", str(tank)]).exit_code == 0
    assert (out / "tank.tex").read_text(encoding="utf-8") != "old"


def test_a_path_that_is_no_unicode_is_printed_as_it_is(tank: Path, tmp_path: Path) -> None:
    name = os.fsdecode(b"out\xff")
    done = run("writeup", tank.name, "--into", name, cwd=tmp_path)
    assert done.returncode == 0
    assert done.stdout.splitlines() == [f"{name}/tank.tex", f"{name}/tank.record.json"]
    assert written(tmp_path / name) == ["tank.record.json", "tank.tex"]


def test_a_path_outside_the_encoding_of_the_pipe_is_printed(tank: Path, tmp_path: Path) -> None:
    done = run("writeup", tank.name, "--into", "ü", cwd=tmp_path, PYTHONIOENCODING="ascii")
    assert done.returncode == 0
    assert done.stdout.splitlines() == ["ü/tank.tex", "ü/tank.record.json"]


def test_the_program_runs_as_a_module_and_as_a_function() -> None:
    code = "from closedform.cli import main; main()"
    words = [PROGRAM[0], "-c", code, "--version"]
    direct = subprocess.run(
        words, env=environment(), capture_output=True, text=True, check=True, cwd=ROOT
    )
    assert direct.stdout == run("--version").stdout


def test_every_starter_is_written_up(tmp_path: Path) -> None:
    starters = sorted((ROOT / "templates" / "starters").glob("*.toml"))
    done = run("writeup", *starters, "--no-record", cwd=tmp_path)
    assert done.stderr == ""
    assert done.returncode == 0
    assert done.stdout.splitlines() == [f"out/{path.stem}.tex" for path in starters]
