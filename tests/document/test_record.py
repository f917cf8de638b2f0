"""The record, checked from its JSON alone: own reader, mpmath, and the schema's words."""

from __future__ import annotations

import json
import os
import re
import subprocess
import sys
from collections.abc import Callable
from fractions import Fraction
from functools import cache
from pathlib import Path
from typing import Any

import jsonschema
import mpmath
import pytest
from hypothesis import given, settings

import closedform
from closedform.document.record import record_of, record_text
from closedform.response.response import Response
from closedform.verification import verify
from tests.known_systems import KnownSystem
from tests.response.systems import KINDS, fresh, response_to
from tests.strategies import known_systems

ROOT = Path(__file__).parents[2]
SCHEMA = json.loads((ROOT / "templates" / "record" / "record.schema.json").read_text("utf-8"))
VALIDATOR = jsonschema.Draft202012Validator(SCHEMA)
STARTERS = sorted((ROOT / "templates" / "starters").glob("*.toml"))
TIMES = ("0", "1/3", "5/4")
mp = mpmath.mp.clone()
mp.dps = 60


def ladder(n: int) -> list[list[int]]:
    """n cells in a row, joined and grounded: a tridiagonal matrix of irreducible factors."""
    return [[-2 * (i == k) + (abs(i - k) == 1) for k in range(n)] for i in range(n)]


def ten_defective() -> list[list[object]]:
    """A pair twice in a chain, a surd pair, a chain of three, a cubic: ten states, mixed."""
    blocks: list[list[list[object]]] = [
        [[0, 1, 1, 0], [-1, 0, 0, 1], [0, 0, 0, 1], [0, 0, -1, 0]],
        [["-1/2", 1, 0], [0, "-1/2", 1], [0, 0, "-1/2"]],
        [[0, 1, 0], [0, 0, 1], [-1, -1, 0]],
    ]
    n = sum(map(len, blocks))
    rows: list[list[object]] = [[0] * n for _ in range(n)]
    start = 0
    for block in blocks:
        for i, row in enumerate(block):
            rows[start + i][start : start + len(row)] = row
        start += len(block)
    rows[0][n - 1] = 1  # the blocks feed one another
    rows[4][1] = -1
    return rows


LARGE: dict[str, Callable[[], list[list[Any]]]] = {
    "a ladder of ten": lambda: ladder(10),
    "ten with chains": ten_defective,
    "nine with surds": lambda: [
        [("-sqrt(2)" if i == k else int(i == k + 1)) for k in range(9)] for i in range(9)
    ],
}


@cache
def large(name: str) -> Response:
    rows = LARGE[name]()
    n = len(rows)
    return closedform.respond(
        closedform.system(rows, initial=range_of(n), outputs={"y": f"x1 - 3*x{n}"}, name="large")
    )


def range_of(n: int) -> list[Fraction]:
    return [Fraction(i + 1, 3) for i in range(n)]


CASES: dict[str, Callable[[], Response]] = {
    **{kind: (lambda kind=kind: response_to(kind)) for kind in KINDS},
    **{name: (lambda name=name: large(name)) for name in LARGE},
}
each_case = pytest.mark.parametrize("case", CASES)


@cache
def stored(case: str) -> dict[str, Any]:
    response = CASES[case]()
    return json.loads(record_text(response, verify(response)))


# --- a reader of formulas that shares nothing with the package's -------------------------------


class Reader:
    """Recursive descent over + - * / ^, brackets, whole numbers, functions and names."""

    def __init__(self, text: str, names: dict[str, Any]) -> None:
        self.tokens = re.findall(r"\s*([A-Za-z_]\w*|\d+|[-+*/^()])", text)
        assert "".join(self.tokens) == text.replace(" ", ""), text
        self.names, self.place = names, 0

    def value(self) -> Any:
        found = self.sum()
        assert self.place == len(self.tokens), self.tokens
        return found

    def take(self, *wanted: str) -> str | None:
        if self.place < len(self.tokens) and self.tokens[self.place] in wanted:
            self.place += 1
            return self.tokens[self.place - 1]
        return None

    def sum(self) -> Any:
        total = -self.product() if self.take("-") else self.product()
        while sign := self.take("+", "-"):
            total = total + self.product() if sign == "+" else total - self.product()
        return total

    def product(self) -> Any:
        total = self.power()
        while sign := self.take("*", "/"):
            # The schema promises that no fraction is followed by a bare factor.
            total = total * self.power() if sign == "*" else self.over(total)
        return total

    def over(self, above: Any) -> Any:
        below = self.power()
        assert self.place == len(self.tokens) or self.tokens[self.place] not in ("*", "/")
        return above / below

    def power(self) -> Any:
        base = self.atom()
        return base ** self.atom() if self.take("^") else base

    def atom(self) -> Any:
        if self.take("("):
            inside = self.sum()
            assert self.take(")")
            return inside
        token = self.tokens[self.place]
        self.place += 1
        if token.isdigit():
            return mp.mpf(int(token))
        if token in FUNCTIONS and self.take("("):
            argument = self.sum()
            assert self.take(")")
            return FUNCTIONS[token](argument)
        return self.names[token]


FUNCTIONS = {name: getattr(mp, name) for name in ("exp", "sin", "cos", "sinh", "cosh", "sqrt")}


def at(text: str, names: dict[str, Any] | None = None) -> Any:
    return Reader(text, names or {}).value()


def matrix_of(rows: list[list[str]], names: dict[str, Any] | None = None) -> Any:
    return mp.matrix([[at(entry, names) for entry in row] for row in rows])


def names_at(record: dict[str, Any], t: Any) -> dict[str, Any]:
    found = {name: mp.mpf(entry["value"]) for name, entry in record["names"].items()}
    return {**found, record["time"]: t}


def exponential(record: dict[str, Any], t: Any) -> Any:
    return mp.expm(matrix_of(record["matrix"]) * t, method="taylor")


def assert_close(found: Any, expected: Any, digits: int = 33) -> None:
    """Names are given to 40 digits, so that a sum of some of them has fewer."""
    assert (found.rows, found.cols) == (expected.rows, expected.cols)
    size = 1 + max(abs(x) for x in expected)
    for one, other in zip(found, expected, strict=True):
        assert abs(one - other) < size * mp.mpf(10) ** -digits


def test_the_reader_reads_as_the_schema_says() -> None:
    t = mp.mpf(2)
    for text, expected in (
        ("-t^2/2", -2),
        ("2 - 3 - 4", -5),
        ("(1/2)*t", 1),
        ("3*t/(2*t)", mp.mpf(3) / 2),
        ("-(t - 1)*t", -2),
        ("sqrt(4)*exp(0*t)", 2),
    ):
        assert at(text, {"t": t}) == expected
    with pytest.raises(AssertionError):
        at("1/2*t", {"t": t})


# --- the schema ----------------------------------------------------------------------------


def test_the_schema_is_a_schema() -> None:
    jsonschema.Draft202012Validator.check_schema(SCHEMA)


@each_case
def test_a_record_is_as_the_schema_says(case: str) -> None:
    VALIDATOR.validate(stored(case))


@pytest.mark.parametrize("path", STARTERS, ids=[path.stem for path in STARTERS])
def test_the_record_of_a_starter_is_as_the_schema_says(path: Path) -> None:
    response = closedform.respond(closedform.load(path))
    record = record_of(response, closedform.verify(response))
    VALIDATOR.validate(json.loads(json.dumps(record)))


@pytest.mark.parametrize(
    "spoil",
    [
        lambda r: r.pop("transition"),
        lambda r: r.update(spectral=[]),
        lambda r: r.update(extra=1),
        lambda r: r["verification"][0].update(outcome="refuted"),
        lambda r: r.update(layout="closedform record 2"),
        lambda r: r["names"]["lambda_1"].update(value="1.5 or so"),
        lambda r: r["names"]["C1"]["definition"].pop("weight"),
        lambda r: r.update(states=[]),
    ],
)
def test_the_schema_refuses_what_is_no_record(spoil: Callable[[Any], object]) -> None:
    record = json.loads(json.dumps(stored("named cubic")))
    spoil(record)
    assert not VALIDATOR.is_valid(record)


# --- what the record says is true ------------------------------------------------------------


@each_case
@pytest.mark.parametrize("time", TIMES)
def test_the_exponential_is_that_of_the_matrix(case: str, time: str) -> None:
    record, t = stored(case), at(time)
    if "transition" in record:
        found = matrix_of(record["transition"], names_at(record, t))
    else:
        found = spectral_sum(record, t)
    assert_close(found, exponential(record, t))


def spectral_sum(record: dict[str, Any], t: Any) -> Any:
    """As the schema words it: exp(z t) t^j/j! c(z)/d(z), over items, roots and j."""
    n = len(record["states"])
    total = mp.matrix(n, n)
    for item in record["spectral"]:
        divisor = [at(c) for c in item["divisor"]]
        for z in roots_of(item["polynomial"]):
            for j, entries in enumerate(item["powers"]):
                weight = mp.exp(z * t) * t**j / mp.factorial(j) / mp.polyval(divisor, z)
                for i in range(n):
                    for k in range(n):
                        total[i, k] += weight * mp.polyval([at(c) for c in entries[i][k]], z)
    assert all(abs(mp.im(x)) < mp.mpf(10) ** -40 for x in total)
    return total.apply(mp.re)


@each_case
@pytest.mark.parametrize("time", TIMES)
def test_the_solution_and_the_outputs_are_those_of_the_matrix(case: str, time: str) -> None:
    record, t = stored(case), at(time)
    response = CASES[case]()
    names = names_at(record, t)
    start = mp.matrix([[at(x)] for x in record["initial"]])
    state = exponential(record, t) * start
    assert_close(mp.matrix([[at(f, names)] for f in record["solution"]]), state)
    values = dict(zip(record["states"], state, strict=True))
    assert list(record["outputs"]) == [o.name for o in response.model.outputs]
    stated = {"first": "x1", "all": " + ".join(f"{k}*x{k}" for k in range(1, len(state) + 1))}
    stated["y"] = f"x1 - 3*x{len(state)}"
    for name, formula in record["outputs"].items():
        found, expected = mp.matrix([at(formula, names)]), mp.matrix([at(stated[name], values)])
        assert_close(found, expected)


@each_case
def test_the_polynomials_are_those_of_the_matrix(case: str) -> None:
    """At some points: det(z - A), the product of the factors, and their multiplicities."""
    record = stored(case)
    a = matrix_of(record["matrix"])
    n = a.rows
    characteristic = [at(c) for c in record["characteristic_polynomial"]]
    assert len(characteristic) == n + 1
    assert sum((len(f["polynomial"]) - 1) * f["multiplicity"] for f in record["eigenvalues"]) == n
    for z in (mp.mpc(1, 2), mp.mpf(-3), mp.mpf("0.5")):
        value = mp.polyval(characteristic, z)
        product = mp.mpf(1)
        for factor in record["eigenvalues"]:
            p = [at(c) for c in factor["polynomial"]]
            assert p[0] == 1
            product *= mp.polyval(p, z) ** factor["multiplicity"]
            assert factor["multiplicity"] == sum(factor["blocks"])
            assert factor["index"] == max(factor["blocks"])
        assert abs(value - mp.det(mp.eye(n) * z - a)) < abs(value) * mp.mpf(10) ** -40
        assert abs(value - product) < abs(value) * mp.mpf(10) ** -40


def roots_of(coefficients: list[str]) -> list[Any]:
    """The roots in the schema's order, by mpmath at 60 digits."""
    numbers = [at(c) for c in coefficients]
    found = mp.polyroots(numbers, maxsteps=500, extraprec=400)
    # Real parts that agree to 35 digits agree: then the imaginary part decides.
    return sorted(found, key=lambda z: (mp.nint(mp.re(z) * mp.mpf(10) ** 35), mp.im(z)))


@each_case
def test_names_have_the_values_of_their_definitions(case: str) -> None:
    for name, entry in stored(case)["names"].items():
        definition, value = entry["definition"], mp.mpf(entry["value"])
        if "formula" in definition:
            expected = at(definition["formula"])
        else:
            z = roots_of(definition["polynomial"])[definition["which"] - 1]
            weight = mp.mpf(1)
            if "numerator" in definition:
                p = [at(c) for c in definition["polynomial"]]
                slope = [c * (len(p) - 1 - k) for k, c in enumerate(p[:-1])]
                above = mp.polyval([at(c) for c in definition["numerator"]], z)
                z = above / mp.polyval(slope, z)
                weight = at(definition["weight"])
            expected = weight * (mp.re(z) if definition["part"] == "real" else mp.im(z))
        assert abs(value - expected) <= abs(expected) * mp.mpf(10) ** -39, name
        assert value != 0, name


@each_case
def test_every_name_in_a_formula_is_defined(case: str) -> None:
    record = stored(case)
    formulas = [f for row in record.get("transition", []) for f in row]
    formulas += [*record["solution"], *record["outputs"].values()]
    words = {w for f in formulas for w in re.findall(r"[A-Za-z_]\w*", f)} - set(FUNCTIONS)
    assert words <= {*record["names"], record["time"]}
    assert not {*record["states"], record["time"]} & set(record["names"])


def test_all_three_kinds_of_names_occur() -> None:
    kinds = {
        frozenset(entry["definition"]) for case in CASES for entry in stored(case)["names"].values()
    }
    assert kinds == {
        frozenset({"formula"}),
        frozenset({"polynomial", "which", "part"}),
        frozenset({"polynomial", "which", "part", "numerator", "weight"}),
    }


@given(known_systems(largest=4))
@settings(max_examples=20)
def test_records_of_random_systems_are_true(system: KnownSystem) -> None:
    response = closedform.respond(closedform.system(system.matrix, initial=range_of(system.order)))
    record = json.loads(record_text(response, verify(response)))
    VALIDATOR.validate(record)
    t = at("2/5")
    names = names_at(record, t)
    expected = exponential(record, t)
    assert_close(matrix_of(record["transition"], names), expected)
    start = mp.matrix([[at(x)] for x in record["initial"]])
    assert_close(mp.matrix([[at(f, names)] for f in record["solution"]]), expected * start)


# --- bytes -----------------------------------------------------------------------------------


@pytest.mark.parametrize("kind", KINDS)
def test_the_same_response_gives_the_same_bytes(kind: str) -> None:
    one, two = fresh(kind), fresh(kind)
    assert record_text(one, verify(one)) == record_text(two, verify(two))
    text = record_text(one, verify(one))
    assert text.endswith("}\n")
    assert "\r" not in text


PROGRAM = """
import closedform
from closedform.document.record import record_text
model = closedform.system(
    [[0, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, 1], ["-sqrt(2)", 1, "sqrt(3)", "-1"]],
    initial=[1, 2, 3, "sqrt(6)"],
    outputs={"y": "x1 + sqrt(2)*x4"},
)
response = closedform.respond(model)
print(record_text(response, closedform.verify(response)))
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


def test_a_write_up_writes_this_record(tmp_path: Path) -> None:
    response = response_to("mixed")
    written = closedform.write_up(response.model, into=tmp_path)
    path = tmp_path / "mixed.record.json"
    assert path in written.files
    assert path.read_text("utf-8") == record_text(response, written.verification)
    *checks, last = written.verification.checks
    assert tuple(checks) == verify(response).checks
    assert (last.item, last.outcome) == ("statements of the derivation", "enclosed")
    closedform.write_up(response.model, into=tmp_path / "bare", record=False)
    assert [p.suffix for p in (tmp_path / "bare").iterdir()] == [".tex"]
