"""``closedform starter``: the list, and copies that never cost anybody a file."""

from __future__ import annotations

from pathlib import Path

import pytest
from typer.testing import CliRunner

import closedform
from closedform.checking.source.reading import read_source
from closedform.cli.commands import app
from tests.cli.commanding import ROOT, everything, run

STARTERS = ROOT / "templates" / "starters"
SHIPPED = sorted(STARTERS.glob("*.toml"))
DERIVATIONS = [
    path for path in sorted((STARTERS / "derivations").iterdir()) if "_model" not in path.stem
]


@pytest.fixture(autouse=True)
def _here(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)


def test_the_list_has_every_starter_with_its_title(runner: CliRunner) -> None:
    done = runner.invoke(app, ["starter"])
    assert done.exit_code == 0
    listed = [line.split(None, 1) for line in done.stdout.splitlines()]
    titles = [closedform.load(path).title for path in SHIPPED]
    titles += [read_source(path).title for path in DERIVATIONS]
    names = [path.stem for path in (*SHIPPED, *DERIVATIONS)]
    assert listed == [list(pair) for pair in zip(names, titles, strict=True)]
    assert max(map(len, done.stdout.splitlines())) <= 80


@pytest.mark.parametrize("path", SHIPPED, ids=[path.stem for path in SHIPPED])
def test_a_starter_is_copied_byte_for_byte(runner: CliRunner, tmp_path: Path, path: Path) -> None:
    done = runner.invoke(app, ["starter", path.stem])
    assert done.exit_code == 0
    assert done.stdout == f"{path.name}\n"
    assert (tmp_path / path.name).read_bytes() == path.read_bytes()


@pytest.mark.parametrize("path", DERIVATIONS, ids=[path.stem for path in DERIVATIONS])
def test_a_derivation_comes_with_its_model(runner: CliRunner, tmp_path: Path, path: Path) -> None:
    done = runner.invoke(app, ["starter", path.stem])
    model = read_source(path).model
    assert done.exit_code == 0
    assert done.stdout.splitlines() == [path.name, model]
    assert everything(tmp_path) == sorted([path.name, model])
    for name in (path.name, model):
        assert (tmp_path / name).read_bytes() == (path.parent / name).read_bytes()


def test_nothing_is_copied_where_one_of_two_files_would_be_replaced(
    runner: CliRunner, tmp_path: Path
) -> None:
    mine = tmp_path / "coupled_tables_model.toml"
    mine.write_text("mine", encoding="utf-8")
    done = runner.invoke(app, ["starter", "coupled_tables"])
    assert done.exit_code == 2
    assert "coupled_tables_model.toml: this file exists" in done.stderr
    assert everything(tmp_path) == [mine.name]
    assert mine.read_text(encoding="utf-8") == "mine"


def test_the_model_of_a_derivation_is_no_starter_of_its_own(runner: CliRunner) -> None:
    assert runner.invoke(app, ["starter", "coupled_tables_model"]).exit_code == 2


@pytest.mark.parametrize("name", ["two_tank_cascade.toml", "coupled_tables.tex"])
def test_the_ending_may_be_written(runner: CliRunner, tmp_path: Path, name: str) -> None:
    assert runner.invoke(app, ["starter", name]).exit_code == 0
    assert (tmp_path / name).is_file()


def test_into_names_the_folder_and_makes_it(runner: CliRunner, tmp_path: Path) -> None:
    done = runner.invoke(app, ["starter", "rlc_pair", "--into", "new/models"])
    assert done.exit_code == 0
    assert done.stdout == "new/models/rlc_pair.toml\n"
    assert (tmp_path / "new" / "models" / "rlc_pair.toml").is_file()


def test_a_file_that_is_there_stays(runner: CliRunner, tmp_path: Path) -> None:
    mine = tmp_path / "rlc_pair.toml"
    mine.write_text("mine", encoding="utf-8")
    done = runner.invoke(app, ["starter", "rlc_pair"])
    assert done.exit_code == 2
    assert done.stdout == ""
    assert "rlc_pair.toml: this file exists and was left as it is" in done.stderr
    assert "--replace" in done.stderr
    assert mine.read_text(encoding="utf-8") == "mine"


def test_a_link_that_leads_nowhere_stays(runner: CliRunner, tmp_path: Path) -> None:
    link = tmp_path / "rlc_pair.toml"
    link.symlink_to("nowhere")
    assert runner.invoke(app, ["starter", "rlc_pair"]).exit_code == 2
    assert link.is_symlink()


def test_replace_replaces(runner: CliRunner, tmp_path: Path) -> None:
    mine = tmp_path / "rlc_pair.toml"
    mine.write_text("mine", encoding="utf-8")
    assert runner.invoke(app, ["starter", "rlc_pair", "--replace"]).exit_code == 0
    assert "Two ringing circuits" in mine.read_text(encoding="utf-8")


@pytest.mark.parametrize(
    ("name", "said"),
    [
        ("two_tank_casacde", "did you mean 'two_tank_cascade'?"),
        ("zzz", "`closedform starter` lists them"),
        ("../latex/writeup.tex.j2", "No starter is called"),
        ("/etc/passwd", "No starter is called"),
        ("", "No starter is called"),
    ],
)
def test_an_unknown_name_is_refused(
    runner: CliRunner, tmp_path: Path, name: str, said: str
) -> None:
    done = runner.invoke(app, ["starter", name])
    assert done.exit_code == 2
    assert said in done.stderr
    assert list(tmp_path.iterdir()) == []


def test_a_folder_below_a_file_is_refused(runner: CliRunner, tmp_path: Path) -> None:
    (tmp_path / "file").touch()
    done = runner.invoke(app, ["starter", "rlc_pair", "--into", "file/below"])
    assert done.exit_code == 2
    assert "file is a file, not a folder" in done.stderr


def test_a_folder_in_the_place_of_the_copy_is_refused(runner: CliRunner, tmp_path: Path) -> None:
    (tmp_path / "rlc_pair.toml").mkdir()
    for options in ([], ["--replace"]):
        done = runner.invoke(app, ["starter", "rlc_pair", *options])
        assert done.exit_code == 2
        assert "rlc_pair.toml" in done.stderr
    assert (tmp_path / "rlc_pair.toml").is_dir()


def test_a_copy_is_a_model_to_be_written_up(tmp_path: Path) -> None:
    assert run("starter", "two_tank_cascade", cwd=tmp_path).returncode == 0
    done = run("writeup", "two_tank_cascade.toml", cwd=tmp_path)
    assert done.returncode == 0
    assert (tmp_path / "out" / "two_tank_cascade.tex").is_file()


def test_a_copy_of_a_derivation_is_checked(tmp_path: Path) -> None:
    assert run("starter", "ladder_on_paper", cwd=tmp_path).returncode == 0
    done = run("check", "ladder_on_paper.toml", cwd=tmp_path)
    assert done.returncode == 0
    assert "all 13 lines hold" in done.stdout
