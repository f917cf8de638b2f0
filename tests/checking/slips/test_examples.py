"""Every kind of slip is named by an example, and what mends a line is right."""

from __future__ import annotations

from dataclasses import replace

import pytest

from closedform.checking.judging.judge import judge
from closedform.checking.slips import names
from closedform.checking.slips.names import MEANINGS
from closedform.notation.written.tree import Listing
from tests.checking.slips.examples import EXAMPLES
from tests.checking.slips.examples_two import TWO_WRONG
from tests.checking.slips.making import Diagnosis, Line, diagnosis


def mended_line_holds(found: Diagnosis) -> bool:
    """Whether the last claim is right with the mended form as its value."""
    assert found.slip is not None
    mended = found.slip.mended
    assert mended is not None
    groups = list(found.claim.groups)
    if len(groups) == 1:
        groups = [replace(groups[0], values=(mended,))]
    elif isinstance(mended, Listing):
        groups = [replace(groups[0], names=(), values=(item,)) for item in mended.items]
    else:
        groups = [replace(groups[0], names=(), values=(mended,))]
    return judge(replace(found.claim, groups=tuple(groups)), found.setting).passes


@pytest.mark.parametrize(("name", "model", "lines"), EXAMPLES)
def test_slip_is_named_and_what_mends_the_line_is_right(
    name: str, model: str, lines: tuple[Line, ...]
) -> None:
    found = diagnosis(model, *lines)
    assert found.finding.word == "fails"
    assert found.slip is not None
    assert found.slip.name == name
    assert mended_line_holds(found)


@pytest.mark.parametrize(("model", "lines"), TWO_WRONG)
def test_nothing_is_said_where_two_things_are_wrong(model: str, lines: tuple[Line, ...]) -> None:
    found = diagnosis(model, *lines)
    assert found.finding.word == "fails"
    assert found.slip is None


def test_every_name_has_a_meaning_and_an_example() -> None:
    named = {value for key, value in vars(names).items() if key.isupper() and value != MEANINGS}
    assert named == set(MEANINGS)
    assert named == {name for name, _, _ in EXAMPLES}
    assert len(named) == len([key for key in vars(names) if key.isupper()]) - 1


@pytest.mark.parametrize(
    ("model", "lines", "reason"),
    [
        ("tanks", ("h_1(t) = 7*exp(-t) - exp(-4*t)",), "5 too large at t = 0"),
        (
            "latch",
            (("exp A", "[[exp(-3*t), 0, 0], [0, exp(-3*t), 0], [0, 0, exp(-t)]]"),),
            "entry (1, 2): 0.1116 too small at t = 0.5",
        ),
        ("tanks", ("h_1(1) = 2*exp(-1) = exp(-4)",), "member 2 of 2: 0.6991 too small"),
        ("mount", ("omega_n = k/m",), "20 too large at k = 50, m = 2"),
    ],
)
def test_reason_tells_how_far_the_line_is_off(
    model: str, lines: tuple[Line, ...], reason: str
) -> None:
    assert diagnosis(model, *lines).reason.startswith(reason)


def test_place_is_told_in_words() -> None:
    matrix = (
        "1/3*[[exp(-t) + 2*exp(-4*t), exp(-t) - exp(-4*t)], "
        "[2*exp(-t) + 2*exp(-4*t), 2*exp(-t) + exp(-4*t)]]"
    )
    found = diagnosis("tanks", ("exp A", matrix))
    assert found.slip is not None
    assert found.slip.where == "the term 2*exp(-4*t) of entry (2, 1)"
