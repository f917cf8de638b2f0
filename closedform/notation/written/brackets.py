"""Brackets and bars of tokens: which open, what parts their items, what is a row."""

from __future__ import annotations

from lark import Token

from closedform.notation.written.grammar import token
from closedform.notation.written.latex_numbers import literal
from closedform.notation.written.pairs import OPERAND_ENDS, OPERAND_STARTS, bounds, pairs
from closedform.notation.written.tree import Symbol

__all__ = ["Doubt", "barred", "columns", "decimals"]

Doubt = tuple[tuple[Token, ...], tuple[Token, ...]]
"""Tokens as they are read, and as they may also be read."""
SEVERAL = frozenset({"diag", "max", "min", "atan2"})


def barred(tokens: list[Token]) -> list[Token]:
    """Return tokens where every bar opens or closes."""
    out: list[Token] = []
    opened: list[str] = []
    before = ""
    for part in tokens:
        kind = part.type
        if kind in ("BAR", "NORM"):
            closes = part.value == "r" or (
                part.value == "" and before in OPERAND_ENDS and opened[-1:] == [kind]
            )
            if closes:
                if opened[-1:] == [kind]:
                    opened.pop()
                new = token(f"{kind}_CLOSE", "", *bounds(part))
            else:
                opened.append(kind)
                new = token(f"{kind}_OPEN", "", *bounds(part))
            out.append(new)
            before = new.type
            continue
        if kind.endswith("OPEN"):
            opened.append(kind)
        elif kind.endswith("CLOSE") and opened:
            opened.pop()
        out.append(part)
        before = kind if kind != "SPACE" else before
    return out


def decimals(tokens: list[Token], text: str) -> list[Token]:
    """Return tokens where a comma between digits is a decimal sign unless it parts items."""
    partners = pairs(tokens, text)
    commas: dict[int, int] = {}
    inside: list[int] = []
    around: dict[int, int] = {}
    for k, part in enumerate(tokens):
        if part.type.endswith("OPEN"):
            inside.append(k)
        elif part.type.endswith("CLOSE"):
            inside.pop()
        elif part.type == "COMMA":
            around[k] = inside[-1] if inside else -1
            commas[around[k]] = commas.get(around[k], 0) + 1
    out: list[Token] = []
    for k, part in enumerate(tokens):
        out.append(part)
        if part.type != "NUMBER" or len(out) < 3 or out[-2].type != "COMMA":
            continue
        first, comma = out[-3], out[-2]
        if first.type != "NUMBER" or first.value.is_decimal or part.value.last_place > 1:
            continue
        if first.end_pos != comma.start_pos or comma.end_pos != part.start_pos:
            continue
        opening = around[k - 1]
        if opening >= 0 and _lists(tokens, opening, partners[opening], commas[opening]):
            continue
        following = [t.type for t in tokens[k + 1 : k + 3]]
        if following == ["COMMA", "NUMBER"] and tokens[k + 1].start_pos == part.end_pos:
            continue
        digits = text[first.start_pos : first.end_pos] + "." + text[part.start_pos : part.end_pos]
        if not digits.replace(".", "", 1).isdecimal():
            continue
        value = literal(digits, 0, *bounds(first, part))
        out[-3:] = [token("NUMBER", value, *bounds(first, part))]
    return out


def _lists(tokens: list[Token], opening: int, closing: int, commas: int) -> bool:
    """Tell whether a bracket holds a list of numbers, not one number with a decimal comma."""
    if tokens[opening].type != "OPEN" or any(t.type == "SEMI" for t in tokens[opening:closing]):
        return False
    before = tokens[opening - 1] if opening else None
    if tokens[opening].value == "{" or commas > 1:
        return True
    if before is not None and before.type == "FUNCTION":
        return before.value in SEVERAL
    whole = closing - opening == 4
    after = tokens[closing + 1].type if closing + 1 < len(tokens) else ""
    called_ = before is not None and before.type in (*OPERAND_ENDS, "FUNCTION", "CALL", "POWER")
    return whole and not called_ and after != "POWER"


def columns(tokens: list[Token], choices: list[Doubt]) -> list[Token]:
    """Return tokens where square brackets with wide gaps are rows of a matrix."""
    partners = pairs(tokens, "")
    new: dict[int, Token] = {}
    for k, part in enumerate(tokens):
        if part.type != "OPEN" or part.value != "[":
            continue
        close, gaps, index = partners[k], [], k + 1
        while index < close:
            if tokens[index].type == "SPACE" and index + 1 < close and index > k + 1:
                before = tokens[index - 1].type
                if before in OPERAND_ENDS and tokens[index + 1].type in OPERAND_STARTS:
                    gaps.append(index)
            elif tokens[index].type == "COMMA":
                gaps = []
                break
            index = partners.get(index, index) + 1 if index in partners else index + 1
        ends = [tokens[gap + 1] for gap in gaps]
        sure = any(end.type == "NUMBER" for end in ends)
        sure = sure or any(isinstance(end.value, Symbol) and end.value.bold for end in ends)
        after = tokens[close + 1] if close + 1 < len(tokens) else None
        sure = sure or (
            bool(gaps)
            and after is not None
            and after.type == "POSTFIX"
            and after.value == "transpose"
        )
        if sure:
            new[k] = token("MATRIX_OPEN", "", *bounds(part))
            new[close] = token("MATRIX_CLOSE", "", *bounds(tokens[close]))
            new |= {gap: token("COLUMN", "", *bounds(tokens[gap])) for gap in gaps}
            if not isinstance(ends[0].value, Symbol):
                inside = tuple(t for t in tokens[k + 1 : close] if t.type != "SPACE")
                made = [new.get(j, t) for j, t in enumerate(tokens[k : close + 1], k)]
                chosen = tuple(t for t in made if t.type != "SPACE")
                choices.append((chosen, (part, *inside, tokens[close])))
    return [new.get(k, part) for k, part in enumerate(tokens)]
