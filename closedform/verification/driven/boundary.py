"""Conditions at points: that the solution meets them, and the start that follows from them.

A solution at an instant is a sum of numbers e^b, cos and sin with weights over K.  All of
them, and those in the constants of the solution, are taken anew as polynomials in numbers that
obey known relations alone; a condition is met where nothing is left modulo these.
"""

from __future__ import annotations

from collections.abc import Sequence
from math import factorial

from closedform.algebra.adjoined import Adjoined, Recorder, adjoined, taken_over
from closedform.algebra.field import BaseField, FieldMatrix, Scalar
from closedform.algebra.root_matrix import RootMatrix
from closedform.algebra.waves import Constant
from closedform.response.driven.determined import PointConstants
from closedform.verification.driven.setting import Setting
from closedform.verification.driven.sums import Key, TimedSum
from closedform.verification.record import Check

__all__ = ["conditions_check"]

_ITEM = "conditions at points"


def conditions_check(setting: Setting) -> Check:
    """Every condition at a point is met by the exact solution of its interval."""
    points = setting.solution.points
    if points is None:
        return Check(_ITEM, "refuted", "no constants were found for the conditions")
    recorder = Recorder(setting.field)
    _residuals(setting, recorder, points)
    numbers = adjoined(setting.field, recorder.exponents, recorder.angles)
    for condition, residual in zip(
        setting.model.conditions, _residuals(setting, numbers, points), strict=True
    ):
        if residual is None:
            how = f"it is not known in which interval {condition.text} is"
            return Check(_ITEM, "not attempted", how)
        if not numbers.vanishes(residual, setting.vanishes):
            return Check(_ITEM, "refuted", f"{condition.text} is not met")
    return Check(
        _ITEM,
        "proved",
        f"the exact solution was put into {len(setting.model.conditions)} conditions, with every "
        "e^b, cosine and sine at an instant as a number of its own: nothing is left modulo "
        "C^2 - D S^2 = 1",
    )


def _interval(setting: Setting, at: Scalar) -> int | None:
    """The interval that ends with an instant or has it inside, the first for the start.

    None if this is open.
    """
    found = 0
    for k, instant in enumerate(setting.instants[1:], start=1):
        signs = setting.signs_of(at - instant)
        if signs == {1}:
            found = k
        elif 1 in signs:
            return None
    return found


def _residuals(
    setting: Setting, numbers: Adjoined | Recorder, points: PointConstants
) -> list[Scalar | None]:
    """For each condition what it has on the left, less what it has on the right."""
    known = {c.name: taken_over(points.found.numbers, c.element, numbers) for c in points.constants}
    found: list[Scalar | None] = []
    for condition in setting.model.conditions:
        at = setting.put(condition.at)
        place = _interval(setting, at)
        if place is None:
            found.append(None)
            continue
        zero = setting.field.domain.zero
        rows = len(setting.model.rows)
        weights = [setting.put(w) for w in condition.of_states]
        row = setting.field.matrix([[*weights, *[zero] * (rows - len(weights))]])
        function = setting.wholes[place].after(row)
        value = _value(setting.field, function, at, numbers, known)
        expected = setting.put(condition.value)
        if at == setting.instants[0]:  # before an impulse there
            struck = setting.field.matrix([weights]) * setting.blow(0)
            expected = expected + struck.to_list()[0][0]
        found.append(value - numbers.lift(expected))
    return found


def _value(
    field: BaseField,
    function: TimedSum,
    at: Scalar,
    numbers: Adjoined | Recorder,
    known: dict[str, Scalar],
) -> Scalar:
    """The value of a function of one row at an instant."""
    total = numbers.lift(field.domain.zero)
    for key, residues in function.parts.items():
        total = total + _part(field, key, residues, at, numbers) * _front(
            field, key[0], numbers, known
        )
    return total


def _front(
    field: BaseField, constant: Constant, numbers: Adjoined | Recorder, known: dict[str, Scalar]
) -> Scalar:
    value = numbers.lift(field.domain.one)
    if constant.named:
        value = value * known[constant.named]
    if constant.growth:
        value = value * numbers.power(constant.growth)
    if constant.kernel != "one":
        pair = numbers.turn(-field.domain.one, constant.angle)
        value = value * pair[0 if constant.kernel == "cos" else 1]
    return value


def _part(
    field: BaseField,
    key: Key,
    residues: Sequence[RootMatrix],
    at: Scalar,
    numbers: Adjoined | Recorder,
) -> Scalar:
    _, origin, p = key
    s = at - origin
    if not s:
        return numbers.lift(_single(residues[0].trace_form()))
    parts = [field.domain.zero] * int(p.degree())
    for j, residue in enumerate(residues):
        weight = s**j / field.domain.convert(factorial(j))
        for k, matrix in enumerate(residue.coefficients):
            parts[k] = parts[k] + _single(matrix) * weight
    if not any(parts):
        return numbers.lift(field.domain.zero)
    if p.degree() == 1:
        return numbers.lift(parts[0]) * _power(field, numbers, -p.nth(0) * s)
    if p.degree() > 2:
        raise ValueError("values at points take factors of degree 1 and 2 alone")
    centre = -p.nth(1) / field.domain.convert(2)
    even, odd = numbers.turn(centre**2 - p.nth(0), s)
    inner = numbers.lift(parts[1]) * (even + numbers.lift(centre) * odd)
    return (inner + numbers.lift(parts[0]) * odd) * _power(field, numbers, centre * s)


def _power(field: BaseField, numbers: Adjoined | Recorder, exponent: Scalar) -> Scalar:
    return numbers.power(exponent) if exponent else numbers.lift(field.domain.one)


def _single(matrix: FieldMatrix) -> Scalar:
    return matrix.to_list()[0][0]
