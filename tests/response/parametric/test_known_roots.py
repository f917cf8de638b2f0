"""Factors whose roots are numbers: names for these, and for the amounts at them."""

from __future__ import annotations

import pytest
from flint import ctx

from closedform.notation.expression import names_in
from closedform.notation.plain import plain
from closedform.response.parametric.numbers import numbers_of
from closedform.response.parametric.points import case_points
from closedform.response.parametric.quantities import ResidueDefinition, RootDefinition
from closedform.verification.parametric.values import NamesAt
from tests.parametric.with_known_roots import MODELS, response_at_known_roots
from tests.parametric.with_pi import model_with_pi

each_model = pytest.mark.parametrize("name", MODELS)


@each_model
def test_the_regime_is_that_of_known_roots(name: str) -> None:
    case, *_ = response_at_known_roots(name).cases
    assert "known roots" in [mode.regime.kind for mode in case.modes]
    for mode in case.modes:
        names = [n for _, *both in mode.named_roots for n in both if n is not None]
        assert tuple(names) == mode.names or mode.regime.kind != "known roots"


def test_solutions_are_short() -> None:
    (case,) = response_at_known_roots("tuned to pi").cases
    assert plain(case.solution[0]) == (
        "exp(alpha_1*t)*(C_1*cos(omega_1*t) + C_2*sin(omega_1*t)) "
        "+ exp(alpha_2*t)*(C_3*cos(omega_2*t) + C_4*sin(omega_2*t))"
    )
    (case,) = response_at_known_roots("three masses").cases
    assert [plain(f) for f in case.solution[:2]] == [
        "q0*(C_1*cos(omega_1*t) + C_2*cos(omega_2*t) + C_3*cos(omega_3*t))",
        "-q0*(C_4*sin(omega_1*t) + C_5*sin(omega_2*t) + C_6*sin(omega_3*t))",
    ]
    (case,) = response_at_known_roots("cubic").cases
    assert plain(case.solution[0]).endswith(
        "exp(alpha*t)*(C_1*cos(omega*t) + C_2*sin(omega*t)) + C_3*exp(lambda*t)"
    )


@each_model
def test_every_name_is_defined_and_no_constant_is_zero(name: str) -> None:
    response = response_at_known_roots(name)
    for case in response.cases:
        defined = {q.name for q in case.quantities}
        used = frozenset().union(*map(names_in, case.solution))
        assert used <= defined | set(response.model.field.parameters) | {"t"}
        for point in case_points(response.model.field, case, 2):
            with ctx.workprec(300):
                balls = NamesAt(response.model, case, point).balls()
            for quantity in case.quantities:
                if isinstance(quantity.root, ResidueDefinition):
                    assert not balls[quantity.name].contains(0)


@each_model
def test_names_have_the_same_value_by_both_ways(name: str) -> None:
    """From the exact definition at values, and from isolated roots at a point."""
    response = response_at_known_roots(name)
    model = response.model
    given = MODELS[name].get("values", dict.fromkeys(model.field.free, "2"))
    valued = model_with_pi(**MODELS[name] | {"values": given})
    for row in numbers_of(type(response)(valued, *_rest(response)), digits=12):
        case = response.cases[row.case]
        (point, *_) = case_points(model.field, case, 1)
        with ctx.workprec(200):
            balls = NamesAt(model, case, point).balls()
        known = {q.name: q.root for q in case.quantities}
        for quantity in row.quantities:
            if isinstance(known[quantity.name], RootDefinition | ResidueDefinition):
                text = balls[quantity.name].str(12, radius=False)
                assert float(text) == pytest.approx(float(quantity.decimal), rel=1e-10)


def _rest(response: object) -> tuple[object, ...]:
    return tuple(
        getattr(response, name) for name in ("domain", "matrix", "initial", "branches", "cases")
    )


def test_the_text_of_a_response_tells_of_the_names_in_it_only() -> None:
    text = str(response_at_known_roots("two masses"))
    assert "C_16 is -2 times the imaginary part of r/(p' g) at root 2" in text
    assert "C_17 " not in text  # of the transition matrix
    assert "alpha_1 is the real part of root 4, by real part" in text
