"""Modes take the letters of the trade, and their names stand for the roots of their factor."""

from __future__ import annotations

import pytest
from flint import acb, ctx
from hypothesis import given

from closedform.response.parametric.case import Case
from closedform.response.parametric.modes import (
    modes_of,
    perfect_root,
    quantities_of,
    squares_of,
)
from closedform.response.parametric.points import case_points
from closedform.response.parametric.quantities import Letters, RootDefinition
from closedform.verification.parametric.values import NamesAt
from tests.rational_elements import element, elements, field_of
from tests.response.parametric.solved import MODELS, response_to

FIELD = field_of("a b c")


def roots_of(case: Case, known: dict[str, object], place: int) -> list[acb]:
    """The roots of one factor of a case from the names of its mode."""
    mode = case.modes[place]
    field = case.domain.field
    centre = acb(field.enclose_at(mode.factor.roots.centre, known))
    names = [acb(known[name]) for name in mode.names]
    i = acb(0, 1)
    if mode.frequency is not None:
        names = [acb(field.enclose_at(mode.frequency, known))]
    match mode.regime.kind:
        case "single":
            return [centre]
        case "double":
            return [centre, centre]
        case "circular":
            return [centre + i * names[0], centre - i * names[0]]
        case "hyperbolic":
            return [centre + names[0], centre - names[0]]
        case "decaying":
            return [-x for x in names]
        case "real roots":
            return names
        case "squares":
            turned = [
                w * i if s == "circular" else w
                for w, s in zip(names, mode.regime.signs, strict=True)
            ]
            return [centre + s * w for w in turned for s in (1, -1)]
        case "quartet":
            _, sigma, omega = names
            return [centre + s * sigma + t * i * omega for s in (1, -1) for t in (1, -1)]
        case _:
            root, sigma, omega = names
            return [root, sigma + i * omega, sigma - i * omega]


@pytest.mark.parametrize("name", MODELS)
def test_the_names_of_a_mode_make_the_roots_of_its_factor(name: str) -> None:
    """Their elementary symmetric functions are the coefficients."""
    ctx.prec = 200
    response = response_to(name)
    field = response.model.field
    for case in response.cases:
        for point in case_points(field, case, 2):
            known = NamesAt(response.model, case, point).balls()
            for place, mode in enumerate(case.modes):
                product = [acb(1)]  # highest first
                for root in roots_of(case, known, place):
                    moved = [acb(0), *(-root * c for c in product)]
                    product = [x + y for x, y in zip([*product, acb(0)], moved, strict=True)]
                assert len(product) == len(mode.factor.polynomial)
                for found, c in zip(product, mode.factor.polynomial, strict=True):
                    assert found.overlaps(acb(field.enclose_at(c, known)))


@pytest.mark.parametrize(
    ("name", "number", "letters"),
    [
        ("damped", 0, ("omega_d",)),
        ("damped", 1, ()),
        ("damped", 2, ("kappa",)),
        ("depot", 0, ("alpha", "beta")),
        ("compartments", 0, ("alpha", "beta", "gamma")),
        ("masses", 0, ("omega_1", "omega_2")),
        ("free masses", 0, ("omega_n",)),
        ("even quartic", 2, ("rho", "sigma", "omega")),
        ("apart", 0, ()),
    ],
)
def test_the_letters_are_those_of_the_trade(
    name: str, number: int, letters: tuple[str, ...]
) -> None:
    case = response_to(name).cases[number]
    assert tuple(n for mode in case.modes for n in mode.names) == letters


def test_letters_that_the_model_uses_are_left_to_it() -> None:
    response = response_to("damped")
    factors, regimes = response.branches[0].spectrum.factors, response.cases[0].regimes
    taken = modes_of(response.model.field, factors, regimes, Letters({"omega_d"}))
    assert taken[0].names != ("omega_d",)
    assert taken[0].names[0].startswith("omega_d")


def test_a_frequency_that_is_an_element_needs_no_name() -> None:
    case = response_to("restated").cases[0]
    (mode,) = case.modes
    assert (mode.names == ()) == (mode.frequency is not None)
    square = -mode.factor.roots.discriminant
    assert perfect_root(response_to("restated").model.field, square) == mode.frequency


@given(elements(FIELD))
def test_the_root_of_a_square_is_found_up_to_its_sign(e: object) -> None:
    root = perfect_root(FIELD, e**2)
    assert root in (e, -e)


@pytest.mark.parametrize("text", ["2", "-1", "a", "-a^2", "2*a^2", "a^2 + b^2", "a^3/b^2"])
def test_what_is_no_square_has_no_root(text: str) -> None:
    assert perfect_root(FIELD, element(FIELD, text)) is None


def test_places_of_rates_are_counted_from_the_slowest_decay() -> None:
    response = response_to("compartments")
    (mode,) = response.cases[0].modes
    found = quantities_of(response.model.field, response.model.field, mode)
    places = [q.definition.which for q in found if isinstance(q.definition, RootDefinition)]
    assert places == [3, 2, 1]
    assert all(q.positive for q in found)


def test_only_even_factors_have_squares() -> None:
    (mode,) = response_to("compartments").cases[0].modes
    with pytest.raises(TypeError, match="only even factors"):
        squares_of(mode.factor)
