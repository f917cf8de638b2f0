"""Standard output that is cut short, full or closed."""

from __future__ import annotations

import subprocess
from pathlib import Path

import pytest

from tests.cli.commanding import PROGRAM, environment, everything


@pytest.mark.usefixtures("tank")
def test_a_reader_that_leaves_does_not_stop_the_work(tmp_path: Path) -> None:
    done = shell(f"{' '.join(PROGRAM)} writeup tank.toml | true; echo ${{PIPESTATUS[0]}}", tmp_path)
    assert done.stdout == "0\n"
    assert done.stderr == ""
    assert everything(tmp_path / "out") == ["tank.record.json", "tank.tex"]


def test_a_listing_that_is_cut_short_is_no_error(tmp_path: Path) -> None:
    done = shell(f"{' '.join(PROGRAM)} starter | head -n 1", tmp_path)
    assert done.stdout.startswith("coasting_shuttle ")
    assert done.stderr == ""


@pytest.mark.skipif(not Path("/dev/full").exists(), reason="there is no full device")
@pytest.mark.usefixtures("tank")
def test_a_full_device_for_the_output_is_an_error(tmp_path: Path) -> None:
    done = shell(f"{' '.join(PROGRAM)} writeup tank.toml > /dev/full; echo $?", tmp_path)
    assert done.stdout == "2\n"
    assert done.stderr.startswith("error: What was to be printed cannot be written: no space left")
    assert len(done.stderr.splitlines()) == 1


@pytest.mark.usefixtures("tank")
def test_closed_streams_are_no_error(tmp_path: Path) -> None:
    program = " ".join(PROGRAM)
    done = shell(f"{program} writeup tank.toml >&- 2>&-; echo $?", tmp_path)
    assert done.stdout == "0\n"
    assert everything(tmp_path / "out") == ["tank.record.json", "tank.tex"]
    assert shell(f"{program} writeup gone.toml >&- 2>&-; echo $?", tmp_path).stdout == "2\n"


def shell(command: str, cwd: Path) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        ["bash", "-c", command],  # noqa: S607 - the shell of the machine
        cwd=cwd,
        env=environment(),
        stdin=subprocess.DEVNULL,
        capture_output=True,
        text=True,
        check=True,
    )
