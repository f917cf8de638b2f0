"""The main job, from a model to its files: respond, prove, derive, print, write."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from closedform.derivation.build import derive
from closedform.document.engine import compile_pdf
from closedform.document.files import write_whole
from closedform.document.record import record_text
from closedform.document.render import check_options, check_template, render
from closedform.model.model import Model
from closedform.response.response import Response, respond
from closedform.verification.record import (
    ResponseRefutedError,
    UnprovedError,
    VerificationRecord,
)
from closedform.verification.verify import verify

__all__ = ["WriteUp", "write_up"]


@dataclass(frozen=True)
class WriteUp:
    """What came of one model: its response, what was proved, and the files written."""

    response: Response
    verification: VerificationRecord
    files: tuple[Path, ...]


def write_up(
    model: Model,
    *,
    into: str | Path = "out",
    template: str | Path = "latex",
    depth: str = "working",
    digits: int = 6,
    record: bool = True,
) -> WriteUp:
    """Solve a model, prove the result, and write NAME.tex and NAME.record.json.

    `into` is the folder, made if it is not there; `depth` is summary, working or full;
    `digits` are the significant digits of the tables.

    Raises:  UnknownDepthError, UnusableDigitsError for options out of their range;
             TemplateError if there is no such template;
             ResponseRefutedError if any identity is refuted, StatementRefutedError if a
             statement of the derivation is, UnprovedError if either is left open (then
             nothing is written);
             CannotWriteError if a file cannot be written.
    """
    check_options(depth=depth, digits=digits)
    check_template(template)
    response = respond(model)
    verification = verify(response)
    if verification.left_open and not verification.refuted:
        raise UnprovedError(model.name, verification.left_open)
    if not verification.holds:
        raise ResponseRefutedError(model.name, verification.refuted)
    derivation = derive(response, verification, digits=digits)
    verification = VerificationRecord(derivation.checks)
    text = render(derivation, template=template, depth=depth)
    folder = Path(into)
    files = [write_whole(folder / f"{model.name}.tex", text)]
    if record:
        path = folder / f"{model.name}.record.json"
        files.append(write_whole(path, record_text(response, verification)))
    return WriteUp(response, verification, tuple(files))


def write_pdf(write_up: WriteUp) -> Path:
    """Compile the .tex file of a write-up and return the path of its PDF.

    Raises:  NoTexEngineError if no TeX engine is there, TexFailedError if it stops.
    """
    return compile_pdf(write_up.files[0])
