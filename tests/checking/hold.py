"""Holding a few lines against a model, without files."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from pathlib import Path

from closedform.checking.cases import Grounds, allowed_cases
from closedform.checking.claim import SourceLine
from closedform.checking.judging.judged_lines import judged_lines, verdict_on
from closedform.checking.verdict import LineVerdict
from closedform.model import DrivenModel, Model, ParametricModel, model_from
from tests.checking.known_truths import known_truths

__all__ = ["held", "held_lines", "model", "symbols"]

Line = str | tuple[str, str] | tuple[str, str, str]


def model(**keys: object) -> Model | ParametricModel | DrivenModel:
    """Return a model stated by the keys of a model file."""
    return model_from({"title": "A model", **keys}, name="model")


def symbols(**values: str | None) -> dict[str, dict[str, str]]:
    """Return positive parameters, with values as far as they are given."""
    return {
        name: {"assume": "positive"} | ({} if value is None else {"value": value})
        for name, value in values.items()
    }


def held(keys: Mapping[str, object], *lines: Line, case: str = "") -> list[LineVerdict]:
    """Return the verdicts on LaTeX lines: text, or what it says and text, or also of what."""
    found = []
    for number, line in enumerate(lines, start=1):
        says, text, of = ("", line, "") if isinstance(line, str) else (*line, "", "")[:3]
        found.append(SourceLine(number, text, says=says, of=of))
    return held_lines(model(**keys), found, case=case)


def held_lines(
    stated: Model | ParametricModel | DrivenModel, lines: Sequence[SourceLine], *, case: str = ""
) -> list[LineVerdict]:
    """Return the verdicts on lines in the case in which most hold."""
    truths = known_truths(stated)
    path = Path("lines.tex")
    allowed = allowed_cases(truths, case, path)
    chosen = [truth for truth in allowed if truth.values is not None] or list(allowed)
    grounds = Grounds(truths, path)
    every = [judged_lines(lines, truth, grounds) for truth in chosen]
    best = max(every, key=lambda judged: sum(line.passes for line in judged))
    return [verdict_on(line) for line in best]
