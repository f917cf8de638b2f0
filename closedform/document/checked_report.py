"""The files of a checked derivation: the report to sign, its record, and JUnit XML."""

from __future__ import annotations

from pathlib import Path

from closedform.checking.verdict import CheckReport
from closedform.document.checked_junit import junit_text
from closedform.document.checked_record import check_text
from closedform.document.checked_render import render_check
from closedform.document.files import write_whole

__all__ = ["ENDINGS", "write_check"]

ENDINGS = {"tex": ".check.tex", "record": ".check.json", "junit": ".check.xml"}
"""What follows the name of a derivation in the names of its files."""


def write_check(
    report: CheckReport,
    *,
    into: str | Path = "out",
    template: str | Path = "latex",
    record: bool = True,
    junit: bool = False,
    allow_unread: bool = False,
) -> tuple[Path, ...]:
    """Write NAME.check.tex, NAME.check.json and, if asked for, NAME.check.xml.

    `into` is the folder, made if it is not there.  With `allow_unread`, lines that were not
    read count as skipped in the XML.  All texts are made before the first file is written.
    Returns the paths, that of the .tex file first.

    Raises:  TemplateError if there is no such template; CannotWriteError if a file cannot be
             written.
    """
    texts = {"tex": render_check(report, template=template)}
    if record:
        texts["record"] = check_text(report)
    if junit:
        texts["junit"] = junit_text(report, allow_unread=allow_unread)
    folder = Path(into)
    return tuple(
        write_whole(folder / f"{report.name}{ENDINGS[kind]}", text) for kind, text in texts.items()
    )
