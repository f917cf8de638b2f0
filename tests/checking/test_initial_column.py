"""x_0 is the column of the initial values, and no eigenvector."""

from __future__ import annotations

import pytest

from tests.checking.hold import held

MATRIX = [["-1", "1"], ["0", "-2"]]


@pytest.mark.parametrize("states", [["x", "y"], ["x1", "x2"], ["x_1", "x_2"]])
@pytest.mark.parametrize("name", [r"\mathbf x_0", r"\vec x_0", "x_0", r"\mathbf{x}_{0}"])
@pytest.mark.parametrize(("second", "word"), [("1", "holds"), ("0", "fails"), ("2", "fails")])
def test_the_initial_column_is_judged_as_such(
    states: list[str], name: str, second: str, word: str
) -> None:
    keys = {"states": states, "matrix": MATRIX, "initial": ["1", "1"]}
    (found,) = held(keys, rf"{name}=\begin{{pmatrix}}1\\{second}\end{{pmatrix}}")
    assert found.verdict == word, found
    assert found.says == "initial value vector"


def test_it_is_that_at_the_start_of_the_model() -> None:
    keys = {"states": ["x1", "x2"], "matrix": MATRIX, "initial": ["1", "1"]}
    (found,) = held(keys, r"\mathbf x(t)=e^{At}\mathbf x_0=e^{At}\begin{pmatrix}1\\1\end{pmatrix}")
    assert found.passes
