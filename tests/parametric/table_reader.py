"""The numbers that a record of a model with parameters gives, held against ball arithmetic."""

from __future__ import annotations

from collections.abc import Mapping
from decimal import Decimal
from fractions import Fraction
from typing import Any

from flint import arb, ctx

from tests.parametric.plain_reader import ball_of
from tests.parametric.record_reader import (
    DisagreementError,
    covering_cases,
    evaluated_texts,
    names_at,
    parameter_values,
    transition_by_balls,
)

__all__ = ["check_table"]

BITS = 600


def check_table(record: Mapping[str, Any], outputs: Mapping[str, str] | None = None) -> int:
    """Check every decimal under `values` to half a unit of its last place; return their number.

    `outputs` are the outputs as the model states them, in states and parameters.
    """
    with ctx.workprec(BITS):
        return sum(_check_row(record, row, outputs or {}) for row in record.get("values", ()))


def _check_row(
    record: Mapping[str, Any], row: Mapping[str, Any], outputs: Mapping[str, str]
) -> int:
    values = parameter_values(row["parameters"])
    where = row["label"] or "the model's own values"
    if set(values) != set(record["parameters"]):
        raise DisagreementError(f"{where}: not every parameter has a value")
    if row["case"] not in covering_cases(record, values):
        raise DisagreementError(f"{where}: case {row['case']} does not hold")
    count = 0
    names = names_at(record["cases"][row["case"]], values)
    for name, decimal in row["names"].items():
        count += _check(decimal, ball_of(names[name]), f"{where}: {name}")
    matrix = [evaluated_texts(texts, values) for texts in record["matrix"]]
    initial = [ball_of(x) for x in evaluated_texts(record["initial"], values)]
    for k, time in enumerate(evaluated_texts(row["times"], {})):
        exact = transition_by_balls(matrix, time)
        state = {
            name: sum((e * x for e, x in zip(line, initial, strict=True)), arb(0))
            for name, line in zip(record["states"], exact, strict=True)
        }
        known = {**values, **state}
        told = {name: evaluated_texts([text], known)[0] for name, text in outputs.items()}
        if set(row["solution"]) != set(state) or set(row["outputs"]) != set(outputs):
            raise DisagreementError(f"{where}: the columns are not the states and outputs")
        for name, column in (*row["solution"].items(), *row["outputs"].items()):
            value = ball_of({**state, **told}[name])
            count += _check(column[k], value, f"{where}: {name} at time {k}")
    return count


def _check(decimal: str, value: arb, where: str) -> int:
    exponent = Decimal(decimal).as_tuple().exponent
    unit = Fraction(10) ** int(exponent)
    off = abs(value - ball_of(Fraction(Decimal(decimal))))
    if not off <= ball_of(unit * Fraction(500001, 1000000)):
        raise DisagreementError(f"{where} is {value.str(15)}, not {decimal}")
    return 1
