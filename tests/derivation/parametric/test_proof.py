"""A derivation with parameters is proved as printed: whatever is altered in it is refused."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import replace
from types import ModuleType
from typing import Any

import pytest

from closedform.derivation.parametric import (
    case_steps,
    definitions,
    eigenvalue_steps,
    exponential_steps,
    kernels,
    model_steps,
    numbers_step,
    reasons,
    resolvent_steps,
    result_steps,
    spectrum,
)
from closedform.derivation.parametric.build import derive_cases
from closedform.derivation.parametric.proof.statements import prove_case_statements
from closedform.derivation.proof.finding import StatementRefutedError
from closedform.derivation.step import Matrix, Side, Statement, Step, Symbol
from closedform.notation.expression import (
    ZERO,
    Call,
    Expression,
    Name,
    Negation,
    Sum,
    is_expression,
    number,
)
from closedform.verification.record import UnprovedError
from tests.derivation.parametric.models import DIGITS, MODELS, solved, steps_made

REFUSED = (StatementRefutedError, UnprovedError, ValueError)

# --- every statement, altered one by one ---------------------------------------------------

OPPOSITE = {">": "<", "<": ">", ">=": "<", "<=": ">", "!=": "="}
WORDS_ONLY = {"left out"}
"""What is said of a gap is proved by another statement beside it."""


def altered(statement: Statement) -> Statement | None:
    """Return the statement with another relation, or another last side."""
    if statement.says in WORDS_ONLY:
        return None
    if statement.says == "apart":
        return replace(statement, sides=tuple(ZERO for _ in statement.sides))
    if statement.says == "functions":
        return replace(statement, sides=statement.sides[:-1])
    if statement.relation in OPPOSITE:
        return replace(statement, relation=OPPOSITE[statement.relation])
    return replace(statement, sides=(*statement.sides[:-1], spoiled(statement.sides[-1])))


def spoiled(side: Side) -> Side:
    if isinstance(side, Matrix):
        first, *rest = side.rows
        return replace(side, rows=((spoiled_formula(first[0]), *first[1:]), *rest))
    if isinstance(side, Symbol):
        if side.kind in ("pair", "real pair"):
            return replace(side, parts=(spoiled(side.parts[0]), side.parts[1]))
        if side.kind == "sum":
            return replace(side, parts=side.parts[:-1])
        return replace(side, letter="Q")
    if isinstance(side, tuple):
        return (*side[:-1], spoiled(side[-1]))
    return spoiled_formula(side)


def spoiled_formula(formula: Expression) -> Expression:
    return Sum((formula, number(1)))


def places(item: object, path: tuple[Any, ...] = ()) -> Iterator[tuple[Any, ...]]:
    """The ways to every statement in the facts of a step."""
    if isinstance(item, Statement):
        yield path
    elif isinstance(item, Mapping):
        for key, value in item.items():
            yield from places(value, (*path, key))
    elif isinstance(item, list | tuple):
        for k, value in enumerate(item):
            yield from places(value, (*path, k))


def at(item: Any, path: tuple[Any, ...]) -> Any:
    for key in path:
        item = item[key]
    return item


def put(item: Any, path: tuple[Any, ...], value: Any) -> Any:
    if not path:
        return value
    key, *rest = path
    inside = put(item[key], tuple(rest), value)
    if isinstance(item, Mapping):
        return {**item, key: inside}
    made = [inside if k == key else other for k, other in enumerate(item)]
    return tuple(made) if isinstance(item, tuple) else made


def variants(steps: tuple[Step, ...]) -> Iterator[tuple[str, tuple[Step, ...]]]:
    """Every derivation in which one statement is altered."""
    for k, step in enumerate(steps):

        def with_step(changed: Step, k: int = k) -> tuple[Step, ...]:
            return (*steps[:k], changed, *steps[k + 1 :])

        for j, statement in enumerate(step.statements):
            other = altered(statement)
            if other is not None:
                made = (*step.statements[:j], other, *step.statements[j + 1 :])
                yield f"{step.kind}: {statement.says}", with_step(replace(step, statements=made))
        for path in places(step.facts):
            statement = at(step.facts, path)
            other = altered(statement)
            if other is not None:
                yield (
                    f"{step.kind}: {path}",
                    with_step(replace(step, facts=put(step.facts, path, other))),
                )


@pytest.mark.parametrize("name", MODELS)
def test_whatever_statement_is_altered_is_refused(name: str) -> None:
    response, _, _ = solved(name)
    steps = steps_made(name)
    tried, passed = 0, []
    for what, changed in variants(steps):
        tried += 1
        try:
            prove_case_statements(response, changed)
        except REFUSED:
            continue
        passed.append(what)
    assert passed == []
    assert tried > 25


# --- printing routines, broken on purpose --------------------------------------------------

Break = Callable[[Any], Callable[..., Any]]


def first_of_two_swapped(original: Any) -> Callable[..., Any]:
    def broken(*args: Any) -> Any:
        found = original(*args)
        return [found[1], found[0], *found[2:]] if len(found) > 1 else found

    return broken


def negated_result(original: Any) -> Callable[..., Any]:
    return lambda *args, **more: Negation(original(*args, **more))


def without_the_last(original: Any) -> Callable[..., Any]:
    def broken(*args: Any, **more: Any) -> Any:
        return list(original(*args, **more))[:-1]

    return broken


def turned(original: Any) -> Callable[..., Any]:
    """Of a matrix: rows for columns."""

    def broken(*args: Any) -> Matrix:
        made = original(*args)
        return Matrix(tuple(zip(*made.rows, strict=True)), made.front)

    return broken


def sine_for_cosine(original: Any) -> Callable[..., Any]:
    def broken(*args: Any) -> Any:
        found = original(*args)
        return None if found is None else (found[1], found[0])

    return broken


def without_time(original: Any) -> Callable[..., Any]:
    def broken(*args: Any) -> Any:
        made = original(*args)
        return Call("exp", Name("t")) if isinstance(made, Call) else made

    return broken


def reversed_coefficients(original: Any) -> Callable[..., Any]:
    return lambda field, coefficients, name: original(field, list(coefficients)[::-1], name)


ANOTHER = Statement("vanishing", (Name("ka"), ZERO))

BROKEN: list[tuple[str, ModuleType, str, Break]] = [
    ("oscillator", model_steps, "as_given", turned),
    ("oscillator", model_steps, "polynomial_formula", negated_result),
    ("depot", model_steps, "factored_polynomial", negated_result),
    ("oscillator", eigenvalue_steps, "_over_one", negated_result),
    ("oscillator", kernels, "kernels_of", sine_for_cosine),
    ("oscillator", case_steps, "functions_of", without_the_last),
    ("oscillator", case_steps, "eigenvalues_of", without_the_last),
    (
        "depot",
        case_steps,
        "_equation",
        lambda _: lambda *_: Statement("vanishing", (Name("ka"), ZERO)),
    ),
    ("depot", reasons, "_square", negated_result),
    ("two tanks", resolvent_steps, "_difference", negated_result),
    ("depot", resolvent_steps, "_minor", lambda _: lambda *_: number(1)),
    ("decay", resolvent_steps, "factored_formula", negated_result),
    ("decay", result_steps, "as_given", turned),
    ("decay", result_steps, "factored_polynomial", negated_result),
    ("free masses", resolvent_steps, "element_matrix", turned),
    ("oscillator", exponential_steps, "exponential", without_time),
    ("three compartments", definitions, "polynomial_formula", reversed_coefficients),
    ("three compartments", eigenvalue_steps, "polynomial_formula", reversed_coefficients),
    ("held masses", eigenvalue_steps, "polynomial_formula", reversed_coefficients),
    ("oscillator", numbers_step, "exact_number", lambda _: lambda _: "3"),
    ("decay", spectrum, "exponential", without_time),
]


@pytest.mark.parametrize(("name", "module", "routine", "break_it"), BROKEN)
def test_a_broken_printing_routine_is_refused(
    name: str,
    module: ModuleType,
    routine: str,
    break_it: Break,
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    response, records, numbers = solved(name)
    monkeypatch.setattr(module, routine, break_it(getattr(module, routine)))
    with pytest.raises(REFUSED):
        derive_cases(response, records, digits=DIGITS, numbers=numbers)


# --- tables --------------------------------------------------------------------------------


def changed(name: str, kind: str, path: tuple[Any, ...], value: Any) -> tuple[Step, ...]:
    steps = steps_made(name)
    return tuple(
        replace(s, facts=put(s.facts, path, value)) if s.kind == kind else s for s in steps
    )


TABLES: list[tuple[str, str, tuple[Any, ...], Any]] = [
    ("oscillator", "numbers", ("sets", 0, "rows", 1, 1), "0.00885320"),
    ("oscillator", "numbers", ("sets", 0, "case"), 2),
    ("oscillator", "numbers", ("sets", 0, "quantities", 0, "decimal"), "2.00001"),
    ("oscillator", "numbers", ("sets", 1, "quantities", 0, "decimal"), "9.99999"),
    ("oscillator", "numbers", ("header",), [Name("t"), Symbol("scalar", letter="x")] * 2),
    ("decay", "cases", ("rows", 1, "eigenvalues", 0, "multiplicity"), 1),
    ("decay", "cases", ("rows", 1, "eigenvalues", 0, "index"), 1),
    ("decay", "cases", ("rows", 1, "eigenvalues", 0, "index"), 3),
    ("decay", "cases", ("rows", 4, "cases"), (0,)),
    ("decay", "branch", ("repeated", 0, "multiplicity"), 4),
    ("decay", "branch", ("repeated", 0, "index"), 1),
    ("free masses", "factors", ("rows", 0, "multiplicity"), 1),
    ("free masses", "factors", ("rows", 0, "index"), 1),
    ("free masses", "factors", ("rows", 1, "index"), 2),
    ("three compartments", "definitions", ("roots", 0, "places"), [2, 1, 3]),
    ("three compartments", "definitions", ("roots", 0, "places"), [1, 1, 3]),
    ("three compartments", "definitions", ("roots", 0, "turned"), False),
    ("oscillator", "definitions", ("formulas", 1, "cases"), (1,)),
    ("oscillator", "definitions", ("formulas", 1, "cases"), (0, 2)),
]


@pytest.mark.parametrize(("name", "kind", "path", "value"), TABLES)
def test_a_wrong_entry_of_a_table_is_refused(
    name: str, kind: str, path: tuple[Any, ...], value: Any
) -> None:
    with pytest.raises(REFUSED):
        prove_case_statements(solved(name)[0], changed(name, kind, path, value))


def test_a_kind_of_statement_that_nothing_proves_is_an_error() -> None:
    response, _, _ = solved("two tanks")
    step = Step("aside", (Statement("hearsay", (number(1), number(1))),))
    with pytest.raises(ValueError, match="nothing proves 'hearsay'"):
        prove_case_statements(response, (*steps_made("two tanks"), step))


def test_a_name_that_is_not_defined_is_refused() -> None:
    response, _, _ = solved("two tanks")
    step = Step("aside", (Statement("identity", (Name("chi"), Name("chi"))),))
    with pytest.raises(StatementRefutedError, match="chi is used and not defined"):
        prove_case_statements(response, (*steps_made("two tanks"), step))


def test_a_solution_left_out_is_refused() -> None:
    response, _, _ = solved("two tanks")
    steps = [
        replace(s, statements=s.statements[:-1]) if s.kind == "case_solution" else s
        for s in steps_made("two tanks")
    ]
    with pytest.raises(StatementRefutedError, match="others than the model has"):
        prove_case_statements(response, steps)


def test_the_spoiling_of_a_side_changes_it() -> None:
    assert is_expression(spoiled(Name("a")))
    assert spoiled(Name("a")) != Name("a")
