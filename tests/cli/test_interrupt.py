"""Ctrl-C: one line, status 130, and nothing half-written or left running."""

from __future__ import annotations

import random
import signal
import sys
import time
from pathlib import Path

import pytest

from tests.cli.commanding import ROOT, Terminal, everything

STOPPED = "stopped; every file written so far is complete"


@pytest.fixture
def big(tmp_path: Path) -> Path:
    """A model that takes far longer than this test: 120 states, all coupled."""
    n = 120
    numbers = random.Random(5)
    matrix = [[numbers.randint(-9, 9) for _ in range(n)] for _ in range(n)]
    states = [f"x{k}" for k in range(1, n + 1)]
    path = tmp_path / "big.toml"
    text = f'title = "Big"\nstates = {states}\nmatrix = {matrix}\ninitial = {[1] * n}\n'
    path.write_text(text, encoding="utf-8")
    return path


def test_a_solution_in_progress_stops(tmp_path: Path, big: Path) -> None:
    starter = ROOT / "templates" / "starters" / "cooling_probe.toml"
    terminal = Terminal("writeup", starter, big, cwd=tmp_path)
    terminal.read_until("big: solving and proving")
    terminal.process.send_signal(signal.SIGINT)
    assert terminal.finish() == 130
    shown = [line for line in terminal.lines if line]
    assert shown[-1] == STOPPED
    assert "Traceback" not in terminal.raw
    assert terminal.raw.rindex("\x1b[?25l") < terminal.raw.rindex("\x1b[?25h")
    assert everything(tmp_path) == [
        "big.toml",
        "out/cooling_probe.record.json",
        "out/cooling_probe.tex",
    ]


@pytest.mark.skipif(not Path("/proc/self").exists(), reason="there is no /proc")
@pytest.mark.usefixtures("tank")
@pytest.mark.parametrize(("sign", "status"), [(signal.SIGINT, 130), (signal.SIGTERM, 143)])
def test_typesetting_in_progress_stops_and_takes_tex_with_it(
    tmp_path: Path, sign: signal.Signals, status: int
) -> None:
    tools, scratch = tmp_path / "tools", tmp_path / "scratch"
    tools.mkdir()
    scratch.mkdir()
    engine = tools / "pdflatex"
    engine.write_text(
        f"#!{sys.executable}\n"
        "import os, pathlib, time\n"
        f"pathlib.Path({str(tmp_path / 'pid')!r}).write_text(str(os.getpid()))\n"
        "time.sleep(600)\n",
        encoding="utf-8",
    )
    engine.chmod(0o755)
    terminal = Terminal(
        "writeup", "tank.toml", "--pdf", cwd=tmp_path, PATH=str(tools), TMPDIR=str(scratch)
    )
    terminal.read_until("tank: typesetting")
    while not (tmp_path / "pid").exists() or not (tmp_path / "pid").read_text():
        assert terminal.process.poll() is None
    terminal.process.send_signal(sign)
    assert terminal.finish() == status
    assert terminal.raw.rindex("\x1b[?25l") < terminal.raw.rindex("\x1b[?25h")
    shown = [line for line in terminal.lines if line]
    assert shown == ([STOPPED] if sign == signal.SIGINT else [])
    assert everything(tmp_path / "out") == ["tank.record.json", "tank.tex"]
    assert everything(scratch) == []
    pid = int((tmp_path / "pid").read_text())
    for _ in range(500):  # the system may take a moment to end what was killed
        if not runs(pid):
            break
        time.sleep(0.01)
    assert not runs(pid)


def runs(pid: int) -> bool:
    """Whether a process is there and is not one that has ended but was not yet asked for."""
    try:
        status = Path(f"/proc/{pid}/stat").read_text(encoding="utf-8")
    except (FileNotFoundError, ProcessLookupError):
        return False
    return status.rpartition(")")[2].split()[0] != "Z"
