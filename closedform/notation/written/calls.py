"""Names before brackets: calls of a function of time, steps and impulses, or factors."""

from __future__ import annotations

from collections.abc import Sequence

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.names import STEPS, Names
from closedform.notation.written.pairs import bounds, pairs
from closedform.notation.written.tree import IMAGINARY, Constant, Jet, Literal, Symbol

__all__ = ["called", "symbol_name"]

ARGUMENTS = frozenset({"s", "lambda", "lamda", "tau", "z", "p", "jomega", "A", "x", "t"})
"""What customary functions are functions of."""
FUNCTIONS = frozenset(
    ["f", "g", "h", "u", "v", "w", "x", "y", "z", "q", "r", "p", "F", "G", "H", "X", "Y", "U", "i"]
)
"""Letters that customarily name a function of time."""
BEGINS = frozenset(
    ["COMMA", "SEMI", "ROW_END", "PERIOD", "SPACE", "TEXT", "WORD", "IMPLIES", "REL"]
)


def symbol_name(part: Token) -> str:
    """Return the name of a token that is a name, or nothing."""
    if part.type != "ATOM":
        return ""
    value = part.value
    if isinstance(value, Symbol) or (isinstance(value, Jet) and not value.order):
        return value.name
    return ""


def called(
    tokens: list[Token], names: Names, choices: list[tuple[tuple[Token, ...], tuple[Token, ...]]]
) -> list[Token]:
    """Return tokens where names before their arguments are calls, steps or impulses."""
    partners = pairs(tokens, "")
    out: list[Token] = []
    dropped: set[int] = set()
    at = 0
    while at < len(tokens):
        part = tokens[at]
        opening = at + 1
        if opening < len(tokens) and tokens[opening].type == "POWER":
            opening = partners.get(at + 2, len(tokens)) + 1
        bracket = opening < len(tokens) and tokens[opening].type == "OPEN"
        if not bracket or part.type not in ("ATOM", "NUMBER") or tokens[opening].value == "{":
            if at not in dropped:
                out.append(part)
            at += 1
            continue
        close = partners[opening]
        inside = tokens[opening + 1 : close]
        before = tokens[at - 1] if at else None
        after = tokens[close + 1] if close + 1 < len(tokens) else None
        defines = (before is None or before.type in BEGINS) and (
            after is not None and after.type == "REL"
        )
        new = _head(part, inside, tokens[opening], names, defines=defines)
        if new is None:
            out.append(part)
            at += 1
            continue
        if len(inside) == 2 and inside[0].type == "NUMBER" and inside[1].type in ("PLUS", "MINUS"):
            dropped.add(opening + 2)
        power = tokens[at + 1 : opening]
        if power:
            order = power[2].value if len(power) == 4 else None
            whole = [new, *tokens[opening : close + 1], *power]
            if isinstance(part.value, Jet) and isinstance(order, Literal):
                jet: Jet = new.value
                other = Jet(jet.name, jet.order + int(order.value), jet.at)
                head = token("CALL", other, *bounds(part))
                choices.append((tuple(whole), (head, *tokens[opening : close + 1])))
            out += whole
            at = close + 1
            continue
        out.append(new)
        at += 1
    return out


def _head(
    part: Token, inside: Sequence[Token], bracket: Token, names: Names, *, defines: bool
) -> Token | None:
    """Return the token of a name as the head of a call, or nothing if it is a factor."""
    value, time = part.value, Symbol(names.time)
    timed = any(t.type == "ATOM" and t.value == time for t in inside)
    only = inside[0] if len(inside) == 1 else None
    place = bounds(part)
    if part.type == "NUMBER":
        one = value.value == 1 and not value.is_decimal
        starts = bool(inside) and inside[0].type == "ATOM" and inside[0].value == time
        return token("FUNCTION", "step", *place) if one and starts else None
    if isinstance(value, Jet) and value.at is None:
        if bracket.value != "(":
            return None
        return token("CALL", Jet(value.name, value.order, time), *place)
    if not isinstance(value, Symbol) or value == time:
        return None
    call = token("CALL", Jet(value.name, 0, time), *place)
    exactly = only is not None and only.type == "ATOM" and only.value == time
    declared = names.find(value.name, bold=value.bold)
    if declared is not None:
        matrix = declared in names.declared.matrices or value.bold
        transition = matrix and timed and value.name in ("Phi", "Psi")
        if transition and bracket.value == "(":
            return call
        instant = exactly or (only is not None and only.type == "NUMBER" and matrix)
        return call if instant and (defines or matrix) else None
    if value.name == "delta":
        return token("FUNCTION", "delta", *place)
    if value.name in STEPS and timed and not defines:
        return token("FUNCTION", "step", *place)
    if only is None:
        letter = value.name.split("_")[0]
        timed = timed or any(t.value in (IMAGINARY, Symbol("s")) for t in inside)
        return call if timed and letter in FUNCTIONS and bracket.value == "(" else None
    if only.type == "ATOM" and isinstance(only.value, Symbol):
        single = exactly or only.value.name in ARGUMENTS or only.value.bold
        matrix = names.find(only.value.name) in names.declared.matrices
        return call if single or matrix or defines else None
    number = only.type == "NUMBER" or only.value == Constant("oo")
    letter = value.name.split("_")[0]
    return call if number and (letter in FUNCTIONS or defines) else None
