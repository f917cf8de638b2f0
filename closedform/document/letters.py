"""Symbols that are one letter with marks on it: matrices, vectors, functions, exponentials."""

from __future__ import annotations

from collections.abc import Callable

from closedform.derivation.step import Symbol
from closedform.notation.expression import (
    ONE,
    ZERO,
    Expression,
    Name,
    Negation,
    Number,
    Product,
    Quotient,
    Sum,
)
from closedform.notation.latex.box import BINARY, Box, Style, bracketed, joined, plain
from closedform.notation.latex.formula import formula, signed
from closedform.notation.latex.names import derivative_box, letter_box, name_box, subscripted

__all__ = [
    "adjugate",
    "applied",
    "bold",
    "derivative",
    "determinant",
    "dotted",
    "exponential",
    "inverse",
    "lettered",
    "one_sided",
    "raised",
    "residue_sum",
    "resolvent",
    "scalar",
    "shifted",
    "step",
    "time_derivative",
    "turn",
]


def bold(symbol: Symbol, letter: str, style: Style = Style.DISPLAY) -> Box:
    """Return the symbol's letter in bold italics with its indices."""
    return subscripted(lettering(symbol.letter or letter, style), symbol.indices, style)


def lettering(text: str, style: Style) -> Box:
    """Return a letter in bold italics, with a wide hat if it ends in _hat."""
    plain_text = text.removesuffix("_hat")
    box = letter_box(plain_text, style, bold=True)
    if plain_text == text:
        return box
    return Box(rf"\widehat{{{box.latex}}}", box.width, box.height)


def raised(box: Box, exponent: str, width: float) -> Box:
    """Return the piece with an exponent."""
    return Box(f"{box.latex}^{{{exponent}}}", box.width + width, box.height)


def primed(box: Box, order: int) -> Box:
    """Return the piece with primes, or with the order of a high derivative."""
    if order > 3:
        return raised(box, f"({order})", 1.2)
    return Box(box.latex + "'" * order, box.width + 0.3 * order, box.height)


def applied(box: Box, argument: Expression | None) -> Box:
    """Return the piece with an argument in brackets, if there is one."""
    return box if argument is None else joined(box, bracketed(formula(argument)))


def lettered(letter: str) -> Callable[[Symbol], Box]:
    """Return what sets a symbol whose own letter is the one given."""

    def setter(symbol: Symbol) -> Box:
        return applied(bold(symbol, letter), symbol.argument)

    return setter


def scalar(symbol: Symbol) -> Box:
    """Return a name with indices, primes and argument."""
    box = name_box(symbol.letter, extra=symbol.indices)
    return applied(primed(box, symbol.order), symbol.argument)


def derivative(symbol: Symbol) -> Box:
    """Return the derivative of a vector."""
    return applied(primed(bold(symbol, "x"), max(symbol.order, 1)), symbol.argument)


def inverse(symbol: Symbol) -> Box:
    """Return the inverse of a matrix."""
    return raised(bold(symbol, "P"), "-1", 1.1)


def exponential(letter: str) -> Callable[[Symbol], Box]:
    """Return what sets e to a matrix times a time."""

    def setter(symbol: Symbol) -> Box:
        argument = symbol.argument or Name("t")
        raised = formula(argument, Style.SCRIPT)
        base = bold(symbol, letter, Style.SCRIPT)
        if isinstance(argument, Number) and argument.value.denominator == 1 <= argument.value:
            base, raised = raised, base  # e^(2A)
        elif isinstance(argument, Sum | Negation | Number | Quotient):
            raised = bracketed(raised, Style.SCRIPT)
        return Box(
            rf"\mathrm{{e}}^{{{base.latex}{raised.latex}}}", 0.48 + base.width + raised.width
        )

    return setter


def difference(symbol: Symbol, variable: str) -> Box:
    """Return lambda I - A in brackets."""
    argument = formula(symbol.argument or Name(variable))
    head = Box(rf"{argument.latex}\boldsymbol{{I}} - ", argument.width + 0.6 + BINARY)
    return bracketed(joined(head, bold(symbol, "A")))


def determinant(symbol: Symbol) -> Box:
    """Return det(lambda I - A)."""
    return joined(plain(r"\det", 1.5), difference(symbol, "lambda"))


def resolvent(symbol: Symbol) -> Box:
    """Return (s I - A)^(-1)."""
    return raised(difference(symbol, "s"), "-1", 1.1)


def adjugate(symbol: Symbol) -> Box:
    """Return adj(s I - A)."""
    return joined(plain(r"\operatorname{adj}", 1.6), difference(symbol, "s"))


def dotted(symbol: Symbol) -> Box:
    """Return a vector with dots, or primes: its derivatives with respect to the time."""
    body = lettering(symbol.letter or "x", Style.DISPLAY)
    box = derivative_box(body, symbol.indices, max(symbol.order, 1), Style.DISPLAY)
    return applied(box, symbol.argument)


def step(symbol: Symbol) -> Box:
    """Return the unit step."""
    return applied(plain(r"\varepsilon", 0.52), symbol.argument)


def one_sided(symbol: Symbol) -> Box:
    """Return the limit of a function at an instant from one side."""
    at = formula(symbol.argument or Name("t"))
    if not isinstance(symbol.argument, Name | Number):
        at = bracketed(at)
    limit = Box(f"{at.latex}^{{{symbol.indices[0]}}}", at.width + 0.7, at.height)
    return joined(name_box(symbol.letter), bracketed(limit))


def turn(symbol: Symbol) -> Box:
    """Return a part of pi."""
    above, below = map(int, symbol.indices)
    size = "" if abs(above) == 1 else str(abs(above))
    sign = "-" if above < 0 else ""
    if below == 1:
        return plain("0" if above == 0 else rf"{sign}{size}\uppi", 1.8)
    return Box(rf"{sign}\frac{{{size}\uppi}}{{{below}}}", 2.0, 2)


def time_derivative(symbol: Symbol) -> Box:
    """Return d/dt."""
    t = formula(symbol.argument or Name("t"))
    return Box(rf"\frac{{\mathrm{{d}}}}{{\mathrm{{d}}{t.latex}}}", t.width + 0.8, 2)


def residue_sum(symbol: Symbol) -> Box:
    """Return the sum of N(lambda) e^(lambda t)/p'(lambda) over the zeros of p."""
    variable = symbol.parts[0] if symbol.parts else Name("lambda")
    if not isinstance(variable, Name):
        raise TypeError(f"{variable} is no variable")
    root = formula(variable)
    exponent = formula(Product((variable, symbol.argument or Name("t"))), Style.SCRIPT)
    value = bracketed(root)
    above = joined(bold(symbol, "N"), value)
    latex = (
        rf"\sum_{{p{value.latex} = 0}} \frac{{{above.latex}}}{{p'{value.latex}}}\,"
        rf"\mathrm{{e}}^{{{exponent.latex}}}"
    )
    return Box(latex, 3.0 + above.width + 0.7 + exponent.width, 3)


def shifted(symbol: Symbol) -> Box:
    """Return A less a multiple of I, or a power of that."""
    box = bold(symbol, "A")
    if symbol.argument is None:
        raise ValueError("a shifted matrix needs the eigenvalue as its argument")
    if symbol.argument != ZERO:
        negative, size = signed(symbol.argument)
        amount = formula(size)
        if isinstance(size, Sum):
            amount = bracketed(amount)
        if size == ONE:
            amount = Box("", 0.0)
        gap = Box("" if isinstance(size, Name | Number) and not amount.height else r"\,", 0.2)
        sign = Box(" + " if negative else " - ", BINARY)
        box = joined(box, sign, amount, gap, Box(r"\boldsymbol{I}", 0.6))
    if symbol.order > 1:
        box = box if symbol.argument == ZERO else bracketed(box)
        box = raised(box, str(symbol.order), 0.5)
    return box
