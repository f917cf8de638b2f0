r"""Labels that are no formulas, and sides of relations, as LaTeX.

The kinds of `Symbol`.  `letter`, `indices`, `argument`, `order` and `parts` are the
fields each one uses; a default letter stands in brackets.  Matrices and vectors are bold
italic.  In kinds with an argument and a default of t, leave `argument` out for t.

    kind                       fields                              example
    -------------------------  ----------------------------------  --------------------------
    matrix                     letter [A] indices argument         A,  P,  R_0
    vector                     letter [x] indices argument         x,  x_0,  v_1,  x(t)
    scalar                     letter indices argument order       lambda_1,2   x_1(t)   g''(t)
                               (letter: a name, v_left is one)
    identity                   letter [I]                          I
    zero                       -                                   0 (bold)
    inverse                    letter [P] indices                  P^(-1)
    derivative                 letter [x] indices argument order   x',  x'(t)
    transition                 letter [A] argument [t]             e^(At)
    exponential                letter [J] argument [t]             e^(Jt)
    characteristic polynomial  letter [p] indices argument         p(lambda),  p(A)
                               [lambda], or parts: one side
    determinant                letter [A] argument [lambda]        det(lambda I - A)
    resolvent                  letter [A] argument [s]             (s I - A)^(-1)
    adjugate                   letter [A] argument [s]             adj(s I - A)
    residue sum                letter [N] argument [t]             sum of N(l) e^(l t)/p'(l)
                               parts: the variable [lambda]
    shifted                    letter [A] argument, order (power)  A - lambda_1 I,  (A + 2I)^2
    entry                      parts: one side; indices            (e^(At))_12
    pair                       parts: real part a, frequency w     a +- i w
    real pair                  parts: mean a, half distance b      a +- b
    sum                        parts: sides                        R_0 g + R_1 g'
    quotient                   parts: above, below                 r(lambda) / p'(lambda)
    time derivative            argument [t]                        d/dt
    dotted                     letter [x] indices argument order   x with a dot
    step                       argument                            epsilon(t - a)
    one-sided                  letter argument indices: - or +     x(a^-),  x(a^+)
    blocks                     indices: number of columns; parts   [A, B; 0, W]
    interval                   indices: both, from, until or       a <= t < b
                               otherwise; argument [t]; parts
    sinusoid                   indices: cos [cos] or sin           a cos(omega t - phi)
                               parts: amplitude, angle, phase
    turn                       indices: above, below               3 pi/4
    arc                        indices: sign; parts: turn, ratio   pi - arctan r
    angle of                   parts: y, x                         atan2(y, x)
    cases                      parts: value, interval, …           { 0, t < a; 1, otherwise

A letter that ends in _hat has a wide hat.

`IMAGINARY_UNIT` of closedform.derivation.step is the upright i inside formulas.
"""

from __future__ import annotations

from collections.abc import Callable

from closedform.derivation.step import IMAGINARY_UNIT, Matrix, Side, Symbol
from closedform.document.letters import (
    adjugate,
    applied,
    derivative,
    determinant,
    dotted,
    exponential,
    inverse,
    lettered,
    one_sided,
    residue_sum,
    resolvent,
    scalar,
    shifted,
    step,
    time_derivative,
    turn,
)
from closedform.document.matrices import ZERO, matrix_box
from closedform.notation.expression import (
    Name,
    Negation,
    Number,
    Product,
    Sum,
    is_expression,
)
from closedform.notation.latex.box import (
    BINARY,
    RELATION,
    Box,
    bracketed,
    joined,
    plain,
)
from closedform.notation.latex.formula import formula
from closedform.notation.latex.names import name_box

__all__ = ["ANY_ROW", "KINDS", "added", "index_text", "side_box", "symbol_box"]

ANY_ROW = r"\cdot"
"""The first index of an entry that stands for a whole column."""

COMPOUND = frozenset({"pair", "real pair", "sum", "shifted"})
LETTERS = frozenset({"matrix", "vector", "inverse", "identity", "zero", "derivative", "dotted"})


def side_box(side: Side) -> Box:
    """Return one side of a relation; the members of a tuple stand side by side."""
    if isinstance(side, Symbol):
        return symbol_box(side)
    if isinstance(side, Matrix):
        return matrix_box(side)
    if isinstance(side, tuple):
        return joined(*_product_boxes(side))
    if not is_expression(side):
        raise TypeError(f"{side} is no side of a relation")
    return formula(side)


def _product_boxes(members: tuple[Side, ...]) -> list[Box]:
    boxes: list[Box] = []
    for i, member in enumerate(members):
        box = side_box(member)
        if _binds_loosely(member):
            box = bracketed(box)
        if i and not (_is_letter(members[i - 1]) and _is_letter(member)):
            boxes.append(Box(r"\,", 0.2))
        boxes.append(box)
    return boxes


def _binds_loosely(side: Side) -> bool:
    if isinstance(side, Symbol):
        lone = side.kind == "shifted" and (side.order > 1 or side.argument == ZERO)
        return side.kind in COMPOUND and not lone
    return isinstance(side, Sum | Negation)


def _is_letter(side: Side) -> bool:
    return isinstance(side, Symbol) and side.kind in LETTERS and side.argument is None


def symbol_box(symbol: Symbol) -> Box:
    """Return a symbol set as its kind demands.  Raises ValueError for an unknown kind."""
    setter = KINDS.get(symbol.kind)
    if setter is None:
        raise ValueError(f"no kind of symbol is called {symbol.kind!r}")
    return setter(symbol)


def _polynomial(symbol: Symbol) -> Box:
    box = name_box(symbol.letter or "p", extra=symbol.indices)
    if symbol.parts:
        return joined(box, bracketed(side_box(symbol.parts[0])))
    return applied(box, symbol.argument or Name("lambda"))


def _entry(symbol: Symbol) -> Box:
    body = side_box(symbol.parts[0])
    index = index_text(symbol)
    width = 0.42 * len(index.replace(ANY_ROW, "").replace(r"\ldots ", "..."))
    return Box(rf"\bigl({body.latex}\bigr)_{{{index}}}", body.width + 1.0 + width)


def index_text(symbol: Symbol) -> str:
    """Return the indices of an entry as they are set."""
    # 1,12 could be read as 11,2 without the comma; the dot of a column cannot
    row = symbol.indices[0]
    comma = " " if row == ANY_ROW else "," if any(len(i) > 1 for i in symbol.indices) else ""
    return comma.join(symbol.indices)


def _pair(symbol: Symbol) -> Box:
    real, frequency = symbol.parts
    if not isinstance(frequency, Matrix | Symbol | tuple):
        if frequency == Number(ZERO.value + 1):
            frequency = IMAGINARY_UNIT
        elif isinstance(frequency, Number):
            frequency = Product((frequency, IMAGINARY_UNIT))
        else:
            frequency = Product((IMAGINARY_UNIT, frequency))
    return _plus_minus(real, frequency)


def _real_pair(symbol: Symbol) -> Box:
    return _plus_minus(*symbol.parts)


def _plus_minus(middle: Side, distance: Side) -> Box:
    half = side_box(distance)
    if _binds_loosely(distance):
        half = bracketed(half)
    if middle == ZERO:
        return joined(plain(r"\pm ", 0.8), half)
    return joined(side_box(middle), plain(r" \pm ", BINARY), half)


def _sum(symbol: Symbol) -> Box:
    first, *others = map(side_box, symbol.parts)
    return joined(first, *map(added, others))


def added(box: Box) -> Box:
    """Return a term with the sign before it that adds it: that of its own, if it has one."""
    sign, latex = ("-", box.latex[1:].lstrip()) if box.latex.startswith("-") else ("+", box.latex)
    return Box(f" {sign} {latex}", box.width + BINARY, box.height, start="{}")


def _quotient(symbol: Symbol) -> Box:
    above, below = map(side_box, symbol.parts)
    wide = max(above.width, below.width) + 0.3
    return Box(rf"\frac{{{above.latex}}}{{{below.latex}}}", wide, 2)


def _blocks(symbol: Symbol) -> Box:
    columns = int(symbol.indices[0])
    boxes = [side_box(part) for part in symbol.parts]
    rows = [boxes[k : k + columns] for k in range(0, len(boxes), columns)]
    inside = r" \\ ".join(" & ".join(box.latex for box in row) for row in rows)
    widths = [max(box.width for box in column) for column in zip(*rows, strict=True)]
    latex = rf"\begin{{bmatrix}} {inside} \end{{bmatrix}}"
    return Box(latex, sum(widths) + 0.95 * (columns - 1) + 1.4, 3)


def _interval(symbol: Symbol) -> Box:
    kind, t = symbol.indices[0], formula(symbol.argument or Name("t"))
    bounds = [side_box(part) for part in symbol.parts]
    match kind:
        case "both":
            low, high = bounds
            return joined(low, plain(r" \leq ", RELATION), t, plain(" < ", RELATION), high)
        case "from":
            return joined(t, plain(r" \geq ", RELATION), bounds[0])
        case "until":
            return joined(t, plain(" < ", RELATION), bounds[0])
        case "otherwise":
            return plain(r"\text{otherwise}", 4.2)
    raise ValueError(f"no kind of interval is called {kind!r}")


def _sinusoid(symbol: Symbol) -> Box:
    amplitude, angle, phase = symbol.parts
    inside = joined(side_box(angle), plain(" - ", BINARY), side_box(phase))
    front = side_box(amplitude)
    if _binds_loosely(amplitude):
        front = bracketed(front)
    one = isinstance(amplitude, Number) and amplitude.value == 1
    head = [] if one else [front, plain(r"\,", 0.2)]
    kernel = plain(r"\sin" if symbol.indices == ("sin",) else r"\cos", 1.2)
    return joined(*head, kernel, bracketed(inside))


def _arc(symbol: Symbol) -> Box:
    *turns, ratio = symbol.parts
    value = joined(plain(r"\arctan", 2.9), bracketed(side_box(ratio)))
    negative = symbol.indices == ("-",)
    if not turns:
        return joined(plain("-", 0.8), value) if negative else value
    return joined(side_box(turns[0]), plain(" - " if negative else " + ", BINARY), value)


def _angle_of(symbol: Symbol) -> Box:
    y, x = map(side_box, symbol.parts)
    point = bracketed(joined(y, plain(r",\, ", 0.4), x))
    return joined(plain(r"\operatorname{atan2}", 2.6), point)


def _cases(symbol: Symbol) -> Box:
    values = [side_box(part) for part in symbol.parts[::2]]
    places = [side_box(part) for part in symbol.parts[1::2]]
    tall = any(box.height > 1 for box in values)
    rows = [
        f"{_case_value(value)} & {place.latex}" for value, place in zip(values, places, strict=True)
    ]
    inside = (r" \\[10pt] " if tall else r" \\ ").join(rows)
    width = max(b.width for b in values) + max(b.width for b in places) + 2.4
    return Box(rf"\begin{{cases}} {inside} \end{{cases}}", width, 3)


def _case_value(box: Box) -> str:
    return rf"\displaystyle {box.latex}," if box.height > 1 else f"{box.latex},"


KINDS: dict[str, Callable[[Symbol], Box]] = {
    "matrix": lettered("A"),
    "vector": lettered("x"),
    "scalar": scalar,
    "identity": lettered("I"),
    "zero": lambda _: plain(r"\boldsymbol{0}", 0.6),
    "inverse": inverse,
    "derivative": derivative,
    "transition": exponential("A"),
    "exponential": exponential("J"),
    "characteristic polynomial": _polynomial,
    "determinant": determinant,
    "resolvent": resolvent,
    "adjugate": adjugate,
    "residue sum": residue_sum,
    "shifted": shifted,
    "entry": _entry,
    "pair": _pair,
    "real pair": _real_pair,
    "sum": _sum,
    "quotient": _quotient,
    "time derivative": time_derivative,
    "dotted": dotted,
    "step": step,
    "one-sided": one_sided,
    "blocks": _blocks,
    "interval": _interval,
    "cases": _cases,
    "sinusoid": _sinusoid,
    "turn": turn,
    "arc": _arc,
    "angle of": _angle_of,
}
