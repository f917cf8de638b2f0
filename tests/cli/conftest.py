"""Models for the commands to work on."""

from __future__ import annotations

from pathlib import Path

import pytest
from typer.testing import CliRunner

TANK = """title = "Two tanks"
states = ["m1", "m2"]
matrix = [[-0.2, 0], [0.2, -0.4]]
initial = [12, 0]
times = [1]
"""


@pytest.fixture
def tank(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A sound model, `tank.toml`, in the folder where the test runs."""
    monkeypatch.chdir(tmp_path)
    path = tmp_path / "tank.toml"
    path.write_text(TANK, encoding="utf-8")
    return path


@pytest.fixture
def runner() -> CliRunner:
    return CliRunner()
