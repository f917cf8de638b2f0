"""The right P is given where the line has a wrong one, and it holds."""

from __future__ import annotations

from dataclasses import replace

import pytest

from closedform.checking.judging.judge import judge
from closedform.checking.slips import right_form
from tests.checking.slips.making import Line, diagnosis


@pytest.mark.parametrize(
    ("model", "lines"),
    [
        ("tanks", (("J", "J = [[-4, 0], [0, -1]]"), ("P", "P = [[7, 5], [3, 1]]"))),
        ("tanks", (("P", "P = [[7, 5], [3, 1]]"),)),
        ("pendulum", (("P", "P = [[1, 1], [2, 3]]"),)),
        ("latch", (("P", "P = [[1, 1, 0], [2, 3, 0], [0, 4, 1]]"),)),
        ("cascade", (("P", "P = [[1, 1, 0], [2, 3, 0], [0, 4, 1]]"),)),
        ("filter", (("P", "P = [[1, 1, 0], [2, 3, 0], [0, 4, 1]]"),)),
    ],
)
def test_right_transformation_is_made(model: str, lines: tuple[Line, ...]) -> None:
    found = diagnosis(model, *lines)
    assert found.finding.word == "fails"
    right = right_form(found.claim, found.finding, found.setting)
    assert right is not None
    group = replace(found.claim.groups[0], values=(right,))
    assert judge(replace(found.claim, groups=(group,)), found.setting).passes


def test_a_form_that_the_judge_gives_is_kept() -> None:
    found = diagnosis("tanks", "h_1(t) = 7*exp(-t) - exp(-4*t)")
    assert right_form(found.claim, found.finding, found.setting) == found.finding.right
