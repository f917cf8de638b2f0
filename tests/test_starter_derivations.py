"""The shipped derivations: their models, their verdicts, and their numbers by an integrator."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import numpy as np
import pytest
from scipy.integrate import solve_ivp

import closedform
from closedform.checking.check import check_file
from closedform.model.driven.model import DrivenModel

FOLDER = Path(__file__).parents[1] / "templates" / "starters" / "derivations"
MODELS = sorted(FOLDER.glob("*_model.toml"))
WRONG: dict[str, dict[int, str]] = {
    "coupled_tables.tex": {9: "fails", 10: "carried", 11: "carried", 12: "carried"},
    "free_motion_in_letters.tex": {},
    "ladder_on_paper.toml": {},
}


def test_every_derivation_has_its_model_beside_it() -> None:
    stems = {Path(name).stem for name in WRONG}
    assert {path.name for path in FOLDER.iterdir()} == set(WRONG) | {
        f"{stem}_model.toml" for stem in stems
    }


@pytest.mark.parametrize("path", MODELS, ids=[path.stem for path in MODELS])
def test_the_model_of_a_derivation_is_read_and_its_response_proved(path: Path) -> None:
    model = closedform.load(path)
    assert (model.stacked if isinstance(model, DrivenModel) else model).summary
    assert closedform.verify(closedform.respond(model)).holds


@pytest.mark.parametrize("name", sorted(WRONG))
def test_the_verdicts_are_those_it_is_there_for(name: str) -> None:
    report = check_file(FOLDER / name)
    found = {v.line.number: v.verdict for v in report.lines if not v.passes}
    assert found == WRONG[name]
    assert {v.carried_from for v in report.lines} <= {None, 9}
    assert len(report.lines) >= 10


def test_the_slip_is_named() -> None:
    report = check_file(FOLDER / "coupled_tables.tex")
    slip = next(v.slip for v in report.lines if v.verdict == "fails")
    assert slip is not None
    assert slip.name == "one wrong coefficient"
    assert slip.where == "20 ought to be 20/3"


def test_no_line_is_taken_for_a_mere_identity() -> None:
    kinds = {v.says.split(" ")[0] for name in WRONG for v in check_file(FOLDER / name).lines}
    assert "identity" not in kinds


def integrated(matrix: list[list[float]], start: list[float], times: list[float]) -> Any:
    """Return the states at instants, by an integrator that knows no closed form."""
    rates = np.array(matrix)
    span = (0.0, max(times))
    found = solve_ivp(lambda _, x: rates @ x, span, start, "DOP853", times, rtol=1e-11, atol=1e-12)
    return found.y


def test_the_two_tables_move_as_the_mended_derivation_says() -> None:
    k, c = np.array([[9.0, -4.0], [-4.0, 9.0]]), np.array([[3.0, -1.0], [-1.0, 3.0]])
    matrix = np.block([[np.zeros((2, 2)), np.eye(2)], [-k, -c]])
    times = [0.3, 1.0, 2.2]
    t = np.array(times)
    s = np.exp(-t) * (10 * np.cos(2 * t) + 5 * np.sin(2 * t))
    d = np.exp(-2 * t) * (10 * np.cos(3 * t) + 20 / 3 * np.sin(3 * t))
    found = integrated(matrix.tolist(), [10, 0, 0, 0], times)
    assert found[0] == pytest.approx((s + d) / 2, abs=1e-8)
    assert found[1] == pytest.approx((s - d) / 2, abs=1e-8)
    slipped = d + np.exp(-2 * t) * (20 - 20 / 3) * np.sin(3 * t)
    assert round((s + slipped)[1] / 2, 3) == -0.408


def test_the_ladder_has_the_values_that_are_claimed() -> None:
    matrix = [[-20.0, 10, 0], [10, -20, 10], [0, 10, -10]]
    found = integrated(matrix, [0, 0, 10], [0.1, 0.25, 0.5])
    assert round(found[2][0], 3) == 5.235
    assert round(-found[0][1] / 10, 3) == -0.138
    assert round(found[2][2], 2) == 2.02
    rates = np.linalg.eigvalsh(np.array(matrix))
    assert [round(r, 2) for r in rates] == [-32.47, -15.55, -1.98]
