"""Every starter model reads, responds and is proved."""

from __future__ import annotations

from pathlib import Path

import pytest

import closedform
from closedform.model.driven.model import DrivenModel

STARTERS = sorted((Path(__file__).parents[1] / "templates" / "starters").glob("*.toml"))


@pytest.mark.parametrize("path", STARTERS, ids=[path.stem for path in STARTERS])
def test_a_starter_is_read_and_its_response_proved(path: Path) -> None:
    model = closedform.load(path)
    assert model.name == path.stem
    assert model.title
    assert (model.stacked if isinstance(model, DrivenModel) else model).summary
    assert model.times
    record = closedform.verify(closedform.respond(model))
    assert record.holds


KINDS = {
    "three_equal_tanks": [(1, (3,))],
    "matched_resonators": [(2, (2,))],
    "coasting_shuttle": [(1, (3,))],
    "three_compartment_dose": [(3, (1,))],
    "critically_damped_mount": [(1, (2,))],
    "rc_ladder_ten": [(1, (1,)), (3, (1,)), (6, (1,))],
}


@pytest.mark.parametrize("name", KINDS)
def test_a_starter_shows_the_kind_of_spectrum_it_is_there_for(name: str) -> None:
    path = next(path for path in STARTERS if path.stem == name)
    factors = closedform.respond(closedform.load(path)).spectrum.factors
    assert sorted((f.degree, tuple(f.blocks)) for f in factors) == KINDS[name]


DRIVEN = {
    "driven_damped_oscillator": ("equations", 3, ["stable"] * 3),
    "fin_between_plates": ("equations", 1, ["not stable"]),
    "half_sine_push": ("equations", 1, ["not stable"]),
    "matrices_with_damping": ("second order", 1, ["stable"]),
    "dose_every_eight_hours": ("equations", 2, ["stable"] * 2),
    "pumped_cascade": ("equations", 1, ["stable"]),
    "sine_at_resonance": ("equations", 2, ["not stable"] * 2),
    "switched_ladder": ("equations", 1, ["stable"]),
}


@pytest.mark.parametrize("name", DRIVEN)
def test_a_driven_starter_shows_what_it_is_there_for(name: str) -> None:
    model = closedform.load(next(path for path in STARTERS if path.stem == name))
    assert isinstance(model, DrivenModel)
    solutions = closedform.respond(model).solutions
    verdicts = [solution.stability.verdict for solution in solutions]
    assert (model.form, len(solutions), verdicts) == DRIVEN[name]
