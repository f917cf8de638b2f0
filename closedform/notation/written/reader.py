"""Reading LaTeX formulas as people write them in papers and reports."""

from __future__ import annotations

from closedform.errors import Place
from closedform.notation.reader import place_of
from closedform.notation.written.ambiguities import found_choices, reading_of
from closedform.notation.written.latex_lexer import lexed
from closedform.notation.written.latex_source import LatexSource
from closedform.notation.written.names import Names
from closedform.notation.written.passes import settled
from closedform.notation.written.shorthand import spelled_out
from closedform.notation.written.tree import Declared, Reading
from closedform.notation.written.written_errors import (
    StopError,
    UnexpectedPartError,
    WrittenLengthError,
)

__all__ = ["LONGEST", "read_latex"]

LONGEST = 30_000
"""Characters of one text."""

NOWHERE = Place()


def read_latex(text: str, declared: Declared, *, place: Place = NOWHERE) -> Reading:
    r"""Return the statements of a LaTeX formula, or of several in one display.

    `text` is what stands between the signs that begin and end mathematics; these may be
    there as well, and so may an environment of equations.  `place` says where the text comes
    from; if it has a line and a column they are those of the first character.

    Names.  A declared name always wins over a customary meaning, and is found however its
    subscript is set (k_{12}, k_12).  Undeclared e, i, j and \pi are the constants, I the unit
    matrix; u, H, 1, \theta, \sigma, \varepsilon before a bracket with the time are the unit
    step, \delta is the impulse.  A declared state or input before a bracket is called, a
    declared parameter is a factor.  Several italic letters are a product unless declared.

    Formulas.  Products without sign, functions without brackets, fractions in every form, roots,
    powers, all brackets and their sizes, dots, primes and d/dt, matrices and products of them,
    cases, integrals, sums, limits, Laplace transforms, determinants, steps.  An argument without
    brackets goes on to the next function, exponential, sum, slash or sign of multiplication.
    Behind a slash, names side by side without a gap are one denominator if none of them varies:
    c/2m is c/(2m) and 1/RC is 1/(RC), but 1/2t is t/2 and k/m x is (k/m) x.

    Numbers keep their printed digits: decimal points and commas, groups of thousands, powers of
    ten, \num and \qty.  A unit behind a number goes to the statement, which keeps the number as
    printed; degrees are multiplied by pi/180, a percentage is divided by 100.  A unit with a
    prefix beside the time, as in e^{-t/5\,\mathrm{ms}}, is refused.

    Several statements are parted by commas, semicolons, words, wide spaces and line ends;
    conditions and notes beside them are kept with them.  Where careful readers differ, the
    likelier reading is returned and the other one beside it, in `ambiguities` and `others`.

    Raises:  NotReadError, of the kinds in `written_errors`, for whatever is not known: nothing
             is guessed.  Its place is that of the part which cannot be read.

    >>> reading = read_latex(r"\dot x(0)=\sqrt{k},\ k=2", Declared(states=frozenset({"x"})))
    >>> [len(statement.members) for statement in reading.statements]
    [2, 2]
    >>> reading.statements[0].members[0].order, reading.statements[0].members[1]
    (1, Apply(function='sqrt', arguments=(Symbol(name='k', bold=False),)))
    """
    if len(text) > LONGEST:
        raise WrittenLengthError(place, len(text), LONGEST)
    try:
        names = Names(declared)
        source = LatexSource(text, spelled_out(lexed(text)), names)
        raw = source.sequence(0, len(source.raws))
        if not raw:
            raise StopError(UnexpectedPartError, 0, 0, "", "a formula")  # noqa: TRY301  to be placed below
        tokens = settled(raw, text, names, source.choices)
        choices = found_choices(tokens, names, source.choices, source.logs, text)
        return reading_of(tokens, choices, names, text)
    except StopError as error:
        raise error.placed(place_of(text, min(error.start, len(text)), place)) from None
