"""The main job, from a model to its files: respond, prove, derive, print, write."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from closedform.derivation.build import derive
from closedform.derivation.driven.build import derive_driven
from closedform.derivation.parametric.build import derive_cases
from closedform.derivation.step import Derivation
from closedform.document.engine import compile_pdf
from closedform.document.files import write_whole
from closedform.document.origin import Origin, origin_line, path_between
from closedform.document.reading.back import read_back
from closedform.document.record import DIGITS, record_text
from closedform.document.render import check_options, rendered
from closedform.document.templating import check_template
from closedform.model.driven.model import DrivenModel
from closedform.model.model import Model
from closedform.model.parametric import ParametricModel
from closedform.response.driven.numbers import DrivenNumbersAt, driven_numbers_of
from closedform.response.driven.response import DrivenResponse, respond_driven
from closedform.response.parametric.numbers import NumbersAt, numbers_of
from closedform.response.parametric.response import ParametricResponse, respond_in_cases
from closedform.response.response import Response, respond
from closedform.verification.driven.verify import verify_driven
from closedform.verification.parametric.numbers import numbers_check
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.parametric.verify import verify_cases
from closedform.verification.record import VerificationRecord
from closedform.verification.refusal import require_proved
from closedform.verification.verify import verify

__all__ = ["Made", "WriteUp", "made_from", "write_up"]


@dataclass(frozen=True)
class WriteUp:
    """What came of one model: its response, what was proved, and the files written."""

    response: Response | ParametricResponse | DrivenResponse
    verification: VerificationRecord | CaseRecords
    files: tuple[Path, ...]


def write_up(  # noqa: PLR0913 - one parameter for each option
    model: Model | ParametricModel | DrivenModel,
    *,
    into: str | Path = "out",
    template: str | Path = "latex",
    depth: str = "working",
    digits: int = 6,
    record: bool = True,
    source: str | Path | None = None,
) -> WriteUp:
    """Solve a model, prove the result, and write NAME.tex and NAME.record.json.

    `into` is the folder, made if it is not there; `depth` is summary, working or full;
    `digits` are the significant digits of the tables.  `source` is the file of the model as
    the user named it, which the top of the document tells; left out, that is NAME.toml.
    The document is read back before it is written: what it displays is what was proved.

    Raises:  UnknownDepthError, UnusableDigitsError for options out of their range;
             TemplateError if there is no such template;
             ResponseRefutedError if any identity is refuted, StatementRefutedError if a
             statement of the derivation is, UnprovedError if either is left open (then
             nothing is written);
             DocumentRefutedError if the text does not print what was proved;
             RootsUnknownError, ValuesNotCoveredError for a model with parameters that is
             not solved for all or some values of them;
             CannotWriteError if a file cannot be written.
    """
    check_options(depth=depth, digits=digits)
    check_template(template)
    made = made_from(model, digits)
    shown = rendered(made.derivation, template=template, depth=depth)
    read_back(shown.text, shown.printed, shown.time, template=template)
    folder = Path(into)
    named = f"{model.name}.toml" if source is None else path_between(source, folder)
    top = origin_line(Origin(named, depth, digits))
    files = [write_whole(folder / f"{model.name}.tex", top + shown.text)]
    if record:
        path = folder / f"{model.name}.record.json"
        content = record_text(made.response, made.verification, made.numbers)
        files.append(write_whole(path, content))
    return WriteUp(made.response, made.verification, tuple(files))


@dataclass(frozen=True)
class Made:
    """A response that holds, its derivation, and what the record tells in numbers."""

    response: Response | ParametricResponse | DrivenResponse
    verification: VerificationRecord | CaseRecords
    derivation: Derivation
    numbers: tuple[NumbersAt, ...] | tuple[DrivenNumbersAt, ...] = ()


def made_from(model: Model | ParametricModel | DrivenModel, digits: int) -> Made:
    """Solve a model, prove the result, and derive it, with tables of `digits` digits.

    Raises:  as `write_up`, but for the errors of documents and files.
    """
    match model:
        case DrivenModel():
            return _driven(model, digits)
        case ParametricModel():
            return _in_cases(model, digits)
        case Model():
            return _in_numbers(model, digits)


def _in_numbers(model: Model, digits: int) -> Made:
    response = respond(model)
    verification = verify(response)
    require_proved(model.name, verification)
    derivation = derive(response, verification, digits=digits)
    return Made(response, VerificationRecord(derivation.checks), derivation)


def _in_cases(model: ParametricModel, digits: int) -> Made:
    """The values of the model are put in, too, and held against a numeric solution."""
    response = respond_in_cases(model)
    records = verify_cases(response)
    numbers = numbers_of(response, digits=digits)
    if model.values is not None or not model.field.free:
        whole = (*records.whole.checks, numbers_check(response, numbers[0], digits=digits))
        records = CaseRecords(VerificationRecord(whole), records.cases)
    require_proved(model.name, records)
    derivation = derive_cases(response, records, digits=digits, numbers=numbers)
    records = CaseRecords(VerificationRecord(derivation.checks), records.cases)
    return Made(response, records, derivation, numbers_of(response, digits=DIGITS))


def _driven(model: DrivenModel, digits: int) -> Made:
    response = respond_driven(model)
    found = verify_driven(response)
    numbers = driven_numbers_of(response, digits=digits)
    require_proved(model.name, found)
    derivation = derive_driven(response, found, digits=digits, numbers=numbers)
    proved = VerificationRecord(derivation.checks)
    verification = CaseRecords(proved, found.cases) if isinstance(found, CaseRecords) else proved
    exact = driven_numbers_of(response, digits=DIGITS)
    return Made(response, verification, derivation, exact)


def write_pdf(write_up: WriteUp) -> Path:
    """Compile the .tex file of a write-up and return the path of its PDF.

    Raises:  NoTexEngineError if no TeX engine is there, TexFailedError if it stops.
    """
    return compile_pdf(write_up.files[0])
