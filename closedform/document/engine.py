"""LaTeX to PDF, by the TeX engine of the machine.

TeX runs in a folder of its own, without shell escape, and may open no file outside that
folder by an absolute path or through ``..``; the clock it sees stands still, so that the
same text gives the same PDF.
"""

from __future__ import annotations

import os
import shutil
import signal
import subprocess
import tempfile
from pathlib import Path

from closedform.document.files import write_whole
from closedform.errors import InputError, MissingToolError

__all__ = [
    "ENGINES",
    "RERUN",
    "NoTexEngineError",
    "TexFailedError",
    "UnreadableTexError",
    "available_engines",
    "compile_pdf",
]

ENGINES = ("pdflatex", "lualatex", "xelatex")
"""In order of preference: the first is the quickest and the most widely installed."""

SECONDS = 300.0
RUNS = 3
"""Widths of long tables settle in the third run at the latest."""

RERUN = ("Rerun to get", "Table widths have changed", "Rerun LaTeX")
"""What a log says when references or widths have not settled."""

LATEXMK_OPTIONS = {"pdflatex": "-pdf", "lualatex": "-pdflua", "xelatex": "-pdfxe"}


class NoTexEngineError(MissingToolError):
    """No TeX engine is installed, or not the one that was asked for."""

    def __init__(self, wanted: tuple[str, ...] = ENGINES) -> None:
        super().__init__(wanted)
        self.wanted = wanted

    def __str__(self) -> str:
        return (
            f"No PDF was made: none of {', '.join(self.wanted)} is on the path. The .tex file is "
            "complete without it; install TeX Live or MiKTeX, or compile the file elsewhere."
        )


class TexFailedError(MissingToolError):
    """The TeX engine stopped, most often because a package of it is not installed."""

    def __init__(self, path: str, engine: str, line: str) -> None:
        super().__init__(path, engine, line)
        self.path, self.engine, self.line = path, engine, line

    def __str__(self) -> str:
        return (
            f"{self.path}: {self.engine} made no PDF: {self.line} The .tex file is left as it is; "
            "if a package is missing, install it, else report the file."
        )


def available_engines() -> tuple[str, ...]:
    """Return the names of the TeX engines on the path, the preferred one first."""
    return tuple(engine for engine in ENGINES if shutil.which(engine))


def compile_pdf(
    tex_path: str | Path, *, engine: str | None = None, seconds: float = SECONDS
) -> Path:
    """Compile a self-contained .tex file and return the path of the PDF beside it.

    latexmk drives the engine if it is installed; else the engine runs until the
    references have settled.  `engine` is one of `ENGINES`, or None for the first there is.

    Raises:  NoTexEngineError if there is no engine; TexFailedError with the first error
             line of the log, or when `seconds` have passed; CannotWriteError if the PDF
             cannot be put beside the .tex file, or the file cannot be read.
    """
    path = Path(tex_path)
    wanted = ENGINES if engine is None else (engine,)
    chosen = next((name for name in wanted if shutil.which(name)), None)
    if chosen is None:
        raise NoTexEngineError(wanted)
    try:
        text = path.read_bytes()
    except OSError as error:
        raise UnreadableTexError(str(path), error.strerror or str(error)) from error
    with tempfile.TemporaryDirectory(prefix="closedform-") as name:
        folder = Path(name)
        (folder / "writeup.tex").write_bytes(text)
        trouble = _run(chosen, folder, seconds)
        pdf = folder / "writeup.pdf"
        if trouble or not pdf.is_file():
            raise TexFailedError(str(path), chosen, trouble or "it ended without an error message.")
        return write_whole(path.with_suffix(".pdf"), pdf.read_bytes())


class UnreadableTexError(InputError):
    """The .tex file to be compiled cannot be read."""

    def __init__(self, path: str, reason: str) -> None:
        super().__init__(path, reason)
        self.path, self.reason = path, reason

    def __str__(self) -> str:
        return f"{self.path}: cannot be read: {self.reason.lower()}. Name a .tex file that exists."


def _run(engine: str, folder: Path, seconds: float) -> str:
    """Run the engine in the folder; return the first error line, or nothing."""
    options = ["-interaction=nonstopmode", "-halt-on-error", "-no-shell-escape"]
    log = folder / "writeup.log"
    if shutil.which("latexmk"):
        # -norc: a start-up file of latexmk is a program, and not ours
        command = ["latexmk", "-norc", "-silent", LATEXMK_OPTIONS[engine], *options]
        status = _started([*command, "writeup.tex"], folder, seconds)
        return "" if status == 0 else _first_error(log, status)
    for _ in range(RUNS):
        status = _started([engine, *options, "writeup.tex"], folder, seconds)
        if status != 0:
            return _first_error(log, status)
        if not any(sign in _text(log) for sign in RERUN):
            break
    return ""


def _environment() -> dict[str, str]:
    return os.environ | {
        "openin_any": "p",
        "openout_any": "p",
        "SOURCE_DATE_EPOCH": "0",
        "FORCE_SOURCE_DATE": "1",
        "TZ": "UTC",
        "max_print_line": "1000",
    }


def _started(command: list[str], folder: Path, seconds: float) -> int | None:
    """Run a command to its end and return its status, or None if it took too long."""
    # In a session of its own the engine below latexmk can be ended together with it.
    with subprocess.Popen(  # noqa: S603 - a fixed list of words, no shell
        command,
        cwd=folder,
        env=_environment(),
        stdin=subprocess.DEVNULL,
        stdout=subprocess.DEVNULL,
        stderr=subprocess.DEVNULL,
        start_new_session=True,
    ) as process:
        try:
            return process.wait(seconds)
        except subprocess.TimeoutExpired:
            _end(process)
            return None
        except BaseException:  # Ctrl-C must not leave TeX running
            _end(process)
            raise


def _end(process: subprocess.Popen[bytes]) -> None:
    if hasattr(os, "killpg"):
        os.killpg(process.pid, signal.SIGKILL)
    else:
        process.kill()
    process.wait()  # its folder is about to be removed


def _text(log: Path) -> str:
    return log.read_text(encoding="utf-8", errors="replace") if log.is_file() else ""


def _first_error(log: Path, status: int | None) -> str:
    """Return the first error of the log with the source line that TeX shows for it."""
    if status is None:
        return "it did not come to an end in the time allowed."
    lines = _text(log).splitlines()
    for i, line in enumerate(lines):
        if line.startswith("!"):
            place = next((at for at in lines[i + 1 : i + 12] if at.startswith("l.")), "")
            return f"{line[1:].strip()} {place}".strip()
    return f"it ended with status {status}."
