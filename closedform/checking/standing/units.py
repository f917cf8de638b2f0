"""Printed units against those that the model file names: kN/m for N/m, ms for s, percent."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from fractions import Fraction

from closedform.checking.claim import Claim, Group
from closedform.notation.written.tree import Literal, Negation, Product, Symbol, Written

__all__ = [
    "Unit",
    "in_base_units",
    "in_model_units",
    "other_time_unit",
    "read_unit",
    "seconds_in_time",
]

PREFIXES = {"": 0, "k": 3, "M": 6, "G": 9, "d": -1, "c": -2, "m": -3, "µ": -6, "μ": -6, "u": -6}
PREFIXES |= {"n": -9, "p": -12}
BASES: dict[str, tuple[Fraction, dict[str, int]]] = {
    "m": (Fraction(1), {"m": 1}),
    "g": (Fraction(1, 1000), {"kg": 1}),
    "s": (Fraction(1), {"s": 1}),
    "A": (Fraction(1), {"A": 1}),
    "K": (Fraction(1), {"K": 1}),
    "mol": (Fraction(1), {"mol": 1}),
    "Hz": (Fraction(1), {"Hz": 1}),
    "N": (Fraction(1), {"kg": 1, "m": 1, "s": -2}),
    "Pa": (Fraction(1), {"kg": 1, "m": -1, "s": -2}),
    "J": (Fraction(1), {"kg": 1, "m": 2, "s": -2}),
    "W": (Fraction(1), {"kg": 1, "m": 2, "s": -3}),
    "C": (Fraction(1), {"A": 1, "s": 1}),
    "V": (Fraction(1), {"kg": 1, "m": 2, "s": -3, "A": -1}),
    "Ω": (Fraction(1), {"kg": 1, "m": 2, "s": -3, "A": -2}),
    "ohm": (Fraction(1), {"kg": 1, "m": 2, "s": -3, "A": -2}),
    "F": (Fraction(1), {"kg": -1, "m": -2, "s": 4, "A": 2}),
    "H": (Fraction(1), {"kg": 1, "m": 2, "s": -2, "A": -2}),
    "L": (Fraction(1, 1000), {"m": 3}),
    "l": (Fraction(1, 1000), {"m": 3}),
}
WHOLE: dict[str, tuple[Fraction, dict[str, int]]] = {
    "min": (Fraction(60), {"s": 1}),
    "h": (Fraction(3600), {"s": 1}),
    "d": (Fraction(86400), {"s": 1}),
    "t": (Fraction(1000), {"kg": 1}),
    "rad": (Fraction(1), {}),
    "1": (Fraction(1), {}),
    "%": (Fraction(1, 100), {}),
}
"""Units that take no prefix (SI Brochure, 9th edition, tables 7 and 8)."""
PART = re.compile(r"([A-Za-zµμΩ%]+|1)(?:\^?\{?([-−]?\d+)\}?)?")


@dataclass(frozen=True, slots=True)
class Unit:
    """A unit in base units: so many times the product of powers of these."""

    factor: Fraction
    powers: tuple[tuple[str, int], ...]


def read_unit(text: str) -> Unit | None:
    """Return a unit such as kN/m, N*s/m or min^-1; None for what is not known or ambiguous.

    >>> read_unit("ms")
    Unit(factor=Fraction(1, 1000), powers=(('s', 1),))
    """
    factor, powers = Fraction(1), Counter[str]()
    above, *below = text.strip().split("/")
    groups = [(1, above), *((-1, group) for group in below)]
    for sign, group in groups:
        parts = re.split(r"[\s*·⋅.]+", group.strip().strip("()"))
        if sign < 0 and len(parts) > 1 and not group.strip().startswith("("):
            return None
        for part in parts:
            found = PART.fullmatch(part)
            own = _single(found[1]) if found else None
            if found is None or own is None:
                return None
            exponent = sign * int((found[2] or "1").replace("−", "-"))
            factor *= own[0] ** exponent
            for base, power in own[1].items():
                powers[base] += exponent * power
    return Unit(factor, tuple(sorted((b, p) for b, p in powers.items() if p)))


def _single(name: str) -> tuple[Fraction, dict[str, int]] | None:
    if name in WHOLE:
        return WHOLE[name]
    for prefix, power in PREFIXES.items():
        rest = name.removeprefix(prefix)
        if name.startswith(prefix) and rest in BASES:
            factor, powers = BASES[rest]
            return factor * Fraction(10) ** power, powers
    return None


def seconds_in_time(units: Mapping[str, str]) -> Fraction | None:
    """Return the unit of time of a model in seconds, as the units of its parameters tell it.

    That is a unit of time that is named in them, if it is one only; or the second, where all
    are coherent units of the SI and time is in one of them.
    """
    named = {
        own[0]
        for text in units.values()
        for found in PART.finditer(text)
        if (own := _single(found[1])) is not None and own[1] == {"s": 1}
    }
    if named:
        return named.pop() if len(named) == 1 else None
    read = [read_unit(text) for text in units.values() if text]
    known = [unit for unit in read if unit is not None]
    coherent = len(known) == len(read) and all(unit.factor == 1 for unit in known)
    timed = any(base == "s" for unit in known for base, _ in unit.powers)
    return Fraction(1) if coherent and timed else None


INSTANT = re.compile(r"\(([^()]{0,80})\)[^=≈~]{0,40}(?:=|≈|~|\\approx|\\simeq)")
TIME_UNIT = re.compile(r"(?<![A-Za-z])([munµ]?s|min|h|d|a)(?![A-Za-z])")


def other_time_unit(text: str, units: Mapping[str, str]) -> str | None:
    r"""Return the unit of an instant in brackets on the left, if it is not that of the model.

    `text` is a line as typed, of which the reader leaves out the units of instants.  None where
    the units of the model do not tell the unit of its time.

    >>> other_time_unit(r"T(1\,\mathrm{min}) = 14.46", {"G": "W/K", "C": "J/K"})
    'min'
    """
    seconds = seconds_in_time(units)
    found = INSTANT.search(text)
    if seconds is None or found is None or not re.search(r"\d", found[1]):
        return None
    for word in TIME_UNIT.findall(found[1]):
        unit = read_unit(word)
        if unit is not None and unit.factor != seconds:
            return str(word)
    return None


def in_model_units(claim: Claim, units: Mapping[str, str]) -> Claim | str:
    """Return a claim with its printed values in the units that the model file names.

    A text is returned where the printed unit is none of the quantity: what is wrong.
    """
    groups = []
    for group in claim.groups:
        printed = read_unit(group.unit) if group.unit else None
        factor = Fraction(1)
        if printed is not None:
            name = _subject(group)
            declared = read_unit(units[name]) if units.get(name) else None
            if declared is not None:
                if declared.powers != printed.powers:
                    return f"{group.unit} is no unit of {name}, which is in {units[name]}"
                factor = printed.factor / declared.factor
            else:
                factor = _customary_factor(group, printed, units)
        groups.append(_scaled(group, factor))
    return replace(claim, groups=tuple(groups))


def _customary_factor(group: Group, printed: Unit, units: Mapping[str, str]) -> Fraction:
    """Return by what times, rates and parts of a hundred are scaled."""
    time = seconds_in_time(units)
    if group.unit.strip().strip("\\") == "%":
        return printed.factor
    if time is not None and printed.powers == (("s", 1),):
        return printed.factor / time
    if time is not None and printed.powers == (("s", -1),) and "min" not in group.unit:
        return printed.factor * time
    return Fraction(1)


def in_base_units(claim: Claim, units: Mapping[str, str]) -> Claim | None:
    """Return a claim with its values in base units, where the model file tells no unit for them.

    None is returned where that changes nothing.
    """
    groups, changed = [], False
    for group in claim.groups:
        printed = read_unit(group.unit) if group.unit else None
        factor = Fraction(1)
        if printed is not None and not _is_told(group, printed, units):
            factor = printed.factor
        changed = changed or factor != 1
        groups.append(_scaled(group, factor))
    return replace(claim, groups=tuple(groups)) if changed else None


def _is_told(group: Group, printed: Unit, units: Mapping[str, str]) -> bool:
    """Whether the units of a model tell in which unit a value is."""
    timed = printed.powers in ((("s", 1),), (("s", -1),))
    return _subject(group) in units or (timed and seconds_in_time(units) is not None)


def _subject(group: Group) -> str:
    """Return the parameter that stands first in a chain, as its name or as a member."""
    first = next(_leading(group), None)
    return first.name if isinstance(first, Symbol) else ""


def _leading(group: Group) -> Iterator[Written]:
    yield from group.names
    if len(group.values) > 1:
        yield from group.values


def _scaled(group: Group, factor: Fraction) -> Group:
    """Return a group with its last value, which has the unit, times a factor in its place."""
    if factor == 1 or not group.values:
        return group
    values = (*group.values[:-1], _times(group.values[-1], factor))
    return replace(group, values=values, unit="")


def _times(value: Written, factor: Fraction) -> Written:
    match value:
        case Literal():
            return replace(value, value=value.value * factor, last_place=value.last_place * factor)
        case Negation(inside):
            return Negation(_times(inside, factor))
    return Product((Literal(factor, Fraction(1)), value))
