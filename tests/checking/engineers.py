"""Derivations as engineers write them: the text of a model, lines of LaTeX, and their verdicts."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from closedform.checking.check import check_file
from closedform.checking.verdict import CheckReport

SHORT = {"ok": "holds", "bad": "fails", "carried": "carried", "unread": "not read"}


@dataclass(frozen=True)
class Written:
    """A derivation; `lines` have the word that is expected of each and its LaTeX."""

    name: str
    model: str
    lines: tuple[tuple[str, str], ...]

    def checked(self, folder: Path) -> CheckReport:
        """Return the report on the lines, displayed one after another in a document."""
        (folder / "model.toml").write_text(self.model, encoding="utf-8")
        shown = "\n".join(rf"\[ {latex} \]" for _, latex in self.lines)
        source = folder / "notes.tex"
        source.write_text(f"% closedform: model = model.toml\n{shown}\n", encoding="utf-8")
        return check_file(source)

    def words(self, folder: Path) -> list[str]:
        """Return the verdicts in the words of `lines`."""
        return [
            "ok" if verdict.passes else next(k for k, w in SHORT.items() if w == verdict.verdict)
            for verdict in self.checked(folder).lines
        ]


def written(name: str, model: str, *lines: str) -> Written:
    """Return a derivation of which each line begins with the word expected of it.

    >>> written("a", "", "ok x = 1").lines
    (('ok', 'x = 1'),)
    """
    parts = [line.split(" ", 1) for line in lines]
    return Written(name, model, tuple((word, latex) for word, latex in parts))
