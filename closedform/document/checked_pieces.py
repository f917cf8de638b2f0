"""What was read, as pieces between which a line of LaTeX may end.

A line ends before a relation or before a sign of a sum.  A term that is wider than a line is
opened: a product at the signs inside a bracket, a fraction as one over its denominator times
its numerator, a list between its items.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from closedform.notation.written.latex_form import latex_written
from closedform.notation.written.plain_form import plain_written
from closedform.notation.written.tree import (
    Array,
    Jet,
    Listing,
    Negation,
    PlusMinus,
    Product,
    Quotient,
    Sum,
    Symbol,
    Written,
)

__all__ = ["Piece", "piece", "pieces"]

WIDEST = 64
"""Characters of plain notation up to which a term is surely narrower than a line."""


@dataclass(frozen=True, slots=True)
class Piece:
    """LaTeX that is not broken, and the plain notation of it, for want of room."""

    latex: str
    plain: str

    def after(self, latex: str, plain: str = "") -> Piece:
        """Return the piece with something before it."""
        return Piece(f"{latex}{self.latex}", f"{plain or latex}{self.plain}")

    def before(self, latex: str, plain: str = "") -> Piece:
        """Return the piece with something behind it."""
        return Piece(f"{self.latex}{latex}", f"{self.plain}{plain or latex}")

    def signed(self, latex: str, plain: str) -> Piece:
        """Return the piece with a sign before it, before which a line may end."""
        return self.after(f"{{}}{latex} ", f"{plain} ")


def piece(tree: Written) -> Piece:
    """Return a formula as one piece."""
    return Piece(latex_written(tree), plain_written(tree))


def pieces(tree: Written) -> list[Piece]:
    """Return the parts of a formula before each of which, but the first, a line may end."""
    return _of_sum(tree) if isinstance(tree, Sum) else _opened(tree)


def _of_sum(tree: Sum) -> list[Piece]:
    found: list[Piece] = []
    for i, term in enumerate(tree.terms):
        latex, plain, size = _signed(term)
        first, *rest = _factor(size)
        if i:
            first = first.signed(latex or "+", plain or "+")
        elif latex:
            first = first.after(f"{latex} ", plain)
        found += [first, *rest]
    return found


def _signed(term: Written) -> tuple[str, str, Written]:
    """Return a term's sign as LaTeX and plain, empty for plus, and the term without it."""
    match term:
        case Negation(operand):
            return "-", "-", operand
        case PlusMinus(operand, 1):
            return r"\pm", "±", operand
        case PlusMinus(operand, _):
            return r"\mp", "∓", operand
    return "", "", term


def _factor(tree: Written) -> list[Piece]:
    """Return the pieces of a formula behind a sign or beside a factor, in brackets if need be."""
    return _in_brackets(tree) if isinstance(tree, Sum | Negation | PlusMinus) else _opened(tree)


def _opened(tree: Written) -> list[Piece]:
    """Return a formula as one piece if it is short, else as several where that can be."""
    whole = piece(tree)
    if len(whole.plain) <= WIDEST:
        return [whole]
    match tree:
        case Sum():
            return _of_sum(tree)
        case Negation() | PlusMinus():
            latex, plain, size = _signed(tree)
            first, *rest = _factor(size)
            return [first.after(f"{latex} ", plain), *rest]
        case Product(factors):
            return _of_product(factors)
        case Quotient(above, below):
            lower = piece(below)
            if len(lower.plain) > WIDEST // 2:
                return [*_in_brackets(above), *_led(_in_brackets(below), r"\big/", "/")]
            return _led(
                _in_brackets(above), rf"\frac{{1}}{{{lower.latex}}}\,", f"1/({lower.plain})*"
            )
        case Listing(items):
            return _of_list(items)
    return [whole]


def _of_product(factors: Sequence[Written]) -> list[Piece]:
    """Return the factors: those between brackets and matrices together, a dot where one is due."""
    found: list[Piece] = []
    before: Written | None = None
    for group in _grouped(factors):
        own = _factor(group[0]) if len(group) == 1 else [piece(Product(group))]
        if before is not None:
            called = isinstance(before, Jet | Symbol)
            dot = called or own[0].latex[0].isdigit() or not _apart(group[0], before)
            own[0] = own[0].signed(r"\cdot", "*") if dot else own[0].after(r"\,", "*")
        found += own
        before = group[-1]
    return found


def _grouped(factors: Sequence[Written]) -> list[tuple[Written, ...]]:
    """Return the factors in groups that are not broken: each alone if no bracket parts them."""
    if not any(_stands_out(factor) for factor in factors):
        return [(factor,) for factor in factors]
    groups: list[tuple[Written, ...]] = []
    for factor in factors:
        if groups and not _stands_out(factor) and not _stands_out(groups[-1][-1]):
            groups[-1] = (*groups[-1], factor)
        else:
            groups.append((factor,))
    return groups


def _stands_out(factor: Written) -> bool:
    return isinstance(factor, Sum | Negation | PlusMinus | Array)


def _apart(one: Written, other: Written) -> bool:
    """Whether a bracket stands between two factors side by side."""
    return _stands_out(one) or _stands_out(other)


def _of_list(items: Sequence[Written]) -> list[Piece]:
    found: list[Piece] = []
    for item in items:
        own = pieces(item)
        found += [*own[:-1], own[-1].before(r",\ ", ", ")]
    found[-1] = pieces(items[-1])[-1].before(r"\}", "}")
    return _led(found, r"\{", "{")


def _in_brackets(tree: Written) -> list[Piece]:
    r"""Return a formula in brackets; \left and \right cannot stand on different lines."""
    whole = piece(tree)
    if len(whole.plain) <= WIDEST:
        return [Piece(rf"\left({whole.latex}\right)", f"({whole.plain})")]
    inside = pieces(tree)
    tall = any(r"\frac" in own.latex or r"\begin" in own.latex for own in inside)
    size = "bigg" if tall else "big"
    inside[-1] = inside[-1].before(rf"\{size}r)", ")")
    return _led(inside, rf"\{size}l(", "(")


def _led(following: list[Piece], latex: str, plain: str) -> list[Piece]:
    return [following[0].after(latex, plain), *following[1:]]
