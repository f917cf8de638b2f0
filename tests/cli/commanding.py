"""Running the program as its users do: in a process of its own, in a pipe or on a terminal."""

from __future__ import annotations

import fcntl
import os
import pty
import re
import struct
import subprocess
import sys
import termios
from pathlib import Path

ROOT = Path(__file__).parents[2]
PROGRAM = (sys.executable, "-m", "closedform")


def environment(**changes: str) -> dict[str, str]:
    """Return this process's environment with the package on the path, and these changes."""
    kept = {k: v for k, v in os.environ.items() if k not in ("NO_COLOR", "FORCE_COLOR", "COLUMNS")}
    return kept | {"PYTHONPATH": str(ROOT), "TERM": "xterm-256color"} | changes


def run(
    *words: str | Path, cwd: Path | None = None, **changes: str
) -> subprocess.CompletedProcess[str]:
    """Run the program with its output in pipes."""
    return subprocess.run(
        [*PROGRAM, *map(str, words)],
        cwd=cwd,
        env=environment(**changes),
        stdin=subprocess.DEVNULL,
        capture_output=True,
        encoding="utf-8",
        errors="surrogateescape",
        timeout=300,
        check=False,
    )


def everything(folder: Path) -> list[str]:
    """Return the paths of all files below a folder, hidden ones too."""
    return sorted(str(p.relative_to(folder)) for p in folder.rglob("*") if p.is_file())


class Terminal:
    """A pseudo-terminal of `columns` columns on which a program runs."""

    def __init__(
        self,
        *words: str | Path,
        cwd: Path,
        columns: int = 80,
        stdout_is_pipe: bool = False,
        **changes: str,
    ) -> None:
        self._reader, writer = pty.openpty()
        fcntl.ioctl(writer, termios.TIOCSWINSZ, struct.pack("HHHH", 40, columns, 0, 0))
        self.process = subprocess.Popen(
            [*PROGRAM, *map(str, words)],
            cwd=cwd,
            env=environment(**changes),
            stdin=subprocess.DEVNULL,
            stdout=subprocess.PIPE if stdout_is_pipe else writer,
            stderr=writer,
        )
        os.close(writer)
        self.raw = ""
        self.piped = b""

    def read_until(self, sign: str) -> None:
        """Wait until the program has shown something."""
        while sign not in self.raw:
            assert self._read(), f"{sign!r} was never shown: {self.raw!r}"

    def finish(self) -> int:
        """Read to the end and return the exit status."""
        while self._read():
            pass
        os.close(self._reader)
        if self.process.stdout is not None:
            with self.process.stdout as pipe:
                self.piped = pipe.read()
        return self.process.wait()

    def _read(self) -> bool:
        try:
            piece = os.read(self._reader, 65536)
        except OSError:  # the other end is closed
            return False
        self.raw += piece.decode("utf-8", "surrogateescape")
        return bool(piece)

    @property
    def lines(self) -> list[str]:
        """The lines that stay on the terminal at the end, without colours."""
        rows, row, column = [""], 0, 0
        for token in re.findall(r"\x1b\[[0-9;?]*[A-Za-z]|[^\x1b]|\x1b", self.raw):
            match token:
                case "\r":
                    column = 0
                case "\n":
                    row += 1
                    rows += [""] * (row + 1 - len(rows))
                case "\x1b[1A":
                    row -= 1
                case "\x1b[2K":
                    rows[row] = ""
                case _ if len(token) == 1:
                    rows[row] = rows[row][:column].ljust(column) + token + rows[row][column + 1 :]
                    column += 1
        return rows
