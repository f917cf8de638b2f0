"""What can be wrong with a formula: each error holds its place and its facts."""

from __future__ import annotations

from closedform.errors import InputError, Place

__all__ = [
    "AmbiguousFormulaError",
    "ConstantTermError",
    "DivisionByZeroError",
    "ExponentError",
    "FormulaDepthError",
    "FormulaError",
    "FormulaLengthError",
    "FormulaSyntaxError",
    "InexactFunctionError",
    "NegativeRootError",
    "NestedRootError",
    "NonlinearTermError",
    "NotANumberError",
    "NotFiniteError",
    "PlacedError",
    "SizeError",
    "UndeclaredNameError",
    "quoted",
    "sentence",
    "shown",
]

WIDTH = 76
"""Columns of an excerpt; a longer line is cut around its caret."""


def shown(place: Place, paragraph: str) -> str:
    """Return the paragraph with its place before it, and below it the excerpt and a caret."""
    head = f"{place}: {paragraph}" if str(place) else paragraph
    if place.excerpt is None:
        return head
    line = "".join(c if c.isprintable() else " " for c in place.excerpt)
    if place.column is None:
        return f"{head}\n  {line[:WIDTH]}{'…' if len(line) > WIDTH else ''}"
    start = max(0, place.column - 1 - WIDTH // 2) if len(line) > WIDTH else 0
    before = "…" if start else ""
    after = "…" if start + WIDTH < len(line) else ""
    caret = " " * (len(before) + place.column - 1 - start) + "^"
    return f"{head}\n  {before}{line[start : start + WIDTH]}{after}\n  {caret}"


def quoted(text: str, limit: int = 60) -> str:
    """Return text as it is quoted in a message: printable, in quotation marks, not too long."""
    text = "".join(c if c.isprintable() else " " for c in text)
    return f"'{text}'" if len(text) <= limit else f"'{text[: limit - 1]}…'"


def sentence(paragraph: str) -> str:
    """Return a paragraph that ends as a sentence does, with a full stop if nothing else."""
    return paragraph if paragraph.endswith((".", "?", "…")) else f"{paragraph}."


class PlacedError(InputError):
    """An error that shows where in its source something stands: `place`."""

    def __init__(self, place: Place, *facts: object) -> None:
        super().__init__(place, *facts)
        self.place = place

    def __str__(self) -> str:
        return shown(self.place, self.paragraph)

    @property
    def paragraph(self) -> str:
        """What is wrong and what to do about it, a sentence without the place."""
        return sentence(self._paragraph())

    def _paragraph(self) -> str:
        """Return what is wrong and what to do about it, without the place; a full stop is added."""
        raise NotImplementedError


class FormulaError(PlacedError):
    """A formula that cannot be used as it stands."""


class FormulaSyntaxError(FormulaError):
    """The text is no formula: `mistake` is a line of the reader's table, `found` the culprit."""

    def __init__(self, place: Place, mistake: str, found: str, advice: str) -> None:
        super().__init__(place, mistake, found, advice)
        self.mistake, self.found, self.advice = mistake, found, advice

    def _paragraph(self) -> str:
        found = f" (found {quoted(self.found)})" if self.found else ""
        return f"{self.mistake}{found}: {self.advice}"


class UndeclaredNameError(FormulaError):
    """A name that the model does not declare; `nearest` is the declared name most like it."""

    def __init__(
        self, place: Place, name: str, nearest: str | None, known: tuple[str, ...]
    ) -> None:
        super().__init__(place, name, nearest, known)
        self.name, self.nearest, self.known = name, nearest, known

    def _paragraph(self) -> str:
        text = f"the name {quoted(self.name)} is not declared"
        if self.name in CONSTANTS:
            return f"{text}: {CONSTANTS[self.name]}"
        if self.nearest:
            return f"{text}; did you mean '{self.nearest}'?"
        if not self.known:
            return f"{text}: only numbers may stand here"
        listed = ", ".join(self.known[:8]) + (", …" if len(self.known) > 8 else "")
        return f"{text}; declared here: {listed}"


CONSTANTS = {
    "pi": "numbers here are rational or square roots of rationals, and pi is neither",
    "e": "numbers here are rational or square roots of rationals; the function is exp(...)",
    "i": "formulas here are real; there is no imaginary unit",
}


class NotFiniteError(FormulaError):
    """nan, inf or the like in the place of a number."""

    def __init__(self, place: Place, found: str) -> None:
        super().__init__(place, found)
        self.found = found

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} is no value: values must be finite exact numbers; "
            "write an integer, a decimal or a formula of them"
        )


class AmbiguousFormulaError(FormulaError):
    """Text that people read in two ways, `found`; `ways` are two unmistakable spellings."""

    def __init__(self, place: Place, found: str, ways: tuple[str, str]) -> None:
        super().__init__(place, found, ways)
        self.found, self.ways = found, ways

    def _paragraph(self) -> str:
        first, second = map(quoted, self.ways)
        return f"{self.found} can be read in two ways: write {first} or {second}"


class FormulaLengthError(FormulaError):
    """A formula longer than the reader accepts."""

    def __init__(self, place: Place, length: int, limit: int) -> None:
        super().__init__(place, length, limit)
        self.length, self.limit = length, limit

    def _paragraph(self) -> str:
        return (
            f"the formula has {self.length} characters, and at most {self.limit} are read; split it"
        )


class FormulaDepthError(FormulaError):
    """Brackets, signs, powers or divisions inside one another beyond the limit."""

    def __init__(self, place: Place, limit: int) -> None:
        super().__init__(place, limit)
        self.limit = limit

    def _paragraph(self) -> str:
        return (
            f"the formula is nested more than {self.limit} levels deep "
            "(brackets, signs, powers and repeated divisions count); write it flatter"
        )


class SizeError(FormulaError):
    """A number, power or sum of roots too large to be worked with exactly."""

    def __init__(self, place: Place, found: str, limit: str) -> None:
        super().__init__(place, found, limit)
        self.found, self.limit = found, limit

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} is too large to be held exactly: {self.limit}; "
            "choose other units, or write a shorter number"
        )


class FoundError(FormulaError):
    """Base of the errors whose one fact is the part of the formula concerned, `found`."""

    def __init__(self, place: Place, found: str) -> None:
        super().__init__(place, found)
        self.found = found


class DivisionByZeroError(FoundError):
    """A denominator, or the base of a negative power, that is exactly zero."""

    def _paragraph(self) -> str:
        return f"{quoted(self.found)} divides by zero; a denominator must not vanish"


class NegativeRootError(FoundError):
    """The square root of a negative number."""

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} is the square root of a negative number, which is not real; "
            "values must be real numbers"
        )


class NestedRootError(FoundError):
    """The square root of a number that has a square root in it."""

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} is a root of a root: square roots of rational numbers are "
            "read, such as sqrt(2) or 3*sqrt(5)/2; write it without the outer root"
        )


class InexactFunctionError(FoundError):
    """exp, sin, cos, sinh or cosh where an exact number is needed."""

    def _paragraph(self) -> str:
        return (
            f"{quoted(self.found)} is not read as a number: exact numbers here are made of "
            "rational numbers and square roots; give the value as a fraction or a decimal"
        )


class ExponentError(FoundError):
    """An exponent that is neither an integer nor a half on a rational number."""

    def _paragraph(self) -> str:
        return (
            f"the exponent of {quoted(self.found)} is not an integer; powers of exact numbers "
            "have integer exponents, and x^(1/2) is read as sqrt(x)"
        )


class NotANumberError(FoundError):
    """A name where a number is needed."""

    def _paragraph(self) -> str:
        return f"{quoted(self.found)} is a name, and a number is needed here"


class NonlinearTermError(FoundError):
    """A term that is not a number times a state."""

    def _paragraph(self) -> str:
        return (
            f"the term {quoted(self.found)} is not a number times a state; write a sum of "
            "numbers times states, such as (x1 - x2)/2"
        )


class ConstantTermError(FoundError):
    """A number that stands alone in a linear combination of the states."""

    def _paragraph(self) -> str:
        return (
            f"the constant {quoted(self.found)} is added to the states; write a sum of numbers "
            "times states only, and add the constant to the result"
        )
