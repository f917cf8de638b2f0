"""Typed mathematics: a second collection of lines, refusals with their places, bounds."""

from __future__ import annotations

import json
from collections.abc import Mapping
from fractions import Fraction
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.errors import Place
from closedform.notation.written.tree import (
    Array,
    Declared,
    Jet,
    Literal,
    Piecewise,
    PlusMinus,
    Range,
    Sum,
    Symbol,
)
from closedform.notation.written.typed_reader import LONGEST, read_typed
from closedform.notation.written.written_errors import NotReadError
from tests.notation.written.meaning import alike, declared_of, items, made, meant

Item = Mapping[str, Any]
COLLECTION = Path(__file__).with_name("typed_notation.json")
LINES: list[Item] = json.loads(COLLECTION.read_text(encoding="utf-8"))["items"]
TEXTS = [line["text"] for line in (*LINES, *items()) if "text" in line]
X = Declared(states=frozenset({"x"}), parameters=frozenset({"k", "m"}))


def name_of(line: Item) -> str:
    return f"{line['id']}: {line['text']}"


@pytest.mark.parametrize("line", LINES, ids=name_of)
def test_a_typed_line_means_what_it_says(line: Item) -> None:
    assert alike(made(line, read_typed(line["text"], declared_of(line))), meant(line))


@pytest.mark.parametrize("line", LINES, ids=name_of)
def test_only_doubtful_lines_are_called_so(line: Item) -> None:
    assert bool(read_typed(line["text"], declared_of(line)).ambiguities) == line["ambiguous"]


@pytest.mark.parametrize("line", [line for line in LINES if "units" in line], ids=name_of)
def test_a_typed_unit_is_kept(line: Item) -> None:
    statements = read_typed(line["text"], declared_of(line)).statements
    assert line["units"] in [statement.unit for statement in statements]


def test_a_number_keeps_its_last_place() -> None:
    forms = {
        "0.040": (Fraction(4, 100), Fraction(1, 1000), True),
        "12": (Fraction(12), Fraction(1), False),
        "1.2e-3": (Fraction(12, 10000), Fraction(1, 10000), True),
        "1.2*10^-3": (Fraction(12, 10000), Fraction(1, 10000), True),
        "1.2·10⁻³": (Fraction(12, 10000), Fraction(1, 10000), True),
        "2,50": (Fraction(5, 2), Fraction(1, 100), True),
        "12 000": (Fraction(12000), Fraction(1), False),
        "3e2": (Fraction(300), Fraction(100), True),
    }
    for text, (value, last, decimal) in forms.items():
        (found,) = read_typed(text).statements[0].members
        assert found == Literal(value, last, decimal), text
        assert isinstance(found, Literal)
        assert (found.start, found.end) == (0, len(text))


def test_a_declared_name_wins_over_its_customary_meaning() -> None:
    for name in ("e", "i", "u", "H", "delta", "I", "pi", "lim", "as", "for", "sin", "at"):
        declared = Declared(parameters=frozenset({name}))
        assert read_typed(f"{name} = 2", declared).statements[0].members[0] == Symbol(name)


def test_a_name_is_spelled_as_it_was_declared() -> None:
    declared = Declared(parameters=frozenset({"lamda", "x1", "varphi", "k_12"}))
    for text, name in {"λ": "lamda", "x₁": "x1", "x_1": "x1", "φ": "varphi", "k12": "k_12"}.items():
        assert read_typed(text, declared).statements[0].members == (Symbol(name),)


def test_statements_are_bounded_in_the_text() -> None:
    text = "x(0) = 1; x'(0) = 0"
    found = [text[s.start : s.end] for s in read_typed(text, X).statements]
    assert found == ["x(0) = 1", "x'(0) = 0"]


def test_conditions_units_and_notes_stand_beside_the_chain() -> None:
    (first,) = read_typed("x(t) -> 2 as t -> inf", X).statements
    assert [r.signs for r in first.conditions] == [("→",)]
    (second,) = read_typed("x = 3 m (steady value) for t >= 2", X).statements
    assert second.conditions == (Range((Symbol("t"), Literal(Fraction(2))), ("≥",)),)
    (third,) = read_typed("lambda = -2 (double)", X).statements
    assert "double" in third.note


def test_values_with_ranges_are_pieces_of_one() -> None:
    (found,) = read_typed("x(t) = t for t < 1; 1 otherwise", X).statements
    assert isinstance(found.members[-1], Piecewise)
    assert [ranges is None for _, ranges in found.members[-1].pieces] == [False, True]


def test_what_is_doubtful_names_both_ways_and_gives_the_other() -> None:
    declared = Declared(parameters=frozenset({"R", "C"}))
    reading = read_typed("t/RC", declared)
    (doubt,) = reading.ambiguities
    assert doubt.text == "/RC"
    assert doubt.chosen != doubt.other
    assert reading.others == (read_typed("(t/R)*C", declared).statements,)


def test_a_unit_that_is_declared_is_a_factor_unless_it_is_in_brackets() -> None:
    product = read_typed("x = 0.04 m", X)
    assert product.statements[0].unit == ""
    assert product.ambiguities[0].decided_by == "m"
    assert product.others[0][0].unit == "m"
    assert read_typed("x = 0.04 [m]", X).statements[0].unit == "m"


def test_signs_of_typed_text_have_their_trees() -> None:
    assert read_typed("1 ± 2").statements[0].members == (
        Sum((Literal(Fraction(1)), PlusMinus(Literal(Fraction(2))))),
    )
    assert read_typed("x'' ", X).statements[0].members == (Jet("x", 2),)
    (column,) = read_typed("(1, 2)^T").statements[0].members
    assert column == Array(((Literal(Fraction(1)),), (Literal(Fraction(2)),)))


REFUSED = {
    "": 1,
    "   ": 1,
    "2 +": 4,
    "(1 + t": 1,
    "1 + t)": 6,
    "sin": 1,
    "x = ∫ t dt": 5,
    "x = int_0^t t dt": 5,
    "2 $ 3": 3,
    "sqrt()": 5,
    "the value is 3": 1,
    "k' = 2": 1,
    "[1 2; 3]": 8,
    "atan2(1)": 8,
    "x^": 3,
    "[x; 2 x]' = 3": 9,
    "x = 1e99999999999": 5,
    "1 = = 2 )": 9,
    "x(t, 2)": 7,
    "|t": 1,
    "3 # 4": 3,
    "for t > 2": 1,
}


@pytest.mark.parametrize(("text", "column"), REFUSED.items(), ids=repr)
def test_a_refusal_says_where_and_what_to_do(text: str, column: int) -> None:
    with pytest.raises(NotReadError) as caught:
        read_typed(text, X, place=Place(file="notes.toml", key="claim"))
    assert (caught.value.place.line, caught.value.place.column) == (1, column)
    assert str(caught.value).startswith("notes.toml, claim, line 1, column")


def test_the_line_of_a_refusal_is_counted_from_where_the_text_begins() -> None:
    with pytest.raises(NotReadError) as caught:
        read_typed("x = 1\nx = )", X, place=Place(file="notes.toml", line=7, column=3))
    assert (caught.value.place.line, caught.value.place.column) == (8, 5)


@pytest.mark.parametrize(
    "text", ["(" * 3000 + "t" + ")" * 3000, "-" * 9000, "t^" * 3000 + "t", "sin " * 3000]
)
def test_deep_text_is_refused_and_nothing_breaks(text: str) -> None:
    with pytest.raises(NotReadError):
        read_typed(text)


def test_long_text_is_refused() -> None:
    with pytest.raises(NotReadError, match="characters"):
        read_typed("t + " * LONGEST)


@given(st.sampled_from(TEXTS), st.data())
def test_spoiled_text_is_read_or_refused_with_its_place(text: str, data: st.DataObject) -> None:
    for _ in range(data.draw(st.integers(1, 4))):
        at = data.draw(st.integers(0, len(text)))
        new = data.draw(st.sampled_from("()[]{}|,;:.'^*/+-= \n<>~±√²₁½°!%_πλetxdfor0∫#"))
        text = text[:at] + new + text[at + data.draw(st.integers(0, 1)) :]
    try:
        reading = read_typed(text, X)
    except NotReadError as error:
        assert error.place.line is not None
    else:
        assert reading.statements


@given(st.text(max_size=30))
def test_any_text_is_read_or_refused(text: str) -> None:
    try:
        read_typed(text, X)
    except NotReadError as error:
        assert error.place.line is not None
