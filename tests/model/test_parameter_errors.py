"""Each error about parameters says its facts, keeps them, and survives pickling."""

from __future__ import annotations

import pickle

import pytest

from closedform.errors import Place
from closedform.model import parameter_errors as module
from closedform.model.errors import ModelError
from closedform.model.parameter_errors import (
    BrokenConditionError,
    ContradictionError,
    MissingValueError,
    NameHereError,
    NoParametersError,
    RestatedValueError,
    SettledConditionError,
    SubstitutionCycleError,
    TooManyParametersError,
    UnknownAssumptionError,
    UnknownParameterError,
    UnusedParameterError,
    ValueOutsideError,
)

HERE = Place("bench.toml", "some.key")
ERRORS: list[tuple[ModelError, str]] = [
    (BrokenConditionError(HERE, "a < b", (("a", "2"), ("b", "1"))), "for the values a = 2, b = 1;"),
    (ContradictionError(HERE, ("a > 0", "b > 0", "a < -b")), "'a > 0', 'b > 0' and 'a < -b';"),
    (ContradictionError(HERE, ("a^2 < 0",)), "no values satisfy 'a^2 < 0'; correct"),
    (MissingValueError(HERE, tuple("abcdefghij")), "no value for 'a', 'b', 'c', 'd', 'e', 'f'"),
    (
        NameHereError(HERE, "x", "a state"),
        "'x' is a state, and here only parameters may stand: the",
    ),
    (NameHereError(HERE, "d", "an abbreviation"), "from [abbreviations] to [substitute]"),
    (NoParametersError(HERE, restated=False), "declare each in a table of its own"),
    (NoParametersError(HERE, restated=True), "re-states every parameter, so none remains"),
    (RestatedValueError(HERE, "k", ("m", "w")), "so it takes no value; give values to 'm' and 'w'"),
    (RestatedValueError(HERE, "k", ()), "its formula is a number already"),
    (SettledConditionError(HERE, "1 < 2", holds=True), "'1 < 2' holds whatever the parameters are"),
    (SettledConditionError(HERE, "2 < 1", holds=False), "'2 < 1' holds for no values"),
    (SubstitutionCycleError(HERE, ("k", "k")), "'k' is re-stated by itself"),
    (SubstitutionCycleError(HERE, ("k", "m", "k")), "in a circle, k -> m -> k; re-state"),
    (TooManyParametersError(HERE, 41, 40), "there are 41 parameters, and at most 40 are read"),
    (
        UnknownAssumptionError(HERE, "big", None, ("real",)),
        "'big' is no assumption; a parameter is",
    ),
    (UnknownAssumptionError(HERE, "reel", "real", ("real",)), "did you mean 'real'?"),
    (
        UnknownParameterError(HERE, "q", None, ("a", "b")),
        "no parameter 'q'; the parameters are a, b",
    ),
    (UnknownParameterError(HERE, "q1", "q", ("q",)), "did you mean 'q'?"),
    (UnusedParameterError(HERE, "q", declared=True), "the parameter 'q' is used nowhere"),
    (UnusedParameterError(HERE, "q", declared=False), "'q' is re-stated, but it is neither"),
    (ValueOutsideError(HERE, "q", "-1", "positive"), "the value -1 of 'q' is not positive"),
]


@pytest.mark.parametrize(("error", "words"), ERRORS)
def test_the_text_names_the_place_and_the_facts(error: ModelError, words: str) -> None:
    text = str(error)
    assert text.startswith("bench.toml, some.key: ")
    assert words in text
    assert text.endswith((".", "?", "…"))


@pytest.mark.parametrize(("error", "words"), ERRORS)
def test_errors_survive_pickling(error: ModelError, words: str) -> None:
    again = pickle.loads(pickle.dumps(error))  # noqa: S301 - made here
    assert type(again) is type(error)
    assert again.__dict__ == error.__dict__
    assert words in str(again)


def test_all_errors_are_tested() -> None:
    assert {type(error).__name__ for error, _ in ERRORS} == set(module.__all__)
