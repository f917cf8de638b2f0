"""Greek letters are written out."""

from __future__ import annotations

import unicodedata

import pytest

from closedform.notation.greek import LETTERS, ascii_name


@pytest.mark.parametrize("letter", sorted(set(LETTERS) - set("µϑϕϵς")))
def test_each_letter_has_the_name_that_the_standard_gives_it(letter: str) -> None:
    _, case, _, name = unicodedata.name(letter).split()  # Unicode, "GREEK SMALL LETTER OMEGA"
    spelled = name.lower().replace("lamda", "lambda")
    assert LETTERS[letter] == (spelled if case == "SMALL" else spelled.capitalize())


def test_names_keep_what_follows_the_letter() -> None:
    assert ascii_name("ω_12") == "omega_12"
    assert ascii_name("x_ω"[:2]) == "x_"
    assert ascii_name("") == ""
