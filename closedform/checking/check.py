"""A whole derivation held against its model: every line read, judged, and told."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from pathlib import Path

from closedform.checking.author import Author
from closedform.checking.cases import allowed_cases
from closedform.checking.claim import Claim, SourceLine
from closedform.checking.facts import Facts
from closedform.checking.ground import Ground, ground_of
from closedform.checking.judge import Judgement, judged, stated
from closedform.checking.lines import ReadLine, read_line
from closedform.checking.recognise import claims_of
from closedform.checking.setting import Finding, Setting
from closedform.checking.slips import diagnosed
from closedform.checking.source import Source, read_source
from closedform.checking.truths.solved import truths_of
from closedform.checking.verdict import CheckReport, LineVerdict, Slip, Word
from closedform.model import DrivenModel, Model, ParametricModel, load
from closedform.notation.written.tree import Written

__all__ = ["check_file", "check_lines"]

GRAVEST_FIRST: tuple[Word, ...] = (
    "fails",
    "not read",
    "carried",
    "holds to the digits shown",
    "holds up to order",
    "holds up to scale",
    "holds",
)
"""A line that says several things has the verdict of the gravest finding."""


def check_file(path: Path | str, *, model: Path | str | None = None) -> CheckReport:
    """Read a derivation and its model, judge every line, and return what was found.

    `path` is a LaTeX document or a file of claims, see `read_source`; `model` is taken instead
    of the model that it names.

    Raises:  what `read_source` and `load` raise for files that cannot be used, and what
             solving the model raises; no line is an error: what cannot be read or decided has
             the verdict `not read`.
    """
    source = read_source(path, model=model)
    return check_lines(source, load(source.model_path))


def check_lines(source: Source, model: Model | ParametricModel | DrivenModel) -> CheckReport:
    """Return the report on the lines of a source, held against a model.

    Where the parameters make cases, that case is taken in which most lines hold, among those
    that the source allows.

    Raises:  NoSuchCaseError if it allows none.
    """
    truths = allowed_cases(truths_of(model), source.case or source.where, source.path)
    best: tuple[int, tuple[LineVerdict, ...], str] | None = None
    for truth in truths:
        ground = ground_of(truth)
        verdicts = _verdicts(source.lines, ground)
        passing = sum(verdict.passes for verdict in verdicts)
        if best is None or passing > best[0]:
            best = passing, verdicts, truth.condition
        if passing == len(verdicts):
            break
    assert best is not None  # noqa: S101  a model has a case
    return CheckReport(
        name=source.path.stem,
        title=source.title or source.path.stem,
        source=str(source.path),
        model=source.model,
        model_title=model.stacked.title if isinstance(model, DrivenModel) else model.title,
        lines=best[1],
        time=truths[0].time,
        case=best[2],
    )


@dataclass(frozen=True, slots=True)
class _Line:
    """A line with its readings; the claims of the first reading."""

    read: ReadLine
    claims: tuple[Claim, ...]


def _verdicts(lines: Sequence[SourceLine], ground: Ground) -> tuple[LineVerdict, ...]:
    """Judge the lines one after another, each in the light of those before it."""
    read = [_read(line, ground.facts) for line in lines]
    author = Author(kept=ground.facts.names)
    verdicts = []
    for place, line in enumerate(read):
        later = tuple(claim for other in read[place + 1 :] for claim in other.claims)
        verdict, author = _judged_line(line, Setting(ground, author, later))
        verdicts.append(verdict)
    return tuple(verdicts)


def _read(line: SourceLine, facts: Facts) -> _Line:
    read = read_line(line, facts)
    if read.reading is None:
        return _Line(read, ())
    claims = claims_of(line, read.reading.statements, facts, of=read.of, at=read.at)
    return _Line(read, claims)


def _judged_line(line: _Line, setting: Setting) -> tuple[LineVerdict, Author]:
    if line.read.reading is None:
        says = line.read.line.says or "formula"
        return LineVerdict(line.read.line, says, "not read", line.read.trouble), setting.author
    judgements, author = _all(line.claims, setting)
    notes = _ambiguities(line)
    if any(not j.finding.passes for j in judgements):
        for other in line.read.reading.others:
            claims = claims_of(
                line.read.line, other, setting.ground.facts, of=line.read.of, at=line.read.at
            )
            found, later = _all(claims, setting)
            undecided = any(j.finding.word == "not read" for j in judgements)
            if all(j.finding.passes for j in found):
                judgements, author = found, later
                notes = ("it holds as it can also be read", *notes)
                break
            if undecided and not any(j.finding.word == "not read" for j in found):
                judgements, author = found, later
    return _verdict(line, judgements, setting, notes), author


def _all(claims: Sequence[Claim], setting: Setting) -> tuple[list[Judgement], Author]:
    """Judge the claims of a line in order."""
    judgements, author = [], setting.author
    for claim in claims:
        found = judged(claim, replace(setting, author=author))
        judgements.append(found)
        author = stated(author, found)
    return judgements, author


def _verdict(
    line: _Line, judgements: list[Judgement], setting: Setting, notes: tuple[str, ...]
) -> LineVerdict:
    gravest = min(judgements, key=lambda j: GRAVEST_FIRST.index(j.finding.word))
    finding = gravest.finding
    slip = None
    reason = finding.reason
    if finding.word == "fails":
        slip, reason = diagnosed(gravest.claim, finding, setting)
    if finding.word == "carried":
        reason = f"it follows from line {gravest.carried_from}"
    reading = line.read.reading
    return LineVerdict(
        line.read.line,
        says_text(gravest.claim, judgements),
        finding.word,
        reason,
        _right(finding, slip),
        slip,
        gravest.carried_from,
        (*notes, *finding.notes),
        reading.statements if reading is not None else (),
    )


def _right(finding: Finding, slip: Slip | None) -> Written | None:
    """Return the right form of a line that does not hold, near to what stands there."""
    if finding.passes:
        return None
    mended = slip.mended if slip is not None else None
    return finding.right if mended is None else mended


def says_text(claim: Claim, judgements: Sequence[Judgement] = ()) -> str:
    """Return what a line claims, with its subjects."""
    same = [j.claim.subject for j in judgements if j.claim.says == claim.says]
    subjects = ", ".join(dict.fromkeys(subject for subject in same if subject))
    if claim.says in ("P", "J", "matrix", "P inverse", "exp J", "exp A", "real form"):
        subjects = ""
    return f"{claim.says} {subjects or _own(claim)}".strip()


def _own(claim: Claim) -> str:
    return claim.subject if claim.says in ("solution", "value", "output", "steady state") else ""


def _ambiguities(line: _Line) -> tuple[str, ...]:
    """Return how ambiguous places were read."""
    reading = line.read.reading
    if reading is None:
        return ()
    return tuple(
        f"{found.text} is read as {found.chosen}, not {found.other}"
        + (f", as {found.decided_by} is declared" if found.decided_by else "")
        for found in reading.ambiguities
    )
