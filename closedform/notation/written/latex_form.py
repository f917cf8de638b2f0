r"""What was written as LaTeX, set as ISO 80000-2 asks.

The numbers e, i and \uppi and the d of a differential are upright, names are printed as
everywhere in this program (``notation.latex.names``), matrices in square brackets.
"""

from __future__ import annotations

import re

from closedform.notation.latex.names import GREEK, THE_NUMBER, is_raised, name_box
from closedform.notation.written.plain_form import digits
from closedform.notation.written.tree import (
    Apply,
    Array,
    Constant,
    Derivative,
    Evaluated,
    Identity,
    Integral,
    Jet,
    Limit,
    Listing,
    Literal,
    Negation,
    Piecewise,
    PlusMinus,
    Power,
    Product,
    Quotient,
    Range,
    Sum,
    SumOver,
    Symbol,
    Transform,
    Written,
)

__all__ = ["latex_name", "latex_range", "latex_written"]

SUM, PRODUCT, POWER, ATOM = 1, 2, 3, 4
"""How tightly a formula binds; brackets stand where a place asks for more."""

CONSTANTS = {"e": r"\mathrm{e}", "i": r"\mathrm{i}", "pi": THE_NUMBER["pi"], "oo": r"\infty"}
RELATIONS = {"≈": r"\approx", "≠": r"\neq", "≤": r"\leq", "≥": r"\geq", "→": r"\to"}
RELATIONS |= {"≡": r"\equiv", "∝": r"\propto"}
OWN_COMMAND = (
    *("sin", "cos", "tan", "cot", "sec", "csc", "sinh", "cosh", "tanh", "coth", "ln"),
    *("exp", "arg", "min", "max", "det"),
)
HEADS = {name: rf"\{name}" for name in OWN_COMMAND}
HEADS |= {name: rf"\arc{name[1:]}" for name in ("asin", "acos", "atan")}
HEADS |= {name: rf"\operatorname{{ar{name[1:]}}}" for name in ("asinh", "acosh", "atanh")}
HEADS |= {"log10": r"\log_{10}", "step": r"\varepsilon", "delta": r"\delta"}
HEADS |= {"re": r"\operatorname{Re}", "im": r"\operatorname{Im}", "sign": r"\operatorname{sgn}"}
HEADS |= {"trace": r"\operatorname{tr}", "atan2": r"\operatorname{atan2}"}
ACCENTS = {"hat": r"\hat", "bar": r"\bar", "tilde": r"\tilde"}
ACCENTED = re.compile(r"(?P<letter>[A-Za-z]+?)(?P<accent>hat|bar|tilde)(?P<rest>(_[A-Za-z0-9]+)*)")
ROW_END = r" \\ "
BEHIND = {"transpose": r"^{\mathsf{T}}", "inverse": "^{-1}", "factorial": "!"}


def latex_written(tree: Written) -> str:
    r"""Return a formula as LaTeX for mathematics mode.

    >>> from closedform.notation.written.tree import EULER
    >>> latex_written(Power(EULER, Negation(Product((Symbol("omega_n"), Symbol("t"))))))
    '\\mathrm{e}^{-\\omega_{\\mathrm{n}}t}'
    """
    match tree:
        case Literal(value):
            return _number(tree) or rf"\frac{{{value.numerator}}}{{{value.denominator}}}"
        case Constant(name):
            return CONSTANTS[name]
        case Symbol(name):
            return latex_name(name)
        case Jet(name, order, at):
            instant = "" if at is None else _bracketed(latex_written(at))
            return latex_name(name + "'" * order) + instant
        case Negation(operand):
            return "-" + _within(operand, PRODUCT)
        case PlusMinus(operand, upper):
            return _sign(upper) + _within(operand, PRODUCT)
        case Sum((first, *rest)):
            head = _within(first, SUM + isinstance(first, Sum))
            return head + "".join(map(_later_term, rest))
        case Product((first, *rest)):
            text = _within(first, PRODUCT + isinstance(first, Product))
            for before, factor in zip(tree.factors, rest, strict=False):
                called = isinstance(before, Jet) and before.at is None
                right = _within(factor, PRODUCT + isinstance(factor, Product))
                text = _joined(text, right, called=called)
            return text
        case Quotient(above, below):
            return rf"\frac{{{latex_written(above)}}}{{{latex_written(below)}}}"
        case Power(base, exponent):
            return _power(base, exponent)
        case Apply(function, arguments):
            return _applied(function, arguments)
    return _other(tree)


def _other(tree: Written) -> str:
    match tree:
        case Array(rows):
            lines = (" & ".join(map(latex_written, row)) for row in rows)
            return rf"\begin{{bmatrix}} {ROW_END.join(lines)} \end{{bmatrix}}"
        case Identity(size):
            return r"\boldsymbol{I}" + ("" if size is None else f"_{{{size}}}")
        case Listing(items):
            return rf"\left\{{{_listed(items)}\right\}}"
        case Range():
            return latex_range(tree)
        case Piecewise(pieces):
            lines = (f"{latex_written(value)} & {_when(ranges)}" for value, ranges in pieces)
            return rf"\begin{{cases}} {ROW_END.join(lines)} \end{{cases}}"
        case Integral(body, variable, lower, upper):
            ends = "" if lower is None or upper is None else _ends(lower, upper)
            return rf"\int{ends} {_within(body, PRODUCT)}\,\mathrm{{d}}{latex_name(variable)}"
        case SumOver(body, variable, low, high):
            ends = f"_{{{latex_name(variable)}={latex_written(low)}}}^{{{latex_written(high)}}}"
            return rf"\sum{ends} {_within(body, PRODUCT)}"
        case Limit(body, variable, point):
            end = rf"{latex_name(variable)}\to {latex_written(point)}"
            return rf"\lim_{{{end}}} {_within(body, PRODUCT)}"
        case Transform(body, back):
            power = "^{-1}" if back else ""
            return rf"\mathcal{{L}}{power}\left\{{{latex_written(body)}\right\}}"
        case Evaluated(body, variable, at, None):
            end = f"{latex_name(variable)}={latex_written(at)}"
            return rf"\left.{latex_written(body)}\right|_{{{end}}}"
        case Evaluated(body, _, at, lower) if lower is not None:
            return rf"\left[{latex_written(body)}\right]{_ends(lower, at)}"
        case Derivative(body, variable, order):
            power = "" if order == 1 else f"^{{{order}}}"
            below = rf"\mathrm{{d}}{latex_name(variable)}{power}"
            return rf"\frac{{\mathrm{{d}}{power}}}{{{below}}}{_bracketed(latex_written(body))}"
    raise ValueError(f"no LaTeX form of {type(tree).__name__}")


def latex_name(name: str) -> str:
    r"""Return a name as it is printed in this program, with an accent where it ends in one.

    >>> latex_name("Fhat"), latex_name("omega_n_1"), latex_name("lambda_star")
    ('\\hat{F}', '\\omega_{\\mathrm{n},1}', '\\lambda^{*}')
    """
    if name.endswith("_star"):
        return f"{latex_name(name[:-5])}^{{*}}"
    accented = ACCENTED.fullmatch(name)
    if accented and (len(accented["letter"]) == 1 or accented["letter"] in GREEK):
        letter, indices = name_box(accented["letter"]).latex, name_box(f"x{accented['rest']}").latex
        return f"{ACCENTS[accented['accent']]}{{{letter}}}{indices[1:]}"
    return name_box(name).latex


def latex_range(given: Range) -> str:
    """Return a chain of comparisons as LaTeX."""
    first, *rest = map(latex_written, given.members)
    later = zip(given.signs, rest, strict=False)
    return first + "".join(f" {RELATIONS.get(sign, sign)} {text}" for sign, text in later)


def _number(number: Literal) -> str:
    text = digits(number)
    mantissa, exponential, exponent = text.partition("e")
    return rf"{mantissa} \times 10^{{{exponent}}}" if exponential else text


def _when(ranges: tuple[Range, ...] | None) -> str:
    if ranges is None:
        return r"\text{otherwise}"
    return r"\text{for } " + r" \text{ and } ".join(map(latex_range, ranges))


def _ends(lower: Written, upper: Written) -> str:
    return f"_{{{latex_written(lower)}}}^{{{latex_written(upper)}}}"


def _sign(upper: int) -> str:
    return r"\pm " if upper == 1 else r"\mp "


def _later_term(term: Written) -> str:
    match term:
        case Negation(operand):
            return f" - {_within(operand, PRODUCT)}"
        case PlusMinus(operand, upper):
            return f" {_sign(upper)}{_within(operand, PRODUCT)}"
    return f" + {_within(term, PRODUCT)}"


def _joined(left: str, right: str, *, called: bool) -> str:
    """Return two factors side by side: a dot before digits, or where a bracket would be a call."""
    bracket = right.startswith(("(", r"\left"))
    if right[0].isdigit() or (called and bracket):
        return rf"{left} \cdot {right}"
    if right.startswith(r"\frac") and left[-1].isdigit():
        return rf"{left} \cdot {right}"
    apart = bracket or right.startswith((r"\mathrm", r"\operatorname")) or left.endswith(")")
    if apart and not left.isdigit():
        return rf"{left}\,{right}"
    return f"{left} {right}" if left[-1].isalpha() and right[0].isalpha() else left + right


def _power(base: Written, exponent: Written) -> str:
    raised = _exponent(exponent)
    match base:
        case Symbol(name) | Jet(name, _, None) if not is_raised(name) and "_star" not in name:
            pass
        case Apply(function, _) if function in BEHIND:
            return f"{_bracketed(latex_written(base))}^{{{raised}}}"
    return f"{_within(base, ATOM)}^{{{raised}}}"


def _exponent(exponent: Written) -> str:
    """Return an exponent, its outermost fraction with a slash."""
    match exponent:
        case Negation(Quotient() as inside):
            return f"-{_exponent(inside)}"
        case Quotient(above, below):
            over = latex_written(above) if isinstance(above, Product) else _within(above, POWER)
            return f"{over}/{_within(below, POWER)}"
    return latex_written(exponent)


def _applied(function: str, arguments: tuple[Written, ...]) -> str:
    inside = _listed(arguments)
    match function:
        case "sqrt":
            return rf"\sqrt{{{inside}}}"
        case "abs":
            return rf"\left|{inside}\right|"
        case "norm":
            return rf"\left\|{inside}\right\|"
        case "conj":
            return rf"\overline{{{inside}}}"
        case "transpose" | "inverse" | "factorial":
            return _within(arguments[0], ATOM) + BEHIND[function]
    return HEADS.get(function, rf"\operatorname{{{function}}}") + _bracketed(inside)


def _listed(items: tuple[Written, ...]) -> str:
    return r",\, ".join(map(latex_written, items))


def _bracketed(text: str) -> str:
    tall = re.search(r"\\frac|\\begin|\\left|\\int|\\sum", text)
    return rf"\left({text}\right)" if tall else f"({text})"


def _within(tree: Written, least: int) -> str:
    """Return the formula, in brackets if it binds less than `least`."""
    text = latex_written(tree)
    return text if _strength(tree) >= least else _bracketed(text)


def _strength(tree: Written) -> int:
    match tree:
        case Literal():
            text = _number(tree)
            return POWER if not text or "times" in text else SUM if text.startswith("-") else ATOM
        case Sum() | Negation() | PlusMinus() | Range() | Integral() | SumOver() | Limit():
            return SUM
        case Product():
            return PRODUCT
        case Quotient() | Power() | Derivative() | Transform() | Evaluated():
            return POWER
        case Apply("factorial" | "transpose" | "inverse", _):
            return POWER
        case Jet(name, order, at):
            return POWER if at is not None or is_raised(name + "'" * order) else ATOM
    return ATOM
