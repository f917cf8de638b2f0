"""Whether what was written equals what is true: exactly, to the digits shown, or not at all."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from typing import Literal as OneOf

from flint import acb, arb, ctx

from closedform.algebra.elementary import Element, NotElementaryError
from closedform.checking.balls.enclosing import NoValueError, Quantities
from closedform.checking.digits import DigitsMatch, largest_difference, match_digits, told
from closedform.checking.errors import NotJudgedError
from closedform.checking.standing.ground import SPECTRAL, Ground
from closedform.checking.values.exact import exact
from closedform.checking.values.matrices import ExactMatrix
from closedform.checking.values.scope import Scope, Value
from closedform.checking.values.spread import spread
from closedform.checking.values.written_back import written_back
from closedform.notation.written.tree import Array, Literal, Symbol, Written, walk

__all__ = ["Comparison", "compare"]


@dataclass(frozen=True, slots=True)
class Comparison:
    """How a member of a chain stands to the value that it ought to have.

    `how` is equal; digits: equal to the digits shown; rounding: of the right form with digits
    that are off by what rounding on the way explains; different.  `reason` tells it.
    `entry` is where a matrix differs first, counted from 1; `true` is the true value.
    """

    how: OneOf["equal", "digits", "rounding", "different"]
    reason: str = ""
    entry: tuple[int, int] | None = None
    wrong: tuple[tuple[int, int], ...] = ()
    match: DigitsMatch | None = None

    @property
    def passes(self) -> bool:
        """Whether the member may stand."""
        return self.how in ("equal", "digits")


def compare(
    claimed: Written,
    true: Value,
    scope: Scope,
    ground: Ground,
    *,
    approximate: bool = False,
) -> Comparison:
    """Return how a formula stands to a true value, a number, a function or a matrix.

    Raises:  NotJudgedError where neither exact algebra nor balls decide.
    """
    true = _single(true)
    try:
        value = _single(exact(claimed, scope))
    except NotElementaryError as error:
        return _by_digits(claimed, true, ground, unless=str(error), approximate=approximate)
    except ZeroDivisionError:
        return Comparison("different", "it divides by zero")
    value, true = _zeros(value, true)
    shapes = _shape(value), _shape(true)
    if shapes[0] != shapes[1]:
        own, wanted = map(_size_text, shapes)
        return Comparison("different", f"it is {own}, and ought to be {wanted}")
    different = _differing(value, true)
    if not different:
        return Comparison("equal")
    if ground.enclosed:
        _demand_difference(value, true, different[0], ground)
    if has_decimals(claimed) or approximate:
        found = _by_digits(claimed, true, ground, unless="", approximate=approximate)
        if found.how != "different":
            return found
        wrong = _wrong_entries(found.match, true) or different
        return Comparison("different", found.reason, wrong[0], wrong, found.match)
    return Comparison("different", "", different[0], different)


def _zeros(value: Value, true: Value) -> tuple[Value, Value]:
    """Return two values, the number 0 as the matrix of zeros where the other is a matrix."""
    if isinstance(value, ExactMatrix) and isinstance(true, Element) and true.is_zero:
        return value, value.scaled(true)
    if isinstance(true, ExactMatrix) and isinstance(value, Element) and value.is_zero:
        return true.scaled(value), true
    return value, true


def _single(value: Value) -> Value:
    """Return the entry of a matrix of one row and column, as of a model with one state."""
    if isinstance(value, ExactMatrix) and value.shape == (1, 1):
        return value.rows[0][0]
    return value


def _demand_difference(value: Value, true: Value, entry: tuple[int, int], ground: Ground) -> None:
    """Make sure that two values differ in which names stand for roots without a formula.

    The algebra takes such names for free; only balls tell that the numbers differ.
    Raises:  NotJudgedError if the balls do not, at the finest precision.
    """
    i, j = entry
    difference = (
        value.rows[i - 1][j - 1] - true.rows[i - 1][j - 1]
        if isinstance(value, ExactMatrix) and isinstance(true, ExactMatrix)
        else _difference(value, true)
    )
    for bits in FINER:
        with ctx.workprec(bits):
            names = ground.sampled()
            points = [acb(arb(k) / 7, arb(k) / 11) for k in (1, 3, 8)]
            if any(difference.enclosure(p, names | _elsewhere(p)) != 0 for p in points):
                return
    raise NotJudgedError("roots of degree three and more make it undecided")


MOST_DECIMALS = 24
FINER = (64, 512, 4096)


def _elsewhere(point: acb) -> dict[str, arb]:
    """Return a value for the spectral variable."""
    return {SPECTRAL: point.real}


def _difference(value: Value, true: Value) -> Element:
    if isinstance(value, ExactMatrix) or isinstance(true, ExactMatrix):
        raise NotJudgedError("a number stands where a matrix is wanted, or the other way round")
    return value - true


def has_decimals(tree: Written) -> bool:
    """Whether a formula has printed decimals, which may be rounded."""
    return any(isinstance(node, Literal) and node.is_decimal for node in walk(tree))


def _by_digits(
    claimed: Written, true: Value, ground: Ground, *, unless: str, approximate: bool
) -> Comparison:
    """Compare by the printed digits; without any, `unless` is why equality is not decided.

    That they differ is decided all the same where balls show it at an instant.
    """
    if not (has_decimals(claimed) or approximate):
        if _is_apart(claimed, true, ground):
            return Comparison("different")
        raise NotJudgedError(unless)
    pairs = _pairs(claimed, true)
    for one, _ in pairs:
        if sum(isinstance(n, Literal) and n.is_decimal for n in walk(one)) > MOST_DECIMALS:
            raise NotJudgedError(f"more than {MOST_DECIMALS} decimals in one formula")
    variables = sorted(
        {n.name for pair in pairs for tree in pair for n in walk(tree) if isinstance(n, Symbol)}
        - set(ground.enclosed)
    )
    match = match_digits(
        pairs,
        variables,
        ground.quantities,
        approximate=approximate,
        between=ground.between,
        samples=ground.truth.samples,
    )
    if match.kind == "right":
        return Comparison("digits", told(match), match=match)
    if match.kind == "rounding":
        return Comparison("rounding", told(match), match=match)
    return Comparison("different", told(match), match=match)


def _is_apart(claimed: Written, true: Value, ground: Ground) -> bool:
    """Whether two formulas have different values at an instant, for one choice of parameters."""
    time = ground.facts.time
    start, end = ground.between.get(time, (Fraction(0), None))
    length = Fraction(1) if end is None else end - start
    instants = [start + length * Fraction(k, 7) for k in (2, 3, 5)]
    try:
        found = largest_difference(
            _pairs(claimed, true), time, instants, Quantities((), ground.sampled)
        )
    except NoValueError:
        return False
    return found is not None


def _wrong_entries(match: DigitsMatch | None, true: Value) -> tuple[tuple[int, int], ...]:
    """Return the entries of a matrix, counted from 1, whose digits are wrong."""
    if match is None or not isinstance(true, ExactMatrix):
        return ()
    pairs = [found.pair for found in match.wrong]
    pairs += [match.pair] if match.pair is not None else []
    width = true.shape[1]
    return tuple((pair // width + 1, pair % width + 1) for pair in dict.fromkeys(pairs))


def _pairs(claimed: Written, true: Value) -> tuple[tuple[Written, Written], ...]:
    if isinstance(true, Element):
        while isinstance(claimed, Array) and len(claimed.rows) == len(claimed.rows[0]) == 1:
            claimed = claimed.rows[0][0]
        return ((claimed, written_back(true)),)
    rows = spread(claimed)
    if rows is None:
        raise NotJudgedError("its entries are not written one by one")
    return tuple(
        (one, written_back(other))
        for row, truth in zip(rows, true.rows, strict=True)
        for one, other in zip(row, truth, strict=True)
    )


def _shape(value: Value) -> tuple[int, int] | None:
    return value.shape if isinstance(value, ExactMatrix) else None


def _size_text(shape: tuple[int, int] | None) -> str:
    return "a single number" if shape is None else f"{shape[0]} by {shape[1]}"


def _differing(value: Value, true: Value) -> tuple[tuple[int, int], ...]:
    """Return the places, counted from 1, in which two values of one shape differ."""
    if isinstance(value, Element) or isinstance(true, Element):
        assert isinstance(value, Element)  # noqa: S101  shapes are equal
        assert isinstance(true, Element)  # noqa: S101  likewise
        return () if (value - true).is_zero else ((1, 1),)
    return tuple(
        (i + 1, j + 1)
        for i, (row, truth) in enumerate(zip(value.rows, true.rows, strict=True))
        for j, (one, other) in enumerate(zip(row, truth, strict=True))
        if not (one - other).is_zero
    )
