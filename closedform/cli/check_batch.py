"""The work of ``check``: one derivation after the other, whatever becomes of each."""

from __future__ import annotations

import os
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

from closedform.cli.places import check_folder
from closedform.cli.progress import Progress
from closedform.cli.screen import Screen, printable
from closedform.cli.status import status_of, worst
from closedform.errors import ClosedformError, InputError

if TYPE_CHECKING:
    from closedform.checking.verdict import CheckReport

__all__ = ["CheckWishes", "SameReportError", "check_sources", "status_of_report"]


@dataclass(frozen=True, slots=True)
class CheckWishes:
    """What is wanted of every derivation; `model` is None if the derivation names its own."""

    model: Path | None
    into: Path
    template: str
    pdf: bool
    record: bool
    junit: bool
    allow_unread: bool


class SameReportError(InputError):
    """A report that is asked for twice, or would replace a file that is to be checked."""

    def __init__(self, file: str, source: str, other: str) -> None:
        super().__init__(file, source, other)
        self.file, self.source, self.other = file, source, other

    def __str__(self) -> str:
        if self.file == self.other:
            return (
                f"{self.source}: its report would replace {self.other}, which is read as well. "
                "Nothing was done; name another folder with --into, or rename one of them."
            )
        if self.source == self.other:
            return f"{self.source}: this file is named twice. Nothing was done; name it once."
        return (
            f"{self.source} and {self.other} would both write {self.file}. Nothing was done; "
            "write them into different folders with --into, or rename one of them."
        )


def check_sources(sources: Sequence[str], wishes: CheckWishes, screen: Screen) -> int:
    """Check each derivation, print what came of it, and return the exit status of all.

    One source has a table of its lines, several have a line each.

    Raises:  SameReportError, CannotWriteError or TemplateError before anything is done.
    """
    refuse_same_reports(sources, wishes)
    check_folder(wishes.into)
    from closedform.document.checked_render import check_report_template

    check_report_template(wishes.template)
    statuses = []
    with screen.progress(len(sources)) as progress:
        for source in sources:
            alone = len(sources) == 1
            statuses.append(_check_one(source, wishes, screen, progress, whole=alone))
            progress.done()
    if len(sources) > 1:
        well = statuses.count(0)
        screen.line(f"{len(sources)} derivations: {well} without fault, {len(sources) - well} not")
    return worst(statuses)


def status_of_report(report: CheckReport, *, allow_unread: bool) -> int:
    """Return 0 if all is well, 1 if a line is wrong, 2 if nothing is but a line was not read."""
    if any(v.verdict in ("fails", "carried") for v in report.lines):
        return 1
    return 0 if report.lines and report.all_well(allow_unread=allow_unread) else 2


def refuse_same_reports(sources: Sequence[str], wishes: CheckWishes) -> None:
    """Raise SameReportError if two sources want the same file, or one would replace another."""
    read = {_identity(Path(source)): source for source in sources}
    if wishes.model is not None:
        read.setdefault(_identity(wishes.model), str(wishes.model))
    owner: dict[str, str] = {}
    for source in sources:
        for file in _files(source, wishes):
            identity = _identity(file)
            if identity in read:
                raise SameReportError(read[identity], source, read[identity])
            if identity in owner:
                raise SameReportError(str(file), owner[identity], source)
            owner[identity] = source


def _files(source: str, wishes: CheckWishes) -> list[Path]:
    endings = [".tex", *[".json"] * wishes.record, *[".xml"] * wishes.junit, *[".pdf"] * wishes.pdf]
    return [wishes.into / f"{Path(source).stem}.check{ending}" for ending in endings]


def _identity(path: Path) -> str:
    return os.path.normcase(path.resolve())


def _check_one(
    source: str, wishes: CheckWishes, screen: Screen, progress: Progress, *, whole: bool
) -> int:
    name = printable(Path(source).stem)
    try:
        progress.stage(name, "reading")
        from closedform.document.checked_report import write_check
        from closedform.document.engine import compile_pdf
        from closedform.document.own import check_file

        progress.stage(name, "solving and checking")
        report = check_file(source, model=wishes.model)
        files = write_check(
            report,
            into=wishes.into,
            template=wishes.template,
            record=wishes.record,
            junit=wishes.junit,
            allow_unread=wishes.allow_unread,
        )
    except ClosedformError as error:
        screen.error(error)
        return status_of(error)
    statuses = [status_of_report(report, allow_unread=wishes.allow_unread)]
    trouble = None
    if wishes.pdf:
        progress.stage(name, "typesetting")
        try:
            files = (*files, compile_pdf(files[0]))
        except ClosedformError as error:
            trouble = error
            statuses.append(status_of(error))
    _tell(report, files, screen, None if whole else source)
    if trouble is not None:
        screen.error(trouble)
    return worst(statuses)


def _tell(report: CheckReport, files: Sequence[Path], screen: Screen, source: str | None) -> None:
    """Print the table of a report, or one line about a source among several.

    There are colours on a terminal only.
    """
    if screen.quiet:
        return
    from closedform.cli.check_summary import check_line, check_summary

    if source is None:
        lines = check_summary(report, files, screen.width)
    else:
        lines = [check_line(report, source)]
    if screen.shows_results:
        screen.lines(lines)
    else:
        for line in lines:
            screen.line("".join(text for text, _ in line).rstrip())
