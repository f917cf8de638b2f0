"""Models and lines about them, judged one after another as in a derivation."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache
from typing import Any

from closedform.checking.claim import Claim, SourceLine
from closedform.checking.judging.judge import judge, judged
from closedform.checking.judging.judgement import stated
from closedform.checking.recognising.lines import read_line
from closedform.checking.recognising.recognise import claims_of
from closedform.checking.slips import diagnosed
from closedform.checking.standing.author import Author
from closedform.checking.standing.ground import Ground, ground_of
from closedform.checking.standing.setting import Finding, Setting
from closedform.checking.truths.solved import truths_of
from closedform.checking.verdict import Slip
from closedform.model import model_from

Line = tuple[str, str] | tuple[str, str, str] | str
"""What a line says, its text, and of what; a text alone says by itself what it claims."""


@dataclass(frozen=True)
class Diagnosis:
    """What was found of the last claim of some lines."""

    claim: Claim
    finding: Finding
    setting: Setting
    slip: Slip | None
    reason: str


MODELS: dict[str, dict[str, Any]] = {
    "pendulum": {
        "equations": ["x'' + 2*x' + 17*x = 0"],
        "states": ["x"],
        "initial": {"x": "4", "x'": "0"},
    },
    "thrown": {
        "equations": ["x'' + 6*x' + 25*x = 0"],
        "states": ["x"],
        "initial": {"x": "1", "x'": "2"},
    },
    "critical": {
        "equations": ["x'' + 4*x' + 4*x = 0"],
        "states": ["x"],
        "initial": {"x": "3", "x'": "1"},
    },
    "mount": {
        "equations": ["m*x'' + c*x' + k*x = 0"],
        "states": ["x"],
        "initial": {"x": "0.04", "x'": "0"},
        "parameters": {
            "m": {"assume": "positive", "value": "2"},
            "c": {"assume": "positive", "value": "1.2"},
            "k": {"assume": "positive", "value": "50"},
        },
    },
    "latch": {
        "equations": ["x_1' = -3*x_1 + x_2", "x_2' = -3*x_2", "x_3' = -x_3"],
        "states": ["x_1", "x_2", "x_3"],
        "initial": {"x_1": "0", "x_2": "1", "x_3": "1"},
    },
    "cascade": {
        "equations": ["y_1' = -y_1 + y_2", "y_2' = -y_2 + y_3", "y_3' = -y_3"],
        "states": ["y_1", "y_2", "y_3"],
        "initial": {"y_1": "0", "y_2": "0", "y_3": "2"},
    },
    "tanks": {
        "equations": ["h_1' = -3*h_1 + h_2", "h_2' = 2*h_1 - 2*h_2"],
        "states": ["h_1", "h_2"],
        "initial": {"h_1": "1", "h_2": "5"},
    },
    "loops": {
        "equations": ["i_1' = -3*i_1 - 2*i_2", "i_2' = -3*i_1 - 4*i_2"],
        "states": ["i_1", "i_2"],
        "initial": {"i_1": "5", "i_2": "0"},
    },
    "rotor": {
        "equations": ["a' = -a - 3*b", "b' = 3*a - b"],
        "states": ["a", "b"],
        "initial": {"a": "2", "b": "1"},
    },
    "loaded": {
        "equations": ["x'' + 3*x' + 2*x = 4"],
        "states": ["x"],
        "initial": {"x": "1", "x'": "0"},
    },
    "shaken": {
        "equations": ["x'' + 4*x = 8*cos(2*t)"],
        "states": ["x"],
        "initial": {"x": "1", "x'": "0"},
    },
    "fading": {
        "equations": ["x'' + 3*x' + 2*x = exp(-3*t)"],
        "states": ["x"],
        "initial": {"x": "0", "x'": "0"},
    },
    "waved": {
        "equations": ["x'' + 2*x' + 5*x = 10*cos(t)"],
        "states": ["x"],
        "initial": {"x": "0", "x'": "0"},
    },
    "switched": {
        "equations": ["x' = -2*x + 6*step(t - 1)"],
        "states": ["x"],
        "initial": {"x": "1"},
    },
    "repair": {
        "equations": [
            "p_0' = -2*p_0 + 2*p_1",
            "p_1' = 2*p_0 - 3*p_1 + 2*p_2",
            "p_2' = p_1 - 2*p_2",
        ],
        "states": ["p_0", "p_1", "p_2"],
        "initial": {"p_0": "0", "p_1": "1", "p_2": "0"},
    },
    "decay": {
        "equations": ["n' = -n/4"],
        "states": ["n"],
        "initial": {"n": "100"},
    },
    "daughter": {
        "equations": ["n_1' = -k_1*n_1", "n_2' = k_1*n_1 - k_2*n_2"],
        "states": ["n_1", "n_2"],
        "initial": {"n_1": "N", "n_2": "0"},
        "conditions": ["k_1 != k_2"],
        "parameters": {
            "k_1": {"assume": "positive"},
            "k_2": {"assume": "positive"},
            "N": {"assume": "positive"},
        },
    },
    "filter": {
        "equations": ["x_1' = -3*x_1 + x_2", "x_2' = -x_1 - x_2", "x_3' = x_1 - 5*x_3"],
        "states": ["x_1", "x_2", "x_3"],
        "initial": {"x_1": "1", "x_2": "0", "x_3": "0"},
    },
}


@cache
def ground(name: str) -> Ground:
    """Return the ground of a model."""
    return ground_of(truths_of(model_from({"title": name, **MODELS[name]}, name=name))[0])


def diagnosis(model: str, *lines: Line) -> Diagnosis:
    """Return what is found of the last claim of some typed lines about a model."""
    own = ground(model)
    author = Author(kept=own.facts.names)
    found: Diagnosis | None = None
    for number, line in enumerate(lines, start=1):
        says, text, of = ("", line, "") if isinstance(line, str) else (*line, "", "")[:3]
        source = SourceLine(number, text, typed=True, says=says, of=of)
        read = read_line(source, own.facts)
        assert read.reading is not None, read.trouble
        for claim in claims_of(source, read.reading.statements, own.facts, of=read.of, at=read.at):
            setting = Setting(own, author)
            finding = judge(claim, setting)
            author = stated(author, judged(claim, setting))
            if number == len(lines):
                slip, reason = None, finding.reason
                if not finding.passes:
                    slip, reason = diagnosed(claim, finding, setting)
                found = Diagnosis(claim, finding, setting, slip, reason)
                if not finding.passes:
                    return found
    assert found is not None
    return found
