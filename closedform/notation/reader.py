"""From plain text to the formula tree, with the place of whatever is wrong.

How it reads, where people might differ:

- ``-2^2`` is -4, ``2^3^2`` is 2^9, ``a/b*c`` is (a/b)*c, ``x^2y`` is (x^2)*y.
- Factors may stand side by side, the number first: ``2 cos(3t)``, ``2(x + 1)``, ``k m``.
- ``1/2x`` is refused, since people read it in both ways; ``2x/3`` is 2*x/3.
- ``1e-3`` is a number and so is ``2e1``, unless ``e1`` is a declared name: then the latter
  is refused.  ``2e`` is twice the name ``e``.
- A declared name wins over everything but the names of the functions.
- Where the time goes on, `read_equation` and its like also read x1'', u(t - 2), step(t - 2)
  and delta(t); what a name may be there is said by a `Vocabulary`.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from difflib import get_close_matches
from functools import cache, lru_cache
from importlib.resources import files

from lark import Lark, Token, UnexpectedCharacters, UnexpectedToken

from closedform.errors import Place
from closedform.notation.builder import DEEPEST, Builder, DivisionError, Part, TooDeepError
from closedform.notation.errors import (
    AmbiguousFormulaError,
    FormulaDepthError,
    FormulaError,
    FormulaLengthError,
    FormulaSyntaxError,
    NotFiniteError,
    SizeError,
    UndeclaredNameError,
    quoted,
)
from closedform.notation.expression import Expression
from closedform.notation.jets import jet_of, spelled
from closedform.notation.mistakes import MISTAKES
from closedform.notation.plain import plain
from closedform.notation.timed_mistakes import TIMED_MISTAKES, instead_of, why_name, why_stray
from closedform.notation.vocabulary import Vocabulary

__all__ = [
    "LARGEST_EXPONENT",
    "LONGEST",
    "MOST_DIGITS",
    "NOWHERE",
    "place_of",
    "read_formula",
    "read_with",
]

LONGEST = 100_000
"""Characters of one formula."""
MOST_DIGITS = 1_000
"""Digits of one number as it is written."""
LARGEST_EXPONENT = 1_000
"""The exponent e of a number written 1e5, either sign."""

LONGEST_EXPONENT = 9
"""Characters of an exponent that is worth a comparison."""

NOWHERE = Place()
NUMBER = re.compile(r"(?P<digits>[0-9]+\.?[0-9]*|\.[0-9]+)([eE](?P<exponent>[+-]?[0-9]+))?")
NOT_FINITE = frozenset({"nan", "inf", "infinity", "infty", "oo"})


def read_formula(text: str, *, names: frozenset[str], place: Place = NOWHERE) -> Expression:
    """Return the tree of a formula in plain notation.

    `names` are the names that may occur, in ASCII spelling.  `place` says where the text
    comes from; if it has a line and a column they are those of the first character, and
    its excerpt is that line of the file.  If not, errors count from 1 within the text.

    Raises:  FormulaSyntaxError, UndeclaredNameError, NotFiniteError, AmbiguousFormulaError,
             FormulaLengthError, FormulaDepthError, SizeError.

    >>> read_formula("-x/2", names=frozenset({"x"}))
    Negation(operand=Quotient(numerator=Name(text='x'), denominator=Number(value=Fraction(2, 1))))
    """
    return read_with(text, Vocabulary(names), place)


def read_with(text: str, vocabulary: Vocabulary, place: Place) -> Expression:
    """Return the tree of a formula whose names are used as a vocabulary says.

    Raises what `read_formula` raises.
    """
    if len(text) > LONGEST:
        raise FormulaLengthError(place, len(text), LONGEST)
    tokens, found = _parse(text, vocabulary)
    if isinstance(found, _Stop):
        raise _refusal(found, text, vocabulary, place)
    for token in tokens:
        if token.type == "NAME" and not vocabulary.knows(jet_of(spelled(token))[0]):
            raise _undeclared(token, vocabulary, place_of(text, _start(token), place))
    return found


@dataclass(frozen=True, slots=True)
class _Stop:
    """Where reading stopped, and why: a pair of token types, or one word.

    `start` and `end` bound the text at which it stopped.
    """

    why: tuple[str, ...]
    start: int
    end: int
    ways: tuple[Expression, ...] = ()


@cache
def _parser() -> Lark:
    grammar = files("closedform.notation").joinpath("formula.lark").read_text(encoding="utf-8")
    return Lark(grammar, start="sum", parser="lalr", lexer="basic", transformer=Builder())


def _lexed(text: str) -> tuple[list[Token], int | None]:
    """Return the tokens of a text, and where there is a character that begins none."""
    tokens = []
    reading = _parser().parse_interactive(text)  # its lexer is made once; that of `lex` each time
    try:
        for token in reading.lexer_thread.lex(reading.parser_state):  # type: ignore[no-untyped-call]
            tokens.append(token)  # noqa: PERF402  those before a bad character are kept
    except UnexpectedCharacters as error:
        return tokens, error.pos_in_stream or 0
    return tokens, None


@lru_cache(maxsize=4096)
def _parse(text: str, vocabulary: Vocabulary) -> tuple[Sequence[Token], Expression | _Stop]:
    """Return the tokens read, and the tree or where reading stopped.

    What is read depends on text and vocabulary alone, and checks read many a text again.
    """
    lexed, stray = _lexed(text)
    tokens: list[Token] = []
    opened: list[Token] = []
    before = "START"
    parser = _parser().parse_interactive("")
    token = None
    try:
        for token in vocabulary.applied(lexed):
            if why := _objection(before, token, len(opened), vocabulary):
                return tokens, _Stop(why, _start(token), _start(token) + len(token))
            parser.feed_token(token)
            tokens.append(token)
            before = token.type
            if before == "OPEN":
                opened.append(token)
            elif before == "CLOSE":
                opened.pop()
        if stray is not None:
            why = why_stray(text[stray], lexed[-1].type if lexed else "START", vocabulary)
            return tokens, _Stop(why, stray, stray + 1)
        part: Part = parser.feed_eof()  # type: ignore[no-untyped-call]
    except UnexpectedToken as error:
        if error.token.type != "$END":
            start = _start(error.token)
            return tokens, _Stop((before, error.token.type), start, start + len(error.token))
        at = _start(opened[-1]) if opened and before not in OPERATORS else len(text)
        return tokens, _Stop((before, "END"), at, at)
    except TooDeepError:
        start = _start(token) if token else 0
        return tokens, _Stop(("DEPTH",), start, start)
    except DivisionError as error:
        return tokens, _Stop(("DIVISION",), error.offset, error.offset + 1, error.ways)
    return tokens, part.node


OPERATORS = frozenset({"PLUS", "MINUS", "TIMES", "OVER", "POWER", "FUNCTION"})


def _objection(before: str, token: Token, depth: int, vocabulary: Vocabulary) -> tuple[str, ...]:
    """Return why a token is refused although the grammar may take it, or nothing."""
    if token.type in ("NAME", "FUNCTION"):
        return why_name(token, vocabulary)
    if token.type == "OPEN" and before == "NAME":
        return before, token.type
    if token.type == "OPEN" and depth == DEEPEST:
        return ("DEPTH",)
    if token.type != "NUMBER":
        return ()
    form = NUMBER.fullmatch(token)
    if form is None:
        return ("MALFORMED",)
    exponent = form["exponent"] or "0"
    if len(form["digits"]) > MOST_DIGITS or len(exponent) > LONGEST_EXPONENT:
        return ("SIZE",)
    if abs(int(exponent)) > LARGEST_EXPONENT:
        return ("SIZE",)
    letter = re.search("[eE][0-9]+$", token)
    return ("EXPONENT",) if letter and letter[0] in vocabulary.names else ()


def _refusal(stop: _Stop, text: str, vocabulary: Vocabulary, place: Place) -> FormulaError:
    """Return the error for the place where reading stopped."""
    place = place_of(text, stop.start, place)
    found = text[stop.start : stop.end]
    match stop.why:
        case ("DEPTH",):
            return FormulaDepthError(place, DEEPEST)
        case ("SIZE",):
            limit = f"numbers have up to {MOST_DIGITS} digits and exponents to {LARGEST_EXPONENT}"
            return SizeError(place, found, limit)
        case ("EXPONENT",):
            number, name = re.split("(?=[eE])", found)
            ways = (f"{number}*{name}", f"{number}e+{name[1:]}")
            return AmbiguousFormulaError(place, quoted(found), ways)
        case ("DIVISION",):
            first, second = map(plain, stop.ways)
            return AmbiguousFormulaError(place, "a division by adjoining factors", (first, second))
        case ("CHARACTER",) if found == "∞":
            return NotFiniteError(place, found)
    mistake, advice = _mistakes(vocabulary.signals)[stop.why]
    if stop.why == ("NAME", "OPEN") and vocabulary.signals:
        word = re.search(r"\w+(?=\s*$)", text[: stop.start])
        advice = (instead_of(word[0]) if word else None) or advice
    return FormulaSyntaxError(place, mistake, found, advice)


@cache
def _mistakes(signals: bool) -> dict[tuple[str, ...], tuple[str, str]]:  # noqa: FBT001  a cache takes no keyword
    """Return the table of mistakes by where reading stops in its inputs."""
    x, k, t = map(frozenset, "xkt")
    table = {}
    for rows, vocabulary in (
        (MISTAKES, Vocabulary(x)),
        (TIMED_MISTAKES if signals else (), Vocabulary(k | t, x, "t", signals=True)),
    ):
        for mistake, advice, inputs in rows:
            for text in inputs:
                _, stop = _parse(text, vocabulary)
                if isinstance(stop, _Stop):
                    table[stop.why] = (mistake, advice)
    return table


def _undeclared(token: Token, vocabulary: Vocabulary, place: Place) -> FormulaError:
    """Return the error for a name that a vocabulary does not know."""
    names = vocabulary.names | (vocabulary.functions or frozenset())
    name, _ = jet_of(spelled(token))
    if name.lower() in NOT_FINITE:
        return NotFiniteError(place, name)
    near = get_close_matches(name, sorted(names), n=1) or get_close_matches(
        name.lower(), sorted(names), n=1
    )
    return UndeclaredNameError(place, name, near[0] if near else None, tuple(sorted(names)))


def _start(token: Token) -> int:
    return token.start_pos or 0


def place_of(text: str, offset: int, place: Place) -> Place:
    """Return the place of one character of a text that starts at `place`."""
    above = text.count("\n", 0, offset)
    start = text.rfind("\n", 0, offset) + 1
    excerpt = text[start:].split("\n", 1)[0]
    line, column = 1 + above, 1 + offset - start
    if place.line is not None and place.column is not None:
        line += place.line - 1
        if above == 0:
            column += place.column - 1
            excerpt = place.excerpt or excerpt
    return Place(place.file, place.key, line, column, excerpt)
