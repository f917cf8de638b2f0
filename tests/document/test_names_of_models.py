"""Currents called i and rates called lambda, beside the document's own i and lambda."""

from __future__ import annotations

import json
import re
from pathlib import Path
from typing import Any

import jsonschema
import pytest

from closedform.document.engine import compile_pdf
from closedform.document.writeup import write_up
from closedform.model.building import system
from closedform.model.driven.model import DrivenModel
from closedform.model.model import Model
from closedform.model.parametric import ParametricModel
from closedform.model.reading import load
from tests.document.test_parametric_record import SCHEMA

AnyModel = Model | ParametricModel | DrivenModel
VALIDATOR = jsonschema.Draft202012Validator(SCHEMA)

CIRCUITS = {
    "numbers": """
states = ["i", "v"]
matrix = [[-2, -5], [1, 0]]
initial = [1, 2]
times = [1]
""",
    "numbers, driven": """
equations = ["0.5*i' + i + v = 12", "0.4*v' = i"]
initial = { i = 0, v = 0 }
times = [1]
""",
    "an algebraic current": """
equations = ["v_1' = i", "i = 12 - v_1 - q'", "q'' = v_1 - q"]
initial = { v_1 = 0, q = 0, "q'" = 0 }
times = [1]
""",
    "symbols, driven": """
equations = ["L*i' + R*i + v = V0", "C*v' = i"]
initial = { i = 0, v = 0 }
times = [0.001]
[parameters]
R = { assume = "positive", value = 20 }
L = { assume = "positive", value = 0.1 }
C = { assume = "positive", value = 0.0001 }
V0 = { assume = "real", value = 12 }
""",
}
PUMPS = {
    "values": """
states = ["p_1", "p_0"]
matrix = [["-lambda", "mu"], ["lambda", "-mu"]]
initial = [1, 0]
times = [1]
[parameters]
lambda = { assume = "positive", value = 0.001, unit = "1/h", meaning = "failure rate" }
mu = { assume = "positive", value = 0.1, unit = "1/h" }
""",
    "symbols": """
equations = ["p_2' = -2*lambda*p_2 + mu*p_1", "p_1' = 2*lambda*p_2 - (lambda + mu)*p_1"]
initial = { p_2 = 1, p_1 = 0 }
[parameters]
lambda = "positive"
mu = "positive"
""",
    "put in": """
states = ["p_1", "p_0"]
matrix = [["-lambda", "mu"], ["lambda", "-mu"]]
initial = [1, 0]
[parameters]
MTBF = "positive"
mu = "positive"
[substitute]
lambda = "1/MTBF"
""",
    "abbreviation": """
states = ["p_1", "p_0"]
matrix = [["-1/MTBF", "mu"], ["1/MTBF", "-mu"]]
initial = [1, 0]
[parameters]
MTBF = "positive"
mu = "positive"
[abbreviations]
lambda = "1/MTBF"
""",
}
SENTENCE = "is the imaginary unit"


def model_of(text: str, folder: Path) -> AnyModel:
    path = folder / "stated.toml"
    path.write_text(f'title = "Names"\n{text}', encoding="utf-8")
    return load(path)


def written(model: AnyModel, folder: Path, depth: str = "full") -> tuple[str, dict[str, Any]]:
    """The body of a write-up, and its record, which is as its schema says."""
    text, record = (
        path.read_text("utf-8") for path in write_up(model, into=folder, depth=depth).files
    )
    found = json.loads(record)
    VALIDATOR.validate(found)
    return text.partition(r"\begin{document}")[2], found


@pytest.mark.parametrize("depth", ["summary", "working", "full"])
@pytest.mark.parametrize("name", CIRCUITS)
def test_beside_a_current_i_the_imaginary_unit_is_j(name: str, depth: str, tmp_path: Path) -> None:
    body, _ = written(model_of(CIRCUITS[name], tmp_path), tmp_path, depth)
    assert body.count(SENTENCE) == 1
    assert r"Here $\mathrm{j}$ is the imaginary unit, since $i$ is a quantity of the model." in body
    assert r"\mathrm{i}" not in body
    assert body.index(r"\mathrm{j}") < body.index(SENTENCE)


@pytest.mark.parametrize("text", [*CIRCUITS.values(), *PUMPS.values()])
def test_such_write_ups_can_be_set(text: str, pdflatex: str, tmp_path: Path) -> None:
    assert pdflatex
    document = write_up(model_of(text, tmp_path), into=tmp_path, depth="full").files[0]
    assert compile_pdf(document).exists()


def test_beside_i_and_j_the_upright_letter_is_told(tmp_path: Path) -> None:
    model = system([[-2, -5], [1, 0]], initial=[1, 2], states=["i", "j"])
    body, _ = written(model, tmp_path)
    assert body.count(SENTENCE) == 1
    assert r"Upright, $\mathrm{i}$ is the imaginary unit; in italics, $i$" in body
    assert r"\mathrm{j}" not in body


@pytest.mark.parametrize("states", [["j", "v"], ["i_1", "v"], ["I", "v"]])
def test_without_a_current_i_nothing_is_said(states: list[str], tmp_path: Path) -> None:
    body, _ = written(system([[-2, -5], [1, 0]], initial=[1, 2], states=states), tmp_path)
    assert SENTENCE not in body
    assert r"-1 \pm 2\mathrm{i}" in body


def test_where_nothing_is_complex_nothing_is_said(tmp_path: Path) -> None:
    body, _ = written(system([[-2, 0], [1, 0]], initial=[1, 2], states=["i", "v_j"]), tmp_path)
    assert SENTENCE not in body


@pytest.mark.parametrize("depth", ["summary", "working", "full"])
@pytest.mark.parametrize("name", PUMPS)
def test_beside_a_rate_lambda_eigenvalues_go_by_s(name: str, depth: str, tmp_path: Path) -> None:
    body, record = written(model_of(PUMPS[name], tmp_path), tmp_path, depth)
    assert "lambda" in json.dumps(record) or name == "abbreviation"
    assert r"\lambda" in body
    assert not re.search(r"\\lambda(_|\\boldsymbol)", body)
    assert depth == "summary" or r"\det(s\boldsymbol{I} - \boldsymbol{A})" in body


def test_both_spellings_of_lambda_give_one_document(tmp_path: Path) -> None:
    text = PUMPS["values"]
    one, _ = written(model_of(text, tmp_path), tmp_path)
    other, record = written(model_of(text.replace("lambda", "lamda"), tmp_path), tmp_path)
    assert "lamda" in record["parameters"]
    assert one.replace("lambda", "lamda") == other.replace("lambda", "lamda")


@pytest.mark.parametrize(
    "states", [["lambda", "y", "z"], ["lamda_1", "y", "z"], ["x", "lambda", "s"]]
)
def test_a_state_lambda_has_its_letter_for_itself(states: list[str], tmp_path: Path) -> None:
    model = system([[-1, -5, 1], [1, 0, 2], [1, 1, -3]], initial=[1, 2, 0], states=states)
    body, _ = written(model, tmp_path)
    root = "z" if "s" in states else "s"
    assert rf"\det({root}\boldsymbol{{I}} - \boldsymbol{{A}}) = {root}^{{3}}" in body
    assert rf"{root}_{{3}}" in body
    assert r"\lambda\boldsymbol{I}" not in body


@pytest.mark.parametrize(
    "name", [*"abcdfghijklmnopqrsuvwxyz", *"ABCDEFGHIJKLMNOPQRSTUVWXYZ", "lambda"]
)
def test_any_letter_may_name_a_state_or_a_parameter(name: str, tmp_path: Path) -> None:
    other = "v_1"
    state = system([[-2, -5], [1, 0]], initial=[1, 2], states=[name, other])
    body, _ = written(state, tmp_path, "working")
    assert body
    matrix = [[f"-{name}", 0], [name, "-k_1"]]
    rates: dict[str, object] = {name: "positive", "k_1": "positive"}
    model = system(matrix, initial=[1, 0], states=["x_1", other], parameters=rates)
    body, _ = written(model, tmp_path, "working")
    assert body


def test_constants_leave_names_of_eliminated_unknowns_and_outputs_alone(tmp_path: Path) -> None:
    stated = """
equations = ["x' = alpha_1 - 2*y", "y' = x + z", "z' = -y - 3*z", "alpha_1 = -x", "lambda = x + y"]
initial = { x = 1, y = 0, z = 0 }
times = [1]
[outputs]
omega_1 = "x - z"
"""
    body, record = written(model_of(stated, tmp_path), tmp_path)
    names = set(record["names"])
    assert {"alpha_r_1", "omega_r_1", "lambda_3"} <= names
    assert not names & {"alpha_1", "omega_1", "lambda"}
    assert r"\det(s\boldsymbol{I} - \boldsymbol{A})" in body
    assert r"\lambda(t) &=" in body
