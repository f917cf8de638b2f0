"""Each error of a driven model says its facts, keeps them, and survives pickling."""

from __future__ import annotations

import pickle
from types import ModuleType

import pytest

from closedform.errors import Place
from closedform.model.driven import initial_errors, reduction_errors
from closedform.model.driven.initial_errors import (
    ContradictoryInitialError,
    DerivativeGivenError,
    EarlyPointError,
    ImpulseValueError,
    NoInstantError,
    PointConstantError,
    PointCountError,
    PointInputError,
    PointJetError,
    SeveralInstantsError,
    UnusedInputError,
)
from closedform.model.driven.reduction_errors import (
    AbsentUnknownError,
    ContradictoryEquationsError,
    FewEquationsError,
    ForgottenInputError,
    ForgottenParameterError,
    HiddenConstraintError,
    ManyEquationsError,
    NoStateLeftError,
    RedundantEquationError,
    SingularEquationsError,
    listed_equations,
    listed_names,
)
from closedform.model.errors import ModelError

HERE = Place("bench.toml", "some.key")
ONE, TWO = (1, "x' = y"), (2, "2*x' = 2*y")
REDUCTION: list[tuple[ModelError, str]] = [
    (AbsentUnknownError(HERE, "x"), "'x' is among the states, but it stands in no equation"),
    (AbsentUnknownError(HERE, "x", "0*x = y'"), "'x' has the weight 0 in the equation '0*x = y''"),
    (
        FewEquationsError(HERE, 1, ("x", "F"), ("F",), ("F",)),
        (
            "there is 1 equation for 2 unknowns, 'x' and 'F'; 1 equation is missing: nothing "
            "determines 'F'; 'F' stands there without primes: declare in [parameters] or [inputs]"
        ),
    ),
    (
        FewEquationsError(HERE, 2, ("x", "y", "z", "w"), ("z", "w"), ()),
        (
            "there are 2 equations for 4 unknowns, 'x', 'y', 'z' and 'w'; 2 equations are missing: "
            "nothing determines 'z' and 'w'."
        ),
    ),
    (ManyEquationsError(HERE, 3, ("x",)), "3 equations for 1 unknown, 'x'; take 2 equations away"),
    (RedundantEquationError(HERE, TWO, (ONE,)), "it is a combination of equation 1, 'x' = y'"),
    (RedundantEquationError(HERE, (2, "0 = 0"), ()), "equation 2, '0 = 0', says 0 = 0; correct"),
    (
        ContradictoryEquationsError(HERE, (ONE, TWO), "0 = F"),
        (
            "equation 1, 'x' = y', and equation 2, '2*x' = 2*y' contradict each other: their "
            "unknowns cancel, and 0 = F is left"
        ),
    ),
    (
        ContradictoryEquationsError(HERE, (ONE,), "0 = F"),
        "equation 1, 'x' = y', has no unknown in it and says 0 = F",
    ),
    (
        SingularEquationsError(HERE, (ONE, TWO), ("x", "y")),
        "do not determine the unknowns: with their derivatives, one of them follows",
    ),
    (
        HiddenConstraintError(HERE, (ONE,), ("x", "y'")),
        "equation 1, 'x' = y', ties x, y' to each other, and the other equations need",
    ),
    (HiddenConstraintError(HERE, (ONE, TWO), ("x",)), "equation 2, '2*x' = 2*y', fix x, and"),
    (
        ForgottenParameterError(HERE, "k*x = y'", "k*x", ("k",)),
        "'k' in the term 'k*x' of the equation 'k*x = y'' is declared nowhere",
    ),
    (
        ForgottenParameterError(HERE, "k*c*x = y'", "k*c*x", ("k", "c")),
        "'k' and 'c' have no primes: declare them in [parameters], as k = \"positive\"",
    ),
    (
        ForgottenInputError(HERE, "y' = u(t - 1)", "u(t - 1)", "u"),
        "'u' in the term 'u(t - 1)' of the equation 'y' = u(t - 1)' is declared nowhere",
    ),
    (NoStateLeftError(HERE), "the equations leave no state"),
]
INITIAL: list[tuple[ModelError, str]] = [
    (
        ContradictoryInitialError(HERE, "v_1", "2", "3/2"),
        (
            "v_1 = 2 at the start contradicts the equations: from the other values it follows that "
            "v_1 = 3/2"
        ),
    ),
    (
        DerivativeGivenError(HERE, "x''", ("x", "x'")),
        "'x''' follows from the equations; take it away, and give 'x' and 'x''",
    ),
    (DerivativeGivenError(HERE, "i'", ()), "'i'' follows from the equations; take it away."),
    (
        ImpulseValueError(HERE, "y", "d", "1", output=False),
        "'y' follows at each instant from the states and from 'd', which strikes at 1",
    ),
    (ImpulseValueError(HERE, "y", "d", "1", output=True), "take the output away, and add an"),
    (EarlyPointError(HERE, "x(-1) = 0", "0"), "before the start of time, 0; set 'start'"),
    (NoInstantError(HERE, "x'"), "write it in brackets, as x'(0)"),
    (PointConstantError(HERE, "1 = 2"), "no unknown is left in '1 = 2'"),
    (PointCountError(HERE, 1, ("x", "x'")), "'at_points' has 1 condition, but there are 2 states"),
    (PointCountError(HERE, 2, ("x",)), "'at_points' has 2 conditions, but there is 1 state, 'x'"),
    (
        PointInputError(HERE, "i(0) = 1", ("u", "F'")),
        "about something in which u, F' stands itself",
    ),
    (PointJetError(HERE, "i'"), "'i'' holds the derivative of an input"),
    (SeveralInstantsError(HERE, "x(0) = x(1)", "0", "1"), "speaks of the instants 0 and 1, and a"),
    (UnusedInputError(HERE, "F"), "the input 'F' is used nowhere"),
]


@pytest.mark.parametrize(("error", "words"), [*REDUCTION, *INITIAL])
def test_the_text_names_the_place_and_the_facts(error: ModelError, words: str) -> None:
    assert str(error).startswith("bench.toml, some.key: ")
    assert words in str(error)
    assert str(error).endswith((".", "?", "…"))
    assert not str(error).endswith((" .", "..", ":."))


@pytest.mark.parametrize(("error", "words"), [*REDUCTION, *INITIAL])
def test_errors_survive_pickling(error: ModelError, words: str) -> None:
    again = pickle.loads(pickle.dumps(error))  # noqa: S301 - made here
    assert type(again) is type(error)
    assert again.__dict__ == error.__dict__
    assert words in str(again)


@pytest.mark.parametrize(
    ("module", "table"), [(reduction_errors, REDUCTION), (initial_errors, INITIAL)]
)
def test_all_errors_are_tested(module: ModuleType, table: list[tuple[ModelError, str]]) -> None:
    classes = {getattr(module, name) for name in module.__all__ if name.endswith("Error")}
    assert {type(error) for error, _ in table} == classes


def test_long_lists_are_cut() -> None:
    assert listed_names("abcdefghij") == "'a', 'b', 'c', 'd', 'e', 'f', 'g', 'h', …"
    equations = tuple((k, "x = y") for k in range(1, 9))
    assert listed_equations(equations).endswith("equation 4, 'x = y', …")
