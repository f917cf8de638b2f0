"""A sound model with parameters as TOML text, for the tests to spoil."""

from __future__ import annotations

OSCILLATOR = """\
title = "Oscillator"
states = ["x", "v"]
matrix = [
  [0, 1],
  ["-k/m", "-c/m"],
]
initial = ["x0", 0]
conditions = ["c^2 < 4*k*m"]
[parameters.m]
assume = "positive"
value = 2
unit = "kg"
meaning = "mass"
[parameters.c]
assume = "nonnegative"
value = 1
[parameters.k]
assume = "positive"
value = 8
[parameters]
x0 = "real"
[outputs]
force = "k*x"
[abbreviations]
delta = "c/(2*m)"
[[values]]
label = "light"
c = 0
x0 = 1
[[values]]
m = "sqrt(2)"
x0 = "1/3"
"""


def spoiled(*changes: tuple[str, str]) -> str:
    """Return the model with pieces of text, each of which occurs once, replaced."""
    text = OSCILLATOR
    for old, new in changes:
        assert text.count(old) == 1, old
        text = text.replace(old, new)
    return text
