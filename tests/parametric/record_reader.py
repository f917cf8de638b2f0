"""An independent reader of the record of a model with parameters, checked at given values.

From the record's JSON alone: find the cases whose condition holds at the values, work out
their names, and hold transition, solution and outputs against e^(At) by ball arithmetic.
Nothing of the package is used.  What is wrong is told as a `DisagreementError`.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping, Sequence
from fractions import Fraction
from functools import cmp_to_key
from typing import Any

from flint import acb, acb_poly, arb, arb_mat, ctx, fmpq, fmpq_mat, fmpq_poly, fmpz_poly

from tests.parametric.plain_reader import Number, ball_of, names_in, parse, value

__all__ = [
    "DisagreementError",
    "NotCoveredError",
    "check_conditions",
    "check_names",
    "check_record",
    "covering_cases",
    "evaluated_texts",
    "holds",
    "names_at",
    "parameter_values",
    "solution_at",
    "transition_at",
    "transition_by_balls",
]

Record = Mapping[str, Any]
Values = Mapping[str, Number]
Balls = list[list[arb]]

RELATION = re.compile(r"(<=|>=|!=|==|<|>|=)")
BITS = 400
MOST_BITS = 12800
DIGITS = 30
CERTAIN = Fraction(1, 10**60)
"""Below this a ball that holds 0 counts as 0: only for parameters that are not rational."""


class DisagreementError(AssertionError):
    """The record says something that is not so."""


class NotCoveredError(DisagreementError):
    """The record says that it has no answer at these values."""


class _NarrowerError(Exception):
    """More digits are needed to tell."""


def check_record(
    record: Record,
    values: Mapping[str, Fraction | int | str],
    times: Iterable[Fraction] = (Fraction(0), Fraction(1, 3), Fraction(7, 5)),
    outputs: Mapping[str, str] | None = None,
    digits: int = DIGITS,
) -> int:
    """Check all that the record says at these values; return how many cases cover them.

    `values` are exact: numbers, or texts such as "sqrt(2)/3".  `outputs` are the outputs as
    the model states them, in the states and the parameters.  Two cases may hold at once,
    then both are checked.  Raises DisagreementError, NotCoveredError.
    """
    with ctx.workprec(BITS):
        cases = covering_cases(record, parameter_values(values))
    for number in cases:
        bits = BITS
        while True:
            try:
                with ctx.workprec(bits):
                    _check_case(record, number, parameter_values(values), times, outputs, digits)
                break
            except _NarrowerError as trouble:
                bits *= 2
                if bits > MOST_BITS:
                    raise DisagreementError(f"case {number}: unsettled: {trouble}") from None
    return len(cases)


def parameter_values(values: Mapping[str, Fraction | int | str]) -> dict[str, Number]:
    """Return the values as numbers of the reader, at the working precision."""
    return {
        name: value(parse(text), {}) if isinstance(text, str) else Fraction(text)
        for name, text in values.items()
    }


def covering_cases(record: Record, values: Values) -> list[int]:
    """Return the places of the cases whose condition holds, or raise."""
    found = [i for i, case in enumerate(record["cases"]) if holds(case["condition"], values)]
    if found:
        return found
    for text in record.get("not_covered", ()):
        if holds(text, values):
            raise NotCoveredError(f"not covered: {text}")
    raise DisagreementError(f"no case covers {_shown(values)}, and not_covered does not say so")


def holds(condition: str, values: Values) -> bool:
    """Whether a condition holds: comparisons joined by " and ", or "true"."""
    if condition.strip() == "true":
        return True
    return all(_comparison_holds(part, values) for part in condition.split(" and "))


def _comparison_holds(text: str, values: Values) -> bool:
    pieces = RELATION.split(text)
    if len(pieces) < 3 or len(pieces) % 2 == 0:
        raise DisagreementError(f"{text!r} is no comparison")
    sides = [value(parse(piece.strip()), values) for piece in pieces[::2]]
    return all(
        _related(_sign(text, sides[i], sides[i + 1]), relation)
        for i, relation in enumerate(pieces[1::2])
    )


def _sign(text: str, left: Number, right: Number) -> int:
    """Return the sign of left - right."""
    if isinstance(left, Fraction) and isinstance(right, Fraction):
        return (left > right) - (left < right)
    difference = ball_of(left) - ball_of(right)
    if difference > 0 or difference < 0:
        return 1 if difference > 0 else -1
    if difference.is_finite() and abs(difference) < ball_of(CERTAIN):
        return 0
    raise DisagreementError(f"{text!r} cannot be decided")


def _related(sign: int, relation: str) -> bool:
    return {
        "<": sign < 0,
        ">": sign > 0,
        "<=": sign <= 0,
        ">=": sign >= 0,
        "=": sign == 0,
        "==": sign == 0,
        "!=": sign != 0,
    }[relation]


# --- the names of a case ----------------------------------------------------------------------


def names_at(case: Mapping[str, Any], values: Values) -> dict[str, Number]:
    """Return the parameters and the case's names, each defined by those before it."""
    known = dict(values)
    for name, entry in case.get("names", {}).items():
        if name in known:
            raise DisagreementError(f"{name} is defined twice")
        if "definition" in entry:
            known[name] = _evaluated(entry["definition"], known)
        else:
            known[name] = _root_part(entry, known)
    return known


def _root_part(entry: Mapping[str, Any], known: Values) -> Number:
    coefficients = [_evaluated(text, known) for text in entry["polynomial"]]
    roots = _ordered_roots(coefficients)
    which = entry["which"]
    if not 1 <= which <= len(roots):
        raise DisagreementError(f"there is no root {which} among {len(roots)}")
    value, weight = roots[which - 1], arb(1)
    if "numerator" in entry:
        above, beside = (
            acb_poly([ball_of(_evaluated(text, known)) for text in reversed(entry[key])])
            for key in ("numerator", "beside")
        )
        slope = acb_poly([ball_of(c) for c in reversed(coefficients)]).derivative()
        value, weight = above(value) / (slope(value) * beside(value)), arb(entry["weight"])
    part: arb = value.real if entry["part"] == "real" else value.imag
    return part * weight


def _ordered_roots(coefficients: Sequence[Number]) -> list[acb]:
    """Return all roots, repeated ones repeated, by real part, then by imaginary part."""
    if all(isinstance(c, Fraction) for c in coefficients):
        exact = fmpq_poly([fmpq(c.numerator, c.denominator) for c in reversed(coefficients)])
        if exact.degree() != len(coefficients) - 1:
            raise DisagreementError("the leading coefficient of a named root's polynomial is 0")
        whole = fmpz_poly([int(c) for c in (exact * exact.denom()).coeffs()])
        found = [root for root, times in whole.complex_roots() for _ in range(times)]
    else:
        try:
            found = acb_poly([ball_of(c) for c in reversed(coefficients)]).roots(
                tol=arb(2) ** (-ctx.prec // 2)
            )
        except ValueError as trouble:  # FLINT says so if the roots cannot be told apart
            raise _NarrowerError(str(trouble)) from None
    return sorted(found, key=cmp_to_key(_before))


def _before(one: acb, other: acb) -> int:
    """Order two roots; parts whose narrow balls meet are taken for equal."""
    for left, right in ((one.real, other.real), (one.imag, other.imag)):
        if not left.overlaps(right):
            return -1 if left < right else 1
    return 0


def _evaluated(text: str, known: Values) -> Number:
    try:
        found = value(parse(text), known)
    except ZeroDivisionError:
        raise DisagreementError(f"{text!r} divides by 0 at {_shown(known)}") from None
    except ValueError as trouble:
        raise DisagreementError(str(trouble)) from None
    if isinstance(found, arb) and not found.is_finite():
        raise _NarrowerError(f"{text!r} has no finite value at {_shown(known)}")
    return found


def _shown(values: Values) -> str:
    return ", ".join(
        f"{name} = {v if isinstance(v, Fraction) else v.str(15)}" for name, v in values.items()
    )


# --- what a case says -------------------------------------------------------------------------


def _check_case(
    record: Record,
    number: int,
    values: Values,
    times: Iterable[Fraction],
    outputs: Mapping[str, str] | None,
    digits: int,
) -> None:
    case = record["cases"][number]
    known = names_at(case, values)
    matrix = [[_evaluated(text, values) for text in row] for row in record["matrix"]]
    initial = [ball_of(_evaluated(text, values)) for text in record["initial"]]
    _check_characteristic(record, matrix, values)
    outputs = outputs or {}
    if outputs and set(outputs) != set(case["outputs"]):
        raise DisagreementError(f"the outputs are {', '.join(case['outputs'])}")
    for time in times:
        at = {**known, record.get("time", "t"): Fraction(time)}
        exact = transition_by_balls(matrix, Fraction(time))
        where = f"case {number} ({case['condition']}) at time {time}, {_shown(values)}"
        found = [[ball_of(_evaluated(text, at)) for text in row] for row in case["transition"]]
        compare(found, exact, digits, f"transition, {where}")
        state = [sum((e * x for e, x in zip(row, initial, strict=True)), arb(0)) for row in exact]
        solution = [ball_of(_evaluated(text, at)) for text in case["solution"]]
        compare([solution], [state], digits, f"solution, {where}")
        stated = {**values, **dict(zip(record["states"], state, strict=True))}
        for name, text in outputs.items():
            ours = ball_of(_evaluated(case["outputs"][name], at))
            theirs = ball_of(_evaluated(text, stated))
            compare([[ours, arb(1)]], [[theirs, arb(1)]], digits, f"output {name}, {where}")


def _check_characteristic(record: Record, matrix: list[list[Number]], values: Values) -> None:
    """Where all is rational: the coefficients are those of det(lambda I - A)."""
    if "characteristic_polynomial" not in record:
        return
    entries = [entry for row in matrix for entry in row]
    stated = [_evaluated(text, values) for text in record["characteristic_polynomial"]]
    if not all(isinstance(x, Fraction) for x in (*entries, *stated)):
        return
    exact = fmpq_mat([[fmpq(x.numerator, x.denominator) for x in row] for row in matrix])
    ours = [Fraction(int(c.p), int(c.q)) for c in reversed(exact.charpoly().coeffs())]
    if ours != stated:
        raise DisagreementError(
            f"the characteristic polynomial is not {stated} at {_shown(values)}"
        )


def transition_by_balls(matrix: Sequence[Sequence[Number]], time: Number) -> Balls:
    """Return balls around e^(At)."""
    n, t = len(matrix), ball_of(time)
    exact = arb_mat([[ball_of(entry) * t for entry in row] for row in matrix]).exp()
    return [[exact[i, j] for j in range(n)] for i in range(n)]


def transition_at(record: Record, number: int, values: Values, time: Number) -> Balls:
    """Return what a case says of e^(At), at the working precision."""
    case = record["cases"][number]
    at = {**names_at(case, values), record.get("time", "t"): time}
    return [[ball_of(_evaluated(text, at)) for text in row] for row in case["transition"]]


def compare(found: Balls, exact: Balls, digits: int, where: str) -> None:
    """Raise unless all entries meet and are narrow, relative to the largest one."""
    if [len(row) for row in found] != [len(row) for row in exact]:
        raise DisagreementError(f"{where}: the sizes differ")
    largest = max((abs(entry).upper() for row in exact for entry in row), default=arb(1))
    allowed = max(largest, arb(10) ** -digits, key=float) * arb(10) ** -digits
    narrow = True
    for i, (own, row) in enumerate(zip(found, exact, strict=True), 1):
        for j, (ours, theirs) in enumerate(zip(own, row, strict=True), 1):
            if not ours.overlaps(theirs):
                raise DisagreementError(
                    f"{where}: entry ({i}, {j}) is {theirs.str(15)}, not {ours.str(15)}"
                )
            narrow = narrow and bool(ours.rad() <= allowed) and bool(theirs.rad() <= allowed)
    if not narrow:
        raise _NarrowerError(where)


def formulas_of(record: Record) -> list[tuple[dict[str, Any], str]]:
    """Return every formula of the cases that has the time in it, beside its case."""
    return [
        (case, text)
        for case in record["cases"]
        for text in (
            *(text for row in case["transition"] for text in row),
            *case["solution"],
            *case["outputs"].values(),
        )
    ]


def check_conditions(record: Record) -> None:
    """Raise if a case asks for two things of the same sides that cannot both be."""
    for case in record["cases"]:
        asked: dict[tuple[str, str], set[int]] = {}
        for part in case["condition"].split(" and "):
            pieces = [piece.strip() for piece in RELATION.split(part)]
            if len(pieces) == 3:
                left, relation, right = pieces
                signs = {sign for sign in (-1, 0, 1) if _related(sign, relation)}
                left_over = asked.setdefault((left, right), {-1, 0, 1})
                left_over &= signs
                if not left_over:
                    raise DisagreementError(f"{case['condition']!r} holds nowhere")


def check_names(record: Record) -> None:
    """Raise if a formula uses a name that nothing defines, or is complex."""
    for case, text in formulas_of(record):
        allowed = {*record["parameters"], *case.get("names", {}), record.get("time", "t"), "pi"}
        strange = names_in(parse(text)) - allowed
        if strange:
            raise DisagreementError(f"{text!r} uses {', '.join(sorted(strange))}")


def solution_at(record: Record, number: int, values: Values, time: Number) -> list[arb]:
    """Return what a case says of x(t), at the working precision."""
    case = record["cases"][number]
    at = {**names_at(case, values), record.get("time", "t"): time}
    return [ball_of(_evaluated(text, at)) for text in case["solution"]]


def evaluated_texts(texts: Iterable[str], values: Values) -> list[Number]:
    """Return what formulas of the parameters say at these values."""
    return [_evaluated(text, values) for text in texts]
