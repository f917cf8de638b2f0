"""Slips in what is written: in one place of one line, whatever it says."""
# ruff: noqa: FBT003, C901, PLR0912

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from random import Random

import mpmath

from tests.checking.generated import forms
from tests.checking.generated.forms import F, fn, neg, nodes, num, replaced
from tests.checking.generated.lines import Line

__all__ = ["slipped"]

DIGIT_SLIPS = frozenset(
    {
        "last digit",
        "digits exchanged",
        "cut instead of rounded",
        "degrees for radians",
        "point moved",
    }
)
OTHER = {"cos": "sin", "sin": "cos", "cosh": "sinh", "sinh": "cosh", "arctan": "tanh"}


def slipped(line: Line, rng: Random) -> Line | None:
    """Return a line with a slip after which it is untrue, None if none was found."""
    for _ in range(6):
        k = rng.randrange(len(line.forms))
        choices = list(_changes(line.forms[k], rng))
        if not choices:
            continue
        kinds = sorted({what for what, _ in choices})
        kind = rng.choice(kinds)
        what, form = rng.choice([c for c in choices if c[0] == kind])
        made = (*line.forms[:k], form, *line.forms[k + 1 :])
        if what not in DIGIT_SLIPS:
            if line.judge(made, True)[0] or not line.judge(made, False)[1]:
                continue
        else:
            right, plain = line.judge(made, False)
            if right or (what == "degrees for radians" and not plain):
                continue
        return replace(line, forms=made, wrong=True, slip=what, follows=False)
    return None


def _changes(form: F, rng: Random) -> Iterator[tuple[str, F]]:
    names = {node.args[0] for _, node in nodes(form) if node.op == "name"} - {"lambda"}
    for path, node in nodes(form):
        for what, new in _of_node(node, rng):
            yield what, replaced(form, path, new)
        if node.op == "name":
            for other in sorted(names - {node.args[0]}):
                yield "another name", replaced(form, path, forms.name(other))
        if node.op == "shift":
            yield "delay not shifted", replaced(form, path, forms.T)


def _of_node(node: F, rng: Random) -> Iterator[tuple[str, F]]:
    args = node.args
    match node.op:
        case "add":
            k = rng.randrange(len(args))
            yield "sign of a term", F("add", (*args[:k], neg(args[k]), *args[k + 1 :]))
            if len(args) > 2:
                yield "dropped term", F("add", (*args[:k], *args[k + 1 :]))
        case "exp":
            yield "sign in the exponent", forms.exp(neg(args[0]))
        case "fn" if args[0] in OTHER and args[0] != "arctan":
            yield "cosine for sine", fn(OTHER[args[0]], args[1])
            if args[1].op == "add":
                first, second = args[1].args
                yield "sign of the phase", fn(args[0], forms.add(first, neg(second)))
        case "num":
            x = args[0]
            yield "wrong number", num(x + 1)
            yield "factor 2", num(x * 2)
            if x.denominator != 1 and x != 1 / x:
                yield "numerator and denominator exchanged", num(1 / x)
            if x.denominator == 2:
                yield "missing half", num(Fraction(x.numerator))
        case "mul":
            for k, factor in enumerate(args):
                rest = args[:k] + args[k + 1 :]
                if factor.op == "t" or (factor.op == "pow" and factor.args[0].op == "t"):
                    yield "missing t", forms.mul(*rest)
                elif factor.op in ("num", "dec", "div", "exp", "name"):
                    yield "dropped factor", forms.mul(*rest)
        case "sqrt":
            yield "missing root", args[0]
        case "div":
            yield "upside down", F("div", (args[1], args[0]))
        case "mat":
            yield from _of_matrix(node, rng)
        case "dec":
            yield from _of_decimal(node)


def _of_matrix(node: F, rng: Random) -> Iterator[tuple[str, F]]:
    rows = [list(row.args) for row in node.args]
    if len(rows) == len(rows[0]):
        yield "transposed", forms.rows_of(tuple(zip(*rows, strict=True)))
    if len(rows) > 1:
        i, j = rng.sample(range(len(rows)), 2)
        k = rng.randrange(len(rows[0]))
        turned = [list(row) for row in rows]
        turned[i][k], turned[j][k] = rows[j][k], rows[i][k]
        yield "entries exchanged", forms.rows_of(tuple(map(tuple, turned)))
    i, k = rng.randrange(len(rows)), rng.randrange(len(rows[0]))
    signed = [list(row) for row in rows]
    signed[i][k] = neg(rows[i][k])
    yield "sign of an entry", forms.rows_of(tuple(map(tuple, signed)))


def _of_decimal(node: F) -> Iterator[tuple[str, F]]:
    text, origin = node.args
    printed = Decimal(text)
    place = Decimal(1).scaleb(printed.as_tuple().exponent)
    with mpmath.workdps(60):
        exact = forms.decimal_of(abs(forms.value(origin, {})))
        if origin.op in ("atan2", "neg") and _is_angle(origin):
            degrees = mpmath.degrees(abs(forms.value(origin, {})))
            yield "degrees for radians", forms.dec(forms.rounded(degrees, 4), origin)

    def differs(new: Decimal) -> bool:
        return abs(new - exact) > place * Decimal("0.51") and new > 0

    for step in (1, -1):
        if differs(printed + step * place):
            yield "last digit", forms.dec(printed + step * place, origin)
    digits = printed.as_tuple()
    for k in range(len(digits.digits) - 1):
        turned = list(digits.digits)
        turned[k], turned[k + 1] = turned[k + 1], turned[k]
        new = Decimal((0, tuple(turned), digits.exponent))
        if differs(new):
            yield "digits exchanged", forms.dec(new, origin)
    cut = exact.quantize(place, rounding="ROUND_DOWN", context=forms.CONTEXT)
    if differs(cut):
        yield "cut instead of rounded", forms.dec(cut, origin)
    if origin.op != "num":
        yield "point moved", forms.dec(printed * 10, origin)


def _is_angle(origin: F) -> bool:
    return origin.op == "atan2" or (origin.op == "neg" and origin.args[0].op == "atan2")
