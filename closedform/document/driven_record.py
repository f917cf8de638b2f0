"""The record of a driven model: its equations, its inputs and its solution as plain data.

The layout is that of templates/record/record.schema.json, where every key is described.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Any

from closedform.algebra.enclosure import certified_decimal
from closedform.algebra.field import FieldMatrix, Scalar
from closedform.derivation.driven.signals import waves_formula
from closedform.derivation.driven.writing import Writing
from closedform.document.driven_parts import input_names, parts_of
from closedform.document.numeric_record import numeric_record
from closedform.document.parametric_record import checks_as_data, parametric_record
from closedform.model.driven.model import DrivenModel, Input, PointCondition
from closedform.model.driven.signal import Burst, Impulse, Repeat
from closedform.notation.expression import (
    ONE,
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Number,
    product,
)
from closedform.notation.plain import plain
from closedform.notation.terms import negated, opened, sum_of, surd_formula
from closedform.response.driven.composition import scaled, shifted
from closedform.response.driven.numbers import DrivenNumbersAt
from closedform.response.driven.response import DrivenResponse, DrivenSolution
from closedform.response.driven.sampling import point_balls
from closedform.response.parametric.response import ParametricResponse
from closedform.response.response import Response
from closedform.verification.parametric.record import CaseRecords
from closedform.verification.record import VerificationRecord

__all__ = ["driven_record"]


def driven_record(
    response: DrivenResponse,
    record: VerificationRecord | CaseRecords,
    numbers: Sequence[DrivenNumbersAt],
    digits: int,
) -> dict[str, Any]:
    """Return all of the record but its layout.

    `record` is one of cases for a model with parameters, to which `numbers` belong; `digits`
    are those of the named constants.
    Raises TypeError for a record of the other kind.
    """
    match response.stacked, record:
        case Response() as stacked, VerificationRecord():
            below = numeric_record(stacked, record, digits)
            written = _head(response.model, below)
            (solution,) = response.solutions
            written |= _solved(solution)
            written["names"] |= {
                name: {
                    "definition": {"formula": formula},
                    "value": _decimal(solution, name, digits),
                }
                for name, formula in _constants(solution).items()
            }
            written["stacked"] |= _taken(below, "eigenvalues", "transition", "spectral")
            written["verification"] = checks_as_data(record)
            return written
        case ParametricResponse() as stacked, CaseRecords():
            below = parametric_record(stacked, record)
            written = _head(response.model, below)
            written["cases"] = [
                _case(solution, case)
                for solution, case in zip(response.solutions, below["cases"], strict=True)
            ]
            written["not_covered"] = below["not_covered"]
            if numbers:
                written["values"] = [_numbers(response.model, row) for row in numbers]
            written["verification"] = checks_as_data(record.whole)
            return written
    raise TypeError(f"{type(record).__name__} is no record of {response!r}")


def _head(model: DrivenModel, below: dict[str, Any]) -> dict[str, Any]:
    """What is known before anything is solved; `below` is the record of the stacked model."""
    writing, reduction = Writing(model), model.reduction
    written: dict[str, Any] = {
        "title": model.title,
        "time": model.time,
        "form": model.form,
        "equations": [balance.text for balance in model.balances],
        "unknowns": list(model.unknowns),
        "states": list(model.names),
        "matrix": _matrix(writing, reduction.matrix),
    }
    if reduction.input_matrix is not None:
        written["input_matrix"] = _matrix(writing, reduction.input_matrix)
    written["inputs"] = {
        name.text: _input(writing, given)
        for name, given in zip(input_names(model), model.inputs, strict=True)
    }
    written["made_of"] = _made_of(writing)
    written["start"] = plain(writing.element(model.start))
    written["instants"] = _texts(writing, model.timeline)
    if model.initial is not None:
        written["initial"] = _texts(writing, model.initial)
    if model.conditions:
        written["at_points"] = [_condition(writing, own) for own in model.conditions]
    written |= _taken(below, "parameters", "restated", "conditions", "names")
    written["stacked"] = _taken(below, "states", "matrix", "initial", "characteristic_polynomial")
    return written


def _case(solution: DrivenSolution, below: dict[str, Any]) -> dict[str, Any]:
    return {
        "condition": below["condition"],
        "names": {
            **below["names"],
            **{name: {"definition": text} for name, text in _constants(solution).items()},
        },
        **_solved(solution),
        "stacked": _taken(below, "eigenvalues", "transition"),
        "verification": below["verification"],
    }


def _solved(solution: DrivenSolution) -> dict[str, Any]:
    """The solution of one case with its parts."""
    writing, stability = Writing(solution.model), solution.stability
    eigenvalues = [
        {
            "polynomial": _texts(writing, test.polynomial),
            "multiplicity": test.multiplicity,
            "manner": test.manner,
        }
        for test in stability.factors
    ]
    return {
        "characteristic_polynomial": _texts(writing, stability.characteristic),
        "eigenvalues": eigenvalues,
        "stability": stability.verdict,
        **parts_of(solution),
    }


def _constants(solution: DrivenSolution) -> dict[str, str]:
    """The constants that conditions at points determine and that formulas name."""
    points = () if solution.points is None else solution.points.constants
    return {c.name: plain(c.formula) for c in points if not c.put_in}


def _decimal(solution: DrivenSolution, name: str, digits: int) -> str:
    return certified_decimal(lambda: point_balls(solution)[name], digits)


def _condition(writing: Writing, own: PointCondition) -> dict[str, Any]:
    at, value = _texts(writing, (own.at, own.value))
    return {
        "written": own.text,
        "at": at,
        "of_states": _texts(writing, own.of_states),
        "value": value,
    }


def _made_of(writing: Writing) -> dict[str, str]:
    """What eliminated unknowns and outputs are of the states and inputs."""
    model, reduction = writing.model, writing.model.reduction
    found: dict[str, str] = {}
    from_states = reduction.eliminated_from_states
    from_inputs, names = reduction.eliminated_from_inputs, input_names(model)
    if from_states is not None:
        empty: list[list[Scalar]] = [[] for _ in reduction.eliminated]
        feeds = empty if from_inputs is None else from_inputs.to_list()
        for name, states, fed in zip(
            reduction.eliminated, from_states.to_list(), feeds, strict=True
        ):
            fed_by = names[: len(fed)]
            found[name] = plain(writing.combination((states, writing.states), (fed, fed_by)))
    for output in model.outputs:
        own = (output.of_states, writing.states), (output.of_inputs, names)
        found[output.name] = plain(writing.combination(*own))
    return found


def _input(writing: Writing, given: Input) -> dict[str, Any]:
    """An input: how it is written, and what it is as a function of the time."""
    told: dict[str, Any] = {"written": plain(given.formula)}
    if given.definition is not None:
        told["definition"] = plain(given.definition)
    terms = [_burst(writing, burst) for burst in given.signal.bursts]
    standing = [term for term in terms if term != ZERO]
    told["function"] = plain(opened(sum_of(standing)) if standing else ZERO)
    told["impulses"] = [_impulse(writing, impulse) for impulse in given.signal.impulses]
    if given.signal.repeat is not None:
        told["repeat"] = _repeat(writing, given.signal.repeat)
    more = {"unit": given.unit, "meaning": given.meaning}
    return told | {key: text for key, text in more.items() if text}


def _burst(writing: Writing, burst: Burst) -> Expression:
    """The waves of a burst, with a unit step for each end that it has."""
    waves = waves_formula(writing, burst.waves)
    steps = [
        None
        if at is None
        else Call("step", shifted(writing.t, writing.model.time, writing.element(at)))
        for at in (burst.start, burst.end)
    ]
    match steps:
        case [None, None]:
            return waves
        case [None, Call() as off]:
            return sum_of([waves, negated(_switched(off, waves))])
        case [Call() as on, None]:
            return _switched(on, waves)
        case [Call() as on, Call() as off]:
            return _switched(sum_of([on, negated(off)]), waves)
    raise TypeError("a burst has two ends")


def _switched(steps: Expression, waves: Expression) -> Expression:
    """Steps times waves, a single number or name first."""
    match waves:
        case Number() | Name():
            return product((waves, steps)) if waves != ONE else steps
        case Negation(Number() | Name() as size):
            return negated(_switched(steps, size))
    return scaled(steps, waves)


def _impulse(writing: Writing, impulse: Impulse) -> dict[str, str]:
    amount, at = _texts(writing, (impulse.amount, impulse.at))
    return {"amount": amount, "at": at}


def _repeat(writing: Writing, repeat: Repeat) -> dict[str, Any]:
    period, start = _texts(writing, (repeat.period, repeat.start))
    told: dict[str, Any] = {"period": period, "start": start}
    if repeat.count is not None:
        told["count"] = repeat.count
    return told


def _numbers(model: DrivenModel, row: DrivenNumbersAt) -> dict[str, Any]:
    n, columns = len(model.names), model.rows
    decimals = {name: [held[k] for held in row.rows] for k, name in enumerate(columns)}
    return {
        "label": row.label,
        "parameters": {name: plain(surd_formula(value)) for name, value in row.values},
        "case": row.case,
        "names": {quantity.name: quantity.decimal for quantity in row.quantities},
        "times": [plain(surd_formula(time)) for time in row.times],
        "solution": _taken(decimals, *columns[:n]),
        "others": _taken(decimals, *columns[n:]),
    }


def _matrix(writing: Writing, matrix: FieldMatrix) -> list[list[str]]:
    return [_texts(writing, row) for row in matrix.to_list()]


def _texts(writing: Writing, elements: Iterable[Scalar]) -> list[str]:
    return [plain(writing.element(element)) for element in elements]


def _taken(source: dict[str, Any], *keys: str) -> dict[str, Any]:
    return {key: source[key] for key in keys if key in source}
