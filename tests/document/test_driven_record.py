"""The record of a driven model, checked from its JSON alone."""

from __future__ import annotations

import json
from collections.abc import Callable, Mapping
from fractions import Fraction
from functools import cache
from typing import Any

import pytest

from closedform.algebra.surds import SurdSum
from closedform.document.record import DIGITS, record_of, record_text
from closedform.model.building import model_from
from closedform.model.parametric import ValueSet
from closedform.response.driven.numbers import driven_numbers_at
from closedform.response.driven.period_formulas import MOST_PERIODS_WRITTEN
from closedform.response.driven.response import DrivenResponse, respond_driven
from closedform.response.parametric.response import ParametricResponse
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import Check, VerificationRecord
from tests.document.test_parametric_record import SCHEMA, VALIDATOR, described
from tests.parametric.driven_record_reader import check_driven_record, check_driven_texts
from tests.parametric.record_reader import DisagreementError
from tests.response.driven.stated import blow, numeric, parametric, sine, steady
from tests.response.driven.test_driven_response import MODELS
from tests.response.driven.test_numbers import CASES, mount, pump
from tests.response.driven.test_repeated_values import repeated

Record = dict[str, Any]

PARAMETRIC = {
    "pump": pump(None),
    "mount": mount(None),
    "blow with parameters": parametric(
        [["-a"]],
        [[1, 1]],
        lambda e: [blow(e, "D", "T"), steady(e, "q")],
        initial=["x0"],
        parameters={"a": "positive", "D": "real", "T": "positive", "q": "real", "x0": "real"},
        timeline=["T"],
    ),
}
VALUES: dict[str, list[dict[str, str | int]]] = {
    "pump": [given for make, given in CASES if make is pump],
    "mount": [given for make, given in CASES if make is mount],
    "throw": [{"g": 10, "b": "1/2", "L": 3, "h": 2}],
    "blow with parameters": [{"a": "2/3", "D": 5, "T": "3/2", "q": -1, "x0": "1/2"}],
}


def proofs(response: DrivenResponse) -> VerificationRecord | CaseRecords:
    """A record that says nothing but that something was proved; the proofs have own tests."""
    one = VerificationRecord((Check("a", "proved", "told"),))
    if isinstance(response.stacked, ParametricResponse):
        return CaseRecords(one, tuple(one for _ in response.solutions))
    return one


ROD = {
    "title": "A rod between two given ends",
    "equations": ["T'' = 4*T - q"],
    "at_points": ["T(0) = 1", "T(2) = 0"],
    "inputs": {"q": "3*t"},
}
BEAM = {
    "title": "A beam on soft ground",
    "equations": ["y'''' + 5*y'' + 4*y = q"],
    "at_points": ["y(0) = 0", "y''(0) = 0", "y(1) = 0", "y''(1) = 1/7"],
    "inputs": {"q": "cos(3*t)"},
}
THROW = {
    "title": "A throw that has to hit",
    "equations": ["x' = v - x/10", "v' = -g + b*delta(t - 1)"],
    "states": ["x", "v"],
    "at_points": ["x(0) = 0", "x(L) = h"],
    "parameters": {"g": "positive", "b": "real", "L": "positive", "h": "real"},
    "conditions": ["L > 1"],
}
POINTS = {
    name: model_from(stated, name="points")
    for name, stated in {"rod": ROD, "beam": BEAM, "throw": THROW}.items()
}
REPEATED = {
    "for ever": repeated(None),
    "three times": repeated(3),
    "often": repeated(MOST_PERIODS_WRITTEN + 1),
    "two ways": model_from(
        {
            "title": "Doses of one period, some and for ever",
            "equations": ["x' = d - x/2", "y' = x - y + r + s(t - 1)"],
            "initial": {"x": 1, "y": 0},
            "inputs": {
                "d": {"is": "2*delta(t)", "period": "3", "count": 2},
                "r": {"pieces": [{"from": "1", "to": "2", "is": "t"}], "period": "3", "count": 4},
                "s": "exp(-t)",
            },
            "outputs": {"z": "x + r"},
        },
        name="two",
    ),
}


@cache
def stored(name: str) -> Record:
    response = respond_driven((MODELS | PARAMETRIC | REPEATED | POINTS)[name])
    numbers = [
        driven_numbers_at(
            response,
            ValueSet("", tuple((k, SurdSum.rational(Fraction(v))) for k, v in given.items())),
            digits=DIGITS,
        )
        for given in VALUES.get(name, ())
    ]
    record: Record = json.loads(record_text(response, proofs(response), numbers))
    return record


@pytest.mark.parametrize("name", [*MODELS, *PARAMETRIC, *REPEATED, *POINTS])
def test_a_record_is_as_the_schema_says_and_its_formulas_read_back(name: str) -> None:
    VALIDATOR.validate(stored(name))
    check_driven_texts(stored(name))


@pytest.mark.parametrize("name", [*MODELS, *REPEATED, "rod", "beam"])
def test_the_solution_in_the_record_is_the_solution_of_what_is_stated_there(name: str) -> None:
    assert check_driven_record(stored(name)) == 1


@pytest.mark.parametrize(
    ("name", "values"), [(name, values) for name, rows in VALUES.items() for values in rows]
)
def test_each_case_solves_what_is_stated_at_its_values(
    name: str, values: Mapping[str, str | int]
) -> None:
    given = {key: Fraction(value) for key, value in values.items()}
    assert check_driven_record(stored(name), given) >= 1


SPOILT: list[tuple[str, Callable[[Record], object]]] = [
    ("resonance", lambda r: r["solution"].__setitem__(0, "t*sin(3*t) + t/1000")),
    ("resonance", lambda r: r.update(initial=["0", "1"])),
    ("resonance", lambda r: r["inputs"]["u1"].update(function="6*sin(3*t)")),
    ("blow", lambda r: r["inputs"]["u2"]["impulses"][0].update(amount="2")),
    ("blow", lambda r: r["pieces"][1]["solution"].__setitem__(0, "0")),
    ("blow", lambda r: r["solution"].__setitem__(1, r["pieces"][0]["solution"][1])),
    ("blow", lambda r: r["free"]["solution"].__setitem__(0, "0")),
    ("blow", lambda r: r["steady_state"]["solution"].__setitem__(0, "1/5")),
    ("integrator", lambda r: r["instants"].pop()),
    ("rod", lambda r: r["at_points"][1].update(value="1")),
    (
        "later start",
        lambda r: r["steady_state"]["sinusoids"]["x1"]["terms"][0].update(amplitude="1"),
    ),
]


@pytest.mark.parametrize(("name", "spoil"), SPOILT)
def test_the_reader_finds_what_is_wrong(name: str, spoil: Callable[[Record], object]) -> None:
    record = json.loads(json.dumps(stored(name)))
    spoil(record)
    with pytest.raises(DisagreementError):
        check_driven_record(record)


def stretch(record: Record, key: str, place: int, text: str) -> None:
    """Put another formula into what inputs that repeat add."""
    record["periodic"][0][key][place]["solution"][0] = text


SPOILT_PERIODS: list[tuple[str, Callable[[Record], object]]] = [
    ("for ever", lambda r: stretch(r, "stretches", 0, "0")),
    ("for ever", lambda r: stretch(r, "stretches", 2, "exp(-tau)")),
    ("for ever", lambda r: stretch(r, "steady", 1, "0")),
    ("for ever", lambda r: r["inputs"]["u1"]["impulses"][0].update(amount="1")),
    ("three times", lambda r: r["periodic"][0]["after"]["solution"].__setitem__(0, "0")),
    ("three times", lambda r: r["periodic"][0].update(period="4")),
    ("three times", lambda r: r["periodic"].clear()),
    ("three times", lambda r: r["periodic"][0].update(count=4)),
    ("three times", lambda r: r["solution"].__setitem__(0, r["base"]["solution"][0])),
    ("two ways", lambda r: r["outputs"].update(z="0")),
    ("two ways", lambda r: r["periodic"][0].update(inputs=["d", "r"])),
    ("for ever", lambda r: r["base"]["solution"].__setitem__(0, "0")),
]


@pytest.mark.parametrize(("name", "spoil"), SPOILT_PERIODS)
def test_the_reader_finds_what_is_wrong_in_a_period(
    name: str, spoil: Callable[[Record], object]
) -> None:
    record = json.loads(json.dumps(stored(name)))
    spoil(record)
    with pytest.raises(DisagreementError):
        check_driven_record(record)


def test_an_input_that_repeats_is_told_by_one_period() -> None:
    (entry,) = stored("three times")["inputs"].values()
    assert entry["function"] == "2*(step(t) - step(t - 1))*sin(t)"
    assert entry["impulses"] == [{"amount": "1/2", "at": "2"}]
    assert entry["repeat"] == {"period": "3", "start": "0", "count": 3}


def test_what_is_no_whole_solution_is_not_called_one() -> None:
    for name, is_whole in (("for ever", False), ("often", False), ("three times", True)):
        record = stored(name)
        assert ("solution" in record) is is_whole
        assert not {"pieces", "free", "forced", "steady_state", "transient"} & set(record)
        assert set(record["base"]) >= {"solution", "free", "forced"}


REFUSED: list[tuple[str, Callable[[Record], object]]] = [
    ("blow", lambda r: r.pop("inputs")),
    ("blow", lambda r: r.pop("initial")),
    ("blow", lambda r: r.update(at_points=["x1(0) = 0"])),
    ("blow", lambda r: r.update(stability="perhaps")),
    ("blow", lambda r: r["pieces"][0].pop("to")),
    ("blow", lambda r: r["stacked"].pop("transition")),
    ("blow", lambda r: r["inputs"]["u2"].update(colour="red")),
    ("pump", lambda r: r["cases"][0].pop("free")),
    ("pump", lambda r: r["values"][0].update(case=-1)),
    ("pump", lambda r: r.update(names={})),
    ("for ever", lambda r: r.update(solution=r["base"]["solution"])),
    ("for ever", lambda r: r.update(forced=r["base"]["forced"])),
    ("for ever", lambda r: r.pop("base")),
    ("three times", lambda r: r.pop("outputs")),
    ("blow", lambda r: r.update(base={})),
]


@pytest.mark.parametrize(("name", "spoil"), REFUSED)
def test_the_schema_refuses_what_is_no_record(name: str, spoil: Callable[[Record], object]) -> None:
    record = json.loads(json.dumps(stored(name)))
    spoil(record)
    assert not VALIDATOR.is_valid(record)


def test_every_key_of_a_record_of_a_driven_model_is_described() -> None:
    for name in (
        "driven_numeric",
        "driven_parametric",
        "driven_case",
        "input",
        "piece",
        "periodic",
        "base",
    ):
        left = [path.rsplit("/", 1)[-1] for path in described(SCHEMA["$defs"][name])]
        assert set(left) <= {"names", "verification", "eigenvalues", "spectral"}, (name, left)


def test_an_input_is_told_with_its_steps() -> None:
    functions = {
        name: entry["function"]
        for name in ("tank and pump", "integrator", "sine cut off", "blow")
        for entry in stored(name)["inputs"].values()
    }
    assert functions["tank and pump"] == "2 - 2*step(t - 10)"
    assert functions["integrator"] == "step(t - 1) - step(t - 3)"
    assert functions["blow"] == "0"


def test_resonance_is_told_with_the_power_of_the_time() -> None:
    assert stored("twofold resonance")["resonance"] == [
        {"input": "u1", "rate": "0", "frequency": "2", "multiplicity": 2, "power": 2}
    ]
    told = [len(case["resonance"]) for case in stored("mount")["cases"]]
    assert told == [0, 0, 0, 1]


def test_a_steady_oscillation_is_told_by_amplitude_and_phase() -> None:
    told = stored("later start")["steady_state"]["sinusoids"]
    (term,) = told["x1"]["terms"]
    assert (told["x1"]["mean"], term["frequency"], term["amplitude"]) == ("0", "1", "sqrt(2)/2")
    assert term["against"]["input"] == "u1"


def test_values_are_told_for_states_by_name() -> None:
    record = stored("pump")
    row = record["values"][0]
    assert (row["case"], row["times"][0]) == (0, "0")
    assert row["solution"]["x1"][0] == "1"
    assert len(row["solution"]["x1"]) == len(row["times"])
    assert row["others"] == {}


def test_a_record_of_the_other_kind_is_refused() -> None:
    cases, numbers = respond_driven(pump(None)), respond_driven(MODELS["blow"])
    with pytest.raises(TypeError):
        record_of(cases, proofs(numbers))
    with pytest.raises(TypeError):
        record_of(numbers, proofs(cases))


def test_the_stacked_model_beyond_eight_states_is_told_by_its_spectral_form() -> None:
    n = 8
    matrix = [[-k if i == k else int(i == k + 1) for i in range(1, n + 1)] for k in range(1, n + 1)]
    model = numeric(
        matrix, [[0]] * (n - 1) + [[1]], lambda e: [sine(e, 1, 2)], initial=[1] + [0] * (n - 1)
    )
    response = respond_driven(model)
    record = json.loads(record_text(response, proofs(response)))
    VALIDATOR.validate(record)
    assert "spectral" in record["stacked"]
    check_driven_record(record)
