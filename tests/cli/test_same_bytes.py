"""The same models give the same bytes, whatever the machine's mood."""

from __future__ import annotations

from pathlib import Path

import pytest

from tests.cli.commanding import ROOT, run

STARTERS = sorted((ROOT / "templates" / "starters").glob("*.toml"))
MOODS = [
    {"PYTHONHASHSEED": "0"},
    {"PYTHONHASHSEED": "1", "LC_ALL": "C", "LANG": "C", "TZ": "Asia/Tokyo"},
    {"PYTHONHASHSEED": "2", "LC_ALL": "de_DE.UTF-8", "COLUMNS": "40", "NO_COLOR": "1"},
    {"PYTHONHASHSEED": "3", "PYTHONUTF8": "0", "LC_ALL": "POSIX", "PYTHONIOENCODING": "latin-1"},
]


@pytest.fixture(scope="module")
def first(tmp_path_factory: pytest.TempPathFactory) -> dict[str, bytes]:
    return written(tmp_path_factory.mktemp("first"), {})


def written(folder: Path, mood: dict[str, str]) -> dict[str, bytes]:
    done = run("writeup", *STARTERS, "--depth", "full", cwd=folder, **mood)
    assert done.returncode == 0, done.stderr
    return {path.name: path.read_bytes() for path in (folder / "out").iterdir()}


@pytest.mark.parametrize("mood", MOODS, ids=[mood["PYTHONHASHSEED"] for mood in MOODS])
def test_write_ups_and_records_are_the_same_in_every_environment(
    first: dict[str, bytes], tmp_path: Path, mood: dict[str, str]
) -> None:
    again = written(tmp_path, mood)
    assert sorted(again) == sorted(
        f"{path.stem}{ending}" for path in STARTERS for ending in (".tex", ".record.json")
    )
    assert [name for name in first if first[name] != again[name]] == []


def test_one_model_is_written_the_same_alone_and_among_others(
    first: dict[str, bytes], tmp_path: Path
) -> None:
    model = STARTERS[-1]
    done = run("writeup", model, "--depth", "full", "--into", tmp_path)
    assert done.returncode == 0
    for path in tmp_path.iterdir():
        assert path.read_bytes() == first[path.name]


DERIVATIONS = [
    path
    for path in sorted((ROOT / "templates" / "starters" / "derivations").iterdir())
    if "_model" not in path.stem
]


def reports(folder: Path, mood: dict[str, str]) -> dict[str, bytes]:
    done = run("check", *DERIVATIONS, "--junit", "--into", "checked", cwd=folder, **mood)
    assert done.returncode == 1, done.stderr
    return {path.name: path.read_bytes() for path in (folder / "checked").iterdir()}


def test_reports_on_derivations_are_the_same_in_every_environment(tmp_path: Path) -> None:
    found = []
    for mood in MOODS:
        folder = tmp_path / mood["PYTHONHASHSEED"]
        folder.mkdir()
        found.append(reports(folder, mood))
    assert len(found[0]) == 3 * len(DERIVATIONS)
    assert [name for name in found[0] if len({once[name] for once in found}) > 1] == []
