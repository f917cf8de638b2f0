"""A write-up that does not print what was proved."""

from __future__ import annotations

from closedform.errors import RefutedError

__all__ = ["DocumentRefutedError"]


class DocumentRefutedError(RefutedError):
    """The text of a write-up, read back, is not what it was made from.

    `latex` is the formula concerned, `line` its line in the text, `shown` what kind of
    statement it is, `what` in words what is wrong, `template` what the text was made by.
    """

    def __init__(self, template: str, line: int, shown: str, latex: str, what: str) -> None:
        super().__init__(template, line, shown, latex, what)
        self.template, self.line, self.shown = template, line, shown
        self.latex, self.what = latex, what

    def __str__(self) -> str:
        said = f" ({self.shown})" if self.shown else ""
        formula = f" {_shortened(self.latex)}" if self.latex else ""
        return (
            f"write-up, line {self.line}{said}: the text was read back before it was issued, and "
            f"is not what was to be printed:{formula}: {self.what.rstrip('.')}. Nothing was "
            f"written. It was made by the template {self.template}; if that is yours, let it "
            "print what is displayed by show, show_all or show_beside; else report this."
        )


LONGEST = 160


def _shortened(latex: str) -> str:
    words = " ".join(latex.split())
    return words if len(words) <= LONGEST else f"{words[:LONGEST].rstrip()} …"
