"""Write-ups and records of models with known roots."""

from __future__ import annotations

import json
from pathlib import Path

import jsonschema
import pytest
from flint import arb, ctx

from closedform.document.engine import compile_pdf
from closedform.document.writeup import write_up
from tests.document.test_parametric_record import SCHEMA
from tests.parametric.record_reader import names_at
from tests.parametric.with_known_roots import MODELS, response_at_known_roots
from tests.parametric.with_pi import model_with_pi


@pytest.mark.parametrize("name", MODELS)
@pytest.mark.parametrize("depth", ["working", "full"])
def test_a_write_up_can_be_set_and_its_record_is_valid(
    name: str, depth: str, pdflatex: str, tmp_path: Path
) -> None:
    assert pdflatex
    written = write_up(model_with_pi(**MODELS[name]), into=tmp_path, depth=depth)
    assert compile_pdf(written.files[0]).exists()
    record = json.loads(written.files[1].read_text("utf-8"))
    jsonschema.Draft202012Validator(SCHEMA).validate(record)


def test_the_record_defines_its_names(tmp_path: Path) -> None:
    written = write_up(model_with_pi(**MODELS["two masses"]), into=tmp_path)
    record = json.loads(written.files[1].read_text("utf-8"))
    with ctx.workprec(200):
        names = names_at(record["cases"][0], {"pi": arb.pi()})
    told = record["values"][0]["names"]
    assert set(told) == {q.name for q in response_at_known_roots("two masses").cases[0].quantities}
    for name, decimal in told.items():
        assert float(names[name]) == pytest.approx(float(decimal), rel=1e-12)
