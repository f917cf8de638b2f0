"""A whole derivation held against its model: every line read, judged, and told."""

from __future__ import annotations

from pathlib import Path

from closedform.checking.cases import Grounds, allowed_cases
from closedform.checking.judging.judged_lines import JudgedLine, judged_lines, verdict_on
from closedform.checking.source.reading import Source, read_source
from closedform.checking.truth import Truth
from closedform.checking.truths.solved import truths_of
from closedform.checking.verdict import CheckReport
from closedform.model import DrivenModel, Model, ParametricModel, load

__all__ = ["check_file", "check_lines"]


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
    that the source allows; a line that names a case of its own is held against that.  Where the
    model gives values to all parameters, it is the case of these.

    Raises:  NoSuchCaseError if the source allows none.
    """
    truths = truths_of(model)
    grounds = Grounds(truths, source.path)
    key = "case" if source.case else "where"
    allowed = allowed_cases(truths, source.case or source.where, source.path, key=key)
    valued = tuple(truth for truth in allowed if truth.values is not None)
    best = _best(source, valued or allowed, grounds)
    return CheckReport(
        name=source.path.stem,
        title=source.title or source.path.stem,
        source=str(source.path),
        model=source.model,
        model_title=model.stacked.title if isinstance(model, DrivenModel) else model.title,
        lines=tuple(map(verdict_on, best[1])),
        time=truths[0].time,
        case=best[0].condition,
    )


def _best(
    source: Source, truths: tuple[Truth, ...], grounds: Grounds
) -> tuple[Truth, list[JudgedLine]]:
    """Return the case in which most lines hold, the first of several, and the lines in it."""
    best = truths[0], judged_lines(source.lines, truths[0], grounds)
    for truth in truths[1:]:
        if _passing(best[1]) == len(best[1]):
            break
        lines = judged_lines(source.lines, truth, grounds)
        if _passing(lines) > _passing(best[1]):
            best = truth, lines
    return best


def _passing(lines: list[JudgedLine]) -> int:
    """Count the lines that hold."""
    return sum(line.passes for line in lines)
