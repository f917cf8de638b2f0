"""The record of a model with parameters, checked from its JSON alone at exact values."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from collections.abc import Callable
from dataclasses import replace
from fractions import Fraction
from functools import cache
from pathlib import Path
from typing import Any

import jsonschema
import pytest
from flint import arb, ctx, fmpq, fmpq_mat, fmpq_poly

import closedform
from closedform.algebra.branches import Exceptional
from closedform.document.record import DIGITS, record_of, record_text
from closedform.response.parametric.numbers import numbers_of
from closedform.response.parametric.response import ParametricResponse
from closedform.verification import verify
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import Check, VerificationRecord
from tests.parametric.plain_reader import ball_of
from tests.parametric.record_reader import (
    NotCoveredError,
    check_names,
    check_record,
    covering_cases,
    evaluated_texts,
    holds,
    names_at,
    parameter_values,
    solution_at,
)
from tests.response.parametric.solved import MODELS, VALUES, model, response_to

ROOT = Path(__file__).parents[2]
SCHEMA = json.loads((ROOT / "templates" / "record" / "record.schema.json").read_text("utf-8"))
VALIDATOR = jsonschema.Draft202012Validator(SCHEMA)
Record = dict[str, Any]
each_model = pytest.mark.parametrize("name", MODELS)


def recorded(response: ParametricResponse) -> CaseRecords:
    """Records that say of each case which it is: what is proved has tests of its own."""

    def one(item: str) -> VerificationRecord:
        return VerificationRecord((Check(item, "proved", "told"),))

    return CaseRecords(one("whole"), tuple(one(case.condition) for case in response.cases))


@cache
def stored(name: str) -> Record:
    response = response_to(name)
    numbers = numbers_of(response, digits=DIGITS)
    record: Record = json.loads(record_text(response, recorded(response), numbers))
    return record


# --- the schema ----------------------------------------------------------------------------


@each_model
def test_a_record_is_as_the_schema_says(name: str) -> None:
    VALIDATOR.validate(stored(name))


def test_a_record_with_its_proofs_is_as_the_schema_says() -> None:
    response = closedform.respond(model("damped"))
    record = record_of(response, closedform.verify(response))
    VALIDATOR.validate(json.loads(json.dumps(record)))
    assert "values" not in record
    assert all(case["verification"] for case in record["cases"])


SPOILT: list[Callable[[Record], object]] = [
    lambda r: r.pop("cases"),
    lambda r: r.update(cases=[]),
    lambda r: r.update(names={}),
    lambda r: r.pop("not_covered"),
    lambda r: r["parameters"]["m"].update(assume="any"),
    lambda r: r["cases"][0].pop("condition"),
    lambda r: r["cases"][0].update(number=1),
    lambda r: r["cases"][0]["names"]["delta"].update(which=1),
    lambda r: r["cases"][0]["verification"][0].update(outcome="refuted"),
    lambda r: r["values"][0].update(case=-1),
    lambda r: r["values"][0]["names"].update(delta="about 1"),
    lambda r: r.update(layout="closedform record 2"),
]


@pytest.mark.parametrize("spoil", SPOILT)
def test_the_schema_refuses_what_is_no_record(spoil: Callable[[Record], object]) -> None:
    record = json.loads(json.dumps(stored("damped")))
    assert VALIDATOR.is_valid(record)
    spoil(record)
    assert not VALIDATOR.is_valid(record)


def described(schema: dict[str, Any], path: str = "") -> list[str]:
    """Return the keys of records that have neither a description nor one word for a value."""
    found = []
    for key, inner in schema.get("properties", {}).items():
        if not {"description", "const", "enum"} & inner.keys() and "$ref" not in inner:
            found.append(f"{path}/{key}")
    for inner in schema.values():
        for part in inner if isinstance(inner, list) else [inner]:
            if isinstance(part, dict):
                found += described(part, path)
                for name, deeper in part.items():
                    if isinstance(deeper, dict):
                        found += described(deeper, f"{path}/{name}")
    return sorted(set(found))


def test_every_key_of_a_record_with_parameters_is_described() -> None:
    for name in ("parametric", "case"):
        left = [path.rsplit("/", 1)[-1] for path in described(SCHEMA["$defs"][name])]
        assert set(left) <= {"states", "multiplicity"}  # these say it themselves


# --- what the record says is true ------------------------------------------------------------


@each_model
def test_every_case_can_be_evaluated_from_its_entry_alone(name: str) -> None:
    record, outputs = stored(name), MODELS[name].get("outputs", {})
    if name == "restated":
        outputs = {"force": "m*omega_n^2*x"}
    check_names(record)
    assert record["not_covered"] == []
    covered = set()
    for values in VALUES[name]:
        assert check_record(record, values, outputs=outputs) >= 1
        with ctx.workprec(400):
            covered.update(covering_cases(record, parameter_values(values)))
    if name != "even quartic":
        assert covered == set(range(len(record["cases"])))


def rational_rows(name: str) -> list[dict[str, Fraction]]:
    """Return the values of a model that are rational."""
    with ctx.workprec(400):
        rows = [parameter_values(values) for values in VALUES[name]]
    return [
        {key: value for key, value in row.items() if isinstance(value, Fraction)}
        for row in rows
        if all(isinstance(value, Fraction) for value in row.values())
    ]


@each_model
def test_factors_have_the_stated_multiplicities_and_blocks(name: str) -> None:
    """p^m multiply to the characteristic polynomial, and ranks of p(A)^j tell the blocks."""
    record = stored(name)
    n = len(record["states"])
    for values in rational_rows(name):
        matrix = fmpq_mat(
            [list(map(as_fmpq, evaluated_texts(r, values))) for r in record["matrix"]]
        )
        for place in covering_cases(record, values):
            product = fmpq_poly([1])
            for factor in record["cases"][place]["eigenvalues"]:
                p = polynomial(factor["polynomial"], values)
                product *= p ** factor["multiplicity"]
                if name == "apart":  # where a = b, factors share their root
                    continue
                assert sum(factor["blocks"]) == factor["multiplicity"]
                assert max(factor["blocks"]) == factor["index"]
                power, inserted = unit(n), value_at(p, matrix)
                for j in range(1, factor["index"] + 2):
                    power = power * inserted
                    reached = sum(min(size, j) for size in factor["blocks"])
                    assert n - power.rank() == p.degree() * reached
            assert product == polynomial(record["characteristic_polynomial"], values)


def unit(n: int) -> fmpq_mat:
    return fmpq_mat(n, n, [int(i == k) for i in range(n) for k in range(n)])


def value_at(p: fmpq_poly, matrix: fmpq_mat) -> fmpq_mat:
    value = matrix * fmpq(0)
    for c in reversed(p.coeffs()):
        value = value * matrix + unit(matrix.nrows()) * c
    return value


def as_fmpq(value: Any) -> fmpq:
    return fmpq(value.numerator, value.denominator)


def polynomial(texts: list[str], values: dict[str, Fraction]) -> fmpq_poly:
    return fmpq_poly([as_fmpq(c) for c in reversed(evaluated_texts(texts, values))])


@each_model
def test_values_are_those_of_the_case_they_name(name: str) -> None:
    """The record's own formulas give the decimals that stand beside them, to 39 digits."""
    record = stored(name)
    assert len(record["values"]) == len(VALUES[name])
    with ctx.workprec(1200):
        for row in record["values"]:
            values = parameter_values(row["parameters"])
            case = record["cases"][row["case"]]
            assert holds(case["condition"], values)
            known = names_at(case, values)
            assert set(row["names"]) == set(case["names"])
            for quantity, decimal in row["names"].items():
                assert agrees(known[quantity], decimal)
            times = evaluated_texts(row["times"], {})
            assert len(times) == 6
            for k, t in enumerate(times):
                found = solution_at(record, row["case"], values, t)
                for state, value in zip(record["states"], found, strict=True):
                    assert agrees(value, row["solution"][state][k]), (state, k)


def agrees(value: Any, decimal: str) -> bool:
    gap = abs(ball_of(value) - arb(decimal))
    return bool(gap < arb(10) ** -39 * max(abs(arb(decimal)), arb(10) ** -20))


def test_what_the_user_stated_stands_in_the_record() -> None:
    stated = closedform.system(
        [["-k/m"]],
        initial=["x0"],
        title="A cart that coasts",
        time="clock",
        parameters={
            "m": {"assume": "positive", "value": "1/2", "unit": "kg", "meaning": "mass"},
            "k": "positive",
            "x0": "real",
            "tau": "positive",
        },
        substitute={"k": "m/tau"},
        conditions=["k < 3", "x0 != 1/3"],
        outputs={"half": "x1/2"},
    )
    response = closedform.respond(stated)
    assert isinstance(response, ParametricResponse)
    record = record_of(response, recorded(response))
    assert record["title"] == "A cart that coasts"
    assert record["parameters"] == {
        "m": {"assume": "positive", "value": "1/2", "unit": "kg", "meaning": "mass"},
        "x0": {"assume": "real"},
        "tau": {"assume": "positive"},
    }
    assert record["restated"] == {"k": "m/tau"}
    assert record["conditions"] == ["k < 3", "x0 != 1/3"]
    assert record["matrix"] == [["-1/tau"]]
    assert record["characteristic_polynomial"] == ["1", "1/tau"]
    (case,) = record["cases"]
    assert (case["condition"], case["solution"]) == ("true", ["x0*exp(-clock/tau)"])
    assert case["outputs"] == {"half": "x0*exp(-clock/tau)/2"}
    assert [check["item"] for check in case["verification"]] == ["true"]
    assert [check["item"] for check in record["verification"]] == ["whole"]


def test_a_named_root_is_told_by_polynomial_place_and_part() -> None:
    names = stored("compartments")["cases"][0]["names"]
    assert [(entry["which"], entry["part"]) for entry in names.values()] == [
        (3, "real"),
        (2, "real"),
        (1, "real"),
    ]
    assert len({tuple(entry["polynomial"]) for entry in names.values()}) == 1


def test_what_is_not_covered_is_told() -> None:
    """A response without its exceptional branches says where it has no answer."""
    response = response_to("decay")
    generic = response.branches[0]
    left = tuple(
        Exceptional(e.polynomials, "not covered", reason="budget") if e.fate == "branch" else e
        for e in generic.exceptional
    )
    partial = replace(
        response, branches=(replace(generic, exceptional=left),), cases=response.cases[:1]
    )
    record = json.loads(record_text(partial, recorded(partial)))
    VALIDATOR.validate(record)
    assert sorted(record["not_covered"]) == ["k1 == k2", "k1 == k3", "k2 == k3"]
    assert check_record(record, VALUES["decay"][0]) == 1
    with pytest.raises(NotCoveredError):
        check_record(record, VALUES["decay"][1])


def test_a_record_of_the_other_kind_is_refused() -> None:
    cases = response_to("damped")
    numeric = closedform.respond(closedform.system([[0]], initial=[1]))
    with pytest.raises(TypeError):
        record_of(cases, VerificationRecord(()))
    with pytest.raises(TypeError):
        record_of(numeric, recorded(cases))
    assert record_of(numeric, verify(numeric))["solution"] == ["1"]


# --- bytes -----------------------------------------------------------------------------------

PROGRAM = """
from closedform.document.record import record_text
from closedform.response.parametric.numbers import numbers_of
from tests.document.test_parametric_record import recorded
from tests.response.parametric.solved import response_to
for name in ("damped", "depot", "symmetric"):
    response = response_to(name)
    print(record_text(response, recorded(response), numbers_of(response, digits=12)))
"""


def test_hash_order_leaves_no_trace_in_the_record() -> None:
    texts = {
        subprocess.run(
            [sys.executable, "-c", PROGRAM],
            env={**os.environ, "PYTHONHASHSEED": seed, "PYTHONPATH": str(ROOT)},
            check=True,
            capture_output=True,
        ).stdout
        for seed in ("0", "1", "4242")
    }
    assert len(texts) == 1
