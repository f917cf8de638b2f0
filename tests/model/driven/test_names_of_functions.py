"""Names that people give to sources and angles, beside those of functions."""

from __future__ import annotations

import pytest

from closedform.model.building import model_from
from closedform.model.driven.model import DrivenModel
from closedform.model.errors import UnusableNameError


@pytest.mark.parametrize("equation", ["z' + z = E(t)", "z' + z = E", "E(t) = z' + z"])
def test_a_source_may_be_called_e_in_a_capital(equation: str) -> None:
    mapping = {
        "title": "Source",
        "equations": [equation],
        "initial": {"z": 0},
        "inputs": {"E": "sin(3*t)"},
    }
    model = model_from(mapping, name="source")
    assert isinstance(model, DrivenModel)
    assert model.unknowns == ("z",)
    assert [given.name for given in model.inputs] == ["E"]


def test_nothing_that_depends_on_the_time_has_the_name_of_the_impulse() -> None:
    driven = {
        "title": "Rudder",
        "equations": ["z' + z = delta(t)"],
        "initial": {"z": 0},
        "inputs": {"delta": "sin(3*t)"},
    }
    with pytest.raises(UnusableNameError, match="delta_1"):
        model_from(driven, name="rudder")
    for states in ({}, {"states": ["delta"]}):
        free = {"title": "R", "equations": ["delta' = 1"], "initial": {"delta": 1}, **states}
        with pytest.raises(UnusableNameError, match="delta_1"):
            model_from(free, name="rudder")


def test_a_parameter_may_be_called_delta() -> None:
    mapping = {
        "title": "Decay",
        "equations": ["z' + 2*delta*z = 3*delta(t - 1)"],
        "initial": {"z": 0},
        "parameters": {"delta": "positive"},
    }
    model = model_from(mapping, name="decay")
    assert isinstance(model, DrivenModel)
    assert len(model.inputs[0].signal.impulses) == 1


def test_matrices_of_first_order_need_no_mass() -> None:
    mapping = {
        "title": "Coupled coils",
        "states": ["i_1", "i_2"],
        "damping": [[3, 1], [1, 2]],
        "stiffness": [[5, 0], [0, 7]],
        "input_matrix": [[1], [0]],
        "initial": {"i_1": 0, "i_2": 0},
        "inputs": {"u": "12"},
    }
    model = model_from(mapping, name="coils")
    assert isinstance(model, DrivenModel)
    assert model.names == ("i_1", "i_2")
    field = model.field
    found = [
        [str(field.surds(e).as_fraction()) for e in row] for row in model.reduction.matrix.to_list()
    ]
    assert found == [["-2", "7/5"], ["1", "-21/5"]]
