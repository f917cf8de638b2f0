"""A driven derivation is proved as printed: whatever is altered in it is refused."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import replace
from fractions import Fraction
from typing import Any

import pytest

from closedform.derivation.driven import cases as in_cases
from closedform.derivation.driven import single as in_numbers
from closedform.derivation.driven.build import derive_driven
from closedform.derivation.driven.proof.statements import (
    PROVERS,
    TABLES,
    prove_driven_statements,
    within,
)
from closedform.derivation.proof.finding import StatementRefutedError
from closedform.derivation.step import Matrix, Side, Statement, Step, Symbol
from closedform.notation.expression import ONE, Expression, Name, Number, Sum, is_expression
from closedform.response.driven.numbers import driven_numbers_of
from closedform.verification.record import Check, UnprovedError
from tests.derivation.driven.models import DIGITS, MODELS, proved, solved

MORE = Number(Fraction(17, 13))
"""What is added to a formula; no model here has such a number."""
OPPOSITE = {">": "<", "<": ">", ">=": "<", "<=": ">", "!=": "="}
REFUSED = (StatementRefutedError, UnprovedError, ValueError, TypeError, KeyError)
Path = tuple[Any, ...]


def asked(name: str, monkeypatch: pytest.MonkeyPatch) -> tuple[Any, ...]:
    """Return what the proof of the driven statements of a model is asked."""
    found: list[tuple[Any, ...]] = []

    def keep(*arguments: Any) -> Check:
        found.append(arguments)
        return Check("statements of the derivation", "enclosed", "kept")

    for module in (in_cases, in_numbers):
        monkeypatch.setattr(module, "prove_driven_statements", keep)
    numbers = driven_numbers_of(solved(name), digits=DIGITS)
    derive_driven(solved(name), proved(name), digits=DIGITS, numbers=numbers)
    monkeypatch.undo()
    return found[0]


def statements_in(item: Any, path: Path = ()) -> Iterator[tuple[Path, Statement]]:
    """Yield every statement in a step or in its facts, with the way to it."""
    if isinstance(item, Statement):
        yield path, item
    elif isinstance(item, Step):
        yield from statements_in(item.statements, (*path, "statements"))
        yield from statements_in(item.facts, (*path, "facts"))
    elif isinstance(item, Mapping):
        for key, value in item.items():
            yield from statements_in(value, (*path, key))
    elif isinstance(item, list | tuple):
        for place, value in enumerate(item):
            yield from statements_in(value, (*path, place))


def put(item: Any, path: Path, value: Any) -> Any:
    """Return an item with a value in the place of what stands at the end of a way."""
    if not path:
        return value
    first, *rest = path
    if isinstance(item, Step):
        return replace(item, **{first: put(getattr(item, first), tuple(rest), value)})
    if isinstance(item, Mapping):
        return {**item, first: put(item[first], tuple(rest), value)}
    kind = type(item)
    return kind(
        put(part, tuple(rest), value) if place == first else part for place, part in enumerate(item)
    )


def altered(side: Side) -> Side:
    """Return another side of the same kind: one more, another letter, another piece."""
    if isinstance(side, Matrix):
        (first, *others), *rows = side.rows
        return replace(side, rows=((Sum((first, MORE)), *others), *rows))
    if isinstance(side, Symbol):
        if side.parts:
            return replace(side, parts=(altered(side.parts[0]), *side.parts[1:]))
        return replace(side, letter="Z", indices=("9", "7"))
    if isinstance(side, tuple):
        return tuple(reversed(side))
    if isinstance(side, Name):
        return Name("unheard_of")
    assert is_expression(side)
    return Sum((side, MORE))


def spoiled(statement: Statement) -> Iterator[Statement]:
    """Yield the statement with its last side altered, and with its first; or turned round."""
    if statement.relation not in ("=", "~~"):
        yield replace(statement, relation=OPPOSITE[statement.relation])
        return
    yield replace(statement, sides=(*statement.sides[:-1], altered(statement.sides[-1])))
    if len(statement.sides) > 1:
        yield replace(statement, sides=(altered(statement.sides[0]), *statement.sides[1:]))


def refuses(prove: Callable[[Sequence[Step]], object], steps: Sequence[Step]) -> bool:
    try:
        prove(steps)
    except REFUSED:
        return True
    return False


@pytest.mark.parametrize("name", MODELS)
def test_every_statement_that_is_altered_is_refused(
    name: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    model, steps, spots, *sets = asked(name, monkeypatch)
    prove_driven_statements(model, steps, spots, *sets)

    def prove(spoilt: Sequence[Step]) -> object:
        return prove_driven_statements(model, spoilt, spots, *sets)

    kept = []
    for step in steps:
        for path, statement in statements_in(step):
            if PROVERS[statement.says] is within and "in numbers" not in statement.says:
                continue
            kept += [
                (step.kind, statement.says, wrong.sides)
                for wrong in spoiled(statement)
                if not refuses(prove, [put(step, path, wrong)])
            ]
    assert kept == []


@pytest.mark.parametrize("name", MODELS)
def test_every_decimal_that_is_altered_is_refused(
    name: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    model, steps, spots, *sets = asked(name, monkeypatch)
    for place, step in enumerate(steps):
        if step.kind == "driven_values":
            tables: list[Path] = [("facts", "rows")]
        elif step.kind == "driven_numbers":
            tables = [("facts", "sets", 0, "rows")]
        else:
            continue
        for table in tables:
            rows: Any = step
            for key in table:
                rows = rows.facts if key == "facts" else rows[key]
            for at in ((1, 1), (len(rows) - 1, len(rows[0]) - 1)):
                path = (*table, *at)
                wrong = "7.31" if rows[at[0]][at[1]] != "7.31" else "7.32"
                own = [*steps[:place], put(step, path, wrong), *steps[place + 1 :]]
                with pytest.raises((StatementRefutedError, UnprovedError)):
                    prove_driven_statements(model, own, spots, *sets)


def test_another_verdict_on_stability_is_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    for name, other in (("frame", "not stable"), ("resonance", "stable")):
        model, steps, spots, *sets = asked(name, monkeypatch)
        place = next(k for k, step in enumerate(steps) if step.kind == "stability")
        own = list(steps)
        own[place] = put(steps[place], ("facts", "verdict"), other)
        with pytest.raises(StatementRefutedError):
            prove_driven_statements(model, own, spots, *sets)


def test_a_kind_of_statement_that_nothing_proves_is_an_error(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    model, steps, spots, *sets = asked("resonance", monkeypatch)
    odd = replace(steps[0], statements=(Statement("hearsay", (ONE, ONE)),))
    with pytest.raises(ValueError, match="nothing proves 'hearsay'"):
        prove_driven_statements(model, [odd, *steps[1:]], spots, *sets)


def test_tables_are_proved_by_their_kind() -> None:
    assert set(TABLES) == {"stability", "driven_values"}


def test_a_name_without_a_definition_is_refused(monkeypatch: pytest.MonkeyPatch) -> None:
    model, steps, spots, *sets = asked("resonance", monkeypatch)
    place = next(k for k, step in enumerate(steps) if step.kind == "particular")
    path, statement = next(statements_in(steps[place]))
    unknown: Expression = Name("q_17")
    rows = Matrix(((unknown,), (unknown,)))
    wrong = replace(statement, sides=(statement.sides[0], rows))
    own = [*steps[:place], put(steps[place], path, wrong), *steps[place + 1 :]]
    with pytest.raises(StatementRefutedError, match="used and not defined"):
        prove_driven_statements(model, own, spots, *sets)
