"""Generated models are solved at usual values and on every exceptional set."""

from __future__ import annotations

from hypothesis import given, settings

from tests.parametric.generated import GeneratedModel, generated_models, points
from tests.parametric.record_reader import check_conditions, check_names, check_record
from tests.parametric.solving import record_of_mapping


@given(generated_models(largest=3))
@settings(max_examples=30)
def test_a_generated_model_is_solved_wherever_its_roots_meet(model: GeneratedModel) -> None:
    record = record_of_mapping(model.mapping)
    check_names(record)
    check_conditions(record)
    for _, values in points(model):
        assert check_record(record, values) >= 1


@given(generated_models(largest=3))
@settings(max_examples=10)
def test_two_runs_write_the_same_record(model: GeneratedModel) -> None:
    assert record_of_mapping(model.mapping) == record_of_mapping(model.mapping)
