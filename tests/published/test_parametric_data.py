"""The published formulas with parameters are right, by ball arithmetic and without the package."""

from __future__ import annotations

import pytest
from flint import ctx

from tests.parametric.plain_reader import PUBLISHED_FUNCTIONS, names_in, parse
from tests.parametric.record_reader import holds, parameter_values
from tests.published.parametric_checks import (
    CASES,
    CHECKS,
    ITEMS,
    BallAnswer,
    named,
    points,
    with_names,
)

BITS = 500


@pytest.mark.parametrize(("identifier", "number"), CASES)
def test_a_published_formula_is_that_of_its_matrix(identifier: str, number: int) -> None:
    item = ITEMS[identifier]
    check = item["checks"][number]
    with ctx.workprec(BITS):
        tried = list(points(item, check, 4))
        assert tried
        for values in tried:
            known = named(item, values)
            assert holds(with_names(item, check["condition"]), known)
            CHECKS[check["kind"]](item, check, BallAnswer(item, parameter_values(values)), known)


@pytest.mark.parametrize("identifier", ITEMS)
def test_an_item_is_a_model_and_says_where_it_is_from(identifier: str) -> None:
    item = ITEMS[identifier]
    assert item["source"]
    assert item["seen_at"]
    assert item["confirmed"] in (True, False)
    assert item["scope"]
    order = len(item["states"])
    assert [len(row) for row in item["matrix"]] == [order] * order
    assert len(item["initial"]) == order
    formulas = [text for row in (*item["matrix"], item["initial"]) for text in row]
    used = frozenset().union(*(names_in(parse(text, PUBLISHED_FUNCTIONS)) for text in formulas))
    assert used == set(item["parameters"])
    for values in item.get("exceptional", ()):
        assert set(values) == used
