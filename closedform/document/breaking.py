"""Where a long formula may be broken, and how its pieces fill the lines.

A sum is broken before a top-level + or -.  A term that is itself wider than the line is
opened: a product at the signs inside its longest bracket, a fraction as one over its
denominator times its numerator, a number between its digits.
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from closedform.derivation.step import Matrix, Side, Symbol
from closedform.document.symbols import added, side_box
from closedform.notation.expression import (
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Product,
    Quotient,
    Sum,
    product,
)
from closedform.notation.latex.box import BINARY, Box, bracketed, joined
from closedform.notation.latex.formula import factors_of, formula, signed, terms_of

__all__ = ["filled", "pieces"]


def pieces(side: Side, room: float) -> list[Box]:
    """Return the parts of a side before each of which, but the first, a line may end."""
    whole = side_box(side)
    if whole.width <= room or isinstance(side, Matrix):
        return [whole]
    if isinstance(side, Symbol):
        if side.kind != "sum":
            return [whole]
        boxes = [side_box(part) for part in side.parts]
        return [boxes[0], *map(added, boxes[1:])]
    if isinstance(side, tuple):
        boxes = [side_box(member) for member in side]
        return [boxes[0], *(_after_dot(box) for box in boxes[1:])]
    return _of_sum(side, room)


def _after_sign(box: Box, sign: str) -> Box:
    return Box(f" {sign} {box.latex}", box.width + BINARY, box.height, start="{}")


def _after_dot(box: Box) -> Box:
    if box.latex[0].isdigit():  # beside another number a space would not tell them apart
        return Box(rf" \cdot {box.latex}", box.width + 0.75, box.height, start="{}")
    return Box(rf"\,{box.latex}", box.width + 0.2, box.height, start=r"{}\cdot")


def _of_sum(expression: Expression, room: float) -> list[Box]:
    found: list[Box] = []
    for i, term in enumerate(terms_of(expression)):
        negative, size = signed(term)
        shown = Product((size,)) if isinstance(size, Sum) else size
        opened = _opened(shown, room - BINARY)
        head = opened[0]
        if i:
            opened[0] = _after_sign(head, "-" if negative else "+")
        elif negative:
            opened[0] = Box(f"-{head.latex}", head.width + 0.8, head.height)
        found += opened
    return found


def _opened(term: Expression, room: float) -> list[Box]:
    """Return a term as one piece if it fits, else as several."""
    whole = formula(term)
    if whole.width <= room and not isinstance(term, Product):
        return [whole]
    match term:
        case Product():
            return _of_product(term, room)
        case Quotient(above, below):
            lower = formula(below)
            over = Box(rf"\frac{{1}}{{{lower.latex}}}", lower.width + 0.3, 2)
            if lower.width > room / 2:
                return [*_in_brackets(above, room), *_after_slash(_in_brackets(below, room))]
            opened = _in_brackets(above, room)
            if over.width + opened[0].width > room:
                opened = _in_brackets(above, room - over.width)
            return _led(over, opened)
        case Call("sqrt", argument):
            inside = _in_brackets(argument, room)
            last = inside[-1]
            return [*inside[:-1], Box(last.latex + "^{1/2}", last.width + 1.2, last.height)]
        case Number(value):
            return _digits(value, room)
    return [whole]


def _of_product(whole_product: Product, room: float) -> list[Box]:
    factors = factors_of(whole_product)
    whole = formula(whole_product) if len(whole_product.factors) > 1 else None
    if whole is not None and whole.width <= room:
        return [whole]
    widths = [formula(factor).width for factor in factors]
    widest = widths.index(max(widths))
    found: list[Box] = []
    if widest:
        found.append(_side_by_side(factors[:widest]))
    middle = factors[widest]
    if isinstance(middle, Sum | Negation):
        opened = _in_brackets(middle, room)
        if found and found[0].width + opened[0].width > room:
            opened = _in_brackets(middle, max(room - found[0].width, room / 2))
        if found and isinstance(factors[widest - 1], Name | Call):  # no function of what follows
            found = [Box(rf"{found[0].latex}\,", found[0].width + 0.17, found[0].height)]
        found = _led(found[0], opened) if found else opened
    else:
        opened = _opened(middle, room)
        found += [_after_dot(opened[0]), *opened[1:]] if found else opened
    if widest + 1 < len(factors):
        found.append(_after_dot(_side_by_side(factors[widest + 1 :])))
    return found


def _side_by_side(factors: Sequence[Expression]) -> Box:
    """Return the factors beside those that are broken, in brackets if they would run into these."""
    whole = product(factors)
    box = formula(whole)
    return bracketed(box) if isinstance(whole, Sum) or box.latex.startswith("-") else box


def _led(head: Box, following: list[Box]) -> list[Box]:
    return [joined(head, following[0]), *following[1:]]


def _in_brackets(expression: Expression, room: float) -> list[Box]:
    # \left and \right cannot stand on different lines, so the size is given by name
    inside = _of_sum(expression, room - 2)
    size = ("big", "Big", "bigg", "bigg")[max(box.height for box in inside)]
    first, last = inside[0], inside[-1]
    inside[0] = Box(rf"\{size}l({first.latex}", first.width + 0.8, first.height, first.start)
    last = inside[-1]
    inside[-1] = Box(rf"{last.latex}\{size}r)", last.width + 0.8, last.height, last.start)
    return inside


def _after_slash(boxes: list[Box]) -> list[Box]:
    first = boxes[0]
    return [Box(rf"\big/{first.latex}", first.width + 0.6, first.height), *boxes[1:]]


def _digits(value: Fraction, room: float) -> list[Box]:
    text = str(value.numerator)
    if value.denominator > 1:
        text += f"/{value.denominator}"
    step = max(int(room / 0.55), 1)
    return [Box(part, 0.52 * len(part)) for part in _cut(text, step)]


def _cut(text: str, step: int) -> list[str]:
    return [text[i : i + step] for i in range(0, len(text), step)]


def filled(boxes: list[Box], first: float, later: float) -> list[str]:
    """Return lines of LaTeX: the first is `first` em wide at most, the others `later`."""
    lines: list[str] = []
    width = 0.0
    for box in boxes:
        room = first if len(lines) < 2 else later
        if not lines or width + box.width > room:
            lines.append(box.start + box.latex if lines else box.latex)
            width = box.width
        else:
            lines[-1] += box.latex
            width += box.width
    return lines
