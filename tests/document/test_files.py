from __future__ import annotations

import pickle
from pathlib import Path

import pytest

from closedform.document import files
from closedform.document.files import CannotWriteError, write_whole
from closedform.errors import InputError
from tests.privileges import as_a_usual_user, folder_open_to_all


def test_the_text_is_there_and_nothing_else(tmp_path: Path) -> None:
    path = write_whole(tmp_path / "a" / "b.tex", "ä\n")
    assert path.read_bytes() == "ä\n".encode()
    assert [p.name for p in path.parent.iterdir()] == ["b.tex"]


def test_a_file_is_replaced_and_keeps_its_mode(tmp_path: Path) -> None:
    path = tmp_path / "a.tex"
    path.write_text("old")
    path.chmod(0o640)
    write_whole(path, b"new")
    assert path.read_text() == "new"
    assert path.stat().st_mode & 0o777 == 0o640


def test_a_new_file_is_as_readable_as_any(tmp_path: Path) -> None:
    usual = tmp_path / "usual"
    usual.touch()
    written = write_whole(tmp_path / "written", "x")
    assert written.stat().st_mode == usual.stat().st_mode


def test_a_folder_is_not_overwritten(tmp_path: Path) -> None:
    with pytest.raises(CannotWriteError, match="it is a folder"):
        write_whole(tmp_path, "x")


def test_a_file_is_no_folder(tmp_path: Path) -> None:
    (tmp_path / "a").touch()
    with pytest.raises(CannotWriteError) as caught:
        write_whole(tmp_path / "a" / "b.tex", "x")
    assert str(tmp_path / "a" / "b.tex") in str(caught.value)


def test_a_folder_without_the_right_to_write_is_named() -> None:
    with folder_open_to_all() as folder:
        folder.chmod(0o555)
        with as_a_usual_user(), pytest.raises(CannotWriteError, match="permission denied"):
            write_whole(folder / "a.tex", "x")
        folder.chmod(0o755)
        assert not list(folder.iterdir())


@pytest.mark.parametrize("stage", ["fsync", "replace"])
def test_a_full_disc_leaves_the_old_file_and_no_other(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, stage: str
) -> None:
    path = tmp_path / "a.tex"
    path.write_text("old")

    def full(*_: object) -> None:
        raise OSError(28, "No space left on device")

    if stage == "fsync":
        monkeypatch.setattr(files.os, "fsync", full)
    else:
        monkeypatch.setattr(files.Path, "replace", full)
    with pytest.raises(CannotWriteError, match="no space left on device") as caught:
        write_whole(path, "new")
    assert path.read_text() == "old"
    assert list(tmp_path.iterdir()) == [path]
    assert caught.value.path == str(path)


def test_the_error_is_an_input_error_and_travels() -> None:
    error = CannotWriteError("a.tex", "it is a folder")
    assert isinstance(error, InputError)
    assert str(pickle.loads(pickle.dumps(error))) == str(error)  # noqa: S301
