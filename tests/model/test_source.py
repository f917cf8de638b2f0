"""Keys and entries are found in the text, or no line is claimed."""

from __future__ import annotations

import pytest

from closedform.errors import Place
from closedform.model.source import Source

TEXT = """\
title = "a"
states = [ "x1", # one, two
  'x2' ]
matrix = [[1, [2], "a,b"], # ] here
  [ 3, '''x
,''', {a = 1, b = 2}, 5 ], [6]
]
summary = '''
odd = 1
'''
"times" = [0]
twice = 1
[ outputs ]  # below
drift = "x1"
[initial]
x1 = 1
[other]
twice = 1
"""

PLACES = [
    ("title", 1, 9, '"a"'),
    ("states[1]", 2, 12, '"x1"'),
    ("states[2]", 3, 3, "'x2'"),
    ("matrix", 4, 10, "[[1"),
    ("matrix[1]", 4, 11, "[1"),
    ("matrix[1][2]", 4, 15, "[2]"),
    ("matrix[1][3]", 4, 20, '"a,b"'),
    ("matrix[2]", 5, 3, "[ 3"),
    ("matrix[2][2]", 5, 8, "'''x"),
    ("matrix[2][3]", 6, 7, "{a"),
    ("matrix[2][4]", 6, 23, "5"),
    ("matrix[3][1]", 6, 29, "6"),
    ("times[1]", 11, 12, "0"),
    ("outputs.drift", 14, 9, '"x1"'),
    ("initial.x1", 16, 6, "1"),
    ("twice", 12, 9, "1"),
    ("other.twice", 18, 9, "1"),
]


@pytest.mark.parametrize(("key", "line", "column", "start"), PLACES)
def test_an_entry_is_found(key: str, line: int, column: int, start: str) -> None:
    place = Source(Place("bench.toml"), TEXT).at(key)
    assert place == Place("bench.toml", key, line, column, TEXT.split("\n")[line - 1])
    assert place.excerpt is not None
    assert place.excerpt[column - 1 :].startswith(start)


@pytest.mark.parametrize("key", ["none", "outputs", "outputs.x1", "initial.drift", "nowhere.x1"])
def test_what_is_not_there_has_no_line(key: str) -> None:
    assert Source(Place("bench.toml"), TEXT).at(key) == Place("bench.toml", key)


def test_a_key_that_stands_twice_has_no_line() -> None:
    text = "summary = '''\ntitle = 1\n'''\ntitle = 2\n"
    assert Source(Place(), text).at("title") == Place(key="title")


def test_a_key_itself_is_found() -> None:
    source = Source(Place(), TEXT)
    assert (source.at_name("outputs.drift").line, source.at_name("outputs.drift").column) == (14, 1)
    assert (source.at_name("outputs").line, source.at_name("outputs").column) == (13, 3)
    assert source.at_name("none") == Place(key="none")


def test_without_a_text_places_name_keys_only() -> None:
    assert Source(Place(key="plant")).at("matrix[1][2]") == Place(key="plant.matrix[1][2]")


NESTED = """\
conditions = ["a < b",
  'b < c']
rows = [{label = "x", k = 1}, { "m" = [3, "4"], k=2 }]
parameters.q.assume = "real"
[parameters.k]  # stiffness
value = 3
[ parameters . "m" ]
assume = "positive"
value = 2
[parameters]
c = {assume = "positive", value = 4}
[[values]]
k = 1
[[values]]
k = 2
[values.inner]
k = 3
"""

INSIDE = [
    ("conditions[2]", 2, 3, "'b < c'"),
    ("parameters.k.value", 6, 9, "3"),
    ("parameters.m.value", 9, 9, "2"),
    ("parameters.c", 11, 5, "{assume"),
    ("parameters.c.value", 11, 35, "4"),
    ("parameters.q.assume", 4, 23, '"real"'),
    ("rows[2].m", 3, 39, "[3"),
    ("rows[2].m[2]", 3, 43, '"4"'),
    ("rows[2].k", 3, 51, "2"),
    ("values[1].k", 13, 5, "1"),
    ("values[2].k", 15, 5, "2"),
]


@pytest.mark.parametrize(("key", "line", "column", "start"), INSIDE)
def test_what_stands_in_a_table_of_tables_is_found(
    key: str, line: int, column: int, start: str
) -> None:
    place = Source(Place("bench.toml"), NESTED).at(key)
    assert place == Place("bench.toml", key, line, column, NESTED.split("\n")[line - 1])
    assert place.excerpt is not None
    assert place.excerpt[column - 1 :].startswith(start)


@pytest.mark.parametrize(
    "key", ["parameters.k.assume", "parameters.c.unit", "rows[1].m", "values[3].k", "values[1].m"]
)
def test_what_is_not_in_a_table_of_tables_has_no_line(key: str) -> None:
    assert Source(Place("bench.toml"), NESTED).at(key) == Place("bench.toml", key)


HEADINGS = [
    ("parameters.k", 5, 13),
    ("parameters.m", 7, 16),
    ("parameters.c", 11, 1),
    ("parameters.c.value", 11, 27),
    ("values[2]", 14, 3),
    ("values", 12, 3),
    ("parameters.q.assume", 4, 1),
]


@pytest.mark.parametrize(("key", "line", "column"), HEADINGS)
def test_a_heading_is_found(key: str, line: int, column: int) -> None:
    place = Source(Place("bench.toml"), NESTED).at_name(key)
    assert (place.line, place.column) == (line, column)
