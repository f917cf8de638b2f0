"""Differentials in tokens: dx/dt, d/dt, and what ends an integral."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from lark import Token

from closedform.notation.written.calls import symbol_name
from closedform.notation.written.grammar import token
from closedform.notation.written.names import Names
from closedform.notation.written.pairs import bounds, pairs
from closedform.notation.written.tree import Jet, Literal, Symbol
from closedform.notation.written.written_errors import StopError, UnusableNotationError

__all__ = ["integrals", "leibniz"]

MOST_INTEGRALS = 50
"""Integrals in one text."""
_ENDS = frozenset(
    [
        "CLOSE",
        "GROUP_CLOSE",
        "BAR_CLOSE",
        "NORM_CLOSE",
        "MATRIX_CLOSE",
        "CASES_CLOSE",
        "PLUS",
        "MINUS",
        "REL",
        "COMMA",
        "SEMI",
        "ROW_END",
        "PERIOD",
        "SPACE",
        "TEXT",
        "WORD",
        "IMPLIES",
        "COLUMN",
        "ROW",
        "UNIT",
    ]
)


def _is_d(part: Token) -> bool:
    return part.type == "ATOM" and part.value == Symbol("d")


def _power(tokens: Sequence[Token], at: int) -> tuple[int, int]:
    """Return the exponent at an index, 1 if there is none, and the index behind it."""
    kinds = [part.type for part in tokens[at : at + 4]]
    if kinds != ["POWER", "GROUP_OPEN", "NUMBER", "GROUP_CLOSE"]:
        return 1, at
    value: Literal = tokens[at + 2].value
    return (int(value.value), at + 4) if value.value in range(1, 100) else (0, at)


def leibniz(tokens: list[Token], names: Names) -> list[Token]:
    """Return tokens where dx/dt and d/dt are derivatives."""
    tokens = [part for part in tokens if part.type != "SPACE" or part.value > 1]
    partners = pairs(tokens, "")
    out: list[Token] = []
    at = 0
    while at < len(tokens):
        part, made = tokens[at], None
        if part.type == "FRACTION":
            close = partners[at + 1]
            made = _derivative(tokens, (at + 2, close), (close + 2, partners[close + 1]), names)
            behind = partners[close + 1] + 1
        elif _is_d(part) and names.find("d") is None:
            _order, after = _power(tokens, at + 1)
            slash = after + 1
            if slash + 2 < len(tokens) and tokens[slash].type == "OVER":
                _, behind = _power(tokens, slash + 3)
                made = _derivative(tokens, (at, slash), (slash + 1, behind), names)
        if made:
            out += made
            at = behind
        else:
            out.append(part)
            at += 1
    return out


def _derivative(
    tokens: list[Token], above: tuple[int, int], below: tuple[int, int], names: Names
) -> list[Token]:
    """Return the tokens of a derivative if a fraction is one, else nothing."""
    if below[1] - below[0] < 2 or not (_is_d(tokens[above[0]]) and _is_d(tokens[below[0]])):
        return []
    order, first = _power(tokens, above[0] + 1)
    variable = symbol_name(tokens[below[0] + 1])
    lower, last = _power(tokens, below[0] + 2)
    if last != below[1] or lower != order or not variable or not order:
        return []
    inside = tokens[first : above[1]]
    place = bounds(tokens[above[0]], tokens[below[1] - 1])
    head = token("DERIVATIVE", (variable, order, names.time), *place)
    if not inside:
        return [head]
    value = inside[0].value
    if len(inside) == 1 and isinstance(value, Jet | Symbol) and variable == names.time:
        before = value.order if isinstance(value, Jet) else 0
        return [token("ATOM", Jet(value.name, before + order), *place)]
    opening = token("GROUP_OPEN", "", place[0], place[0])
    closing = token("GROUP_CLOSE", "", place[1], place[1])
    return [opening, head, opening, *inside, closing, closing]


def _lifted(tokens: list[Token], first: int, partners: dict[int, int]) -> list[Token]:
    """Return the tokens from an integrand on, with d and the variable out of a fraction, if so."""
    at = first
    while at < len(tokens) and tokens[at].type != "FRACTION" and tokens[at].type not in _ENDS:
        at = partners[at] + 1 if at in partners else at + 1
    if at >= len(tokens) or tokens[at].type != "FRACTION":
        return []
    close = partners[at + 1]
    places = [
        k
        for k in range(at + 2, close - 1)
        if _is_d(tokens[k]) and symbol_name(tokens[k + 1]) and (k + 2 == close or k == at + 2)
    ]
    if len(places) != 1:
        return []
    k, end = places[0], partners[close + 1] + 1
    above = [*tokens[at + 2 : k], *tokens[k + 2 : close]]
    if not above:
        above = [token("NUMBER", Literal(Fraction(1)), *bounds(tokens[k]))]
    new = token("DIFFERENTIAL", symbol_name(tokens[k + 1]), *bounds(tokens[k], tokens[k + 1]))
    stop = end
    while stop < len(tokens) and tokens[stop].type not in _ENDS:
        stop = partners[stop] + 1 if stop in partners else stop + 1
    body = [*tokens[first : at + 2], *above, *tokens[close:stop]]
    return [*body, new, *tokens[stop:]]


def integrals(tokens: list[Token], names: Names) -> list[Token]:
    """Return tokens where the differential that ends an integral is one token."""
    out = list(tokens)
    several = [part for part in tokens if part.type.startswith("INTEGRAL")]
    if len(several) > MOST_INTEGRALS:
        raise StopError(
            UnusableNotationError,
            *bounds(several[MOST_INTEGRALS]),
            "the integral",
            f"there are more than {MOST_INTEGRALS} of them in one text; part it",
        )
    for at in range(len(tokens) - 1, -1, -1):
        if tokens[at].type not in ("INTEGRAL", "INTEGRAL_BOUNDS"):
            continue
        partners = pairs(out, "")
        first = at + 1
        if out[at].type == "INTEGRAL_BOUNDS":
            first = partners[partners[at + 1] + 1] + 1
        found: list[int] = []
        index = first
        while index < len(out) and not out[index].type.endswith("CLOSE"):
            if out[index].type in ("ROW_END", "SEMI", "REL", "COLUMN", "ROW") and found:
                break
            if _is_d(out[index]) and index + 1 < len(out) and symbol_name(out[index + 1]):
                found.append(index)
            index = partners[index] + 1 if index in partners else index + 1
        if not found and (lifted := _lifted(out, first, partners)):
            out[first:] = lifted
            continue
        if not found:
            raise StopError(
                UnusableNotationError,
                *bounds(out[at]),
                "the integral",
                "it does not say over which variable; write d and the variable behind it",
            )
        end = found[-1] if names.find("d") is not None else found[0]
        name = symbol_name(out[end + 1])
        new = token("DIFFERENTIAL", name, *bounds(out[end], out[end + 1]))
        stop = end + 2
        if end == first:
            while stop < len(out) and out[stop].type not in _ENDS:
                stop = partners[stop] + 1 if stop in partners else stop + 1
        out[end : max(stop, end + 2)] = [*out[end + 2 : stop], new]
    return out
