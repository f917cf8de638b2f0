"""Write-ups of models with the number pi: upright, and in no table of parameters."""

from __future__ import annotations

import json
import re
from pathlib import Path

import jsonschema
import pytest

from closedform.document.engine import compile_pdf
from closedform.document.writeup import write_up
from tests.document.test_parametric_record import SCHEMA
from tests.parametric.with_pi import MODELS, model_with_pi, response_with_pi

each_model = pytest.mark.parametrize("name", MODELS)


@each_model
@pytest.mark.parametrize("depth", ["summary", "working", "full"])
def test_pi_is_upright_and_the_write_up_can_be_set(
    name: str, depth: str, pdflatex: str, tmp_path: Path
) -> None:
    written = write_up(model_with_pi(**MODELS[name]), into=tmp_path, depth=depth)
    text = written.files[0].read_text("utf-8")
    assert r"\uppi" in text.partition(r"\begin{document}")[2]
    assert not re.search(r"\\pi\b", text)
    if depth == "working":
        assert pdflatex
        assert compile_pdf(written.files[0]).exists()


def test_a_model_without_parameters_says_nothing_of_parameters(tmp_path: Path) -> None:
    written = write_up(model_with_pi(**MODELS["numbers"]), into=tmp_path)
    body = written.files[0].read_text("utf-8").partition(r"\begin{document}")[2]
    before_cautions = body.partition("Cautions")[0]
    assert "arameter" not in before_cautions
    assert "Case" not in before_cautions


@each_model
def test_the_record_names_pi_in_formulas_only(name: str, tmp_path: Path) -> None:
    written = write_up(model_with_pi(**MODELS[name]), into=tmp_path, depth="summary")
    record = json.loads(written.files[1].read_text("utf-8"))
    jsonschema.Draft202012Validator(SCHEMA).validate(record)
    assert "pi" not in record["parameters"]
    for row in record.get("values", []):
        assert "pi" not in row["parameters"]


def test_a_notebook_needs_no_preamble() -> None:
    latex = response_with_pi("numbers")._repr_latex_()
    assert r"\mathrm{\pi}" in latex
    assert r"\uppi" not in latex
