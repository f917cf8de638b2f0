"""What is printed is proved as it is printed: a fault in any printing routine is refused."""

from __future__ import annotations

import pickle
from collections.abc import Callable
from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from pathlib import Path
from typing import Any

import pytest
from flint import acb, arb, ctx

import closedform
from closedform.algebra.surds import SurdSum
from closedform.derivation import (
    abbreviations,
    build,
    chain_steps,
    exponential_steps,
    form_steps,
    formulas,
    resolvent_steps,
    result_steps,
    spectrum_steps,
)
from closedform.derivation.build import derive
from closedform.derivation.proof import statements
from closedform.derivation.proof.finding import Comparison, StatementRefutedError, decimal_of
from closedform.derivation.proof.statements import prove_statements
from closedform.derivation.step import Matrix, Step, Symbol
from closedform.errors import RefutedError
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Quotient,
    Sum,
    number,
)
from closedform.response.response import Response
from closedform.verification import Check, UnprovedError, verify
from tests.derivation.test_canonical_steps import SURDS
from tests.derivation.test_resolvent_steps import REPEATED
from tests.derivation.test_spectrum_steps import UNDAMPED
from tests.derivation.values import derivation_of, responded
from tests.response.systems import KINDS, response_to
from tests.verification.tampering import with_formula
from tests.verification.test_comparison import CLOSE

# --- what is true is proved ----------------------------------------------------------------


@pytest.mark.parametrize("kind", KINDS)
@pytest.mark.parametrize("digits", [1, 4, 25])
def test_every_kind_of_derivation_is_proved(kind: str, digits: int) -> None:
    last = derivation_of(response_to(kind), digits).checks[-1]
    assert (last.item, last.outcome) == ("statements of the derivation", "enclosed")
    assert "too small" not in last.how


FURTHER: dict[str, list[list[Any]]] = {
    **SURDS,
    "repeated cubic": REPEATED,
    "undamped": UNDAMPED,
    "nine states": [[-(k + 1) * (i == k) + (i == k + 1) for k in range(9)] for i in range(9)],
    "stiff": [["-1000000", 1, 0], [0, "-1/1000", 1], [0, 0, "-1000"]],
    "tiny": [["-1e-15", "3e-15"], [0, "-2e-15"]],
    "huge": [[0, "1e12"], ["-4e12", 0]],
    "close": [["-1", 1, 0], [0, "-1.000000000000000000001", 1], [0, 0, "-3"]],
    "eight": [[((i * i + 3 * k + i * k) % 7) - 3 for k in range(8)] for i in range(8)],
}


@pytest.mark.parametrize("name", FURTHER)
def test_further_derivations_are_proved(name: str) -> None:
    last = derivation_of(responded(FURTHER[name])).checks[-1]
    assert last.outcome == "enclosed"
    assert "too small" not in last.how


@pytest.mark.parametrize("name", CLOSE)
def test_close_eigenvalues_are_told_apart(name: str) -> None:
    response = responded(CLOSE[name])
    assert prove_statements(response, tuple(build._steps(response, 6)), 6).outcome == "enclosed"


def saddle() -> Response:
    """Of x1 = e^(-t) nothing is left beside e^(t) at time 10^5, in the exponential of balls."""
    model = closedform.system([[0, 1], [1, 0]], initial=[1, -1], times=["0", "100000"])
    return closedform.respond(model)


def test_values_lost_in_the_matrix_exponential_are_proved_by_their_formulas() -> None:
    response = saddle()
    last = derive(response, verify(response)).checks[-1]
    assert last.outcome == "enclosed"
    assert last.how.endswith(
        "; 2 values, too small beside others for that, agree with the formulas of the result"
    )


def test_a_fast_difference_beside_slow_states_is_proved() -> None:
    """At the instants chosen for the slow mode nothing is left of the fast one."""
    half, small = Fraction(1, 2), Fraction(1, 2000)
    rows = [[-1000 * half - small, 1000 * half - small], [1000 * half - small, -500 - small]]
    model = closedform.system(rows, initial=[1, -1], outputs={"d": "x1 - x2"})
    response = closedform.respond(model)
    assert derive(response, verify(response)).checks[-1].outcome == "enclosed"


# --- what is false is refused --------------------------------------------------------------

Fault = Callable[[Any], Callable[..., Any]]


def rows_of(matrix: Matrix) -> list[list[Any]]:
    return [list(row) for row in matrix.rows]


def entry_negated(original: Any) -> Callable[..., Any]:
    """The last entry that is not zero has the other sign."""

    def wrong(*args: Any, **named: Any) -> Any:
        rows = [list(row) for row in original(*args, **named)]
        for row in reversed(rows):
            for k in reversed(range(len(row))):
                if row[k] != number(0):
                    row[k] = Negation(row[k])
                    return tuple(tuple(r) for r in rows)
        return tuple(tuple(r) for r in rows)

    return wrong


def list_negated(original: Any) -> Callable[..., Any]:
    def wrong(*args: Any, **named: Any) -> Any:
        first, *others = original(*args, **named)
        return [Negation(first) if first != number(0) else number(1), *others]

    return wrong


def matrix_raised(original: Any) -> Callable[..., Any]:
    def wrong(*args: Any, **named: Any) -> Any:
        found = original(*args, **named)
        rows = rows_of(found)
        rows[-1][-1] = number(7)
        return Matrix(tuple(map(tuple, rows)), found.front)

    return wrong


def doubled(original: Any) -> Callable[..., Any]:
    def wrong(*args: Any, **named: Any) -> Any:
        return closedform.notation.expression.Product((number(2), original(*args, **named)))

    return wrong


def first_side_doubled(original: Any) -> Callable[..., Any]:
    def wrong(value: SurdSum, *others: Any) -> Any:
        return original(value + value, *others)

    return wrong


def value_changed(original: Any) -> Callable[..., Any]:
    def wrong(mode: Any) -> Any:
        found = original(mode)
        if isinstance(found, Symbol):
            return replace(found, kind="pair" if found.kind == "real pair" else "real pair")
        return None if found is None else Negation(number(9))

    return wrong


def last_figure_changed(original: Any) -> Callable[..., Any]:
    """One unit in the last of six figures."""

    def wrong(*args: Any, **named: Any) -> Any:
        return off_by_one(original(*args, **named))

    return wrong


def off_by_one(text: str) -> str:
    if " and " in text:
        first, second = text.split(" and ")
        return f"{first} and {off_by_one(second)}"
    if "±" in text:
        rate, turn = text.split("±")
        mark = "i" if turn.endswith("i") else ""
        return f"{rate}± {off_by_one(turn.strip().removesuffix('i'))}{mark}"
    value = Decimal(text)
    if value.is_zero():
        return "0.000001"
    return str(value + Decimal(1).scaleb(value.adjusted() - 5))


def table_changed(original: Any) -> Callable[..., Any]:
    def wrong(*args: Any, **named: Any) -> Any:
        rows = original(*args, **named)
        rows[-1][0] = off_by_one(rows[-1][0])
        return rows

    return wrong


def last_changed(original: Any) -> Callable[..., Any]:
    """The first value at the last instant is doubled."""

    def wrong(*args: Any, **named: Any) -> Any:
        rows = original(*args, **named)
        mantissa, mark, power = rows[-1][0].partition("e")
        rows[-1][0] = f"{Decimal(mantissa) * 2}{mark}{power}"
        return rows

    return wrong


def shifted_interval(original: Any) -> Callable[..., Any]:
    def wrong(*args: Any, **named: Any) -> Any:
        low, high = map(Decimal, original(*args, **named))
        return str(high), str(high + high - low)

    return wrong


def wide_interval(_: Any) -> Callable[..., Any]:
    return lambda *_args: ("-100", "100")


def other_index(original: Any) -> Callable[..., Any]:
    """R_0 and R_1 change places, in the sum alone: it is printed first."""
    calls = []

    def wrong(part: Any, power: int, k: int) -> Any:
        calls.append(k)
        return original(part, power, 1 - k if k < 2 and len(calls) <= 3 else k)

    return wrong


def same_index(original: Any) -> Callable[..., Any]:
    return lambda part, power, _: original(part, power, 0)


def other_function(original: Any) -> Callable[..., Any]:
    def wrong(part: Any, order: int, argument: Any) -> Any:
        return replace(original(part, order, argument), order=order + 1 if argument is None else 0)

    return wrong


FAULTS: list[tuple[Any, str, str, Fault]] = [
    (chain_steps, "vector_formulas", "mixed", list_negated),
    (form_steps, "vector_formulas", "single", list_negated),
    (form_steps, "_left_rows", "single", entry_negated),
    (form_steps, "_left_rows", "defective", entry_negated),
    (form_steps, "_left_rows", "mixed", entry_negated),
    (form_steps, "_jordan_rows", "defective", entry_negated),
    (form_steps, "_real_columns", "circular", entry_negated),
    (form_steps, "_real_rows", "circular", entry_negated),
    (form_steps, "_real_rows", "defective circular pair", entry_negated),
    (form_steps, "_real_form_rows", "circular", entry_negated),
    (form_steps, "_real_form_rows", "defective circular pair", entry_negated),
    (exponential_steps, "_rotation", "circular", entry_negated),
    (exponential_steps, "_rotation", "defective circular pair", entry_negated),
    (exponential_steps, "_exponential_of", "hyperbolic", doubled),
    (exponential_steps, "_chain_entry", "defective", doubled),
    (resolvent_steps, "_matrix", "even quartic", matrix_raised),
    (resolvent_steps, "_matrix", "named cubic", matrix_raised),
    (resolvent_steps, "_letter", "named cubic", other_index),
    (resolvent_steps, "_letter", "named cubic", same_index),
    (resolvent_steps, "_g", "named cubic", other_function),
    (resolvent_steps, "polynomial_formula", "named cubic", doubled),
    (spectrum_steps, "polynomial_formula", "circular", doubled),
    (spectrum_steps, "polynomial_formula", "named cubic", doubled),
    (spectrum_steps, "_factored", "defective", doubled),
    (spectrum_steps, "weighted", "circular", first_side_doubled),
    (spectrum_steps, "surd_matrix", "circular", matrix_raised),
    (spectrum_steps, "column", "circular", matrix_raised),
    (spectrum_steps, "_value", "single", value_changed),
    (spectrum_steps, "_value", "circular", value_changed),
    (spectrum_steps, "_value", "hyperbolic", value_changed),
    (spectrum_steps, "_decimal", "single", last_figure_changed),
    (spectrum_steps, "_decimal", "circular", last_figure_changed),
    (spectrum_steps, "_decimal", "hyperbolic", last_figure_changed),
    (spectrum_steps, "_decimal", "even quartic", last_figure_changed),
    (spectrum_steps, "constant_decimal", "named cubic", last_figure_changed),
    (spectrum_steps, "certified_decimal", "hyperbolic", last_figure_changed),
    (spectrum_steps, "isolating_interval", "named cubic", shifted_interval),
    (spectrum_steps, "isolating_interval", "named quartic", wide_interval),
    (abbreviations, "constant_decimal", "named cubic", last_figure_changed),
    (abbreviations, "polynomial_formula", "named cubic", doubled),
    (abbreviations, "polynomial_formula", "named quartic", doubled),
    (result_steps, "sampled", "mixed", table_changed),
    (result_steps, "sampled", "named cubic", table_changed),
    (result_steps, "exact_number", "circular", lambda _: lambda _time: "1/7"),
    (formulas, "weighted", "surd entries", first_side_doubled),
]


@pytest.mark.parametrize(
    ("module", "function", "kind", "fault"),
    [pytest.param(*case, id=f"{case[1]}, {case[2]}") for case in FAULTS],
)
def test_a_document_is_refused_when_what_prints_is_wrong(
    module: Any, function: str, kind: str, fault: Fault, monkeypatch: pytest.MonkeyPatch
) -> None:
    response = response_to(kind)
    record = verify(response)
    monkeypatch.setattr(module, function, fault(getattr(module, function)))
    with pytest.raises(StatementRefutedError):
        derive(response, record)


def test_nothing_is_written_when_a_statement_is_refuted(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(result_steps, "sampled", table_changed(result_steps.sampled))
    with pytest.raises(StatementRefutedError, match=r"value of x1 at .*printed is"):
        closedform.write_up(response_to("circular").model, into=tmp_path / "new")
    assert list(tmp_path.iterdir()) == []


def test_a_wrong_value_lost_in_the_matrix_exponential_is_refuted(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    response = saddle()
    record = verify(response)
    monkeypatch.setattr(result_steps, "sampled", last_changed(result_steps.sampled))
    with pytest.raises(StatementRefutedError, match="value of x1 at 100000"):
        derive(response, record)


# --- what is not settled is not issued -----------------------------------------------------


def too_wide(formula: Expression) -> Expression:
    """The same number, from two that are equal in their first 86000 bits."""
    large = Call("exp", Call("exp", number(11)))
    return Sum((formula, large, Negation(large)))


def test_a_statement_that_no_precision_settles_is_left_open() -> None:
    def widened(step: Step) -> Step:
        first, *others = step.statements
        symbol, formula = first.sides
        return replace(
            step, statements=(replace(first, sides=(symbol, too_wide(formula))), *others)
        )

    response = response_to("circular")
    with pytest.raises(UnprovedError, match="Left open: solution of state x1: not") as caught:
        prove_statements(response, steps_with("circular", "solution", widened), 6)
    assert caught.value.model == response.model.name
    assert caught.value.left_open == (
        Check("solution of state x1", "not attempted", "not settled by 16384 bits"),
    )


def test_a_statement_without_a_value_is_refuted() -> None:
    response = response_to("circular")
    root = Call("sqrt", number(-1))
    nothing = Quotient(root, Sum((root, Negation(root))))

    def emptied(step: Step) -> Step:
        return with_first(sides=(step.statements[0].sides[0], nothing))(step)

    steps = steps_with("circular", "solution", emptied)
    with pytest.raises(StatementRefutedError, match="it has no value, worked to 16384 bits"):
        prove_statements(response, steps, 6)


def test_a_value_that_no_way_settles_is_left_open() -> None:
    response = saddle()
    steps = tuple(build._steps(response, 6))
    formula = response.closed_forms.solution[1]
    wide = with_formula(response, "solution", 1, too_wide(formula))
    with pytest.raises(UnprovedError) as caught:
        prove_statements(wide, steps, 6)
    assert [check.item for check in caught.value.left_open] == ["value of x2 at 100000"]


def test_nothing_is_written_when_a_statement_is_left_open(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(statements, "_FIRST_BITS", 16)
    monkeypatch.setattr(statements, "_MOST_BITS", 16)
    model = closedform.system([[0, 1], [-5, -2]], initial=[1, 0])
    with pytest.raises(UnprovedError, match="not settled by 16 bits"):
        closedform.write_up(model, into=tmp_path / "new")
    assert list(tmp_path.iterdir()) == []


# --- faults in the steps themselves --------------------------------------------------------


def steps_with(kind: str, step: str, change: Callable[[Step], Step]) -> tuple[Step, ...]:
    steps = build._steps(response_to(kind), 6)
    return tuple(change(s) if s.kind == step else s for s in steps)


def without(says: str) -> Callable[[Step], Step]:
    return lambda step: replace(
        step, statements=tuple(s for s in step.statements if s.says != says)
    )


def with_facts(**facts: object) -> Callable[[Step], Step]:
    return lambda step: replace(step, facts={**step.facts, **facts})


def with_row(**cells: object) -> Callable[[Step], Step]:
    def change(step: Step) -> Step:
        first, *rows = step.facts["rows"]  # type: ignore[misc, attr-defined]
        return with_facts(rows=[{**first, **cells}, *rows])(step)

    return change


def with_first(**fields: object) -> Callable[[Step], Step]:
    def change(step: Step) -> Step:
        first, *others = step.statements
        return replace(step, statements=(replace(first, **fields), *others))  # type: ignore[arg-type]

    return change


def lost_first(step: Step) -> Step:
    return replace(step, statements=step.statements[1:])


CHANGES: list[tuple[str, str, Callable[[Step], Step]]] = [
    ("named cubic", "resolvent", without("expansion")),
    ("named cubic", "eigenvalues", with_row(multiplicity=2)),
    ("defective", "eigenvalues", with_row(index=2)),
    ("defective", "eigenvalues", with_row(blocks=(2, 1))),
    ("circular", "eigenvalues", with_row(meaning="real pair")),
    ("named cubic", "eigenvalues", with_facts(rows=[])),
    ("defective", "eigenvectors", with_facts(multiplicity=1)),
    ("defective", "eigenvectors", with_facts(**{"geometric multiplicity": 2})),
    ("defective", "eigenvectors", with_facts(eigenvalue=number(4))),
    ("defective", "eigenvectors", without("generalized eigenvector")),
    ("single", "eigenvectors", with_facts(numbers=(9,))),
    ("mixed", "model", with_first(sides=(Name("x1"), Name("x2")))),
    ("mixed", "solution", lost_first),
    ("mixed", "outputs", lost_first),
    ("mixed", "solution", with_first(relation="<")),
    ("named cubic", "named_roots", with_row(name=Name("nobody"))),
    ("named cubic", "named_roots", with_row(part="imaginary")),
    ("named cubic", "abbreviations", with_facts(rows=[])),
    ("named quartic", "abbreviations", with_row(at=number(3))),
    ("circular", "solution", with_first(sides=(Name("x1"), number(1)))),
]


@pytest.mark.parametrize(("kind", "step", "change"), CHANGES)
def test_wrong_facts_and_missing_statements_are_refused(
    kind: str, step: str, change: Callable[[Step], Step]
) -> None:
    steps = steps_with(kind, step, change)
    with pytest.raises((StatementRefutedError, LookupError)):
        prove_statements(response_to(kind), steps, 6)


def test_a_statement_that_nothing_proves_is_an_error_of_the_program() -> None:
    steps = steps_with("circular", "solution", with_first(says="rumour"))
    with pytest.raises(ValueError, match="nothing proves 'rumour'"):
        prove_statements(response_to("circular"), steps, 6)


# --- decimals and balls --------------------------------------------------------------------


@pytest.mark.parametrize(
    ("text", "value", "digits", "holds"),
    [
        ("0.333333", Fraction(1, 3), 6, True),
        ("0.333334", Fraction(1, 3), 6, False),
        ("0.5", Fraction(1, 2), 6, True),
        ("0.5", Fraction(5000001, 10**7), 6, True),
        ("0.5", Fraction(500001, 10**6), 6, False),
        ("0", Fraction(0), 6, True),
        ("0", Fraction(1, 10**30), 6, False),
        ("1.23e5", Fraction(123456), 3, True),
        ("1.24e5", Fraction(123456), 3, False),
        ("123456789", Fraction(123456789), 3, True),
        ("123456789", Fraction(123456788), 3, False),
    ],
)
def test_a_decimal_stands_for_half_a_unit_in_its_last_place(
    text: str, value: Fraction, digits: int, *, holds: bool
) -> None:
    with ctx.workprec(300):
        comparison = decimal_of("", text, acb(value.numerator) / value.denominator, digits)
        assert comparison.is_apart == (not holds)
        assert comparison.is_settled


def test_wide_balls_settle_nothing() -> None:
    wide = acb(arb(0, 1))
    comparison = Comparison("", wide, wide)
    assert not comparison.is_apart
    assert not comparison.is_settled
    nowhere = Comparison("", acb("nan"), acb(1))
    assert not nowhere.is_apart
    assert not nowhere.is_settled


def test_the_error_names_model_statement_and_reason_and_survives_pickling() -> None:
    error = StatementRefutedError("bench", "P P^(-1) = I, entry (1, 2)", "printed is 3, and true 0")
    assert isinstance(error, RefutedError)
    assert str(error).startswith("bench: ")
    assert "P P^(-1) = I, entry (1, 2): printed is 3, and true 0" in str(error)
    copy = pickle.loads(pickle.dumps(error))  # noqa: S301  our own bytes
    assert (type(copy), str(copy)) == (StatementRefutedError, str(error))
