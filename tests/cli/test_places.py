"""Where results go: clashes are refused, and no trouble of the disc leaves half a file."""

from __future__ import annotations

import errno
import os
import resource
import subprocess
from pathlib import Path

import pytest
from typer.testing import CliRunner

from closedform.cli.commands import app
from tests.cli.commanding import PROGRAM, environment, everything

CLASHES = [
    (["tank.toml", "sub/tank.toml"], "tank.toml and sub/tank.toml would both write out/tank.tex"),
    (["tank.toml", "./tank.toml"], "tank.toml and ./tank.toml would both write out/tank.tex"),
    (["tank.toml", "tank.toml"], "tank.toml: this model is named twice"),
]


@pytest.mark.parametrize(("models", "said"), CLASHES)
def test_two_models_for_one_file_are_refused_before_anything_is_done(
    runner: CliRunner, tank: Path, tmp_path: Path, models: list[str], said: str
) -> None:
    (tmp_path / "sub").mkdir()
    (tmp_path / "sub" / "tank.toml").write_bytes(tank.read_bytes())
    done = runner.invoke(app, ["writeup", *models])
    assert done.exit_code == 2
    assert said in done.stderr
    assert not (tmp_path / "out").exists()


def test_models_of_one_name_may_go_to_different_folders(
    runner: CliRunner, tank: Path, tmp_path: Path
) -> None:
    for folder in ("a", "b"):
        assert runner.invoke(app, ["writeup", str(tank), "--into", folder]).exit_code == 0
    assert everything(tmp_path / "a") == everything(tmp_path / "b")


@pytest.mark.parametrize("into", [".", "../here", "sub/.."])
def test_a_write_up_never_replaces_a_model(
    runner: CliRunner, tank: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, into: str
) -> None:
    here = tmp_path / "here"
    (here / "sub").mkdir(parents=True)
    monkeypatch.chdir(here)
    model = here / "model.tex"
    model.write_bytes(tank.read_bytes())
    done = runner.invoke(app, ["writeup", "model.tex", "--into", into])
    assert done.exit_code == 2
    assert "would replace the model model.tex" in done.stderr
    assert model.read_bytes() == tank.read_bytes()
    assert everything(here) == ["model.tex"]


@pytest.mark.parametrize("into", ["tank.toml", "tank.toml/below", "tank.toml/far/below"])
@pytest.mark.usefixtures("tank")
def test_a_folder_below_a_file_is_refused_before_the_work(
    runner: CliRunner, monkeypatch: pytest.MonkeyPatch, into: str
) -> None:
    monkeypatch.setattr("closedform.document.writeup.respond", None)  # to be called is a fault
    done = runner.invoke(app, ["writeup", "tank.toml", "--into", into], catch_exceptions=False)
    assert done.exit_code == 2
    assert f"error: {into}: cannot be written: tank.toml is a file, not a folder" in done.stderr


@pytest.mark.usefixtures("tank")
def test_a_folder_without_the_right_to_write_is_refused(
    runner: CliRunner, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    real = os.access
    closed = tmp_path / "closed"
    closed.mkdir()
    monkeypatch.setattr("os.access", lambda path, mode: path != Path("closed") and real(path, mode))
    done = runner.invoke(app, ["writeup", "tank.toml", "--into", "closed/deep"])
    assert done.exit_code == 2
    assert "error: closed/deep: cannot be written: no right to write in closed" in done.stderr
    assert everything(closed) == []


@pytest.mark.skipif(not Path("/proc/self").exists(), reason="there is no /proc")
def test_a_folder_of_the_system_that_takes_no_files_gives_status_2(
    runner: CliRunner, tank: Path
) -> None:
    done = runner.invoke(app, ["writeup", str(tank), "--into", "/proc/closedform"])
    assert done.exit_code == 2
    assert done.stderr.startswith("error: /proc/closedform")
    assert "cannot be written" in done.stderr


def test_a_full_disc_leaves_nothing_half_written(
    runner: CliRunner, tank: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def full(_handle: int) -> None:
        raise OSError(errno.ENOSPC, os.strerror(errno.ENOSPC))

    monkeypatch.setattr("os.fsync", full)
    done = runner.invoke(app, ["writeup", str(tank)])
    assert done.exit_code == 2
    assert "out/tank.tex: cannot be written: no space left on device" in done.stderr
    assert done.stdout == ""
    assert everything(tmp_path) == ["tank.toml"]


@pytest.mark.usefixtures("tank")
def test_a_write_that_stops_in_the_middle_leaves_the_old_file(tmp_path: Path) -> None:
    out = tmp_path / "out"
    out.mkdir()
    (out / "tank.tex").write_text("old", encoding="utf-8")
    # Past this many bytes the system refuses to go on writing any file.
    few = 2000
    done = subprocess.run(
        [*PROGRAM, "writeup", "tank.toml"],
        cwd=tmp_path,
        env=environment(PYTHONDONTWRITEBYTECODE="1"),
        capture_output=True,
        text=True,
        check=False,
        preexec_fn=lambda: resource.setrlimit(resource.RLIMIT_FSIZE, (few, few)),
    )
    assert done.returncode == 2
    assert "out/tank.tex: cannot be written: file too large" in done.stderr
    assert everything(tmp_path) == ["out/tank.tex", "tank.toml"]
    assert (out / "tank.tex").read_text(encoding="utf-8") == "old"
