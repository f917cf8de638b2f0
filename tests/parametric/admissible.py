"""Values that parameters may take: random ones, drawn until all conditions hold."""

from __future__ import annotations

import random
from collections.abc import Iterator, Mapping, Sequence
from fractions import Fraction

from tests.parametric.record_reader import holds, parameter_values

__all__ = ["ASSUMED", "assumed", "draws"]

ASSUMED = {
    "positive": "{} > 0",
    "nonnegative": "{} >= 0",
    "negative": "{} < 0",
    "nonzero": "{} != 0",
    "real": "true",
}
TRIES = 2000


def assumed(parameters: Mapping[str, str]) -> list[str]:
    """Return what is assumed of the parameters, as conditions."""
    return [ASSUMED[assume].format(name) for name, assume in parameters.items()]


def draws(
    parameters: Mapping[str, str], conditions: Sequence[str], count: int, seed: int = 0
) -> Iterator[dict[str, Fraction]]:
    """Yield `count` sets of rational values at which the assumptions and conditions hold.

    Raises ValueError if none is met with, as for a condition that is an equation.
    """
    source = random.Random(seed)
    wanted = [*assumed(parameters), *conditions]
    for _ in range(count):
        for _ in range(TRIES):
            values = {name: _drawn(source, assume) for name, assume in parameters.items()}
            if all(holds(text, parameter_values(values)) for text in wanted):
                yield values
                break
        else:
            raise ValueError(f"no values are found for {' and '.join(wanted)}")


def _drawn(source: random.Random, assume: str) -> Fraction:
    size = Fraction(source.randint(1, 40), source.choice((1, 2, 3, 5, 7, 8, 10)))
    size = size / source.choice((1, 4, 10))
    match assume:
        case "positive" | "nonnegative":
            return size
        case "negative":
            return -size
    return size * source.choice((-1, 1))
