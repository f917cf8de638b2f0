r"""Formulas as LaTeX, with their widths: pure functions from `Expression` to `Box`.

Typography follows ISO 80000-2: variables italic; numbers, the base e, the unit i and
function names upright.  ``exp(x)`` is \mathrm{e}^{x}; a quotient is a fraction, slashed
in exponents; factors stand side by side, with a dot only where a number follows.
``step(x)`` is \varepsilon(x), ``delta(x)`` is \delta(x), and an input keeps its name.
"""

from __future__ import annotations

from fractions import Fraction

from closedform.notation.expression import (
    ONE,
    Call,
    Expression,
    Name,
    Negation,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
    factors_of,
    product,
)
from closedform.notation.latex.box import BINARY, Box, Style, bracketed, joined, plain
from closedform.notation.latex.names import is_long, is_raised, name_box

__all__ = ["factors_of", "formula", "front_glue", "signed", "terms_of"]

DIGIT = 0.515
HEAD = {"sin": 1.1, "cos": 1.2, "sinh": 1.65, "cosh": 1.78}
"""Widths of function names; the thin space before them is counted with the factors."""
OPERATORS = frozenset({*HEAD, "exp", "sqrt"})
"""Functions that TeX spaces itself, or that are set as no name in front of a bracket."""


def formula(expression: Expression, style: Style = Style.DISPLAY) -> Box:
    r"""Return a formula that stands alone.

    >>> from closedform.notation.expression import number
    >>> t = Name("t")
    >>> formula(Product((number(3), Call("exp", Negation(Product((number(2), t))))))).latex
    '3\\mathrm{e}^{-2t}'
    """
    match expression:
        case Number(value):
            return _number(value, style, small=False)
        case Negation(Number(value)):
            return _minus(_number(value, style, small=False), style)
    return _sum_level(expression, style)


def terms_of(expression: Expression) -> tuple[Expression, ...]:
    """Return the terms of a sum, sums among its terms opened; else the formula itself."""
    if isinstance(expression, Sum):
        return tuple(term for part in expression.terms for term in terms_of(part))
    return (expression,)


def signed(term: Expression) -> tuple[bool, Expression]:
    """Return whether a term is subtracted, and what is; -(-a) is added."""
    negative = False
    while True:
        match term:
            case Negation(operand):
                negative, term = not negative, operand
            case Product((Negation(operand), *others)):
                negative, term = not negative, Product((operand, *others))
            case Quotient(Negation(operand), below):
                negative, term = not negative, Quotient(operand, below)
            case _:
                return negative, term


def _minus(box: Box, style: Style) -> Box:
    return Box(f"-{box.latex}", box.width + 0.8 * style.scale, box.height)


def _sum_level(expression: Expression, style: Style) -> Box:
    """Return the formula where nothing around it binds tighter than a sum."""
    parts = []
    for i, term in enumerate(terms_of(expression)):
        negative, rest = signed(term)
        body = _term(rest, style, alone=not negative and not isinstance(expression, Sum))
        if i == 0:
            parts.append(_minus(body, style) if negative else body)
        else:
            sign = " - " if negative else " + "
            space = BINARY if style < Style.SCRIPT else 0.8 * style.scale
            parts.append(Box(sign + body.latex, body.width + space, body.height))
    return joined(*parts)


def _term(expression: Expression, style: Style, *, alone: bool = False) -> Box:
    """Return the formula as a term, after a sign for instance: only sums need brackets."""
    if isinstance(expression, Sum | Negation) and not alone:
        return bracketed(_sum_level(expression, style), style)
    if isinstance(expression, Product):
        return _product(expression, style)
    return _factor(expression, style)


def _factor(expression: Expression, style: Style) -> Box:
    """Return the formula as one of several factors."""
    match expression:
        case Number(value):
            return _number(value, style, small=True)
        case Name(text):
            return name_box(text, style)
        case Sum() | Negation():
            return bracketed(_sum_level(expression, style), style)
        case Product():
            return bracketed(_product(expression, style), style)
        case Quotient(Product(factors), Number() as below) if style is Style.DISPLAY and isinstance(
            factors[-1], Sum
        ):
            # a sum is easier to read beside a fraction than on top of it
            front = Quotient(product(factors[:-1]), below)
            return _product(Product((front, factors[-1])), style)
        case Quotient(above, below) if style is Style.DISPLAY and _has_fraction_of_functions(above):
            # fractions on top of one another would be too small to read
            first = next(f for f in factors_of(above) if _holds_fraction(f))
            others = list(factors_of(above))
            others.remove(first)
            return _product(Product((Quotient(product(others), below), first)), style)
        case Quotient(above, below):
            if style >= Style.SCRIPT:
                return _slashed(above, below, style)
            return _fraction(_sum_level(above, style.inner), _sum_level(below, style.inner), style)
        case Power(base, exponent):
            return _power(base, exponent, style)
        case Call(function, argument):
            return _call(function, argument, style, bare=False)


def _has_fraction_of_functions(above: Expression) -> bool:
    """Whether one factor of a numerator is a sum with a fraction that is more than a number."""
    return any(map(_holds_fraction, factors_of(above)))


def _holds_fraction(factor: Expression) -> bool:
    if not isinstance(factor, Sum):
        return False
    terms = (signed(term)[1] for term in factor.terms)
    parts = (part for term in terms for part in factors_of(term))
    return any(
        _holds_fraction(p) or (isinstance(p, Quotient) and not isinstance(p.numerator, Number))
        for p in parts
    )


def _number(value: Fraction, style: Style, *, small: bool) -> Box:
    above, below = str(value.numerator), str(value.denominator)
    if value.denominator == 1:
        return plain(above, DIGIT * len(above), style)
    if style >= Style.SCRIPT:
        return plain(f"{above}/{below}", DIGIT * (len(above) + len(below) + 1), style)
    longest = max(len(above), len(below))
    if style is Style.DISPLAY and small:
        return Box(rf"\tfrac{{{above}}}{{{below}}}", DIGIT * longest * 0.75 + 0.3, 1)
    wide = DIGIT * longest * style.inner.scale + 0.3
    return Box(rf"\frac{{{above}}}{{{below}}}", wide, 2 if style is Style.DISPLAY else 1)


def _fraction(above: Box, below: Box, style: Style) -> Box:
    # In a text-size formula the parts of a fraction are of script size: `inner` gave them
    # the scale, so that the widths are those of what is printed.
    wide = max(above.width, below.width) + 0.3
    height = 2 if style is Style.DISPLAY or above.height or below.height else 1
    return Box(rf"\frac{{{above.latex}}}{{{below.latex}}}", wide, height)


def _slashed(above: Expression, below: Expression, style: Style) -> Box:
    top = _term(above, style)
    single = isinstance(below, Name | Power | Call) or (
        isinstance(below, Number) and below.value.denominator == 1
    )
    bottom = _factor(below, style)
    if not single:
        bottom = bracketed(_sum_level(below, style), style)
    return joined(top, plain("/", DIGIT, style), bottom)


def _power(base: Expression, exponent: Expression, style: Style) -> Box:
    raised = _sum_level(exponent, style.script)
    match base, exponent:
        case Call("sin" | "cos" | "sinh" | "cosh" as function, argument), Number(value) if (
            value.denominator == 1 and value > 1
        ):
            inside = bracketed(_sum_level(argument, style), style)
            head = plain(rf"\{function}^{{{raised.latex}}}", HEAD[function], style)
            return joined(Box(head.latex, head.width + raised.width), inside)
        case Name(text), _ if not is_raised(text):
            bottom = _factor(base, style)
        case Call("sqrt", _), _:
            bottom = _factor(base, style)
        case Number(value), _ if value.denominator == 1:
            bottom = _factor(base, style)
        case _:
            bottom = bracketed(_sum_level(base, style), style)
    return Box(
        f"{bottom.latex}^{{{raised.latex}}}", bottom.width + raised.width + 0.1, bottom.height
    )


def _call(function: str, argument: Expression, style: Style, *, bare: bool) -> Box:
    if function == "exp":
        raised = _sum_level(argument, style.script)
        return Box(
            rf"\mathrm{{e}}^{{{raised.latex}}}", raised.width + 0.52 * style.scale, raised.height
        )
    inside = _sum_level(argument, style)
    if function == "sqrt":
        return Box(
            rf"\sqrt{{{inside.latex}}}",
            inside.width + (1.08 if inside.height else 0.92) * style.scale,
            min(inside.height, 2),
        )
    if function not in HEAD:
        return joined(_signal_head(function, style), bracketed(inside, style))
    head = plain(rf"\{function}", HEAD[function] + (0.2 if bare else 0.0), style)
    if bare:
        return joined(head, inside, glue=" ")
    return joined(head, bracketed(inside, style))


def _signal_head(function: str, style: Style) -> Box:
    """Return the letter of the unit step or impulse, or the name of an input."""
    if function == "step":
        return plain(r"\varepsilon", 0.52, style)
    return name_box(function, style)


def _product(expression: Product, style: Style) -> Box:
    factors = factors_of(expression)
    if style >= Style.SCRIPT and len(factors) > 1:
        # 3/2 t is set as 3t/2 in an exponent: the slash would seem to go on
        above, below = zip(*map(_over, factors), strict=True)
        if any(lower != ONE for lower in below):
            return _slashed(product(above), product(below), style)
    boxes: list[Box] = []
    for i, factor in enumerate(factors):
        following = factors[i + 1] if i + 1 < len(factors) else None
        box = _one_of(factor, following, style)
        if i:
            glue, space = front_glue(factors[i - 1], factor, boxes[-1], box)
            boxes.append(Box(glue, space * style.scale))
        boxes.append(box)
    return joined(*boxes)


def _over(factor: Expression) -> tuple[Expression, Expression]:
    """Return what stands above and below the slash of a factor, if it has one."""
    match factor:
        case Number(value):
            return Number(Fraction(value.numerator)), Number(Fraction(value.denominator))
        case Quotient(above, below):
            return above, below
    return factor, ONE


def _one_of(factor: Expression, following: Expression | None, style: Style) -> Box:
    """Return a factor; a function of a lone name has no brackets if nothing can join it."""
    match factor:
        case Call("sin" | "cos" | "sinh" | "cosh" as function, Name() as argument) if (
            following is None
            or (isinstance(following, Call) and following.function in OPERATORS - {"sqrt"})
        ):
            return _call(function, argument, style, bare=True)
    return _factor(factor, style)


def front_glue(before: Expression, after: Expression, left: Box, right: Box) -> tuple[str, float]:
    """Return what stands between two factors, and its width at text size."""
    both_numbers = _is_numeric(before) and _is_numeric(after)
    if right.latex[0].isdigit() or (both_numbers and not _is_root(after)):
        return r" \cdot ", 0.75
    if isinstance(before, Number):
        return (r"\,", 0.17) if _is_word(after) else ("", 0.0)
    if isinstance(after, Call) and after.function not in OPERATORS:
        return r"\,", 0.17
    if isinstance(after, Call) and after.function == "exp":
        return r"\,", 0.17
    if isinstance(before, Call) and left.latex.endswith(")"):
        return r"\,", 0.17
    if isinstance(before, Name):
        if isinstance(after, Name) and not is_long(before.text) and not is_long(after.text):
            close = left.latex[-1].isalpha() and right.latex[0].isalpha()
            return (" " if close else ""), 0.0
        if right.latex.startswith("(") or is_long(before.text) or isinstance(after, Name):
            return r"\,", 0.17
    space = 0.2 if isinstance(before, Call) or isinstance(after, Call) else 0.0
    # a letter after a command name would become part of it: \omega x
    return (" " if left.latex[-1].isalpha() and right.latex[0].isalpha() else ""), space


def _is_word(expression: Expression) -> bool:
    match expression:
        case Name(text):
            return is_long(text)
        case Call(function, _) if function not in OPERATORS:
            return function != "step" and is_long(function)
    return False


def _is_root(expression: Expression) -> bool:
    match expression:
        case Call("sqrt", _):
            return True
        case Quotient(above, _):
            return not isinstance(above, Number)
    return False


def _is_numeric(expression: Expression) -> bool:
    match expression:
        case Number():
            return True
        case Quotient(Number(), _):
            return True
    return False
