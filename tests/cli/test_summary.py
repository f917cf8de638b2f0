"""The lines of the summary: eigenvalues, form and proofs of known systems."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

import pytest

import closedform
from closedform.cli.summary import eigenvalues, form, proofs, summary
from closedform.document.writeup import WriteUp
from closedform.verification.record import Check, VerificationRecord

Matrix = Sequence[Sequence[int | str]]

UNDAMPED: Matrix = [[0, 1], [-3, 0]]
DAMPED: Matrix = [[0, 1], ["-1/3", "-1/2"]]
SADDLE: Matrix = [[0, 1], [2, 0]]
SHIFTED_SADDLE: Matrix = [[1, 1], [2, 1]]
TRIPLE: Matrix = [[-2, 1, 0], [0, -2, 0], [0, 0, -2]]
TWIN_OSCILLATORS: Matrix = [[0, 2, 1, 0], [-2, 0, 0, 1], [0, 0, 0, 2], [0, 0, -2, 0]]
GOLDEN: Matrix = [[0, 1, 0, 0], [-2, 0, 1, 0], [0, 0, 0, 1], [1, 0, -1, 0]]
CUBIC: Matrix = [[0, 1, 0], [0, 0, 1], [-1, -1, 0]]
ZERO: Matrix = [[0, 0], [0, 0]]


def response(matrix: Matrix) -> closedform.Response:
    return closedform.respond(closedform.system(matrix, initial=[1] * len(matrix)))


EIGENVALUES = [
    ("undamped", UNDAMPED, ["± 1.73205 i  ± sqrt(3) i"]),
    ("damped", DAMPED, ["-0.25 ± 0.520416 i  -1/4 ± (sqrt(39)/12) i"]),
    ("saddle", SADDLE, ["1.41421   sqrt(2)", "-1.41421  -sqrt(2)"]),
    ("shifted", SHIFTED_SADDLE, ["2.41421    1 + sqrt(2)", "-0.414214  1 - sqrt(2)"]),
    ("triple", TRIPLE, ["-2  multiplicity 3, index 2"]),
    ("twin", TWIN_OSCILLATORS, ["± 2 i  multiplicity 2, index 2"]),
    (
        "cubic",
        CUBIC,
        ["0.341164 ± 1.16154 i  alpha_1 ± omega_1 i", "-0.682328             lambda_3"],
    ),
    ("zero", ZERO, ["0  multiplicity 2"]),
    ("thirds", [["1/3"]], ["0.333333  1/3"]),
    ("decimal", [["1/8"]], ["0.125"]),
]


@pytest.mark.parametrize(("name", "matrix", "rows"), EIGENVALUES)
def test_eigenvalues_have_decimals_and_an_exact_form_where_they_need_one(
    name: str, matrix: Matrix, rows: list[str]
) -> None:
    found = eigenvalues(response(matrix), 6, 63)
    if name == "cubic":  # which of the two comes first is the spectrum's affair
        assert sorted(" ".join(row.split()[:1]) for row in found) == ["-0.682328", "0.341164"]
        assert any("alpha_1 ± omega_1 i" in row for row in found)
    else:
        assert found == rows


FORMS = [
    (UNDAMPED, ["diagonalisable", "real form: 1 block of size 2"]),
    (SADDLE, ["diagonalisable"]),
    (TRIPLE, ["Jordan form: 1 block of size 2, 1 of size 1"]),
    (TWIN_OSCILLATORS, ["Jordan form: 2 blocks of size 2", "real form: 1 block of size 4"]),
    (
        CUBIC,
        [
            "diagonalisable",
            "real form: 1 block of size 2, 1 of size 1",
            "named roots of a polynomial of degree 3",
        ],
    ),
    (ZERO, ["diagonalisable"]),
]


@pytest.mark.parametrize(("matrix", "texts"), FORMS)
def test_the_form_is_told_by_its_blocks(matrix: Matrix, texts: list[str]) -> None:
    assert form(response(matrix)) == texts


def test_an_exact_form_without_room_is_left_out() -> None:
    assert eigenvalues(response(DAMPED), 6, 30) == ["-0.25 ± 0.520416 i"]


def test_many_eigenvalues_are_cut_short() -> None:
    matrix = [[k if i == k else 0 for i in range(20)] for k in range(20)]
    rows = eigenvalues(response(matrix), 6, 63)
    assert len(rows) == 13
    assert rows[0] == "19"  # the slowest to decay comes first
    assert rows[-1] == "… and 8 more"
    few = [[k if i == k else 0 for i in range(13)] for k in range(13)]
    assert len(eigenvalues(response(few), 6, 63)) == 13


def test_proofs_are_counted_and_what_was_not_attempted_is_told() -> None:
    record = VerificationRecord(
        (
            Check("a", "proved", ""),
            Check("b", "proved", ""),
            Check("c", "enclosed", ""),
            Check("d = e", "not attempted", "the model has no d"),
        )
    )
    assert proofs(record) == [
        ("proved", "2 identities, by exact arithmetic"),
        ("enclosed", "1 comparison, by certified numbers"),
        ("not attempted", "d = e: the model has no d"),
    ]
    assert proofs(VerificationRecord(record.checks[:1])) == [
        ("proved", "1 identity, by exact arithmetic")
    ]


def test_a_long_title_and_many_states_are_folded() -> None:
    n = 30
    matrix = [[-1 if i == k else 0 for i in range(n)] for k in range(n)]
    model = closedform.system(
        matrix,
        initial=[0] * n,
        states=[f"temperature_{k}" for k in range(n)],
        title=" ".join(["long"] * 40),
    )
    found = closedform.respond(model)
    result = WriteUp(found, closedform.verify(found), ())
    lines = [
        "".join(text for text, _ in line)
        for line in summary(result, (Path("a" * 100),), digits=6, width=80)
    ]
    assert all(len(line) <= 80 or line.endswith("a" * 100) for line in lines)
    assert "  states         30: temperature_0, temperature_1," in "\n".join(lines)
    assert any(line.endswith("…") for line in lines)
    assert lines[-1] == ""
