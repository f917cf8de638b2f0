"""Printed decimals held against exact formulas: which number stands for what, and how well."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Literal as OneOf

from closedform.checking.balls.enclosing import Quantities
from closedform.checking.digits.instants import Between, Samples
from closedform.checking.digits.rounding import Judged, decimal_text
from closedform.checking.digits.search import Setting, found_numbers, is_rounding
from closedform.notation.written.tree import Symbol, Written, changed

__all__ = ["DigitsMatch", "Kind", "match_digits", "told", "value_digits", "value_from_rounded"]

Kind = OneOf["right", "rounding", "wrong", "none"]
_NO_NAMES = Quantities()


@dataclass(frozen=True, slots=True)
class DigitsMatch:
    """What was found about the printed numbers of some formulas.

    `kind` is "right" if every number is the exact one, rounded as shown; "rounding" if some
    are not, but each of these is within 3 units of its last place, or within 2 % of the exact
    value and within 300 units, which rounding on the way explains; "wrong" if the formula is
    right only with quite other numbers; "none" if no real numbers were found that make it so.
    `judged` are the numbers in the order in which they stand, empty for "none", when `pair`
    says which formula does not fit.
    """

    kind: Kind
    judged: tuple[Judged, ...] = ()
    pair: int | None = None

    @property
    def wrong(self) -> tuple[Judged, ...]:
        """The numbers that are not right."""
        return tuple(j for j in self.judged if j.verdict != "right")


def match_digits(
    pairs: Sequence[tuple[Written, Written]],
    variables: Sequence[str] = (),
    names: Quantities = _NO_NAMES,
    *,
    approximate: bool = False,
    between: Between | None = None,
    samples: Samples = (),
) -> DigitsMatch:
    """Return which exact numbers the decimals of claimed formulas stand for.

    Each pair is a claimed formula and the true one, numbers both, to be the same function of
    the variables.  Every decimal of the claimed one is an unknown real number, sought from the
    printed value on; if that finds them not all right and the line is `approximate`, integers
    are unknown too.  Numbers that do not matter keep their printed values, and so do all but
    one of those of which only a product or the like is determined: the one with most digits
    gives way.  `between` are ends of intervals for variables (0 and infinity if not given),
    `samples` values of parameters among them.

    That the formulas are the same is seen at more points than there are unknowns, to 100 bits.
    Raises:  NoValueError where a formula has no value as a number.
    """
    setting = Setting(variables, names, between or {}, samples)
    numbers: list[Judged] = []
    for index, (claimed, true) in enumerate(pairs):
        found = found_numbers(claimed, true, setting, integers=False, pair=index)
        if approximate and (found is None or any(j.verdict != "right" for j in found)):
            wider = found_numbers(claimed, true, setting, integers=True, pair=index)
            if found is None or (wider is not None and all(j.verdict == "right" for j in wider)):
                found = wider
        if found is None:
            return DigitsMatch("none", pair=index)
        numbers += found
    if all(j.verdict == "right" for j in numbers):
        return DigitsMatch("right", tuple(numbers))
    return DigitsMatch("rounding" if all(map(is_rounding, numbers)) else "wrong", tuple(numbers))


def value_digits(
    claimed: Written,
    true: Written,
    names: Quantities = _NO_NAMES,
    *,
    approximate: bool = False,
) -> DigitsMatch:
    """Return the match of one number, real or complex, with the exact one."""
    return match_digits(((claimed, true),), (), names, approximate=approximate)


def value_from_rounded(
    formula: Written,
    at: Mapping[str, Written],
    shown: Written,
    names: Quantities = _NO_NAMES,
) -> bool:
    """Whether a formula with its numbers as printed, rounded, gives the digits shown.

    `at` gives its variables, such as the time.
    """

    def inserted(node: Written) -> Written | None:
        return at.get(node.name) if isinstance(node, Symbol) else None

    match = value_digits(shown, changed(formula, inserted), names, approximate=True)
    return match.kind == "right"


def told(match: DigitsMatch) -> str:
    """Return what is to be said of each number that is not right; empty if there is none."""
    return "; ".join(map(_told, match.wrong))


def _told(found: Judged) -> str:
    literal = found.literal
    printed = decimal_text(int(literal.value / literal.last_place), literal.last_place)
    exact = found.exact if found.ends else f"{found.exact}…"
    if found.correct == f"-{printed}":
        return f"{printed} has the wrong sign"
    how = {
        "truncated": "cut off where it is to be rounded: ",
        "last place": "",
        "off": "",
        "right": "",
    }[found.verdict]
    return f"{printed} → {found.correct} ({how}exact value {exact})"
