"""Columns and matrices of another size than the model's: they fail, and nothing is diagnosed."""

from __future__ import annotations

from pathlib import Path

import pytest

from closedform.checking.check import check_lines
from closedform.checking.claim import SourceLine
from closedform.checking.source.reading import Source
from closedform.model import model_from

LINES = [
    r"\vec{x} = \begin{pmatrix} 2\sin t + \cos 2t \\ 4\sin t \end{pmatrix}",
    r"A = \begin{pmatrix} 0 & 1 \\ -1 & 0 \end{pmatrix}",
    r"e^{At} = \begin{pmatrix} \cos t & \sin t \\ -\sin t & \cos t \end{pmatrix}",
    r"e^{At} = \begin{pmatrix} \cos t & \sin t & 0 & 0 \end{pmatrix}",
    r"J = \begin{pmatrix} \mathrm{i} & 0 \\ 0 & -\mathrm{i} \end{pmatrix}",
    r"v_1 = \begin{pmatrix} 1 \\ \mathrm{i} \end{pmatrix}",
]


@pytest.mark.parametrize("text", LINES)
def test_a_matrix_of_another_size_fails_without_a_slip(text: str) -> None:
    model = model_from(
        {
            "title": "Two carts",
            "equations": ["x1'' = -3*x1 + x2", "x2'' = 2*x1 - 2*x2"],
            "initial": {"x1": 1, "x1'": 0, "x2": -1, "x2'": 6},
        },
        name="carts",
    )
    source = Source(Path("a.tex"), "m.toml", Path("m.toml"), "", (SourceLine(1, text),))
    (verdict,) = check_lines(source, model).lines
    assert verdict.verdict == "fails"
    assert verdict.slip is None
    assert "2" in verdict.reason or "1" in verdict.reason
    assert "4" in verdict.reason
