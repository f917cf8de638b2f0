"""The letters that a write-up uses itself cannot stand for the time."""

from __future__ import annotations

import pytest

from closedform.model.building import system
from closedform.model.errors import UnusableNameError


@pytest.mark.parametrize("name", ["lambda", "lamda", "mu", "s", "p", "g", "r", "i"])
def test_a_letter_of_the_write_up_is_no_name_of_the_time(name: str) -> None:
    with pytest.raises(UnusableNameError, match=r"a write-up uses this letter .* 't' or 'tau'"):
        system([[-1]], initial=[1], time=name)


@pytest.mark.parametrize("name", ["t", "tau", "theta", "s_1", "z"])
def test_other_names_stand_for_the_time(name: str) -> None:
    assert system([[-1]], initial=[1], time=name).time == name
