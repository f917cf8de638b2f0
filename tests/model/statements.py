"""A sound model as TOML text, for the tests to spoil."""

from __future__ import annotations

from pathlib import Path

BENCH = """\
title = "Two carts"
states = ["x1", "x2"]
matrix = [
  [0, 1],  # a comment, with "[1, 2]"
  [-2, -0.1],
]
initial = [1, 0]
"""


def spoiled(old: str, new: str) -> str:
    """Return the model with one piece of text, which occurs once, replaced."""
    assert BENCH.count(old) == 1
    return BENCH.replace(old, new)


def written(folder: Path, text: str | bytes, name: str = "bench.toml") -> Path:
    """Write a model file and return its path."""
    path = folder / name
    path.write_bytes(text.encode() if isinstance(text, str) else text)
    return path
