"""What tokens mean together: bars, decimal commas, powers of ten, columns, calls, differentials."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from lark import Token

from closedform.notation.written.calls import called, symbol_name
from closedform.notation.written.grammar import token
from closedform.notation.written.latex_numbers import literal, scaled
from closedform.notation.written.names import Names
from closedform.notation.written.pairs import OPERAND_ENDS, OPERAND_STARTS, bounds, pairs
from closedform.notation.written.tree import Identity, Jet, Literal, Symbol
from closedform.notation.written.written_errors import StopError, UnusableNotationError

__all__ = ["Choice", "settled"]

Choice = tuple[tuple[Token, ...], tuple[Token, ...]]
"""Tokens as they are read, and as they may also be read."""
MOST_INTEGRALS = 50
SEVERAL = frozenset({"diag", "max", "min", "atan2"})
TEN = Literal(Fraction(10))


def settled(tokens: Sequence[Token], text: str, names: Names, choices: list[Choice]) -> list[Token]:
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
    found = _degrees(_powers_of_ten(found))
    found = _barred(_intervals(_noted(found, text)))
    found = _decimals(found, text)
    found = _columns(found, choices)
    found = _leibniz(_transforms(found), names)
    found = _integrals(found, names)
    found = called(_identities(found, names), names, choices)
    _beside(found, text)
    return found


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
                UnusableNotationError, *bounds(part), r"\in", "write a comparison, as 0\le t<2"
            )
        if opening.value == "{":
            out.append(token("REL", "=", *bounds(part)))
            at += 1
        elif not comma or out[-1].type != "ATOM":
            raise StopError(
                UnusableNotationError, *bounds(part), r"\in", "write a comparison, as 0\le t<2"
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
            if not opened and any(inner.type == "TEXT" for inner in out[first:]):
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


def _barred(tokens: list[Token]) -> list[Token]:
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


def _decimals(tokens: list[Token], text: str) -> list[Token]:
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
    if tokens[opening].type != "OPEN":
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


def _columns(tokens: list[Token], choices: list[Choice]) -> list[Token]:
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


def _is_d(part: Token) -> bool:
    return part.type == "ATOM" and part.value == Symbol("d")


def _power(tokens: Sequence[Token], at: int) -> tuple[int, int]:
    """Return the exponent at an index, 1 if there is none, and the index behind it."""
    kinds = [part.type for part in tokens[at : at + 4]]
    if kinds != ["POWER", "GROUP_OPEN", "NUMBER", "GROUP_CLOSE"]:
        return 1, at
    value: Literal = tokens[at + 2].value
    return (int(value.value), at + 4) if value.value in range(1, 100) else (0, at)


def _leibniz(tokens: list[Token], names: Names) -> list[Token]:
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
            order, after = _power(tokens, at + 1)
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


def _integrals(tokens: list[Token], names: Names) -> list[Token]:
    """Return tokens where the differential that ends an integral is one token."""
    out = list(tokens)
    integrals = [part for part in tokens if part.type.startswith("INTEGRAL")]
    if len(integrals) > MOST_INTEGRALS:
        raise StopError(
            UnusableNotationError,
            *bounds(integrals[MOST_INTEGRALS]),
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


_ENDS = frozenset(
    "CLOSE GROUP_CLOSE BAR_CLOSE NORM_CLOSE MATRIX_CLOSE CASES_CLOSE PLUS MINUS REL COMMA SEMI "
    "ROW_END PERIOD SPACE TEXT WORD IMPLIES COLUMN ROW UNIT".split()
)


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
    for first, second in zip(tokens, tokens[1:], strict=False):
        if first.type == "NUMBER" == second.type:
            raise StopError(
                UnusableNotationError,
                *bounds(second),
                text[first.start_pos : second.end_pos],
                "two numbers stand side by side; put an operator between them, or a comma",
            )
