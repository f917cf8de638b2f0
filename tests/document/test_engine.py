from __future__ import annotations

import pickle
import time
from pathlib import Path

import pytest

from closedform.document import engine
from closedform.document.engine import (
    NoTexEngineError,
    TexFailedError,
    UnreadableTexError,
    compile_pdf,
)
from closedform.document.files import write_whole
from closedform.errors import ClosedformError, InputError, MissingToolError

WHOLE = "\\documentclass{article}\\begin{document}\n%s\n\\end{document}\n"


@pytest.fixture
def tex(tmp_path: Path) -> Path:
    return write_whole(tmp_path / "a report.tex", WHOLE % r"See~\ref{x}. \section{X}\label{x}")


@pytest.mark.parametrize("driver", ["latexmk", "the engine itself"])
def test_a_file_is_compiled_and_its_references_settle(
    tex: Path, engines: tuple[str, ...], driver: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    if driver != "latexmk":
        which = engine.shutil.which
        monkeypatch.setattr(
            engine.shutil, "which", lambda name: None if name == "latexmk" else which(name)
        )
    pdf = compile_pdf(tex, engine=engines[0])
    assert pdf == tex.with_suffix(".pdf")
    assert pdf.read_bytes().startswith(b"%PDF")
    assert sorted(path.name for path in tex.parent.iterdir()) == ["a report.pdf", "a report.tex"]


def test_the_same_file_gives_the_same_bytes(tex: Path, pdflatex: str) -> None:
    first = compile_pdf(tex, engine=pdflatex).read_bytes()
    assert compile_pdf(tex, engine=pdflatex).read_bytes() == first


def test_the_first_error_is_reported(tmp_path: Path, engines: tuple[str, ...]) -> None:
    path = write_whole(tmp_path / "a.tex", WHOLE % r"text \notacommand" + "\n")
    with pytest.raises(TexFailedError, match=r"Undefined control sequence\. l\.2") as caught:
        compile_pdf(path)
    assert caught.value.engine == engines[0]
    assert not path.with_suffix(".pdf").exists()


FORBIDDEN = [
    r"\input{/etc/hostname}",
    r"\input{../outside.tex}",
    r"\newwrite\w\immediate\openout\w=../outside.txt",
]


@pytest.mark.parametrize("command", FORBIDDEN)
def test_tex_neither_reads_nor_writes_outside(
    tmp_path: Path, engines: tuple[str, ...], command: str
) -> None:
    assert engines
    with pytest.raises(TexFailedError):
        compile_pdf(write_whole(tmp_path / "a.tex", WHOLE % command))


def test_tex_starts_no_program(tmp_path: Path, engines: tuple[str, ...]) -> None:
    assert engines
    mark = tmp_path / "mark"
    compile_pdf(write_whole(tmp_path / "a.tex", WHOLE % rf"\immediate\write18{{touch {mark}}}x"))
    assert not mark.exists()


def test_an_endless_run_is_ended(tmp_path: Path, engines: tuple[str, ...]) -> None:
    assert engines
    path = write_whole(tmp_path / "a.tex", WHOLE % r"\def\x{\x}\x")
    with pytest.raises(TexFailedError, match="time allowed"):
        compile_pdf(path, seconds=2)
    running = [p for p in Path("/proc").glob("[0-9]*/cmdline") if b"writeup.tex" in _bytes(p)]
    time.sleep(0.2)
    assert [p for p in running if p.exists() and b"writeup.tex" in _bytes(p)] == []


def _bytes(path: Path) -> bytes:
    try:
        return path.read_bytes()
    except OSError:
        return b""


def test_a_machine_without_tex_is_told_so(tex: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("PATH", str(tex.parent))
    with pytest.raises(NoTexEngineError, match="none of pdflatex, lualatex, xelatex"):
        compile_pdf(tex)


def test_a_file_that_is_not_there_is_named(tmp_path: Path, engines: tuple[str, ...]) -> None:
    assert engines
    with pytest.raises(UnreadableTexError, match=r"none\.tex: cannot be read: no such file"):
        compile_pdf(tmp_path / "none.tex")


ERRORS: list[tuple[ClosedformError, type]] = [
    (NoTexEngineError(), MissingToolError),
    (TexFailedError("a.tex", "pdflatex", "Undefined."), MissingToolError),
    (UnreadableTexError("a.tex", "No such file"), InputError),
]


@pytest.mark.parametrize(("error", "base"), ERRORS)
def test_errors_have_their_branch_and_travel(error: ClosedformError, base: type) -> None:
    assert isinstance(error, base)
    assert str(pickle.loads(pickle.dumps(error))) == str(error)  # noqa: S301
