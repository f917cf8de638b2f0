"""The starter models through every stage to the log of the TeX engine."""

from __future__ import annotations

from pathlib import Path

import pytest

from closedform import load
from closedform.document.templating import templates_folder
from closedform.document.writeup import write_up
from tests.document.test_compiled import complaints, log_of

STARTERS = sorted(Path(str(templates_folder() / "starters")).glob("*.toml"))


def test_there_are_starters() -> None:
    assert len(STARTERS) >= 16


@pytest.mark.parametrize("starter", STARTERS, ids=lambda path: path.stem)
def test_a_starter_is_set_without_complaint(starter: Path, pdflatex: str, tmp_path: Path) -> None:
    written = write_up(load(starter), into=tmp_path, depth="full", record=False)
    text = written.files[0].read_text(encoding="utf-8")
    assert complaints(log_of(text, pdflatex, tmp_path)) == []
