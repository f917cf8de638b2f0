"""Where two formulas are compared: points spread over their own scales of time."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from fractions import Fraction

from flint import acb, arb, fmpq

from closedform.checking.balls.enclosing import Quantities, enclose_written
from closedform.notation.written.tree import (
    EULER,
    Apply,
    Literal,
    Power,
    Symbol,
    Written,
    walk,
)

__all__ = ["Between", "Point", "Samples", "exact_rates", "points"]

Point = dict[str, acb]
"""A value for each variable."""
Between = Mapping[str, tuple[Fraction, Fraction | None]]
"""The ends of the interval on which formulas are compared; 0 and None if not given."""
Samples = Sequence[Mapping[str, Written]]
"""Values of parameters that go together."""

_WAVES = frozenset({"exp", "sin", "cos", "tan", "sinh", "cosh", "tanh"})
_SLOWEST = Fraction(1, 2**20)
_SPREAD = Fraction(649, 1050)
"""Near the golden section: its multiples modulo 1 spread evenly."""


def points(
    trees: Sequence[Written],
    variables: Sequence[str],
    names: Quantities,
    count: int,
    between: Between,
    samples: Samples,
) -> list[Point]:
    """Return `count` points at which formulas differ visibly if they differ; one without variables.

    A variable goes from a fraction of the shortest time constant or angle of the formulas to
    some of the longest, but not so far that a change of a printed frequency by some last
    places turns the phase.  Parameters take the values of `samples` in turn, if there are any.
    """
    used = {part.name for tree in trees for part in walk(tree) if isinstance(part, Symbol)}
    fixed = _fixed(samples)
    start, free = _start(variables, between, fixed)
    if not used & {*variables, *(n for n, f in names.formulas if f is not None)}:
        count = 1
    scales = {v: _range(trees, v, names, start, between) for v in free}
    found: list[Point] = []
    for j in range(count):
        point: Point = dict(fixed[j % len(fixed)]) if fixed else {}
        for k, v in enumerate(free):
            lowest, highest = scales[v]
            share = (_SPREAD * (j + 1) * (k + 1) + Fraction(k, 3)) % 1
            if k == 0:
                share = (j + share / 2) / count
            step = lowest * (highest / lowest) ** _real(share)
            point[v] = acb(_low(between, v) + step.mid())
        found.append(point)
    return found


def exact_rates(
    tree: Written, variables: Sequence[str], names: Quantities, between: Between, samples: Samples
) -> list[arb]:
    """Return the rates of decay or growth and the angular frequencies of a formula, unsigned."""
    start, free = _start(variables, between, _fixed(samples))
    found: list[arb] = []
    for variable in free:
        for slope, _ in _slopes(tree, variable, names, start):
            found += [abs(part).mid() for part in (slope.real, slope.imag) if not part.is_zero()]
    return found


def _fixed(samples: Samples) -> list[Point]:
    return [{k: enclose_written(v, {}) for k, v in sample.items()} for sample in samples]


def _start(
    variables: Sequence[str], between: Between, fixed: Sequence[Point]
) -> tuple[Point, list[str]]:
    """A first point, and the variables that no samples fix."""
    sample = fixed[0] if fixed else {}
    free = [v for v in variables if v not in sample]
    return {**{v: acb(_low(between, v) + 1) for v in free}, **sample}, free


def _real(value: Fraction) -> arb:
    return arb(fmpq(value.numerator, value.denominator))


def _low(between: Between, variable: str) -> arb:
    return _real(between[variable][0]) if variable in between else arb(0)


def _range(
    trees: Sequence[Written], variable: str, names: Quantities, start: Point, between: Between
) -> tuple[arb, arb]:
    """The smallest and the largest step from the lower end."""
    rates: list[tuple[arb, Fraction]] = []
    for tree in trees:
        rates += [(abs(s).mid(), doubt) for s, doubt in _slopes(tree, variable, names, start)]
    lowest, highest = arb(0.25), arb(3)
    if rates:
        fastest = max((rate for rate, _ in rates), key=lambda r: r.mid())
        slowest = min(
            (rate for rate, _ in rates if rate > fastest * _real(_SLOWEST)), key=lambda r: r.mid()
        )
        doubt = max((rate * _real(share) for rate, share in rates), key=lambda r: r.mid())
        lowest = 1 / (4 * fastest)
        highest = (2 / fastest).max((3 / slowest).min(1 / doubt) if doubt > 0 else 3 / slowest)
    end = between[variable][1] if variable in between else None
    if end is not None:
        width = _real(end) - _low(between, variable)
        highest = highest.min(width)
        lowest = lowest.min(highest / 8)
    return lowest.mid(), highest.mid()


def _slopes(
    tree: Written, variable: str, names: Quantities, start: Point
) -> Iterator[tuple[acb, Fraction]]:
    """Yield how fast each exponent and angle grows, and the doubt that its digits leave."""
    ends: list[dict[str, arb | acb | list[list[acb]]]] = []
    for node in walk(tree):
        match node:
            case Apply(function, (inner,)) if function in _WAVES:
                argument = inner
            case Power(base, exponent) if base == EULER:
                argument = exponent
            case _:
                continue
        if not ends:
            later = {**start, variable: start[variable] + 1}
            ends = [names.environment(point) for point in (start, later)]
        first, second = (enclose_written(argument, environment) for environment in ends)
        slope = second - first
        if slope.is_finite() and abs(slope) > 0:
            yield slope, _doubt(argument)


def _doubt(argument: Written) -> Fraction:
    """Twice the largest share that a unit in the last place has in a printed decimal."""
    shares = (
        2 * part.last_place / max(part.value, part.last_place)
        for part in walk(argument)
        if isinstance(part, Literal) and part.is_decimal
    )
    return max(shares, default=Fraction(0))
