"""What tokens mean together: bars, decimal commas, powers of ten, columns, calls, differentials."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from itertools import pairwise

from lark import Token

from closedform.notation.written.brackets import Doubt, barred, columns, decimals
from closedform.notation.written.calls import called, symbol_name
from closedform.notation.written.differentials import integrals, leibniz
from closedform.notation.written.grammar import token
from closedform.notation.written.latex_numbers import scaled
from closedform.notation.written.names import Names
from closedform.notation.written.pairs import OPERAND_ENDS, bounds, pairs
from closedform.notation.written.tree import Identity, Literal, Symbol
from closedform.notation.written.written_errors import StopError, UnusableNotationError

__all__ = ["settled"]

TEN = Literal(Fraction(10))


def settled(tokens: Sequence[Token], text: str, names: Names, choices: list[Doubt]) -> list[Token]:
    """Return tokens ready for the grammar, but for what parts statements.

    Places that can be read in two ways are added to `choices`.
    Raises:  StopError at a bracket without partner, or at an integral without its variable.
    """
    found: list[Token] = []
    for part in tokens:
        if part.type == "SPACE" and found and found[-1].type == "SPACE":
            found[-1].value = max(found[-1].value, part.value)
        elif part.type != "SPACE" or part.value > 0:
            found.append(part)
    found = _degrees(_powers_of_ten(_aligned(found)))
    found = barred(_intervals(_noted(found, text)))
    found = _listed(decimals(found, text))
    found = columns(found, choices)
    found = leibniz(_transforms(found), names)
    found = integrals(found, names)
    found = called(_identities(found, names), names, choices)
    _beside(found, text)
    return found


def _listed(tokens: list[Token]) -> list[Token]:
    """Return tokens where semicolons in brackets part items, as commas do."""
    depth, out = 0, []
    for part in tokens:
        depth += part.type in ("OPEN", "GROUP_OPEN")
        depth -= part.type in ("CLOSE", "GROUP_CLOSE")
        out.append(token("COMMA", ";", *bounds(part)) if depth and part.type == "SEMI" else part)
    return out


def _aligned(tokens: list[Token]) -> list[Token]:
    """Return tokens of a line of a display without signs of alignment; some part statements."""
    out: list[Token] = []
    depth = 0
    for index, part in enumerate(tokens):
        depth += part.type.endswith("OPEN") - part.type.endswith("CLOSE")
        if depth or part.type != "COLUMN":
            out.append(part)
            continue
        beside = [one.type for one in (*out[-1:], *tokens[index + 1 : index + 2])]
        if "REL" not in beside and out and out[-1].type in OPERAND_ENDS | {"COMMA"}:
            out.append(token("SPACE", 2, *bounds(part)))
    return out


def _powers_of_ten(tokens: list[Token]) -> list[Token]:
    """Return tokens where 1.2 times 10 to the -3 is one number."""
    plain = [k for k, part in enumerate(tokens) if part.type != "SPACE"]
    gone: set[int] = set()
    new = list(tokens)
    for place in range(len(plain) - 6):
        window = [tokens[k] for k in plain[place : place + 8]]
        kinds = [part.type for part in window]
        if kinds[:5] != ["NUMBER", "TIMES", "NUMBER", "POWER", "GROUP_OPEN"]:
            continue
        signed = kinds[5] in ("MINUS", "PLUS")
        size = 7 + signed
        if kinds[5 + signed : size] != ["NUMBER", "GROUP_CLOSE"] or window[2].value != TEN:
            continue
        power: Literal = window[5 + signed].value
        before = tokens[plain[place - 1]].type if place else ""
        if power.is_decimal or power.value > 9999 or before in ("OVER", "POWER"):
            continue
        exponent = int(power.value) * (-1 if kinds[5] == "MINUS" else 1)
        value = scaled(window[0].value, exponent, power.end)
        new[plain[place]] = token("NUMBER", value, value.start, value.end)
        gone |= set(range(plain[place] + 1, plain[place + size - 1] + 1))
    return [part for k, part in enumerate(new) if k not in gone]


def _intervals(tokens: list[Token]) -> list[Token]:
    """Return tokens where t in [0, 2) compares, and an eigenvalue in {..} is one of them."""
    out: list[Token] = []
    at = 0
    while at < len(tokens):
        part = tokens[at]
        if part.type != "IN":
            out.append(part)
            at += 1
            continue
        close, comma, depth = at + 1, 0, 0
        while close < len(tokens):
            kind = tokens[close].type
            depth += kind.endswith("OPEN") - kind.endswith("CLOSE")
            if kind == "COMMA" and depth == 1:
                comma = close
            if depth == 0:
                break
            close += 1
        opening = tokens[at + 1] if at + 1 < len(tokens) else None
        if opening is None or opening.type != "OPEN" or close == len(tokens) or not out:
            raise StopError(
                UnusableNotationError, *bounds(part), r"\in", r"write a comparison, as 0\le t<2"
            )
        if opening.value == "{":
            out.append(token("REL", "=", *bounds(part)))
            at += 1
        elif not comma or out[-1].type != "ATOM":
            raise StopError(
                UnusableNotationError, *bounds(part), r"\in", r"write a comparison, as 0\le t<2"
            )
        else:
            name = out.pop()
            first = token("REL", "≤" if opening.value == "[" else "<", *bounds(opening))
            last = token("REL", "≤" if tokens[close].value == "[" else "<", *bounds(tokens[close]))
            out += [*tokens[at + 2 : comma], first, name, last, *tokens[comma + 1 : close]]
            at = close + 1
    return out


def _noted(tokens: list[Token], text: str) -> list[Token]:
    """Return tokens where brackets with words in them are notes."""
    out: list[Token] = []
    opened: list[int] = []
    for part in tokens:
        out.append(part)
        if part.type == "OPEN":
            opened.append(len(out) - 1)
        elif part.type == "CLOSE" and opened:
            first = opened.pop()
            inside = out[first + 1 : -1]
            counts = {inner.type for inner in inside} == {"TIMES", "NUMBER"} and len(inside) == 2
            if not opened and (counts or any(inner.type == "TEXT" for inner in inside)):
                place = bounds(out[first], part)
                out[first:] = [token("TEXT", text[slice(*place)], *place)]
    return out


def _transforms(tokens: list[Token]) -> list[Token]:
    """Return tokens where a transform has no second bracket that says its variable."""
    partners = pairs(tokens, "")
    gone: set[int] = set()
    for at, part in enumerate(tokens):
        if part.type == "TRANSFORM" and at + 1 in partners:
            first = partners[at + 1] + 1
            kinds = [one.type for one in tokens[first : first + 3]]
            if kinds == ["OPEN", "ATOM", "CLOSE"] and symbol_name(tokens[first + 1]) in ("s", "t"):
                gone |= {first, first + 1, first + 2}
    return [part for at, part in enumerate(tokens) if at not in gone]


def _degrees(tokens: list[Token]) -> list[Token]:
    """Return tokens where degrees before an upright C are degrees Celsius."""
    out: list[Token] = []
    for part in tokens:
        last = out[-1] if out else None
        celsius = part.type == "UNIT" and part.value in ("C", "F")
        celsius = celsius or (part.type == "ATOM" and part.value == Symbol("C"))
        if celsius and last is not None and last.type == "POSTFIX" and last.value == "degree":
            out[-1] = token("UNIT", "°C", *bounds(last, part))
        else:
            out.append(part)
    return out


def _identities(tokens: list[Token], names: Names) -> list[Token]:
    """Return tokens where E behind an eigenvalue is the unit matrix, if there is a matrix."""
    matrices = any(
        part.type == "MATRIX_OPEN"
        or (
            isinstance(part.value, Symbol)
            and (part.value.bold or part.value.name in names.declared.matrices)
        )
        for part in tokens
    )
    if not matrices or names.find("E") is not None:
        return tokens
    return [
        token("ATOM", Identity(), *bounds(part))
        if part.value == Symbol("E")
        and before.type == "ATOM"
        and symbol_name(before).split("_")[0] in ("lambda", "lamda", "s")
        else part
        for before, part in zip([*tokens[:1], *tokens], tokens, strict=False)
    ]


def _beside(tokens: list[Token], text: str) -> None:
    """Refuse two numbers side by side: nobody knows what is between them."""
    for first, second in pairwise(tokens):
        if first.type == "NUMBER" == second.type:
            raise StopError(
                UnusableNotationError,
                *bounds(second),
                text[first.start_pos : second.end_pos],
                "two numbers stand side by side; put an operator between them, or a comma",
            )
