"""Derivations for ``check`` whose reports are given, so that the command itself is tested."""

from __future__ import annotations

import sys
import types
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import pytest

from closedform.checking.verdict import CheckReport
from closedform.errors import InputError
from tests.cli.commanding import ROOT
from tests.document.checked_samples import hostile, slipped, sound, wide

MODULE = "closedform.checking.check"
FOLDER = "samples"
"""The folder in a test's own that `sitecustomize.py` is put into."""


class GoneError(InputError):
    """A source or a model that is not there."""

    def __init__(self, path: str) -> None:
        super().__init__(path)
        self.path = path

    def __str__(self) -> str:
        return f"{self.path}: there is no such file."


def all_but_one_read() -> CheckReport:
    """Every line holds, but the last was not read."""
    return replace(sound(), lines=(*sound().lines, slipped().lines[-1]))


def nothing() -> CheckReport:
    """A derivation without a line."""
    return replace(sound(), lines=())


def slow() -> CheckReport:
    """A check that does not come to an end in a test."""
    import time

    time.sleep(600)
    return sound()


REPORTS: dict[str, Callable[[], CheckReport]] = {
    "sound": sound,
    "slipped": slipped,
    "hostile": hostile,
    "wide": wide,
    "unread": all_but_one_read,
    "nothing": nothing,
    "slow": slow,
}


def check_file(path: Path | str, *, model: Path | None = None) -> CheckReport:
    """Return the report that the name of the source asks for."""
    if model is not None and not model.is_file():
        raise GoneError(str(model))
    stem = Path(path).stem
    if stem not in REPORTS:
        raise GoneError(str(path))
    return replace(REPORTS[stem](), name=stem, source=str(path))


def given_reports(monkeypatch: pytest.MonkeyPatch) -> None:
    """Let ``check`` in this process get the reports above."""
    module = types.ModuleType(MODULE)
    module.check_file = check_file  # type: ignore[attr-defined]
    monkeypatch.setitem(sys.modules, MODULE, module)


def python_path(folder: Path) -> str:
    """Return the PYTHONPATH by which ``check`` in another process gets the reports above."""
    place = folder / FOLDER
    place.mkdir(exist_ok=True)
    (place / "sitecustomize.py").write_text(
        "import sys, types\n"
        f"module = types.ModuleType({MODULE!r})\n"
        "def check_file(path, *, model=None):\n"
        "    from tests.cli.checking import check_file\n"
        "    return check_file(path, model=model)\n"
        "module.check_file = check_file\n"
        f"sys.modules[{MODULE!r}] = module\n",
        encoding="utf-8",
    )
    return f"{place}:{ROOT}"
