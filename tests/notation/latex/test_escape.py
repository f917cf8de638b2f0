from __future__ import annotations

import re

import pytest
from hypothesis import given
from hypothesis import strategies as st

from closedform.notation.latex.escape import LONGEST_WORD, escaped

CASES = [
    ("plain words", "plain words"),
    ("50 % & more", r"50 \% \& more"),
    (r"\input{x}", r"\textbackslash{}input\{x\}"),
    ("a_b^c~d#e$f", r"a\_b\textasciicircum{}c\textasciitilde{}d\#e\$f"),
    ("ω = 3 µm", r"\ensuremath{\omega} = 3 \ensuremath{\mu}m"),
    ("Ä é ß ø", "Ä é ß ø"),
    ("漢", "[U+6F22]"),
    ("a\x00b\x07", "a[U+0000]b[U+0007]"),
    ("😀", "[U+1F600]"),
    ("e\u0301", "é"),
    ("one\n\n two\tthree\u00a0", "one two three"),
    ("<< x >>", r"\textless{}\textless{} x \textgreater{}\textgreater{}"),
    ("", ""),
]


@pytest.mark.parametrize(("text", "latex"), CASES)
def test_text_stands_for_itself(text: str, latex: str) -> None:
    assert escaped(text) == latex


def test_a_long_word_may_be_broken() -> None:
    assert r"\hspace{0pt}" in escaped("x" * (LONGEST_WORD + 1))
    assert r"\hspace{0pt}" not in escaped("x" * LONGEST_WORD)


@given(st.text())
def test_only_commands_of_the_table_come_out(text: str) -> None:
    latex = escaped(text)
    assert not re.search(r"(?<!\\)[%#&$_^](?!\{)", re.sub(r"\\ensuremath\{[^$]*?\}", "", latex))
    assert "\n" not in latex
    braces = re.sub(r"\\[{}]", "", latex)
    assert braces.count("{") == braces.count("}")
    commands = set(re.findall(r"\\([A-Za-z]+)", latex))
    assert not commands & {"input", "write", "openin", "csname", "catcode", "def"}
