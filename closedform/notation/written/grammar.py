"""The grammar of what people write, over classed tokens; each notation has its own lexer.

A token is a `lark.Token` with a type, the offsets `start_pos` and `end_pos` in the text, and in
`value` what it stands for; `token` makes one.  The types, with their values:

==================  ================================================================
NUMBER              `Literal`
ATOM                any operand that is ready: `Symbol`, `Jet`, `Constant`, `Identity`
EULER               `EULER`; only before POWER: an exponential ends an argument
CALL                `Jet` with `at` the symbol of the time; brackets with the argument follow
FUNCTION            a word of `FUNCTIONS` or `MATRIX_FUNCTIONS`: also step, delta, det, diag
TRANSFORM           bool: back into time or not; brackets follow
PLUS MINUS          also as signs of an operand
PLUS_MINUS          ±
MINUS_PLUS          ∓
TIMES OVER          operators; side by side counts as TIMES
POWER               what follows is the exponent: a sign, an operand, a bracket, a group
POSTFIX             "factorial", "transpose", "inverse", "conj", "adjoint", "degree", "percent"
OPEN CLOSE          brackets that are seen; OPEN has "(", "[" or "{"
GROUP_OPEN          a bracket that is not seen: LaTeX braces, or one added to fix a reading
GROUP_CLOSE         its end
BAR_OPEN BAR_CLOSE  |..|: the absolute value, or a determinant
NORM_OPEN           the norm, and NORM_CLOSE
ARGUMENT_END        after the argument of a function without brackets: it ends here
FRACTION            two groups follow
ROOT                two groups follow, the degree and the radicand
MATRIX_OPEN         "", "det" or "norm": rows with COLUMN and ROW between, then MATRIX_CLOSE
CASES_OPEN          pieces: value COLUMN conditions, or value COLUMN OTHERWISE; ROW between
CASES_CLOSE         their end
OTHERWISE AND       words in the second column of cases; COMMA may stand for AND
SUM_OVER            a group `n = 0` and a group with the upper bound follow, then the body
LIMIT               a group `t → a` follows, then the body
DERIVATIVE          (variable, order, time), three values: d/dt before its body
INTEGRAL            the body follows, then DIFFERENTIAL
INTEGRAL_BOUNDS     two groups, lower and upper bound, the body, then DIFFERENTIAL
DIFFERENTIAL        the name of the variable
EVALUATED           the name of the time: a group `t = 0` follows; it stands behind its body
EVALUATED_BOTH      the same with a group for the upper bound behind the first
REL                 a sign of `RELATIONS`
COMMA               between the items of a bracket and the arguments of a function
==================  ================================================================

Where statements end, what is a unit, a condition or a note, is told apart before the grammar, in
`statements`: there are tokens of more types between and beside the statements (see there).
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from functools import cache
from importlib.resources import files
from typing import Any

from lark import Lark, Token
from lark.exceptions import UnexpectedToken
from lark.lexer import Lexer, LexerState

from closedform.notation.written.building import Building
from closedform.notation.written.building_parts import Part, RefusedError
from closedform.notation.written.tree import Written

__all__ = ["StoppedError", "token", "tree_of"]


def token(kind: str, value: object, start: int, end: int) -> Token:
    """Return a token of a type with its value, bounded by offsets into the text."""
    new = Token(kind, "", start_pos=start, end_pos=end)
    new.value = value
    return new


class StoppedError(Exception):
    """The tokens are no formula: where, `found` (None is the end), what could have followed.

    `why` is a sentence if the builder knows more than that no rule fits.
    """

    def __init__(self, found: Token | None, expected: frozenset[str], why: str = "") -> None:
        super().__init__(found, expected, why)
        self.found, self.expected, self.why = found, expected, why


class _Given(Lexer):
    """Hands on the tokens that there are."""

    def __init__(self, lexer_conf: object) -> None:
        self.conf = lexer_conf

    def lex(self, lexer_state: LexerState, parser_state: Any) -> Iterator[Token]:  # noqa: ARG002  Lark's
        """Yield nothing: the tokens are fed."""
        return iter(())


@cache
def _parser() -> Lark:
    grammar = files(__package__).joinpath("written.lark").read_text(encoding="utf-8")
    return Lark(grammar, start="statement", parser="lalr", lexer=_Given, transformer=Building())


def tree_of(tokens: Sequence[Token]) -> tuple[tuple[Written, ...], tuple[str, ...]]:
    """Return the members of one statement and the relations between them.

    Raises:  StoppedError if the tokens are no statement.
    """
    parser = _parser().parse_interactive("")
    last: Token | None = None
    try:
        for last in tokens:
            parser.feed_token(last)
        last = None
        part: Part = parser.feed_eof()  # type: ignore[no-untyped-call]  # Lark has no type for it
    except UnexpectedToken as error:
        found = None if error.token.type == "$END" else error.token
        raise StoppedError(found, frozenset(error.accepts or ())) from None
    except RefusedError as error:
        found = last if last is not None else (tokens[-1] if tokens else None)
        raise StoppedError(found, frozenset(), str(error)) from None
    return part.members, part.relations
